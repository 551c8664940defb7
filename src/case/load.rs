//! From a path to a checked case.

use super::checked::{Case, Input};
use super::findings::Findings;
use super::form::Form;
use super::keys::CASE;
use super::lower::{self, Lowering};
use super::tree::{Node, Spot, Table, Value};
use super::{digest, settings};
use crate::diagnostics::{Diagnostic, Diagnostics};
use std::path::Path;
use toml::de::DeTable;

/// Reads a case file, applies settings (`PATH=VALUE`, later ones win) and checks everything.
///
/// # Errors
/// With every mistake found, each at its place.
pub fn load(path: &Path, settings: &[String]) -> Result<Case, Diagnostics> {
    let mut findings = Findings::default();
    let name = path.display().to_string();
    let refuse = |mut findings: Findings| {
        findings.forgive_misspelt();
        findings.sort();
        Err(findings.diagnostics)
    };
    let bytes = match std::fs::read(path) {
        Ok(bytes) => bytes,
        Err(error) => {
            findings.nowhere(Diagnostic::error("cannot-read", format!("can't read the case file {name}: {error}")));
            return refuse(findings);
        }
    };
    let parts: Vec<&[u8]> = std::iter::once(bytes.as_slice()).chain(settings.iter().map(String::as_bytes)).collect();
    let digest = digest::of(&parts);
    let text = match String::from_utf8(bytes) {
        Ok(text) => text,
        Err(error) => {
            let at = error.utf8_error().valid_up_to();
            let message = format!("the case file {name} is no UTF-8 text: byte {at} and on can't be read");
            findings.nowhere(Diagnostic::error("not-text", message));
            return refuse(findings);
        }
    };
    let source = findings.add_source(name.clone(), text.clone());
    let (mut root, readable) = read_tree(&text, source, &mut findings);
    for setting in settings {
        settings::apply(&mut root, setting, &mut findings);
    }
    let mut inputs = Vec::new();
    let spot = root.spot.clone();
    if let Value::Table(table) = &mut root.value {
        let mut form = Form {
            findings: &mut findings,
            inputs: &mut inputs,
        };
        form.section(table, &CASE, &spot, "");
    }
    if !readable {
        // What could not be read as TOML may hold what now seems to be missing, and what other parts refer to.
        findings
            .diagnostics
            .list
            .retain(|found| !matches!(found.code, "missing-key" | "missing-section"));
        keep_away_from_syntax_errors(&mut findings, &text);
        return refuse(findings);
    }
    let mut files = Vec::new();
    let lowering = Lowering {
        findings: &mut findings,
        inputs: &mut inputs,
        folder: path.parent().unwrap_or(Path::new("")),
        files: &mut files,
    };
    let model = lower::lower(&root, lowering);
    let Some((model, log_format)) = model.filter(|_| !findings.diagnostics.has_errors()) else {
        if !findings.diagnostics.has_errors() {
            let message = "the case can't be built, and no reason was found: this is a fault of the program";
            findings.nowhere(Diagnostic::error("not-accepted", message));
        }
        return refuse(findings);
    };
    findings.sort();
    sort_inputs(&mut inputs);
    Ok(Case {
        path: name,
        digest,
        files,
        model,
        log_format,
        inputs,
        notices: findings.notices,
        doubts: findings.diagnostics,
    })
}

/// The tree of a text, and whether the text is sound TOML; where it is not, the mistakes are reported and the tree holds what could be read.
pub(super) fn read_tree(text: &str, source: usize, findings: &mut Findings) -> (Node, bool) {
    let (table, errors) = DeTable::parse_recoverable(text);
    for error in &errors {
        let mut range = error.span().unwrap_or(0..0);
        range.end = range.end.min(text.len());
        range.start = range.start.min(range.end);
        let mut found = Diagnostic::error("syntax", format!("this can't be read as TOML: {}", error.message()));
        if error.message().contains("quoted") {
            found = found.help("quantities and names stand in quotes: burn = \"2 s\"");
        }
        findings.at(&Spot { source, range }, found);
    }
    let root = Node {
        spot: Spot { source, range: 0..0 },
        value: Value::Table(Table::of(table.get_ref(), source, text)),
        text_range: None,
    };
    (root, errors.is_empty())
}

/// Takes out what was found on a line that can't be read as TOML anyway.
fn keep_away_from_syntax_errors(findings: &mut Findings, text: &str) {
    let line = |byte: usize| text.as_bytes().iter().take(byte).filter(|letter| **letter == b'\n').count();
    let list = &mut findings.diagnostics.list;
    let broken: Vec<_> = list
        .iter()
        .filter(|found| found.code == "syntax")
        .filter_map(|found| found.place.as_ref())
        .filter(|place| place.0 == 0)
        .flat_map(|place| [line(place.1.start), line(place.1.end)])
        .collect();
    list.retain(|found| match &found.place {
        Some((0, range)) if found.code != "syntax" => !broken.contains(&line(range.start)),
        _ => true,
    });
}

/// In the order of the sections of the case file, the parts of each station and material together; otherwise as found.
fn sort_inputs(inputs: &mut Vec<Input>) {
    let section = |input: &Input| {
        let first = input.path.split('.').next().unwrap_or_default().to_owned();
        CASE.names().position(|name| name == first).unwrap_or(usize::MAX)
    };
    let mut members: Vec<String> = Vec::new();
    let mut keyed: Vec<_> = inputs
        .drain(..)
        .map(|input| {
            let member = super::paths::split(&input.path)
                .ok()
                .and_then(|segments| segments.into_iter().nth(1))
                .map(|segment| segment.name);
            let member = member.unwrap_or_default();
            let place = members.iter().position(|known| *known == member).unwrap_or_else(|| {
                members.push(member);
                members.len() - 1
            });
            let grouped = matches!(input.path.split('.').next(), Some("station" | "material" | "wait" | "variant"));
            ((section(&input), if grouped { place } else { 0 }), input)
        })
        .collect();
    keyed.sort_by_key(|pair| pair.0);
    inputs.extend(keyed.into_iter().map(|pair| pair.1));
}
