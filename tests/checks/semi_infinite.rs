//! A half space: a step of its surface, a constant flux, convection; and how long its surface may be heated.
//!
//! Carslaw & Jaeger, Conduction of Heat in Solids, 2nd ed. (1959), sec. 2.4, 2.7, 2.9; Incropera et al., Fundamentals of Heat and Mass Transfer,
//! 7th ed., eqs 5.60–5.63. Numbers COMPUTED from these with 30 digits. The walls here are so thick that their far face feels nothing.

use crate::walls::*;
use soakdown::model::*;

/// Conductivity, density, heat capacity.
const COPPER: [f64; 3] = [386.0, 8940.0, 385.0];
const STEEL: [f64; 3] = [16.2, 8000.0, 500.0];
const CORK: [f64; 3] = [0.045, 150.0, 1900.0];
const START: f64 = 293.15;

/// Material, duration, temperatures at 0, 2 and 10 mm at its end.
type Depths = ([f64; 3], f64, [f64; 3]);

/// A flux of 10 MW/m² on copper, 1 MW/m² on steel. COMPUTED.
const FLUX: [(f64, Depths); 5] = [
    (1e7, (COPPER, 0.5, [512.050767864, 464.129540386, 343.925088649])),
    (1e7, (COPPER, 5.0, [985.375008011, 934.795661555, 756.942646817])),
    (1e7, (COPPER, 60.0, [2691.08776829, 2639.63065506, 2440.92407555])),
    (1e6, (STEEL, 0.5, [392.268006453, 314.095127943, 293.150015674])),
    (1e6, (STEEL, 5.0, [606.588657527, 498.484172166, 312.680512422])),
];
/// 5000 W/(m²·K) to a gas of 3000 K. COMPUTED.
const CONVECTION: [Depths; 5] = [
    (COPPER, 0.5, [565.693258434, 507.118015248, 357.766073283]),
    (COPPER, 5.0, [1024.01951848, 973.84426758, 794.063948893]),
    (COPPER, 60.0, [1887.2758257, 1858.5586179, 1745.977099]),
    (STEEL, 0.5, [1245.3144708, 513.122814434, 293.150190553]),
    (STEEL, 5.0, [2077.63225632, 1548.25263197, 441.391797596]),
];

/// The surface stepped to 800 K. COMPUTED.
const STEP: [Depths; 3] = [
    (COPPER, 0.5, [800.0, 724.075940263, 468.024088675]),
    (COPPER, 5.0, [800.0, 775.862245146, 681.010396051]),
    (COPPER, 60.0, [800.0, 793.028233341, 765.182564837]),
];

/// Material, coefficient to a gas of 3000 K, limit of the surface, when it is reached, s. COMPUTED from 1 − exp(β²)·erfc(β) = θ.
const TO_LIMIT: [([f64; 3], f64, f64, f64); 9] = [
    (COPPER, 5000.0, 800.0, 2.02860799434),
    (COPPER, 10000.0, 800.0, 0.507151998584),
    (COPPER, 5000.0, 1000.0, 4.58796921762),
    (STEEL, 5000.0, 800.0, 0.09894357213),
    (STEEL, 10000.0, 800.0, 0.0247358930325),
    (STEEL, 5000.0, 1000.0, 0.223774166562),
    (CORK, 5000.0, 800.0, 1.95825819841e-5),
    (CORK, 10000.0, 800.0, 4.89564549602e-6),
    (CORK, 5000.0, 1000.0, 4.42886371321e-5),
];

/// A layer through which nothing comes in the time: twelve diffusion lengths, and the probes in it.
fn deep(values: [f64; 3], time: f64) -> Result<(Layer, f64), ModelError> {
    let [conductivity, density, heat_capacity] = values;
    let length = (conductivity / (density * heat_capacity) * time).sqrt();
    let thickness = (12.0 * length).max(0.03);
    Ok((layer("body", &material(conductivity, density, heat_capacity)?, thickness)?, thickness))
}

fn heated(name: &str, heating: Option<Heating>, depths: Depths) -> Result<Case, ModelError> {
    let (values, time, expected) = depths;
    let (body, _) = deep(values, time)?;
    let model = Wall {
        heating,
        start: START,
        ambient: START,
        phases: vec![burn(time)?],
        probes: vec![0.002, 0.01],
        ..Wall::of(vec![body])?
    }
    .model()?;
    Ok(Case::new(format!("{name}, k = {}, {time} s", values[0]), model)
        .expect(What::Peak { layer: 0 }, expected[0])
        .expect(What::Face { index: 0, time }, expected[0])
        .expect(What::Probe { index: 0, time }, expected[1])
        .expect(What::Probe { index: 1, time }, expected[2]))
}

pub fn cases() -> Result<Vec<Case>, ModelError> {
    let mut cases = Vec::new();
    for (flux, depths) in FLUX {
        cases.push(heated("half space, flux", absorbed(flux)?, depths)?);
    }
    for depths in CONVECTION {
        cases.push(heated("half space, convection", film(5000.0, 3000.0)?, depths)?);
    }
    for (values, time, expected) in STEP {
        // Only an outer face can be held at a temperature.
        let (body, thickness) = deep(values, time)?;
        let model = Wall {
            outer: OuterFace::new(Outside::fixed(temperature(800.0))?, None),
            start: START,
            ambient: START,
            phases: vec![shutdown(time)?],
            probes: vec![thickness - 0.002, thickness - 0.01],
            ..Wall::of(vec![body])?
        }
        .model()?;
        cases.push(
            Case::new(format!("half space, step, {time} s"), model)
                .expect(What::Probe { index: 0, time }, expected[1])
                .expect(What::Probe { index: 1, time }, expected[2]),
        );
    }
    for (values, coefficient, passed, time) in TO_LIMIT {
        let [conductivity, density, heat_capacity] = values;
        let length = (conductivity / (density * heat_capacity) * time).sqrt();
        let body = layer("body", &material(conductivity, density, heat_capacity)?, 16.0 * length)?;
        let model = Wall {
            heating: film(coefficient, 3000.0)?,
            start: START,
            ambient: START,
            phases: vec![burn(1.2 * time)?],
            ..Wall::of(vec![body.with_limit(limit(passed)?)])?
        }
        .model()?;
        cases.push(Case::new(format!("half space to a limit, k = {conductivity}, {time} s"), model).expect(What::FirstOver { layer: 0 }, time));
    }
    Ok(cases)
}

#[test]
fn a_half_space_heats_as_the_error_function_says() -> Outcome {
    check(&cases()?)
}

#[test]
fn a_limit_reached_at_the_end_of_the_burn_is_kept_by_a_shorter_burn() -> Outcome {
    let (values, coefficient, passed, time) = TO_LIMIT[0];
    for (share, kept) in [(0.999, true), (1.001, false)] {
        let (body, _) = deep(values, time)?;
        let model = Wall {
            heating: film(coefficient, 3000.0)?,
            start: START,
            ambient: START,
            phases: vec![burn(share * time)?],
            ..Wall::of(vec![body.with_limit(limit(passed)?)])?
        }
        .model()?;
        let answers = answered(&model)?;
        let limit = answers.stations[0].layers[0].at.limit.as_ref().ok_or("no limit answered")?;
        assert_eq!(limit.kept, kept, "{share} of the time to the limit: {limit:?}");
    }
    Ok(())
}
