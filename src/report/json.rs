//! A document as JSON.

use super::error::ReportError;
use serde::Serialize;

/// A document as JSON text, indented, its last line ended.
///
/// # Errors
/// When the document can't be put together.
pub fn json(document: &impl Serialize) -> Result<String, ReportError> {
    Ok(serde_json::to_string_pretty(document)? + "\n")
}
