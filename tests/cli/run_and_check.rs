//! `check` and `run` as a person uses them: exit statuses, what goes to which stream, files. The case is invented.

use serde_json::Value;
use std::error::Error;
use std::fs;
use std::path::Path;
use std::process::{Command, Output, Stdio};
use tempfile::TempDir;

type Outcome = Result<(), Box<dyn Error>>;

const CASE: &str = r#"
soakdown = 1
title = "Invented slab, 2 s firing"

[surroundings]
air = "20 degC"

[profile]
phases = [ { burn = "2 s" }, { shutdown = "10 min" } ]

[[station]]
name = "slab"
shape = "plane"
layers = [
  { name = "liner", material = "metal", thickness = "8 mm", limit = "600 degC", joint = { conductance = "5 kW/m2/K", limit = "250 degC" } },
  { name = "jacket", material = "metal", thickness = "3 mm", limit = "400 degC" },
]

[station.heating]
model = "film"
coefficient = "1 kW/m2/K"
gas_temperature = "2500 K"

[station.idle]
coefficient = "10 W/m2/K"

[station.outside]
convection = { coefficient = "20 W/m2/K" }
emissivity = 0.8

[[station.probe]]
name = "TC1"
depth = "4 mm"
lag = "0.3 s"

[[wait]]
name = "hands on"
where = "outer-face"
below = "48 degC"

[material.metal]
density = "8000 kg/m3"
heat_capacity = "400 J/kg/K"
conductivity = "100 W/m/K"
emissivity = 0.5
"#;

/// A folder with the case in it.
struct Bench {
    folder: TempDir,
}

impl Bench {
    fn new() -> Result<Self, Box<dyn Error>> {
        Self::with(CASE.as_bytes())
    }

    fn with(case: &[u8]) -> Result<Self, Box<dyn Error>> {
        let folder = tempfile::tempdir()?;
        fs::write(folder.path().join("slab.toml"), case)?;
        Ok(Self { folder })
    }

    fn path(&self) -> &Path {
        self.folder.path()
    }

    fn soakdown(&self, words: &[&str]) -> Result<Output, Box<dyn Error>> {
        Ok(Command::new(env!("CARGO_BIN_EXE_soakdown"))
            .args(words)
            .current_dir(self.path())
            .env_remove("NO_COLOR")
            .stdin(Stdio::null())
            .output()?)
    }
}

fn status(output: &Output) -> i32 {
    output.status.code().unwrap_or(-1)
}

fn out(output: &Output) -> String {
    String::from_utf8_lossy(&output.stdout).into_owned()
}

fn err(output: &Output) -> String {
    String::from_utf8_lossy(&output.stderr).into_owned()
}

fn rows(path: &Path) -> Result<(csv::StringRecord, Vec<csv::StringRecord>), Box<dyn Error>> {
    let mut reader = csv::Reader::from_path(path)?;
    let header = reader.headers()?.clone();
    let rows = reader.records().collect::<Result<_, _>>()?;
    Ok((header, rows))
}

#[test]
fn a_run_prints_its_verdict_first_and_fits_the_screen() -> Outcome {
    let output = Bench::new()?.soakdown(&["run", "slab.toml"])?;
    assert_eq!(status(&output), 0, "{}", err(&output));
    let page = out(&output);
    assert!(page.starts_with("WITHIN LIMITS"), "{page}");
    assert!(page.lines().count() <= 40, "{page}");
    assert!(page.lines().all(|line| line.chars().count() <= 100), "{page}");
    assert!(!page.contains('\u{1b}'), "colour without a terminal: {page}");
    for forbidden in ["all clear", "cool to touch", "permitted", " safe ", " safely "] {
        assert!(!page.to_lowercase().contains(forbidden), "{page}");
    }
    Ok(())
}

