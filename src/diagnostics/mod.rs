//! What can be told to a person: mistakes at their place in a file, and notices about a result. Data only: no colour, no printing.

mod diagnostic;
mod notice;

pub use diagnostic::{Diagnostic, Diagnostics, Severity, SourceText};
pub use notice::Notice;
