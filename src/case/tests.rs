//! Checks of the whole room: texts and paths in, cases or mistakes out.

use super::{Case, InputValue, library, load};
use crate::diagnostics::{Diagnostics, Severity};
use std::path::{Path, PathBuf};

type Outcome = Result<(), Box<dyn std::error::Error>>;

/// A sound case: a coated copper chamber in its jacket.
const CHAMBER: &str = r#"
soakdown = 1
title = "Chamber"
[surroundings]
air = "20 degC"
[profile]
phases = [ { burn = "2 s", ramp = "0.1 s" }, { hold = "30 s", purge = true }, { repeat = 3, phases = [ { burn = "1 s" }, { hold = "4 s" } ] } ]
[[station]]
name = "throat"
shape = "cylinder"
inner_diameter = "40 mm"
layers = [
  { name = "coating", material = "zirconia", thickness = "0.25 mm" },
  { name = "liner", material = "copper", thickness = "8 mm", joint = { conductance = "5 kW/m2/K", limit = "250 degC" } },
  { name = "jacket", material = "stainless-304", thickness = "3 mm", limit = { value = "600 degC", kind = "strength", for = "2 s" } },
]
[station.heating]
model = "film"
coefficient = "4 kW/m2/K"
gas_temperature = "3000 K"
[station.idle]
coefficient = "5 W/m2/K"
cavity = { length = "120 mm", open_ends = 1 }
[station.outside]
convection = "natural"
[[station.probe]]
name = "TC 1"
in = "liner"
from_outside = "1 mm"
"#;

fn load_text(text: &str, settings: &[&str]) -> Result<Result<Case, Diagnostics>, std::io::Error> {
    let folder = tempfile::tempdir()?;
    let path = folder.path().join("case.toml");
    std::fs::write(&path, text)?;
    let settings: Vec<_> = settings.iter().map(|setting| (*setting).to_owned()).collect();
    Ok(load(&path, &settings))
}

fn told(diagnostics: &Diagnostics) -> Vec<(&'static str, String)> {
    let characters = |found: &crate::diagnostics::Diagnostic| match &found.place {
        Some((source, range)) => diagnostics.sources[*source].text[range.clone()].to_owned(),
        None => String::new(),
    };
    diagnostics.list.iter().map(|found| (found.code, characters(found))).collect()
}

fn accepted(text: &str, settings: &[&str]) -> Result<Case, Box<dyn std::error::Error>> {
    load_text(text, settings)?.map_err(|found| format!("{:?}", found.list).into())
}

fn refused(text: &str, settings: &[&str]) -> Result<Vec<(&'static str, String)>, Box<dyn std::error::Error>> {
    match load_text(text, settings)? {
        Ok(_) => Err("the case was accepted".into()),
        Err(found) => Ok(told(&found)),
    }
}

fn input<'a>(case: &'a Case, path: &str) -> Option<&'a super::Input> {
    case.inputs.iter().find(|input| input.path == path)
}

fn folder(name: &str) -> Result<Vec<PathBuf>, std::io::Error> {
    let mut files: Vec<_> = std::fs::read_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join(name))?
        .filter_map(|entry| entry.ok().map(|entry| entry.path()))
        .filter(|path| path.extension().is_some_and(|extension| extension == "toml"))
        .collect();
    files.sort();
    Ok(files)
}

#[test]
fn a_sound_case_is_accepted() -> Outcome {
    let case = accepted(CHAMBER, &[])?;
    assert_eq!(case.model.title(), "Chamber");
    let station = &case.model.stations()[0];
    assert_eq!(station.name(), "throat");
    assert_eq!(station.layers().len(), 3);
    assert!((station.probes()[0].depth - 7.25e-3).abs() < 1e-12);
    assert_eq!(case.model.profile().phases().len(), 9, "2 + 3·2 + the shutdown that is added");
    let wait = &case.model.waits()[0];
    assert_eq!((wait.name.as_str(), wait.below), ("touch", 321.15));
    assert_eq!(wait.meaning.as_deref(), Some("bare skin up to 10 min, ISO 13732-1"));
    Ok(())
}

