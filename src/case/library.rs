//! What is built in: the shipped material cards.

macro_rules! cards {
    ($($name:literal),* $(,)?) => {
        &[$(($name, include_str!(concat!("../../profiles/materials/", $name, ".toml")))),*]
    };
}

/// Name and text of every shipped card.
const CARDS: &[(&str, &str)] = cards![
    "aluminium-6061",
    "carbon-phenolic",
    "carbon-steel",
    "ceramic-fibre-felt",
    "copper-chromium-zirconium",
    "copper",
    "graphite",
    "nickel-alloy-625",
    "nickel-alloy-718",
    "silica-phenolic",
    "silicone-rubber",
    "stainless-304",
    "stainless-316",
    "titanium-6al-4v",
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
