//! Layers: material, surface, limit.

use super::material::Materials;
use super::quantities::{area, length, spoken};
use super::{Lowering, Node, Table};
use crate::case::names;
use crate::model::{CrossSection, Layer, Limit, LimitOrigin, Table as Property};

/// A layer on its way to the model, with what its neighbours and faces need to know of it.
pub(super) struct LoweredLayer {
    pub name: String,
    /// `None`: its material gives none.
    pub emissivity: Option<Property>,
    /// Thickness, m.
    pub thickness: Option<f64>,
    /// In a bar: its perimeter, m.
    pub perimeter: Option<f64>,
    /// `None`: it has mistakes, which are reported.
    pub layer: Option<Layer>,
}

/// The station that a layer belongs to.
#[derive(Clone, Copy)]
pub(super) struct StationOfLayer<'a> {
    pub name: &'a str,
    pub table: &'a Table,
}

/// A key of the layer, or else of its station.
fn given_or<'a>(layer: &'a Table, station: &'a Table, key: &str) -> Option<&'a Node> {
    layer.node(key).or_else(|| station.node(key))
}

impl Lowering<'_> {
    /// One layer, its joint still to be put on. `None` when it can't even be named.
    pub(super) fn layer(&mut self, node: &Node, station: StationOfLayer<'_>, path: &str, materials: &mut Materials<'_>) -> Option<LoweredLayer> {
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
        let bar = station.table.text("shape") == Some("bar");
        let cross_section = if bar {
            self.cross_section(table, node, station.table).map(Some)
        } else {
            self.misfits(table, &["section", "perimeter"], "except in a bar");
            Some(None)
        };
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
            self.tell_library_limit(station.name, &name, facts.material.name(), limit, facts.built_in_limit);
        }
        let parts = facts.zip(thickness).zip(limit).zip(cross_section);
        let layer = parts.and_then(|(((facts, thickness), limit), cross_section)| {
            let layer = Layer::new(name.clone(), facts.material, length(thickness));
            let layer = self.accept(layer, &node.spot)?.with_limit(limit);
            Some(match cross_section {
                Some(cross_section) => layer.with_cross_section(cross_section),
                None => layer,
            })
        });
        Some(LoweredLayer {
            emissivity,
            thickness,
            perimeter: if bar {
                given_or(table, station.table, "perimeter").and_then(Node::number)
            } else {
                None
            },
            layer,
            name,
        })
    }

    /// Section and perimeter of a length of a bar: its own, or the station's.
    fn cross_section(&mut self, table: &Table, node: &Node, station: &Table) -> Option<CrossSection> {
        let mut given = [None; 2];
        for (slot, key) in given.iter_mut().zip(["section", "perimeter"]) {
            match given_or(table, station, key) {
                Some(node) => *slot = node.number().map(|number| (number, node)),
                None => {
                    let named = table.node("name").map_or_else(|| node.spot.clone(), Node::words);
                    self.missing(&named, key, "for a bar: on the station, or in each of its layers");
                }
            }
        }
        let [Some((section, _)), Some((perimeter, words))] = given else {
            return None;
        };
        // No outline holds more area than a circle's of the same length.
        let most = perimeter * perimeter / (4.0 * std::f64::consts::PI);
        if section > most * (1.0 + 1e-3) {
            let message = format!(
                "a perimeter of {:.4} mm can't go around a section of {:.4} mm²",
                1e3 * perimeter,
                1e6 * section
            );
            let label = format!(
                "a round bar of that section has {:.4} mm, any other shape more",
                1e3 * (4.0 * std::f64::consts::PI * section).sqrt()
            );
            self.error(&words.words(), "perimeter-too-small", message, label);
            return None;
        }
        self.accept(CrossSection::new(area(section), length(perimeter)), &node.spot)
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
