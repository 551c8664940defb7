//! Text to `uom` quantities.

use super::{Kind, UnitError, parse::read};
use uom::si::f64::{
    Area, HeatFluxDensity, HeatTransfer, Length, MassDensity, Pressure, SpecificHeatCapacity, TemperatureInterval, ThermalConductivity,
    ThermodynamicTemperature, Time, Velocity,
};
use uom::si::{
    area, heat_flux_density, heat_transfer, length, mass_density, pressure, specific_heat_capacity, temperature_interval, thermal_conductivity,
    thermodynamic_temperature, time, velocity,
};

macro_rules! readers {
    ($($(#[$doc:meta])* $name:ident: $kind:ident => $quantity:ident of $unit:path;)*) => {
        $(
            $(#[$doc])*
            ///
            /// # Errors
            /// When the text is no number with a unit that fits.
            pub fn $name(text: &str) -> Result<$quantity, UnitError> {
                read(text, Kind::$kind).map($quantity::new::<$unit>)
            }
        )*
    };
}

readers! {
    /// Reads a time: `"30 s"`, `"2 h"`.
    read_time: Time => Time of time::second;
    /// Reads a length: `"12 mm"`.
    read_length: Length => Length of length::meter;
    /// Reads an area: `"120 mm2"`.
    read_area: Area => Area of area::square_meter;
    /// Reads a temperature; a lone degC or degF counts from its own zero.
    read_temperature: Temperature => ThermodynamicTemperature of thermodynamic_temperature::kelvin;
    /// Reads a temperature difference; a lone degC or degF is a step of its scale.
    read_temperature_difference: TemperatureDifference => TemperatureInterval of temperature_interval::kelvin;
    /// Reads an absolute pressure: `"20 bar"`.
    read_pressure: Pressure => Pressure of pressure::pascal;
    /// Reads a heat flux: `"5 MW/m2"`.
    read_heat_flux: HeatFlux => HeatFluxDensity of heat_flux_density::watt_per_square_meter;
    /// Reads a heat transfer coefficient or conductance: `"4 kW/m2/K"`.
    read_heat_transfer: HeatTransferCoefficient => HeatTransfer of heat_transfer::watt_per_square_meter_kelvin;
    /// Reads a thermal conductivity: `"14.9 W/m/K"`.
    read_conductivity: Conductivity => ThermalConductivity of thermal_conductivity::watt_per_meter_kelvin;
    /// Reads a specific heat capacity: `"385 J/kg/K"`.
    read_heat_capacity: HeatCapacity => SpecificHeatCapacity of specific_heat_capacity::joule_per_kilogram_kelvin;
    /// Reads a density: `"8933 kg/m3"`.
    read_density: Density => MassDensity of mass_density::kilogram_per_cubic_meter;
    /// Reads a velocity: `"12 m/s"`.
    read_velocity: Velocity => Velocity of velocity::meter_per_second;
}
