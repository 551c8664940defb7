//! `soakdown check`.

use super::arguments::CheckArguments;
use super::command_line::check_line;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::files::{OutputFile, write_files};
use super::mistakes::rendered;
use super::printer::Printer;
use super::start::{json_text, units};
use soakdown::report::{CheckDocument, check_page};
use soakdown::{answers, case};

/// Reads the case, looks at it, shows what it says.
pub fn check(arguments: &CheckArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let common = &arguments.common;
    let case = case::load(&arguments.case, &common.set).map_err(Failure::Refused)?;
    if !case.doubts.list.is_empty() {
        printer.note(&rendered(&case.doubts));
    }
    let answers = answers::check(&case.model, arguments.wall.as_ref().map(|wall| wall.value))?;
    let command = check_line(arguments);
    let document = CheckDocument::new(&case, &command, &answers);
    if common.json {
        printer.answer(&json_text(&document)?)?;
    } else {
        printer.page(&check_page(&case, &answers, units(common)))?;
    }
    if let Some(folder) = &common.out {
        let bytes = json_text(&document)?.into_bytes();
        write_files(folder, &[OutputFile { name: "check.json", bytes }])?;
    }
    Ok(ExitStatus::Computed)
}
