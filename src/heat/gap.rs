//! Heat across a gap: conduction through its gas, and radiation between its faces.

use super::{Slope, gap_gas_conductivity, radiation::black};
use crate::model::{GapGas, Kelvin, Metres};

/// Heat across a gap, W/m² of its first face, with its derivatives by both face temperatures.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct GapFlux {
    /// Heat from the first face to the second.
    pub flux: f64,
    /// Its derivative by the first face's temperature.
    pub by_first: f64,
    /// Its derivative by the second face's temperature.
    pub by_second: f64,
}

/// Heat across a gap of this effective width (for coaxial cylinders r₁ ln(r₂/r₁)), gas conductivity at the mean of the two faces, with the grey
/// exchange factor of [`super::grey_exchange`].
pub fn gap_flux(gas: GapGas, width: Metres, exchange: f64, first: Kelvin, second: Kelvin) -> GapFlux {
    let conductivity = gap_gas_conductivity(gas, Slope::variable(0.5 * (first + second)));
    let difference = first - second;
    let conductance = conductivity.value / width;
    let bend = 0.5 * conductivity.slope / width * difference;
    let (first_black, first_slope) = black(first);
    let (second_black, second_slope) = black(second);
    GapFlux {
        flux: conductance * difference + exchange * (first_black - second_black),
        by_first: conductance + bend + exchange * first_slope,
        by_second: -conductance + bend - exchange * second_slope,
    }
}
