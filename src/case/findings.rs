//! Collects what is found on the way from text to model.

use super::suggest;
use super::tree::Spot;
use crate::diagnostics::{Diagnostic, Diagnostics, Notice, Severity, SourceText};

/// Everything found so far, and the texts it points into.
#[derive(Debug, Default)]
pub(super) struct Findings {
    pub diagnostics: Diagnostics,
    pub notices: Vec<Notice>,
}

/// The name under which settings of the command line appear among the sources.
pub(super) const SETTING: &str = "--set";

impl Findings {
    /// Adds a text to point into.
    pub fn add_source(&mut self, name: impl Into<String>, text: impl Into<String>) -> usize {
        self.diagnostics.sources.push(SourceText {
            name: name.into(),
            text: text.into(),
        });
        self.diagnostics.sources.len() - 1
    }

    /// Something found at a place.
    pub fn at(&mut self, spot: &Spot, found: Diagnostic) {
        self.diagnostics.list.push(found.at(spot.source, spot.range.clone()));
    }

    /// Something found for which no characters are to blame.
    pub fn nowhere(&mut self, found: Diagnostic) {
        self.diagnostics.list.push(found);
    }

    /// What every answer should tell.
    pub fn notice(&mut self, code: &'static str, text: impl Into<String>, station: Option<&str>, place: Option<&str>) {
        let notice = Notice {
            code,
            text: text.into(),
            station: station.map(str::to_owned),
            place: place.map(str::to_owned),
        };
        if !self.notices.contains(&notice) {
            self.notices.push(notice);
        }
    }

    /// Odd but possible: shown at its place, and told with every answer.
    pub fn doubt(&mut self, spot: &Spot, found: Diagnostic) {
        let text = if found.label.is_empty() {
            found.message.clone()
        } else {
            format!("{}: {}", found.message, found.label)
        };
        self.notice(found.code, text, None, None);
        self.at(
            spot,
            Diagnostic {
                severity: Severity::Warning,
                ..found
            },
        );
    }

    /// Where to say that something is missing: an inline table is pointed at by its brace, as underlining all of it says nothing.
    pub fn head(&self, spot: &Spot) -> Spot {
        let text = self.diagnostics.sources.get(spot.source).map_or("", |source| source.text.as_str());
        let mut head = spot.clone();
        if text.get(spot.range.clone()).is_some_and(|written| written.starts_with('{')) {
            head.range.end = head.range.start + 1;
        }
        head
    }

    /// Where a value with this spot comes from.
    pub fn origin(&self, spot: &Spot) -> &'static str {
        match self.diagnostics.sources.get(spot.source) {
            Some(source) if source.name == SETTING => "set",
            _ => "case",
        }
    }

    /// A key that is missing because it is misspelt is reported once, where it is misspelt.
    pub fn forgive_misspelt(&mut self) {
        let list = &mut self.diagnostics.list;
        let misspelt = |found: &Diagnostic| matches!(found.code, "unknown-key" | "unknown-section");
        let meant: Vec<String> = list.iter().filter(|found| misspelt(found)).flat_map(|found| found.help.clone()).collect();
        list.retain(|found| {
            let missing = matches!(found.code, "missing-key" | "missing-section");
            let key = found.message.split('"').nth(1).unwrap_or_default();
            !(missing && meant.contains(&suggest::did_you_mean(key)))
        });
    }

    /// In the order of the texts and of the places in them; those without a place first.
    pub fn sort(&mut self) {
        self.diagnostics
            .list
            .sort_by_key(|found| found.place.as_ref().map(|(source, range)| (*source, range.start, range.end)));
    }
}
