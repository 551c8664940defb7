//! The form check: every key known, every value of the kind that is expected there and of a size that makes sense. What is in order is turned into
//! SI in place, and listed as an input; what is not is reported at its characters.

use super::checked::{Input, InputValue};
use super::findings::Findings;
use super::keys::{Bounds, Expect, Section};
use super::names;
use super::suggest;
use super::tree::{Node, Spot, Table, Value};
use crate::diagnostics::Diagnostic;
use crate::units::{self, Kind};

/// Checks a tree against what is expected.
pub(super) struct Form<'a> {
    pub findings: &'a mut Findings,
    pub inputs: &'a mut Vec<Input>,
}

impl Form<'_> {
    /// Checks the table of a section.
    pub fn section(&mut self, table: &mut Table, section: &Section, spot: &Spot, path: &str) {
        for entry in &mut table.entries {
            match section.key(&entry.key) {
                Some(key) => self.node(&mut entry.node, &key.expect, &names::join(path, &entry.key)),
                None => {
                    let unknown = unknown_key(&entry.key, &entry.node, section, path.is_empty());
                    self.findings.at(&entry.key_spot, unknown);
                }
            }
        }
        let name = table.entry("name").filter(|_| section.is_named());
        let head = self.findings.head(spot);
        let blamed = name.filter(|_| head != *spot).map_or(head, |name| name.node.words());
        for key in section.keys.iter().filter(|key| key.required && !table.has(key.name)) {
            self.findings.at(&blamed, missing(key.name, &key.expect, section.title));
        }
    }

    /// Checks a value.
    pub fn node(&mut self, node: &mut Node, expect: &Expect, path: &str) {
        let value = std::mem::replace(&mut node.value, Value::Bad);
        match (value, expect) {
            (Value::Bad, _) => {}
            // Found in order before: a value of a ready profile.
            (value @ (Value::Number(_) | Value::Points(_)), _) => node.value = value,
            (value, Expect::Free | Expect::FreeTable) => node.value = value,
            (value, Expect::OneOf(choices)) => {
                let choice = choices.iter().find(|choice| accepts(choice, &value));
                let choice = choice.or_else(|| choices.iter().find(|choice| nearly_accepts(choice, &value)));
                match choice {
                    Some(choice) => {
                        node.value = value;
                        self.node(node, choice, path);
                    }
                    None => self.wrong_type(&node.spot, &value, expect),
                }
            }
            (Value::Text(text), Expect::Quantity(kind, bounds)) => self.quantity(node, &text, *kind, *bounds, path),
            (Value::Text(text), Expect::Property(kind, bounds)) if *kind != Kind::Number => self.quantity(node, &text, *kind, *bounds, path),
            (value @ (Value::Integer(_) | Value::Float(_)), Expect::Quantity(kind, _) | Expect::Property(kind, _)) if *kind != Kind::Number => {
                let written = self.characters(&node.spot).to_owned();
                let example = kind.examples().first().copied().unwrap_or_default();
                let number = if matches!(value, Value::Float(number) if !number.is_finite()) {
                    "1"
                } else {
                    written.as_str()
                };
                let found = Diagnostic::error("missing-unit", format!("a unit is missing: {} is due", kind.words()))
                    .label("a bare number")
                    .help(format!("with a unit, in quotes: \"{number} {example}\""))
                    .help(kind.units_that_fit());
                self.findings.at(&node.spot, found);
            }
            (Value::Integer(number), Expect::Version) => self.whole(node, number, (i128::MIN, i128::MAX), path),
            (Value::Integer(number), Expect::Whole(least, most)) => self.whole(node, number, (*least, *most), path),
            (value @ (Value::Integer(_) | Value::Float(_)), Expect::Number(bounds) | Expect::Property(_, bounds)) => {
                #[expect(clippy::cast_precision_loss, reason = "an integer where a float is due is read as the nearest float")]
                let number = match value {
                    Value::Integer(number) => number as f64,
                    Value::Float(number) => number,
                    _ => f64::NAN,
                };
                if self.in_bounds(&node.spot, number, *bounds, Kind::Number, path) {
                    node.value = Value::Number(number);
                    self.input(node, path, InputValue::Number(number), Kind::Number);
                }
            }
            (Value::List(pairs), Expect::Property(kind, bounds)) => self.property(node, pairs, *kind, *bounds, path),
            (Value::Switch(switch), Expect::Switch) => {
                node.value = Value::Switch(switch);
                self.input(node, path, InputValue::Switch(switch), Kind::Number);
            }
            (Value::Text(word), Expect::Word(words)) => {
                if words.contains(&word.as_str()) {
                    self.input(node, path, InputValue::Word(word.clone()), Kind::Number);
                    node.value = Value::Text(word);
                } else {
                    let spot = node.words();
                    let mut found = Diagnostic::error("unknown-word", format!("\"{word}\" is not one of the words that may stand here"));
                    found
                        .help
                        .extend(suggest::nearest(&word, words.iter().copied()).map(suggest::did_you_mean));
                    self.findings.at(&spot, found.help(format!("one of: {}", words.join(", "))));
                }
            }
            (Value::Text(text), Expect::Text | Expect::Known(_)) => {
                self.input(node, path, InputValue::Word(text.clone()), Kind::Number);
                node.value = Value::Text(text);
            }
            (Value::Text(name), Expect::Name) => {
                if let Some((code, message)) = names::fault(&name) {
                    self.findings
                        .at(&node.words(), Diagnostic::error(code, message).label("choose another name"));
                } else {
                    node.value = Value::Text(name);
                }
            }
            (Value::List(mut items), Expect::List(item)) => {
                for (index, node) in items.iter_mut().enumerate() {
                    self.node(node, item, &names::join(path, &index.to_string()));
                }
                node.value = Value::List(items);
            }
            (Value::Table(mut table), Expect::Section(section)) => {
                self.section(&mut table, section, &node.spot, path);
                node.value = Value::Table(table);
            }
            (Value::Table(mut table), Expect::Named(section)) => {
                for entry in &mut table.entries {
                    if let Some((code, message)) = names::fault(&entry.key) {
                        self.findings
                            .at(&entry.key_spot, Diagnostic::error(code, message).label("choose another name"));
                    }
                    let path = names::join(path, &entry.key);
                    match &mut entry.node.value {
                        Value::Table(inner) => {
                            let spot = entry.node.spot.clone();
                            self.section(inner, section, &spot, &path);
                        }
                        other => {
                            let other = std::mem::replace(other, Value::Bad);
                            self.wrong_type(&entry.node.spot, &other, &Expect::Section(&super::keys::MATERIAL));
                        }
                    }
                }
                node.value = Value::Table(table);
            }
            (Value::List(items), Expect::Sections(section)) => self.sections(node, items, section, path),
            (value, expect) => self.wrong_type(&node.spot, &value, expect),
        }
    }

    fn sections(&mut self, node: &mut Node, mut items: Vec<Node>, section: &'static Section, path: &str) {
        if items.is_empty() {
            let found = Diagnostic::error("empty-list", "the list is empty").label(format!("at least one is needed: {}", section.title));
            self.findings.at(&node.spot, found);
        }
        let mut seen: Vec<String> = Vec::new();
        let lone = items.len() == 1;
        for (index, item) in items.iter_mut().enumerate() {
            let path = names::join(path, &member(item, section, index, lone));
            self.node(item, &Expect::Section(section), &path);
            let Some(entry) = item.table().filter(|_| section.is_named()).and_then(|table| table.entry("name")) else {
                continue;
            };
            let Some(name) = entry.node.text() else { continue };
            if seen.iter().any(|earlier| earlier == name) {
                let found = Diagnostic::error("repeated-name", format!("the name \"{name}\" is given twice")).label("each needs a name of its own");
                self.findings.at(&entry.node.words(), found);
            } else {
                seen.push(name.to_owned());
            }
        }
        node.value = Value::List(items);
    }

    fn quantity(&mut self, node: &mut Node, text: &str, kind: Kind, bounds: Bounds, path: &str) {
        match units::read(text, kind) {
            Ok(number) => {
                let spot = node.words();
                if self.in_bounds(&spot, number, bounds, kind, path) {
                    node.value = Value::Number(number);
                    self.input(node, path, InputValue::Number(number), kind);
                }
            }
            Err(error) => {
                let spot = if error.range.is_empty() {
                    node.spot.clone()
                } else {
                    node.inside(error.range.clone())
                };
                self.findings.at(&spot, unit_mistake(&error));
            }
        }
    }

    fn whole(&mut self, node: &mut Node, number: i128, (least, most): (i128, i128), path: &str) {
        if (least..=most).contains(&number) {
            #[expect(
                clippy::cast_precision_loss,
                reason = "counts that matter are far below 2^53; larger ones are refused where they are used"
            )]
            let number = number as f64;
            node.value = Value::Number(number);
            self.input(node, path, InputValue::Number(number), Kind::Number);
        } else {
            let range = if most == i128::MAX {
                format!("at least {least}")
            } else {
                format!("from {least} to {most}")
            };
            let found = Diagnostic::error("out-of-range", format!("{number} makes no sense here")).label(format!("a whole number {range} is due"));
            self.findings.at(&node.spot, found);
        }
    }

    fn property(&mut self, node: &mut Node, mut pairs: Vec<Node>, kind: Kind, bounds: Bounds, path: &str) {
        let mut points: Vec<(f64, f64)> = Vec::with_capacity(pairs.len());
        let mut sound = true;
        if pairs.is_empty() {
            let found = Diagnostic::error("empty-list", "the table has no points").label("at least one pair of temperature and value is needed");
            self.findings.at(&node.spot, found);
            sound = false;
        }
        // A lone list of two values is a frequent slip for a list of one pair; the message below fits it too.
        for pair in &mut pairs {
            let spot = pair.spot.clone();
            let Value::List(items) = &mut pair.value else {
                let value = std::mem::replace(&mut pair.value, Value::Bad);
                self.wrong_type(&spot, &value, &Expect::Property(kind, bounds));
                sound = false;
                continue;
            };
            let [temperature, value] = items.as_mut_slice() else {
                let found = Diagnostic::error(
                    "wrong-type",
                    format!("a pair of temperature and value is due, not {} values", items.len()),
                )
                .label("written [\"20 degC\", value]");
                self.findings.at(&spot, found);
                sound = false;
                continue;
            };
            let mut silent = Vec::new();
            let mut points_only = Form {
                findings: &mut *self.findings,
                inputs: &mut silent,
            };
            points_only.node(temperature, &Expect::Quantity(Kind::Temperature, super::keys::POSITIVE), path);
            let due = if kind == Kind::Number {
                Expect::Number(bounds)
            } else {
                Expect::Quantity(kind, bounds)
            };
            points_only.node(value, &due, path);
            let (Some(kelvin), Some(number)) = (temperature.number(), value.number()) else {
                sound = false;
                continue;
            };
            if points.last().is_some_and(|last| kelvin <= last.0) {
                let found = Diagnostic::error("not-rising", "the temperatures of a table must rise").label("not above the one before");
                self.findings.at(&temperature.spot, found);
                sound = false;
                continue;
            }
            points.push((kelvin, number));
        }
        if sound {
            node.value = Value::Points(points.clone());
            self.input(node, path, InputValue::Table(points), kind);
        }
    }

    /// Whether a number makes sense; if not, or if it is odd, that is reported.
    fn in_bounds(&mut self, spot: &Spot, number: f64, bounds: Bounds, kind: Kind, path: &str) -> bool {
        let unit = if kind.si().is_empty() {
            String::new()
        } else {
            format!(" {}", kind.si())
        };
        let below = number < bounds.least || (bounds.above && number <= bounds.least);
        if !number.is_finite() || below || number > bounds.most {
            let least = if bounds.above { "above" } else { "at least" };
            let (from, to) = (plain(bounds.least), plain(bounds.most));
            let due = match (bounds.least.is_finite(), bounds.most.is_finite()) {
                _ if kind == Kind::Temperature && below => "a temperature above absolute zero is due".to_owned(),
                (true, true) if bounds.above => format!("a value above {from}{unit}, at most {to}{unit}, is due"),
                (true, true) => format!("a value from {from}{unit} to {to}{unit} is due"),
                (true, false) => format!("a value {least} {from}{unit} is due"),
                (false, true) => format!("a value of at most {to}{unit} is due"),
                (false, false) => "a finite number is due".to_owned(),
            };
            let message = if number.is_finite() {
                format!("{} makes no sense here", self.characters(spot))
            } else {
                "this is no finite number".to_owned()
            };
            self.findings.at(spot, Diagnostic::error("out-of-range", message).label(due));
            return false;
        }
        if number < bounds.odd.0 || number > bounds.odd.1 {
            let side = if number < bounds.odd.0 { "unusually small" } else { "unusually large" };
            let written = self.characters(spot).to_owned();
            self.findings.doubt(
                spot,
                Diagnostic::warning("odd-value", format!("{path} = {written} is {side}")).label("possible, but is it meant?"),
            );
        }
        true
    }

    fn wrong_type(&mut self, spot: &Spot, value: &Value, expect: &Expect) {
        let mut found = Diagnostic::error("wrong-type", format!("{} can't stand here", describe(value))).label(due(expect));
        if let (Value::Table(_), Expect::Sections(section)) = (value, expect) {
            found = found.help(format!("a list of tables is due, written {} or [ {{ … }}, {{ … }} ]", section.title));
        }
        if let (Value::Text(_), Expect::Number(_) | Expect::Whole(..) | Expect::Version | Expect::Switch | Expect::Property(Kind::Number, _)) =
            (value, expect)
        {
            found = found.help("written bare, without quotes and unit");
        }
        self.findings.at(spot, found);
    }

    fn input(&mut self, node: &Node, path: &str, value: InputValue, kind: Kind) {
        self.inputs.push(Input {
            path: path.to_owned(),
            value,
            unit: kind.si(),
            from: self.findings.origin(&node.spot).to_owned(),
        });
    }

    /// The characters at a place.
    fn characters(&self, spot: &Spot) -> &str {
        let source = self.findings.diagnostics.sources.get(spot.source);
        source.and_then(|source| source.text.get(spot.range.clone())).unwrap_or_default()
    }
}

