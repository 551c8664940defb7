//! Settings of the command line: `PATH=VALUE` put on the tree before it is checked, so that a set value meets the same rules as a written one.

use super::findings::{Findings, SETTING};
use super::keys::Expect;
use super::paths::{self, PathError};
use super::tree::{Node, Spot, Table, Value};
use crate::diagnostics::Diagnostic;
use toml::de::DeTable;

/// Puts one setting on the tree, or says why it can't be put there.
pub(super) fn apply(root: &mut Node, setting: &str, findings: &mut Findings) {
    let source = findings.add_source(SETTING, setting);
    let whole = Spot {
        source,
        range: 0..setting.len(),
    };
    let Some(equals) = equals_sign(setting) else {
        let found = Diagnostic::error("bad-setting", "a setting is written PATH=VALUE").label("no = sign after the path");
        return findings.at(&whole, found.help("as in --set station.throat.layers.liner.thickness=\"9 mm\""));
    };
    let fail = |findings: &mut Findings, error: PathError| {
        findings.at(
            &Spot {
                source,
                range: error.range.clone(),
            },
            path_mistake(error),
        )
    };
    let segments = match paths::split(&setting[..equals]) {
        Ok(segments) => segments,
        Err(error) => return fail(findings, error),
    };
    let targets = match paths::resolve(root, &segments) {
        Ok(targets) => targets,
        Err(error) => return fail(findings, error),
    };
    let spots: Vec<_> = segments
        .iter()
        .map(|segment| Spot {
            source,
            range: segment.range.clone(),
        })
        .collect();
    for target in &targets {
        if let Some(value) = read_value(setting, equals + 1, target.expect, source, findings) {
            paths::put(root, target, &spots, &value);
        }
    }
}

/// A path that names nothing, its place still to be said.
pub(super) fn path_mistake(error: PathError) -> Diagnostic {
    let mut found = Diagnostic::error("unknown-path", error.message).label("this path names nothing in the case");
    found.help.extend(error.help);
    found.help("soakdown check CASE lists every input with its path")
}

/// The = sign that ends the path: the first one outside quotes.
fn equals_sign(setting: &str) -> Option<usize> {
    let mut quote = None;
    for (index, letter) in setting.char_indices() {
        match (quote, letter) {
            (None, '=') => return Some(index),
            (None, '"' | '\'') => quote = Some(letter),
            (Some(open), _) if open == letter => quote = None,
            _ => {}
        }
    }
    None
}

/// The value, read as its key expects: TOML where it looks like it, a bare number or switch where one is due, else text.
fn read_value(setting: &str, start: usize, expect: &Expect, source: usize, findings: &mut Findings) -> Option<Node> {
    let written = &setting[start..];
    let start = start + (written.len() - written.trim_start().len());
    let text = written.trim();
    let spot = Spot {
        source,
        range: start..start + text.len(),
    };
    if text.is_empty() {
        findings.at(
            &Spot {
                source,
                range: 0..setting.len(),
            },
            Diagnostic::error("bad-setting", "the value is missing").label("nothing after the = sign"),
        );
        return None;
    }
    if text.starts_with(['"', '\'', '[', '{']) {
        return read_toml(text, &spot, setting, findings);
    }
    let value = if !takes_bare(expect) {
        Value::Text(text.to_owned())
    } else if let Ok(number) = text.parse::<i128>() {
        Value::Integer(number)
    } else if let Ok(number) = text.parse::<f64>() {
        Value::Float(number)
    } else if let Ok(switch) = text.parse::<bool>() {
        Value::Switch(switch)
    } else {
        Value::Text(text.to_owned())
    };
    let text_range = matches!(value, Value::Text(_)).then(|| spot.range.clone());
    Some(Node { spot, value, text_range })
}

/// Whether a bare number or switch may stand there.
fn takes_bare(expect: &Expect) -> bool {
    match expect {
        Expect::Number(_) | Expect::Whole(..) | Expect::Version | Expect::Switch | Expect::Free | Expect::FreeTable => true,
        Expect::Property(kind, _) => kind.si().is_empty(),
        Expect::OneOf(choices) => choices.iter().any(takes_bare),
        _ => false,
    }
}

fn read_toml(text: &str, spot: &Spot, setting: &str, findings: &mut Findings) -> Option<Node> {
    // A document of one key whose value stands where it stands in the setting, so that places agree. There is always room: at least a path and
    // the = sign stand before the value.
    let document = format!("v{}={text}", " ".repeat(spot.range.start.saturating_sub(2)));
    let (table, errors) = DeTable::parse_recoverable(&document);
    let table = Table::of(table.get_ref(), spot.source, &document);
    if let Some(error) = errors.first() {
        let place = error.span().filter(|span| span.end <= setting.len() && span.start >= spot.range.start);
        let place = place.filter(|span| setting.get(span.clone()).is_some_and(|part| !part.is_empty()));
        let spot = Spot {
            source: spot.source,
            range: place.unwrap_or_else(|| spot.range.clone()),
        };
        findings.at(
            &spot,
            Diagnostic::error("syntax", error.message().to_owned()).label("not readable as TOML"),
        );
        return None;
    }
    let mut entries = table.entries.into_iter();
    match (entries.next(), entries.next()) {
        (Some(entry), None) => Some(entry.node),
        _ => {
            findings.at(spot, Diagnostic::error("bad-setting", "more than one value is given"));
            None
        }
    }
}
