//! Materials: built in, of the case, or built in with values of the case.

use super::quantities::{density, temperature};
use super::{Input, InputValue, Lowering, Node, Spot, Table, Value};
use crate::case::library::{self, Card};
use crate::case::names;
use crate::diagnostics::Diagnostic;
use crate::model::{Limit, LimitOrigin, Material, MaterialValues, ModelError, Table as Property};
use std::collections::BTreeMap;
use std::sync::Arc;
use uom::si::f64::{Ratio, SpecificHeatCapacity, ThermalConductivity};
use uom::si::{Dimension, Quantity, SI, ratio, specific_heat_capacity, thermal_conductivity};

/// A material and what layers take from it.
#[derive(Clone, Debug)]
pub(super) struct MaterialFacts {
    pub material: Arc<Material>,
    pub emissivity: Option<Emissivity>,
    pub limit: Option<Limit>,
    /// Whether it, or this value of it, is built in.
    pub built_in_limit: bool,
}

/// One emissivity, or two of which the surface picks.
#[derive(Clone, Debug)]
pub(super) enum Emissivity {
    One(Property),
    Two { bare: Property, oxidised: Property },
}

impl Emissivity {
    /// The lower one at a temperature: longer waits, hotter steady states. With the word for it where there are two.
    pub fn lower(&self, kelvin: f64) -> (&Property, Option<&'static str>) {
        match self {
            Self::One(table) => (table, None),
            Self::Two { bare, oxidised } if bare.value(kelvin) <= oxidised.value(kelvin) => (bare, Some("bare")),
            Self::Two { oxidised, .. } => (oxidised, Some("oxidised")),
        }
    }
}

/// The materials of a case, each lowered once.
pub(super) struct Materials<'a> {
    own: &'a [crate::case::tree::Entry],
    /// Lowered so far; `None`: it has mistakes, which are reported.
    lowered: BTreeMap<String, Option<MaterialFacts>>,
    /// Temperature at which tables are compared, K.
    pub start: f64,
}

/// Properties in the order in which they are listed.
pub(in crate::case) const PROPERTIES: [&str; 7] = ["density", "heat_capacity", "conductivity", "emissivity", "limit", "melts", "decomposes"];
/// What a material can't be without.
pub(in crate::case) const NEEDED: [&str; 3] = ["density", "heat_capacity", "conductivity"];

impl<'a> Materials<'a> {
    pub fn new(case: &'a Table, start: f64) -> Self {
        let own = case.table("material").map_or(&[][..], |table| &table.entries);
        Self {
            own,
            lowered: BTreeMap::new(),
            start,
        }
    }

    /// The names that a layer may use.
    pub fn known(&self) -> impl Iterator<Item = &str> {
        self.own
            .iter()
            .map(|entry| entry.key.as_str())
            .chain(library::names().map(|name| -> &str { name }))
    }

    /// The material of this name; `None` if there is none or it has mistakes. The first use lists its values as inputs.
    pub fn get(&mut self, name: &str, lowering: &mut Lowering<'_>) -> Option<MaterialFacts> {
        if let Some(facts) = self.lowered.get(name) {
            return facts.clone();
        }
        let own = self.own.iter().find(|entry| entry.key == name);
        let facts = lowering.material(name, own.map(|entry| &entry.node));
        self.lowered.insert(name.to_owned(), facts.clone());
        facts
    }

    /// Whether a name names something.
    pub fn has(&self, name: &str) -> bool {
        self.known().any(|known| known == name)
    }

    /// Checks the materials that no layer uses: their mistakes count too.
    pub fn finish(&mut self, lowering: &mut Lowering<'_>) {
        for entry in self.own {
            self.get(&entry.key, lowering);
        }
    }
}

/// A shipped card; a damaged one is reported.
fn read_card(name: &str, lowering: &mut Lowering<'_>) -> Option<Card> {
    match library::card(name)? {
        Ok(card) => Some(card),
        Err(why) => {
            let found = Diagnostic::error("library", format!("the built-in material \"{name}\" is damaged: {why}"));
            lowering.findings.nowhere(found);
            None
        }
    }
}

/// A property against temperature, of what the form check let pass; `None` where it did not.
pub(in crate::case) fn property<D: Dimension + ?Sized>(
    node: &Node,
    quantity: impl Fn(f64) -> Quantity<D, SI<f64>, f64>,
) -> Option<Result<Property, ModelError>> {
    match &node.value {
        Value::Number(number) => Some(Ok(Property::constant(quantity(*number)))),
        Value::Points(points) => {
            let points: Vec<_> = points.iter().map(|(kelvin, value)| (temperature(*kelvin), quantity(*value))).collect();
            Some(Property::new(&points))
        }
        _ => None,
    }
}

/// What a card or a case says about one property, or about the whole material.
pub(in crate::case) fn said<'t>(table: &'t Table, key: &str, property: &str) -> Option<&'t str> {
    let node = table.node(key)?;
    node.text().or_else(|| node.table()?.text(property))
}