/// A mistake in a quantity, its place still to be said.
pub(super) fn unit_mistake(error: &units::UnitError) -> Diagnostic {
    let mut found = Diagnostic::error(error.code(), error.problem.to_string());
    found.label = match error.problem {
        units::UnitProblem::NoUnit(_) => "a number without a unit".to_owned(),
        units::UnitProblem::OtherDimension { .. } => format!("expected {}", error.due.words()),
        _ => String::new(),
    };
    found.help = error.help();
    found
}

/// A key that is not there, its place still to be said.
pub(super) fn missing(name: &str, expect: &Expect, title: &str) -> Diagnostic {
    let is_section = matches!(expect, Expect::Section(_) | Expect::Sections(_));
    let (code, what) = if is_section {
        ("missing-section", "the section")
    } else {
        ("missing-key", "the key")
    };
    Diagnostic::error(code, format!("{what} \"{name}\" is missing in {title}")).label(format!("\"{name}\" is required: {}", due(expect)))
}

fn unknown_key(key: &str, node: &Node, section: &Section, at_root: bool) -> Diagnostic {
    let table = matches!(&node.value, Value::Table(_)) || node.list().is_some_and(|items| items.iter().any(|item| item.table().is_some()));
    let found = if at_root && table {
        Diagnostic::error("unknown-section", format!("unknown section \"{key}\""))
    } else {
        Diagnostic::error("unknown-key", format!("unknown key \"{key}\" in {}", section.title))
    };
    match suggest::help(key, section.names()) {
        Some(help) => found.help(help),
        None => found,
    }
}

