//! The case as written: a tree in which every value and every key knows its place, whichever text it came from.

use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// Characters of one of the texts.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Spot {
    /// Index of the text among the sources.
    pub source: usize,
    /// Byte range there.
    pub range: Range<usize>,
}

/// A value and where it stands.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Node {
    pub spot: Spot,
    pub value: Value,
    /// Where the first character of a text stands, if the text is written without escapes.
    pub text_start: Option<usize>,
}

/// A value. The form check turns texts and numbers that it accepts into SI.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Value {
    Text(String),
    Integer(i128),
    Float(f64),
    Switch(bool),
    Date,
    List(Vec<Node>),
    Table(Table),
    /// Read and found in order: a number in SI.
    Number(f64),
    /// Read and found in order: a property against temperature, kelvin and SI.
    Points(Vec<(f64, f64)>),
    /// Found wanting, and reported.
    Bad,
}

/// A table, its entries in the order in which they are written.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Table {
    pub entries: Vec<Entry>,
}

/// A key with its value.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Entry {
    pub key: String,
    pub key_spot: Spot,
    pub node: Node,
}

impl Node {
    /// From what the TOML parser found in a source.
    pub fn of(value: &Spanned<DeValue<'_>>, source: usize, text: &str) -> Self {
        let spot = Spot { source, range: value.span() };
        let mut text_start = None;
        let value = match value.get_ref() {
            DeValue::String(string) => {
                let raw = text.get(value.span()).unwrap_or_default();
                text_start = raw.find(string.as_ref()).map(|offset| value.span().start + offset);
                Value::Text(string.to_string())
            }
            DeValue::Integer(number) => {
                // Beyond 128 bits only the size matters, and a float keeps that.
                i128::from_str_radix(number.as_str(), number.radix()).map_or(Value::Float(f64::INFINITY), Value::Integer)
            }
            DeValue::Float(number) => Value::Float(number.as_str().parse().unwrap_or(f64::NAN)),
            DeValue::Boolean(switch) => Value::Switch(*switch),
            DeValue::Datetime(_) => Value::Date,
            DeValue::Array(list) => Value::List(list.iter().map(|item| Self::of(item, source, text)).collect()),
            DeValue::Table(table) => Value::Table(Table::of(table, source, text)),
        };
        Self { spot, value, text_start }
    }

    /// An empty table that a setting asks for.
    pub fn empty_table(spot: Spot) -> Self {
        Self {
            spot,
            value: Value::Table(Table::default()),
            text_start: None,
        }
    }

    /// The characters at this range of the text, or the whole value where the text is written with escapes.
    pub fn inside(&self, range: Range<usize>) -> Spot {
        match self.text_start {
            Some(start) => Spot {
                source: self.spot.source,
                range: start + range.start..start + range.end,
            },
            None => self.spot.clone(),
        }
    }

    pub fn number(&self) -> Option<f64> {
        match self.value {
            Value::Number(number) => Some(number),
            _ => None,
        }
    }

    pub fn text(&self) -> Option<&str> {
        match &self.value {
            Value::Text(text) => Some(text),
            _ => None,
        }
    }

    pub fn table(&self) -> Option<&Table> {
        match &self.value {
            Value::Table(table) => Some(table),
            _ => None,
        }
    }

    pub fn list(&self) -> Option<&[Self]> {
        match &self.value {
            Value::List(list) => Some(list),
            _ => None,
        }
    }

    /// The characters between the quotes, or the value itself where it has none.
    pub fn words(&self) -> Spot {
        match &self.value {
            Value::Text(text) => self.inside(0..text.len()),
            _ => self.spot.clone(),
        }
    }
}

impl Table {
    /// From what the TOML parser found in a source.
    pub fn of(table: &DeTable<'_>, source: usize, text: &str) -> Self {
        let mut entries: Vec<_> = table
            .iter()
            .map(|(key, value)| Entry {
                key: key.get_ref().to_string(),
                key_spot: Spot { source, range: key.span() },
                node: Node::of(value, source, text),
            })
            .collect();
        entries.sort_by_key(|entry| entry.key_spot.range.start);
        Self { entries }
    }

    pub fn entry(&self, key: &str) -> Option<&Entry> {
        self.entries.iter().find(|entry| entry.key == key)
    }

    pub fn node(&self, key: &str) -> Option<&Node> {
        self.entry(key).map(|entry| &entry.node)
    }

    pub fn has(&self, key: &str) -> bool {
        self.entry(key).is_some()
    }

    pub fn number(&self, key: &str) -> Option<f64> {
        self.node(key)?.number()
    }

    pub fn text(&self, key: &str) -> Option<&str> {
        self.node(key)?.text()
    }

    pub fn switch(&self, key: &str) -> Option<bool> {
        match self.node(key)?.value {
            Value::Switch(switch) => Some(switch),
            _ => None,
        }
    }

    pub fn table(&self, key: &str) -> Option<&Self> {
        self.node(key)?.table()
    }

    pub fn list(&self, key: &str) -> Option<&[Node]> {
        self.node(key)?.list()
    }
}
