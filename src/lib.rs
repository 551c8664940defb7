//! Plans how long a rocket engine may burn, and how long people must wait afterwards.
//!
//! case file → checked case → model → history → answers → documents: every room takes what the one before it gives.
//!
//! ```
//! use soakdown::answers::{RunOptions, WaitState, run};
//! use std::path::Path;
//!
//! let case = soakdown::case::load(Path::new("examples/heat-sink-chamber.toml"), &["profile.phases.0.burn=2 s".to_owned()]);
//! let case = case.expect("the shipped example is sound");
//! let outcome = run(&case.model, &RunOptions::default())?;
//! let station = &outcome.answers.stations[0];
//! // Peaks in kelvin, clocks in seconds: the jacket is hottest well after the two-second burn.
//! assert!(station.outer_face.peak_time > 10.0);
//! assert!(matches!(station.waits[0].state, WaitState::Cools { wait, .. } if wait > 3600.0));
//! # Ok::<(), soakdown::run::RunError>(())
//! ```
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
