//! Lumps that cool by plate correlations and in the wind, against the integral of their own equation.
//!
//! COMPUTED: t = ∫ρcL/(h(T)(T − air)) dT by Simpson's rule; h from the formulas of
//! Incropera & DeWitt, 6th ed., eqs 7.30, 7.38, 7.54, 9.30 to 9.32 and 9.64 (checked by themselves against the numbers of CHECKS D), properties of
//! air at the film temperature.

use crate::walls::*;
use soakdown::heat::convected;
use soakdown::model::*;
use uom::si::{f64::Velocity, velocity::meter_per_second};

/// Density times heat capacity times thickness, J/(m²·K).
const HELD: f64 = 2700.0 * 900.0 * 0.004;

fn surroundings(wind: f64) -> Result<Surroundings, ModelError> {
    let pressure = uom::si::f64::Pressure::new::<uom::si::pressure::pascal>(101_325.0);
    Surroundings::new(temperature(300.0), temperature(300.0), pressure, flux(0.0))?.with_wind(Velocity::new::<meter_per_second>(wind))
}

/// Seconds until a lump has come down from 450 K to 330 K.
fn wait(convection: &Convection, around: &Surroundings) -> f64 {
    let rate = |kelvin: f64| -convected(convection, around, kelvin).value / HELD;
    let steps = 2000;
    let width = (330.0 - 450.0) / f64::from(steps);
    let slope = |step: f64| 1.0 / rate(450.0 + step * width);
    (0..steps)
        .map(f64::from)
        .map(|step| width / 6.0 * (slope(step) + 4.0 * slope(step + 0.5) + slope(step + 1.0)))
        .sum()
}

#[test]
fn lumps_cool_as_their_correlations_say() -> Outcome {
    let (up, down) = (NaturalSurface::facing_up(metres(0.05))?, NaturalSurface::facing_down(metres(0.05))?);
    let wide = NaturalSurface::facing_up(metres(0.25))?;
    let (along, across) = (ForcedSurface::along_plate(metres(0.3))?, ForcedSurface::across_cylinder(metres(0.1))?);
    let still = [up, down, wide].map(|surface| (Convection::Natural(surface), 0.0));
    let windy = [
        (Convection::Forced(along), 3.0),
        // Turbulent: Re = 9e5 at the hottest.
        (Convection::Forced(ForcedSurface::along_plate(metres(1.2))?), 20.0),
        (Convection::Forced(across), 3.0),
        (Convection::Mixed { natural: up, forced: along }, 1.0),
    ];
    let mut waits = Vec::new();
    for (convection, wind) in still.into_iter().chain(windy) {
        let expected = wait(&convection, &surroundings(wind)?);
        waits.push(expected);
        let losses = Losses::new(convection.clone(), None)?;
        let model = Wall {
            heating: absorbed(0.0)?,
            start: 450.0,
            outer: OuterFace::new(Outside::Open(losses), None),
            waits: vec![(Place::Everywhere, 330.0)],
            around: Some(surroundings(wind)?),
            phases: vec![shutdown(1.0)?],
            ..Wall::of(vec![layer("body", &material(1e5, 2700.0, 900.0)?, 0.004)?])?
        }
        .model()?;
        check(&[Case::new(format!("{convection:?}"), model).expect(What::Wait(0), expected)])?;
    }
    // What no handbook is needed for: a hot face down keeps its heat longer than a hot face up, and wind shortens every wait.
    assert!(
        waits[1] > 1.5 * waits[0] && waits[3] < waits[0] && waits[4] < waits[3] && waits[6] < waits[0],
        "{waits:?}"
    );
    Ok(())
}