/// How a path calls a member of a list: by its name, or by its index from 0. A lone station may leave its name out.
pub(super) fn member(item: &Node, section: &Section, index: usize, lone: bool) -> String {
    let name = item.table().filter(|_| section.is_named()).and_then(|table| table.text("name"));
    match name {
        Some(name) => name.to_owned(),
        None if lone && section.title == "[[station]]" => "wall".to_owned(),
        None => index.to_string(),
    }
}

fn accepts(expect: &Expect, value: &Value) -> bool {
    match expect {
        Expect::Quantity(..) | Expect::Word(_) | Expect::Text | Expect::Known(_) | Expect::Name => matches!(value, Value::Text(_)),
        Expect::Number(_) => matches!(value, Value::Integer(_) | Value::Float(_)),
        Expect::Whole(..) | Expect::Version => matches!(value, Value::Integer(_)),
        Expect::Switch => matches!(value, Value::Switch(_)),
        Expect::Property(Kind::Number, _) => matches!(value, Value::Integer(_) | Value::Float(_) | Value::List(_)),
        Expect::Property(..) => matches!(value, Value::Text(_) | Value::List(_)),
        Expect::List(_) | Expect::Sections(_) => matches!(value, Value::List(_)),
        Expect::Section(_) | Expect::Named(_) => matches!(value, Value::Table(_)),
        Expect::OneOf(choices) => choices.iter().any(|choice| accepts(choice, value)),
        Expect::Free | Expect::FreeTable => true,
    }
}

