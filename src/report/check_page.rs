//! The terminal's page of a check: what the program understood, and where each number comes from.

use super::cautions::cautions_of_case;
use super::figures::{Figures, Units, nearest, significant};
use super::page::{Align, BOLD, Cell, DOUBT, Page, Table, styled};
use super::profile_text::phases_text;
use super::run_page::warning_line;
use crate::answers::{CheckAnswers, HeatingCheck, StationCheck};
use crate::case::{Case, Input, InputValue};
use crate::model::{HeatingModel, Station};

/// Keys whose temperatures are differences.
const DIFFERENCES: [&str; 5] = ["tolerance", "limits", "accuracy", "noise", "by"];
/// Keys whose temperatures may not be passed; "value" stands in a limit.
const BOUNDS: [&str; 4] = ["limit", "value", "melts", "decomposes"];
/// Where an input comes from, if not from a source.
const ORIGINS: [&str; 3] = ["case", "default", "set"];

/// The page, with its styles as escape codes.
pub fn check_page(case: &Case, answers: &CheckAnswers, units: Units) -> String {
    let mut page = Page::default();
    page.text(0, &format!("{}: accepted. {}", styled(BOLD, &case.path), case.model.title()));
    page.gap();
    page.text(0, &format!("{} {}", styled(BOLD, "phases:"), phases_text(&answers.phases)));
    for (station, model) in answers.stations.iter().zip(case.model.stations()) {
        page.text(0, &station_text(station, model, units));
    }
    page.gap();
    let sources = sources(case);
    page.table(0, &inputs_table(case, &sources, units));
    for (index, source) in sources.iter().enumerate() {
        page.text(0, &format!("[{}] {source}", index + 1));
    }
    page.gap();
    for notice in &case.notices {
        page.text(0, &warning_line(notice));
    }
    for caution in cautions_of_case(&case.model) {
        page.text(0, &format!("{} {}", styled(DOUBT, "!"), caution.short));
    }
    page.finish()
}

fn station_text(station: &StationCheck, model: &Station, units: Units) -> String {
    let heating = match &station.heating {
        Some(heating) => heating_text(heating, model, units),
        None => "not heated".to_owned(),
    };
    format!("{} {} nodes; {heating}", styled(BOLD, &format!("{}:", station.name)), station.nodes)
}

fn heating_text(heating: &HeatingCheck, model: &Station, units: Units) -> String {
    let figures = Figures::new(units, 0.0);
    let flux = |value: f64| format!("{} kW/m²", significant(value * 1e-3, 4));
    let log = model
        .heating
        .as_ref()
        .is_some_and(|heating| matches!(heating.model, HeatingModel::Log(_)));
    if let Some(followed) = model.followed() {
        let hottest = heating.gas_temperature.map_or_else(String::new, |value| figures.given(value));
        return format!(
            "follows the {} of {}, {hottest} at its hottest; wall at {}: {} into the wall then, conductance {} W/m²/K",
            followed.face().word(),
            followed.station(),
            figures.given(heating.wall),
            flux(heating.flux),
            significant(heating.coefficient.unwrap_or(0.0), 4),
        );
    }
    let case = if log {
        "heating log (level, ramp and tail do not act on it), first row"
    } else {
        "level 1"
    };
    let mut text = format!("at {case}, wall at {}: {} into the wall", figures.given(heating.wall), flux(heating.flux));
    if heating.parts.len() > 1 {
        let parts: Vec<String> = heating.parts.iter().map(|&(name, value)| format!("{name} {}", flux(value))).collect();
        text.push_str(&format!(" ({})", parts.join(", ")));
    }
    if let Some(coefficient) = heating.coefficient {
        text.push_str(&format!(", coefficient {} W/m²/K", significant(coefficient, 4)));
    }
    if let Some(gas) = heating.gas_temperature {
        text.push_str(&format!(", gas at {}", figures.given(gas)));
    }
    text
}

