//! The terminal's pages of built-in materials: all of them in a table, or one with everything its card says.

use super::curve::curve;
use super::figures::{Figures, Units, nearest};
use super::materials::CAUTIONS;
use super::page::{Align, BAD, BOLD, Cell, DOUBT, GOOD, Page, Table as Rows, styled};
use super::result::limit_kind_word;
use crate::case::{Confidence, MaterialCard, Said};
use crate::model::{Kelvin, Table};
use std::fmt::Write;

/// At which temperature the table shows properties, K.
const ROOM: Kelvin = 293.15;
/// A table that begins this much above it does not know it, K.
const NEAR_ROOM: Kelvin = 20.0;

/// What is measured in different units on different pages.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Property {
    Density,
    HeatCapacity,
    Conductivity,
    Emissivity,
}

impl Property {
    /// The unit on a page, and how much of SI one of it is.
    const fn unit(self, units: Units) -> (&'static str, f64) {
        match (self, units) {
            (Self::Density, Units::Si) => ("kg/m³", 1.0),
            // NIST SP 811 (2008), Appendix B.8, as the units below.
            (Self::Density, Units::Us) => ("lb/ft³", 0.453_592_37 / (0.3048 * 0.3048 * 0.3048)),
            (Self::HeatCapacity, Units::Si) => ("J/kg/K", 1.0),
            (Self::HeatCapacity, Units::Us) => ("Btu/lb/°F", 4186.8),
            (Self::Conductivity, Units::Si) => ("W/m/K", 1.0),
            (Self::Conductivity, Units::Us) => ("Btu/h/ft/°F", 1_055.055_852_62 * 1.8 / (3600.0 * 0.3048)),
            (Self::Emissivity, _) => ("", 1.0),
        }
    }

    /// A value without its unit, to three figures or to the unit.
    fn number(self, value: f64, units: Units) -> String {
        nearest(value / self.unit(units).1, 3)
    }
}

/// The table of these cards; `all` is how many are built in.
pub fn materials_page(cards: &[MaterialCard], all: usize, units: Units) -> String {
    let mut page = Page::default();
    let figures = Figures::new(units, 0.0);
    let mut rows = Rows::new(&[
        Align::Left,
        Align::Right,
        Align::Right,
        Align::Right,
        Align::Right,
        Align::Right,
        Align::Right,
        Align::Left,
    ])
    .keeping(0);
    rows.row(
        [
            "material",
            "density",
            "conduct.",
            "heat cap.",
            "emissivity",
            "limit",
            "melts",
            "confidence",
        ]
        .map(|head| Cell::styled(BOLD, head)),
    );
    let degrees = match units {
        Units::Si => "°C",
        Units::Us => "°F",
    };
    let unit = |property: Property| Cell::from(property.unit(units).0);
    rows.row([
        "".into(),
        unit(Property::Density),
        unit(Property::Conductivity),
        unit(Property::HeatCapacity),
        "bare/oxid.".into(),
        degrees.into(),
        degrees.into(),
        "".into(),
    ]);
    let bare_number = |text: String| text.split(' ').next().unwrap_or_default().to_owned();
    let (mut hotter, mut decomposing) = (false, false);
    for card in cards {
        let mut at_room = |property: Property, table: &Table| {
            let late = table.range().is_some_and(|range| range.0 > ROOM + NEAR_ROOM);
            hotter |= late;
            format!("{}{}", property.number(table.value(ROOM), units), if late { "*" } else { "" })
        };
        let end = match (card.melts, card.decomposes) {
            (Some(melts), _) => bare_number(figures.limit(melts)),
            (None, Some(decomposes)) => {
                decomposing = true;
                format!("{}†", bare_number(figures.limit(decomposes)))
            }
            (None, None) => String::new(),
        };
        rows.row([
            card.name.into(),
            Property::Density.number(card.density, units).into(),
            at_room(Property::Conductivity, &card.conductivity).into(),
            at_room(Property::HeatCapacity, &card.heat_capacity).into(),
            format!("{}/{}", nearest(card.bare.value(ROOM), 2), nearest(card.oxidised.value(ROOM), 2)).into(),
            card.limit
                .map(|(kelvin, _)| bare_number(figures.limit(kelvin)))
                .unwrap_or_default()
                .into(),
            end.into(),
            confidence(card.confidence()),
        ]);
    }
    page.table(0, &rows);
    page.gap();
    page.text(
        0,
        &format!("{} of {all} built-in materials; properties at {}.", cards.len(), figures.given(ROOM)),
    );
    if hotter {
        page.text(0, "* the table begins hotter: its first value, which is held below.");
    }
    if decomposing {
        page.text(0, "† decomposes there.");
    }
    page.text(
        0,
        "confidence: the lowest of density, heat capacity and conductivity; emissivities are seldom better than low.",
    );
    page.text(0, "soakdown materials NAME shows one with its ranges, sources and notes.");
    cautions(&mut page);
    page.finish()
}

