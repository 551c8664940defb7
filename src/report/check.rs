//! `soakdown-check/1`: what a case says, as JSON.

use super::PROGRAM;
use super::cautions::cautions_of_case;
use super::result::{CautionRow, FileRow, WarningRow, file_rows, warning_rows};
use crate::answers::{CheckAnswers, HeatingCheck, PhaseCheck, StationCheck};
use crate::case::{Case, Input, InputValue};
use schemars::JsonSchema;
use serde::Serialize;

/// `check.json`.
#[derive(Debug, Serialize, JsonSchema)]
pub struct CheckDocument<'a> {
    /// Name and version of this document.
    #[schemars(extend("const" = "soakdown-check/1"))]
    format: &'static str,
    /// Name and version of the program.
    program: &'static str,
    /// The command as it would be typed again, without --jobs, --out, --quiet and --color.
    command: &'a str,
    /// Path of the case file, as given.
    case: &'a str,
    /// sha256: and the hexadecimal digest of the case file's bytes and the settings put on it.
    case_digest: &'a str,
    /// The other files that the case reads.
    files: Vec<FileRow<'a>>,
    /// The stations, in the order of the case.
    stations: Vec<StationRow<'a>>,
    /// The phases as they run.
    phases: Vec<PhaseRow>,
    /// Every input with where it comes from.
    inputs: Vec<InputRow<'a>>,
    /// What should be known about the case.
    warnings: Vec<WarningRow>,
    /// What people must mind, chosen by situation.
    cautions: Vec<CautionRow>,
}

impl<'a> CheckDocument<'a> {
    /// The document of one check; `command` as it would be typed again.
    pub fn new(case: &'a Case, command: &'a str, answers: &'a CheckAnswers) -> Self {
        Self {
            format: "soakdown-check/1",
            program: PROGRAM,
            command,
            case: &case.path,
            case_digest: &case.digest,
            files: file_rows(&case.files),
            stations: answers.stations.iter().map(StationRow::new).collect(),
            phases: answers.phases.iter().map(PhaseRow::new).collect(),
            inputs: case.inputs.iter().map(InputRow::new).collect(),
            warnings: warning_rows(case.notices.iter().cloned()),
            cautions: cautions_of_case(&case.model)
                .into_iter()
                .map(|caution| CautionRow {
                    code: caution.code,
                    text: caution.text,
                })
                .collect(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
#[schemars(rename = "CheckStationRow")]
struct StationRow<'a> {
    /// Name of the station.
    name: &'a str,
    /// Nodes through the wall.
    nodes: usize,
    /// What heats its hot face; null if nothing does.
    heating: Option<HeatingRow>,
}

impl<'a> StationRow<'a> {
    fn new(station: &'a StationCheck) -> Self {
        Self {
            name: &station.name,
            nodes: station.nodes,
            heating: station.heating.as_ref().map(HeatingRow::new),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct HeatingRow {
    /// Wall temperature at which it is shown.
    #[serde(rename = "wall_K")]
    wall: f64,
    /// Film coefficient, where there is one.
    #[serde(rename = "coefficient_W_m2_K")]
    coefficient: Option<f64>,
    /// Recovery temperature of the gas, where there is one.
    #[serde(rename = "gas_temperature_K")]
    gas_temperature: Option<f64>,
    /// All heat into the wall at level 1.
    #[serde(rename = "flux_W_m2")]
    flux: f64,
    /// Its parts.
    parts: Vec<PartRow>,
}

impl HeatingRow {
    fn new(heating: &HeatingCheck) -> Self {
        Self {
            wall: heating.wall,
            coefficient: heating.coefficient,
            gas_temperature: heating.gas_temperature,
            flux: heating.flux,
            parts: heating.parts.iter().map(|&(name, flux)| PartRow { name, flux }).collect(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct PartRow {
    /// What it is.
    name: &'static str,
    /// Heat flux of this part.
    #[serde(rename = "flux_W_m2")]
    flux: f64,
}

#[derive(Debug, Serialize, JsonSchema)]
pub(super) struct PhaseRow {
    /// What it is.
    #[schemars(extend("enum" = ["burn", "hold", "shutdown"]))]
    kind: &'static str,
    /// When it starts.
    start_s: f64,
    /// How long it lasts.
    duration_s: f64,
    /// Chamber pressure against its nominal value.
    level: f64,
    /// Time in which the heating rises.
    ramp_s: f64,
    /// Time in which the heating falls after the burn.
    tail_s: f64,
    /// Whether the purge flows.
    purge: bool,
}

impl PhaseRow {
    pub(super) fn new(phase: &PhaseCheck) -> Self {
        Self {
            kind: phase.kind.word(),
            start_s: phase.start,
            duration_s: phase.duration,
            level: phase.level,
            ramp_s: phase.ramp,
            tail_s: phase.tail,
            purge: phase.purge,
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct InputRow<'a> {
    /// Keys joined by dots, as --set takes them.
    path: &'a str,
    /// A number in SI, a word, a switch, or pairs of kelvin and value in SI.
    value: ValueCell<'a>,
    /// SI unit; empty for pure numbers, words and switches.
    unit: &'a str,
    /// case, default, set, or the source of a built-in value.
    from: &'a str,
}

impl<'a> InputRow<'a> {
    fn new(input: &'a Input) -> Self {
        Self {
            path: &input.path,
            value: ValueCell::new(&input.value),
            unit: input.unit,
            from: &input.from,
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
#[serde(untagged)]
pub(super) enum ValueCell<'a> {
    Number(f64),
    Word(&'a str),
    Switch(bool),
    Table(&'a [(f64, f64)]),
}

impl<'a> ValueCell<'a> {
    pub(super) fn new(value: &'a InputValue) -> Self {
        match value {
            InputValue::Number(value) => Self::Number(*value),
            InputValue::Word(word) => Self::Word(word),
            InputValue::Switch(on) => Self::Switch(*on),
            InputValue::Table(points) => Self::Table(points),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::sample;

    #[test]
    fn the_document_has_the_keys_of_the_contract() {
        let case = sample::case();
        let answers = sample::check();
        let document = serde_json::to_value(CheckDocument::new(&case, "soakdown check chamber.toml", &answers)).expect("a value");
        for key in [
            "format",
            "program",
            "command",
            "case",
            "case_digest",
            "files",
            "stations",
            "phases",
            "inputs",
            "warnings",
            "cautions",
        ] {
            assert!(document.get(key).is_some(), "no {key}");
        }
        let heating = &document["stations"][0]["heating"];
        for key in ["wall_K", "coefficient_W_m2_K", "gas_temperature_K", "flux_W_m2", "parts"] {
            assert!(heating.get(key).is_some(), "no {key}");
        }
        assert_eq!(document["inputs"][0]["from"], "case");
        assert!(
            document["inputs"]
                .as_array()
                .expect("a list")
                .iter()
                .any(|input| input["value"].is_array())
        );
    }
}
