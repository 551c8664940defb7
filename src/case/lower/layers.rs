//! Layers: material, surface, limit.

use super::material::Materials;
use super::quantities::{length, spoken};
use super::{Lowering, Node, Table};
use crate::case::names;
use crate::model::{Layer, Limit, LimitOrigin, Table as Property};

/// A layer on its way to the model, with what its neighbours and faces need to know of it.
pub(super) struct LoweredLayer {
    pub name: String,
    /// `None`: its material gives none.
    pub emissivity: Option<Property>,
    /// Thickness, m.
    pub thickness: Option<f64>,
    /// `None`: it has mistakes, which are reported.
    pub layer: Option<Layer>,
}

impl Lowering<'_> {
    /// One layer, its joint still to be put on. `None` when it can't even be named.
    pub(super) fn layer(&mut self, node: &Node, station: &str, path: &str, materials: &mut Materials<'_>) -> Option<LoweredLayer> {
        let table = node.table()?;
        let name = table.text("name")?.to_owned();
        let path = names::join(path, &name);
        let facts = match table.node("material") {
            Some(material) => match material.text() {
                Some(word) if materials.has(word) => materials.get(word, self),
                Some(_) => {
                    self.unknown(material, "unknown-material", "the material", materials.known().collect::<Vec<_>>());
                    None
                }
                None => None,
            },
            None => None,
        };
        self.misfits(table, &["section", "perimeter"], "except in a bar");
        let thickness = table.number("thickness");
        let emissivity = facts.as_ref().and_then(|facts| {
            let given = facts.emissivity.as_ref()?;
            Some(self.surface(given, table, &path, materials.start))
        });
        let limit = match table.node("limit") {
            Some(node) => self.limit(node, LimitOrigin::Case).map(Some),
            None => Some(facts.as_ref().and_then(|facts| facts.limit.clone())),
        };
        if let (None, Some(facts)) = (table.node("limit"), &facts)
            && let Some(limit) = &facts.limit
        {
            self.tell_library_limit(station, &name, facts.material.name(), limit, facts.built_in_limit);
        }
        let layer = facts.zip(thickness).zip(limit).and_then(|((facts, thickness), limit)| {
            let layer = Layer::new(name.clone(), facts.material, length(thickness));
            Some(self.accept(layer, &node.spot)?.with_limit(limit))
        });
        Some(LoweredLayer {
            emissivity,
            thickness,
            layer,
            name,
        })
    }

    /// The emissivity that the layer's surface picks: the lower one where it does not say.
    fn surface(&mut self, given: &super::material::Emissivity, table: &Table, path: &str, start: f64) -> Property {
        use super::material::Emissivity;
        match (table.text("surface"), given) {
            (Some("bare"), Emissivity::Two { bare, .. }) => bare.clone(),
            (Some("oxidised"), Emissivity::Two { oxidised, .. }) => oxidised.clone(),
            (Some(_), Emissivity::One(only)) => {
                self.without_effect(table, &["surface"], "with a material that has one emissivity");
                only.clone()
            }
            _ => {
                let (lower, word) = given.lower(start);
                if let Some(word) = word.filter(|_| !table.has("surface")) {
                    self.list_surface(path, word);
                }
                lower.clone()
            }
        }
    }

    fn tell_library_limit(&mut self, station: &str, layer: &str, material: &str, limit: &Limit, built_in: bool) {
        let whose = if built_in {
            "from the library, common practice and no design margin"
        } else {
            "the material's own in this case"
        };
        let text = format!("{layer}: no limit given; {} taken for {material}, {whose}", spoken(limit.temperature));
        self.findings.notice("library-limit", text, Some(station), Some(layer));
    }
}
