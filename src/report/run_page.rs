//! The terminal's page of one run: verdict first, then what is hot, when, and how near to its limit.

use super::cautions::cautions_of_run;
use super::figures::{Figures, Units, clock, duration_down, percent, significant};
use super::findings::warnings_of_run;
use super::page::{Align, BAD, BOLD, Cell, DOUBT, GOOD, Page, Table, styled};
use super::places::{find, places};
use super::result::{limit_kind_word, limit_origin_word};
use crate::answers::{EvenedOut, LimitAnswer, PlaceAnswer, RunAnswers, StationAnswers, Steady, SteadyState, Verdict, WaitAnswer, WaitState};
use crate::case::Case;
use crate::diagnostics::Notice;
use crate::model::{HeatingModel, LimitOrigin, PhaseKind, Seconds, Station};

/// More warnings than this are counted, not listed.
const LISTED_WARNINGS: usize = 3;

/// Cautions that the page has said by then: with the margin, and under the waits.
const SAID_ABOVE: [&str; 2] = ["no-allowance", "measure-before-touch"];

/// Warnings about a test's log, which stand with its table.
const LOG_NOTICES: [&str; 3] = ["readings-before-start", "readings-after-end", "readings-missing"];

/// The page, with its styles as escape codes.
pub fn run_page(case: &Case, answers: &RunAnswers, units: Units) -> String {
    let mut page = Page::default();
    verdict(&mut page, case, answers, units);
    page.text(0, &format!("{}: {}", case.path, case.model.title()));
    for (station, model) in answers.stations.iter().zip(case.model.stations()) {
        page.gap();
        station_part(&mut page, answers, station, model, units);
    }
    log_part(&mut page, case, answers, units);
    page.gap();
    waits_part(&mut page, answers, units);
    notices_part(&mut page, case, answers, units);
    page.finish()
}

fn verdict(page: &mut Page, case: &Case, answers: &RunAnswers, units: Units) {
    let (style, word, meaning) = match answers.verdict {
        Verdict::OutsideModel => (
            BAD,
            "OUTSIDE THE MODEL",
            "a melting point is passed; no number after that describes the wall",
        ),
        Verdict::OverLimit => (BAD, "OVER A LIMIT", "at least one limit is not kept"),
        Verdict::InsideAllowance => (DOUBT, "INSIDE THE ALLOWANCE", "every limit is kept, but not with the allowance taken"),
        Verdict::NoLimits => (DOUBT, "NO LIMITS", "nothing here has a limit, so nothing was judged"),
        Verdict::WithinLimits => (GOOD, "WITHIN LIMITS", "every limit of this case is kept, in this model"),
    };
    page.text(0, &format!("{}: {meaning}.", styled(style, word)));
    if let Some(worst) = &answers.worst {
        let found = find(answers, &worst.station, &worst.place);
        let error = found.map_or(0.0, |(station, _)| station.numerical.estimated_error);
        let margin = Figures::new(units, error).margin(worst.margin);
        let whose = match found.and_then(|(_, place)| place.limit.as_ref()) {
            Some(limit) if limit.origin == LimitOrigin::Library => ", against a library limit: no design margin",
            Some(_) => ", against the case's limit",
            None => "",
        };
        let allowance = if case.model.allowance().given() { "" } else { " (no allowance taken)" };
        let text = format!("Smallest margin {margin}{allowance}: {} of {}{whose}.", worst.place, worst.station);
        page.text(0, &text);
    }
    let allowance = case.model.allowance();
    if allowance.given() && answers.worst.is_some() {
        let limits = Figures::new(units, 0.0).estimate(allowance.limits);
        let text = format!(
            "Allowance in every margin: {limits} off the limits. The verdict also needs the limits kept with the heating × {}.",
            allowance.heating
        );
        page.text(0, &text);
    }
    if !answers.without_limit.is_empty() && answers.verdict != Verdict::NoLimits {
        page.text(0, &format!("Without a limit, so not judged: {}.", answers.without_limit.join(", ")));
    }
}