#[test]
fn json_is_one_document_and_nothing_else() -> Outcome {
    let bench = Bench::new()?;
    let output = bench.soakdown(&["run", "slab.toml", "--json"])?;
    assert_eq!(status(&output), 0, "{}", err(&output));
    let document: Value = serde_json::from_slice(&output.stdout)?;
    assert_eq!(document["format"], "soakdown-result/1");
    assert_eq!(document["command"], "soakdown run slab.toml --json");
    assert_eq!(document["case"], "slab.toml");
    assert_eq!(document["verdict"], "within-limits");
    assert_eq!(document["last_burn_end_s"], 2.0);
    let station = &document["stations"][0];
    assert_eq!(station["log"], Value::Null);
    assert_eq!(station["joints"][0]["between"][1], "jacket");
    assert_eq!(station["waits"][0]["state"], "cools");
    // The heat adds up: METHOD.md, "Who checks the solver".
    assert!(
        station["energy"]["imbalance"].as_f64().is_some_and(|imbalance| imbalance < 1e-8),
        "{station}"
    );

    let output = bench.soakdown(&["check", "slab.toml", "--json", "--wall", "800 K"])?;
    let document: Value = serde_json::from_slice(&output.stdout)?;
    assert_eq!(document["format"], "soakdown-check/1");
    assert_eq!(document["stations"][0]["heating"]["wall_K"], 800.0);
    // q = h (T_gas − T_wall): 1000 × (2500 − 800) W/m².
    let flux = document["stations"][0]["heating"]["flux_W_m2"].as_f64().unwrap_or_default();
    assert!((flux - 1.7e6).abs() < 1.0, "{flux}");
    Ok(())
}

#[test]
fn the_same_case_gives_the_same_document() -> Outcome {
    let bench = Bench::new()?;
    let first = bench.soakdown(&["run", "slab.toml", "--json"])?;
    let second = bench.soakdown(&["run", "slab.toml", "--json", "--quiet", "--color", "always"])?;
    assert_eq!(out(&first), out(&second));
    Ok(())
}

#[test]
fn documents_are_written_into_a_new_folder() -> Outcome {
    let bench = Bench::new()?;
    let output = bench.soakdown(&["run", "slab.toml", "--out", "results/first"])?;
    assert_eq!(status(&output), 0, "{}", err(&output));
    let folder = bench.path().join("results/first");
    let mut names: Vec<String> = fs::read_dir(&folder)?
        .map(|entry| Ok(entry?.file_name().to_string_lossy().into_owned()))
        .collect::<Result<_, std::io::Error>>()?;
    names.sort();
    assert_eq!(names, ["depths.csv", "result.json", "trace.csv"]);
    let document: Value = serde_json::from_slice(&fs::read(folder.join("result.json"))?)?;
    assert_eq!(document["command"], "soakdown run slab.toml");

    let (header, trace) = rows(&folder.join("trace.csv"))?;
    let columns: Vec<&str> = header.iter().collect();
    assert_eq!(
        columns,
        [
            "time_s",
            "phase",
            "slab/hot-face_K",
            "slab/liner|jacket:inner_K",
            "slab/liner|jacket:outer_K",
            "slab/outer-face_K",
            "slab/TC1_K",
            "slab/TC1:true_K",
            "slab/flux_in_W_m2",
            "slab/flux_out_W_m2"
        ]
    );
    let change: Vec<&str> = trace
        .iter()
        .filter(|row| row[0].parse() == Ok(2.0))
        .map(|row| row.get(1).unwrap_or(""))
        .collect();
    assert_eq!(change, ["burn", "shutdown"], "two rows at the phase change, the ending phase first");
    let last: f64 = trace.last().ok_or("no rows")?[0].parse()?;
    // The JSON reader of this test may miss a number's last digit.
    let until = document["computed_until_s"].as_f64().ok_or("no end")?;
    assert!((last - until).abs() <= 1e-14 * until, "{last} and {until}");
    let times: Vec<f64> = trace.iter().map(|row| row[0].parse()).collect::<Result<_, _>>()?;
    assert!(times.is_sorted());

    let (header, depths) = rows(&folder.join("depths.csv"))?;
    assert_eq!(header.iter().collect::<Vec<_>>(), ["station", "time_s", "depth_m", "temperature_K"]);
    // A joint with a resistance has two rows of equal depth.
    let at_joint = depths
        .iter()
        .filter(|row| row[1].parse() == Ok(2.0) && row[2].parse() == Ok(0.008))
        .count();
    assert_eq!(at_joint, 2);

    let output = bench.soakdown(&["check", "slab.toml", "--out", "results/first", "--quiet"])?;
    assert_eq!((status(&output), out(&output)), (0, String::new()));
    assert!(folder.join("check.json").exists());
    Ok(())
}

