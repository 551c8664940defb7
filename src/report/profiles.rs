//! `soakdown-profiles/1`: ready profiles as JSON.

use super::PROGRAM;
use super::check::{PhaseRow, ValueCell};
use crate::answers;
use crate::case::{ReadyProfile, ReadyValue};
use serde::Serialize;

/// Ready profiles with their values, explanation and phases.
#[derive(Debug, Serialize)]
pub struct ProfilesDocument<'a> {
    format: &'static str,
    program: &'static str,
    command: &'a str,
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

#[derive(Debug, Serialize)]
struct ProfileRow<'a> {
    name: &'a str,
    title: &'a str,
    explanation: &'a str,
    values: Vec<ValueRow<'a>>,
    /// With the names in them.
    written: &'a str,
    /// With the defaults.
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

#[derive(Debug, Serialize)]
struct ValueRow<'a> {
    name: &'a str,
    /// As a case would have it, without quotes.
    default: &'a str,
    value: ValueCell<'a>,
    unit: &'a str,
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
