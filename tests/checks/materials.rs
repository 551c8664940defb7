//! Built-in material cards against the tables they were taken from: `material_values.csv` was written row by row from the source named in each
//! row ("read"), or by an independent program from the published equation ("computed"), or from recollection of it ("from memory"), not from
//! the cards.

use crate::walls::Outcome;
use soakdown::case::{material_card, material_cards};
use std::collections::BTreeMap;
use std::path::Path;

/// Where a source itself holds the last value: beyond the card's table, the same.
const HELD: [(&str, &str); 1] = [("carbon-steel", "conductivity")];

/// Materials whose source gives fewer than three temperatures.
const FEWER: [(&str, usize); 6] = [
    ("cork-phenolic", 2),
    ("epdm-insulation", 2),
    ("epoxy", 1),
    ("neoprene", 1),
    ("ptfe", 1),
    ("silicone-rubber", 1),
];

#[test]
fn every_card_has_the_values_of_its_source() -> Outcome {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/checks/material_values.csv");
    let mut rows: BTreeMap<String, usize> = BTreeMap::new();
    let mut wrong = Vec::new();
    for row in csv::Reader::from_path(path)?.into_deserialize() {
        let (name, kelvin, conductivity, heat_capacity, source): (String, f64, f64, f64, String) = row?;
        let card = material_card(&name).map_err(|found| format!("{name}: {:?}", found.list))?;
        *rows.entry(name.clone()).or_default() += 1;
        for (property, table, expected) in [
            ("conductivity", &card.conductivity, conductivity),
            ("heat capacity", &card.heat_capacity, heat_capacity),
        ] {
            let found = table.value(kelvin);
            let inside =
                HELD.contains(&(name.as_str(), property)) || table.range().is_none_or(|(from, to)| (from - 1e-9..=to + 1e-9).contains(&kelvin));
            if (found / expected - 1.0).abs() > 2e-3 || !inside {
                wrong.push(format!(
                    "{name}, {property} at {kelvin} K: {found}, and {expected} in {source}; inside the table: {inside}"
                ));
            }
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
    let cards = material_cards().map_err(|found| format!("{:?}", found.list))?;
    assert!(cards.len() >= 35, "{} materials", cards.len());
    for card in &cards {
        let least = FEWER.iter().find(|fewer| fewer.0 == card.name).map_or(3, |fewer| fewer.1);
        let checked = rows.get(card.name).copied().unwrap_or(0);
        assert!(checked >= least, "{}: {checked} of {least} temperatures are checked", card.name);
    }
    Ok(())
}

/// Melting points of the elements, CRC Handbook of Chemistry and Physics (from memory); the cards round to a kelvin or two.
#[test]
fn metals_melt_where_the_handbook_says() -> Outcome {
    for (name, kelvin) in [
        ("copper", 1357.77),
        ("nickel", 1728.0),
        ("titanium", 1941.0),
        ("niobium", 2750.0),
        ("molybdenum", 2896.0),
        ("tungsten", 3695.0),
    ] {
        let card = material_card(name).map_err(|found| format!("{:?}", found.list))?;
        let melts = card.melts.ok_or(name)?;
        assert!((melts / kelvin - 1.0).abs() < 0.015, "{name}: {melts} K, and {kelvin} K in the handbook");
    }
    Ok(())
}

/// Every card says where each value comes from and how far to trust it, and its values make sense beside each other.
#[test]
fn every_card_is_complete() -> Outcome {
    for card in material_cards().map_err(|found| format!("{:?}", found.list))? {
        let name = card.name;
        for property in ["density", "heat_capacity", "conductivity", "emissivity"] {
            let said = card
                .said
                .iter()
                .find(|said| said.property == property)
                .ok_or(format!("{name}: no {property}"))?;
            assert!(!said.source.is_empty() && said.source != "no source given", "{name}: {property}");
        }
        let (limit, _) = card.limit.ok_or(format!("{name}: no limit"))?;
        let end = card.melts.into_iter().chain(card.decomposes).fold(f64::INFINITY, f64::min);
        assert!(limit < end, "{name}: its limit of {limit} K is above its end at {end} K");
    }
    Ok(())
}
