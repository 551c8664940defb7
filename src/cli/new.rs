//! `soakdown new`.

use super::arguments::NewArguments;
use super::command_line::path_word;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::files::write_new;
use super::printer::Printer;
use soakdown::case::{STARTERS, Starter};
use soakdown::report::{starter_page, starters_page};
use std::ffi::OsStr;
use std::path::{Path, PathBuf};

/// Writes a starter case, or lists them.
pub fn new(arguments: &NewArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let (false, Some(name)) = (arguments.list, &arguments.name) else {
        printer.page(&starters_page(STARTERS))?;
        return Ok(ExitStatus::Computed);
    };
    let asked = arguments.kind.as_deref();
    let starter = STARTERS.iter().find(|starter| asked.is_none_or(|kind| kind == starter.kind));
    // The parser lets no other kind pass.
    let Some(starter) = starter else {
        return Err(Failure::BadName {
            name: asked.unwrap_or_default().to_owned(),
        });
    };
    let path = case_path(name)?;
    write_new(&path, starter.text(&path_word(&path)).as_bytes())?;
    let others: Vec<&Starter> = STARTERS.iter().filter(|other| asked.is_none() && other.kind != starter.kind).collect();
    printer.page(&starter_page(starter, &path_word(&path), &others))?;
    Ok(ExitStatus::Computed)
}

/// NAME.toml; a name that ends so already is taken as it is.
fn case_path(name: &Path) -> Result<PathBuf, Failure> {
    let bad = || Failure::BadName {
        name: name.to_string_lossy().into_owned(),
    };
    let last = name.file_name().ok_or_else(bad)?;
    let slash = name.as_os_str().as_encoded_bytes().last().is_some_and(|byte| *byte == b'/');
    if last.is_empty() || slash || last.to_string_lossy().chars().any(char::is_control) {
        return Err(bad());
    }
    if name.extension() == Some(OsStr::new("toml")) {
        return Ok(name.to_owned());
    }
    let mut last = last.to_owned();
    last.push(".toml");
    Ok(name.with_file_name(last))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_ending_is_added_once() {
        for (typed, path) in [
            ("wall", "wall.toml"),
            ("wall.toml", "wall.toml"),
            ("a/v1.2", "a/v1.2.toml"),
            ("../my wall", "../my wall.toml"),
        ] {
            assert_eq!(case_path(Path::new(typed)).expect("a path"), Path::new(path));
        }
        for typed in ["", "..", "a/", "/"] {
            assert!(case_path(Path::new(typed)).is_err(), "{typed}");
        }
    }
}
