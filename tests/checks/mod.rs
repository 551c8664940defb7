//! The solver and its answers against closed forms, published histories and facts of the trade: one file a topic, sources beside each check.
//!
//! Labels of the numbers: SEEN: read in the source named; COMPUTED: calculated from the formula named with an independent program
//! (Python, mpmath with 25 to 30 digits, or scipy); FROM MEMORY: recollection of a publication that was not opened.

mod bar;
mod contact;
mod cylinder;
mod estimate;
mod fire;
mod follow;
mod lumped;
mod materials;
mod multilayer;
mod nonlinear;
mod semi_infinite;
mod slab;
mod steady;
mod trade;
mod traps;
mod wind;
