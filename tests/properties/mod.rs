//! What must hold for every wall, and how fast errors vanish.

mod causes;
mod energy;
mod lanes;
mod orders;
