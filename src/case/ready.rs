//! Ready profiles: phases with named values in them, built in or in a file of one's own.
//!
//! A ready profile is a TOML file with a title, an explanation, its named values with default and meaning, and phases as a case has them, in which
//! `"$name"` stands for a value. There is no arithmetic: a value is put where it is named, and nothing else happens.

use super::checked::{CaseFile, Input};
use super::digest;
use super::findings::Findings;
use super::form::Form;
use super::keys::{self, Expect};
use super::names;
use super::suggest;
use super::tree::{Node, Spot, Table, Value};
use crate::diagnostics::Diagnostic;
use std::path::Path;

macro_rules! burns {
    ($($name:literal),* $(,)?) => {
        &[$(($name, include_str!(concat!("../../profiles/burns/", $name, ".toml")))),*]
    };
}

/// Name and text of every built-in profile, the simplest first.
const BURNS: &[(&str, &str)] = burns![
    "single-burn",
    "burn-hold-burn",
    "pulse-train",
    "duty-cycle",
    "hot-restart",
    "throttled-burn",
    "long-burn",
    "aborted-burn",
];

/// The names of all built-in profiles.
pub(super) fn names() -> impl Iterator<Item = &'static str> + Clone {
    BURNS.iter().map(|burn| burn.0)
}

/// A ready profile as read.
pub(super) struct Ready {
    pub name: String,
    pub title: String,
    pub explanation: String,
    pub values: Vec<NamedValue>,
    /// As written, the names still in it.
    pub phases: Node,
}

/// A value that a ready profile names.
pub(super) struct NamedValue {
    pub name: String,
    pub name_spot: Spot,
    pub default: Node,
    pub meaning: String,
}

/// A ready profile with its values put in.
pub(super) struct Filled {
    /// The phases, in SI.
    pub phases: Node,
    /// What is expected of each named value, where it is used first.
    pub expects: Vec<(String, &'static Expect)>,
}

/// What names a ready profile.
pub(super) struct Wanted<'a> {
    /// Its name, or its path.
    pub text: &'a str,
    /// Where that stands; `None` where it was typed on the command line.
    pub spot: Option<Spot>,
    /// Against what a path counts.
    pub folder: &'a Path,
}

impl Wanted<'_> {
    fn refuse(&self, findings: &mut Findings, found: Diagnostic) {
        match &self.spot {
            Some(spot) => findings.at(spot, found),
            None => findings.nowhere(found),
        }
    }

    fn is_path(&self) -> bool {
        self.text.ends_with(".toml") || self.text.contains(['/', '\\'])
    }
}

/// Reads a ready profile by name or path; a file that is read is added to `files`.
pub(super) fn read(wanted: &Wanted<'_>, findings: &mut Findings, files: &mut Vec<CaseFile>) -> Option<Ready> {
    if wanted.is_path() {
        return read_file(wanted, findings, files);
    }
    let Some((name, text)) = BURNS.iter().find(|burn| burn.0 == wanted.text) else {
        let mut found = Diagnostic::error("unknown-profile", format!("the profile \"{}\" is unknown", wanted.text));
        found.help.extend(suggest::help(wanted.text, names()));
        let found = found.help("soakdown profiles lists them; a file of your own is named by its path, which ends in .toml");
        wanted.refuse(findings, found);
        return None;
    };
    parse(name, &format!("profiles/burns/{name}.toml (built in)"), text, findings)
}

fn read_file(wanted: &Wanted<'_>, findings: &mut Findings, files: &mut Vec<CaseFile>) -> Option<Ready> {
    let path = wanted.folder.join(wanted.text);
    let bytes = match std::fs::read(&path) {
        Ok(bytes) => bytes,
        Err(error) => {
            let mut found = Diagnostic::error("cannot-read", format!("can't read the profile {}: {error}", path.display()));
            if wanted.spot.is_some() {
                found = found.label("paths count from the folder of the case file");
            }
            wanted.refuse(
                findings,
                found.help(format!("built in, by name: {}", names().collect::<Vec<_>>().join(", "))),
            );
            return None;
        }
    };
    let used = CaseFile {
        path: wanted.text.to_owned(),
        digest: digest::of(&[&bytes]),
    };
    if !files.contains(&used) {
        files.push(used);
    }
    let Ok(text) = String::from_utf8(bytes) else {
        wanted.refuse(
            findings,
            Diagnostic::error("not-text", format!("the profile {} is no UTF-8 text", path.display())),
        );
        return None;
    };
    parse(wanted.text, &path.display().to_string(), &text, findings)
}