fn station_part(page: &mut Page, answers: &RunAnswers, station: &StationAnswers, model: &Station, units: Units) {
    let figures = Figures::new(units, station.numerical.estimated_error);
    page.text(
        0,
        &format!(
            "{}  {}, {} kg/m²",
            styled(BOLD, &station.name),
            figures.length(station.thickness),
            significant(station.mass, 3)
        ),
    );
    page.table(2, &peaks_table(answers, station, figures));
    page.text(2, &after_burn(answers, station, figures));
    if let Some(text) = steady(answers, station, model, figures) {
        page.text(2, &text);
    }
    let megajoules = |joules: f64| significant(joules * 1e-6, 3);
    page.text(
        2,
        &format!(
            "heat to clock {}: in {}, out {}, stored {} MJ/m²; the books close to {}",
            clock(answers.computed_until),
            megajoules(station.energy.inward),
            megajoules(station.energy.outward),
            megajoules(station.energy.stored),
            significant(station.energy.imbalance, 1),
        ),
    );
    page.text(
        2,
        &format!(
            "numerical error about {}, from a second solution on the half grid ({} nodes, {} steps)",
            figures.estimate(station.numerical.estimated_error),
            station.numerical.nodes,
            station.numerical.steps
        ),
    );
}

fn peaks_table(answers: &RunAnswers, station: &StationAnswers, figures: Figures) -> Table {
    let mut table = Table::new(&[
        Align::Left,
        Align::Right,
        Align::Left,
        Align::Right,
        Align::Left,
        Align::Right,
        Align::Left,
    ]);
    table.row(["place", "peak", "when (clock)", "limit", "whose", "margin", "kept"].map(|head| Cell::styled(BOLD, head)));
    for (name, place) in places(station) {
        let (limit, whose, margin, kept) = match &place.limit {
            None => ("none".into(), Cell::from(""), "".into(), Cell::from("")),
            Some(limit) => (
                figures.limit(limit.limit),
                Cell::from(whose(limit)),
                figures.margin(limit.margin),
                kept(limit),
            ),
        };
        table.row([
            name.into(),
            figures.peak(place.peak).into(),
            when(answers, place.peak_time, Some(place)).into(),
            Cell::from(limit),
            whose,
            Cell::from(margin),
            kept,
        ]);
    }
    for probe in &station.probes {
        let reading = figures.peak(probe.peak);
        let wall = figures.peak(probe.peak_true);
        let wall = if wall == reading { String::new() } else { format!("wall {wall}") };
        table.row([
            format!("{} reads", probe.name).into(),
            reading.into(),
            when(answers, probe.peak_time, None).into(),
            "".into(),
            format!("at {}", figures.length(probe.depth)).into(),
            "".into(),
            wall.into(),
        ]);
    }
    table
}

fn whose(limit: &LimitAnswer) -> String {
    format!("{}, {}", limit_origin_word(limit.origin), limit_kind_word(limit.kind))
}

fn kept(limit: &LimitAnswer) -> Cell {
    match (limit.kept, limit.first_over) {
        (true, None) if limit.margin < 0.0 => Cell::styled(DOUBT, "inside allowance"),
        (true, None) => Cell::styled(GOOD, "yes"),
        (true, Some(_)) => Cell::styled(DOUBT, format!("yes, {} over", clock(limit.time_over))),
        (false, Some(first)) => Cell::styled(BAD, format!("NO at {}", clock(first))),
        (false, None) => Cell::styled(BAD, "NO"),
    }
}

/// The clock, and whether that is after the last burn or between burns.
fn when(answers: &RunAnswers, time: Seconds, place: Option<&PlaceAnswer>) -> String {
    match answers.last_burn_end {
        Some(end) if time > end * (1.0 + 1e-9) => format!("{}, after burn", clock(time)),
        Some(_) if place.is_some_and(|place| place.peak_phase == PhaseKind::Hold) => format!("{}, in a hold", clock(time)),
        _ => clock(time),
    }
}

/// Soak-back and evening out.
fn after_burn(answers: &RunAnswers, station: &StationAnswers, figures: Figures) -> String {
    let soak = &station.soak_back;
    let mut text = match answers.last_burn_end {
        None => "no burn".to_owned(),
        Some(_) if soak.outer_face_rise > 0.0 => format!(
            "soak-back: outer face up {} after the burn, until clock {}",
            figures.rise(soak.outer_face_rise),
            clock(soak.outer_face_peak)
        ),
        Some(_) => "soak-back: the outer face only cools after the burn".to_owned(),
    };
    if let Some((time, depth)) = soak.last_peak
        && time != soak.outer_face_peak
    {
        text.push_str(&format!("; last point to peak: at clock {}, {} deep", clock(time), figures.length(depth)));
    }
    text.push_str(&match station.evened_out {
        EvenedOut::From(time) => format!("; even within {} from {} on", figures.one_kelvin(), clock(time)),
        EvenedOut::Never => format!("; never even within {}: its surroundings keep it uneven", figures.one_kelvin()),
        EvenedOut::Beyond => format!("; not even within {} in 100 h", figures.one_kelvin()),
    });
    text
}

