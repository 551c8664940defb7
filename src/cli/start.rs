//! From the words of the command line to a command, and from its end to an exit status.

use super::arguments::{Arguments, Command, Common, UnitsChoice};
use super::check::check;
use super::completions::completions;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::man::man;
use super::materials::materials;
use super::mistakes::{plain_error, rendered};
use super::new::new;
use super::printer::Printer;
use super::profiles::profiles;
use super::run::run;
use super::schema::schema;
use clap::Parser;
use clap::error::{ContextKind, ContextValue, ErrorKind};
use soakdown::report::Units;
use std::ffi::OsString;

/// Runs the program.
pub fn start(words: impl Iterator<Item = OsString>) -> ExitStatus {
    let arguments = match Arguments::try_parse_from(words) {
        Ok(arguments) => arguments,
        Err(told) => return usage(&told),
    };
    let printer = match &arguments.command {
        Command::Check(check) => Printer::new(check.common.color, check.common.quiet),
        Command::Run(run) => Printer::new(run.common.color, run.common.quiet),
        Command::Materials(materials) => Printer::new(materials.color, false),
        Command::New(_) | Command::Profiles(_) | Command::Completions(_) | Command::Man(_) | Command::Schema(_) => Printer::plain(),
    };
    let result = match &arguments.command {
        Command::Materials(arguments) => materials(arguments, printer),
        Command::Schema(arguments) => schema(arguments, printer),
        Command::Check(arguments) => check(arguments, printer),
        Command::Run(arguments) => run(arguments, printer),
        Command::New(arguments) => new(arguments, printer),
        Command::Profiles(arguments) => profiles(arguments, printer),
        Command::Completions(arguments) => completions(arguments, printer),
        Command::Man(arguments) => man(arguments, printer),
    };
    result.unwrap_or_else(|failure| {
        printer.mistake(&match &failure {
            Failure::Refused(diagnostics) => refusal(diagnostics),
            other => plain_error(&other.to_string()),
        });
        failure.status()
    })
}

/// Help and version are answers; anything else was not understood.
fn usage(told: &clap::Error) -> ExitStatus {
    // If the terminal is gone, the exit status still says it.
    let _unheard = told.print();
    if let (ErrorKind::InvalidSubcommand, Some(ContextValue::String(word))) = (told.kind(), told.get(ContextKind::InvalidSubcommand))
        && word.ends_with(".toml")
    {
        Printer::plain().mistake(&format!("a case stands after a command: soakdown run {word}"));
    }
    match told.kind() {
        ErrorKind::DisplayHelp | ErrorKind::DisplayVersion => ExitStatus::Computed,
        _ => ExitStatus::Refused,
    }
}

fn refusal(diagnostics: &soakdown::diagnostics::Diagnostics) -> String {
    let errors = diagnostics
        .list
        .iter()
        .filter(|diagnostic| diagnostic.severity == soakdown::diagnostics::Severity::Error)
        .count();
    let count = match errors {
        1 => "1 mistake".to_owned(),
        _ => format!("{errors} mistakes"),
    };
    format!("{}\n\n{}", rendered(diagnostics), plain_error(&format!("{count}; nothing was computed")))
}

/// Units of the screen.
pub fn units(common: &Common) -> Units {
    units_of(common.units)
}

/// Units of the screen.
pub fn units_of(choice: UnitsChoice) -> Units {
    match choice {
        UnitsChoice::Si => Units::Si,
        UnitsChoice::Us => Units::Us,
    }
}