#[test]
fn every_input_is_listed_with_its_origin() -> Outcome {
    let case = accepted(CHAMBER, &["station.throat.layers.liner.thickness=9 mm"])?;
    let from = |path: &str| input(&case, path).map(|input| input.from.clone());
    assert_eq!(from("surroundings.air").as_deref(), Some("case"));
    assert_eq!(from("surroundings.surfaces").as_deref(), Some("default"));
    assert_eq!(from("station.throat.layers.liner.thickness").as_deref(), Some("set"));
    assert_eq!(from("profile.phases.2.phases.1.hold").as_deref(), Some("case"));
    assert_eq!(from("station.throat.probe.\"TC 1\".from_outside").as_deref(), Some("case"));
    assert_eq!(from("station.throat.layers.liner.joint.limit").as_deref(), Some("case"));
    assert!(from("material.copper.conductivity").is_some_and(|from| from.contains("Incropera") && from.contains("confidence high")));
    assert_eq!(
        input(&case, "wait.touch.below").map(|input| &input.value),
        Some(&InputValue::Number(321.15))
    );
    // 1/(1 + 4·120/40), see view.rs
    assert_eq!(
        input(&case, "station.throat.idle.view").map(|input| &input.value),
        Some(&InputValue::Number(1.0 / 13.0))
    );
    let mut paths: Vec<_> = case.inputs.iter().map(|input| &input.path).collect();
    let all = paths.len();
    paths.sort();
    paths.dedup();
    assert_eq!(paths.len(), all, "an input is listed twice");
    Ok(())
}

#[test]
fn the_listed_paths_can_be_set() -> Outcome {
    let case = accepted(CHAMBER, &[])?;
    for input in case.inputs.iter().filter(|input| input.path != "station.wall.name") {
        let value = match &input.value {
            InputValue::Number(number) if input.unit.is_empty() => number.to_string(),
            InputValue::Number(number) => format!("{number} {}", input.unit),
            InputValue::Word(word) => format!("\"{word}\""),
            InputValue::Switch(switch) => switch.to_string(),
            InputValue::Table(points) if input.unit.is_empty() => {
                format!(
                    "[{}]",
                    points.iter().map(|(t, v)| format!("[\"{t} K\", {v}]")).collect::<Vec<_>>().join(",")
                )
            }
            InputValue::Table(points) => {
                let pairs = points.iter().map(|(t, v)| format!("[\"{t} K\", \"{v} {}\"]", input.unit));
                format!("[{}]", pairs.collect::<Vec<_>>().join(","))
            }
        };
        let setting = format!("{}={value}", input.path);
        // A view excludes the cavity that it came from, and the added shutdown and the default wait have no place in the file.
        let derived =
            ["station.throat.idle.view", "profile.phases.3.shutdown"].contains(&input.path.as_str()) || input.path.starts_with("wait.touch");
        if !derived {
            let again = accepted(CHAMBER, &[&setting]).map_err(|error| format!("{setting}: {error}"))?;
            assert_eq!(format!("{:?}", again.model), format!("{:?}", case.model), "{setting}");
        }
    }
    Ok(())
}

#[test]
fn settings_are_read_as_their_key_expects() -> Outcome {
    let settings = [
        "station.*.heating.factor=1.2",
        "profile.phases.2.phases.0.burn=1.5s",
        "profile.phases.1.purge=false",
        "surroundings.sun=\"0 W/m2\"",
        "station.throat.outside.convection={ coefficient = \"10 W/m2/K\" }",
        "station.throat.layers.jacket.limit=700 degC",
        "material.copper.conductivity=[[\"20 degC\", \"390 W/m/K\"], [\"500 degC\", \"360 W/m/K\"]]",
        "station.throat.layers.coating.joint.conductance=50 kW/m2/K",
    ];
    let case = accepted(CHAMBER, &settings)?;
    let station = &case.model.stations()[0];
    assert_eq!(station.heating.as_ref().map(|heating| heating.factor), Some(1.2));
    assert_eq!(case.model.profile().phases()[2].duration(), 1.5);
    assert!(!case.model.profile().phases()[1].purge);
    assert_eq!(station.layers()[2].limit.as_ref().map(|limit| limit.temperature), Some(973.15));
    assert_eq!(station.layers()[1].material().conductivity.value(293.15), 390.0);
    assert!(station.layers()[0].joint.as_ref().is_some_and(crate::model::Joint::resists));
    assert!(case.notices.iter().any(|notice| notice.code == "material-changed"));
    Ok(())
}