/// The page of one card.
pub fn material_page(card: &MaterialCard, units: Units) -> String {
    let mut page = Page::default();
    let figures = Figures::new(units, 0.0);
    page.text(0, &format!("{}: {}", styled(BOLD, card.name), card.title));
    for said in &card.said {
        page.gap();
        page.text(
            0,
            &format!("{}: {}", styled(BOLD, &said.property.replace('_', " ")), value(card, said, units)),
        );
        page.text(2, &format!("confidence {}; source: {}", said.confidence.word(), said.source));
        if let Some(note) = &said.note {
            page.text(2, &format!("note: {note}"));
        }
        let drawn = match said.property {
            "heat_capacity" => Some((Property::HeatCapacity, &card.heat_capacity)),
            "conductivity" => Some((Property::Conductivity, &card.conductivity)),
            _ => None,
        };
        if let Some((property, table)) = drawn
            && let Some(range) = table.range()
        {
            page.text(2, &format!("points: {}", points(property, table, units)));
            drawing(&mut page, property, table, range, units);
        }
    }
    page.gap();
    if let Some(range) = card.conductivity.range().or(card.heat_capacity.range()) {
        page.text(
            0,
            &format!(
                "Straight lines between the points; outside, the first or last value is held, and a run that leaves a table by more than {} says so \
                 (conductivity: {} to {}).",
                figures.rise(20.0),
                figures.near(range.0),
                figures.near(range.1)
            ),
        );
    }
    cautions(&mut page);
    page.finish()
}

fn cautions(page: &mut Page) {
    for (_, text) in CAUTIONS {
        page.text(0, &format!("{} {text}", styled(DOUBT, "!")));
    }
}

fn confidence(confidence: Confidence) -> Cell {
    let style = match confidence {
        Confidence::High => GOOD,
        Confidence::Medium => anstyle::Style::new(),
        Confidence::Low => BAD,
    };
    Cell::styled(style, confidence.word())
}

/// A value with its unit and, where it is a table, its range.
fn value(card: &MaterialCard, said: &Said, units: Units) -> String {
    let figures = Figures::new(units, 0.0);
    let limit = |kelvin: Option<Kelvin>| kelvin.map(|kelvin| figures.limit(kelvin)).unwrap_or_default();
    match said.property {
        "density" => format!(
            "{} {}",
            nearest(card.density / Property::Density.unit(units).1, 4),
            Property::Density.unit(units).0
        ),
        "heat_capacity" => range(Property::HeatCapacity, &card.heat_capacity, units),
        "conductivity" => range(Property::Conductivity, &card.conductivity, units),
        "emissivity" => format!(
            "bare {}; oxidised {}; a layer takes the lower unless its surface says otherwise",
            range(Property::Emissivity, &card.bare, units),
            range(Property::Emissivity, &card.oxidised, units)
        ),
        "limit" => {
            let kind = card.limit.map(|(_, kind)| limit_kind_word(kind)).unwrap_or_default();
            format!("{} ({kind})", limit(card.limit.map(|(kelvin, _)| kelvin)))
        }
        "melts" => limit(card.melts),
        "decomposes" => limit(card.decomposes),
        _ => String::new(),
    }
}

