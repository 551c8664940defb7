//! The first hour: starter cases, ready profiles, completions, manual pages, and a test's log beside the run.

use serde_json::Value;
use std::error::Error;
use std::fs;
use std::path::Path;
use std::process::{Command, Output, Stdio};

type Outcome = Result<(), Box<dyn Error>>;

fn soakdown(folder: &Path, words: &[&str]) -> Result<Output, Box<dyn Error>> {
    Ok(Command::new(env!("CARGO_BIN_EXE_soakdown"))
        .args(words)
        .current_dir(folder)
        .stdin(Stdio::null())
        .output()?)
}

/// Standard output of a command that must succeed.
fn told(folder: &Path, words: &[&str]) -> Result<String, Box<dyn Error>> {
    let output = soakdown(folder, words)?;
    if output.status.code() == Some(0) {
        Ok(String::from_utf8(output.stdout)?)
    } else {
        Err(format!("{words:?}: {:?}\n{}", output.status.code(), String::from_utf8_lossy(&output.stderr)).into())
    }
}

/// Standard error of a command that must end with this status and print nothing.
fn refused(folder: &Path, words: &[&str], status: i32) -> Result<String, Box<dyn Error>> {
    let output = soakdown(folder, words)?;
    let error = String::from_utf8_lossy(&output.stderr).into_owned();
    if output.status.code() == Some(status) && output.stdout.is_empty() && !error.contains("panicked") {
        Ok(error)
    } else {
        Err(format!("{words:?}: {:?}\n{error}", output.status.code()).into())
    }
}

fn starters(folder: &Path) -> Result<Vec<String>, Box<dyn Error>> {
    let page = told(folder, &["new", "--list"])?;
    let kinds = page.lines().take_while(|line| !line.is_empty()).filter(|line| !line.starts_with(' '));
    Ok(kinds.filter_map(|line| line.split(' ').next()).map(str::to_owned).collect())
}

#[test]
fn every_starter_runs_as_it_is_and_keeps_its_limits() -> Outcome {
    let folder = tempfile::tempdir()?;
    let kinds = starters(folder.path())?;
    assert!(kinds.len() >= 5, "{kinds:?}");
    for kind in &kinds {
        let page = told(folder.path(), &["new", kind, "--kind", kind])?;
        assert!(page.contains(&format!("soakdown run {kind}.toml")), "the next command is told: {page}");
        let case = format!("{kind}.toml");
        let document: Value = serde_json::from_str(&told(folder.path(), &["run", &case, "--strict", "--json"])?)?;
        assert_eq!(document["verdict"], "within-limits", "{kind}");
        let waits = document["stations"][0]["waits"].as_array().ok_or("no waits")?;
        assert!(
            !waits.is_empty() && waits.iter().all(|wait| wait["state"] == "cools"),
            "{kind}: {waits:?}"
        );
        told(folder.path(), &["check", &case])?;
        // The settings that its first lines propose are sound, too.
        let text = fs::read_to_string(folder.path().join(&case))?;
        for setting in text.lines().filter_map(|line| line.strip_prefix('#')?.split_once("--set ")) {
            let (path, value) = setting.1.split_once('=').ok_or("no = sign")?;
            let value = value
                .strip_prefix('"')
                .map_or_else(|| value.split(' ').next(), |rest| rest.split('"').next());
            let setting = format!("{path}={}", value.unwrap_or_default());
            told(folder.path(), &["check", &case, "--set", &setting])?;
        }
    }
    Ok(())
}

#[test]
fn a_starter_without_a_kind_is_the_simplest_and_names_the_others() -> Outcome {
    let folder = tempfile::tempdir()?;
    let page = told(folder.path(), &["new", "my wall"])?;
    assert!(page.contains("soakdown run 'my wall.toml'"), "{page}");
    for kind in starters(folder.path())?.iter().skip(1) {
        assert!(page.contains(kind.as_str()), "{kind}: {page}");
    }
    let text = fs::read_to_string(folder.path().join("my wall.toml"))?;
    assert!(
        text.contains("soakdown run 'my wall.toml'") && text.contains("Bare steel plate"),
        "{text}"
    );
    Ok(())
}

#[test]
fn nothing_is_written_over_and_nothing_by_halves() -> Outcome {
    let folder = tempfile::tempdir()?;
    fs::write(folder.path().join("wall.toml"), "mine")?;
    let error = refused(folder.path(), &["new", "wall"], 1)?;
    assert!(error.contains("wall.toml exists already") && error.contains("another name"), "{error}");
    assert_eq!(fs::read_to_string(folder.path().join("wall.toml"))?, "mine");
    let error = refused(folder.path(), &["new", "nowhere/wall"], 1)?;
    assert!(error.contains("no folder nowhere"), "{error}");
    let error = refused(folder.path(), &["new", "wall2", "--kind", "bare-plat"], 2)?;
    assert!(error.contains("bare-plate"), "{error}");
    assert!(refused(folder.path(), &["new", ".."], 2)?.contains("my-wall"));
    refused(folder.path(), &["new"], 2)?;
    assert_eq!(fs::read_dir(folder.path())?.count(), 1, "nothing else was left");
    Ok(())
}