/// Whether the mistake is most likely a missing unit.
fn nearly_accepts(expect: &Expect, value: &Value) -> bool {
    matches!(expect, Expect::Quantity(..)) && matches!(value, Value::Integer(_) | Value::Float(_))
}

fn describe(value: &Value) -> &'static str {
    match value {
        Value::Text(_) => "a text",
        Value::Integer(_) | Value::Float(_) | Value::Number(_) => "a number",
        Value::Switch(_) => "true or false",
        Value::Date => "a date",
        Value::List(_) | Value::Points(_) => "a list",
        Value::Table(_) => "a table",
        Value::Bad => "this",
    }
}

/// What is due, in words.
pub(super) fn due(expect: &Expect) -> String {
    match expect {
        Expect::Quantity(kind, _) => {
            let example = kind.examples().first().copied().unwrap_or_default();
            format!("{} with its unit is due, as in \"5 {example}\"", kind.words())
        }
        Expect::Number(_) => "a bare number is due".to_owned(),
        Expect::Whole(..) | Expect::Version => "a whole number is due".to_owned(),
        Expect::Switch => "true or false is due".to_owned(),
        Expect::Word(words) => format!("one of these words is due: {}", words.join(", ")),
        Expect::Text | Expect::Known(_) => "a text in quotes is due".to_owned(),
        Expect::Name => "a name in quotes is due".to_owned(),
        Expect::Property(Kind::Number, _) => "a bare number is due, or a list of pairs [[\"20 degC\", 0.8], …]".to_owned(),
        Expect::Property(kind, _) => {
            let example = kind.examples().first().copied().unwrap_or_default();
            format!(
                "{} is due, \"5 {example}\", or a list of pairs [[\"20 degC\", \"5 {example}\"], …]",
                kind.words()
            )
        }
        Expect::List(_) => "a list is due".to_owned(),
        Expect::Section(section) | Expect::Named(section) => format!("{} is due, as a table", section.title),
        Expect::Sections(section) => format!("a list of tables is due: {}", section.title),
        Expect::OneOf(choices) => choices.iter().map(due).collect::<Vec<_>>().join("; or "),
        Expect::Free | Expect::FreeTable => "a value is due".to_owned(),
    }
}

/// A number for a message: short, whatever its size.
fn plain(number: f64) -> String {
    if number != 0.0 && !(1e-4..1e7).contains(&number.abs()) {
        format!("{number:e}")
    } else {
        number.to_string()
    }
}