fn steady(answers: &RunAnswers, station: &StationAnswers, model: &Station, figures: Figures) -> Option<String> {
    answers.last_burn_end?;
    Some(match &station.steady {
        Steady::At(state) => steady_text(answers, station, state, figures),
        Steady::None => match model.heating.as_ref().map(|heating| &heating.model) {
            Some(HeatingModel::Log(_)) => "steady state: none looked for, the heating is a log".to_owned(),
            Some(HeatingModel::Wall(_)) => "steady state: none looked for, the hot end follows another wall".to_owned(),
            _ => "steady state: none, nothing in this model balances the heat of an endless burn".to_owned(),
        },
    })
}

fn steady_text(answers: &RunAnswers, station: &StationAnswers, state: &SteadyState, figures: Figures) -> String {
    let face = |temperature, reached: Option<f64>| match reached {
        Some(share) => format!("{} ({} there at its end)", figures.peak(temperature), percent(share)),
        None => format!("{} (where it started)", figures.peak(temperature)),
    };
    let mut text = format!(
        "if the last burn never ended: hot face {}, outer face {}",
        face(state.hot_face, state.hot_face_reached),
        face(state.outer_face, state.outer_face_reached)
    );
    text.push_str(&match state.time_to_95_percent {
        Some(time) => format!(", 95 % after {}; ", duration_down(time)),
        None => ", 95 % only after more than 100 h; ".to_owned(),
    });
    let limited = places(station).iter().any(|(_, place)| place.limit.is_some());
    text.push_str(match (limited && answers.verdict != Verdict::NoLimits, state.within_limits) {
        (false, _) => "nothing has a limit",
        (true, false) => "that would pass a limit",
        (true, true) => "no thermal limit found in this model on the way there or in the soak-back from it",
    });
    text
}

/// A test's readings beside the run.
fn log_part(page: &mut Page, case: &Case, answers: &RunAnswers, units: Units) {
    let any = answers.stations.iter().any(|station| station.log.is_some());
    if !any {
        return;
    }
    page.gap();
    let title = styled(BOLD, "log beside the run");
    page.text(0, &format!("{title}  differences are run − log: above 0, the run is the hotter one"));
    let mut table = Table::new(&[
        Align::Left,
        Align::Right,
        Align::Left,
        Align::Right,
        Align::Left,
        Align::Right,
        Align::Right,
        Align::Right,
    ]);
    table.row(
        [
            "probe",
            "largest",
            "when (clock)",
            "at the end",
            "end (clock)",
            "rms",
            "noise",
            "readings",
        ]
        .map(|head| Cell::styled(BOLD, head)),
    );
    for station in &answers.stations {
        let figures = Figures::new(units, station.numerical.estimated_error);
        for row in station.log.iter().flatten() {
            let (Some(largest), Some(end), Some(square)) = (row.largest, row.end, row.root_mean_square) else {
                table.row([Cell::from(format!("{}/{}", station.name, row.probe)), Cell::from("none")]);
                continue;
            };
            table.row([
                Cell::from(format!("{}/{}", station.name, row.probe)),
                Cell::from(figures.off(largest.difference())),
                Cell::from(clock(largest.time)),
                Cell::from(figures.off(end.difference())),
                Cell::from(clock(end.time)),
                Cell::from(figures.rise(square)),
                Cell::from(figures.estimate(row.noise)),
                Cell::from(row.count.to_string()),
            ]);
        }
    }
    page.table(2, &table);
    for notice in case.notices.iter().filter(|notice| LOG_NOTICES.contains(&notice.code)) {
        page.text(2, &warning_line(notice));
    }
}

fn waits_part(page: &mut Page, answers: &RunAnswers, units: Units) {
    let several = answers.stations.len() > 1;
    let from = if answers.last_burn_end.is_some() {
        "the end of the last burn"
    } else {
        "the start"
    };
    let mut any = false;
    for station in &answers.stations {
        let figures = Figures::new(units, station.numerical.estimated_error);
        for wait in &station.waits {
            if !any {
                page.text(0, &styled(BOLD, &format!("waits from {from}")));
                any = true;
            }
            let place = if several {
                format!("{}, {}", wait.place, station.name)
            } else {
                wait.place.clone()
            };
            page.text(2, &format!("{} ({place}): {}", wait.name, wait_text(wait, answers, figures)));
        }
    }
    if any {
        page.text(2, "measure before touching; temperature is one of several conditions for entry.");
    }
}

