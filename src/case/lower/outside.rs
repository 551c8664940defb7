//! [station.outside]: the outer face.

use super::quantities::{length, temperature, transfer};
use super::station::Section;
use super::{InputValue, Lowering, Node, Table, Value};
use crate::case::names;
use crate::model::{Convection, LimitOrigin, Losses, OuterFace, Outside};

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
        let convection = self.convection(section, table, node);
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

    fn convection(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<Convection> {
        let Some(given) = table.node("convection") else {
            let why = "unless the face is fixed or adiabatic: \"natural\", \"forced\", \"mixed\", \"none\", or { coefficient = \"10 W/m2/K\" }";
            self.missing(&node.spot, "convection", why);
            return None;
        };
        if let Value::Table(inner) = &given.value {
            self.without_effect(table, &["orientation", "length"], "with a given coefficient");
            let coefficient = inner.node("coefficient")?;
            let value = coefficient.number()?;
            if section.weather.vacuum && value > 0.0 {
                self.vacuum(&coefficient.words(), "a coefficient above 0");
            }
            return self.accept(Convection::coefficient(transfer(value)), &given.spot);
        }
        let word = given.text()?;
        if word == "none" {
            self.without_effect(table, &["orientation", "length"], "without convection");
            return Some(Convection::None);
        }
        if section.weather.vacuum {
            self.vacuum(&given.words(), &format!("convection \"{word}\""));
            return None;
        }
        if word != "natural" {
            self.not_built_yet(&given.words(), &format!("convection \"{word}\""));
            return None;
        }
        self.natural(section, table, node)
    }

    fn natural(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<Convection> {
        let orientation = match table.node("orientation") {
            Some(orientation) => orientation.text()?,
            None if section.word == "plane" => {
                let why = "for natural convection on a plane: \"vertical\", \"facing-up\" or \"facing-down\"";
                self.missing(&node.spot, "orientation", why);
                return None;
            }
            None => {
                let path = names::join(&section.path_of("outside"), "orientation");
                self.default(path, InputValue::Word("horizontal-axis".to_owned()), "");
                "horizontal-axis"
            }
        };
        let words = table.node("orientation").map_or_else(|| node.spot.clone(), Node::words);
        match (orientation, section.word) {
            ("vertical", _) => match table.node("length") {
                Some(height) => {
                    let height = height.number()?;
                    self.accept(Convection::natural_vertical(length(height)), &node.spot)
                }
                None => {
                    self.missing(&node.spot, "length", "for natural convection on a vertical face: its height");
                    None
                }
            },
            ("horizontal-axis", "plane") => {
                let message = "a plane has no axis";
                self.error(
                    &words,
                    "orientation-does-not-fit",
                    message,
                    "\"vertical\", \"facing-up\" or \"facing-down\" is due",
                );
                None
            }
            ("horizontal-axis", _) => {
                self.without_effect(table, &["length"], "on a horizontal cylinder, which takes its outer diameter");
                let diameter = section.inner_diameter? + 2.0 * section.thickness()?;
                self.accept(Convection::natural_horizontal_cylinder(length(diameter)), &node.spot)
            }
            (_, "cylinder") => {
                let message = "a cylinder does not face up or down";
                self.error(&words, "orientation-does-not-fit", message, "\"vertical\" or \"horizontal-axis\" is due");
                None
            }
            (word, _) => {
                self.not_built_yet(&words, &format!("natural convection on a face that is \"{word}\""));
                None
            }
        }
    }
}
