//! `soakdown-check/1`: what a case says, as JSON.

use super::PROGRAM;
use super::cautions::cautions_of_case;
use super::result::{CautionRow, FileRow, WarningRow, file_rows, warning_rows};
use crate::answers::{CheckAnswers, HeatingCheck, PhaseCheck, StationCheck};
use crate::case::{Case, Input, InputValue};
use serde::Serialize;

/// `check.json`.
#[derive(Debug, Serialize)]
pub struct CheckDocument<'a> {
    format: &'static str,
    program: &'static str,
    command: &'a str,
    case: &'a str,
    case_digest: &'a str,
    files: Vec<FileRow<'a>>,
    stations: Vec<StationRow<'a>>,
    phases: Vec<PhaseRow>,
    inputs: Vec<InputRow<'a>>,
    warnings: Vec<WarningRow>,
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

#[derive(Debug, Serialize)]
struct StationRow<'a> {
    name: &'a str,
    nodes: usize,
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

#[derive(Debug, Serialize)]
struct HeatingRow {
    #[serde(rename = "wall_K")]
    wall: f64,
    #[serde(rename = "coefficient_W_m2_K")]
    coefficient: Option<f64>,
    #[serde(rename = "gas_temperature_K")]
    gas_temperature: Option<f64>,
    #[serde(rename = "flux_W_m2")]
    flux: f64,
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

#[derive(Debug, Serialize)]
struct PartRow {
    name: &'static str,
    #[serde(rename = "flux_W_m2")]
    flux: f64,
}

#[derive(Debug, Serialize)]
pub(super) struct PhaseRow {
    kind: &'static str,
    start_s: f64,
    duration_s: f64,
    level: f64,
    ramp_s: f64,
    tail_s: f64,
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

#[derive(Debug, Serialize)]
struct InputRow<'a> {
    path: &'a str,
    value: ValueCell<'a>,
    unit: &'a str,
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

#[derive(Debug, Serialize)]
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