fn wait_text(wait: &WaitAnswer, answers: &RunAnswers, figures: Figures) -> String {
    let below = match &wait.meaning {
        Some(meaning) => format!("below {} ({meaning})", figures.given(wait.below)),
        None => format!("below {}", figures.given(wait.below)),
    };
    let start = if answers.last_burn_end.is_some() {
        "the end of the last burn"
    } else {
        "the start"
    };
    match wait.state {
        WaitState::Cools { wait, slope, .. } => {
            let each = if slope.is_finite() && slope > 0.0 {
                format!(" {};", figures.slope(slope))
            } else {
                String::new()
            };
            format!("{below} from {} on, in this model and weather;{each}", figures.wait(wait, slope))
        }
        WaitState::StaysBelow { .. } => format!("{below} from {start} on, in this model and weather;"),
        WaitState::Never => format!("NEVER {below}, in this model and weather: what surrounds it keeps it hotter;"),
        WaitState::Beyond => format!("not decided within 100 h: {below}, in this model and weather;"),
    }
}

fn notices_part(page: &mut Page, case: &Case, answers: &RunAnswers, units: Units) {
    let found = warnings_of_run(answers, units);
    let noticed = case.notices.iter().filter(|notice| !LOG_NOTICES.contains(&notice.code));
    let warnings: Vec<&Notice> = found.iter().chain(noticed).collect();
    for notice in warnings.iter().take(LISTED_WARNINGS) {
        page.text(0, &warning_line(notice));
    }
    if warnings.len() > LISTED_WARNINGS {
        let more = warnings.len() - LISTED_WARNINGS;
        page.text(0, &format!("{} {more} more: --json has them all", styled(DOUBT, "warning")));
    }
    for caution in cautions_of_run(&case.model, answers, units) {
        if SAID_ABOVE.contains(&caution.code) {
            continue;
        }
        page.text(0, &format!("{} {}", styled(DOUBT, "!"), caution.short));
    }
}