#[test]
fn asked_times_are_exactly_the_rows() -> Outcome {
    let bench = Bench::new()?;
    let output = bench.soakdown(&["run", "slab.toml", "--out", "results", "--times", "10 s, 1 s,2 s, 5 min"])?;
    assert_eq!(status(&output), 0, "{}", err(&output));
    let (_, trace) = rows(&bench.path().join("results/trace.csv"))?;
    let mut got: Vec<(f64, String)> = Vec::new();
    for row in &trace {
        got.push((row[0].parse()?, row[1].to_owned()));
    }
    let want = [(1.0, "burn"), (2.0, "burn"), (10.0, "shutdown"), (300.0, "shutdown")];
    assert_eq!(got.len(), want.len(), "{got:?}");
    for ((time, phase), (wanted, kind)) in got.iter().zip(want) {
        assert!((time - wanted).abs() < 1e-9 && phase == kind, "{got:?}");
    }
    let (_, depths) = rows(&bench.path().join("results/depths.csv"))?;
    assert!(depths.iter().any(|row| row[1].parse() == Ok(300.0)));

    let output = bench.soakdown(&["run", "slab.toml", "--times", "1 s"])?;
    assert_eq!(status(&output), 0);
    assert!(err(&output).contains("--out"), "an option without effect is told: {}", err(&output));
    Ok(())
}

#[test]
fn strict_tells_by_the_exit_status() -> Outcome {
    let bench = Bench::new()?;
    assert_eq!(status(&bench.soakdown(&["run", "slab.toml", "--strict", "--quiet"])?), 0);
    let longer = "profile.phases.0.burn=20 s";
    let output = bench.soakdown(&["run", "slab.toml", "--strict", "--set", longer])?;
    assert_eq!(status(&output), 3, "{}", err(&output));
    assert!(out(&output).starts_with("OVER A LIMIT"), "still printed: {}", out(&output));
    assert_eq!(status(&bench.soakdown(&["run", "slab.toml", "--quiet", "--set", longer])?), 0);
    Ok(())
}

#[test]
fn a_setting_changes_the_answer_and_stands_in_the_command() -> Outcome {
    let bench = Bench::new()?;
    let peak = |words: &[&str]| -> Result<(f64, String), Box<dyn Error>> {
        let document: Value = serde_json::from_slice(&bench.soakdown(words)?.stdout)?;
        let peak = document["stations"][0]["hot_face"]["peak_K"].as_f64().ok_or("no peak")?;
        Ok((peak, document["command"].as_str().unwrap_or_default().to_owned()))
    };
    let (written, _) = peak(&["run", "slab.toml", "--json"])?;
    let (shorter, command) = peak(&[
        "run",
        "slab.toml",
        "--json",
        "--set",
        "profile.phases.0.burn=3 s",
        "--set",
        "profile.phases.0.burn=1 s",
    ])?;
    assert!(shorter < written, "the later one wins: {shorter} and {written}");
    assert_eq!(
        command,
        "soakdown run slab.toml --set 'profile.phases.0.burn=3 s' --set 'profile.phases.0.burn=1 s' --json"
    );
    let output = bench.soakdown(&["run", "slab.toml", "--set", "profile.phases.7.burn=3 s"])?;
    assert_eq!(status(&output), 2, "a path that names nothing: {}", out(&output));
    Ok(())
}

#[test]
fn us_units_are_for_the_screen_only() -> Outcome {
    let bench = Bench::new()?;
    let page = out(&bench.soakdown(&["run", "slab.toml", "--units", "us"])?);
    assert!(page.contains("118.4 °F") && !page.contains("°C"), "{page}");
    let document: Value = serde_json::from_slice(&bench.soakdown(&["run", "slab.toml", "--units", "us", "--json"])?.stdout)?;
    assert_eq!(document["stations"][0]["waits"][0]["below_K"], 321.15);
    Ok(())
}

