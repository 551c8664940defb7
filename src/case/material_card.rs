//! The built-in materials as a person looks at them.

use super::library;
use super::lower::{NEEDED, PROPERTIES, kind_of, property, said};
use super::suggest;
use super::tree::{Node, Table as Keys, Value};
use crate::diagnostics::{Diagnostic, Diagnostics};
use crate::model::{Kelvin, LimitKind, Table};
use uom::si::f64::{Ratio, SpecificHeatCapacity, ThermalConductivity};
use uom::si::ratio::ratio;
use uom::si::specific_heat_capacity::joule_per_kilogram_kelvin;
use uom::si::thermal_conductivity::watt_per_meter_kelvin;

/// How far a value may be trusted.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Confidence {
    /// Typical, from memory, or scattered: take a measured value where it decides.
    Low,
    /// Right for the kind of material.
    Medium,
    /// From a table of this very material.
    High,
}

impl Confidence {
    /// As a card writes it.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Low => "low",
            Self::Medium => "medium",
            Self::High => "high",
        }
    }

    fn of(word: &str) -> Self {
        match word {
            "high" => Self::High,
            "medium" => Self::Medium,
            _ => Self::Low,
        }
    }
}

/// A built-in material with all that its card says.
#[derive(Clone, Debug)]
pub struct MaterialCard {
    /// Its name in a case file.
    pub name: &'static str,
    /// What it is.
    pub title: String,
    /// Density, kg/m³.
    pub density: f64,
    /// Specific heat capacity, J/(kg·K).
    pub heat_capacity: Table,
    /// Thermal conductivity, W/(m·K).
    pub conductivity: Table,
    /// Emissivity of the bare surface.
    pub bare: Table,
    /// Emissivity of the oxidised, sooted or aged surface.
    pub oxidised: Table,
    /// Default limit of a layer made of it, and what it protects.
    pub limit: Option<(Kelvin, LimitKind)>,
    /// Melting point.
    pub melts: Option<Kelvin>,
    /// Decomposition temperature.
    pub decomposes: Option<Kelvin>,
    /// What stands behind each value that it has, in the order of the card.
    pub said: Vec<Said>,
}

/// What a card says about one of its values.
#[derive(Clone, Debug)]
pub struct Said {
    /// The key: `density`, `heat_capacity`, ….
    pub property: &'static str,
    /// Where the value comes from.
    pub source: String,
    /// How far to trust it.
    pub confidence: Confidence,
    /// What to know about it.
    pub note: Option<String>,
}

impl MaterialCard {
    /// The lowest confidence of density, heat capacity and conductivity.
    pub fn confidence(&self) -> Confidence {
        let needed = self.said.iter().filter(|said| NEEDED.contains(&said.property));
        needed.map(|said| said.confidence).min().unwrap_or(Confidence::Low)
    }

    /// Whether a word stands in its name or title, whatever the case of its letters.
    pub fn mentions(&self, word: &str) -> bool {
        let word = word.to_lowercase();
        self.name.contains(&word) || self.title.to_lowercase().contains(&word)
    }

    fn read(name: &'static str, keys: &Keys) -> Option<Self> {
        let of = |key: &str| keys.node(key);
        let emissivity = |key: &str| share(of("emissivity")?.table().map_or(of("emissivity"), |two| two.node(key))?);
        let limit = |node: &Node| match &node.value {
            Value::Number(kelvin) => Some((*kelvin, LimitKind::Service)),
            Value::Table(table) => Some((table.number("value")?, table.text("kind").map_or(LimitKind::Service, kind_of))),
            _ => None,
        };
        let said = PROPERTIES.into_iter().filter(|key| keys.has(key)).map(|key| Said {
            property: key,
            source: said(keys, "source", key).unwrap_or("no source given").to_owned(),
            confidence: Confidence::of(said(keys, "confidence", key).unwrap_or_default()),
            note: said(keys, "note", key).map(str::to_owned),
        });
        Some(Self {
            name,
            title: keys.text("title").unwrap_or(name).to_owned(),
            density: keys.number("density")?,
            heat_capacity: property(of("heat_capacity")?, SpecificHeatCapacity::new::<joule_per_kilogram_kelvin>)?.ok()?,
            conductivity: property(of("conductivity")?, ThermalConductivity::new::<watt_per_meter_kelvin>)?.ok()?,
            bare: emissivity("bare")?,
            oxidised: emissivity("oxidised")?,
            limit: of("limit").and_then(limit),
            melts: keys.number("melts"),
            decomposes: keys.number("decomposes"),
            said: said.collect(),
        })
    }
}

fn share(node: &Node) -> Option<Table> {
    property(node, Ratio::new::<ratio>)?.ok()
}

/// Every built-in material, by name.
///
/// # Errors
/// When a card is damaged, which is a fault of the program.
pub fn material_cards() -> Result<Vec<MaterialCard>, Diagnostics> {
    let mut cards = library::names().map(read).collect::<Result<Vec<_>, _>>()?;
    cards.sort_by_key(|card| card.name);
    Ok(cards)
}

/// The built-in material of this name.
///
/// # Errors
/// When there is none, with the nearest names, or its card is damaged.
pub fn material_card(name: &str) -> Result<MaterialCard, Diagnostics> {
    let known = library::names().find(|known| *known == name);
    known.map_or_else(|| Err(alone(unknown(name))), read)
}

fn alone(found: Diagnostic) -> Diagnostics {
    Diagnostics {
        sources: Vec::new(),
        list: vec![found],
    }
}

fn read(name: &'static str) -> Result<MaterialCard, Diagnostics> {
    let damaged = |why: &str| {
        alone(Diagnostic::error(
            "library",
            format!("the built-in material \"{name}\" is damaged: {why}"),
        ))
    };
    let card = library::card(name)
        .ok_or_else(|| damaged("it is missing"))?
        .map_err(|why| damaged(&why))?;
    MaterialCard::read(name, &card.table).ok_or_else(|| damaged("a value is missing"))
}

fn unknown(name: &str) -> Diagnostic {
    let mut found = Diagnostic::error("unknown-material", format!("no built-in material is called \"{name}\""));
    let wanted = name.to_lowercase();
    let alike: Vec<_> = library::names().filter(|known| !wanted.is_empty() && known.contains(&wanted)).collect();
    let nearest = suggest::nearest(name, library::names());
    found.help.extend(nearest.map(suggest::did_you_mean));
    if !alike.is_empty() {
        found = found.help(format!("names with \"{wanted}\" in them: {}", alike.join(", ")));
    }
    found.help("all of them: soakdown materials; one of your own stands in [material.NAME] of the case")
}
