//! Joints between layers.

use super::layers::LoweredLayer;
use super::quantities::{length, transfer};
use super::{Lowering, Node, Table};
use crate::case::names;
use crate::model::{Gap, GapGas, Joint, LimitOrigin, Resistance};
use crate::units::Kind;

/// A joint between two layers.
pub(super) struct JointPlace<'a> {
    pub node: &'a Node,
    pub inner: &'a LoweredLayer,
    pub outer: &'a LoweredLayer,
    /// Path of the joint.
    pub path: String,
    /// Temperature at which emissivities are taken from tables, K.
    pub start: f64,
}

impl Lowering<'_> {
    pub(super) fn joint(&mut self, place: &JointPlace<'_>) -> Option<Joint> {
        let table = place.node.table()?;
        self.exclude(table, &["conductance", "gap", "pressure"]);
        if !["conductance", "gap", "pressure", "limit"].into_iter().any(|key| table.has(key)) {
            let message = "this joint says nothing";
            let due = "give conductance, gap, pressure or limit; leave \"joint\" out for a perfect contact";
            self.error(&place.node.spot, "missing-key", message, due);
            return None;
        }
        if let Some(pressure) = table.node("pressure") {
            self.not_built_yet(&pressure.spot, "a joint's conductance from its pressure");
            return None;
        }
        self.misfits(table, &["roughness", "slope", "hardness"], "without \"pressure\"");
        if !table.has("gap") {
            self.misfits(table, &["gas", "emissivity"], "without \"gap\"");
        }
        let limit = match table.node("limit") {
            Some(node) => self.limit(node, LimitOrigin::Case).map(Some),
            None => Some(None),
        };
        let resistance = match (table.node("conductance"), table.node("gap")) {
            (Some(node), _) => {
                let conductance = node.number()?;
                Some(self.accept(Resistance::contact(transfer(conductance)), &node.spot)?)
            }
            (None, Some(node)) => Some(self.gap(table, node, place)?),
            (None, None) => None,
        };
        Some(Joint::new(resistance, limit?))
    }

    fn gap(&mut self, table: &Table, width: &Node, place: &JointPlace<'_>) -> Option<Resistance> {
        let gas = match table.node("gas") {
            Some(node) => node.text().map(gas),
            None => {
                self.missing(&place.node.spot, "gas", "with \"gap\": air, nitrogen, helium, hydrogen, or none");
                None
            }
        };
        let emissivity = match table.node("emissivity") {
            Some(node) => self.two_emissivities(node),
            None => self.layers_emissivities(place),
        };
        let gap = Gap::new(length(width.number()?), gas?, emissivity?);
        self.accept(gap, &place.node.spot).map(Resistance::Gap)
    }

    fn two_emissivities(&mut self, node: &Node) -> Option<[f64; 2]> {
        match node.list()? {
            [hot, cold] => Some([hot.number()?, cold.number()?]),
            other => {
                let message = format!("a gap has two sides, and {} emissivities are given", other.len());
                self.error(&node.spot, "wrong-type", message, "two are due, the hot side first: [0.8, 0.3]");
                None
            }
        }
    }

    /// The emissivities of the two layers, as the gap's default.
    fn layers_emissivities(&mut self, place: &JointPlace<'_>) -> Option<[f64; 2]> {
        let mut values = [0.0; 2];
        for (value, layer) in values.iter_mut().zip([place.inner, place.outer]) {
            let Some(table) = &layer.emissivity else {
                if layer.layer.is_some() {
                    let why = format!("for the gap: the material of \"{}\" has no emissivity", layer.name);
                    self.missing(&place.node.spot, "emissivity", &why);
                }
                return None;
            };
            *value = table.value(place.start);
        }
        let path = names::join(&place.path, "emissivity");
        for (index, value) in values.into_iter().enumerate() {
            self.default_number(names::join(&path, &index.to_string()), value, Kind::Number);
        }
        Some(values)
    }
}

/// The gas of a gap by its word; the form check let only these pass.
fn gas(word: &str) -> GapGas {
    match word {
        "nitrogen" => GapGas::Nitrogen,
        "helium" => GapGas::Helium,
        "hydrogen" => GapGas::Hydrogen,
        "none" => GapGas::None,
        _ => GapGas::Air,
    }
}
