//! [[wait]]: cool-down questions.

use super::quantities::temperature;
use super::station::LoweredStation;
use super::{Input, InputValue, Lowering, Node, Table};
use crate::case::touch;
use crate::model::{Place, Wait};
use crate::units::Kind;

impl Lowering<'_> {
    /// All waits, each written out for every station that has its place; `None` when one has mistakes.
    pub(super) fn waits(&mut self, case: &Table, stations: &[LoweredStation]) -> Option<Vec<Wait>> {
        if case.has("wait") {
            let list = case.list("wait").unwrap_or_default();
            let waits: Vec<_> = list.iter().map(|node| self.wait(node, stations)).collect();
            let waits: Option<Vec<_>> = waits.into_iter().collect();
            return Some(waits?.into_iter().flatten().collect());
        }
        for (key, value, unit) in [
            ("where", InputValue::Word("everywhere".to_owned()), ""),
            ("below", InputValue::Number(touch::DEFAULT_BELOW), Kind::Temperature.si()),
        ] {
            self.inputs.push(Input {
                path: format!("wait.touch.{key}"),
                value,
                unit,
                from: "default".to_owned(),
            });
        }
        (0..stations.len())
            .map(|station| Wait::new("touch", station, Place::Everywhere, temperature(touch::DEFAULT_BELOW)).ok())
            .map(|wait| wait.map(|wait| wait.meaning(touch::DEFAULT_MEANING)))
            .collect()
    }

    fn wait(&mut self, node: &Node, stations: &[LoweredStation]) -> Option<Vec<Wait>> {
        let table = node.table()?;
        let below = self.below(node, table);
        let chosen: Vec<usize> = match table.node("station") {
            Some(word) => {
                let name = word.text()?;
                let found = stations.iter().position(|station| station.name == name);
                if found.is_none() {
                    self.unknown(
                        word,
                        "unknown-station",
                        "the station",
                        stations.iter().map(|station| station.name.as_str()),
                    );
                }
                vec![found?]
            }
            None => (0..stations.len()).collect(),
        };
        let place = table.node("where")?;
        let word = place.text()?;
        let places: Vec<_> = chosen
            .iter()
            .filter_map(|&index| Some((index, find(stations.get(index)?, word)?)))
            .collect();
        if places.is_empty() {
            let mut known: Vec<String> = Vec::new();
            for station in chosen.iter().filter_map(|&index| stations.get(index)) {
                known.extend(all_places(station).into_iter().map(|pair| pair.0));
            }
            known.dedup();
            self.unknown(place, "unknown-place", "the place", known.iter().map(String::as_str));
            return None;
        }
        let (below, meaning) = below?;
        let name = table.text("name")?;
        let mut waits = Vec::with_capacity(places.len());
        for (station, place) in places {
            let wait = self.accept(Wait::new(name, station, place, temperature(below)), &node.spot)?;
            waits.push(match &meaning {
                Some(meaning) => wait.meaning(meaning.as_str()),
                None => wait,
            });
        }
        Some(waits)
    }

    /// The value to come below, K, and what it stands for.
    fn below(&mut self, node: &Node, table: &Table) -> Option<(f64, Option<String>)> {
        self.exclude(table, &["below", "touch"]);
        if let Some(below) = table.node("below") {
            return Some((below.number()?, None));
        }
        let Some(asked) = table.node("touch") else {
            self.missing(&node.spot, "below", "for a wait, or \"touch\"");
            return None;
        };
        let asked = asked.table()?;
        let contact = asked.node("contact")?;
        let surface = asked.text("surface")?;
        let Some(threshold) = touch::threshold(contact.number()?, surface) else {
            let message = "the burn thresholds are known for contacts from 1 s to 8 h";
            self.error(&contact.words(), "out-of-range", message, "a time from \"1 s\" to \"8 h\" is due");
            return None;
        };
        let text = "burn thresholds of ISO 13732-1 are built in from memory of the standard, at their lower ends; compare them with your copy";
        self.findings.notice("touch-from-memory", text, None, None);
        if let Some(name) = table.text("name") {
            let path = crate::case::names::join(&crate::case::names::join("wait", name), "below");
            self.inputs.push(Input {
                path,
                value: InputValue::Number(threshold.kelvin),
                unit: Kind::Temperature.si(),
                from: "ISO 13732-1:2006, lower ends, from memory".to_owned(),
            });
        }
        Some((threshold.kelvin, Some(threshold.meaning)))
    }
}

/// A place of a station by its name.
fn find(station: &LoweredStation, word: &str) -> Option<Place> {
    all_places(station).into_iter().find(|pair| pair.0 == word).map(|pair| pair.1)
}

/// Every place of a station with its name.
pub(super) fn all_places(station: &LoweredStation) -> Vec<(String, Place)> {
    let mut places = vec![
        ("hot-face".to_owned(), Place::HotFace),
        ("outer-face".to_owned(), Place::OuterFace),
        ("everywhere".to_owned(), Place::Everywhere),
    ];
    places.extend(station.layers.iter().enumerate().map(|(index, name)| (name.clone(), Place::Layer(index))));
    let joints = station.layers.windows(2).enumerate();
    places.extend(joints.map(|(index, pair)| (pair.join("|"), Place::Joint(index))));
    places.extend(station.probes.iter().enumerate().map(|(index, name)| (name.clone(), Place::Probe(index))));
    places
}
