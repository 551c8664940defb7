//! Integrates any stiff system whose Jacobian is tridiagonal, `L` members side by side, with dense output. It knows neither walls nor kelvins.
//!
//! [`System`] is the door: what is integrated. [`Integrator`] takes it through one phase and shows every accepted [`Step`] to an observer.

mod integrator;
mod rodas5p;
mod root;
mod step;
mod system;
mod tridiagonal;

pub use integrator::{Effort, Flow, Integrator, Settings, SolveError};
pub use root::bracketed_root;
pub use step::Step;
pub use system::{Slot, System};
pub use tridiagonal::Tridiagonal;
