//! `soakdown man`: manual pages, from the same arguments that are parsed.

use super::arguments::{Arguments, ManArguments};
use super::exit::ExitStatus;
use super::failure::Failure;
use super::files::{OutputFile, write_files};
use super::printer::Printer;
use clap::CommandFactory;
use clap_mangen::Man;

/// Prints the program's manual page, or writes those of all commands.
pub fn man(arguments: &ManArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let mut command = Arguments::command();
    // Gives each command its full name.
    command.build();
    let Some(folder) = &arguments.out else {
        let page = page(&command)?;
        printer.answer(&String::from_utf8_lossy(&page))?;
        return Ok(ExitStatus::Computed);
    };
    let mut pages = vec![("soakdown.1".to_owned(), page(&command)?)];
    for inner in command.get_subcommands().filter(|inner| inner.get_name() != "help") {
        let name = inner.get_display_name().unwrap_or(inner.get_name());
        pages.push((format!("{name}.1"), page(inner)?));
    }
    let files: Vec<OutputFile<'_>> = pages.iter().map(|(name, bytes)| OutputFile { name, bytes: bytes.clone() }).collect();
    write_files(folder, &files)?;
    Ok(ExitStatus::Computed)
}

fn page(command: &clap::Command) -> Result<Vec<u8>, Failure> {
    let mut page = Vec::new();
    Man::new(command.clone()).render(&mut page).map_err(Failure::Print)?;
    Ok(page)
}
