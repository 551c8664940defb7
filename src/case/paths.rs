//! Paths: keys and names joined by dots, as settings, variants, spreads and fits write them.

use super::form::member;
use super::keys::{CASE, Expect, Section};
use super::library;
use super::suggest;
use super::tree::{Entry, Node, Spot, Table, Value};
use std::ops::Range;

/// One part of a path, and its characters.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Segment {
    pub name: String,
    /// Byte range in the path.
    pub range: Range<usize>,
}

/// What a path leads to: the steps from the root, and what is expected there.
#[derive(Clone, Debug)]
pub(super) struct Target {
    pub steps: Vec<Step>,
    pub expect: &'static Expect,
}

#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) enum Step {
    Key(String),
    Item(usize),
}

/// A path that names nothing.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct PathError {
    /// Byte range in the path.
    pub range: Range<usize>,
    pub message: String,
    pub help: Option<String>,
}

static ROOT: Expect = Expect::Section(&CASE);
static FREE: Expect = Expect::Free;

/// Takes a path apart.
pub(super) fn split(path: &str) -> Result<Vec<Segment>, PathError> {
    let fault = |range: Range<usize>, message: &str| {
        Err(PathError {
            range,
            message: message.to_owned(),
            help: Some("a path is written as in station.throat.layers.liner.thickness".to_owned()),
        })
    };
    let mut segments = Vec::new();
    let mut rest = 0;
    loop {
        let start = rest + (path[rest..].len() - path[rest..].trim_start().len());
        let (name, end) = match path[start..].chars().next() {
            Some(quote @ ('"' | '\'')) => {
                let mut name = String::new();
                let mut letters = path[start + 1..].char_indices();
                let end = loop {
                    match letters.next() {
                        None => return fault(start..path.len(), "the quotes in this path are not closed"),
                        Some((offset, letter)) if letter == quote => break start + 1 + offset + 1,
                        Some((_, '\\')) if quote == '"' => name.extend(letters.next().map(|escaped| escaped.1)),
                        Some((_, letter)) => name.push(letter),
                    }
                };
                (name, end)
            }
            _ => {
                let end = path[start..].find('.').map_or(path.len(), |length| start + length);
                (path[start..end].trim().to_owned(), end)
            }
        };
        if name.is_empty() {
            return fault(if start < end { start..end } else { 0..path.len() }, "a part of this path is empty");
        }
        segments.push(Segment { name, range: start..end });
        let after = path[end..].trim_start();
        rest = path.len() - after.len();
        if after.is_empty() {
            return Ok(segments);
        }
        if !after.starts_with('.') {
            return fault(rest..path.len(), "after the quotes a dot is due");
        }
        rest += 1;
    }
}

/// Where a path leads to; several places where it holds a `*`.
pub(super) fn resolve(root: &Node, segments: &[Segment]) -> Result<Vec<Target>, PathError> {
    let mut found = Vec::new();
    walk(Some(root), &ROOT, segments, &mut Vec::new(), &mut found)?;
    Ok(found)
}

/// The value that a target has now.
pub(super) fn value<'a>(root: &'a Node, target: &Target) -> Option<&'a Node> {
    target.steps.iter().try_fold(root, |node, step| match step {
        Step::Key(key) => node.table()?.node(key),
        Step::Item(index) => node.list()?.get(*index),
    })
}

