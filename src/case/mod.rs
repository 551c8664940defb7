//! Case files: the only room that knows TOML. Text and path in; a checked [`Case`] out, or every mistake of the file at once.

mod checked;

pub use checked::{Case, CaseFile, Input, InputValue};

use crate::diagnostics::Diagnostics;
use std::path::Path;

/// Reads a case file, applies settings (`PATH=VALUE`, later ones win) and checks everything.
///
/// # Errors
/// With every mistake found, each at its place.
pub fn load(_path: &Path, _settings: &[String]) -> Result<Case, Diagnostics> {
    Err(Diagnostics::default())
}
