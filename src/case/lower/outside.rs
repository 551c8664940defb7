//! [station.outside]: the outer face.

use super::convection::AirMotion;
use super::quantities::temperature;
use super::station::{Section, breadth};
use super::{Lowering, Node, Table};
use crate::case::names;
use crate::diagnostics::Diagnostic;
use crate::model::{LimitOrigin, Losses, OuterFace, Outside};

/// The outer face, and the sides of a bar.
pub(super) struct LoweredOutside {
    pub face: OuterFace,
    /// `None`: no bar.
    pub sides: Option<Vec<Losses>>,
}

impl Lowering<'_> {
    pub(super) fn outside(&mut self, section: &Section<'_>) -> Option<LoweredOutside> {
        let node = section.table.node("outside")?;
        let table = node.table()?;
        self.exclude(table, &["coolant", "fixed", "adiabatic"]);
        let limit = match table.node("limit") {
            Some(limit) => self.limit(limit, LimitOrigin::Case).map(Some),
            None => Some(None),
        };
        let bar = section.word == "bar";
        let motion = if bar || !(table.has("fixed") || table.switch("adiabatic") == Some(true)) {
            self.convection(section, table, node)
        } else {
            None
        };
        let sides = if bar {
            self.sides(section, table, node, motion).map(Some)
        } else {
            Some(None)
        };
        let outside = if let Some(fixed) = table.node("fixed") {
            self.held_face(section, table, "with \"fixed\"");
            fixed
                .number()
                .and_then(|kelvin| self.accept(Outside::fixed(temperature(kelvin)), &fixed.spot))
        } else if table.switch("adiabatic") == Some(true) {
            self.held_face(section, table, "with \"adiabatic\"");
            Some(Outside::Adiabatic)
        } else {
            self.losses(section, table, node, motion).map(Outside::Open)
        };
        Some(LoweredOutside {
            face: OuterFace::new(outside?, limit?),
            sides: sides?,
        })
    }

    /// What can't act on a face that is held or insulated.
    fn held_face(&mut self, section: &Section<'_>, table: &Table, why: &str) {
        if section.word == "bar" {
            // Its sides go on losing heat.
            self.without_effect(
                table,
                &["emissivity"],
                &format!("{why}: the sides of a bar radiate with the emissivity of their layer"),
            );
            return;
        }
        for entry in table.entries.iter().filter(|entry| entry.key == "convection") {
            if entry.node.text() != Some("none") {
                let message = format!("\"convection\" can't act {why}");
                self.error(&entry.key_spot, "excluded", message, "take one of the two out");
            }
        }
        let keys = ["radiation", "emissivity", "solar_absorptivity", "orientation", "length"];
        self.without_effect(table, &keys, why);
    }

    fn losses(&mut self, section: &Section<'_>, table: &Table, node: &Node, motion: Option<AirMotion>) -> Option<Losses> {
        let path = section.path_of("outside");
        let convection = motion.and_then(|motion| self.accept(motion.around(section.outer_diameter())?, &node.spot));
        let radiation = self.switch_or(table, "radiation", &path, true);
        let emissivity = if radiation {
            self.face_emissivity(table, &path, section.layers.last(), node).map(Some)
        } else {
            self.without_effect(table, &["emissivity"], "with radiation = false");
            Some(None)
        };
        let absorptivity = self.solar(section, table, node);
        let coolant = match table.node("coolant") {
            Some(coolant) => self.coolant(coolant, &names::join(&path, "coolant")).map(Some),
            None => Some(None),
        };
        let losses = Losses::new(convection?, emissivity?);
        let losses = losses.and_then(|losses| losses.with_solar_absorptivity(absorptivity.unwrap_or(0.0)));
        Some(self.accept(losses, &node.spot)?.with_coolant(coolant?))
    }

    /// Share of the sun that an outer face absorbs.
    fn solar(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<f64> {
        match table.node("solar_absorptivity") {
            Some(given) => given.number(),
            None if section.weather.sun => {
                self.missing(&node.spot, "solar_absorptivity", "where surroundings.sun is above 0");
                None
            }
            None => Some(0.0),
        }
    }

    /// What the sides of a bar lose, layer by layer: by the rules of its outer face, with the emissivity of the layer.
    fn sides(&mut self, section: &Section<'_>, table: &Table, node: &Node, motion: Option<AirMotion>) -> Option<Vec<Losses>> {
        let radiation = table.switch("radiation").unwrap_or(true);
        let absorptivity = match table.node("solar_absorptivity") {
            Some(given) => given.number().unwrap_or(0.0),
            None => 0.0,
        };
        if let (true, Some(given)) = (radiation, table.entry("emissivity")) {
            let found = Diagnostic::warning(
                "far-end-only",
                "this emissivity is the far end's; the sides of a bar radiate with the emissivity of their layer",
            );
            self.findings.doubt(&given.key_spot, found);
        }
        if table.has("coolant") {
            let text = format!(
                "{}: the coolant flows over the far end; the sides go on with convection and radiation",
                section.name
            );
            self.findings.notice("coolant-at-the-far-end", text, Some(section.name), None);
        }
        let mut sides = Vec::with_capacity(section.layers.len());
        for layer in section.layers {
            let emissivity = match (&layer.emissivity, radiation) {
                (_, false) => None,
                (Some(emissivity), true) => Some(emissivity.clone()),
                (None, true) => {
                    if layer.layer.is_some() {
                        let why = format!("in the material of \"{}\", whose side radiates; or radiation = false", layer.name);
                        self.missing(&node.spot, "emissivity", &why);
                    }
                    return None;
                }
            };
            let convection = self.accept(motion?.around(breadth(layer))?, &node.spot)?;
            // Broadside to the sun, a convex bar shows on average perimeter/π of its perimeter (Cauchy 1832); a round one always.
            let losses = Losses::new(convection, emissivity);
            let losses = losses.and_then(|losses| losses.with_solar_absorptivity(absorptivity / std::f64::consts::PI));
            sides.push(self.accept(losses, &node.spot)?);
        }
        (sides.len() == section.layers.len()).then_some(sides)
    }
}