fn walk(node: Option<&Node>, expect: &'static Expect, segments: &[Segment], steps: &mut Vec<Step>, found: &mut Vec<Target>) -> Result<(), PathError> {
    let Some((segment, rest)) = segments.split_first() else {
        found.push(Target {
            steps: steps.clone(),
            expect,
        });
        return Ok(());
    };
    let mut next = |step: Step, node: Option<&Node>, expect: &'static Expect| {
        steps.push(step);
        let result = walk(node, expect, rest, steps, found);
        steps.pop();
        result
    };
    let key = || Step::Key(segment.name.clone());
    match expect {
        Expect::Section(section) => {
            let Some(known) = section.key(&segment.name) else {
                return Err(unknown(
                    segment,
                    &format!("no \"{}\" in {}", segment.name, section.title),
                    section.names(),
                ));
            };
            let inner = table_of(node, segment)?.and_then(|table| table.node(&segment.name));
            next(key(), inner, &known.expect)
        }
        Expect::Sections(section) => {
            let items = node.and_then(Node::list).unwrap_or_default();
            let names: Vec<_> = items
                .iter()
                .enumerate()
                .map(|(index, item)| member(item, section, index, items.len() == 1))
                .collect();
            if segment.name == "*" && !items.is_empty() {
                return items
                    .iter()
                    .enumerate()
                    .try_for_each(|(index, item)| next(Step::Item(index), Some(item), section_of(expect, section)));
            }
            // One more phase after the last may exist; a named member may not, as nobody has named it.
            if !section.is_named() && segment.name == items.len().to_string() {
                return next(Step::Item(items.len()), None, section_of(expect, section));
            }
            match names.iter().position(|name| *name == segment.name) {
                Some(index) => next(Step::Item(index), items.get(index), section_of(expect, section)),
                None => Err(unknown(
                    segment,
                    &format!(
                        "no {} is called \"{}\"",
                        section.title.trim_start_matches("an ").trim_start_matches("a "),
                        segment.name
                    ),
                    names.iter().map(String::as_str),
                )),
            }
        }
        Expect::Named(_) => {
            let table = table_of(node, segment)?;
            let inner = table.and_then(|table| table.node(&segment.name));
            if inner.is_none() && !library::has(&segment.name) {
                let own = table.into_iter().flat_map(|table| table.entries.iter().map(|entry| entry.key.as_str()));
                let message = format!("no material is called \"{}\"", segment.name);
                return Err(unknown(segment, &message, own.chain(library::names().map(|name| -> &str { name }))));
            }
            next(key(), inner, &MATERIAL)
        }
        Expect::OneOf(choices) => match choices.iter().find(|choice| matches!(choice, Expect::Section(_))) {
            Some(choice) => walk(node, choice, segments, steps, found),
            None => Err(no_parts(segment)),
        },
        Expect::List(item) => match (segment.name.parse::<usize>(), node.and_then(Node::list)) {
            (Ok(index), Some(items)) if index < items.len() => next(Step::Item(index), items.get(index), item),
            _ => Err(no_parts(segment)),
        },
        Expect::Free | Expect::FreeTable => {
            let inner = table_of(node, segment)?.and_then(|table| table.node(&segment.name));
            next(key(), inner, &FREE)
        }
        _ => Err(no_parts(segment)),
    }
}

static MATERIAL: Expect = Expect::Section(&super::keys::MATERIAL);

/// The expectation of one member of a list of tables.
fn section_of(list: &'static Expect, section: &'static Section) -> &'static Expect {
    super::keys::MEMBERS
        .iter()
        .find(|member| matches!(member, Expect::Section(inner) if std::ptr::eq(*inner, section)))
        .unwrap_or(list)
}

fn table_of<'a>(node: Option<&'a Node>, segment: &Segment) -> Result<Option<&'a Table>, PathError> {
    match node {
        // What is wrong with a bad value is reported already.
        None | Some(Node { value: Value::Bad, .. }) => Ok(None),
        Some(Node {
            value: Value::Table(table), ..
        }) => Ok(Some(table)),
        Some(_) => Err(PathError {
            range: segment.range.clone(),
            message: format!("there is a value in this case, not a table with a \"{}\"", segment.name),
            help: Some("set it whole, as in PATH={ … }".to_owned()),
        }),
    }
}

fn unknown<'a>(segment: &Segment, message: &str, known: impl Iterator<Item = &'a str>) -> PathError {
    PathError {
        range: segment.range.clone(),
        message: message.to_owned(),
        help: suggest::help(&segment.name, known),
    }
}

fn no_parts(segment: &Segment) -> PathError {
    PathError {
        range: segment.range.clone(),
        message: format!("what stands before \"{}\" is a value and has no parts", segment.name),
        help: None,
    }
}

/// Puts a value at a target; keys that may exist but are absent are created, with the given places.
pub(super) fn put(root: &mut Node, target: &Target, spots: &[Spot], value: &Node) {
    let mut node = root;
    for (step, spot) in target.steps.iter().zip(spots) {
        let next = match (step, &mut node.value) {
            (Step::Key(key), Value::Table(table)) => {
                let index = table.entries.iter().position(|entry| entry.key == *key).unwrap_or_else(|| {
                    table.entries.push(Entry {
                        key: key.clone(),
                        key_spot: spot.clone(),
                        node: Node::empty_table(spot.clone()),
                    });
                    table.entries.len() - 1
                });
                table.entries.get_mut(index).map(|entry| &mut entry.node)
            }
            (Step::Item(index), Value::List(items)) => {
                if *index == items.len() {
                    items.push(Node::empty_table(spot.clone()));
                }
                items.get_mut(*index)
            }
            // The walk that made the target went through tables and lists only.
            _ => None,
        };
        match next {
            Some(inner) => node = inner,
            None => return,
        }
    }
    *node = value.clone();
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_path_is_taken_apart() {
        let names = |path| split(path).map(|segments| segments.into_iter().map(|segment| segment.name).collect::<Vec<_>>());
        assert_eq!(names("a.b-c.d_1"), Ok(vec!["a".into(), "b-c".into(), "d_1".into()]));
        assert_eq!(
            names("station.\"throat A\".factor"),
            Ok(vec!["station".into(), "throat A".into(), "factor".into()])
        );
        assert_eq!(names("station.'a.b'.x"), Ok(vec!["station".into(), "a.b".into(), "x".into()]));
        for wrong in ["", ".", "a..b", "a.", "\"a", "\"a\"b", "\"\""] {
            assert!(split(wrong).is_err(), "{wrong}");
        }
    }
}