#[test]
fn every_profile_is_listed_explained_and_runs() -> Outcome {
    let folder = tempfile::tempdir()?;
    let path = folder.path();
    told(path, &["new", "wall"])?;
    let list = told(path, &["profiles"])?;
    let document: Value = serde_json::from_str(&told(path, &["profiles", "--json"])?)?;
    assert_eq!(document["format"], "soakdown-profiles/1");
    let profiles = document["profiles"].as_array().ok_or("no profiles")?;
    assert!(profiles.len() >= 8);
    let text = fs::read_to_string(path.join("wall.toml"))?;
    let start = text.find("phases = [").ok_or("no phases")?;
    let end = start + text[start..].find("\n]\n").ok_or("no end")? + 3;
    for profile in profiles {
        let name = profile["name"].as_str().ok_or("no name")?;
        assert!(list.lines().any(|line| line.starts_with(name)), "{name}: {list}");
        let page = told(path, &["profiles", name])?;
        for value in profile["values"].as_array().ok_or("no values")? {
            let (named, meaning) = (value["name"].as_str().ok_or("name")?, value["meaning"].as_str().ok_or("meaning")?);
            assert!(page.contains(&format!("${named}")) && page.contains(meaning), "{name} {named}: {page}");
        }
        // The lines that the page shows are those that a case takes.
        let lines: Vec<&str> = page
            .lines()
            .skip_while(|line| *line != "  [profile]")
            .skip(1)
            .take_while(|line| !line.is_empty())
            .collect();
        fs::write(
            path.join("used.toml"),
            format!("{}{}\n{}", &text[..start], lines.join("\n"), &text[end..]),
        )?;
        // A gentle heating, so that even the longest burn keeps the limits of a plate.
        let gentle = ["--set", "station.plate.heating.gas_temperature=500 K"];
        let run = ["run", "used.toml", "--json", "--strict", gentle[0], gentle[1]];
        let document: Value = serde_json::from_str(&told(path, &run)?)?;
        assert_eq!(document["verdict"], "within-limits", "{name}");
        let last = profile["phases"]
            .as_array()
            .and_then(|phases| phases.iter().rfind(|phase| phase["kind"] == "burn"));
        let end = last
            .and_then(|last| Some(last["start_s"].as_f64()? + last["duration_s"].as_f64()?))
            .ok_or("no burn")?;
        let ran = document["last_burn_end_s"].as_f64().ok_or("no end")?;
        assert!((ran - end).abs() < 1e-9 * end, "{name}: {ran} and {end}");
        // Its file is one that a case can name by path.
        fs::write(path.join("own.toml"), told(path, &["profiles", name, "--file"])?)?;
        told(path, &["profiles", "own.toml"])?;
    }
    let error = refused(path, &["profiles", "pulse-trane"], 2)?;
    assert!(error.contains("did you mean \"pulse-train\"?"), "{error}");
    Ok(())
}

#[test]
fn completions_know_the_commands_and_the_scenarios() -> Outcome {
    let folder = tempfile::tempdir()?;
    for shell in ["bash", "zsh", "fish"] {
        let script = told(folder.path(), &["completions", shell])?;
        for word in ["check", "run", "new", "profiles", "completions", "log", "heat-sink-chamber"] {
            assert!(script.contains(word), "{shell}: {word}");
        }
    }
    refused(folder.path(), &["completions", "abacus"], 2)?;
    Ok(())
}

#[test]
fn every_command_has_its_manual_page() -> Outcome {
    let folder = tempfile::tempdir()?;
    assert!(told(folder.path(), &["man"])?.contains(".TH soakdown 1"));
    told(folder.path(), &["man", "--out", "man1"])?;
    let help = told(folder.path(), &["--help"])?;
    let commands: Vec<&str> = help
        .lines()
        .skip_while(|line| !line.starts_with("Commands:"))
        .skip(1)
        .take_while(|line| !line.is_empty())
        .filter(|line| line.starts_with("  ") && !line.starts_with("   "))
        .filter_map(|line| line.split_whitespace().next())
        .filter(|name| *name != "help")
        .collect();
    assert!(commands.len() >= 6, "{commands:?}");
    for command in commands {
        let page = fs::read_to_string(folder.path().join(format!("man1/soakdown-{command}.1"))).map_err(|error| format!("{command}: {error}"))?;
        assert!(
            page.contains(&format!("soakdown\\-{command}")) && page.contains("SYNOPSIS"),
            "{command}: {page}"
        );
    }
    Ok(())
}

