//! [[station]]: one wall section.

use super::joint::JointPlace;
use super::layers::{LoweredLayer, StationOfLayer};
use super::material::Materials;
use super::outside::LoweredOutside;
use super::probe::ProbePlace;
use super::profile::LoweredProfile;
use super::quantities::length;
use super::surroundings::Weather;
use super::{InputValue, Lowering, Node, Spot, Table};
use crate::case::names;
use crate::diagnostics::Diagnostic;
use crate::model::{Resistance, Shape, Station, StationValues};

/// A station, and what the rest of the case must know of it even when it has mistakes.
pub(super) struct LoweredStation {
    pub name: String,
    pub layers: Vec<String>,
    pub probes: Vec<String>,
    /// `None`: it has mistakes, which are reported.
    pub model: Option<Station>,
}

/// A station while it is lowered.
pub(super) struct Section<'a> {
    pub name: &'a str,
    /// Its path.
    pub path: String,
    pub spot: &'a Spot,
    pub table: &'a Table,
    pub weather: &'a Weather,
    pub profile: Option<&'a LoweredProfile>,
    pub layers: &'a [LoweredLayer],
    /// `None` for a shape with mistakes.
    pub shape: Option<Shape>,
    /// Inner diameter of a cylinder, m.
    pub inner_diameter: Option<f64>,
    /// `plane`, `cylinder` or `bar`.
    pub word: &'a str,
}

impl Section<'_> {
    /// Thickness of the whole wall, m.
    pub fn thickness(&self) -> Option<f64> {
        self.layers.iter().map(|layer| layer.thickness).sum()
    }

    /// Outer diameter of a cylinder, its gaps included, m; breadth of a bar at its far end.
    pub fn outer_diameter(&self) -> Option<f64> {
        if self.word == "bar" {
            return breadth(self.layers.last()?);
        }
        let gap = |layer: &LoweredLayer| match layer.layer.as_ref().and_then(|layer| layer.joint.as_ref()?.resistance.as_ref()) {
            Some(Resistance::Gap(gap)) => gap.width,
            _ => 0.0,
        };
        let gaps: f64 = self.layers.iter().map(gap).sum();
        Some(self.inner_diameter? + 2.0 * (self.thickness()? + gaps))
    }

    pub fn path_of(&self, key: &str) -> String {
        names::join(&self.path, key)
    }
}

/// Breadth of a length of a bar for correlations, m: its perimeter over π, the diameter if it is round.
pub(super) fn breadth(layer: &LoweredLayer) -> Option<f64> {
    Some(layer.perimeter? / std::f64::consts::PI)
}

