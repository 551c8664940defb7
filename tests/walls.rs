//! Walls built in code, for checks against closed forms: plain SI numbers in, models out.

use soakdown::model::*;
use std::sync::Arc;
use uom::si::f64::{
    HeatFluxDensity, HeatTransfer, Length, MassDensity, Pressure, SpecificHeatCapacity, TemperatureInterval, ThermalConductivity,
    ThermodynamicTemperature, Time,
};
use uom::si::{
    heat_flux_density::watt_per_square_meter, heat_transfer::watt_per_square_meter_kelvin, length::meter, mass_density::kilogram_per_cubic_meter,
    pressure::pascal, specific_heat_capacity::joule_per_kilogram_kelvin, temperature_interval, thermal_conductivity::watt_per_meter_kelvin,
    thermodynamic_temperature::kelvin, time::second,
};

pub type Outcome = Result<(), Box<dyn std::error::Error>>;

pub fn temperature(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<kelvin>(value)
}
pub fn seconds(value: f64) -> Time {
    Time::new::<second>(value)
}
pub fn metres(value: f64) -> Length {
    Length::new::<meter>(value)
}
pub fn coefficient(value: f64) -> HeatTransfer {
    HeatTransfer::new::<watt_per_square_meter_kelvin>(value)
}
pub fn flux(value: f64) -> HeatFluxDensity {
    HeatFluxDensity::new::<watt_per_square_meter>(value)
}
pub fn pure(value: f64) -> Table {
    Table::constant(uom::si::f64::Ratio::new::<uom::si::ratio::ratio>(value))
}

/// A material of constant properties: conductivity, density, heat capacity.
pub fn material(conductivity: f64, density: f64, heat_capacity: f64) -> Result<Arc<Material>, ModelError> {
    tabled(&[(300.0, conductivity)], density, &[(300.0, heat_capacity)])
}

/// A material with tables against temperature.
pub fn tabled(conductivity: &[(f64, f64)], density: f64, heat_capacity: &[(f64, f64)]) -> Result<Arc<Material>, ModelError> {
    let conductivity: Vec<_> = conductivity
        .iter()
        .map(|row| (temperature(row.0), ThermalConductivity::new::<watt_per_meter_kelvin>(row.1)))
        .collect();
    let heat: Vec<_> = heat_capacity
        .iter()
        .map(|row| (temperature(row.0), SpecificHeatCapacity::new::<joule_per_kilogram_kelvin>(row.1)))
        .collect();
    Ok(Arc::new(Material::new(MaterialValues {
        name: "check".into(),
        density: MassDensity::new::<kilogram_per_cubic_meter>(density),
        heat_capacity: Table::new(&heat)?,
        conductivity: Table::new(&conductivity)?,
        melts: None,
        decomposes: None,
    })?))
}

/// A layer in perfect contact with the next.
pub fn layer(name: &str, material: &Arc<Material>, thickness: f64) -> Result<Layer, ModelError> {
    Layer::new(name, material.clone(), metres(thickness))
}

/// A contact of this conductance.
pub fn contact(conductance: f64) -> Result<Option<Joint>, ModelError> {
    Ok(Some(Joint::new(Some(Resistance::contact(coefficient(conductance))?), None)))
}

/// An idle hot face that loses nothing.
pub fn idle_without_loss() -> Result<Idle, ModelError> {
    Idle::new(coefficient(0.0), temperature(300.0), pure(0.0), 0.0)
}

/// An outer face with a coefficient and, if the emissivity is above 0, radiation.
pub fn outside(loss: f64, emissivity: f64) -> Result<OuterFace, ModelError> {
    let losses = Losses::new(Convection::coefficient(coefficient(loss))?, (emissivity > 0.0).then(|| pure(emissivity)))?;
    Ok(OuterFace::new(Outside::Open(losses), None))
}

pub fn insulated() -> OuterFace {
    OuterFace::new(Outside::Adiabatic, None)
}

pub fn film(loss: f64, gas: f64) -> Result<Option<Heating>, ModelError> {
    Ok(Some(Heating::new(HeatingModel::film(coefficient(loss), temperature(gas))?)))
}

pub fn absorbed(value: f64) -> Result<Option<Heating>, ModelError> {
    Ok(Some(Heating::new(HeatingModel::flux(flux(value))?)))
}

/// One station, one profile, surroundings at one temperature.
pub struct Wall {
    pub shape: Shape,
    pub layers: Vec<Layer>,
    pub heating: Option<Heating>,
    pub idle: Idle,
    pub outer: OuterFace,
    pub start: f64,
    pub ambient: f64,
    pub phases: Vec<Phase>,
    /// Depths of probes.
    pub probes: Vec<f64>,
    /// Where and below what.
    pub waits: Vec<(Place, f64)>,
}

impl Wall {
    pub fn model(self) -> Result<Model, ModelError> {
        let mut station = Station::new(StationValues {
            name: "wall".into(),
            shape: self.shape,
            layers: self.layers,
            heating: self.heating,
            idle: self.idle,
            outer: self.outer,
        })?;
        for (index, depth) in self.probes.iter().enumerate() {
            station = station.with_probe(format!("P{index}"), metres(*depth), None, seconds(0.0))?;
        }
        let waits = self
            .waits
            .iter()
            .enumerate()
            .map(|(index, (place, below))| Wait::new(format!("W{index}"), 0, *place, temperature(*below)));
        let waits = waits.collect::<Result<Vec<_>, _>>()?;
        Model::new(ModelParts {
            title: "check".into(),
            surroundings: Surroundings::new(
                temperature(self.ambient),
                temperature(self.ambient),
                Pressure::new::<pascal>(101_325.0),
                flux(0.0),
            )?,
            start: temperature(self.start),
            profile: Profile::new(self.phases),
            stations: vec![station],
            waits,
            allowance: Allowance::none(),
            tolerance: TemperatureInterval::new::<temperature_interval::kelvin>(0.05),
        })
    }
}
