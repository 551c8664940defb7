//! `soakdown completions`: from the same arguments that are parsed.

use super::arguments::{Arguments, CompletionsArguments};
use super::exit::ExitStatus;
use super::failure::Failure;
use super::printer::Printer;
use clap::CommandFactory;

/// Prints the completions of a shell.
pub fn completions(arguments: &CompletionsArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let mut script = Vec::new();
    clap_complete::generate(arguments.shell, &mut Arguments::command(), "soakdown", &mut script);
    printer.answer(&String::from_utf8_lossy(&script))?;
    Ok(ExitStatus::Computed)
}
