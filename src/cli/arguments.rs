//! What was typed.

use clap::builder::PossibleValuesParser;
use clap::{Args, Parser, Subcommand, ValueEnum, ValueHint};
use soakdown::case::STARTERS;
use soakdown::units::{read_temperature, read_time};
use std::path::PathBuf;

const ABOUT: &str = "Plans how long a rocket engine may burn, and how long people must wait afterwards";

const AFTER_HELP: &str = "\
The first hour: soakdown new my-wall, soakdown run my-wall.toml, then your own numbers in that file.

Exit status:
  0    computed
  1    failed: a file can't be written, the solver gave up
  2    wrong usage, or a case or log that can't be read or accepted
  3    computed, and with --strict something is amiss: a verdict other than within-limits
  130  interrupted

Heat, pressure and fire hurt people. Local codes, the site's safety plan and licensed engineers come before anything printed here.";

const NEW_HELP: &str = "\
Examples:
  soakdown new my-wall
  soakdown new chamber --kind heat-sink-chamber
  soakdown new --list

The file runs as it is and keeps its limits; its numbers are invented, and each is there to be replaced.
A file that is there already is left as it is (exit status 1).";

const PROFILES_HELP: &str = "\
Examples:
  soakdown profiles
  soakdown profiles pulse-train
  soakdown profiles pulse-train --file > my-pulses.toml

A case uses one with [profile] use = \"pulse-train\", or use = \"my-pulses.toml\".";

const COMPLETIONS_HELP: &str = "\
Examples:
  soakdown completions bash > ~/.local/share/bash-completion/completions/soakdown
  soakdown completions zsh > ~/.zfunc/_soakdown        (with fpath+=~/.zfunc before compinit)
  soakdown completions fish > ~/.config/fish/completions/soakdown.fish";

const MAN_HELP: &str = "\
Examples:
  soakdown man | man -l -
  soakdown man --out ~/.local/share/man/man1        then: man soakdown-run";

const CHECK_HELP: &str = "\
Examples:
  soakdown check examples/heat-sink-chamber.toml
  soakdown check chamber.toml --wall \"800 K\" --set surroundings.air=\"40 degC\"";

const MATERIALS_HELP: &str = "\
Examples:
  soakdown materials
  soakdown materials copper
  soakdown materials --find nickel --limit-above \"900 degC\"
  soakdown materials --confidence high --json";

const SCHEMA_HELP: &str = "\
To have an editor complete, explain and check case files: soakdown schema > soakdown-case.json, and as the first line of a case
  #:schema ./soakdown-case.json
for an editor with a TOML language server that reads JSON Schema.";

const RUN_HELP: &str = "\
Examples:
  soakdown run examples/heat-sink-chamber.toml
  soakdown run chamber.toml --set profile.phases.0.burn=\"3 s\" --strict
  soakdown run chamber.toml --out results --times \"1 s, 2 s, 10 s\"
  soakdown run chamber.toml --log firing.csv --out results

Exit status: 0 computed, 1 failed, 2 wrong usage or case not accepted, 3 with --strict and a verdict
other than within-limits, 130 interrupted.";

/// The command line.
#[derive(Debug, Parser)]
#[command(name = "soakdown", version, about = ABOUT, after_help = AFTER_HELP, max_term_width = 100)]
pub struct Arguments {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Writes a commented starter case to work from
    #[command(after_help = NEW_HELP)]
    New(NewArguments),
    /// Is the case sound? Every input with where it comes from, the grid, the phases, what heats the wall now
    #[command(after_help = CHECK_HELP)]
    Check(CheckArguments),
    /// What happens: peaks, margins, soak-back, approach to steady state, waits, energy balance
    #[command(after_help = RUN_HELP)]
    Run(RunArguments),
    /// What is built in: every material in a table, or one with its values, ranges, sources and notes
    #[command(after_help = MATERIALS_HELP)]
    Materials(MaterialsArguments),
    /// The JSON Schema (2020-12) of the case file, or of the results
    #[command(after_help = SCHEMA_HELP)]
    Schema(SchemaArguments),
    /// Lists the ready time profiles, or explains one with its values and phases
    #[command(after_help = PROFILES_HELP)]
    Profiles(ProfilesArguments),
    /// Prints the completions of a shell
    #[command(after_help = COMPLETIONS_HELP)]
    Completions(CompletionsArguments),
    /// Prints the manual page, or writes those of all commands into a folder
    #[command(after_help = MAN_HELP)]
    Man(ManArguments),
}

