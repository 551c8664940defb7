//! A case that was read and accepted.

use crate::diagnostics::{Diagnostics, Notice};
use crate::model::{KelvinDifference, Model, Seconds};

/// A case that was read and accepted: the model, and where each of its numbers comes from.
#[derive(Clone, Debug)]
pub struct Case {
    /// The case file, as given.
    pub path: String,
    /// `sha256:` and the hexadecimal digest of the case file's bytes and the settings put on it.
    pub digest: String,
    /// The other files that it reads.
    pub files: Vec<CaseFile>,
    /// What will be run.
    pub model: Model,
    /// How a test's log is read, if \[fit\] says so.
    pub log_format: Option<LogFormat>,
    /// Every input with where it comes from: the case's own, defaults taken, and library values used.
    pub inputs: Vec<Input>,
    /// What to tell with every answer: odd values, assumptions that may decide the answer, sections that no command uses yet.
    pub notices: Vec<Notice>,
    /// Warnings with their places in the text, for the terminal.
    pub doubts: Diagnostics,
}

/// A file read beside the case.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CaseFile {
    /// As the case names it.
    pub path: String,
    /// `sha256:` and the hexadecimal digest of its bytes.
    pub digest: String,
}

/// How a test's log is read.
#[derive(Clone, Debug, PartialEq)]
pub struct LogFormat {
    /// The time column's name; its values are seconds.
    pub time: String,
    /// The log's time at the start of the profile.
    pub offset: Seconds,
    /// Which column is which probe.
    pub columns: Vec<LogColumn>,
}

/// A column of a log.
#[derive(Clone, Debug, PartialEq)]
pub struct LogColumn {
    /// The station, by index.
    pub station: usize,
    /// Its probe, by index.
    pub probe: usize,
    /// The column's name.
    pub column: String,
    /// `degC`, `K`, `degF` or `degR`.
    pub unit: String,
    /// Standard deviation of a reading.
    pub noise: KelvinDifference,
}

/// One input and where it comes from.
#[derive(Clone, Debug, PartialEq)]
pub struct Input {
    /// Keys joined by dots, as `--set` takes them.
    pub path: String,
    /// Its value in SI.
    pub value: InputValue,
    /// Its SI unit; empty for pure numbers, words and switches.
    pub unit: &'static str,
    /// `case`, `default`, `set`, or the source of a built-in value.
    pub from: String,
}

/// The value of an input.
#[derive(Clone, Debug, PartialEq)]
pub enum InputValue {
    /// A number, in SI.
    Number(f64),
    /// A word.
    Word(String),
    /// A switch.
    Switch(bool),
    /// A property against temperature: kelvin and SI value.
    Table(Vec<(f64, f64)>),
}
