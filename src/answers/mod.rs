//! Decisions drawn from runs: one file a question.

mod run;

pub use run::*;
