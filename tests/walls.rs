//! Walls built in code, for checks against closed forms: plain SI numbers in, models out.

use soakdown::answers::{RunAnswers, RunOptions, WaitAnswer, WaitState, run};
use soakdown::model::*;
use soakdown::run::{Course, Recorder, Timeline, TraceRow};
use soakdown::solve::Flow;
use soakdown::wall::{Grid, NodeMap};
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

/// A burn of this length, s.
pub fn burn(duration: f64) -> Result<Phase, ModelError> {
    Phase::burn(seconds(duration))
}

/// A hold of this length, s.
pub fn hold(duration: f64) -> Result<Phase, ModelError> {
    Phase::hold(seconds(duration))
}

/// A shutdown, written this long, s.
pub fn shutdown(duration: f64) -> Result<Phase, ModelError> {
    Phase::shutdown(seconds(duration))
}

/// A service limit of the case, never to be passed.
pub fn limit(value: f64) -> Result<Option<Limit>, ModelError> {
    limit_for(value, 0.0)
}

/// A service limit of the case that may be passed for a total time, s.
pub fn limit_for(value: f64, allowed: f64) -> Result<Option<Limit>, ModelError> {
    Ok(Some(Limit::new(
        temperature(value),
        LimitKind::Service,
        LimitOrigin::Case,
        seconds(allowed),
    )?))
}

/// One station, one profile, surroundings at one temperature.
pub struct Wall {
    pub shape: Shape,
    pub layers: Vec<Layer>,
    pub heating: Option<Heating>,
    pub idle: Idle,
    pub outer: OuterFace,
    /// What the sides of a bar lose, layer by layer.
    pub sides: Vec<Losses>,
    pub start: f64,
    pub ambient: f64,
    /// Radiating surfaces, where they are not as warm as the air.
    pub surfaces: Option<f64>,
    /// All that is around it, where it is more than the temperatures above.
    pub around: Option<Surroundings>,
    pub phases: Vec<Phase>,
    /// Depths of probes.
    pub probes: Vec<f64>,
    /// Where and below what.
    pub waits: Vec<(Place, f64)>,
    pub allowance: Allowance,
}

impl Wall {
    /// A flat wall at 300 K that loses nothing, is not heated and has no profile yet.
    pub fn of(layers: Vec<Layer>) -> Result<Self, ModelError> {
        Ok(Self {
            shape: Shape::Plane,
            layers,
            heating: None,
            idle: idle_without_loss()?,
            outer: insulated(),
            sides: Vec::new(),
            start: 300.0,
            ambient: 300.0,
            surfaces: None,
            around: None,
            phases: Vec::new(),
            probes: Vec::new(),
            waits: Vec::new(),
            allowance: Allowance::none(),
        })
    }

    pub fn model(self) -> Result<Model, ModelError> {
        Model::new(self.parts("wall")?)
    }

    /// This wall and another one under its profile and surroundings; both keep their waits.
    pub fn beside(self, other: Self, name: &str) -> Result<Model, ModelError> {
        let mut parts = self.parts("wall")?;
        for (index, (place, below)) in other.waits.iter().enumerate() {
            parts.waits.push(Wait::new(format!("W{index}"), 1, *place, temperature(*below))?);
        }
        parts.stations.extend(other.parts(name)?.stations);
        Model::new(parts)
    }

    /// Other stations under this wall's profile and surroundings.
    pub fn with_stations(self, stations: Vec<Station>) -> Result<Model, ModelError> {
        let parts = self.parts("wall")?;
        Model::new(ModelParts { stations, ..parts })
    }