#[test]
fn quiet_prints_nothing_but_mistakes() -> Outcome {
    let bench = Bench::new()?;
    let output = bench.soakdown(&["run", "slab.toml", "--quiet"])?;
    assert_eq!((status(&output), out(&output), err(&output)), (0, String::new(), String::new()));
    let output = bench.soakdown(&["run", "nowhere.toml", "--quiet"])?;
    assert_eq!((status(&output), out(&output)), (2, String::new()));
    assert!(err(&output).contains("nowhere.toml"), "{}", err(&output));
    Ok(())
}

#[test]
fn colour_comes_only_when_asked() -> Outcome {
    let bench = Bench::new()?;
    assert!(out(&bench.soakdown(&["run", "slab.toml", "--color", "always"])?).contains('\u{1b}'));
    assert!(!out(&bench.soakdown(&["run", "slab.toml", "--color", "never"])?).contains('\u{1b}'));
    Ok(())
}

#[test]
fn wrong_usage_is_status_2() -> Outcome {
    let bench = Bench::new()?;
    let wrong: [&[&str]; 8] = [
        &[],
        &["fly"],
        &["run"],
        &["run", "slab.toml", "--unknown"],
        &["run", "slab.toml", "--times", "1"],
        &["run", "slab.toml", "--times", "1 K"],
        &["run", "slab.toml", "--units", "imperial"],
        &["check", "slab.toml", "--wall", "-300 degC"],
    ];
    for words in wrong {
        let output = bench.soakdown(words)?;
        assert_eq!((status(&output), out(&output)), (2, String::new()), "{words:?}");
        assert!(
            !err(&output).is_empty() && !err(&output).contains("panicked"),
            "{words:?}: {}",
            err(&output)
        );
    }
    for words in [["--version"], ["--help"]] {
        let output = bench.soakdown(&words)?;
        assert_eq!(status(&output), 0);
        assert!(out(&output).contains("soakdown"));
    }
    Ok(())
}

#[test]
fn a_case_that_can_not_be_read_is_status_2() -> Outcome {
    let bench = Bench::with(b"soakdown = 1\ntitle = \"\xff\xfe\"\n")?;
    for case in ["nowhere.toml", ".", "slab.toml"] {
        for command in ["check", "run"] {
            let output = bench.soakdown(&[command, case, "--json"])?;
            assert_eq!((status(&output), out(&output)), (2, String::new()), "{case}");
            assert!(
                err(&output).contains("error") && !err(&output).contains("panicked"),
                "{case}: {}",
                err(&output)
            );
        }
    }
    Ok(())
}

#[test]
fn a_mistake_is_shown_at_its_place() -> Outcome {
    let case = CASE.replace("thickness = \"3 mm\"", "thicknes = \"3 mm\"");
    let line = case.lines().position(|line| line.contains("thicknes =")).ok_or("no such line")? + 1;
    let output = Bench::with(case.as_bytes())?.soakdown(&["run", "slab.toml"])?;
    assert_eq!((status(&output), out(&output)), (2, String::new()));
    let told = err(&output);
    assert!(
        told.contains(&format!("slab.toml:{line}:")) && told.contains("^^^^^^^^") && told.contains("thickness"),
        "{told}"
    );
    Ok(())
}

#[test]
fn what_can_not_be_written_is_status_1_and_named() -> Outcome {
    let bench = Bench::new()?;
    fs::write(bench.path().join("results"), "a file in the way")?;
    let output = bench.soakdown(&["run", "slab.toml", "--quiet", "--out", "results"])?;
    assert_eq!(status(&output), 1);
    assert!(err(&output).contains("results"), "{}", err(&output));
    fs::create_dir_all(bench.path().join("folder/trace.csv"))?;
    let output = bench.soakdown(&["run", "slab.toml", "--quiet", "--out", "folder"])?;
    assert_eq!(status(&output), 1);
    assert!(err(&output).contains("trace.csv"), "{}", err(&output));
    Ok(())
}

/// Whoever reads has seen enough: that is no failure.
#[cfg(unix)]
#[test]
fn a_closed_pipe_is_no_failure() -> Outcome {
    let bench = Bench::new()?;
    let mut child = Command::new(env!("CARGO_BIN_EXE_soakdown"))
        .args(["run", "slab.toml", "--json"])
        .current_dir(bench.path())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()?;
    drop(child.stdout.take());
    let output = child.wait_with_output()?;
    assert_eq!((status(&output), err(&output)), (0, String::new()));
    Ok(())
}
