//! What is built in: the shipped material cards.

use super::checked::Input;
use super::findings::Findings;
use super::form::Form;
use super::keys::MATERIAL;
use super::names;
use super::tree::{Spot, Table};
use toml::de::DeTable;

macro_rules! cards {
    ($($name:literal),* $(,)?) => {
        &[$(($name, include_str!(concat!("../../profiles/materials/", $name, ".toml")))),*]
    };
}

/// Name and text of every shipped card.
const CARDS: &[(&str, &str)] = cards![
    "aerogel-blanket",
    "alumina",
    "aluminium-6061",
    "aluminium-alsi10mg",
    "brick-corundum",
    "brick-fireclay",
    "brick-insulating",
    "carbon-carbon",
    "carbon-phenolic-char",
    "carbon-phenolic",
    "carbon-steel",
    "ceramic-fibre-board",
    "ceramic-fibre-felt",
    "copper-chromium-niobium",
    "copper-chromium-zirconium",
    "copper-oxygen-free",
    "copper-silver-zirconium",
    "copper",
    "cork-phenolic",
    "cork",
    "epdm-insulation",
    "epoxy",
    "fused-silica",
    "graphite",
    "molybdenum",
    "mullite",
    "neoprene",
    "nickel-alloy-230",
    "nickel-alloy-625",
    "nickel-alloy-718",
    "nickel-alloy-750",
    "nickel",
    "niobium-hafnium-alloy-coated",
    "niobium-hafnium-alloy",
    "niobium",
    "ptfe",
    "silica-phenolic-char",
    "silica-phenolic",
    "silicone-rubber",
    "stainless-304",
    "stainless-316",
    "stainless-347",
    "titanium-6al-4v",
    "titanium",
    "tungsten",
    "zirconia-dense",
    "zirconia",
];

/// The names of all built-in materials.
pub(super) fn names() -> impl Iterator<Item = &'static str> + Clone {
    CARDS.iter().map(|card| card.0)
}

/// Whether there is a built-in material of this name.
pub(super) fn has(name: &str) -> bool {
    names().any(|known| known == name)
}

/// A card, checked as a case's own material is.
#[derive(Clone, Debug)]
pub(super) struct Card {
    /// Its keys, their values in SI.
    pub table: Table,
    /// Its values as inputs of a case.
    pub inputs: Vec<Input>,
}

/// Reads a card; `None` if there is none of this name.
///
/// # Errors
/// With what is wrong or odd in it: nobody could mend that from a case. A test reads every shipped card, so this is not met in a released program; it is reported all the same.
pub(super) fn card(name: &str) -> Option<Result<Card, String>> {
    let text = CARDS.iter().find(|card| card.0 == name)?.1;
    let mut findings = Findings::default();
    let source = findings.add_source(name, text);
    let (table, errors) = DeTable::parse_recoverable(text);
    let mut table = Table::of(table.get_ref(), source, text);
    let mut inputs = Vec::new();
    let mut form = Form {
        findings: &mut findings,
        inputs: &mut inputs,
    };
    let spot = Spot { source, range: 0..0 };
    form.section(&mut table, &MATERIAL, &spot, &names::join("material", name));
    let said: Vec<_> = findings.diagnostics.list.iter().map(|found| found.message.clone()).collect();
    Some(match errors.first() {
        Some(error) => Err(error.message().to_owned()),
        None if !said.is_empty() => Err(said.join("; ")),
        None => Ok(Card { table, inputs }),
    })
}