    fn parts(self, name: &str) -> Result<ModelParts, ModelError> {
        let mut station = Station::new(StationValues {
            name: name.into(),
            shape: self.shape,
            layers: self.layers,
            heating: self.heating,
            idle: self.idle,
            outer: self.outer,
        })?;
        if !self.sides.is_empty() {
            station = station.with_sides(self.sides)?;
        }
        for (index, depth) in self.probes.iter().enumerate() {
            station = station.with_probe(format!("P{index}"), metres(*depth), None, seconds(0.0))?;
        }
        let waits = self
            .waits
            .iter()
            .enumerate()
            .map(|(index, (place, below))| Wait::new(format!("W{index}"), 0, *place, temperature(*below)));
        let waits = waits.collect::<Result<Vec<_>, _>>()?;
        Ok(ModelParts {
            title: "check".into(),
            surroundings: match self.around {
                Some(around) => around,
                None => Surroundings::new(
                    temperature(self.ambient),
                    temperature(self.surfaces.unwrap_or(self.ambient)),
                    Pressure::new::<pascal>(101_325.0),
                    flux(0.0),
                )?,
            },
            start: temperature(self.start),
            profile: Profile::new(self.phases),
            stations: vec![station],
            waits,
            allowance: self.allowance,
            tolerance: TemperatureInterval::new::<temperature_interval::kelvin>(PROMISE),
        })
    }
}

/// What METHOD promises, K.
pub const PROMISE: f64 = 0.05;

/// Runs a model of one station, with rows of its trace at these clocks.
pub fn history(model: &Model, times: &[f64]) -> Result<(RunAnswers, Vec<TraceRow>), Box<dyn std::error::Error>> {
    let outcome = run(
        model,
        &RunOptions {
            history: !times.is_empty(),
            times: times.to_vec(),
            ..RunOptions::default()
        },
    )?;
    let trace = outcome.histories.into_iter().next().map(|history| history.trace).unwrap_or_default();
    Ok((outcome.answers, trace))
}

/// Runs a model of one station for its answers.
pub fn answered(model: &Model) -> Result<RunAnswers, Box<dyn std::error::Error>> {
    Ok(run(model, &RunOptions::default())?.answers)
}

/// A wait that ends: how long it is, and how much longer for each kelvin lower.
pub fn cooled(wait: &WaitAnswer) -> Result<(f64, f64), String> {
    match wait.state {
        WaitState::Cools { wait, slope, .. } => Ok((wait, slope)),
        other => Err(format!("{}: {other:?} instead of a wait that ends", wait.name)),
    }
}

/// What of a run is compared with a value from outside.
#[derive(Clone, Copy, Debug)]
pub enum What {
    /// Temperature of a face of a layer at a clock: 2·layer for its hot side, 2·layer + 1 for its outer side.
    Face { index: usize, time: f64 },
    /// Temperature at a probe at a clock.
    Probe { index: usize, time: f64 },
    /// How long a wait is, s.
    Wait(usize),
    /// When a layer's limit is first passed, s.
    FirstOver { layer: usize },
    /// Peak of a layer.
    Peak { layer: usize },
    /// Peak of the outer face.
    OuterPeak,
}

/// A value from outside.
#[derive(Clone, Copy, Debug)]
pub struct Expected {
    pub what: What,
    pub value: f64,
    /// How far off it may be, K. A value with the promise's tolerance also tests the estimate.
    pub within: f64,
}

/// A wall with values from outside.
pub struct Case {
    pub name: String,
    pub model: Model,
    pub expected: Vec<Expected>,
}

/// How far a run is from a value from outside.
pub struct Found {
    pub what: What,
    pub value: f64,
    /// As a temperature, K.
    pub error: f64,
    pub within: f64,
}

impl Case {
    pub fn new(name: impl Into<String>, model: Model) -> Self {
        Self {
            name: name.into(),
            model,
            expected: Vec::new(),
        }
    }

    pub fn expect(self, what: What, value: f64) -> Self {
        self.expect_within(what, value, PROMISE)
    }

    pub fn expect_within(mut self, what: What, value: f64, within: f64) -> Self {
        self.expected.push(Expected { what, value, within });
        self
    }