fn range(property: Property, table: &Table, units: Units) -> String {
    let figures = Figures::new(units, 0.0);
    let unit = property.unit(units).0;
    let number = |value: f64| property.number(value, units);
    let values = match table.range() {
        None => format!("{} {unit}", number(table.value(ROOM))),
        Some((from, to)) => format!(
            "{} to {} {unit}, at {} to {}",
            number(table.smallest()),
            number(table.largest()),
            figures.near(from),
            figures.near(to)
        ),
    };
    values.replace(" ,", ",").trim_end().to_owned()
}

fn points(property: Property, table: &Table, units: Units) -> String {
    let figures = Figures::new(units, 0.0);
    let mut text = String::new();
    for (index, (kelvin, value)) in table.points().iter().enumerate() {
        let before = if index == 0 { "" } else { "; " };
        // Writing into a text can't fail.
        let _ = write!(text, "{before}{}: {}", figures.near(*kelvin), property.number(*value, units));
    }
    text
}

fn drawing(page: &mut Page, property: Property, table: &Table, (from, to): (Kelvin, Kelvin), units: Units) {
    const LABEL: usize = 20;
    let figures = Figures::new(units, 0.0);
    let top = table.largest();
    let lines = curve(table, (from, to), top);
    let last = lines.len().saturating_sub(1);
    let width = lines.first().map_or(0, |line| line.chars().count());
    for (index, line) in lines.iter().enumerate() {
        let label = match index {
            0 => format!("{} {}", property.number(top, units), property.unit(units).0),
            index if index == last => "0".to_owned(),
            _ => String::new(),
        };
        page.line(0, &format!("{label:>LABEL$} │{line}"));
    }
    let (left, right) = (figures.near(from), figures.near(to));
    let between = width.saturating_sub(left.chars().count());
    page.line(0, &format!("{:LABEL$}  {left}{right:>between$}", ""));
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::case::{material_card, material_cards};
    use crate::report::page::WIDTH;
    use crate::report::sample::plain;
    use crate::units::{Kind, read};
    use textwrap::core::display_width;

    #[test]
    fn us_units_are_those_of_the_case_file() {
        for (property, kind, unit) in [
            (Property::Density, Kind::Density, "1 lb/ft3"),
            (Property::HeatCapacity, Kind::HeatCapacity, "1 Btu/lb/degF"),
            (Property::Conductivity, Kind::Conductivity, "1 Btu/h/ft/degF"),
        ] {
            let expected = read(unit, kind).expect("a unit");
            assert!((property.unit(Units::Us).1 / expected - 1.0).abs() < 1e-9, "{property:?}");
        }
    }

    #[test]
    fn pages_fit_the_screen_and_show_every_value() {
        let cards = material_cards().expect("cards");
        for units in [Units::Si, Units::Us] {
            let page = plain(&materials_page(&cards, cards.len(), units));
            assert!(page.lines().all(|line| display_width(line) <= WIDTH), "{page}");
            for card in &cards {
                assert!(page.lines().any(|line| line.starts_with(card.name)), "no {}", card.name);
                let page = plain(&material_page(card, units));
                assert!(page.lines().all(|line| display_width(line) <= WIDTH), "{page}");
                let words = page.split_whitespace().collect::<Vec<_>>().join(" ");
                for said in &card.said {
                    assert!(words.contains(&format!("{}:", said.property.replace('_', " "))), "{words}");
                    assert!(words.contains(&said.source.split_whitespace().collect::<Vec<_>>().join(" ")), "{words}");
                }
            }
        }
        let copper = plain(&material_page(&material_card("copper").expect("copper"), Units::Si));
        assert!(copper.contains("│"), "{copper}");
    }
}