fn parse(name: &str, source_name: &str, text: &str, findings: &mut Findings) -> Option<Ready> {
    let source = findings.add_source(source_name, text);
    let (mut root, readable) = super::load::read_tree(text, source, findings);
    let before = errors(findings);
    let spot = root.spot.clone();
    let table = match &mut root.value {
        Value::Table(table) => table,
        _ => return None,
    };
    let mut silent = Vec::new();
    let mut form = Form {
        findings,
        inputs: &mut silent,
    };
    // The path is not empty, so that what is unknown is called a key.
    form.section(table, &keys::READY_PROFILE, &spot, "profile");
    let mut values = Vec::new();
    if let Some(node) = table.node("values") {
        values = named_values(node, findings);
    }
    if !readable || errors(findings) > before {
        return None;
    }
    Some(Ready {
        name: name.to_owned(),
        title: table.text("title")?.trim().to_owned(),
        explanation: table.text("explanation")?.split_whitespace().collect::<Vec<_>>().join(" "),
        values,
        phases: table.node("phases")?.clone(),
    })
}

fn errors(findings: &Findings) -> usize {
    let errors = findings.diagnostics.list.iter();
    errors.filter(|found| found.severity == crate::diagnostics::Severity::Error).count()
}

fn named_values(node: &Node, findings: &mut Findings) -> Vec<NamedValue> {
    let due = "a table of names is due: pulse = { default = \"1 s\", meaning = \"length of each pulse\" }";
    let Some(table) = node.table() else {
        findings.at(&node.spot, Diagnostic::error("wrong-type", "this is no table").label(due));
        return Vec::new();
    };
    let mut values = Vec::new();
    for entry in &table.entries {
        let mut inner = entry.node.clone();
        let spot = inner.spot.clone();
        let Value::Table(parts) = &mut inner.value else {
            findings.at(&spot, Diagnostic::error("wrong-type", "this is no named value").label(due));
            continue;
        };
        let mut silent = Vec::new();
        let mut form = Form {
            findings: &mut *findings,
            inputs: &mut silent,
        };
        form.section(parts, &keys::READY_VALUE, &spot, &names::join("values", &entry.key));
        if let (Some(default), Some(meaning)) = (parts.node("default"), parts.text("meaning")) {
            values.push(NamedValue {
                name: entry.key.clone(),
                name_spot: entry.key_spot.clone(),
                default: default.clone(),
                meaning: meaning.to_owned(),
            });
        }
    }
    values
}

