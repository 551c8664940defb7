//! Heating from a log: a CSV file beside the case.

use super::quantities::{flux, temperature, time, transfer};
use super::station::Section;
use super::{CaseFile, Lowering, Node, Spot, Table};
use crate::case::suggest;
use crate::diagnostics::Diagnostic;
use crate::model::{HeatingModel, LogRows};

const TIME: &str = "time_s";
const FLUX: &str = "flux_W_m2";
const COEFFICIENT: &str = "coefficient_W_m2_K";
const GAS: &str = "gas_temperature_K";

/// A log as read: the text's index among the sources, and each row with its place.
struct Log {
    source: usize,
    header: Vec<String>,
    header_spot: Spot,
    rows: Vec<Row>,
}

struct Row {
    spot: Spot,
    fields: Vec<String>,
}

impl Lowering<'_> {
    pub(super) fn heating_log(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<HeatingModel> {
        let Some(file) = table.node("file") else {
            self.missing(&node.spot, "file", "with model \"log\"");
            return None;
        };
        let net = table.switch("net").unwrap_or(false);
        let log = self.read_log(file)?;
        let has = |name: &str| log.header.iter().any(|column| column == name);
        for (index, column) in log.header.iter().enumerate() {
            if ![TIME, FLUX, COEFFICIENT, GAS].contains(&column.as_str()) {
                let mut found = Diagnostic::warning("no-effect", format!("the column \"{column}\" is not used"));
                found
                    .help
                    .extend(suggest::nearest(column, [TIME, FLUX, COEFFICIENT, GAS]).map(|near| format!("did you mean \"{near}\"?")));
                let spot = self.field_spot(&log.header_spot, index, column);
                self.findings.doubt(&spot, found);
            }
        }
        if has(FLUX) && (has(COEFFICIENT) || has(GAS)) {
            let message = format!("the log holds both \"{FLUX}\" and a coefficient or gas temperature");
            self.error(&log.header_spot, "excluded", message, "one or the other");
            return None;
        }
        if has(FLUX) {
            let rows = self.columns(&log, [TIME, FLUX])?;
            let rows: Vec<_> = rows.into_iter().map(|[seconds, watts]| (time(seconds), flux(watts))).collect();
            let rows = self.accept(LogRows::flux(&rows, net), &log.header_spot)?;
            self.tell_held(section, &rows, net);
            return Some(HeatingModel::Log(rows));
        }
        if net && let Some(entry) = table.entry("net") {
            let message = format!("\"net\" is for a log of \"{FLUX}\"");
            self.error(&entry.key_spot, "key-does-not-fit", message, "take it out");
        }
        let rows = self.columns(&log, [TIME, COEFFICIENT, GAS])?;
        let rows: Vec<_> = rows
            .into_iter()
            .map(|[seconds, coefficient, gas]| (time(seconds), transfer(coefficient), temperature(gas)))
            .collect();
        let rows = self.accept(LogRows::film(&rows), &log.header_spot)?;
        self.tell_held(section, &rows, false);
        Some(HeatingModel::Log(rows))
    }

    /// Says that the last row is held where a burn is longer than the log.
    fn tell_held(&mut self, section: &Section<'_>, rows: &LogRows, net: bool) {
        let longest = section.profile.map_or(0.0, |profile| profile.longest_burn);
        if longest > rows.end() {
            let text = format!(
                "{}: the heating log ends after {} s and the longest burn lasts {longest} s; its last row is held",
                section.name,
                rows.end()
            );
            self.findings.notice("log-held", text, Some(section.name), None);
        }
        if net {
            let text = format!(
                "{}: the logged flux is net, and replaces the idle losses until its last row",
                section.name
            );
            self.findings.notice("log-net", text, Some(section.name), None);
        }
    }

    fn read_log(&mut self, file: &Node) -> Option<Log> {
        let written = file.text()?;
        let path = self.folder.join(written);
        let bytes = match std::fs::read(&path) {
            Ok(bytes) => bytes,
            Err(error) => {
                let message = format!("can't read {}: {error}", path.display());
                self.error(&file.words(), "cannot-read", message, "paths count from the folder of the case file");
                return None;
            }
        };
        let digest = crate::case::digest::of(&[&bytes]);
        let Ok(text) = String::from_utf8(bytes) else {
            self.error(
                &file.words(),
                "not-text",
                format!("{} is no UTF-8 text", path.display()),
                "a CSV file is due",
            );
            return None;
        };
        let used = CaseFile {
            path: written.to_owned(),
            digest,
        };
        if !self.files.contains(&used) {
            self.files.push(used);
        }
        let source = self.findings.add_source(path.display().to_string(), text.clone());
        self.parse_log(source, &text)
    }

    fn parse_log(&mut self, source: usize, text: &str) -> Option<Log> {
        let mut reader = csv::ReaderBuilder::new()
            .has_headers(false)
            .trim(csv::Trim::All)
            .flexible(true)
            .from_reader(text.as_bytes());
        let mut rows = Vec::new();
        for record in reader.records() {
            match record {
                Ok(record) => {
                    let start = record
                        .position()
                        .map_or(0, |position| usize::try_from(position.byte()).unwrap_or(usize::MAX));
                    rows.push(Row {
                        spot: line_at(source, text, start),
                        fields: record.iter().map(|field| field.trim_start_matches('\u{feff}').to_owned()).collect(),
                    });
                }
                Err(error) => {
                    let start = error
                        .position()
                        .map_or(0, |position| usize::try_from(position.byte()).unwrap_or(usize::MAX));
                    self.error(&line_at(source, text, start), "syntax", format!("not readable as CSV: {error}"), "");
                    return None;
                }
            }
        }
        if rows.len() < 2 {
            let spot = line_at(source, text, 0);
            self.error(
                &spot,
                "empty-list",
                "the log has no rows",
                format!("a line of column names is due ({TIME}, …), then at least one row"),
            );
            return None;
        }
        let header = rows.remove(0);
        for (index, column) in header.fields.iter().enumerate() {
            if header.fields[..index].contains(column) {
                self.error(&header.spot, "repeated-name", format!("the column \"{column}\" stands twice"), "");
                return None;
            }
        }
        Some(Log {
            source,
            header: header.fields,
            header_spot: header.spot,
            rows,
        })
    }

    /// The numbers of some columns, row by row, the first one rising.
    fn columns<const N: usize>(&mut self, log: &Log, names: [&str; N]) -> Option<Vec<[f64; N]>> {
        let mut indices = [0; N];
        let mut sound = true;
        for (slot, name) in indices.iter_mut().zip(names) {
            match log.header.iter().position(|column| column == name) {
                Some(index) => *slot = index,
                None => {
                    let message = format!("the column \"{name}\" is missing");
                    let due = format!("due are {TIME} and {FLUX}, or {TIME}, {COEFFICIENT} and {GAS}");
                    self.error(&log.header_spot, "missing-column", message, due);
                    sound = false;
                }
            }
        }
        if !sound {
            return None;
        }
        let mut rows: Vec<[f64; N]> = Vec::with_capacity(log.rows.len());
        for row in &log.rows {
            match self.row(log, row, &indices, &names) {
                Some(numbers) => {
                    if rows.last().is_some_and(|last| numbers[0] <= last[0]) {
                        let spot = self.field_spot(&row.spot, indices[0], row.fields.get(indices[0]).map_or("", String::as_str));
                        self.error(&spot, "not-rising", "the times of a log must rise", "not after the one before");
                        sound = false;
                    }
                    rows.push(numbers);
                }
                None => sound = false,
            }
        }
        sound.then_some(rows)
    }

    fn row<const N: usize>(&mut self, log: &Log, row: &Row, indices: &[usize; N], names: &[&str; N]) -> Option<[f64; N]> {
        if row.fields.len() != log.header.len() {
            let message = format!("this row has {} values, and the log has {} columns", row.fields.len(), log.header.len());
            self.error(&row.spot, "uneven-row", message, "");
            return None;
        }
        let mut numbers = [0.0; N];
        for ((number, &index), &name) in numbers.iter_mut().zip(indices).zip(names) {
            let field = row.fields.get(index).map_or("", String::as_str);
            let spot = self.field_spot(&row.spot, index, field);
            match field.parse::<f64>() {
                Ok(value) if value.is_finite() => *number = value,
                _ => {
                    self.error(
                        &spot,
                        "bad-number",
                        format!("\"{field}\" is no finite number"),
                        format!("a number is due in {name}"),
                    );
                    return None;
                }
            }
            let sensible = match name {
                GAS => *number > 0.0,
                FLUX => true,
                _ => *number >= 0.0,
            };
            if !sensible {
                self.error(&spot, "out-of-range", format!("{field} makes no sense in {name}"), "");
                return None;
            }
        }
        debug_assert!(log.source == row.spot.source);
        Some(numbers)
    }

    /// The characters of one field of a line; the whole line where it can't be told.
    fn field_spot(&self, line: &Spot, index: usize, field: &str) -> Spot {
        let source = self.findings.diagnostics.sources.get(line.source);
        let text = source.and_then(|source| source.text.get(line.range.clone())).unwrap_or_default();
        let before: usize = text.split(',').take(index).map(|part| part.len() + 1).sum();
        let found = text.get(before..).filter(|_| !field.is_empty()).and_then(|rest| rest.find(field));
        match found {
            Some(offset) => {
                let start = line.range.start + before + offset;
                Spot {
                    source: line.source,
                    range: start..start + field.len(),
                }
            }
            None => line.clone(),
        }
    }
}

/// The line that holds a byte, without its end.
fn line_at(source: usize, text: &str, byte: usize) -> Spot {
    let mut start = byte.min(text.len());
    while !text.is_char_boundary(start) {
        start -= 1;
    }
    // A record is said to start at the end of the line before it, where lines are blank.
    let skipped = text[start..].len() - text[start..].trim_start_matches(['\r', '\n']).len();
    start += skipped;
    let length = text[start..].find(['\r', '\n']).unwrap_or(text.len() - start);
    Spot {
        source,
        range: start..start + length,
    }
}
