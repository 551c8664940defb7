//! How the air moves along an outer face: what a correlation asks for, and who gives it.

use super::quantities::{length, transfer};
use super::station::Section;
use super::{InputValue, Lowering, Node, Spot, Table, Value};
use crate::case::names;
use crate::model::{Convection, ForcedSurface, ModelError, NaturalSurface};

/// How the air moves, before it is known how thick the thing is that it moves around.
#[derive(Clone, Copy, Debug)]
pub(super) enum AirMotion {
    /// A coefficient, or none; nothing else is needed.
    Still(Option<f64>),
    /// By correlations.
    Moving { natural: Option<Extent>, forced: Option<Extent> },
}

/// The surface of a correlation, and its length where the case gives it.
#[derive(Clone, Copy, Debug)]
pub(super) enum Extent {
    Vertical(f64),
    FacingUp(f64),
    FacingDown(f64),
    AlongPlate(f64),
    /// Around the outer diameter.
    Around,
}

impl AirMotion {
    /// The convection on something of this outer diameter, m; `None` where the diameter is needed and not known.
    pub fn around(self, diameter: Option<f64>) -> Option<Result<Convection, ModelError>> {
        let (natural, forced) = match self {
            Self::Still(None) => return Some(Ok(Convection::None)),
            Self::Still(Some(coefficient)) => return Some(Convection::coefficient(transfer(coefficient))),
            Self::Moving { natural, forced } => (natural, forced),
        };
        let natural = match natural {
            Some(extent) => Some(match extent {
                Extent::Vertical(height) => NaturalSurface::vertical(length(height)),
                Extent::FacingUp(ratio) => NaturalSurface::facing_up(length(ratio)),
                Extent::FacingDown(ratio) => NaturalSurface::facing_down(length(ratio)),
                Extent::Around | Extent::AlongPlate(_) => NaturalSurface::horizontal_cylinder(length(diameter?)),
            }),
            None => None,
        };
        let forced = match forced {
            Some(Extent::AlongPlate(along)) => Some(ForcedSurface::along_plate(length(along))),
            Some(_) => Some(ForcedSurface::across_cylinder(length(diameter?))),
            None => None,
        };
        Some(match (natural, forced) {
            (Some(natural), Some(forced)) => natural.and_then(|natural| forced.map(|forced| Convection::Mixed { natural, forced })),
            (Some(natural), None) => natural.map(Convection::Natural),
            (None, Some(forced)) => forced.map(Convection::Forced),
            (None, None) => Ok(Convection::None),
        })
    }
}

impl Lowering<'_> {
    pub(super) fn convection(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<AirMotion> {
        let Some(given) = table.node("convection") else {
            let why = if section.word == "bar" {
                "for the sides of a bar: \"natural\", \"forced\", \"mixed\", \"none\", or { coefficient = \"10 W/m2/K\" }"
            } else {
                "unless the face is fixed or adiabatic: \"natural\", \"forced\", \"mixed\", \"none\", or { coefficient = \"10 W/m2/K\" }"
            };
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
            return Some(AirMotion::Still(Some(value)));
        }
        let word = given.text()?;
        if word == "none" {
            self.without_effect(table, &["orientation", "length"], "without convection");
            return Some(AirMotion::Still(None));
        }
        if section.weather.vacuum {
            self.vacuum(&given.words(), &format!("convection \"{word}\""));
            return None;
        }
        let windy = word == "natural" || self.wind_for(section, word, &given.words());
        let natural = if word == "forced" {
            self.without_effect(
                table,
                &["orientation"],
                "without natural convection: the wind goes along a plate and across a cylinder",
            );
            None
        } else {
            Some(self.natural(section, table, node)?)
        };
        let forced = match word {
            "natural" => None,
            _ => Some(self.forced(section, table, node)?),
        };
        if let (Some(Extent::FacingUp(_) | Extent::FacingDown(_)), Some(_)) = (natural, forced) {
            let text = "\"mixed\" on a face that looks up or down takes the one \"length\" both as its area over its perimeter and as its run along the wind; the \
                 larger of the two is on the side of longer waits";
            self.findings.notice("one-length-for-two", text, Some(section.name), None);
        }
        windy.then_some(AirMotion::Moving { natural, forced })
    }

    /// Whether the wind that a correlation asks for is given.
    fn wind_for(&mut self, section: &Section<'_>, word: &str, spot: &Spot) -> bool {
        let message = format!("convection \"{word}\" asks for a wind");
        match section.weather.wind {
            None => {
                self.error(spot, "wind-missing", message, "give surroundings.wind, as in wind = \"3 m/s\"");
                false
            }
            Some(wind) if wind == 0.0 && word == "forced" => {
                self.error(
                    spot,
                    "wind-missing",
                    message,
                    "surroundings.wind is 0 m/s: \"natural\" or \"mixed\" hold in still air",
                );
                false
            }
            Some(_) => true,
        }
    }

    fn natural(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<Extent> {
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
            ("vertical", _) => {
                let height = self.asked_length(table, node, "for natural convection on a vertical face: its height")?;
                Some(Extent::Vertical(height))
            }
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
            ("horizontal-axis", "bar") => {
                self.without_effect(table, &["length"], "on a horizontal bar, which takes perimeter/π");
                Some(Extent::Around)
            }
            ("horizontal-axis", _) => {
                self.without_effect(table, &["length"], "on a horizontal cylinder, which takes its outer diameter");
                Some(Extent::Around)
            }
            (_, "cylinder" | "bar") => {
                let message = format!("a {} does not face up or down", section.word);
                self.error(&words, "orientation-does-not-fit", message, "\"vertical\" or \"horizontal-axis\" is due");
                None
            }
            ("facing-up", _) => {
                let ratio = self.asked_length(table, node, "for natural convection on a horizontal face: its area over its perimeter")?;
                Some(Extent::FacingUp(ratio))
            }
            (_, _) => {
                let ratio = self.asked_length(table, node, "for natural convection on a horizontal face: its area over its perimeter")?;
                Some(Extent::FacingDown(ratio))
            }
        }
    }

    fn forced(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<Extent> {
        if section.word != "plane" {
            if table.text("convection") == Some("forced") {
                self.without_effect(table, &["length"], "across a cylinder or bar, which takes its own breadth");
            }
            return Some(Extent::Around);
        }
        let along = self.asked_length(table, node, "for wind over a plate: its length along the wind")?;
        Some(Extent::AlongPlate(along))
    }

    /// `length`, which a correlation asks for.
    fn asked_length(&mut self, table: &Table, node: &Node, why: &str) -> Option<f64> {
        if let Some(given) = table.node("length") {
            return given.number();
        }
        self.missing(&node.spot, "length", why);
        None
    }
}
