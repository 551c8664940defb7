//! The schemas, with an independent validator: they accept what the program accepts and writes, and refuse what a schema can see.

use boon::{Compiler, SchemaIndex, Schemas};
use serde_json::Value;
use std::collections::BTreeMap;
use std::error::Error;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

type Outcome = Result<(), Box<dyn Error>>;

/// Mistakes, by their codes, that no schema can see to be mistakes, and why.
const UNSEEN_CODES: &[(&str, &str)] = &[
    ("cannot-read", "another file is not there"),
    (
        "excluded",
        "keys exclude each other: the table of keys says what may stand, the rules between keys stand in lowering",
    ),
    ("follows-itself", "names are compared with each other"),
    ("joint-on-outermost", "the place in a list decides"),
    ("key-does-not-fit", "another key decides"),
    ("missing-column", "another file lacks something"),
    ("not-built-yet", "the schema knows the whole format, this version can't compute all of it"),
    ("not-rising", "values are compared with each other"),
    ("orientation-does-not-fit", "another key decides"),
    ("other-layers", "another file has others"),
    ("other-thickness", "another file has another"),
    ("outside-wall", "values are added up"),
    ("perimeter-too-small", "values are compared with each other"),
    ("phase-kind", "keys exclude each other"),
    ("repeated-name", "names are compared with each other"),
    ("shutdown-not-last", "the place in a list decides"),
    ("station-not-in-file", "another file lacks something"),
    ("time-not-in-file", "another file lacks something"),
    ("too-many-phases", "values are multiplied"),
    ("unknown-layer", "a name given elsewhere"),
    ("unknown-material", "a name given elsewhere, or built in"),
    ("unknown-path", "a path through the whole case"),
    ("unknown-place", "a name given elsewhere"),
    ("unknown-station", "a name given elsewhere"),
    ("unknown-profile", "a name built in, or a path"),
    ("unknown-value", "a name given in another file"),
    ("vacuum", "another key decides"),
    ("wind-missing", "another key decides"),
    ("wind-unused", "another key decides"),
];

/// The same for single cases, whose codes a schema sees elsewhere.
const UNSEEN_CASES: &[(&str, &str)] = &[
    ("bar-without-convection", "required because of another key"),
    ("bar-without-perimeter", "required because of another key"),
    ("below-absolute-zero", "the size of a value with a unit"),
    ("facing-up-without-length", "required because of another key"),
    ("far-too-large", "the size of a value with a unit"),
    ("forced-plate-without-length", "required because of another key"),
    ("gap-without-gas", "required because of another key"),
    ("heating-log-with-words", "the mistake is in another file"),
    ("material-without-density", "required because no built-in material has this name"),
    ("missing-orientation", "required because of another key"),
    ("missing-solar-absorptivity", "required because of another key"),
    ("missing-view-of-a-cylinder", "required because of another key"),
    ("profile-count-not-whole", "the kind of value that is due depends on the profile"),
    ("profile-value-in-another-unit", "the unit that is due depends on the profile"),
    ("profile-value-without-unit", "the unit that is due depends on the profile"),
    ("spread-of-a-profile-value-in-another-unit", "the unit that is due depends on a path"),
    ("spread-without-sigmas", "required because of another key"),
    ("start-from-words", "the mistake is in another file"),
    ("start-without-time", "required because of another key"),
    ("touch-longer-than-the-table", "the size of a value with a unit"),
    ("variant-in-another-unit", "the unit that is due depends on a path"),
    ("wall-without-conductance", "required because of another key"),
];

/// The text is no TOML: the editor's parser sees that, and there is nothing to hold against a schema.
const NO_TOML: &[&str] = &["key-given-twice", "unclosed-text", "unquoted-quantity"];

fn root(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(name)
}

fn printed(words: &[&str]) -> Result<Value, Box<dyn Error>> {
    let output = Command::new(env!("CARGO_BIN_EXE_soakdown"))
        .args(words)
        .current_dir(root(""))
        .stdin(Stdio::null())
        .output()?;
    if !output.status.success() {
        return Err(format!("{words:?}: {}", String::from_utf8_lossy(&output.stderr)).into());
    }
    Ok(serde_json::from_slice(&output.stdout)?)
}

struct Validator {
    schemas: Schemas,
    index: SchemaIndex,
}

impl Validator {
    fn new(words: &[&str], identity: &str) -> Result<Self, Box<dyn Error>> {
        let schema = printed(words)?;
        assert_eq!(schema["$schema"], "https://json-schema.org/draft/2020-12/schema");
        assert_eq!(schema["$id"], identity);
        let mut schemas = Schemas::new();
        let mut compiler = Compiler::new();
        compiler.add_resource(identity, schema).map_err(|error| error.to_string())?;
        // Compiling checks the schema against the dialect that it names.
        let index = compiler.compile(identity, &mut schemas).map_err(|error| format!("{error:#}"))?;
        Ok(Self { schemas, index })
    }

    fn case() -> Result<Self, Box<dyn Error>> {
        Self::new(&["schema"], "urn:soakdown:case:1")
    }

    fn results() -> Result<Self, Box<dyn Error>> {
        Self::new(&["schema", "--results"], "urn:soakdown:results:1")
    }

    fn check(&self, document: &Value) -> Result<(), String> {
        self.schemas.validate(document, self.index).map_err(|error| format!("{error:#}"))
    }
}

fn cases(folder: &str) -> Result<Vec<PathBuf>, std::io::Error> {
    let mut files: Vec<_> = std::fs::read_dir(root(folder))?
        .filter_map(|entry| entry.ok().map(|entry| entry.path()))
        .filter(|path| path.extension().is_some_and(|extension| extension == "toml"))
        .collect();
    files.sort();
    Ok(files)
}

