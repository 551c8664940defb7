//! `soakdown-profiles/1`: ready profiles as JSON.

use super::PROGRAM;
use super::check::{PhaseRow, ValueCell};
use crate::answers;
use crate::case::{ReadyProfile, ReadyValue};
use schemars::JsonSchema;
use serde::Serialize;

/// Ready profiles with their values, explanation and phases.
#[derive(Debug, Serialize, JsonSchema)]
pub struct ProfilesDocument<'a> {
    /// Name and version of this document.
    #[schemars(extend("const" = "soakdown-profiles/1"))]
    format: &'static str,
    /// Name and version of the program.
    program: &'static str,
    /// The command as it would be typed again.
    command: &'a str,
    /// The profiles asked for, the simplest first.
    profiles: Vec<ProfileRow<'a>>,
}

impl<'a> ProfilesDocument<'a> {
    /// The document of these profiles; `command` as it would be typed again.
    pub fn new(command: &'a str, profiles: &'a [ReadyProfile]) -> Self {
        Self {
            format: "soakdown-profiles/1",
            program: PROGRAM,
            command,
            profiles: profiles.iter().map(ProfileRow::new).collect(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct ProfileRow<'a> {
    /// Its name, or the path it was asked by.
    name: &'a str,
    /// In a few words.
    title: &'a str,
    /// What it stands for.
    explanation: &'a str,
    /// What may be given in values.
    values: Vec<ValueRow<'a>>,
    /// The phases as the file has them, with the names of the values in them.
    written: &'a str,
    /// The phases with the defaults.
    phases: Vec<PhaseRow>,
}

impl<'a> ProfileRow<'a> {
    fn new(profile: &'a ReadyProfile) -> Self {
        Self {
            name: &profile.name,
            title: &profile.title,
            explanation: &profile.explanation,
            values: profile.values.iter().map(ValueRow::new).collect(),
            written: &profile.written,
            phases: answers::phases(&profile.profile).iter().map(PhaseRow::new).collect(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
#[schemars(rename = "ProfileValueRow")]
struct ValueRow<'a> {
    /// Its name.
    name: &'a str,
    /// As a case would have it, without quotes.
    default: &'a str,
    /// The default: a number in SI, a word or a switch.
    value: ValueCell<'a>,
    /// SI unit; empty for pure numbers, words and switches.
    unit: &'a str,
    /// What it is.
    meaning: &'a str,
}

impl<'a> ValueRow<'a> {
    fn new(value: &'a ReadyValue) -> Self {
        Self {
            name: &value.name,
            default: value.default.trim_matches(['"', '\'']),
            value: ValueCell::new(&value.value),
            unit: value.unit,
            meaning: &value.meaning,
        }
    }
}
