//! Bars, followed walls and warm starts as a person meets them: through case files. Every case is invented.

use serde_json::Value;
use std::error::Error;
use std::fs;
use std::path::Path;
use std::process::Command;

type Outcome = Result<(), Box<dyn Error>>;

/// A run in the root of the repository; its result.
fn run(words: &[&str]) -> Result<Value, Box<dyn Error>> {
    let output = Command::new(env!("CARGO_BIN_EXE_soakdown"))
        .args(["run", "--json"])
        .args(words)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()?;
    if !output.status.success() {
        return Err(format!("{words:?}: {}", String::from_utf8_lossy(&output.stderr)).into());
    }
    Ok(serde_json::from_slice(&output.stdout)?)
}

fn number(value: &Value) -> Result<f64, Box<dyn Error>> {
    value.as_f64().ok_or_else(|| format!("{value} is no number").into())
}

const TWICE: &str = r#"
soakdown = 1
title = "Invented slab, fired twice"

[surroundings]
air = "20 degC"

[profile]
phases = [ { burn = "2 s" }, { hold = "598 s" }, { burn = "2 s" }, { shutdown = "10 min" } ]

[[station]]
name = "slab"
layers = [
  { name = "liner", material = "copper", thickness = "8 mm", joint = { conductance = "1 kW/m2/K" } },
  { name = "felt", material = "ceramic-fibre-felt", thickness = "5 mm" },
  { name = "jacket", material = "stainless-304", thickness = "3 mm" },
]

[station.heating]
model = "film"
coefficient = "1 kW/m2/K"
gas_temperature = "2500 K"

[station.idle]
coefficient = "10 W/m2/K"

[station.outside]
convection = { coefficient = "20 W/m2/K" }

[[station.probe]]
name = "TC1"
depth = "5 mm"
lag = "0.3 s"

[[wait]]
name = "touch"
where = "everywhere"
below = "48 degC"
"#;

fn rows(path: &Path) -> Result<Vec<Vec<f64>>, Box<dyn Error>> {
    let mut reader = csv::Reader::from_path(path)?;
    let mut rows = Vec::new();
    for record in reader.records() {
        let record = record?;
        let numbers = record.iter().enumerate().filter(|(index, _)| *index != 1);
        rows.push(numbers.map(|(_, field)| field.parse()).collect::<Result<Vec<f64>, _>>()?);
    }
    Ok(rows)
}

#[test]
fn a_run_that_starts_from_an_earlier_one_is_the_uninterrupted_run() -> Outcome {
    let folder = tempfile::tempdir()?;
    let at = |name: &str| folder.path().join(name).display().to_string();
    let once = TWICE.replace("{ burn = \"2 s\" }, { hold = \"598 s\" }, ", "");
    let again = format!("{once}\n[start]\nfrom = \"first/depths.csv\"\nat = \"10 min\"\n");
    fs::write(folder.path().join("twice.toml"), TWICE)?;
    fs::write(folder.path().join("first.toml"), &once)?;
    fs::write(folder.path().join("again.toml"), &again)?;
    let twice = run(&[&at("twice.toml"), "--out", &at("twice"), "--times", "601 s, 602 s, 603 s, 620 s, 900 s"])?;
    run(&[&at("first.toml"), "--out", &at("first"), "--times", "10 min"])?;
    let again = run(&[&at("again.toml"), "--out", &at("again"), "--times", "1 s, 2 s, 3 s, 20 s, 300 s"])?;
    let (whole, part) = (
        rows(&folder.path().join("twice/trace.csv"))?,
        rows(&folder.path().join("again/trace.csv"))?,
    );
    assert_eq!((whole.len(), part.len()), (5, 5));
    for (whole, part) in whole.iter().zip(&part) {
        assert!((whole[0] - part[0] - 600.0).abs() < 1e-9);
        // Temperatures; the last two columns are fluxes.
        for (whole, part) in whole[1..whole.len() - 2].iter().zip(&part[1..part.len() - 2]) {
            assert!((whole - part).abs() < 0.05, "{whole} K, restarted {part} K");
        }
    }
    let of = |result: &Value, keys: &str| number(result["stations"][0].pointer(keys).unwrap_or(&Value::Null));
    for keys in ["/outer_face/peak_K", "/hot_face/peak_K", "/joints/0/peak_K", "/probes/0/peak_K"] {
        let (whole, part) = (of(&twice, keys)?, of(&again, keys)?);
        assert!((whole - part).abs() < 0.05, "{keys}: {whole} K, restarted {part} K");
    }
    let slope = of(&twice, "/waits/0/slope_s_per_K")?;
    assert!((of(&twice, "/waits/0/wait_s")? - of(&again, "/waits/0/wait_s")?).abs() < 0.05 * slope);
    // The share of the steady state that was reached counts from where this run started.
    assert!(of(&again, "/energy/imbalance")? < 1e-9);
    assert_eq!(again["files"][0]["path"], "first/depths.csv");
    let digest = again["files"][0]["digest"].as_str().ok_or("no digest")?;
    assert!(digest.starts_with("sha256:") && digest.len() == 71, "{digest}");
    Ok(())
}