/// Puts values into a ready profile: those given, else the defaults; each value is listed as an input.
pub(super) fn fill(ready: &Ready, given: Option<&Node>, findings: &mut Findings, inputs: &mut Vec<Input>) -> Option<Filled> {
    let before = errors(findings);
    let empty = Table::default();
    let given = match given {
        None => &empty,
        Some(Node { value: Value::Bad, .. }) => return None,
        Some(node) => match node.table() {
            Some(table) => table,
            None => {
                let found = Diagnostic::error("wrong-type", "this is no table").label("a table of names and values is due");
                findings.at(&node.spot, found.help(known_values(ready)));
                return None;
            }
        },
    };
    for entry in &given.entries {
        if !ready.values.iter().any(|value| value.name == entry.key) {
            let message = format!("the profile \"{}\" has no value \"{}\"", ready.name, entry.key);
            let mut found = Diagnostic::error("unknown-value", message);
            found
                .help
                .extend(suggest::nearest(&entry.key, ready.values.iter().map(|value| value.name.as_str())).map(suggest::did_you_mean));
            findings.at(&entry.key_spot, found.help(known_values(ready)));
        }
    }
    let mut filling = Filling {
        ready,
        given,
        findings,
        inputs,
        done: Vec::new(),
    };
    let mut phases = ready.phases.clone();
    filling.phases(&mut phases);
    let done = filling.done;
    for value in ready.values.iter().filter(|value| !done.iter().any(|done| done.name == value.name)) {
        let message = format!("the value \"{}\" is used by no phase", value.name);
        let label = format!("named as \"${}\" inside the phases, or taken out", value.name);
        findings.at(&value.name_spot, Diagnostic::error("unused-value", message).label(label));
    }
    let mut silent = Vec::new();
    let mut form = Form {
        findings,
        inputs: &mut silent,
    };
    form.node(&mut phases, &keys::PHASES_LIST, "profile.phases");
    let mut expects: Vec<(String, &'static Expect)> = Vec::new();
    for one in done {
        if !expects.iter().any(|known| known.0 == one.name) {
            expects.push((one.name, one.expect));
        }
    }
    (errors(findings) == before).then_some(Filled { phases, expects })
}

fn known_values(ready: &Ready) -> String {
    let names: Vec<_> = ready.values.iter().map(|value| value.name.as_str()).collect();
    format!("its values: {}", names.join(", "))
}

/// A value put where one kind of thing is expected.
struct Done {
    name: String,
    expect: &'static Expect,
    node: Node,
}

struct Filling<'a> {
    ready: &'a Ready,
    given: &'a Table,
    findings: &'a mut Findings,
    inputs: &'a mut Vec<Input>,
    done: Vec<Done>,
}

impl Filling<'_> {
    fn phases(&mut self, list: &mut Node) {
        let Value::List(items) = &mut list.value else { return };
        for item in items {
            let Value::Table(table) = &mut item.value else { continue };
            for entry in &mut table.entries {
                if entry.key == "phases" {
                    self.phases(&mut entry.node);
                    continue;
                }
                let Some(name) = entry.node.text().and_then(|text| text.strip_prefix('$')).map(str::to_owned) else {
                    continue;
                };
                entry.node = match keys::phase_expect(&entry.key) {
                    Some(expect) => self.value(&name, &entry.node, expect),
                    // The form says that the key is unknown.
                    None => bad(&entry.node.spot),
                };
            }
        }
    }

    /// A named value where this is expected.
    fn value(&mut self, name: &str, at: &Node, expect: &'static Expect) -> Node {
        if let Some(done) = self.done.iter().find(|done| done.name == name && std::ptr::eq(done.expect, expect)) {
            return done.node.clone();
        }
        let Some(known) = self.ready.values.iter().find(|value| value.name == name) else {
            let mut found = Diagnostic::error("unknown-value", format!("\"${name}\" is no value of this profile"));
            found
                .help
                .extend(suggest::help(name, self.ready.values.iter().map(|value| value.name.as_str())));
            self.findings
                .at(&at.words(), found.help("values stand in the table values, with default and meaning"));
            return bad(&at.spot);
        };
        let given = self.given.node(name);
        let mut node = given.unwrap_or(&known.default).clone();
        let first = !self.done.iter().any(|done| done.name == name);
        let mut listed = Vec::new();
        let mut form = Form {
            findings: &mut *self.findings,
            inputs: &mut listed,
        };
        form.node(&mut node, expect, &names::join("profile.values", name));
        if first {
            self.inputs.extend(listed.into_iter().map(|input| Input {
                from: if given.is_some() { input.from } else { "default".to_owned() },
                ..input
            }));
        }
        self.done.push(Done {
            name: name.to_owned(),
            expect,
            node: node.clone(),
        });
        node
    }
}

/// A value of which the mistake is told already.
fn bad(spot: &Spot) -> Node {
    Node {
        spot: spot.clone(),
        value: Value::Bad,
        text_range: None,
    }
}
