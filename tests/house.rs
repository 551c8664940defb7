//! The map of the house, held: who may use whom, and which room a third-party crate belongs to.

use crate::walls::Outcome;
use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

/// Rooms by level: a room may use rooms of lower levels only.
const ROOMS: [(&str, u8); 11] = [
    ("diagnostics", 0),
    ("units", 0),
    ("model", 1),
    ("solve", 1),
    ("heat", 2),
    ("case", 3),
    ("wall", 3),
    ("run", 4),
    ("answers", 5),
    ("report", 6),
    ("cli", 7),
];

/// Crates that any room may use.
const EVERYWHERE: [&str; 4] = ["uom", "serde", "csv", "thiserror"];

/// The one room of every other crate.
const HOMES: [(&str, &str); 14] = [
    ("annotate_snippets", "cli"),
    ("anstream", "cli"),
    ("anstyle", "report"),
    ("clap", "cli"),
    ("clap_complete", "cli"),
    ("clap_mangen", "cli"),
    ("ctrlc", "cli"),
    ("schemars", "report"),
    ("serde_json", "report"),
    ("sha2", "case"),
    ("tempfile", "cli"),
    ("toml", "case"),
    ("strsim", "case"),
    ("textwrap", "report"),
];

fn files(folder: &Path, found: &mut Vec<PathBuf>) -> std::io::Result<()> {
    for entry in std::fs::read_dir(folder)? {
        let path = entry?.path();
        if path.is_dir() {
            files(&path, found)?;
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push(path);
        }
    }
    Ok(())
}

/// The words that follow `start` in a text, those of a braced list included.
fn words_after<'a>(text: &'a str, start: &str) -> Vec<&'a str> {
    let word = |text: &'a str| text.split(|c: char| !(c.is_alphanumeric() || c == '_')).next().unwrap_or("");
    text.match_indices(start)
        .filter(|(at, _)| !text[..*at].ends_with(|c: char| c.is_alphanumeric() || c == '_'))
        .flat_map(|(at, _)| {
            let rest = &text[at + start.len()..];
            match rest.strip_prefix('{') {
                Some(list) => list.split('}').next().unwrap_or("").split(',').map(|entry| word(entry.trim())).collect(),
                None => vec![word(rest)],
            }
        })
        .collect()
}

/// Code without its comments.
fn code(text: &str) -> String {
    text.lines()
        .map(|line| line.split("//").next().unwrap_or(""))
        .collect::<Vec<_>>()
        .join("\n")
}

#[test]
fn every_arrow_points_down() -> Outcome {
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let levels: BTreeMap<&str, u8> = ROOMS.into();
    let mut paths = Vec::new();
    files(&source, &mut paths)?;
    let mut wrong = Vec::new();
    let mut arrows = 0;
    for path in paths {
        let inside = path.strip_prefix(&source)?;
        let Some(room) = inside
            .iter()
            .next()
            .and_then(|first| first.to_str())
            .filter(|first| !first.ends_with(".rs"))
        else {
            continue;
        };
        let Some(level) = levels.get(room) else {
            wrong.push(format!("{}: the room \"{room}\" is not on the map", inside.display()));
            continue;
        };
        let text = code(&std::fs::read_to_string(&path)?);
        for used in words_after(&text, "crate::").into_iter().chain(words_after(&text, "soakdown::")) {
            arrows += 1;
            if let Some(below) = levels.get(used)
                && used != room
                && below >= level
            {
                wrong.push(format!("{} uses {used}", inside.display()));
            }
        }
        for (name, home) in HOMES {
            if room != home && !words_after(&text, &format!("{name}::")).is_empty() && !(name == "anstyle" && room == "cli") {
                wrong.push(format!("{} uses the crate {name}, which belongs to {home}", inside.display()));
            }
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
    assert!(arrows > 100, "only {arrows} arrows were seen: the search is broken");
    Ok(())
}

#[test]
fn every_dependency_has_a_room() -> Outcome {
    let manifest: toml::Table = std::fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("Cargo.toml"))?.parse()?;
    let dependencies = manifest["dependencies"].as_table().ok_or("no dependencies")?;
    for name in dependencies.keys() {
        let name = name.replace('-', "_");
        assert!(
            EVERYWHERE.contains(&name.as_str()) || HOMES.iter().any(|home| home.0 == name),
            "{name} has no room: give it one in this test"
        );
    }
    Ok(())
}
