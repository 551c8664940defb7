//! `soakdown-materials/1`: built-in materials as JSON.

use super::PROGRAM;
use super::result::{CautionRow, limit_kind_word};
use crate::case::{MaterialCard, Said};
use crate::model::Table;
use schemars::JsonSchema;
use serde::Serialize;

/// What goes with every built-in value.
pub(super) const CAUTIONS: [(&str, &str); 2] = [
    (
        "library-limit",
        "A built-in limit is a usual service temperature of the material: a margin against it is no design margin. A licensed engineer sets the \
         limits of a design.",
    ),
    (
        "library-values",
        "Built-in values are those of the source named, not of your batch: take measured or certified ones where they decide, above all for \
         coatings, insulation and emissivities.",
    ),
];

/// Built-in materials with all that their cards say.
#[derive(Debug, Serialize, JsonSchema)]
pub struct MaterialsDocument<'a> {
    /// Name and version of this document.
    #[schemars(extend("const" = "soakdown-materials/1"))]
    format: &'static str,
    /// Name and version of the program.
    program: &'static str,
    /// The command as it would be typed again.
    command: &'a str,
    /// The materials asked for, by name.
    materials: Vec<MaterialRow<'a>>,
    /// What people must mind.
    cautions: Vec<CautionRow>,
}

impl<'a> MaterialsDocument<'a> {
    /// The document of these cards; `command` as it would be typed again.
    pub fn new(command: &'a str, cards: &'a [MaterialCard]) -> Self {
        let cautions = CAUTIONS.map(|(code, text)| CautionRow { code, text: text.to_owned() });
        Self {
            format: "soakdown-materials/1",
            program: PROGRAM,
            command,
            materials: cards.iter().map(MaterialRow::new).collect(),
            cautions: cautions.into(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct MaterialRow<'a> {
    /// Its name in a case file.
    name: &'a str,
    /// What it is.
    title: &'a str,
    /// The lowest confidence of density, heat capacity and conductivity.
    #[schemars(extend("enum" = ["low", "medium", "high"]))]
    confidence: &'static str,
    /// Density.
    density_kg_m3: f64,
    /// Specific heat capacity.
    #[serde(rename = "heat_capacity_J_kg_K")]
    heat_capacity: PropertyCell<'a>,
    /// Thermal conductivity.
    #[serde(rename = "conductivity_W_m_K")]
    conductivity: PropertyCell<'a>,
    /// Total hemispherical emissivity.
    emissivity: EmissivityRow<'a>,
    /// Default limit of a layer made of it.
    #[serde(rename = "limit_K")]
    limit: Option<f64>,
    /// What the limit protects.
    #[schemars(extend("enum" = ["service", "strength", "melting", "bond", "seal", "propellant", null]))]
    limit_kind: Option<&'static str>,
    /// Melting point.
    #[serde(rename = "melts_K")]
    melts: Option<f64>,
    /// Decomposition temperature.
    #[serde(rename = "decomposes_K")]
    decomposes: Option<f64>,
    /// What stands behind each value.
    values: Vec<SaidRow<'a>>,
}

impl<'a> MaterialRow<'a> {
    fn new(card: &'a MaterialCard) -> Self {
        Self {
            name: card.name,
            title: &card.title,
            confidence: card.confidence().word(),
            density_kg_m3: card.density,
            heat_capacity: PropertyCell::new(&card.heat_capacity),
            conductivity: PropertyCell::new(&card.conductivity),
            emissivity: EmissivityRow {
                bare: PropertyCell::new(&card.bare),
                oxidised: PropertyCell::new(&card.oxidised),
            },
            limit: card.limit.map(|(kelvin, _)| kelvin),
            limit_kind: card.limit.map(|(_, kind)| limit_kind_word(kind)),
            melts: card.melts,
            decomposes: card.decomposes,
            values: card.said.iter().map(SaidRow::new).collect(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct EmissivityRow<'a> {
    /// Of the bare, clean surface.
    bare: PropertyCell<'a>,
    /// Of the oxidised, sooted or aged surface.
    oxidised: PropertyCell<'a>,
}

/// One value, or pairs of kelvin and value.
#[derive(Debug, Serialize, JsonSchema)]
#[serde(untagged)]
enum PropertyCell<'a> {
    Constant(f64),
    Table(&'a [(f64, f64)]),
}

impl<'a> PropertyCell<'a> {
    fn new(table: &'a Table) -> Self {
        match table.range() {
            Some(_) => Self::Table(table.points()),
            None => Self::Constant(table.value(0.0)),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct SaidRow<'a> {
    /// The key of the value.
    property: &'static str,
    /// Where it comes from.
    source: &'a str,
    /// How far to trust it.
    #[schemars(extend("enum" = ["low", "medium", "high"]))]
    confidence: &'static str,
    /// What to know about it.
    note: Option<&'a str>,
}

impl<'a> SaidRow<'a> {
    fn new(said: &'a Said) -> Self {
        Self {
            property: said.property,
            source: &said.source,
            confidence: said.confidence.word(),
            note: said.note.as_deref(),
        }
    }
}
