//! Plans how long a rocket engine may burn, and how long people must wait afterwards.
//!
//! case file → checked case → model → history → answers → documents: every room takes what the one before it gives.
#![deny(unsafe_code)]

pub mod answers;
pub mod case;
pub mod diagnostics;
pub mod heat;
pub mod model;
pub mod report;
pub mod run;
pub mod solve;
pub mod units;
pub mod wall;
