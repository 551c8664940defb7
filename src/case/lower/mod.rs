//! From the checked tree to the model: what the form can't show. What is required depends on other keys here, names must name something, and each
//! rule of the case file has its place.

mod convection;
mod coolant;
mod csv_file;
mod faces;
mod follow;
mod heating;
mod heating_log;
mod joint;
mod later;
mod layers;
mod limit;
mod material;
mod outside;
mod probe;
mod profile;
pub(super) mod quantities;
mod start;
mod station;
mod surroundings;
mod view;
mod wait;

use super::checked::{CaseFile, Input, InputValue, LogFormat};
use super::findings::Findings;
use super::keys;
use super::keys::VERSION;
use super::names;
use super::suggest;
use super::tree::{Node, Spot, Table, Value};
use crate::diagnostics::Diagnostic;
use crate::model::{Allowance, Model, ModelError, ModelParts};
use crate::units::Kind;
use material::Materials;
use std::path::Path;

pub(super) use limit::kind_of;
pub(super) use material::{NEEDED, PROPERTIES, property, said};

/// What lowering reads and what it adds to.
pub(super) struct Lowering<'a> {
    pub findings: &'a mut Findings,
    pub inputs: &'a mut Vec<Input>,
    /// The folder of the case file, against which the paths in it count.
    pub folder: &'a Path,
    pub files: &'a mut Vec<CaseFile>,
}

/// Temperature difference that the solver keeps unless the case says otherwise, K.
const TOLERANCE: f64 = 0.05;

/// Builds the model; `None` when something was found that forbids it.
pub(super) fn lower(root: &Node, mut lowering: Lowering<'_>) -> Option<(Model, Option<LogFormat>)> {
    let case = root.table()?;
    lowering.version(case);
    let title = lowering.title(case);
    let weather = lowering.weather(case);
    let start = lowering.start(case, weather.air);
    let mut materials = Materials::new(case, start.temperature.unwrap_or(quantities::ROOM));
    let profile = lowering.profile(case);
    let mut stations = lowering.stations(case, &weather, profile.as_ref(), &mut materials);
    if let Some(earlier) = &start.earlier {
        lowering.start_from(case, earlier, &mut stations);
    }
    lowering.wind(case);
    lowering.followed_stations(case);
    let waits = lowering.waits(case, &stations);
    let allowance = lowering.allowance(case);
    let tolerance = lowering.tolerance(case);
    materials.finish(&mut lowering);
    let log_format = lowering.later(root, &stations, profile.as_ref());
    let parts = ModelParts {
        title,
        surroundings: weather.surroundings?,
        start: quantities::temperature(start.temperature?),
        profile: profile?.profile,
        stations: stations.into_iter().map(|station| station.model).collect::<Option<_>>()?,
        waits: waits?,
        allowance: allowance?,
        tolerance,
    };
    if lowering.findings.diagnostics.has_errors() {
        return None;
    }
    let model = lowering.accept(Model::new(parts), &root.spot)?;
    Some((model, log_format))
}