    /// Runs the model; how far each value is off, and the run's own estimate of its error.
    pub fn run(&self) -> Result<(Vec<Found>, f64), Box<dyn std::error::Error>> {
        let name = &self.name;
        let mut times: Vec<f64> = Vec::new();
        for expected in &self.expected {
            match expected.what {
                What::Face { time, .. } | What::Probe { time, .. } => times.push(time),
                What::FirstOver { .. } => times.extend([0.999 * expected.value, 1.001 * expected.value]),
                What::Wait(_) | What::Peak { .. } | What::OuterPeak => {}
            }
        }
        let (answers, trace) = history(&self.model, &times)?;
        let station = &answers.stations[0];
        // Clocks of rows are read off the steps: equal to the asked ones but for rounding.
        let row = |time: f64| {
            let same = |row: &&TraceRow| (row.time - time).abs() <= 1e-12 * time;
            trace.iter().find(same).ok_or(format!("{name}: no row at {time} s"))
        };
        let mut found = Vec::new();
        for expected in &self.expected {
            let (value, in_kelvin) = match expected.what {
                What::Face { index, time } => (row(time)?.faces[index], 1.0),
                What::Probe { index, time } => (row(time)?.probes[index].1, 1.0),
                What::Wait(index) => {
                    let (wait, slope) = cooled(&station.waits[index])?;
                    (wait, 1.0 / slope)
                }
                What::FirstOver { layer } => {
                    let limit = station.layers[layer].at.limit.as_ref();
                    let first = limit
                        .and_then(|limit| limit.first_over)
                        .ok_or(format!("{name}: the limit was not passed"))?;
                    let (low, high) = (0.999 * expected.value, 1.001 * expected.value);
                    let rise = (row(high)?.faces[2 * layer] - row(low)?.faces[2 * layer]) / (high - low);
                    (first, rise)
                }
                What::Peak { layer } => (station.layers[layer].at.peak, 1.0),
                What::OuterPeak => (station.outer_face.peak, 1.0),
            };
            found.push(Found {
                what: expected.what,
                value,
                error: (value - expected.value).abs() * in_kelvin,
                within: expected.within,
            });
        }
        Ok((found, station.numerical.estimated_error))
    }
}

/// Runs cases, and says which values are too far off.
pub fn check(cases: &[Case]) -> Outcome {
    let mut wrong = Vec::new();
    for case in cases {
        assert!(!case.expected.is_empty(), "{} expects nothing", case.name);
        let (found, _) = case.run()?;
        for (found, expected) in found.iter().zip(&case.expected) {
            if found.error.is_nan() || found.error > found.within {
                wrong.push(format!(
                    "{}: {:?} is {}, not {}: {:.4} K off, allowed {:.4} K",
                    case.name, found.what, found.value, expected.value, found.error, found.within
                ));
            }
        }
    }
    if wrong.is_empty() { Ok(()) } else { Err(wrong.join("\n").into()) }
}

/// Rows of one wall that starts from temperatures of its own, node by node, on a grid of this fineness.
pub fn from_state(
    model: &Model,
    fineness: f64,
    step_tolerance: f64,
    times: &[f64],
    state: impl FnOnce(&NodeMap) -> Vec<f64>,
) -> Result<Vec<TraceRow>, Box<dyn std::error::Error>> {
    let station = &model.stations()[0];
    let grid = Grid::new(model, station, fineness);
    let mut course = Course::new(station, model.surroundings(), &grid, 300.0, step_tolerance);
    let temperatures = state(course.wall.map(0));
    course.place(0.0, &temperatures);
    let mut recorder = Recorder::new(times.to_vec(), false, Vec::new());
    let end = times.iter().copied().fold(0.0, f64::max);
    course.drive(&Timeline::of_profile(model, station, Some(end)), None, |moment| {
        recorder.see(moment);
        Flow::Continue
    })?;
    assert_eq!(recorder.rows.len(), times.len());
    Ok(recorder.rows)
}