/// `soakdown new`.
#[derive(Debug, Args)]
pub struct NewArguments {
    /// Name of the case: writes NAME.toml, and never over a file that is there
    #[arg(required_unless_present = "list", value_hint = ValueHint::FilePath)]
    pub name: Option<PathBuf>,
    /// Which scenario [default: the simplest, bare-plate]
    #[arg(long, value_parser = PossibleValuesParser::new(STARTERS.iter().map(|starter| starter.kind)))]
    pub kind: Option<String>,
    /// Lists the scenarios and writes nothing
    #[arg(long)]
    pub list: bool,
}

/// `soakdown profiles`.
#[derive(Debug, Args)]
pub struct ProfilesArguments {
    /// A built-in profile, or the path of one of your own [default: all built-in ones]
    pub name: Option<String>,
    /// Print one JSON document on standard output, and nothing else there
    #[arg(long)]
    pub json: bool,
    /// Print the profile's file as it is, to be copied and changed
    #[arg(long, requires = "name", conflicts_with = "json")]
    pub file: bool,
}

/// `soakdown completions`.
#[derive(Debug, Args)]
pub struct CompletionsArguments {
    /// For which shell
    pub shell: clap_complete::Shell,
}

/// `soakdown man`.
#[derive(Debug, Args)]
pub struct ManArguments {
    /// Write soakdown.1 and one page for each command into this folder, which is made if need be
    #[arg(long, value_name = "DIR", value_hint = ValueHint::DirPath)]
    pub out: Option<PathBuf>,
}

/// `soakdown check`.
#[derive(Debug, Args)]
pub struct CheckArguments {
    /// The case file
    pub case: PathBuf,
    /// Wall temperature at which the heating is shown, with its unit, as in "800 K" [default: the start temperature]
    #[arg(long, value_name = "TEMPERATURE", value_parser = wall)]
    pub wall: Option<Quantity>,
    /// What every answering command takes.
    #[command(flatten)]
    pub common: Common,
}

/// `soakdown run`.
#[derive(Debug, Args)]
pub struct RunArguments {
    /// The case file
    pub case: PathBuf,
    /// Rows of trace.csv and profiles of depths.csv at exactly these times, as in "1 s, 2 s, 10 s"; needs --out
    #[arg(long, value_name = "TIMES", value_delimiter = ',', value_parser = clock)]
    pub times: Vec<Quantity>,
    /// Readings of a test to put beside the run, as CSV; the case's [fit] says which column is which probe
    #[arg(long, value_name = "LOG.csv", value_hint = ValueHint::FilePath)]
    pub log: Option<PathBuf>,
    /// What every answering command takes.
    #[command(flatten)]
    pub common: Common,
}

/// `soakdown materials`.
#[derive(Debug, Args)]
pub struct MaterialsArguments {
    /// Show this one, with everything its card says
    pub name: Option<String>,
    /// Only those with this in their name or title
    #[arg(long, value_name = "WORD", conflicts_with = "name")]
    pub find: Option<String>,
    /// Only those whose density, heat capacity and conductivity have at least this confidence
    #[arg(long, value_name = "CONFIDENCE", value_enum, conflicts_with = "name")]
    pub confidence: Option<ConfidenceChoice>,
    /// Only those with a built-in limit of at least this, as in "900 degC"
    #[arg(long, value_name = "TEMPERATURE", value_parser = wall, conflicts_with = "name")]
    pub limit_above: Option<Quantity>,
    /// Print one JSON document on standard output, and nothing else there
    #[arg(long)]
    pub json: bool,
    /// Units on the screen; JSON stays in SI
    #[arg(long, value_name = "UNITS", value_enum, default_value_t = UnitsChoice::Si)]
    pub units: UnitsChoice,
    /// Colour on the screen
    #[arg(long, value_name = "WHEN", value_enum, default_value_t = ColorChoice::Auto)]
    pub color: ColorChoice,
}