#[test]
fn mistakes_in_settings_point_into_the_setting() -> Outcome {
    for (setting, code, characters) in [
        ("station.throat.layers.linr.thickness=9 mm", "unknown-path", "linr"),
        ("station.throat.layer.liner.thickness=9 mm", "unknown-path", "layer"),
        ("station.throat.layers.liner.thickness.x=9 mm", "unknown-path", "x"),
        ("station.throat.layers.liner.thickness=9 s", "wrong-unit", "s"),
        ("station.throat.layers.liner.thickness=\"9 s\"", "wrong-unit", "s"),
        ("station.throat.layers.liner.thickness=9", "missing-unit", "9"),
        ("station.throat.layers.liner.thickness=-1 mm", "out-of-range", "-1 mm"),
        ("profile.phases.7.burn=1 s", "unknown-path", "7"),
        ("station.throat.heating.factor=much", "wrong-type", "much"),
        ("station.throat.outside.convection.coefficient=1 W/m2/K", "unknown-path", "coefficient"),
        ("material.coper.density=1 kg/m3", "unknown-path", "coper"),
        ("surroundings.air", "bad-setting", "surroundings.air"),
        ("surroundings.air=", "bad-setting", "surroundings.air="),
        ("=1", "unknown-path", ""),
        ("station.throat.outside={ convection = }", "syntax", "}"),
        ("station.throat.idle.emissivity=1.5", "out-of-range", "1.5"),
        ("station.throat.outside.wind=1 m/s", "unknown-path", "wind"),
    ] {
        let found = refused(CHAMBER, &[setting]).map_err(|error| format!("{setting}: {error}"))?;
        assert!(found.contains(&(code, characters.to_owned())), "{setting}: {found:?}");
    }
    Ok(())
}

#[test]
fn every_shipped_material_can_be_used() -> Outcome {
    let cards = folder("profiles/materials")?;
    let names: Vec<_> = cards.iter().filter_map(|path| path.file_stem()?.to_str()).collect();
    assert_eq!(names, library::names().collect::<Vec<_>>(), "the list in library.rs and the folder agree");
    assert!(names.len() >= 12);
    for name in names {
        let text = CHAMBER.replace("material = \"copper\"", &format!("material = \"{name}\""));
        let case = accepted(&text, &[]).map_err(|error| format!("{name}: {error}"))?;
        for property in ["density", "heat_capacity", "conductivity"] {
            let listed = input(&case, &format!("material.{name}.{property}")).ok_or_else(|| format!("{name} {property}"))?;
            assert!(listed.from.contains("confidence "), "{name} {property}: {}", listed.from);
            assert!(!listed.from.contains("no source given"), "{name} {property}");
        }
        assert!(input(&case, &format!("material.{name}.emissivity.oxidised")).is_some(), "{name}");
    }
    Ok(())
}

#[test]
fn all_mistakes_are_reported_together() -> Outcome {
    let text = CHAMBER
        .replace("\"0.25 mm\"", "\"0.25 mn\"")
        .replace("material = \"copper\"", "material = \"coper\"")
        .replace("air = \"20 degC\"", "air = 20")
        .replace("convection = \"natural\"", "convecton = \"natural\"");
    let found = refused(&text, &[])?;
    for expected in [
        ("unknown-unit", "mn"),
        ("unknown-material", "coper"),
        ("missing-unit", "20"),
        ("unknown-key", "convecton"),
    ] {
        assert!(found.contains(&(expected.0, expected.1.to_owned())), "{expected:?}: {found:?}");
    }
    Ok(())
}

/// Every file of tests/bad_input says in its first line which mistake must be found where: `# expect: CODE at "the very characters"`.
#[test]
fn every_bad_case_is_refused_at_its_place() -> Outcome {
    let files = folder("tests/bad_input")?;
    assert!(files.len() >= 35, "{} files", files.len());
    let mut wrong = Vec::new();
    for path in files {
        let text = std::fs::read_to_string(&path)?;
        let first = text.lines().next().unwrap_or_default();
        let expected = first.strip_prefix("# expect: ").and_then(|rest| rest.split_once(" at "));
        let Some((code, characters)) = expected else {
            wrong.push(format!("{}: no expectation", path.display()));
            continue;
        };
        let characters = characters.strip_prefix('"').and_then(|rest| rest.strip_suffix('"')).unwrap_or(characters);
        match load(&path, &[]) {
            Ok(_) => wrong.push(format!("{}: accepted", path.display())),
            Err(found) => {
                let errors: Vec<_> = told(&found);
                if !errors.iter().any(|error| error.0 == code && error.1 == characters) {
                    wrong.push(format!("{}: {errors:?}", path.display()));
                }
                if !found.has_errors()
                    || found
                        .list
                        .iter()
                        .any(|found| found.severity == Severity::Error && found.message.is_empty())
                {
                    wrong.push(format!("{}: an error without words", path.display()));
                }
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    Ok(())
}
