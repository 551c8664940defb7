//! `soakdown schema`.

use super::arguments::SchemaArguments;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::printer::Printer;
use soakdown::case;
use soakdown::report::{json, results_schema};

/// Prints the schema of the case file or of the results.
pub fn schema(arguments: &SchemaArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    printer.answer(&if arguments.results {
        json(&results_schema())?
    } else {
        json(&case::schema())?
    })?;
    Ok(ExitStatus::Computed)
}