#[test]
fn the_warm_restart_keeps_its_limits_and_breaks_them_as_it_says() -> Outcome {
    let verdict = |settings: &[&str]| -> Result<Value, Box<dyn Error>> {
        let mut words = vec!["examples/warm-restart.toml"];
        for setting in settings {
            words.extend(["--set", *setting]);
        }
        Ok(run(&words)?["verdict"].clone())
    };
    assert_eq!(verdict(&[])?, "within-limits");
    assert_eq!(verdict(&["start.at=20 min"])?, "over-limit");
    assert_eq!(verdict(&["profile.phases.0.burn=4 s"])?, "over-limit");
    let cold = run(&["examples/warm-restart/first-firing.toml", "--set", "profile.phases.0.burn=4 s"])?;
    assert_eq!(cold["verdict"], "within-limits");
    Ok(())
}

#[test]
fn the_shipped_depths_are_those_of_the_first_firing() -> Outcome {
    let folder = tempfile::tempdir()?;
    let out = folder.path().display().to_string();
    run(&["examples/warm-restart/first-firing.toml", "--out", &out, "--times", "3 s, 20 min, 1 h"])?;
    let faces = |path: &Path| -> Result<Vec<[f64; 2]>, Box<dyn Error>> {
        let mut faces = Vec::new();
        for record in csv::Reader::from_path(path)?.records() {
            let record = record?;
            let (time, depth): (f64, f64) = (record[1].parse()?, record[2].parse()?);
            if [1200.0, 3600.0].contains(&time) && (depth == 0.0 || (depth - 0.024).abs() < 1e-9) {
                faces.push([time, record[3].parse()?]);
            }
        }
        Ok(faces)
    };
    let fresh = faces(&folder.path().join("depths.csv"))?;
    let shipped = faces(&Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/warm-restart/depths.csv"))?;
    assert_eq!((fresh.len(), shipped.len()), (4, 4));
    for (fresh, shipped) in fresh.iter().zip(&shipped) {
        assert!(
            (fresh[1] - shipped[1]).abs() < 0.1,
            "{fresh:?}, shipped {shipped:?}: run the first firing again and copy its depths.csv"
        );
    }
    Ok(())
}

#[test]
fn the_valve_strut_keeps_its_limits_and_a_short_strut_does_not() -> Outcome {
    let whole = run(&["examples/valve-strut.toml"])?;
    assert_eq!(whole["verdict"], "within-limits");
    let strut = &whole["stations"][1];
    // The seat is warmest minutes after the chamber's outer face was.
    let late = number(&strut["outer_face"]["peak_s"])? - number(&whole["stations"][0]["outer_face"]["peak_s"])?;
    assert!(late > 300.0, "{late}");
    assert!(strut["steady"]["exists"] == false && number(&strut["energy"]["imbalance"])? < 1e-9);
    let one_way = |warning: &Value| warning["code"] == "follows-one-way" && warning["station"] == "strut";
    assert!(
        whole["warnings"].as_array().is_some_and(|list| list.iter().any(one_way)),
        "{}",
        whole["warnings"]
    );
    let short = run(&["examples/valve-strut.toml", "--set", "station.strut.layers.strut.thickness=15 mm"])?;
    assert_eq!(short["verdict"], "over-limit");
    Ok(())
}

#[test]
fn check_says_whom_a_strut_follows() -> Outcome {
    let output = Command::new(env!("CARGO_BIN_EXE_soakdown"))
        .args(["check", "examples/valve-strut.toml"])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()?;
    let page = String::from_utf8_lossy(&output.stdout).split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(page.contains("follows the outer-face of chamber"), "{page}");
    assert!(page.contains("what it draws is not taken from that wall"), "{page}");
    Ok(())
}