/// A log made of the run's own readings at uneven times, a known number of kelvins higher, on a clock of its own.
fn log_of_the_run(folder: &Path, offset: f64, higher: [f64; 2]) -> Result<String, Box<dyn Error>> {
    told(
        folder,
        &[
            "run",
            "coupon.toml",
            "--quiet",
            "--out",
            "own",
            "--times",
            "0 s, 1 s, 2.5 s, 4 s, 4.4 s, 7 s, 60 s, 300 s",
        ],
    )?;
    let mut reader = csv::Reader::from_path(folder.join("own/trace.csv"))?;
    let header = reader.headers()?.clone();
    let at = |name: &str| header.iter().position(|column| column == name).ok_or("no column");
    let columns = [at("time_s")?, at("coupon/TC1_K")?, at("coupon/TC2_K")?];
    let mut log = String::from("t [s],pressure [bar],TC1 [degC],TC2 [degC]\n");
    for row in reader.records() {
        let row = row?;
        let mut numbers = [0.0; 3];
        for (number, column) in numbers.iter_mut().zip(columns) {
            *number = row[column].parse::<f64>()?;
        }
        let [time, first, second] = numbers;
        let kelvin = 273.15;
        log += &format!(
            "{},20.0,{},{}\n",
            time + offset,
            first - kelvin + higher[0],
            (second - kelvin + higher[1]) * 1.8 + 32.0
        );
    }
    Ok(log)
}

fn coupon(folder: &Path) -> Outcome {
    told(folder, &["new", "coupon", "--kind", "logged-coupon"])?;
    let path = folder.join("coupon.toml");
    // The second thermocouple is logged in Fahrenheit, whatever its column's name says.
    let text = fs::read_to_string(&path)?.replace("column = \"TC2 [degC]\", unit = \"degC\"", "column = \"TC2 [degC]\", unit = \"degF\"");
    Ok(fs::write(path, text)?)
}

#[test]
fn a_log_with_known_offsets_differs_by_just_those() -> Outcome {
    let folder = tempfile::tempdir()?;
    let path = folder.path();
    coupon(path)?;
    fs::write(path.join("test.csv"), log_of_the_run(path, 12.25, [-5.0, 3.0])?)?;
    let offset = ["--set", "fit.offset=12.25 s"];
    let run = [
        "run",
        "coupon.toml",
        "--log",
        "test.csv",
        "--json",
        "--out",
        "results",
        offset[0],
        offset[1],
    ];
    let document: Value = serde_json::from_str(&told(path, &run)?)?;
    let log = document["stations"][0]["log"].as_array().ok_or("no log")?;
    assert_eq!(log.len(), 2);
    for (row, (probe, difference)) in log.iter().zip([("TC1", 5.0), ("TC2", -3.0)]) {
        assert_eq!((row["station"].as_str(), row["probe"].as_str()), (Some("coupon"), Some(probe)));
        for key in ["largest_difference_K", "end_difference_K"] {
            let found = row[key].as_f64().ok_or("no difference")?;
            assert!((found - difference).abs() < 1e-6, "{probe} {key}: {found}, computed − read");
        }
        assert!(row["at_s"].as_f64().is_some_and(|at| (0.0..=300.0).contains(&at)), "{row}");
    }
    let files = document["files"].as_array().ok_or("no files")?;
    assert!(
        files
            .iter()
            .any(|file| file["path"] == "test.csv" && file["digest"].as_str().is_some_and(|digest| digest.starts_with("sha256:")))
    );
    assert!(document["command"].as_str().is_some_and(|command| command.contains("--log test.csv")));
    let warned = |document: &Value, code: &str| {
        let warnings = document["warnings"].as_array().cloned().unwrap_or_default();
        warnings.iter().any(|warning| warning["code"] == code)
    };
    assert!(!warned(&document, "section-unused"), "[fit] has an effect here");
    let mut reader = csv::Reader::from_path(path.join("results/log.csv"))?;
    assert_eq!(
        reader.headers()?,
        vec!["station", "probe", "time_s", "reading_K", "computed_K", "difference_K"]
    );
    let rows = reader.records().collect::<Result<Vec<_>, _>>()?;
    assert_eq!(rows.len(), 16);
    for row in &rows {
        let want = if &row[1] == "TC1" { 5.0 } else { -3.0 };
        let [reading, computed, difference] = [row[3].parse::<f64>()?, row[4].parse::<f64>()?, row[5].parse::<f64>()?];
        assert!((difference - want).abs() < 1e-6 && (computed - reading - want).abs() < 1e-6, "{row:?}");
    }
    let page = told(path, &["run", "coupon.toml", "--log", "test.csv", offset[0], offset[1]])?;
    assert!(
        page.contains("log beside the run") && page.contains("coupon/TC1") && page.lines().all(|line| line.chars().count() <= 100),
        "{page}"
    );

    // Without the offset, the log's clock is late: readings from before the burn are compared with the burn, and differ far more.
    let late: Value = serde_json::from_str(&told(path, &["run", "coupon.toml", "--log", "test.csv", "--json"])?)?;
    let largest = late["stations"][0]["log"][0]["largest_difference_K"].as_f64().ok_or("no difference")?;
    assert!(largest.abs() > 50.0, "{largest}");
    // With a later one, the first rows lie before the start, and that is said.
    let later = ["run", "coupon.toml", "--log", "test.csv", "--json", "--set", "fit.offset=14 s"];
    assert!(warned(&serde_json::from_str(&told(path, &later)?)?, "readings-before-start"));
    // Without a log there is none.
    let plain: Value = serde_json::from_str(&told(path, &["run", "coupon.toml", "--json"])?)?;
    assert_eq!(plain["stations"][0]["log"], Value::Null);
    Ok(())
}

