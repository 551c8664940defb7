//! [start]: a uniform temperature, or where an earlier run stood.

use super::quantities::{length, temperature};
use super::station::LoweredStation;
use super::{Lowering, Node, Spot, Table};
use crate::case::csv_table::CsvTable;
use crate::case::suggest;
use crate::diagnostics::Diagnostic;
use crate::model::{Kelvin, Metres, StartProfile, Station};
use crate::units::Kind;

const COLUMNS: [&str; 4] = ["station", "time_s", "depth_m", "temperature_K"];
/// Times and depths of a file agree with those of a case to this share: they are sums written in other units.
const SAME: f64 = 1e-6;

/// How the walls start.
pub(super) struct Start {
    /// The uniform temperature; the coolest of an earlier run. K.
    pub temperature: Option<f64>,
    pub earlier: Option<Earlier>,
}

/// An earlier run at the asked time.
pub(super) struct Earlier {
    file: String,
    spot: Spot,
    /// Stations, each with its profile: depth and temperature, hot face first.
    stations: Vec<(String, Vec<(Metres, Kelvin)>)>,
}

impl Lowering<'_> {
    pub(super) fn start(&mut self, case: &Table, air: Option<f64>) -> Start {
        let table = case.table("start");
        if let Some(table) = table {
            self.exclude(table, &["temperature", "from"]);
            if let Some(from) = table.node("from") {
                let earlier = self.earlier(table, from);
                let temperatures = earlier.iter().flat_map(|earlier| &earlier.stations).flat_map(|station| &station.1);
                let coolest = temperatures.map(|point| point.1).reduce(f64::min);
                return Start {
                    temperature: coolest.or(air),
                    earlier,
                };
            }
            self.misfits(table, &["at"], "without \"from\"");
        }
        let temperature = match table.and_then(|table| table.node("temperature")) {
            Some(node) => node.number(),
            None => {
                if let Some(air) = air {
                    self.default_number("start.temperature".to_owned(), air, Kind::Temperature);
                }
                air
            }
        };
        Start { temperature, earlier: None }
    }

    fn earlier(&mut self, table: &Table, from: &Node) -> Option<Earlier> {
        let Some(at) = table.node("at") else {
            self.missing(&from.spot, "at", "with \"from\": at which of that file's times this run starts");
            return None;
        };
        let asked = at.number()?;
        let file = self.read_csv(from, COLUMNS[0])?;
        let rows = self.profile_rows(&file)?;
        let here = |time: f64| (time - asked).abs() <= SAME * asked.abs().max(1e-3);
        let mut stations: Vec<(String, Vec<(Metres, Kelvin)>)> = Vec::new();
        for row in rows.iter().filter(|row| here(row.1)) {
            match stations.iter_mut().find(|station| station.0 == row.0) {
                Some(station) => station.1.push((row.2, row.3)),
                None => stations.push((row.0.clone(), vec![(row.2, row.3)])),
            }
        }
        if stations.is_empty() {
            let mut times: Vec<f64> = rows.iter().map(|row| row.1).collect();
            times.sort_by(f64::total_cmp);
            times.dedup();
            let nearest = times.iter().copied().min_by(|a, b| (a - asked).abs().total_cmp(&(b - asked).abs()));
            let shown: Vec<String> = times.iter().take(12).map(|time| format!("{time} s")).collect();
            let more = if times.len() > shown.len() { ", …" } else { "" };
            let mut found = Diagnostic::error("time-not-in-file", format!("the earlier run has no profile at {asked} s"))
                .label(format!("it has {}{more}", shown.join(", ")));
            found.help.push(format!(
                "{}run the earlier case again with --times to have this one",
                nearest.map_or_else(String::new, |nearest| format!("the nearest is at {nearest} s; "))
            ));
            self.findings.at(&at.words(), found);
            return None;
        }
        Some(Earlier {
            file: from.text()?.to_owned(),
            spot: from.words(),
            stations,
        })
    }

    /// Station, time, depth and temperature of each row.
    fn profile_rows(&mut self, file: &CsvTable) -> Option<Vec<(String, f64, f64, f64)>> {
        let mut indices = [0; 4];
        for (slot, name) in indices.iter_mut().zip(COLUMNS) {
            let Some(index) = file.column(name) else {
                let message = format!("the column \"{name}\" is missing");
                let due = format!("the depths.csv of an earlier run is due: {}", COLUMNS.join(", "));
                self.error(&file.header.spot, "missing-column", message, due);
                return None;
            };
            *slot = index;
        }
        let mut rows = Vec::with_capacity(file.rows.len());
        let mut sound = true;
        for row in &file.rows {
            let mut numbers = [0.0; 3];
            for (number, k) in numbers.iter_mut().zip(1..4) {
                let field = row.field(indices[k]);
                match field.parse::<f64>() {
                    Ok(value) if value.is_finite() && (k < 3 || value > 0.0) => *number = value,
                    _ => {
                        let spot = row.field_spot(indices[k], self.findings);
                        let message = format!("\"{field}\" makes no sense in {}", COLUMNS[k]);
                        self.error(&spot, "bad-number", message, "a finite number is due, of a temperature one above 0 K");
                        sound = false;
                    }
                }
            }
            let name = row.field(indices[0]).to_owned();
            rows.push((name, numbers[0], numbers[1], numbers[2]));
        }
        sound.then_some(rows)
    }

    /// Lets every station start where the earlier run's station of its name stood.
    pub(super) fn start_from(&mut self, case: &Table, earlier: &Earlier, stations: &mut [LoweredStation]) {
        let nodes = case.list("station").unwrap_or_default();
        for (lowered, node) in stations.iter_mut().zip(nodes) {
            let Some(station) = lowered.model.take() else { continue };
            let Some((_, points)) = earlier.stations.iter().find(|known| known.0 == lowered.name) else {
                let known: Vec<&str> = earlier.stations.iter().map(|known| known.0.as_str()).collect();
                let message = format!("{} has no station \"{}\" at that time", earlier.file, lowered.name);
                let mut found = Diagnostic::error("station-not-in-file", message).label(format!("it has {}", known.join(", ")));
                found
                    .help
                    .extend(suggest::nearest(&lowered.name, known.iter().copied()).map(suggest::did_you_mean));
                self.findings.at(&earlier.spot, found);
                continue;
            };
            let spot = node
                .table()
                .and_then(|table| table.node("layers"))
                .map_or(&node.spot, |layers| &layers.spot);
            lowered.model = self
                .start_profile(&station, points, &earlier.file, spot)
                .map(|profile| station.with_start(profile));
        }
    }

    /// The points of an earlier profile, layer by layer.
    fn start_profile(&mut self, station: &Station, points: &[(Metres, Kelvin)], file: &str, spot: &Spot) -> Option<StartProfile> {
        let boundaries = station.boundaries();
        let thickness = station.thickness();
        let reached = points.iter().map(|point| point.0).fold(0.0, f64::max);
        if (reached - thickness).abs() > SAME * thickness {
            let message = format!(
                "the wall of \"{}\" is {:.5} mm thick, and that of the earlier run in {file} {:.5} mm",
                station.name(),
                1e3 * thickness,
                1e3 * reached
            );
            self.error(spot, "other-thickness", message, "the same layers in the same thicknesses are due");
            return None;
        }
        let same = |a: f64, b: f64| (a - b).abs() <= SAME * thickness;
        let mut layers = Vec::with_capacity(station.layers().len());
        for (index, layer) in station.layers().iter().enumerate() {
            let (from, to) = (boundaries[index], boundaries[index + 1]);
            // Of the two rows at a joint with a resistance, the first is its hot side.
            let first = points.iter().rposition(|point| same(point.0, from));
            let last = points.iter().position(|point| same(point.0, to));
            let (Some(first), Some(last)) = (first, last) else {
                let depth = if first.is_none() { from } else { to };
                let message = format!(
                    "the earlier run in {file} has no point at the end of the layer \"{}\", {:.5} mm deep",
                    layer.name(),
                    1e3 * depth
                );
                self.error(spot, "other-layers", message, "the same layers in the same thicknesses are due");
                return None;
            };
            let rows = points.get(first..=last).unwrap_or_default();
            if index + 1 < station.layers().len() && station.resistance(index).is_none() {
                let outer = points.iter().rposition(|point| same(point.0, to)).unwrap_or(last);
                if (points[outer].1 - points[last].1).abs() > 1e-6 {
                    let message = format!("in {file}, the joint outside \"{}\" has two temperatures", layer.name());
                    self.error(
                        spot,
                        "other-layers",
                        message,
                        "here it is a perfect contact: give it the resistance that it had in the earlier run",
                    );
                    return None;
                }
            }
            layers.push(
                rows.iter()
                    .map(|(depth, kelvin)| (length((depth - from).clamp(0.0, layer.thickness())), temperature(*kelvin)))
                    .collect::<Vec<_>>(),
            );
        }
        self.accept(StartProfile::new(&layers), spot)
    }
}
