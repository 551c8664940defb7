//! The log of a test: readings of probes, to be put beside a run.

use super::checked::{Case, CaseFile, LogColumn, LogFormat};
use super::csv_table::{CsvRow, CsvTable};
use super::digest;
use super::findings::Findings;
use super::lower::quantities::{difference, temperature, time};
use super::suggest;
use crate::diagnostics::{Diagnostic, Diagnostics};
use crate::model::{Kelvin, Readings, Seconds};
use crate::units::{self, Kind};
use std::path::Path;

/// Readings later than this are not compared: a run goes on for 100 h at most.
const LATEST: Seconds = 360_000.0;
/// What loggers write where there is no reading.
const NO_READING: [&str; 5] = ["", "nan", "n/a", "na", "-"];

/// Reads the log of a test as the case's \[fit\] says; the file's digest and what is left out of the comparison go to the case.
///
/// # Errors
/// With every mistake in the log, at its line; or when the case doesn't say how to read it.
pub fn read_log(case: &mut Case, path: &Path) -> Result<Vec<Readings>, Diagnostics> {
    let mut findings = Findings::default();
    let readings = read(case, path, &mut findings);
    findings.sort();
    let Some(readings) = readings.filter(|_| !findings.diagnostics.has_errors()) else {
        return Err(findings.diagnostics);
    };
    case.notices
        .retain(|notice| !(notice.code == "section-unused" && notice.text.starts_with("[fit]")));
    case.notices.append(&mut findings.notices);
    Ok(readings)
}

fn read(case: &mut Case, path: &Path, findings: &mut Findings) -> Option<Vec<Readings>> {
    let name = path.display().to_string();
    let bytes = match std::fs::read(path) {
        Ok(bytes) => bytes,
        Err(error) => {
            findings.nowhere(Diagnostic::error("cannot-read", format!("can't read the log {name}: {error}")));
            return None;
        }
    };
    let file = CaseFile {
        path: name.clone(),
        digest: digest::of(&[&bytes]),
    };
    let Ok(text) = String::from_utf8(bytes) else {
        findings.nowhere(Diagnostic::error(
            "not-text",
            format!("the log {name} is no UTF-8 text: a CSV file is due"),
        ));
        return None;
    };
    let source = findings.add_source(name, text.as_str());
    let Some(format) = &case.log_format else {
        no_format(case, source, &text, findings);
        return None;
    };
    let table = CsvTable::parse(source, &text, &format.time, findings)?;
    let time_column = find(&table, &format.time, "[fit] time", findings);
    let columns: Vec<_> = format
        .columns
        .iter()
        .map(|column| find(&table, &column.column, "[fit] columns", findings))
        .collect();
    let (time_column, columns) = (time_column?, columns.into_iter().collect::<Option<Vec<_>>>()?);
    let rows = clocks(&table, time_column, format, findings)?;
    let outside = |clock: Seconds| !(0.0..=LATEST).contains(&clock);
    let early = rows.iter().filter(|(clock, _)| *clock < 0.0).count();
    let late = rows.iter().filter(|(clock, _)| *clock > LATEST).count();
    if early > 0 {
        let text = format!("{} of the log before the start of the profile: not compared", plural(early, "row"));
        findings.notice("readings-before-start", text, None, None);
    }
    if late > 0 {
        let text = format!(
            "{} of the log later than 100 h after the start of the profile: not compared",
            plural(late, "row")
        );
        findings.notice("readings-after-end", text, None, None);
    }
    let mut all = Vec::new();
    for (column, index) in format.columns.iter().zip(columns) {
        let mut points = Vec::new();
        let mut missing = 0;
        for (clock, row) in rows.iter().filter(|(clock, _)| !outside(*clock)) {
            match reading(row, index, column, findings) {
                Reading::Kelvin(kelvin) => points.push((time(*clock), temperature(kelvin))),
                Reading::None => missing += 1,
                Reading::Wrong => {}
            }
        }
        let station = case.model.stations().get(column.station)?;
        let probe = station.probes().get(column.probe)?;
        if missing > 0 {
            let text = format!("{} of the log without a reading in \"{}\"", plural(missing, "row"), column.column);
            findings.notice("readings-missing", text, Some(station.name()), Some(&probe.name));
        }
        match Readings::new(column.station, column.probe, difference(column.noise), &points) {
            Ok(readings) => all.push(readings),
            Err(error) => findings.nowhere(Diagnostic::error("not-accepted", error.to_string())),
        }
    }
    if all.iter().all(|readings| readings.points().is_empty()) && !findings.diagnostics.has_errors() {
        let message = "no row of the log falls on the profile: there is nothing to compare";
        let found = Diagnostic::error("log-outside-run", message)
            .label(format!("[fit] offset is {} s: the log's time at the start of the profile", format.offset));
        findings.at(&table.header.spot, found);
        return None;
    }
    if !case.files.contains(&file) {
        case.files.push(file);
    }
    Some(all)
}

