//! Heating from a log: a CSV file beside the case.

use super::quantities::{flux, temperature, time, transfer};
use super::station::Section;
use super::{Lowering, Node, Table};
use crate::case::csv_table::{CsvRow, CsvTable};
use crate::case::suggest;
use crate::diagnostics::Diagnostic;
use crate::model::{HeatingModel, LogRows};

const TIME: &str = "time_s";
const FLUX: &str = "flux_W_m2";
const COEFFICIENT: &str = "coefficient_W_m2_K";
const GAS: &str = "gas_temperature_K";

impl Lowering<'_> {
    pub(super) fn heating_log(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<HeatingModel> {
        let Some(file) = table.node("file") else {
            self.missing(&node.spot, "file", "with model \"log\"");
            return None;
        };
        let net = table.switch("net").unwrap_or(false);
        let log = self.read_csv(file, TIME)?;
        let has = |name: &str| log.column(name).is_some();
        for (index, column) in log.header.fields.iter().enumerate() {
            if ![TIME, FLUX, COEFFICIENT, GAS].contains(&column.as_str()) {
                let mut found = Diagnostic::warning("no-effect", format!("the column \"{column}\" is not used"));
                found
                    .help
                    .extend(suggest::nearest(column, [TIME, FLUX, COEFFICIENT, GAS]).map(suggest::did_you_mean));
                let spot = log.header.field_spot(index, self.findings);
                self.findings.doubt(&spot, found);
            }
        }
        if has(FLUX) && (has(COEFFICIENT) || has(GAS)) {
            let message = format!("the log holds both \"{FLUX}\" and a coefficient or gas temperature");
            self.error(&log.header.spot, "excluded", message, "one or the other");
            return None;
        }
        if has(FLUX) {
            let rows = self.columns(&log, [TIME, FLUX])?;
            let rows: Vec<_> = rows.into_iter().map(|[seconds, watts]| (time(seconds), flux(watts))).collect();
            let rows = self.accept(LogRows::flux(&rows, net), &log.header.spot)?;
            self.tell_held(section, &rows, net);
            return Some(HeatingModel::Log(rows));
        }
        if !has(COEFFICIENT) && !has(GAS) {
            let message = format!("no column of the log holds the heating: \"{FLUX}\", or \"{COEFFICIENT}\" and \"{GAS}\"");
            self.error(
                &log.header.spot,
                "missing-column",
                message,
                format!("due are {TIME} and {FLUX}, or {TIME}, {COEFFICIENT} and {GAS}"),
            );
            return None;
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
        let rows = self.accept(LogRows::film(&rows), &log.header.spot)?;
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

    /// The numbers of some columns, row by row, the first one rising.
    fn columns<const N: usize>(&mut self, log: &CsvTable, names: [&str; N]) -> Option<Vec<[f64; N]>> {
        let mut indices = [0; N];
        let mut sound = true;
        for (slot, name) in indices.iter_mut().zip(names) {
            match log.column(name) {
                Some(index) => *slot = index,
                None => {
                    let message = format!("the column \"{name}\" is missing");
                    let due = format!("due are {TIME} and {FLUX}, or {TIME}, {COEFFICIENT} and {GAS}");
                    self.error(&log.header.spot, "missing-column", message, due);
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
                        let spot = row.field_spot(indices[0], self.findings);
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

    fn row<const N: usize>(&mut self, log: &CsvTable, row: &CsvRow, indices: &[usize; N], names: &[&str; N]) -> Option<[f64; N]> {
        if !log.is_even(row, self.findings) {
            return None;
        }
        let mut numbers = [0.0; N];
        for ((number, &index), &name) in numbers.iter_mut().zip(indices).zip(names) {
            let field = row.field(index);
            let spot = row.field_spot(index, self.findings);
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
        Some(numbers)
    }
}