#[test]
fn a_log_longer_than_the_run_carries_it_on() -> Outcome {
    let folder = tempfile::tempdir()?;
    let path = folder.path();
    coupon(path)?;
    let day = 86_400.0;
    fs::write(
        path.join("test.csv"),
        format!("t [s],TC1 [degC],TC2 [degC]\n1,60,100\n{day},20,\n1e6,20,68\n"),
    )?;
    let document: Value = serde_json::from_str(&told(path, &["run", "coupon.toml", "--log", "test.csv", "--json"])?)?;
    assert_eq!(document["computed_until_s"].as_f64(), Some(day));
    let end = document["stations"][0]["log"][0]["end_difference_K"].as_f64().ok_or("no difference")?;
    assert!(end.abs() < 0.1, "a day later it is as cold as the air: {end}");
    let codes: Vec<_> = document["warnings"]
        .as_array()
        .ok_or("no warnings")?
        .iter()
        .map(|warning| warning["code"].clone())
        .collect();
    assert!(
        codes.contains(&"readings-after-end".into()) && codes.contains(&"readings-missing".into()),
        "{codes:?}"
    );
    Ok(())
}

#[test]
fn mistakes_in_a_log_are_shown_at_their_line() -> Outcome {
    let folder = tempfile::tempdir()?;
    let path = folder.path();
    coupon(path)?;
    for (log, place, words) in [
        ("t [s],TC1 [degC],TC2 [degC]\n1,60,100\n2,6o,100\n", "test.csv:3:3", "6o"),
        ("t [s],TC1 [degC],TC2 [degC]\n1,60,100\n2,60\n", "test.csv:3:1", "2 values"),
        ("t [s],TC1 [degC],TC2 [degC]\n2,60,100\n1,60,100\n", "test.csv:3:1", "rise"),
        ("t [s],TC1 [degC],TC2 [degC]\n1,-300,100\n", "test.csv:2:3", "-300"),
        ("t [s],TC1 [degC],TC3\n1,60,100\n", "test.csv:1:1", "TC2 [degC]"),
        ("t [s];TC1 [degC];TC2 [degC]\n1;60;100\n", "test.csv:1:1", "commas"),
        ("t [s],TC1 [degC],TC2 [degC]\n", "test.csv:1:1", "no rows"),
        ("t [s],TC1 [degC],TC2 [degC]\n-3,60,100\n", "test.csv:1:1", "nothing to compare"),
        ("t [s],TC1 [degC],TC1 [degC],TC2 [degC]\n1,60,60,100\n", "test.csv:1:1", "2 times"),
    ] {
        fs::write(path.join("test.csv"), log)?;
        let error = refused(path, &["run", "coupon.toml", "--log", "test.csv"], 2)?;
        assert!(error.contains(place) && error.contains(words), "{log}: {error}");
    }
    let error = refused(path, &["run", "coupon.toml", "--log", "nowhere.csv"], 2)?;
    assert!(error.contains("nowhere.csv"), "{error}");
    // A case that doesn't say how to read the log is told what to write, with the log's own names.
    told(path, &["new", "wall"])?;
    fs::write(path.join("test.csv"), "t [s],TC1 [degC]\n1,60\n")?;
    let error = refused(path, &["run", "wall.toml", "--log", "test.csv"], 2)?;
    assert!(
        error.contains("[fit]") && error.contains("t [s]") && error.contains("TC1 [degC]"),
        "{error}"
    );
    Ok(())
}
