//! Checks of the whole room: texts and paths in, cases or mistakes out.

use super::{Case, InputValue, library, load};
use crate::diagnostics::{Diagnostics, Severity};
use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicUsize, Ordering};

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

/// A folder of a test's own, gone with it.
struct Folder(PathBuf);

impl Folder {
    fn new() -> Result<Self, std::io::Error> {
        static COUNT: AtomicUsize = AtomicUsize::new(0);
        let name = format!("soakdown-case-{}-{}", std::process::id(), COUNT.fetch_add(1, Ordering::Relaxed));
        let path = std::env::temp_dir().join(name);
        std::fs::create_dir_all(&path)?;
        Ok(Self(path))
    }

    fn path(&self) -> &Path {
        &self.0
    }
}

impl Drop for Folder {
    fn drop(&mut self) {
        // What can't be removed is left to the system's own tidying.
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

fn load_text(text: &str, settings: &[&str]) -> Result<Result<Case, Diagnostics>, std::io::Error> {
    let folder = Folder::new()?;
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
    for input in case.inputs.iter() {
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
            // Whoever sets a built-in material's limit makes it the case's own, even to the same value.
            let seen = |model: &crate::model::Model| match input.path.starts_with("material.") {
                true => format!("{model:?}").replace("origin: Library", "origin: Case"),
                false => format!("{model:?}"),
            };
            assert_eq!(seen(&again.model), seen(&case.model), "{setting}");
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
        ("station.throat.outside={ convection = }", "syntax", "{ convection = }"),
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

/// A flat plate with whatever a test puts on it.
fn plate(layers: &str, faces: &str, rest: &str) -> String {
    format!(
        "soakdown = 1\n[surroundings]\nair = \"20 degC\"\n{rest}\n[[station]]\nlayers = [ {layers} ]\n{faces}\n[station.heating]\nmodel = \"flux\"\nflux = \"1 MW/m2\"\n"
    )
}

const BURN: &str = "[profile]\nphases = [ { burn = \"2 s\" } ]";
const IDLE: &str = "[station.idle]\ncoefficient = \"5 W/m2/K\"\n";
const INSULATED: &str = "[station.outside]\nadiabatic = true\n";
const COPPER: &str = "{ name = \"liner\", material = \"copper\", thickness = \"8 mm\" }";

#[test]
fn one_nameless_station_is_called_wall() -> Outcome {
    let case = accepted(
        &plate(COPPER, &format!("{IDLE}{INSULATED}"), BURN),
        &["station.wall.heating.factor=2", "profile.phases.1.shutdown=1 h"],
    )?;
    let station = &case.model.stations()[0];
    assert_eq!(station.name(), "wall");
    assert_eq!(station.heating.as_ref().map(|heating| heating.factor), Some(2.0));
    assert_eq!(case.model.profile().phases()[1].duration(), 3600.0);
    assert_eq!(station.outer.outside, crate::model::Outside::Adiabatic);
    Ok(())
}

#[test]
fn a_wait_is_asked_of_every_station_that_has_its_place() -> Outcome {
    let second = CHAMBER[CHAMBER.find("[[station]]").unwrap_or(0)..]
        .replace("\"throat\"", "\"chamber\"")
        .replace("\"TC 1\"", "\"TC 2\"");
    let waits = "[[wait]]\nname = \"a\"\nwhere = \"liner|jacket\"\nbelow = \"60 degC\"\n[[wait]]\nname = \"b\"\nwhere = \"TC 2\"\ntouch = { contact = \"5 s\", surface = \"plastic\" }\n";
    let case = accepted(&format!("{CHAMBER}{second}{waits}"), &[])?;
    let asked: Vec<_> = case
        .model
        .waits()
        .iter()
        .map(|wait| (wait.name.as_str(), wait.station, wait.place, wait.below))
        .collect();
    use crate::model::Place::{Joint, Probe};
    assert_eq!(
        asked,
        [("a", 0, Joint(1), 333.15), ("a", 1, Joint(1), 333.15), ("b", 1, Probe(0), 344.15)]
    );
    assert_eq!(
        case.model.waits()[2].meaning.as_deref(),
        Some("bare skin up to 10 s on plastic, ISO 13732-1")
    );
    assert!(case.notices.iter().any(|notice| notice.code == "touch-from-memory"));
    Ok(())
}

#[test]
fn the_lower_emissivity_is_the_default_at_the_start_temperature() -> Outcome {
    let material = "[material.mine]\ndensity = \"2000 kg/m3\"\nheat_capacity = \"900 J/kg/K\"\nconductivity = \"2 W/m/K\"\nemissivity = { bare = [[\"20 degC\", 0.2], [\"500 degC\", 0.9]], oxidised = 0.5 }\n";
    let layers = "{ name = \"liner\", material = \"mine\", thickness = \"8 mm\" }";
    let text = plate(layers, &format!("{IDLE}{INSULATED}"), BURN) + material;
    let emissivity = |settings: &[&str]| accepted(&text, settings).map(|case| case.model.stations()[0].idle.emissivity.value(293.15));
    assert_eq!(emissivity(&[])?, 0.2);
    assert_eq!(emissivity(&["start.temperature=500 degC"])?, 0.5);
    assert_eq!(emissivity(&["station.wall.layers.liner.surface=oxidised"])?, 0.5);
    assert_eq!(emissivity(&["station.wall.idle.emissivity=0.7"])?, 0.7);
    Ok(())
}

#[test]
fn a_gap_takes_its_layers_emissivities() -> Outcome {
    let layers = "{ name = \"in\", material = \"copper\", surface = \"oxidised\", thickness = \"1 mm\", joint = { gap = \"2 mm\", gas = \"helium\" } }, { name = \"out\", material = \"copper\", thickness = \"1 mm\" }";
    let case = accepted(&plate(layers, &format!("{IDLE}{INSULATED}"), BURN), &[])?;
    match case.model.stations()[0].resistance(0) {
        Some(crate::model::Resistance::Gap(gap)) => {
            assert_eq!((gap.width, gap.gas, gap.emissivity), (2e-3, crate::model::GapGas::Helium, [0.65, 0.03]))
        }
        other => return Err(format!("{other:?}").into()),
    }
    Ok(())
}

const BAR: &str = r#"
soakdown = 1
title = "Strut"
[surroundings]
air = "20 degC"
wind = "2 m/s"
sun = "800 W/m2"
[profile]
phases = [ { burn = "2 s" } ]
[[station]]
shape = "bar"
section = "120 mm2"
perimeter = "44 mm"
layers = [
  { name = "rod", material = "stainless-304", thickness = "40 mm", surface = "oxidised" },
  { name = "foot", material = "mine", thickness = "10 mm", section = "400 mm2", perimeter = "80 mm" },
]
[station.heating]
model = "film"
coefficient = "1 kW/m2/K"
gas_temperature = "1500 K"
[station.idle]
coefficient = "5 W/m2/K"
[station.outside]
convection = "mixed"
solar_absorptivity = 0.5
emissivity = 0.9
[material.mine]
density = "2000 kg/m3"
heat_capacity = "900 J/kg/K"
conductivity = "2 W/m/K"
emissivity = 0.25
"#;

#[test]
fn the_sides_of_a_bar_lose_by_their_own_breadth_and_emissivity() -> Outcome {
    use crate::model::{Convection, ForcedSurface, NaturalSurface, Outside, Shape};
    let case = accepted(BAR, &[])?;
    let station = &case.model.stations()[0];
    assert_eq!(station.shape, Shape::Bar);
    assert_eq!(case.model.surroundings().wind, 2.0);
    let close = |found: f64, expected: f64| (found - expected).abs() < 1e-9 * expected;
    assert!(close(station.area_ratio(1, 0.0), 400.0 / 120.0) && close(station.side_area(1, 0.01), 0.08 * 0.01 / 120e-6));
    for (side, perimeter) in station.sides.iter().zip([0.044, 0.080]) {
        let breadth = perimeter / std::f64::consts::PI;
        let Convection::Mixed {
            natural: NaturalSurface::HorizontalCylinder(natural),
            forced: ForcedSurface::AcrossCylinder(forced),
        } = side.convection
        else {
            return Err(format!("{:?}", side.convection).into());
        };
        assert!(close(natural, breadth) && close(forced, breadth), "{natural} {forced} for {breadth}");
        // Broadside to the sun a round bar catches 1/π of its side.
        assert!(close(side.solar_absorptivity, 0.5 / std::f64::consts::PI));
    }
    let emissivity = |table: &Option<crate::model::Table>| table.as_ref().map(|table| table.value(300.0));
    assert_eq!(emissivity(&station.sides[1].emissivity), Some(0.25));
    let oxidised = emissivity(&station.sides[0].emissivity).ok_or("none")?;
    let bare = accepted(BAR, &["station.wall.layers.rod.surface=bare"])?;
    assert!(emissivity(&bare.model.stations()[0].sides[0].emissivity).is_some_and(|bare| bare < oxidised));
    let Outside::Open(far_end) = &station.outer.outside else {
        return Err("no far end".into());
    };
    assert_eq!((emissivity(&far_end.emissivity), far_end.solar_absorptivity), (Some(0.9), 0.5));
    // A held far end leaves the sides as they are.
    let held = accepted(&BAR.replace("emissivity = 0.9", "fixed = \"30 degC\""), &[])?;
    assert!(matches!(held.model.stations()[0].outer.outside, Outside::Fixed(_)));
    assert_eq!(held.model.stations()[0].sides, station.sides);
    // A vertical one takes its height.
    let vertical = accepted(
        &BAR.replace("\"mixed\"", "\"natural\"\norientation = \"vertical\"\nlength = \"50 mm\"")
            .replace("wind = \"2 m/s\"", ""),
        &[],
    )?;
    assert_eq!(
        vertical.model.stations()[0].sides[0].convection,
        Convection::Natural(NaturalSurface::Vertical(0.05))
    );
    Ok(())
}

#[test]
fn plates_and_cylinders_meet_the_wind_as_they_stand() -> Outcome {
    use crate::model::{Convection, ForcedSurface, NaturalSurface, Outside};
    let motion = |shape: &str, outside: &str| -> Result<Convection, Box<dyn std::error::Error>> {
        let text = BAR
            .replace("shape = \"bar\"\nsection = \"120 mm2\"\nperimeter = \"44 mm\"\n", shape)
            .replace(", section = \"400 mm2\", perimeter = \"80 mm\"", "")
            .replace("convection = \"mixed\"\n", outside)
            .replace("coefficient = \"5 W/m2/K\"\n", "coefficient = \"5 W/m2/K\"\nview = 0.5\n");
        match &accepted(&text, &[])?.model.stations()[0].outer.outside {
            Outside::Open(losses) => Ok(losses.convection.clone()),
            other => Err(format!("{other:?}").into()),
        }
    };
    let plane = |outside: &str| motion("", outside);
    let forced = "convection = \"forced\"\n";
    let length = "length = \"300 mm\"\n";
    assert_eq!(plane(&format!("{forced}{length}"))?, Convection::Forced(ForcedSurface::AlongPlate(0.3)));
    assert_eq!(
        plane(&format!("convection = \"mixed\"\norientation = \"facing-up\"\n{length}"))?,
        Convection::Mixed {
            natural: NaturalSurface::FacingUp(0.3),
            forced: ForcedSurface::AlongPlate(0.3)
        }
    );
    // 20 mm inside, 50 mm of layers on both sides.
    let round = motion("shape = \"cylinder\"\ninner_diameter = \"20 mm\"\n", forced)?;
    let Convection::Forced(ForcedSurface::AcrossCylinder(diameter)) = round else {
        return Err(format!("{round:?}").into());
    };
    assert!((diameter - 0.120).abs() < 1e-12, "{diameter}");
    Ok(())
}

#[test]
fn losses_coolant_and_sun_reach_the_model() -> Outcome {
    let faces = format!(
        "{IDLE}solar_absorptivity = 0.4\npurge_coefficient = \"50 W/m2/K\"\npurge_temperature = \"10 degC\"\n[station.outside]\nconvection = {{ coefficient = \"8 W/m2/K\" }}\nsolar_absorptivity = 0.3\ncoolant = {{ coefficient = \"30 kW/m2/K\", temperature = \"15 degC\", phases = [\"burn\", \"hold\"] }}\nlimit = \"90 degC\"\n"
    );
    let profile = "sun = \"900 W/m2\"\n[profile]\nphases = [ { burn = \"2 s\", coolant = false }, { hold = \"9 s\", purge = true } ]";
    let text = plate(COPPER, &faces, profile) + "open = true\n[allowance]\nlimits = \"50 K\"\n[solver]\ntolerance = \"0.02 K\"\n";
    let case = accepted(&text, &[])?;
    let station = &case.model.stations()[0];
    let crate::model::Outside::Open(losses) = &station.outer.outside else {
        return Err("no losses".into());
    };
    assert_eq!(losses.convection, crate::model::Convection::Coefficient(8.0));
    let coolant = losses
        .coolant
        .as_ref()
        .map(|coolant| (coolant.coefficient, coolant.temperature, coolant.phases.hold, coolant.phases.shutdown));
    assert_eq!(coolant, Some((30e3, 288.15, true, false)));
    assert_eq!((losses.solar_absorptivity, station.idle.solar_absorptivity), (0.3, 0.4));
    assert_eq!(
        station.idle.purge.as_ref().map(|purge| (purge.coefficient, purge.temperature)),
        Some((50.0, 283.15))
    );
    assert_eq!(station.outer.limit.as_ref().map(|limit| limit.temperature), Some(363.15));
    assert!(station.heating.as_ref().is_some_and(|heating| heating.open));
    assert!(!case.model.profile().phases()[0].coolant && case.model.profile().phases()[1].purge);
    assert_eq!(
        (
            case.model.allowance().limits,
            case.model.allowance().heating,
            case.model.allowance().given()
        ),
        (50.0, 1.0, true)
    );
    assert_eq!(case.model.tolerance, 0.02);
    Ok(())
}

#[test]
fn a_heating_log_is_read_from_beside_the_case() -> Outcome {
    let folder = Folder::new()?;
    std::fs::write(folder.path().join("heat.csv"), "\u{feff}time_s, flux_W_m2\r\n0, 1e6\r\n\r\n0.5, 2e6\r\n")?;
    let path = folder.path().join("case.toml");
    let heating = "model = \"log\"\nfile = \"heat.csv\"\nnet = true";
    let text = plate(COPPER, &format!("{IDLE}{INSULATED}"), BURN).replace("model = \"flux\"\nflux = \"1 MW/m2\"", heating);
    std::fs::write(&path, text)?;
    let case = load(&path, &[]).map_err(|found| format!("{:?}", told(&found)))?;
    let expected = crate::model::LogRows::Flux {
        rows: vec![(0.0, 1e6), (0.5, 2e6)],
        net: true,
    };
    let model = case.model.stations()[0].heating.as_ref().map(|heating| heating.model.clone());
    assert_eq!(model, Some(crate::model::HeatingModel::Log(expected)));
    assert_eq!(case.files[0].path, "heat.csv");
    assert!(case.files[0].digest.starts_with("sha256:"));
    assert!(case.notices.iter().any(|notice| notice.code == "log-held"));
    Ok(())
}

#[test]
fn sections_for_later_commands_are_checked_and_said_to_be_unused() -> Outcome {
    let later = r#"
[engine]
chamber_pressure = "20 bar"
propellants = "oxygen-methane"
mixture_ratio = 3.0
[cut_off]
delay = "0.1 s"
[[variant]]
name = "hot day"
role = "day"
set = { "surroundings.air" = "40 degC", "start.temperature" = "45 degC" }
[[spread]]
input = "station.throat.heating.factor"
by = "20 %"
shape = "normal"
sigmas = 2
[[spread]]
input = "station.*.layers.coating.thickness"
by = "0.05 mm"
shape = "uniform"
with = { "station.throat.heating.factor" = 0.6 }
[[spread]]
input = "material.zirconia.conductivity"
by = "factor 1.3"
shape = "log-normal"
sigmas = 1
[abort]
blanking = "0.2 s"
[fit]
free = [ { input = "station.throat.layers.liner.joint.conductance", from = "0.5 kW/m2/K", to = "50 kW/m2/K" }, { input = "material.copper.conductivity", from = 0.5, to = 2 } ]
time = "t [s]"
columns = [ { probe = "throat/TC 1", column = "T [degC]", unit = "degC", noise = "1.5 K" } ]
"#;
    let case = accepted(&format!("{CHAMBER}{later}"), &[])?;
    let unused = case.notices.iter().filter(|notice| notice.code == "section-unused").count();
    assert_eq!(unused, 6);
    let found = refused(
        &format!(
            "{CHAMBER}{}",
            later
                .replace("\"0.05 mm\"", "\"0.05 K\"")
                .replace("= 0.6", "= 1.6")
                .replace("to = 2 ", "to = 0.1 ")
        ),
        &[],
    )?;
    for expected in [("wrong-unit", "K"), ("out-of-range", "1.6"), ("out-of-range", "0.1")] {
        assert!(found.contains(&(expected.0, expected.1.to_owned())), "{expected:?}: {found:?}");
    }
    Ok(())
}

#[test]
fn a_purge_without_coefficient_is_told() -> Outcome {
    let case = accepted(CHAMBER, &[])?;
    assert!(case.notices.iter().any(|notice| notice.code == "purge-without-coefficient"));
    assert!(
        case.notices
            .iter()
            .any(|notice| notice.code == "library-limit" && notice.place.as_deref() == Some("coating"))
    );
    assert!(case.notices.iter().any(|notice| notice.code == "low-confidence-material"));
    Ok(())
}

#[test]
fn odd_values_are_doubts_and_not_mistakes() -> Outcome {
    let case = accepted(&CHAMBER.replace("\"0.25 mm\"", "\"2 m\""), &[])?;
    assert_eq!(told(&case.doubts), [("odd-value", "2 m".to_owned())]);
    assert!(case.notices.iter().any(|notice| notice.code == "odd-value"));
    Ok(())
}

#[test]
fn the_digest_is_that_of_the_file() -> Outcome {
    // FIPS 180-4 names the algorithm; the value is that of sha256sum.
    assert_eq!(
        super::digest::of(&[b"abc"]),
        "sha256:ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
    );
    let plain = accepted(CHAMBER, &[])?.digest;
    assert_eq!(plain, super::digest::of(&[CHAMBER.as_bytes()]));
    assert_ne!(plain, accepted(CHAMBER, &["title=other"])?.digest);
    Ok(())
}

/// Whatever is found must point at characters that are there, and say something.
fn sound_or_told(outcome: &Result<Case, Diagnostics>, context: &str) {
    let diagnostics = match outcome {
        Ok(case) => &case.doubts,
        Err(found) => {
            assert!(found.has_errors(), "refused without an error: {context}");
            found
        }
    };
    for found in &diagnostics.list {
        assert!(!found.message.is_empty(), "{context}");
        if let Some((source, range)) = &found.place {
            assert!(
                diagnostics.sources[*source].text.get(range.clone()).is_some(),
                "{range:?} is no place: {context}"
            );
        }
    }
}

const NONSENSE: [&str; 24] = [
    "true",
    "-1",
    "0",
    "1e400",
    "nan",
    "-inf",
    "[]",
    "{}",
    "\"\"",
    "\"x\"",
    "\"日本 ½\"",
    "[[[[]]]]",
    "1979-05-27",
    "{ a = { b = 1 } }",
    "\"1e308 d\"",
    "[{}]",
    "[[{}, {}]]",
    "[[\"1 K\"]]",
    "999999999999999999999999999999999999999999999999",
    "\"1 mm\\u00e9\"",
    "'''5 m'''",
    "[{ burn = 1 }, 2]",
    "\"-1 K\"",
    "{ value = [1] }",
];

#[test]
fn nonsense_in_any_place_is_told() -> Outcome {
    let folder = Folder::new()?;
    let path = folder.path().join("case.toml");
    for (index, _) in CHAMBER.match_indices(" = ") {
        let start = index + 3;
        let end = start + CHAMBER[start..].find(['\n', ',', '}']).unwrap_or(0);
        for nonsense in NONSENSE {
            let text = format!("{}{nonsense}{}", &CHAMBER[..start], &CHAMBER[end..]);
            std::fs::write(&path, &text)?;
            sound_or_told(&load(&path, &[]), &text);
        }
    }
    Ok(())
}

#[test]
fn nonsense_set_on_any_path_is_told() -> Outcome {
    let folder = Folder::new()?;
    let path = folder.path().join("case.toml");
    std::fs::write(&path, CHAMBER)?;
    for known in accepted(CHAMBER, &[])?.inputs {
        for nonsense in NONSENSE {
            let setting = format!("{}={nonsense}", known.path);
            sound_or_told(&load(&path, std::slice::from_ref(&setting)), &setting);
        }
    }
    Ok(())
}

#[test]
fn torn_files_are_told() -> Outcome {
    let folder = Folder::new()?;
    let path = folder.path().join("case.toml");
    for (index, letter) in CHAMBER.char_indices().step_by(3) {
        for text in [
            CHAMBER[..index].to_owned(),
            format!("{}{}", &CHAMBER[..index], &CHAMBER[index + letter.len_utf8()..]),
        ] {
            std::fs::write(&path, &text)?;
            sound_or_told(&load(&path, &[]), &text);
        }
    }
    let deep = format!("{CHAMBER}\nx = {}", "[".repeat(5000));
    std::fs::write(&path, &deep)?;
    sound_or_told(&load(&path, &[]), "deep nesting");
    std::fs::write(&path, b"soakdown = 1\n\xff\xfe")?;
    sound_or_told(&load(&path, &[]), "no text");
    sound_or_told(&load(folder.path(), &[]), "a folder");
    sound_or_told(&load(&folder.path().join("nothing.toml"), &[]), "no file");
    Ok(())
}

proptest::proptest! {
    #[test]
    fn any_text_is_a_quantity_or_a_mistake_at_its_place(text in "\\PC*") {
        for kind in crate::units::Kind::ALL {
            if let Err(error) = crate::units::read(&text, kind) {
                proptest::prop_assert!(text.get(error.range.clone()).is_some());
            }
        }
    }

    #[test]
    fn any_number_with_any_unit_text_is_read_or_told(number in proptest::num::f64::ANY, unit in "[a-zA-Z0-9./%° -]{0,12}") {
        let text = format!("{number:e} {unit}");
        for kind in crate::units::Kind::ALL {
            match crate::units::read(&text, kind) {
                Ok(value) => proptest::prop_assert!(value.is_finite()),
                Err(error) => proptest::prop_assert!(text.get(error.range.clone()).is_some()),
            }
        }
    }

    #[test]
    fn any_setting_is_taken_or_told(setting in "(station|profile|material|surroundings)?[.\"'*a-z0-9]{0,12}=?\\PC{0,12}") {
        if let Ok(outcome) = load_text(CHAMBER, &[&setting]) {
            sound_or_told(&outcome, &setting);
        }
    }
}

/// A case that uses a ready profile.
fn with_ready(profile: &str) -> String {
    let start = CHAMBER.find("phases = ").unwrap_or(0);
    let end = start + CHAMBER[start..].find("\n[[station]]").unwrap_or(0);
    format!("{}{profile}{}", &CHAMBER[..start], &CHAMBER[end..])
}

fn durations(case: &Case) -> Vec<f64> {
    case.model.profile().phases().iter().map(|phase| phase.duration()).collect()
}

#[test]
fn every_shipped_profile_can_be_used_and_read_as_a_file() -> Outcome {
    let files = folder("profiles/burns")?;
    let mut names: Vec<_> = files.iter().filter_map(|path| path.file_stem()?.to_str()).collect();
    let mut known: Vec<_> = super::ready::names().collect();
    names.sort_unstable();
    known.sort_unstable();
    assert_eq!(names, known, "the list in ready.rs and the folder agree");
    assert!(names.len() >= 8);
    for name in names {
        let by_name = accepted(&with_ready(&format!("use = \"{name}\"")), &[]).map_err(|error| format!("{name}: {error}"))?;
        let path = PathBuf::from(env!("CARGO_MANIFEST_DIR")).join(format!("profiles/burns/{name}.toml"));
        let by_path = accepted(&with_ready(&format!("use = '{}'", path.display())), &[]).map_err(|error| format!("{name}: {error}"))?;
        assert_eq!(by_name.model.profile(), by_path.model.profile(), "{name}");
        assert_eq!(
            (by_name.files.len(), by_path.files.len()),
            (0, 1),
            "a file that is read is named with its digest"
        );
        let ready = super::ready_profile(name).map_err(|found| format!("{name}: {:?}", told(&found)))?;
        assert_eq!(&ready.profile, by_name.model.profile(), "{name}");
        assert!(ready.explanation.len() > 100 && ready.written.contains('$'), "{name}");
        for value in &ready.values {
            let path = format!("profile.values.{}", value.name);
            let listed = input(&by_name, &path).ok_or_else(|| format!("{name}: {path} is not listed"))?;
            assert_eq!((listed.from.as_str(), &listed.value), ("default", &value.value), "{name} {path}");
            assert!(value.meaning.len() > 10, "{name} {path}");
            // What a page shows as the default can be set again, and changes nothing but where it comes from.
            let set = accepted(
                &with_ready(&format!("use = \"{name}\"")),
                &[&format!("{path}={}", value.default.trim_matches('"'))],
            )?;
            assert_eq!(set.model.profile(), by_name.model.profile(), "{name} {path}");
            assert_eq!(input(&set, &path).map(|input| input.from.as_str()), Some("set"));
        }
        let fixed = by_name.inputs.iter().any(|input| input.path.starts_with("profile.phases"));
        assert!(!fixed, "{name}: phases of a ready profile can't be set, and are not listed as if");
    }
    Ok(())
}

#[test]
fn values_go_where_they_are_named() -> Outcome {
    let text = with_ready("use = \"pulse-train\"\nvalues = { pulse = \"1 s\", gap = \"4 s\", count = 2 }");
    assert_eq!(durations(&accepted(&text, &[])?), [1.0, 4.0, 1.0, 4.0, 3600.0]);
    let set = accepted(&text, &["profile.values.pulse=3 s", "profile.values.count=1"])?;
    assert_eq!(durations(&set), [3.0, 4.0, 3600.0]);
    assert_eq!(input(&set, "profile.values.pulse").map(|input| input.from.as_str()), Some("set"));
    assert_eq!(input(&set, "profile.values.gap").map(|input| input.from.as_str()), Some("case"));
    let other = accepted(&text, &["profile.use=single-burn", "profile.values={ burn = \"7 s\" }"])?;
    assert_eq!(durations(&other), [7.0, 3600.0]);
    for (setting, code, characters) in [
        ("profile.values.pulze=3 s", "unknown-value", "pulze"),
        ("profile.values.pulse=3 K", "wrong-unit", "K"),
        ("profile.values.pulse=3", "missing-unit", "3"),
        ("profile.use=pulse_tran", "unknown-profile", "pulse_tran"),
        ("profile.phases.0.burn=3 s", "excluded", "use"),
    ] {
        let found = refused(&text, &[setting]).map_err(|error| format!("{setting}: {error}"))?;
        assert!(
            found.iter().any(|found| found.0 == code && (code == "excluded" || found.1 == characters)),
            "{setting}: {found:?}"
        );
    }
    Ok(())
}

#[test]
fn an_odd_value_is_doubted_once_though_it_is_used_twice() -> Outcome {
    let case = accepted(&with_ready("use = \"hot-restart\"\nvalues = { burn = \"3 h\" }"), &[])?;
    assert_eq!(told(&case.doubts), [("odd-value", "3 h".to_owned())]);
    Ok(())
}

#[test]
fn mistakes_in_a_profile_of_ones_own_are_shown_there() -> Outcome {
    let folder = Folder::new()?;
    let case = folder.path().join("case.toml");
    std::fs::write(&case, with_ready("use = \"mine.toml\""))?;
    let sound = "title = \"Mine\"\nexplanation = \"One burn.\"\nphases = [ { burn = \"$burn\" } ]\nvalues.burn = { default = \"2 s\", meaning = \"its length\" }\n";
    std::fs::write(folder.path().join("mine.toml"), sound)?;
    load(&case, &[]).map_err(|found| format!("{:?}", told(&found)))?;
    for (from, to, code, characters) in [
        ("$burn", "$brun", "unknown-value", "$brun"),
        ("\"2 s\"", "\"2 m\"", "wrong-unit", "m"),
        ("values.burn", "values.rest", "unused-value", "rest"),
        ("title", "titel", "unknown-key", "titel"),
        ("{ burn =", "{ bunr =", "unknown-key", "bunr"),
        ("meaning", "meening", "unknown-key", "meening"),
        ("phases = [ {", "phases = [ [", "syntax", ""),
        ("values.burn = {", "values.burn = \"3 s\" #", "wrong-type", "\"3 s\""),
    ] {
        std::fs::write(folder.path().join("mine.toml"), sound.replacen(from, to, 1))?;
        let Err(found) = load(&case, &[]) else {
            return Err(format!("{to}: accepted").into());
        };
        let names: Vec<_> = found.list.iter().filter_map(|found| found.place.as_ref()).map(|place| place.0).collect();
        assert!(
            names.iter().all(|source| found.sources[*source].name.ends_with("mine.toml")),
            "{to}: {:?}",
            told(&found)
        );
        let told = told(&found);
        assert!(
            told.iter()
                .any(|found| found.0 == code && (characters.is_empty() || found.1 == characters)),
            "{to}: {told:?}"
        );
    }
    Ok(())
}

#[test]
fn every_starter_is_sound_and_names_itself() -> Outcome {
    let files = folder("profiles/starters")?;
    assert_eq!(files.len(), super::STARTERS.len(), "the list in shipped.rs and the folder agree");
    assert!(super::STARTERS.len() >= 5);
    for starter in super::STARTERS {
        let text = starter.text("my-own.toml");
        assert!(
            text.contains("soakdown run my-own.toml") && !text.contains("CASE.toml"),
            "{}",
            starter.kind
        );
        let case = accepted(&text, &[]).map_err(|error| format!("{}: {error}", starter.kind))?;
        assert!(case.doubts.list.is_empty(), "{}: {:?}", starter.kind, told(&case.doubts));
        assert!(!case.model.waits().is_empty(), "{}", starter.kind);
    }
    Ok(())
}