/// One warning, with where it belongs.
pub(super) fn warning_line(notice: &Notice) -> String {
    let place: Vec<&str> = notice.station.iter().chain(&notice.place).map(String::as_str).collect();
    let place = if place.is_empty() {
        String::new()
    } else {
        format!(" {}:", place.join("/"))
    };
    format!("{}{place} {} [{}]", styled(DOUBT, "warning"), notice.text, notice.code)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::page::WIDTH;
    use crate::report::sample::{self, plain};
    use textwrap::core::display_width;

    fn page(answers: &RunAnswers, units: Units) -> String {
        plain(&run_page(&sample::case(), answers, units))
    }

    fn flowed(page: &str) -> String {
        page.split_whitespace().collect::<Vec<_>>().join(" ")
    }

    #[test]
    fn a_usual_case_fits_a_screen() {
        for units in [Units::Si, Units::Us] {
            let page = page(&sample::answers(), units);
            assert!(page.lines().all(|line| display_width(line) <= WIDTH), "{page}");
            assert!(page.lines().count() <= 40, "{} lines\n{page}", page.lines().count());
        }
    }

    #[test]
    fn the_verdict_stands_first_with_whose_margin_it_is() {
        let mut answers = sample::answers();
        let first = flowed(&page(&answers, Units::Si));
        assert!(
            first.starts_with(
                "WITHIN LIMITS: every limit of this case is kept, in this model. Smallest margin 12.7 K (no allowance taken): outer-face of throat, against the case's limit."
            ),
            "{first}"
        );
        answers.worst = Some(crate::answers::Worst {
            station: "throat".into(),
            place: "liner".into(),
            margin: 287.56,
        });
        assert!(
            flowed(&page(&answers, Units::Si)).contains("287.5 K (no allowance taken): liner of throat, against a library limit: no design margin.")
        );
        answers.verdict = Verdict::OverLimit;
        assert!(page(&answers, Units::Si).starts_with("OVER A LIMIT"));
        answers.verdict = Verdict::NoLimits;
        answers.worst = None;
        assert!(page(&answers, Units::Si).starts_with("NO LIMITS"));
    }

    #[test]
    fn peaks_say_when_and_against_which_limit() {
        let page = page(&sample::answers(), Units::Si);
        let row = |name: &str| {
            let line = page
                .lines()
                .find(|line| line.trim_start().starts_with(name))
                .unwrap_or_else(|| panic!("no {name}"));
            flowed(line)
        };
        assert_eq!(row("hot-face"), "hot-face 1243.2 °C 2 s none");
        assert_eq!(
            row("liner|jacket"),
            "liner|jacket 226.0 °C 12.3 s, after burn 250 °C case, bond 24.0 K yes"
        );
        assert_eq!(
            row("outer-face"),
            "outer-face 187.3 °C 41.4 s, after burn 200 °C case, service 12.7 K yes"
        );
        assert_eq!(row("TC1"), "TC1 reads 286.9 °C 2.4 s, after burn at 4 mm wall 291.9 °C");
    }

    #[test]
    fn a_broken_limit_says_from_when() {
        let mut answers = sample::answers();
        answers.verdict = Verdict::OverLimit;
        let limit = answers.stations[0].outer_face.limit.as_mut().expect("a limit");
        limit.kept = false;
        limit.margin = -12.71;
        limit.first_over = Some(30.21);
        let page = page(&answers, Units::Si);
        assert!(page.contains("-12.8 K  NO at 30.3 s"), "{page}");
    }

    #[test]
    fn waits_read_as_the_contract_words_them() {
        let mut answers = sample::answers();
        let text = flowed(&page(&answers, Units::Si));
        assert!(
            text.contains("below 48 °C (bare skin up to 10 min) from 1 h 28 min 40 s on, in this model and weather;"),
            "{text}"
        );
        assert!(text.contains("measure before touching; temperature is one of several conditions for entry."));
        assert!(text.contains("next firing (everywhere): below 40 °C from 2 h 35 min 30 s on"), "{text}");
        answers.stations[0].waits[0].state = WaitState::Never;
        answers.stations[0].waits[1].state = WaitState::Beyond;
        let text = flowed(&page(&answers, Units::Si));
        assert!(
            text.contains("NEVER below 48 °C") && text.contains("not decided within 100 h: below 40 °C"),
            "{text}"
        );
        answers.stations[0].waits[0].state = WaitState::StaysBelow { clock: 2.0 };
        let text = flowed(&page(&answers, Units::Si));
        assert!(
            text.contains("below 48 °C (bare skin up to 10 min) from the end of the last burn on, in this model"),
            "{text}"
        );
    }

    #[test]
    fn a_steady_state_says_whether_it_keeps_the_limits() {
        let mut answers = sample::answers();
        let text = flowed(&page(&answers, Units::Si));
        assert!(text.contains("hot face 2226.9 °C (50 % there at its end)"), "{text}");
        assert!(text.contains("95 % after 6 min 52 s; that would pass a limit"), "{text}");
        if let Steady::At(state) = &mut answers.stations[0].steady {
            state.within_limits = true;
        }
        assert!(flowed(&page(&answers, Units::Si)).contains("no thermal limit found in this model"));
        answers.stations[0].steady = Steady::None;
        assert!(flowed(&page(&answers, Units::Si)).contains("nothing in this model balances the heat"));
    }

    #[test]
    fn nothing_is_promised() {
        let mut answers = sample::answers();
        for verdict in [
            Verdict::OutsideModel,
            Verdict::OverLimit,
            Verdict::InsideAllowance,
            Verdict::NoLimits,
            Verdict::WithinLimits,
        ] {
            answers.verdict = verdict;
            let page = page(&answers, Units::Si);
            for forbidden in sample::FORBIDDEN {
                assert!(!sample::says(&page, forbidden), "{forbidden}: {page}");
            }
        }
    }

    #[test]
    fn an_allowance_is_named() {
        let mut case = sample::case();
        case.model.allowance =
            crate::model::Allowance::new(uom::si::f64::TemperatureInterval::new::<uom::si::temperature_interval::kelvin>(50.0), 1.2)
                .expect("an allowance");
        let text = flowed(&plain(&run_page(&case, &sample::answers(), Units::Si)));
        assert!(
            text.contains("Allowance in every margin: 50 K off the limits.") && text.contains("the heating × 1.2"),
            "{text}"
        );
        assert!(!text.contains("no allowance taken"), "{text}");
    }

    #[test]
    fn warnings_name_their_place_and_are_counted_beyond_a_few() {
        let mut case = sample::case();
        case.notices = vec![case.notices[0].clone(); 9];
        let page = plain(&run_page(&case, &sample::answers(), Units::Si));
        assert!(page.contains("warning throat: an odd value [odd-value]"));
        assert!(page.contains("warning 6 more: --json has them all"));
    }
}
