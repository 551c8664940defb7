//! The command as it would be typed again: what documents carry. Without `--out`, `--quiet` and `--color`, which change no answer.

use super::arguments::{CheckArguments, Common, MaterialsArguments, ProfilesArguments, RunArguments, UnitsChoice};
use clap::ValueEnum;
use std::path::Path;

/// `soakdown check …`.
pub fn check_line(arguments: &CheckArguments) -> String {
    let mut words = vec!["soakdown".to_owned(), "check".to_owned(), path_word(&arguments.case)];
    if let Some(wall) = &arguments.wall {
        words.extend(["--wall".to_owned(), quoted(&wall.text)]);
    }
    finish(words, &arguments.common)
}

/// `soakdown run …`.
pub fn run_line(arguments: &RunArguments) -> String {
    let mut words = vec!["soakdown".to_owned(), "run".to_owned(), path_word(&arguments.case)];
    if !arguments.times.is_empty() {
        let times: Vec<&str> = arguments.times.iter().map(|time| time.text.as_str()).collect();
        words.extend(["--times".to_owned(), quoted(&times.join(", "))]);
    }
    if let Some(log) = &arguments.log {
        words.extend(["--log".to_owned(), path_word(log)]);
    }
    finish(words, &arguments.common)
}

/// `soakdown materials …`.
pub fn materials_line(arguments: &MaterialsArguments) -> String {
    let mut words = vec!["soakdown".to_owned(), "materials".to_owned()];
    words.extend(arguments.name.as_deref().map(quoted));
    let confidence = arguments.confidence.and_then(|choice| choice.to_possible_value());
    let options = [
        ("--find", arguments.find.clone()),
        ("--confidence", confidence.map(|choice| choice.get_name().to_owned())),
        ("--limit-above", arguments.limit_above.as_ref().map(|limit| limit.text.clone())),
    ];
    for (option, value) in options {
        if let Some(value) = value {
            words.extend([option.to_owned(), quoted(&value)]);
        }
    }
    if arguments.json {
        words.push("--json".to_owned());
    }
    words.join(" ")
}

/// `soakdown profiles …`.
pub fn profiles_line(arguments: &ProfilesArguments) -> String {
    let mut words = vec!["soakdown".to_owned(), "profiles".to_owned()];
    words.extend(arguments.name.as_deref().map(quoted));
    if arguments.json {
        words.push("--json".to_owned());
    }
    words.join(" ")
}

fn finish(mut words: Vec<String>, common: &Common) -> String {
    for setting in &common.set {
        words.extend(["--set".to_owned(), quoted(setting)]);
    }
    if common.units == UnitsChoice::Us {
        words.push("--units us".to_owned());
    }
    if common.strict {
        words.push("--strict".to_owned());
    }
    if common.json {
        words.push("--json".to_owned());
    }
    words.join(" ")
}

pub fn path_word(path: &Path) -> String {
    quoted(&path.to_string_lossy())
}

/// A word for a POSIX shell: as it is, or in single quotes.
fn quoted(word: &str) -> String {
    let plain = |letter: char| letter.is_alphanumeric() || "-_./=:,+%@".contains(letter);
    if !word.is_empty() && word.chars().all(plain) {
        word.to_owned()
    } else {
        format!("'{}'", word.replace('\'', r"'\''"))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::cli::arguments::{Arguments, Command};
    use clap::Parser;

    #[test]
    fn options_that_change_no_answer_are_left_out() {
        let typed = [
            "soakdown",
            "run",
            "my case.toml",
            "--quiet",
            "--out",
            "results",
            "--color=never",
            "--set",
            "a.b=it's 3 s",
            "--strict",
            "--times=1 s,2 s",
            "--json",
        ];
        let Command::Run(run) = Arguments::try_parse_from(typed).expect("arguments").command else {
            panic!("another command")
        };
        assert_eq!(
            run_line(&run),
            r"soakdown run 'my case.toml' --times '1 s, 2 s' --set 'a.b=it'\''s 3 s' --strict --json"
        );
    }

    #[test]
    fn the_wall_temperature_is_kept() {
        let typed = ["soakdown", "check", "a.toml", "--wall", "800 K", "--units", "us"];
        let Command::Check(check) = Arguments::try_parse_from(typed).expect("arguments").command else {
            panic!("another command")
        };
        assert_eq!(check_line(&check), "soakdown check a.toml --wall '800 K' --units us");
    }
}