/// The case doesn't say which column is what: shows what could be written, with the names of this log and of this case.
fn no_format(case: &Case, source: usize, text: &str, findings: &mut Findings) {
    let found = Diagnostic::error("missing-section", "the case has no [fit], which says how this log is read");
    let Some(table) = CsvTable::parse(source, text, "time", findings) else {
        return;
    };
    let probes = case.model.stations().iter();
    let probes: Vec<_> = probes
        .flat_map(|station| station.probes().iter().map(|probe| format!("{}/{}", station.name(), probe.name)))
        .collect();
    let time = table.header.field(0).to_owned();
    let mut help = vec![format!("add to {}:  [fit]", case.path), format!("time = \"{time}\"")];
    if probes.is_empty() {
        help.push("the case has no probe either: a [[station.probe]] with name and depth stands for a thermocouple".to_owned());
    }
    help.push(format!(
        "columns = [ {{ probe = \"{}\", column = \"{}\", unit = \"degC\", noise = \"1 K\" }} ]",
        probes.first().map_or("STATION/PROBE", String::as_str),
        table.header.fields.get(1).map_or("COLUMN", String::as_str)
    ));
    if probes.len() > 1 {
        help.push(format!("probes of this case: {}", probes.join(", ")));
    }
    let found = help.into_iter().fold(found.label("the columns of this log"), Diagnostic::help);
    findings.at(&table.header.spot, found);
}

/// A column by its name, which must stand there once.
fn find(table: &CsvTable, name: &str, whose: &str, findings: &mut Findings) -> Option<usize> {
    let names = table.header.fields.iter().filter(|column| *column == name).count();
    if names > 1 {
        let found = Diagnostic::error("repeated-name", format!("the column \"{name}\" stands {names} times in this log"));
        findings.at(&table.header.spot, found.label(format!("{whose} of the case can't tell which is meant")));
        return None;
    }
    let found = table.column(name);
    if found.is_none() {
        let mut told = Diagnostic::error(
            "missing-column",
            format!("the column \"{name}\", which {whose} of the case names, is not in this log"),
        );
        told.help.extend(suggest::help(name, table.header.fields.iter().map(String::as_str)));
        if table.header.fields.len() == 1 && table.header.field(0).contains([';', '\t']) {
            told = told.help("the columns of a log are separated by commas, and decimals are written with a point");
        }
        findings.at(&table.header.spot, told.label("the columns of this log"));
    }
    found
}

/// Each row with its time on the clock of the profile.
fn clocks<'t>(table: &'t CsvTable, column: usize, format: &LogFormat, findings: &mut Findings) -> Option<Vec<(Seconds, &'t CsvRow)>> {
    let mut rows: Vec<(Seconds, &CsvRow)> = Vec::with_capacity(table.rows.len());
    let mut sound = true;
    for row in &table.rows {
        if !table.is_even(row, findings) {
            sound = false;
            continue;
        }
        let Some(seconds) = number(row.field(column)) else {
            let message = format!("\"{}\" is no finite number", row.field(column));
            let found = Diagnostic::error("bad-number", message).label("a time in seconds is due");
            findings.at(&row.field_spot(column, findings), found);
            sound = false;
            continue;
        };
        let clock = seconds - format.offset;
        if rows.last().is_some_and(|last| clock <= last.0) {
            let found = Diagnostic::error("not-rising", "the times of a log must rise").label("not after the one before");
            findings.at(&row.field_spot(column, findings), found);
            sound = false;
        }
        rows.push((clock, row));
    }
    sound.then_some(rows)
}

enum Reading {
    Kelvin(Kelvin),
    /// The logger had none.
    None,
    /// A mistake, which is reported.
    Wrong,
}

fn reading(row: &CsvRow, index: usize, column: &LogColumn, findings: &mut Findings) -> Reading {
    let field = row.field(index);
    if NO_READING.contains(&field.to_lowercase().as_str()) {
        return Reading::None;
    }
    let refuse = |findings: &mut Findings, code: &'static str, message: String| {
        let found = Diagnostic::error(code, message).label(format!("a temperature in {} is due in \"{}\"", column.unit, column.column));
        findings.at(&row.field_spot(index, findings), found);
        Reading::Wrong
    };
    let Some(number) = number(field) else {
        return refuse(findings, "bad-number", format!("\"{field}\" is no finite number"));
    };
    match units::read(&format!("{number} {}", column.unit), Kind::Temperature) {
        Ok(kelvin) if kelvin > 0.0 => Reading::Kelvin(kelvin),
        _ => refuse(findings, "out-of-range", format!("{field} {} makes no sense here", column.unit)),
    }
}

fn number(field: &str) -> Option<f64> {
    field.parse().ok().filter(|number: &f64| number.is_finite())
}

fn plural(count: usize, what: &str) -> String {
    if count == 1 { format!("1 {what}") } else { format!("{count} {what}s") }
}
