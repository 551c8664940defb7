//! Boundary physics: pure functions with their derivatives, each formula with its source. They know no file, no wall and no time.

mod forced;
mod gap;
mod gases;
mod natural;
mod radiation;
mod slope;
mod tabulated;

pub use forced::{convected, cylinder_across_nusselt, forced_coefficient, plate_along_nusselt};
pub use gap::{GapFlux, gap_flux};
pub use gases::{AirProperties, air, gap_gas_conductivity};
pub use natural::{
    horizontal_cylinder, horizontal_cylinder_nusselt, natural_coefficient, plate_downward_nusselt, plate_upward_nusselt, vertical_plate,
    vertical_plate_nusselt,
};
pub use radiation::{disk_to_disk_view, grey_exchange, open_cylinder_view};
pub use slope::Slope;
pub use tabulated::TabulatedCoefficient;