/// `soakdown schema`.
#[derive(Debug, Args)]
pub struct SchemaArguments {
    /// The schema of the JSON documents instead: result.json, check.json, materials --json
    #[arg(long)]
    pub results: bool,
}

/// How far values may be trusted.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum ConfidenceChoice {
    /// From a table of this very material
    High,
    /// Right for the kind of material
    Medium,
    /// Typical, from memory, or scattered
    Low,
}

/// Options of every answering command.
#[derive(Debug, Args)]
pub struct Common {
    /// Print one JSON document on standard output, and nothing else there
    #[arg(long)]
    pub json: bool,
    /// Write the documents into this folder, which is made if need be
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// Units on the screen; files stay in SI
    #[arg(long, value_name = "UNITS", value_enum, default_value_t = UnitsChoice::Si)]
    pub units: UnitsChoice,
    /// Put another value on an input (repeatable, the later one wins), as in profile.phases.0.burn="3 s"
    #[arg(long, value_name = "PATH=VALUE")]
    pub set: Vec<String>,
    /// No summary and no warnings on the screen; mistakes are still told
    #[arg(long)]
    pub quiet: bool,
    /// Colour on the screen
    #[arg(long, value_name = "WHEN", value_enum, default_value_t = ColorChoice::Auto)]
    pub color: ColorChoice,
    /// Exit with status 3 when the verdict is anything but within-limits
    #[arg(long)]
    pub strict: bool,
}

/// Units on the screen.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum UnitsChoice {
    /// °C, mm
    Si,
    /// °F, in
    Us,
}

/// When to colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum ColorChoice {
    /// On a terminal that can show it
    Auto,
    /// Always
    Always,
    /// Never
    Never,
}

/// A quantity as typed, and its SI value.
#[derive(Clone, Debug, PartialEq)]
pub struct Quantity {
    /// As typed.
    pub text: String,
    /// In SI.
    pub value: f64,
}

fn wall(text: &str) -> Result<Quantity, String> {
    let temperature = read_temperature(text.trim()).map_err(|error| error.to_string())?;
    if temperature.value > 0.0 {
        Ok(Quantity {
            text: text.trim().to_owned(),
            value: temperature.value,
        })
    } else {
        Err("a temperature lies above absolute zero".to_owned())
    }
}

fn clock(text: &str) -> Result<Quantity, String> {
    let time = read_time(text.trim()).map_err(|error| error.to_string())?;
    if time.value >= 0.0 {
        Ok(Quantity {
            text: text.trim().to_owned(),
            value: time.value,
        })
    } else {
        Err("times count from the start of the profile: 0 s or later".to_owned())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use clap::CommandFactory;

    #[test]
    fn the_command_line_is_well_formed() {
        Arguments::command().debug_assert();
    }

    #[test]
    fn times_are_read_with_their_units() {
        let arguments = Arguments::try_parse_from(["soakdown", "run", "a.toml", "--times", "1 s, 2 min"]).expect("arguments");
        let Command::Run(run) = arguments.command else {
            panic!("another command")
        };
        assert_eq!(run.times.iter().map(|time| time.value).collect::<Vec<_>>(), [1.0, 120.0]);
    }

    #[test]
    fn a_bare_or_negative_time_is_refused() {
        for times in ["1", "1 s, -2 s", "1 K", ""] {
            let parsed = Arguments::try_parse_from(["soakdown", "run", "a.toml", &format!("--times={times}")]);
            assert!(parsed.is_err(), "{times}");
        }
    }
}
