//! What is built in and may be listed: ready profiles and starter cases.

use super::checked::InputValue;
use super::findings::Findings;
use super::lower::Lowering;
use super::ready::{self, Ready, Wanted};
use super::tree::{Node, Value};
use crate::diagnostics::Diagnostics;
use crate::model::Profile;
use std::path::Path;

/// A ready profile with its default values.
#[derive(Clone, Debug)]
pub struct ReadyProfile {
    /// Its name, or the path it was asked by.
    pub name: String,
    /// In a few words.
    pub title: String,
    /// What it stands for, in one paragraph.
    pub explanation: String,
    /// What may be given in `values`, in the order of the file.
    pub values: Vec<ReadyValue>,
    /// The phases as the file has them, with `$name` where a value goes.
    pub written: String,
    /// The phases with the defaults.
    pub profile: Profile,
    /// The whole file.
    pub file: String,
}

/// A named value of a ready profile.
#[derive(Clone, Debug, PartialEq)]
pub struct ReadyValue {
    /// Its name.
    pub name: String,
    /// The default as the file has it, in quotes where it has a unit.
    pub default: String,
    /// The default in SI.
    pub value: InputValue,
    /// Its SI unit; empty for pure numbers and switches.
    pub unit: &'static str,
    /// What it is.
    pub meaning: String,
}

/// All built-in profiles, the simplest first.
///
/// # Errors
/// When one of them is not sound, which is a fault of the program.
pub fn ready_profiles() -> Result<Vec<ReadyProfile>, Diagnostics> {
    ready::names().map(ready_profile).collect()
}

/// A ready profile by its built-in name, or by its path.
///
/// # Errors
/// When there is none, or it is not sound.
pub fn ready_profile(name: &str) -> Result<ReadyProfile, Diagnostics> {
    let mut findings = Findings::default();
    let profile = open(name, &mut findings);
    profile.filter(|_| !findings.diagnostics.has_errors()).ok_or(findings.diagnostics)
}

fn open(name: &str, findings: &mut Findings) -> Option<ReadyProfile> {
    let folder = Path::new("");
    let wanted = Wanted {
        text: name,
        spot: None,
        folder,
    };
    let mut files = Vec::new();
    let ready = ready::read(&wanted, findings, &mut files)?;
    let mut inputs = Vec::new();
    let filled = ready::fill(&ready, None, findings, &mut inputs)?;
    let mut more = Vec::new();
    let mut lowering = Lowering {
        findings,
        inputs: &mut more,
        folder,
        files: &mut files,
    };
    let profile = lowering.written_out(&filled.phases, filled.expects)?.profile;
    let Ready {
        name,
        title,
        explanation,
        values,
        phases,
    } = ready;
    let values = values.into_iter().map(|value| {
        let path = super::names::join("profile.values", &value.name);
        let input = inputs.iter().find(|input| input.path == path)?;
        Some(ReadyValue {
            default: written(&value.default, findings),
            name: value.name,
            value: input.value.clone(),
            unit: input.unit,
            meaning: value.meaning,
        })
    });
    Some(ReadyProfile {
        values: values.collect::<Option<_>>()?,
        written: phases_as_written(&phases, findings),
        file: findings.diagnostics.sources.get(phases.spot.source)?.text.clone(),
        name,
        title,
        explanation,
        profile,
    })
}

fn written(node: &Node, findings: &Findings) -> String {
    let source = findings.diagnostics.sources.get(node.spot.source);
    let text = source.and_then(|source| source.text.get(node.spot.range.clone()));
    text.unwrap_or_default().to_owned()
}

/// The list of phases as a case would have it.
fn phases_as_written(phases: &Node, findings: &Findings) -> String {
    match phases.value {
        Value::List(_) => format!("phases = {}", written(phases, findings)),
        _ => String::new(),
    }
}

/// A commented case to start from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Starter {
    /// How it is asked for.
    pub kind: &'static str,
    /// What it is, in a line.
    pub about: &'static str,
    text: &'static str,
}

/// Stands in the shipped text for the case file's own name.
const OWN_NAME: &str = "CASE.toml";

impl Starter {
    /// The case file's text; `name` as a person would type it after `soakdown run`.
    pub fn text(&self, name: &str) -> String {
        self.text.replace(OWN_NAME, name)
    }
}

macro_rules! starters {
    ($($kind:literal: $about:literal,)*) => {
        &[$(Starter { kind: $kind, about: $about, text: include_str!(concat!("../../profiles/starters/", $kind, ".toml")) }),*]
    };
}

/// All starter cases, the simplest first.
pub const STARTERS: &[Starter] = starters![
    "bare-plate": "a steel plate, mount or flame bucket: one layer, one burn, one wait",
    "heat-sink-chamber": "a coated copper chamber in a steel jacket that soaks up a short firing, then a purge",
    "insulated-extension": "a hot skin, a blanket and a bonded shell; the bond line peaks after shutdown",
    "deck-plate": "painted steel in the open and in the sun, washed by exhaust; people on it afterwards",
    "pulse-thruster": "pulses in vacuum from a ready profile; a radiation shield across a gap",
    "logged-coupon": "a coupon with thermocouples under a known flux, to put a test's log beside the run",
];
