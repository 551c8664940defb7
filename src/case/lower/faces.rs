//! [station.idle]: the hot face while the gas is off.

use super::quantities::{temperature, transfer};
use super::station::Section;
use super::view::{through_one_end, through_two_ends};
use super::{InputValue, Lowering, Node, Spot, Table};
use crate::case::form::missing;
use crate::case::keys::Expect;
use crate::case::names;
use crate::model::{Idle, Purge, Table as Property};
use crate::units::Kind;

impl Lowering<'_> {
    pub(super) fn idle(&mut self, section: &Section<'_>) -> Option<Idle> {
        let heating = section.table.table("heating");
        if heating.and_then(|heating| heating.text("model")) == Some("wall") {
            self.without_effect(
                section.table,
                &["idle"],
                "with heating model \"wall\": the hot end follows the other wall at all times",
            );
            return Some(Idle::never());
        }
        let Some(node) = section.table.node("idle") else {
            let expect = crate::case::keys::STATION.key("idle").map_or(&Expect::Free, |key| &key.expect);
            self.findings.at(section.spot, missing("idle", expect, "[[station]]"));
            return None;
        };
        let table = node.table()?;
        let path = section.path_of("idle");
        let coefficient = table.number("coefficient");
        if section.weather.vacuum && coefficient.is_some_and(|coefficient| coefficient > 0.0) {
            let spot = table.node("coefficient").map_or_else(|| node.spot.clone(), Node::words);
            self.vacuum(&spot, "a coefficient above 0");
        }
        let temperature_idle = match section.weather.air {
            Some(air) => self.number_or(Some(table), "temperature", &path, air, Kind::Temperature),
            None => table.number("temperature"),
        };
        let emissivity = self.face_emissivity(table, &path, section.layers.first(), node);
        let view = self.view(section, table, node);
        let purge = self.purge(table, node, section);
        let absorptivity = self.idle_absorptivity(section, table, node);
        let idle = Idle::new(transfer(coefficient?), temperature(temperature_idle?), emissivity?, view?);
        let idle = idle.and_then(|idle| idle.with_solar_absorptivity(absorptivity.unwrap_or(0.0)));
        Some(self.accept(idle, &node.spot)?.with_purge(purge?))
    }

    pub(super) fn vacuum(&mut self, spot: &Spot, what: &str) {
        let message = format!("{what} makes no sense in vacuum (surroundings.pressure is 0 Pa)");
        self.error(spot, "vacuum", message, "there is no air to carry heat");
    }

    /// The emissivity of a face: its own, or that of the layer that it belongs to.
    pub(super) fn face_emissivity(
        &mut self,
        table: &Table,
        path: &str,
        layer: Option<&super::layers::LoweredLayer>,
        node: &Node,
    ) -> Option<Property> {
        if let Some(given) = table.node("emissivity") {
            return self.share(given);
        }
        let layer = layer?;
        let Some(emissivity) = &layer.emissivity else {
            if layer.layer.is_some() {
                let why = format!("here, or in the material of \"{}\", which has none", layer.name);
                self.missing(&node.spot, "emissivity", &why);
            }
            return None;
        };
        let path = names::join(path, "emissivity");
        match emissivity.points() {
            [(_, value)] => self.default_number(path, *value, Kind::Number),
            points => self.default(path, InputValue::Table(points.to_vec()), ""),
        }
        Some(emissivity.clone())
    }

    fn view(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<f64> {
        self.exclude(table, &["view", "cavity"]);
        let path = section.path_of("idle");
        if let Some(view) = table.node("view") {
            return view.number();
        }
        if section.word != "cylinder" {
            self.misfits(table, &["cavity"], "except in a cylinder");
            return self.number_or(None, "view", &path, 1.0, Kind::Number);
        }
        let Some(cavity) = table.node("cavity") else {
            self.missing(
                &node.spot,
                "view",
                "for a cylinder, or \"cavity\": how much of its view is the surroundings",
            );
            return None;
        };
        let cavity = cavity.table()?;
        let (length, ends) = (cavity.number("length")?, cavity.number("open_ends")?);
        let diameter = section.inner_diameter?;
        let view = if ends < 1.5 {
            through_one_end(length, diameter)
        } else {
            through_two_ends(length, diameter)
        };
        self.default_number(names::join(&path, "view"), view, Kind::Number);
        Some(view)
    }

    fn purge(&mut self, table: &Table, node: &Node, section: &Section<'_>) -> Option<Option<Purge>> {
        match (table.entry("purge_coefficient"), table.entry("purge_temperature")) {
            (Some(coefficient), Some(gas)) => {
                let purge = Purge::new(transfer(coefficient.node.number()?), temperature(gas.node.number()?));
                if section.profile.is_some_and(|profile| !profile.purged) {
                    self.without_effect(table, &["purge_coefficient"], "while no phase has purge = true");
                }
                self.accept(purge, &node.spot).map(Some)
            }
            (Some(coefficient), None) => {
                self.missing(&coefficient.key_spot, "purge_temperature", "with \"purge_coefficient\"");
                None
            }
            (None, Some(gas)) => {
                self.missing(&gas.key_spot, "purge_coefficient", "with \"purge_temperature\"");
                None
            }
            (None, None) => {
                if section.profile.is_some_and(|profile| profile.purged) {
                    let text = format!(
                        "{}: the profile has a purge, but no purge_coefficient is given here; its idle values stay",
                        section.name
                    );
                    self.findings.notice("purge-without-coefficient", text, Some(section.name), None);
                }
                Some(None)
            }
        }
    }

    /// Share of the sun that the idle hot face absorbs; it is needed where that face lies in the open under the sun.
    fn idle_absorptivity(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<f64> {
        let open = section.table.table("heating").and_then(|heating| heating.switch("open")).unwrap_or(false);
        match table.node("solar_absorptivity") {
            Some(given) => {
                if !open {
                    self.without_effect(table, &["solar_absorptivity"], "while the heated face is not open");
                }
                given.number()
            }
            None if open && section.weather.sun => {
                self.missing(&node.spot, "solar_absorptivity", "where the sun shines on an open heated face");
                None
            }
            None => Some(0.0),
        }
    }
}
