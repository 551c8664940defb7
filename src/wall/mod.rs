//! The finite-volume picture of a station on its grid, as a [`crate::solve::System`].
//!
//! Node-centred: a node on each face and layer boundary. The unknown of a node is its enthalpy written as a temperature,
//! y = T₀ + ∫ C dT / C(T₀): equal to the temperature where the heat capacity is constant, and it makes the heat balance linear in the
//! unknowns, so that a Rosenbrock method conserves heat to rounding. Fluxes come from the integral of the conductivity (Kirchhoff).

mod curve;
mod forcing;
mod grid;
mod node_map;
mod steady;
mod system;

pub use curve::{Curve, Point};
pub use forcing::{Forcing, Over, Ramp};
pub use grid::Grid;
pub use node_map::{NodeMap, ProbeWeights};
pub use steady::{Equilibrium, equilibrium};
pub use system::{Ledger, Wall};
