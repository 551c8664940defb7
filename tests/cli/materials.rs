//! `materials` as a person uses it.

use serde_json::Value;
use std::error::Error;
use std::process::{Command, Output, Stdio};

type Outcome = Result<(), Box<dyn Error>>;

fn soakdown(words: &[&str]) -> Result<Output, Box<dyn Error>> {
    Ok(Command::new(env!("CARGO_BIN_EXE_soakdown"))
        .args(words)
        .env_remove("NO_COLOR")
        .stdin(Stdio::null())
        .output()?)
}

fn page(words: &[&str]) -> Result<String, Box<dyn Error>> {
    let output = soakdown(words)?;
    assert!(output.status.success(), "{words:?}: {}", String::from_utf8_lossy(&output.stderr));
    assert!(output.stderr.is_empty(), "{words:?}: {}", String::from_utf8_lossy(&output.stderr));
    Ok(String::from_utf8(output.stdout)?)
}

fn names(words: &[&str]) -> Result<Vec<String>, Box<dyn Error>> {
    let document: Value = serde_json::from_str(&page(words)?)?;
    assert_eq!(document["format"], "soakdown-materials/1");
    let materials = document["materials"].as_array().ok_or("no materials")?;
    Ok(materials.iter().filter_map(|row| Some(row["name"].as_str()?.to_owned())).collect())
}

#[test]
fn the_table_can_be_filtered() -> Outcome {
    let all = names(&["materials", "--json"])?;
    assert!(all.len() >= 35 && all.is_sorted(), "{all:?}");
    let copper = names(&["materials", "--json", "--find", "COPPER"])?;
    assert!(
        copper.len() >= 4 && copper.len() < all.len() && copper.contains(&"copper".to_owned()),
        "{copper:?}"
    );
    let sure = names(&["materials", "--json", "--confidence", "high"])?;
    assert!(sure.contains(&"copper".to_owned()) && !sure.contains(&"zirconia".to_owned()), "{sure:?}");
    let hot = names(&["materials", "--json", "--limit-above", "900 degC"])?;
    assert!(hot.contains(&"zirconia".to_owned()) && !hot.contains(&"copper".to_owned()), "{hot:?}");
    let table = page(&["materials", "--find", "copper"])?;
    assert!(
        table.contains(&format!("{} of {} built-in materials", copper.len(), all.len())),
        "{table}"
    );
    assert!(
        page(&["materials", "--find", "unobtainium"])?.contains("0 of "),
        "an empty table is an answer"
    );
    Ok(())
}

#[test]
fn one_material_shows_everything_its_card_says() -> Outcome {
    let si = page(&["materials", "stainless-304"])?;
    for word in [
        "density",
        "conductivity",
        "heat capacity",
        "emissivity",
        "limit",
        "melts",
        "confidence",
        "source",
        "note",
        "°C",
        "W/m/K",
        "│",
    ] {
        assert!(si.contains(word), "no {word}: {si}");
    }
    assert!(si.contains("no design") && !si.contains('\u{1b}'), "{si}");
    let us = page(&["materials", "stainless-304", "--units", "us"])?;
    assert!(us.contains("Btu/h/ft/°F") && us.contains("°F") && !us.contains("°C:"), "{us}");
    assert_eq!(names(&["materials", "stainless-304", "--json"])?, ["stainless-304"]);
    Ok(())
}

#[test]
fn an_unknown_name_is_refused_with_the_nearest() -> Outcome {
    let output = soakdown(&["materials", "stainles_304"])?;
    assert_eq!(output.status.code(), Some(2));
    assert!(output.stdout.is_empty());
    let told = String::from_utf8(output.stderr)?;
    assert!(told.contains("did you mean \"stainless-304\"?"), "{told}");
    let output = soakdown(&["materials", "steel"])?;
    assert!(String::from_utf8(output.stderr)?.contains("carbon-steel"));
    let output = soakdown(&["materials", "copper", "--find", "steel"])?;
    assert_eq!(output.status.code(), Some(2));
    Ok(())
}
