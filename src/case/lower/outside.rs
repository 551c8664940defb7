//! [station.outside]: the outer face.

use super::quantities::temperature;
use super::station::Section;
use super::{Lowering, Node, Table};
use crate::case::names;
use crate::model::{LimitOrigin, Losses, OuterFace, Outside};

impl Lowering<'_> {
    pub(super) fn outside(&mut self, section: &Section<'_>) -> Option<OuterFace> {
        let node = section.table.node("outside")?;
        let table = node.table()?;
        self.exclude(table, &["coolant", "fixed", "adiabatic"]);
        let limit = match table.node("limit") {
            Some(limit) => self.limit(limit, LimitOrigin::Case).map(Some),
            None => Some(None),
        };
        let outside = if let Some(fixed) = table.node("fixed") {
            self.held_face(table, "with \"fixed\"");
            fixed
                .number()
                .and_then(|kelvin| self.accept(Outside::fixed(temperature(kelvin)), &fixed.spot))
        } else if table.switch("adiabatic") == Some(true) {
            self.held_face(table, "with \"adiabatic\"");
            Some(Outside::Adiabatic)
        } else {
            self.losses(section, table, node).map(Outside::Open)
        };
        Some(OuterFace::new(outside?, limit?))
    }

    /// What can't act on a face that is held or insulated.
    fn held_face(&mut self, table: &Table, why: &str) {
        for entry in table.entries.iter().filter(|entry| entry.key == "convection") {
            if entry.node.text() != Some("none") {
                let message = format!("\"convection\" can't act {why}");
                self.error(&entry.key_spot, "excluded", message, "take one of the two out");
            }
        }
        let keys = ["radiation", "emissivity", "solar_absorptivity", "orientation", "length"];
        self.without_effect(table, &keys, why);
    }

    fn losses(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<Losses> {
        let path = section.path_of("outside");
        let convection = self.convection(section, table, node).and_then(|motion| {
            let diameter = section.outer_diameter();
            self.accept(motion.around(diameter)?, &node.spot)
        });
        let radiation = self.switch_or(table, "radiation", &path, true);
        let emissivity = if radiation {
            self.face_emissivity(table, &path, section.layers.last(), node).map(Some)
        } else {
            self.without_effect(table, &["emissivity"], "with radiation = false");
            Some(None)
        };
        let absorptivity = match table.node("solar_absorptivity") {
            Some(given) => given.number(),
            None if section.weather.sun => {
                self.missing(&node.spot, "solar_absorptivity", "where surroundings.sun is above 0");
                None
            }
            None => Some(0.0),
        };
        let coolant = match table.node("coolant") {
            Some(coolant) => self.coolant(coolant, &names::join(&path, "coolant")).map(Some),
            None => Some(None),
        };
        let losses = Losses::new(convection?, emissivity?);
        let losses = losses.and_then(|losses| losses.with_solar_absorptivity(absorptivity.unwrap_or(0.0)));
        Some(self.accept(losses, &node.spot)?.with_coolant(coolant?))
    }
}
