//! Decisions drawn from runs: one file a question.

mod accuracy;
mod check;
mod follow;
mod log;
mod pass;
mod run;
mod steady;
mod types;

pub use accuracy::{Resolved, resolve};
pub use check::{CheckAnswers, HeatingCheck, PhaseCheck, StationCheck, check, phases};
pub use pass::{Pass, PassSettings};
pub use run::{RunOptions, RunOutcome, run};
pub use types::*;
