//! [[station.probe]].

use super::station::Section;
use super::{Lowering, Node, Spot, Table};
use crate::case::names;
use crate::case::tree::Value;
use crate::units::Kind;

/// Where a probe lies.
pub(super) struct ProbePlace {
    pub name: String,
    pub spot: Spot,
    /// From the hot face, m.
    pub depth: f64,
    /// The layer that it is said to lie in.
    pub layer: Option<usize>,
    /// Time constant, s.
    pub lag: f64,
}

impl Lowering<'_> {
    /// All probes of a station; `None` when one has mistakes.
    pub(super) fn probe_places(&mut self, section: &Section<'_>) -> Option<Vec<ProbePlace>> {
        let list = section.table.list("probe").unwrap_or_default();
        let places: Vec<_> = list.iter().map(|node| self.probe(section, node)).collect();
        places.into_iter().collect()
    }

    fn probe(&mut self, section: &Section<'_>, node: &Node) -> Option<ProbePlace> {
        let table = node.table()?;
        let name = table.text("name")?;
        if let (true, Some(words)) = (section.layers.iter().any(|layer| layer.name == name), table.node("name").map(Node::words)) {
            let message = format!("the name \"{name}\" is that of a layer of this station");
            self.error(&words, "repeated-name", message, "places are unique within a station");
        }
        let path = names::join(&section.path_of("probe"), name);
        let lag = self.number_or(Some(table), "lag", &path, 0.0, Kind::Time)?;
        self.number_or(Some(table), "accuracy", &path, 0.0, Kind::TemperatureDifference)?;
        let layer = match table.node("in") {
            Some(word) => Some(self.layer_of(section, word)?),
            None => None,
        };
        let depth = self.depth(section, node, table, layer)?;
        Some(ProbePlace {
            name: name.to_owned(),
            spot: node.spot.clone(),
            depth,
            layer,
            lag,
        })
    }

    fn layer_of(&mut self, section: &Section<'_>, node: &Node) -> Option<usize> {
        let word = node.text()?;
        let found = section.layers.iter().position(|layer| layer.name == word);
        if found.is_none() {
            self.unknown(node, "unknown-layer", "the layer", section.layers.iter().map(|layer| layer.name.as_str()));
        }
        found
    }

    /// Depth from the hot face, m.
    fn depth(&mut self, section: &Section<'_>, node: &Node, table: &Table, layer: Option<usize>) -> Option<f64> {
        self.exclude(table, &["depth", "from_outside"]);
        let thickness: Vec<f64> = section.layers.iter().map(|layer| layer.thickness).collect::<Option<_>>()?;
        let (start, end) = match layer {
            Some(index) => {
                let start: f64 = thickness.iter().take(index).sum();
                (start, start + thickness.get(index)?)
            }
            None => (0.0, thickness.iter().sum()),
        };
        let (given, depth) = match (table.node("depth"), table.node("from_outside")) {
            (Some(given), _) => (given, start + given.number()?),
            (None, Some(given)) => (given, end - given.number()?),
            (None, None) => {
                self.missing(&node.spot, "depth", "for a probe, or \"from_outside\"");
                return None;
            }
        };
        let grace = 1e-6 * thickness.iter().sum::<f64>();
        if matches!(given.value, Value::Number(_)) && (depth < start - grace || depth > end + grace) {
            let what = layer.map_or("the wall", |_| "this layer");
            let message = format!("the probe lies outside {what}, which is {:.4} mm thick", 1e3 * (end - start));
            self.error(
                &given.words(),
                "outside-wall",
                message,
                "a smaller depth is due; \"from_outside\" counts from the other side",
            );
            return None;
        }
        Some(depth.clamp(start, end))
    }
}
