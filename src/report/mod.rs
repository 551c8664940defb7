//! Answers into documents: JSON, CSV and the terminal's pages. The one place where an answer becomes a word or a rounded number.
//!
//! JSON and CSV carry full precision in SI; pages are rounded to the safe side and carry styles as escape codes, which a plain stream strips.

mod cautions;
mod check;
mod check_page;
mod csv_files;
mod curve;
mod error;
mod figures;
mod findings;
mod json;
mod materials;
mod materials_page;
mod page;
mod places;
mod profile_text;
mod profiles;
mod profiles_page;
mod result;
mod results_schema;
mod run_page;
#[cfg(test)]
mod sample;
mod starters_page;

pub use cautions::{Caution, cautions_of_case, cautions_of_run};
pub use check::CheckDocument;
pub use check_page::check_page;
pub use csv_files::{depths_csv, log_csv, trace_csv};
pub use error::ReportError;
pub use figures::Units;
pub use findings::warnings_of_run;
pub use json::json;
pub use materials::MaterialsDocument;
pub use materials_page::{material_page, materials_page};
pub use profiles::ProfilesDocument;
pub use profiles_page::{profile_page, profiles_page};
pub use result::ResultDocument;
pub use results_schema::results_schema;
pub use run_page::run_page;
pub use starters_page::{starter_page, starters_page};

/// The name and version that every document carries.
pub const PROGRAM: &str = concat!("soakdown ", env!("CARGO_PKG_VERSION"));
