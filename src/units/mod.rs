//! Units: text such as `"3.5 Btu/in2/s/degF"` to quantities. The one place where a unit's name is spelled.
//!
//! Units are a grammar: factors joined by `.` and `/`, exponents as in `m2`. [`FACTORS`] lists the factors, [`Kind`] what may be due.

mod dimension;
mod error;
mod factors;
mod kind;
mod parse;
mod pattern;
mod read;

pub use dimension::Dimension;
pub use error::{UnitError, UnitProblem};
pub use factors::{FACTORS, Factor, nearest_factor};
pub use kind::Kind;
pub use parse::{read, read_spread};
pub use pattern::Sign;
pub use read::{
    read_area, read_conductivity, read_density, read_heat_capacity, read_heat_flux, read_heat_transfer, read_length, read_pressure, read_temperature,
    read_temperature_difference, read_time, read_velocity,
};
