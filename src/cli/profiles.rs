//! `soakdown profiles`.

use super::arguments::ProfilesArguments;
use super::command_line::profiles_line;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::printer::Printer;
use soakdown::case;
use soakdown::report::{ProfilesDocument, json, profile_page, profiles_page};

/// Lists the built-in profiles, or shows one.
pub fn profiles(arguments: &ProfilesArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let profiles = match &arguments.name {
        Some(name) => vec![case::ready_profile(name).map_err(Failure::Refused)?],
        None => case::ready_profiles().map_err(Failure::Refused)?,
    };
    let text = match (profiles.as_slice(), arguments.name.is_some()) {
        _ if arguments.json => json(&ProfilesDocument::new(&profiles_line(arguments), &profiles))?,
        ([one], true) if arguments.file => one.file.clone(),
        ([one], true) => profile_page(one),
        (all, _) => profiles_page(all),
    };
    printer.answer(&text)?;
    Ok(ExitStatus::Computed)
}