fn document(path: &Path) -> Result<Value, Box<dyn Error>> {
    let table: toml::Table = std::fs::read_to_string(path)?.parse()?;
    Ok(serde_json::to_value(table)?)
}

#[test]
fn every_shipped_case_is_accepted() -> Outcome {
    let validator = Validator::case()?;
    let (examples, starters) = (cases("examples")?, cases("profiles/starters")?);
    assert!(examples.len() >= 4 && starters.len() >= 4);
    for file in examples.iter().chain(&starters) {
        validator
            .check(&document(file)?)
            .map_err(|error| format!("{}: {error}", file.display()))?;
    }
    Ok(())
}

/// The parts of the format that no example shows, as the contract writes them.
#[test]
fn every_kind_of_value_is_accepted() -> Outcome {
    let validator = Validator::case()?;
    let example = std::fs::read_to_string(root("examples/heat-sink-chamber.toml"))?;
    let more = r#"
[cut_off]
delay = "50ms"
overrun = "+.5 s"
[material.my-felt]
density = "1.9e2 kg / m3"
heat_capacity = "0.2 Btu/lb/°F"
conductivity = [["20 °C", "0.05 W/m/K"], ["-4 degF", "5e-2 W.m-1.K-1"]]
emissivity = { bare = 0.1, oxidised = [["20 degC", 0.7], ["500 degC", 0.8]] }
limit = { value = "1100 degC", kind = "bond", for = "1 min" }
decomposes = "330 degC"
confidence = { density = "high" }
note = "one text"
[[variant]]
name = "hot day"
role = "day"
set = { "surroundings.air" = "40 degC" }
[[spread]]
input = "surroundings.air"
by = "20 %"
shape = "log-normal"
sigmas = 2
[fit]
free = [ { input = "a.b", from = 0.3, to = "3 mm" } ]
time = "t [s]"
columns = [ { probe = "throat/TC1", column = "T", unit = "degC", noise = "1.5 K" } ]
"#;
    let table: toml::Table = format!("{example}\n{more}").parse()?;
    validator.check(&serde_json::to_value(table)?)?;
    Ok(())
}

#[test]
fn bad_cases_are_refused_where_a_schema_can_see_it() -> Outcome {
    let validator = Validator::case()?;
    let codes: BTreeMap<&str, &str> = UNSEEN_CODES.iter().copied().collect();
    let unseen: BTreeMap<&str, &str> = UNSEEN_CASES.iter().copied().collect();
    let mut wrong = Vec::new();
    let mut seen = 0;
    let files = cases("tests/bad_input")?;
    for file in &files {
        let name = file.file_stem().and_then(|name| name.to_str()).unwrap_or_default();
        let refused = match document(file) {
            Ok(document) => validator.check(&document).is_err(),
            Err(_) if NO_TOML.contains(&name) => continue,
            Err(error) => {
                wrong.push(format!("{name} is no TOML: {error}"));
                continue;
            }
        };
        let text = std::fs::read_to_string(file)?;
        let code = text
            .strip_prefix("# expect: ")
            .and_then(|rest| rest.split_whitespace().next())
            .unwrap_or_default();
        seen += usize::from(refused);
        match (refused, unseen.get(name).or(codes.get(code))) {
            (false, None) => wrong.push(format!("{name} ({code}) is accepted, and not on the list of what a schema can't see")),
            (true, Some(why)) => wrong.push(format!("{name} is refused, and on the list: {why}")),
            _ => {}
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
    let names: Vec<_> = files.iter().filter_map(|file| file.file_stem()?.to_str()).collect();
    for name in unseen.keys().chain(NO_TOML) {
        assert!(names.contains(name), "{name} is on a list, and no file");
    }
    assert!(seen >= 25, "only {seen} of {} bad cases are seen", files.len());
    Ok(())
}

#[test]
fn what_the_program_writes_is_accepted() -> Outcome {
    let validator = Validator::results()?;
    for file in cases("examples")? {
        let path = file.to_str().ok_or("a path that is no text")?;
        for command in ["run", "check"] {
            let mut document = printed(&[command, path, "--json"])?;
            validator.check(&document).map_err(|error| format!("{command} {path}: {error}"))?;
            // A schema that accepts anything would prove nothing.
            document["case_digest"] = Value::Null;
            assert!(validator.check(&document).is_err(), "{command} {path} without a digest");
        }
    }
    for words in [&["materials", "--json"][..], &["materials", "copper", "--json"]] {
        let mut document = printed(words)?;
        validator.check(&document).map_err(|error| format!("{words:?}: {error}"))?;
        document["materials"][0]["confidence"] = "certain".into();
        assert!(validator.check(&document).is_err());
    }
    let mut profiles = printed(&["profiles", "--json"])?;
    validator.check(&profiles).map_err(|error| format!("profiles: {error}"))?;
    profiles["profiles"][0]["phases"][0]["kind"] = "pause".into();
    assert!(validator.check(&profiles).is_err());
    Ok(())
}

/// Every key is explained: a key without words is of no use in an editor.
#[test]
fn every_key_is_explained() -> Outcome {
    for (words, least) in [(&["schema"][..], 130), (&["schema", "--results"], 90)] {
        let schema = printed(words)?;
        let mut keys = 0;
        let definitions = schema["$defs"].as_object().ok_or("no definitions")?;
        for (name, section) in definitions.iter().chain(std::iter::once((&"the root".to_owned(), &schema))) {
            for (key, property) in section["properties"].as_object().into_iter().flatten() {
                keys += 1;
                let about = property["description"].as_str().unwrap_or_default();
                assert!(about.len() > 3, "{words:?}: {key} of {name} is not explained");
            }
        }
        assert!(keys >= least, "{words:?}: only {keys} keys");
    }
    Ok(())
}