/// Sources of built-in values, each once: too long for a column.
fn sources(case: &Case) -> Vec<&str> {
    let mut sources: Vec<&str> = Vec::new();
    for input in &case.inputs {
        if !ORIGINS.contains(&input.from.as_str()) && !sources.contains(&input.from.as_str()) {
            sources.push(&input.from);
        }
    }
    sources
}

fn inputs_table(case: &Case, sources: &[&str], units: Units) -> Table {
    let mut table = Table::new(&[Align::Left, Align::Left, Align::Left]).keeping(0);
    table.row(["input", "value", "from"].map(|head| Cell::styled(BOLD, head)));
    for input in &case.inputs {
        let from = match sources.iter().position(|source| *source == input.from) {
            Some(index) => format!("[{}]", index + 1),
            None => input.from.clone(),
        };
        table.row([input.path.clone().into(), value_text(input, units).into(), from.into()]);
    }
    table
}

fn value_text(input: &Input, units: Units) -> String {
    match &input.value {
        InputValue::Number(value) => quantity(*value, &input.path, input.unit, units),
        InputValue::Word(word) => word.clone(),
        InputValue::Switch(true) => "true".to_owned(),
        InputValue::Switch(false) => "false".to_owned(),
        InputValue::Table(points) => table_text(points, input.unit, units),
    }
}

fn table_text(points: &[(f64, f64)], unit: &str, units: Units) -> String {
    let (Some(first), Some(last)) = (points.first(), points.last()) else {
        return "empty".to_owned();
    };
    let figures = Figures::new(units, 0.0);
    let values = if points.len() == 1 {
        nearest(first.1, 6)
    } else {
        format!("{} … {}", nearest(first.1, 6), nearest(last.1, 6))
    };
    let unit = if unit.is_empty() { String::new() } else { format!(" {unit}") };
    format!("{values}{unit} at {} … {}", figures.given(first.0), figures.given(last.0))
}

/// A value with its unit: temperatures and lengths in the units of the page, all others in SI.
fn quantity(value: f64, path: &str, unit: &str, units: Units) -> String {
    let key = path.rsplit('.').next().unwrap_or(path);
    match unit {
        "" => nearest(value, 6),
        "K" if DIFFERENCES.contains(&key) => match units {
            Units::Si => format!("{} K", nearest(value, 6)),
            Units::Us => format!("{} °F", nearest(value * 1.8, 6)),
        },
        "K" if BOUNDS.contains(&key) => Figures::new(units, 0.0).limit(value),
        "K" => Figures::new(units, 0.0).given(value),
        "m" => Figures::new(units, 0.0).length(value),
        _ => format!("{} {unit}", nearest(value, 6)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::page::WIDTH;
    use crate::report::sample::{self, plain};
    use textwrap::core::display_width;

    #[test]
    fn every_input_is_shown_with_where_it_comes_from() {
        let case = sample::case();
        let page = plain(&check_page(&case, &sample::check(), Units::Si));
        for input in &case.inputs {
            assert!(page.contains(&input.path), "no {}", input.path);
        }
        assert!(
            page.contains("20 °C") && page.contains("0.05 K") && page.contains("8 mm") && page.contains("101325 Pa"),
            "{page}"
        );
        assert!(page.contains("390 … 330 W/m/K at 20 °C … 1000 °C"), "{page}");
        assert!(page.contains("[1] handbook of an invented author"), "{page}");
        assert!(page.lines().all(|line| display_width(line) <= WIDTH), "{page}");
        assert!(page.contains("40 × (hold 4 s, burn 1 s)"));
        let page = page.split_whitespace().collect::<Vec<_>>().join(" ");
        assert!(
            page.contains("at level 1, wall at 20 °C: 10830 kW/m² into the wall, coefficient 4000 W/m²/K, gas at 2726.85 °C"),
            "{page}"
        );
    }

    #[test]
    fn us_units_show_fahrenheit_and_inches() {
        let page = plain(&check_page(&sample::case(), &sample::check(), Units::Us));
        assert!(page.contains("68 °F") && page.contains("0.09 °F") && page.contains("0.315 in"), "{page}");
    }
}