impl Lowering<'_> {
    fn material(&mut self, name: &str, own: Option<&Node>) -> Option<MaterialFacts> {
        let own_table = own.and_then(Node::table);
        let whole = own_table.is_some_and(|table| NEEDED.iter().all(|key| table.has(key)));
        let card = if whole { None } else { read_card(name, self) };
        if whole && library::has(name) {
            let text = format!("the case's own material \"{name}\" takes the place of the built-in one of this name");
            self.findings.notice("material-replaced", text, None, None);
        }
        let spot = own
            .map(|node| node.spot.clone())
            .or_else(|| card.as_ref().map(|_| Spot { source: 0, range: 0..0 }))?;
        if card.is_none() {
            for key in NEEDED.into_iter().filter(|key| own_table.is_some_and(|table| !table.has(key))) {
                self.missing(&spot, key, "for a material of one's own");
            }
        } else if let Some(own) = own_table {
            let changed: Vec<_> = PROPERTIES.into_iter().filter(|key| own.has(key)).collect();
            let text = format!(
                "the built-in material \"{name}\" is used with values of the case for: {}",
                changed.join(", ")
            );
            self.findings.notice("material-changed", text, None, None);
        }
        let merged = match &card {
            Some(card) => own_table.map_or_else(|| card.table.clone(), |own| own.over(&card.table)),
            None => own_table?.clone(),
        };
        let pick = |key: &str| merged.node(key);
        if let Some(card) = &card {
            self.list_card(name, card, own_table);
        }
        self.tell_confidence(name, own_table, card.as_ref().map(|card| &card.table));
        let heat_capacity = pick("heat_capacity").and_then(|node| self.heat_capacity(node));
        let conductivity = pick("conductivity").and_then(|node| self.conductivity(node));
        let emissivity = match pick("emissivity") {
            Some(node) => Some(self.emissivity(node)?),
            None => None,
        };
        let built_in_limit = own_table.is_none_or(|table| !table.has("limit"));
        let origin = if built_in_limit { LimitOrigin::Library } else { LimitOrigin::Case };
        let limit = match pick("limit") {
            Some(node) => Some(self.limit(node, origin)?),
            None => None,
        };
        let optional = |key: &str| match pick(key) {
            Some(node) => node.number().map(|kelvin| Some(temperature(kelvin))),
            None => Some(None),
        };
        let values = MaterialValues {
            name: name.to_owned(),
            density: density(pick("density")?.number()?),
            heat_capacity: heat_capacity?,
            conductivity: conductivity?,
            melts: optional("melts")?,
            decomposes: optional("decomposes")?,
        };
        let material = self.accept(Material::new(values), &spot)?;
        Some(MaterialFacts {
            material: Arc::new(material),
            emissivity,
            limit,
            built_in_limit,
        })
    }

    /// Lists what is taken from a card, with its source and how far to trust it.
    fn list_card(&mut self, name: &str, card: &Card, own: Option<&Table>) {
        let path = names::join("material", name);
        for property in PROPERTIES {
            let given = own.and_then(|own| own.node(property));
            if given.is_some_and(|given| given.table().is_none()) {
                continue;
            }
            let prefix = names::join(&path, property);
            let source = said(&card.table, "source", property).unwrap_or("no source given");
            let from = match said(&card.table, "confidence", property) {
                Some(confidence) => format!("{source}; confidence {confidence}"),
                None => source.to_owned(),
            };
            let rest = |input: &&Input| {
                input
                    .path
                    .strip_prefix(prefix.as_str())
                    .is_some_and(|rest| rest.is_empty() || rest.starts_with('.'))
            };
            self.inputs.extend(card.inputs.iter().filter(rest).map(|input| Input {
                from: from.clone(),
                ..input.clone()
            }));
        }
    }

    /// Says which properties are not to be trusted far.
    fn tell_confidence(&mut self, name: &str, own: Option<&Table>, card: Option<&Table>) {
        let weak: Vec<_> = NEEDED
            .into_iter()
            .chain(["emissivity"])
            .filter(|property| {
                let own = own.filter(|table| table.has(property) || card.is_none());
                own.or(card).is_some_and(|table| said(table, "confidence", property) == Some("low"))
            })
            .collect();
        if !weak.is_empty() {
            let weak: Vec<_> = weak.into_iter().map(|property| property.replace('_', " ")).collect();
            let text = format!("{name}: {} of low confidence; take measured values where they decide", weak.join(", "));
            self.findings.notice("low-confidence-material", text, None, None);
        }
    }

    fn heat_capacity(&mut self, node: &Node) -> Option<Property> {
        self.property(node, SpecificHeatCapacity::new::<specific_heat_capacity::joule_per_kilogram_kelvin>)
    }

    fn conductivity(&mut self, node: &Node) -> Option<Property> {
        self.property(node, ThermalConductivity::new::<thermal_conductivity::watt_per_meter_kelvin>)
    }

    /// A share against temperature.
    pub(super) fn share(&mut self, node: &Node) -> Option<Property> {
        self.property(node, Ratio::new::<ratio::ratio>)
    }

    fn property<D: Dimension + ?Sized>(&mut self, node: &Node, quantity: impl Fn(f64) -> Quantity<D, SI<f64>, f64>) -> Option<Property> {
        let table = property(node, quantity)?;
        self.accept(table, &node.spot)
    }

    fn emissivity(&mut self, node: &Node) -> Option<Emissivity> {
        match &node.value {
            Value::Table(table) => {
                for key in ["bare", "oxidised"].into_iter().filter(|key| !table.has(key)) {
                    self.missing(&node.spot, key, "in an emissivity of two values");
                }
                Some(Emissivity::Two {
                    bare: self.share(table.node("bare")?)?,
                    oxidised: self.share(table.node("oxidised")?)?,
                })
            }
            _ => self.share(node).map(Emissivity::One),
        }
    }

    /// Lists which of two emissivities a layer takes where it does not say.
    pub(super) fn list_surface(&mut self, path: &str, word: &'static str) {
        self.default(names::join(path, "surface"), InputValue::Word(word.to_owned()), "");
    }
}
