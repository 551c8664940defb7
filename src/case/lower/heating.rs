//! [station.heating]: the hot face while burning.

use super::quantities::{flux, temperature, transfer};
use super::station::Section;
use super::{Lowering, Node, Table};
use crate::case::form::missing;
use crate::case::keys::{Expect, STATION};
use crate::case::names;
use crate::model::{Heating, HeatingModel, LogRows};
use crate::units::Kind;

/// The keys that belong to one model only.
const OF_MODEL: [(&str, &[&str]); 4] = [
    ("film", &["coefficient", "gas_temperature"]),
    ("flux", &["flux"]),
    ("log", &["file", "net"]),
    ("wall", &["station", "face", "conductance"]),
];

impl Lowering<'_> {
    /// The heating; `Some(None)` where nothing burns and none is given.
    pub(super) fn heating(&mut self, section: &Section<'_>) -> Option<Option<Heating>> {
        let Some(node) = section.table.node("heating") else {
            let profile = section.profile?;
            if profile.profile.last_burn().is_none() {
                return Some(None);
            }
            let expect = STATION.key("heating").map_or(&Expect::Free, |key| &key.expect);
            let found = missing("heating", expect, "[[station]]");
            self.findings.at(section.spot, found.help("the profile has a burn"));
            return None;
        };
        let table = node.table()?;
        let word = table.text("model")?;
        for (model, keys) in OF_MODEL.into_iter().filter(|of| of.0 != word) {
            self.misfits(table, keys, &format!("with model \"{word}\": it belongs to \"{model}\""));
        }
        if word == "wall" {
            return self.following(section, table, node).map(Some);
        }
        let later = self.later_heating(table, word);
        let path = section.path_of("heating");
        let factor = self.number_or(Some(table), "factor", &path, 1.0, Kind::Number);
        let open = self.switch_or(table, "open", &path, false);
        let model = match word {
            "film" => self.film(table, node),
            "flux" => self.flux(table, node),
            "log" => self.heating_log(section, table, node),
            _ => None,
        };
        let gas_emissivity = self.gas_emissivity(table, &path, model.as_ref());
        if later {
            return None;
        }
        let gas_emissivity = gas_emissivity?;
        let heating = Heating::new(model?)
            .times(factor?)
            .and_then(|heating| heating.with_gas_emissivity(gas_emissivity));
        Some(Some(self.accept(heating, &node.spot)?.in_the_open(open)))
    }

    /// Reports what is not built yet; whether there was anything.
    fn later_heating(&mut self, table: &Table, word: &str) -> bool {
        let before = self.findings.diagnostics.list.len();
        if let ("bartz", Some(model)) = (word, table.node("model")) {
            self.not_built_yet(&model.words(), &format!("the heating model \"{word}\""));
        }
        for (key, what) in [("soot_resistance", "a carbon deposit"), ("film_effectiveness", "film cooling")] {
            if let Some(node) = table.node(key).filter(|node| node.number() != Some(0.0)) {
                self.not_built_yet(&node.spot, what);
            }
        }
        if !table.has("film_effectiveness") {
            self.misfits(table, &["film_temperature"], "without \"film_effectiveness\"");
        }
        self.findings.diagnostics.list.len() > before
    }

    fn film(&mut self, table: &Table, node: &Node) -> Option<HeatingModel> {
        for key in ["coefficient", "gas_temperature"] {
            if !table.has(key) {
                self.missing(&node.spot, key, "with model \"film\"");
            }
        }
        let model = HeatingModel::film(transfer(table.number("coefficient")?), temperature(table.number("gas_temperature")?));
        self.accept(model, &node.spot)
    }

    fn flux(&mut self, table: &Table, node: &Node) -> Option<HeatingModel> {
        if !table.has("flux") {
            self.missing(&node.spot, "flux", "with model \"flux\"");
        }
        let model = HeatingModel::flux(flux(table.number("flux")?));
        self.accept(model, &node.spot)
    }

    /// Emissivity of the gas. With a flux, radiation is part of it already.
    fn gas_emissivity(&mut self, table: &Table, path: &str, model: Option<&HeatingModel>) -> Option<f64> {
        let Some(node) = table.node("gas_emissivity") else {
            self.default_number(names::join(path, "gas_emissivity"), 0.0, Kind::Number);
            return Some(0.0);
        };
        let flux_given = match model {
            Some(HeatingModel::Log(LogRows::Flux { .. })) => true,
            _ => table.text("model") == Some("flux"),
        };
        if flux_given {
            let message = "\"gas_emissivity\" can't stand with a given flux, which holds the gas radiation already";
            if let Some(entry) = table.entry("gas_emissivity") {
                self.error(&entry.key_spot, "key-does-not-fit", message, "take it out");
            }
            return None;
        }
        if node.text() == Some("estimate") {
            self.not_built_yet(&node.words(), "an estimate of the gas emissivity");
            return None;
        }
        node.number()
    }
}
