//! What is built in: the shipped material cards.

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

/// The text of a card.
pub(super) fn card(name: &str) -> Option<&'static str> {
    CARDS.iter().find(|card| card.0 == name).map(|card| card.1)
}

/// The names of all built-in materials.
pub(super) fn names() -> impl Iterator<Item = &'static str> + Clone {
    CARDS.iter().map(|card| card.0)
}