impl Lowering<'_> {
    fn error(&mut self, spot: &Spot, code: &'static str, message: impl Into<String>, label: impl Into<String>) {
        self.findings.at(spot, Diagnostic::error(code, message).label(label));
    }

    fn not_built_yet(&mut self, spot: &Spot, what: &str) {
        let found = Diagnostic::error("not-built-yet", format!("{what} is not built yet"));
        self.findings
            .at(spot, found.label("a known part of the case file that this version can't compute"));
    }

    /// A key that is required here, because of something else.
    fn missing(&mut self, spot: &Spot, key: &str, why: &str) {
        let found = Diagnostic::error("missing-key", format!("the key \"{key}\" is missing")).label(format!("\"{key}\" is required {why}"));
        let found = match keys::due_everywhere(key) {
            Some(due) => found.help(format!("for \"{key}\", {due}")),
            None => found,
        };
        self.findings.at(&self.findings.head(spot), found);
    }

    /// Keys that mean nothing here.
    fn misfits(&mut self, table: &Table, keys: &[&str], why: &str) {
        for entry in table.entries.iter().filter(|entry| keys.contains(&entry.key.as_str())) {
            let message = format!("the key \"{}\" means nothing {why}", entry.key);
            self.error(&entry.key_spot, "key-does-not-fit", message, "take it out, or change what it depends on");
        }
    }

    /// Keys that change nothing here, but contradict nothing.
    fn without_effect(&mut self, table: &Table, keys: &[&str], why: &str) {
        for entry in table.entries.iter().filter(|entry| keys.contains(&entry.key.as_str())) {
            let found = Diagnostic::warning("no-effect", format!("the key \"{}\" has no effect {why}", entry.key));
            self.findings.doubt(&entry.key_spot, found);
        }
    }

    /// Keys of which only one may stand: the second and later ones are reported.
    fn exclude(&mut self, table: &Table, keys: &[&str]) {
        let mut given = table.entries.iter().filter(|entry| {
            let off = matches!(entry.node.value, Value::Switch(false));
            keys.contains(&entry.key.as_str()) && !off
        });
        let Some(first) = given.next() else { return };
        for entry in given {
            let message = format!("\"{}\" and \"{}\" exclude each other", first.key, entry.key);
            self.error(&entry.key_spot, "excluded", message, format!("give one of: {}", keys.join(", ")));
        }
    }

    /// A name that names nothing.
    fn unknown<'n>(&mut self, node: &Node, code: &'static str, what: &str, known: impl IntoIterator<Item = &'n str>) {
        let name = node.text().unwrap_or_default();
        let mut found = Diagnostic::error(code, format!("{what} \"{name}\" is unknown"));
        found.help.extend(suggest::help(name, known));
        if code == "unknown-material" {
            found = found.help(format!(
                "soakdown materials shows what is built in; one of your own is a section [material.{}]",
                names::in_path(name)
            ));
        }
        self.findings.at(&node.words(), found);
    }

    /// A part of the model; what it refuses was not foreseen above and is shown at the place of the whole part.
    fn accept<T>(&mut self, part: Result<T, ModelError>, spot: &Spot) -> Option<T> {
        match part {
            Ok(part) => Some(part),
            // Each repeated name is reported where it stands.
            Err(ModelError::Repeated { .. }) if self.findings.diagnostics.list.iter().any(|found| found.code == "repeated-name") => None,
            Err(error) => {
                self.error(spot, "not-accepted", error.to_string(), "");
                None
            }
        }
    }

    /// Lists a value that the case leaves to its default.
    fn default_number(&mut self, path: String, number: f64, kind: Kind) {
        self.default(path, InputValue::Number(number), kind.si());
    }

    fn default(&mut self, path: String, value: InputValue, unit: &'static str) {
        self.inputs.push(Input {
            path,
            value,
            unit,
            from: "default".to_owned(),
        });
    }

    /// A number, or its default, which is then listed.
    fn number_or(&mut self, table: Option<&Table>, key: &str, path: &str, default: f64, kind: Kind) -> Option<f64> {
        match table.and_then(|table| table.node(key)) {
            Some(node) => node.number(),
            None => {
                self.default_number(super::names::join(path, key), default, kind);
                Some(default)
            }
        }
    }

    /// A switch, or its default, which is then listed.
    fn switch_or(&mut self, table: &Table, key: &str, path: &str, default: bool) -> bool {
        if !table.has(key) {
            self.default(super::names::join(path, key), InputValue::Switch(default), "");
        }
        table.switch(key).unwrap_or(default)
    }

    fn version(&mut self, case: &Table) {
        let Some(node) = case.node("soakdown") else { return };
        #[expect(clippy::float_cmp, reason = "whole numbers")]
        if node.number().is_some_and(|version| version != f64::from(VERSION)) {
            self.error(
                &node.spot,
                "format-version",
                "this version of the case file is unknown",
                format!("this program reads version {VERSION}"),
            );
        }
    }

    fn title(&mut self, case: &Table) -> String {
        if !case.has("title") {
            self.default("title".to_owned(), InputValue::Word(String::new()), "");
        }
        case.text("title").unwrap_or_default().to_owned()
    }

    fn allowance(&mut self, case: &Table) -> Option<Allowance> {
        if !case.has("allowance") {
            return Some(Allowance::none());
        }
        let node = case.node("allowance")?;
        let limits = self.number_or(node.table(), "limits", "allowance", 0.0, Kind::TemperatureDifference)?;
        let heating = self.number_or(node.table(), "heating", "allowance", 1.0, Kind::Number)?;
        self.accept(Allowance::new(quantities::difference(limits), heating), &node.spot)
    }

    fn tolerance(&mut self, case: &Table) -> uom::si::f64::TemperatureInterval {
        let tolerance = self.number_or(case.table("solver"), "tolerance", "solver", TOLERANCE, Kind::TemperatureDifference);
        quantities::difference(tolerance.unwrap_or(TOLERANCE))
    }
}
