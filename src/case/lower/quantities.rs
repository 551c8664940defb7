//! SI numbers to `uom` quantities, for the model's constructors.

use uom::si::f64::{
    Area, HeatFluxDensity, HeatTransfer, Length, MassDensity, Pressure, TemperatureInterval, ThermodynamicTemperature, Time, Velocity,
};
use uom::si::{
    area, heat_flux_density, heat_transfer, length, mass_density, pressure, temperature_interval, thermodynamic_temperature, time, velocity,
};

/// Stands in where the start temperature could not be read; only mistakes come of such a case, no model. K.
pub(super) const ROOM: f64 = 293.15;

pub(in crate::case) fn temperature(kelvin: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<thermodynamic_temperature::kelvin>(kelvin)
}

pub(in crate::case) fn difference(kelvin: f64) -> TemperatureInterval {
    TemperatureInterval::new::<temperature_interval::kelvin>(kelvin)
}

pub(in crate::case) fn time(seconds: f64) -> Time {
    Time::new::<time::second>(seconds)
}

pub(in crate::case) fn length(metres: f64) -> Length {
    Length::new::<length::meter>(metres)
}

pub(in crate::case) fn pressure(pascals: f64) -> Pressure {
    Pressure::new::<pressure::pascal>(pascals)
}

pub(in crate::case) fn flux(watts_per_square_metre: f64) -> HeatFluxDensity {
    HeatFluxDensity::new::<heat_flux_density::watt_per_square_meter>(watts_per_square_metre)
}

pub(in crate::case) fn transfer(watts_per_square_metre_kelvin: f64) -> HeatTransfer {
    HeatTransfer::new::<heat_transfer::watt_per_square_meter_kelvin>(watts_per_square_metre_kelvin)
}

pub(super) fn area(square_metres: f64) -> Area {
    Area::new::<area::square_meter>(square_metres)
}

pub(in crate::case) fn velocity(metres_per_second: f64) -> Velocity {
    Velocity::new::<velocity::meter_per_second>(metres_per_second)
}

pub(in crate::case) fn density(kilograms_per_cubic_metre: f64) -> MassDensity {
    MassDensity::new::<mass_density::kilogram_per_cubic_meter>(kilograms_per_cubic_metre)
}

/// A temperature for a message: in kelvin and degrees Celsius.
pub(in crate::case) fn spoken(kelvin: f64) -> String {
    format!("{:.0} °C ({kelvin:.0} K)", kelvin - 273.15)
}
