//! The JSON Schema of the case file, made from the table of keys: what an editor completes, explains and refuses.
//!
//! It refuses nothing that the program accepts, except a minus before a zero. What depends on other keys, on names given elsewhere, on the
//! dimension of a unit of several factors or on its size it can't see: that is what `soakdown check` is for.

use super::keys::{Bounds, CASE, Expect, Key, PLACES, Section, VERSION};
use crate::units::{Kind, Sign};
use serde::{Serialize, Serializer};

/// Where a schema with these keywords is described; a name, nothing is fetched from there.
const DIALECT: &str = "https://json-schema.org/draft/2020-12/schema";
/// The schema's own name; the number is that of the case file's format.
const IDENTITY: &str = "urn:soakdown:case:1";

/// Schemas under their names, in the order of the table of keys.
#[derive(Clone, Debug, Default, PartialEq)]
struct Named(Vec<(String, Schema)>);

impl Named {
    fn is_empty(&self) -> bool {
        self.0.is_empty()
    }
}

impl Serialize for Named {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_map(self.0.iter().map(|(name, schema)| (name, schema)))
    }
}

/// A value that a schema names.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
#[serde(untagged)]
enum Literal {
    Word(&'static str),
    Whole(i32),
}

/// What further keys may stand in a table.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(untagged)]
enum Further {
    /// None.
    No(bool),
    /// Any, with such values.
    Such(Box<Schema>),
}

/// A JSON Schema (draft 2020-12), as far as case files need one.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
#[serde(rename_all = "camelCase")]
pub struct Schema {
    #[serde(rename = "$schema", skip_serializing_if = "Option::is_none")]
    dialect: Option<&'static str>,
    #[serde(rename = "$id", skip_serializing_if = "Option::is_none")]
    identity: Option<&'static str>,
    #[serde(skip_serializing_if = "Option::is_none")]
    title: Option<String>,
    #[serde(skip_serializing_if = "Option::is_none")]
    description: Option<String>,
    #[serde(rename = "$ref", skip_serializing_if = "Option::is_none")]
    reference: Option<String>,
    #[serde(rename = "type", skip_serializing_if = "Option::is_none")]
    kind: Option<&'static str>,
    #[serde(rename = "const", skip_serializing_if = "Option::is_none")]
    only: Option<Literal>,
    #[serde(rename = "enum", skip_serializing_if = "Vec::is_empty")]
    one_of: Vec<Literal>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pattern: Option<String>,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    examples: Vec<String>,
    #[serde(skip_serializing_if = "Option::is_none")]
    minimum: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    exclusive_minimum: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    maximum: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    not: Option<Box<Schema>>,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    any_of: Vec<Schema>,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    prefix_items: Vec<Schema>,
    #[serde(skip_serializing_if = "Option::is_none")]
    items: Option<Box<Schema>>,
    #[serde(skip_serializing_if = "Option::is_none")]
    min_items: Option<usize>,
    #[serde(skip_serializing_if = "Option::is_none")]
    max_items: Option<usize>,
    #[serde(skip_serializing_if = "Named::is_empty")]
    properties: Named,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    required: Vec<&'static str>,
    #[serde(skip_serializing_if = "Option::is_none")]
    additional_properties: Option<Further>,
    #[serde(rename = "$defs", skip_serializing_if = "Named::is_empty")]
    definitions: Named,
}

/// The schema of the case file.
pub fn schema() -> Schema {
    let mut definitions = Named::default();
    let root = table(&CASE, &mut definitions);
    Schema {
        dialect: Some(DIALECT),
        identity: Some(IDENTITY),
        title: Some("soakdown case file".to_owned()),
        description: Some("One planning question: the wall, what heats it, what cools it, the time profile, the limits.".to_owned()),
        definitions,
        ..root
    }
}

/// A section's name among the definitions: its title without brackets and article.
fn name_of(section: &Section) -> String {
    let bare = section.title.trim_matches(['[', ']']);
    let bare = bare.strip_prefix("a ").or_else(|| bare.strip_prefix("an ")).unwrap_or(bare);
    bare.replace(' ', "-")
}

/// A reference to a definition, which is made when it is met first.
fn reference(name: String, definitions: &mut Named, make: impl FnOnce(&mut Named) -> Schema) -> Schema {
    if !definitions.0.iter().any(|known| known.0 == name) {
        // Stands there before its keys are looked at: a phase holds phases.
        let place = definitions.0.len();
        definitions.0.push((name.clone(), Schema::default()));
        let schema = make(definitions);
        definitions.0[place].1 = schema;
    }
    Schema {
        reference: Some(format!("#/$defs/{name}")),
        ..Schema::default()
    }
}

fn section(section: &'static Section, definitions: &mut Named) -> Schema {
    reference(name_of(section), definitions, |definitions| table(section, definitions))
}

fn table(section: &'static Section, definitions: &mut Named) -> Schema {
    let properties = section.keys.iter().map(|key| (key.name.to_owned(), property(key, definitions)));
    Schema {
        kind: Some("object"),
        properties: Named(properties.collect()),
        required: section.keys.iter().filter(|key| key.required).map(|key| key.name).collect(),
        additional_properties: Some(Further::No(false)),
        ..Schema::default()
    }
}

fn property(key: &'static Key, definitions: &mut Named) -> Schema {
    let hint = hint(&key.expect);
    Schema {
        description: Some(if hint.is_empty() {
            key.about.to_owned()
        } else {
            format!("{} {hint}", key.about)
        }),
        ..value(&key.expect, definitions)
    }
}

/// What kind of value is due, in words, where the schema's own keywords say it less plainly.
fn hint(expect: &Expect) -> String {
    match expect {
        Expect::Quantity(kind, _) | Expect::Property(kind, _) if *kind != Kind::Number => {
            let words = kind.words();
            let table = if matches!(expect, Expect::Property(..)) {
                ", or pairs of temperature and value"
            } else {
                ""
            };
            format!("In quotes: {words} with its unit{table} ({}).", kind.units_that_fit())
        }
        Expect::Number(_) | Expect::Property(..) => "A bare number.".to_owned(),
        Expect::OneOf(choices) => choices.iter().map(hint).find(|hint| !hint.is_empty()).unwrap_or_default(),
        _ => String::new(),
    }
}

fn value(expect: &'static Expect, definitions: &mut Named) -> Schema {
    match expect {
        Expect::Quantity(kind, bounds) => quantity(*kind, *bounds, definitions),
        Expect::Number(bounds) => number(*bounds),
        Expect::Version => Schema {
            only: Some(Literal::Whole(VERSION)),
            ..Schema::default()
        },
        Expect::Whole(least, most) => whole(*least, *most),
        Expect::Switch => of_kind("boolean"),
        Expect::Word(words) => Schema {
            one_of: words.iter().copied().map(Literal::Word).collect(),
            ..of_kind("string")
        },
        Expect::Text => of_kind("string"),
        Expect::Known(names) => Schema {
            any_of: vec![
                Schema {
                    one_of: names().into_iter().map(Literal::Word).collect(),
                    ..Schema::default()
                },
                of_kind("string"),
            ],
            ..Schema::default()
        },
        Expect::Name => name(),
        Expect::Property(kind, bounds) => Schema {
            any_of: vec![single(*kind, *bounds, definitions), points(*kind, *bounds, definitions)],
            ..Schema::default()
        },
        Expect::List(item) => list(value(item, definitions), None),
        Expect::Section(keys) => section(keys, definitions),
        Expect::Sections(keys) => list(section(keys, definitions), Some(1)),
        Expect::Named(keys) => Schema {
            additional_properties: Some(Further::Such(Box::new(section(keys, definitions)))),
            ..of_kind("object")
        },
        Expect::OneOf(choices) => Schema {
            any_of: choices.iter().map(|choice| value(choice, definitions)).collect(),
            ..Schema::default()
        },
        Expect::Free => Schema::default(),
        Expect::FreeTable => of_kind("object"),
    }
}

fn of_kind(kind: &'static str) -> Schema {
    Schema {
        kind: Some(kind),
        ..Schema::default()
    }
}

fn list(item: Schema, least: Option<usize>) -> Schema {
    Schema {
        items: Some(Box::new(item)),
        min_items: least,
        ..of_kind("array")
    }
}

fn quantity(kind: Kind, bounds: Bounds, definitions: &mut Named) -> Schema {
    // A temperature below 0 degC is above 0 K.
    let sign = if bounds.least >= 0.0 && kind != Kind::Temperature {
        Sign::NotNegative
    } else {
        Sign::Any
    };
    let words = kind.words().split_once(' ').map_or(kind.words(), |(_, words)| words).replace(' ', "-");
    let name = match sign {
        Sign::NotNegative => words,
        Sign::Any => format!("{words}-of-any-sign"),
    };
    reference(name, definitions, |_| Schema {
        pattern: Some(kind.pattern(sign)),
        examples: kind.examples().iter().map(|unit| format!("5 {unit}")).collect(),
        ..of_kind("string")
    })
}

fn number(bounds: Bounds) -> Schema {
    let least = Some(bounds.least).filter(|least| least.is_finite());
    Schema {
        minimum: least.filter(|_| !bounds.above),
        exclusive_minimum: least.filter(|_| bounds.above),
        maximum: Some(bounds.most).filter(|most| most.is_finite()),
        ..of_kind("number")
    }
}

#[expect(
    clippy::cast_precision_loss,
    reason = "the ends of counts are small numbers or the ends of the type, which are left out"
)]
fn whole(least: i128, most: i128) -> Schema {
    Schema {
        minimum: (least != i128::MIN).then_some(least as f64),
        maximum: (most != i128::MAX).then_some(most as f64),
        ..of_kind("integer")
    }
}

/// What `names::fault` lets pass.
fn name() -> Schema {
    let reserved = PLACES.iter().copied().chain(["*"]).map(Literal::Word);
    Schema {
        pattern: Some(r"^[^/|:\u0000-\u001f\u007f]*[^/|:\u0000-\u001f\u007f\s][^/|:\u0000-\u001f\u007f]*$".to_owned()),
        not: Some(Box::new(Schema {
            one_of: reserved.collect(),
            ..Schema::default()
        })),
        ..of_kind("string")
    }
}

fn single(kind: Kind, bounds: Bounds, definitions: &mut Named) -> Schema {
    if kind == Kind::Number {
        number(bounds)
    } else {
        quantity(kind, bounds, definitions)
    }
}

/// Pairs of temperature and value.
fn points(kind: Kind, bounds: Bounds, definitions: &mut Named) -> Schema {
    let temperature = quantity(Kind::Temperature, super::keys::POSITIVE, definitions);
    let pair = Schema {
        prefix_items: vec![temperature, single(kind, bounds, definitions)],
        min_items: Some(2),
        max_items: Some(2),
        ..of_kind("array")
    };
    list(pair, Some(1))
}