impl Lowering<'_> {
    pub(super) fn stations(
        &mut self,
        case: &Table,
        weather: &Weather,
        profile: Option<&LoweredProfile>,
        materials: &mut Materials<'_>,
    ) -> Vec<LoweredStation> {
        let list = case.list("station").unwrap_or_default();
        let lone = list.len() == 1;
        let lowered: Vec<_> = list
            .iter()
            .filter_map(|node| self.station(node, lone, weather, profile, materials))
            .collect();
        if let Some(profile) = profile {
            self.unused_switches(case, profile);
        }
        lowered
    }

    fn station(
        &mut self,
        node: &Node,
        lone: bool,
        weather: &Weather,
        profile: Option<&LoweredProfile>,
        materials: &mut Materials<'_>,
    ) -> Option<LoweredStation> {
        let table = node.table()?;
        let name = match table.node("name") {
            Some(name) => name.text(),
            None if lone => {
                self.default("station.wall.name".to_owned(), InputValue::Word("wall".to_owned()), "");
                Some("wall")
            }
            None => {
                self.missing(&node.spot, "name", "where there are several stations");
                None
            }
        };
        let name = name.unwrap_or("wall").to_owned();
        let path = names::join("station", &name);
        let layers_path = names::join(&path, "layers");
        let mut layers: Vec<_> = table
            .list("layers")
            .unwrap_or_default()
            .iter()
            .map(|layer| self.layer(layer, StationOfLayer { name: &name, table }, &layers_path, materials))
            .collect();
        self.joints(table, &mut layers, &layers_path, materials.start);
        let complete = layers.iter().all(Option::is_some);
        let layers: Vec<_> = layers.into_iter().flatten().collect();
        let word = table.text("shape").unwrap_or("plane").to_owned();
        if !table.has("shape") {
            self.default(names::join(&path, "shape"), InputValue::Word(word.clone()), "");
        }
        let shape = self.shape(node, table, &word);
        let section = Section {
            name: &name,
            path,
            spot: &node.spot,
            table,
            weather,
            profile,
            layers: &layers,
            shape,
            inner_diameter: table.number("inner_diameter"),
            word: &word,
        };
        let heating = self.heating(&section);
        let idle = self.idle(&section);
        let outer = self.outside(&section);
        let probes = self.probe_places(&section);
        let probe_names = table
            .list("probe")
            .unwrap_or_default()
            .iter()
            .filter_map(|probe| probe.table()?.text("name").map(str::to_owned))
            .collect();
        let model = if complete {
            self.assemble(&section, heating, idle, outer, probes)
        } else {
            None
        };
        Some(LoweredStation {
            layers: layers.iter().map(|layer| layer.name.clone()).collect(),
            probes: probe_names,
            name,
            model,
        })
    }

    fn assemble(
        &mut self,
        section: &Section<'_>,
        heating: Option<Option<crate::model::Heating>>,
        idle: Option<crate::model::Idle>,
        outer: Option<LoweredOutside>,
        probes: Option<Vec<ProbePlace>>,
    ) -> Option<Station> {
        let outer = outer?;
        let values = StationValues {
            name: section.name.to_owned(),
            shape: section.shape?,
            layers: section.layers.iter().map(|layer| layer.layer.clone()).collect::<Option<_>>()?,
            heating: heating?,
            idle: idle?,
            outer: outer.face,
        };
        let mut station = self.accept(Station::new(values), section.spot)?;
        if let Some(sides) = outer.sides {
            station = self.accept(station.with_sides(sides), section.spot)?;
        }
        probes?.into_iter().try_fold(station, |station, probe| {
            let station = station.with_probe(probe.name, length(probe.depth), probe.layer, super::quantities::time(probe.lag));
            self.accept(station, &probe.spot)
        })
    }

    fn joints(&mut self, table: &Table, layers: &mut [Option<LoweredLayer>], path: &str, start: f64) {
        let nodes = table.list("layers").unwrap_or_default();
        for (index, node) in nodes.iter().enumerate() {
            let Some(entry) = node.table().and_then(|table| table.entry("joint")) else {
                continue;
            };
            if index + 1 == nodes.len() {
                let message = "the outermost layer has no next layer to be joined to";
                self.error(
                    &entry.key_spot,
                    "joint-on-outermost",
                    message,
                    "a joint stands on the inner of its two layers",
                );
                continue;
            }
            let (Some(Some(inner)), Some(Some(outer))) = (layers.get(index), layers.get(index + 1)) else {
                continue;
            };
            let place = JointPlace {
                node: &entry.node,
                inner,
                outer,
                path: names::join(&names::join(path, &inner.name), "joint"),
                start,
            };
            let joint = self.joint(&place);
            if let Some(Some(lowered)) = layers.get_mut(index) {
                lowered.layer = lowered.layer.take().zip(joint).map(|(layer, joint)| layer.with_joint(Some(joint)));
            }
        }
    }

    fn shape(&mut self, node: &Node, table: &Table, word: &str) -> Option<Shape> {
        if word != "bar" {
            self.misfits(table, &["section", "perimeter"], "except in a bar");
        }
        let heating = table.table("heating").and_then(|heating| heating.text("model"));
        // Area ratio, side and position are for Bartz's equation and for coupled cases; no heating model that is built reads them.
        if heating != Some("bartz") {
            self.without_effect(table, &["area_ratio", "side", "position"], "with this heating model");
        }
        if word == "bar" {
            self.misfits(table, &["inner_diameter"], "on a bar");
            return Some(Shape::Bar);
        }
        if word == "plane" {
            self.misfits(table, &["inner_diameter"], "on a plane");
            return if table.has("shape") && table.text("shape").is_none() {
                None
            } else {
                Some(Shape::Plane)
            };
        }
        match table.node("inner_diameter") {
            Some(diameter) => {
                let diameter = diameter.number()?;
                self.accept(Shape::cylinder(length(diameter)), &node.spot)
            }
            None => {
                self.missing(&node.spot, "inner_diameter", "for a cylinder");
                None
            }
        }
    }

    /// Switches of the profile that no station answers to.
    fn unused_switches(&mut self, case: &Table, profile: &LoweredProfile) {
        let stations: Vec<_> = case.list("station").unwrap_or_default().iter().filter_map(Node::table).collect();
        let Some(spot) = case.table("profile").and_then(|table| table.node("phases")).map(|node| node.spot.clone()) else {
            return;
        };
        let cooled = stations
            .iter()
            .any(|station| station.table("outside").is_some_and(|outside| outside.has("coolant")));
        if profile.coolant_off && !cooled {
            let found = Diagnostic::warning("no-effect", "\"coolant = false\" has no effect: no station has a coolant");
            self.findings.doubt(&spot, found);
        }
        let logged = stations
            .iter()
            .any(|station| station.table("heating").and_then(|heating| heating.text("model")) == Some("log"));
        if profile.shaped && logged {
            let text = "level, ramp and tail of the burns do not act on heating from a log";
            self.findings.notice("log-ignores-level", text, None, None);
        }
    }
}
