//! Steady walls: layers with contacts and radiation, conductivity against temperature, radiation equilibrium.
//!
//! Carslaw & Jaeger, Conduction of Heat in Solids, 2nd ed. (1959), sec. 1.6 (Kirchhoff's transformation) and 2.16; resistances in series: Incropera
//! et al., Fundamentals of Heat and Mass Transfer, 7th ed., sec. 3.1. Numbers COMPUTED with 30 digits.

use crate::walls::*;
use soakdown::answers::{RunAnswers, Steady, SteadyState};
use soakdown::model::*;

/// Layers (thickness, conductivity), conductance of the contact after each but the last (0: perfect).
struct Stack {
    layers: &'static [(f64, f64, f64)],
    film: (f64, f64),
    outside: (f64, f64),
    flux: f64,
    /// Hot face, then each face in turn; at a perfect joint once.
    faces: &'static [f64],
}

/// Surroundings at 300 K. COMPUTED.
const STACKS: [Stack; 4] = [
    Stack {
        layers: &[(0.0003, 1.0, 1e4), (0.003, 20.0, 5e3), (0.010, 0.12, 0.0)],
        film: (1500.0, 2800.0),
        outside: (8.0, 0.8),
        flux: 23456.4394422,
        faces: &[2784.36237371, 2777.32544187, 2774.97979793, 2771.46133201, 2766.77004412, 812.066757272],
    },
    Stack {
        layers: &[(0.003, 22.0, 0.0)],
        film: (300.0, 1500.0),
        outside: (10.0, 0.85),
        flux: 96786.1058795,
        faces: &[1177.37964707, 1164.18154172],
    },
    Stack {
        layers: &[(0.003, 22.0, 0.0), (0.025, 0.15, 0.0)],
        film: (300.0, 1500.0),
        outside: (10.0, 0.2),
        flux: 5087.98206282,
        faces: &[1483.04005979, 1482.34624405, 634.349233585],
    },
    Stack {
        layers: &[(0.003, 22.0, 0.0), (0.010, 0.03, 0.0)],
        film: (300.0, 1000.0),
        outside: (10.0, 0.9),
        flux: 1794.29122822,
        faces: &[994.019029239, 993.774353163, 395.677277088],
    },
];

fn steady(answers: &RunAnswers) -> Result<&SteadyState, String> {
    match &answers.stations[0].steady {
        Steady::At(steady) => Ok(steady),
        Steady::None => Err("no steady state".into()),
    }
}

#[test]
fn layers_contacts_and_radiation_balance_as_resistances_in_series() -> Outcome {
    for stack in &STACKS {
        let build = |duration: f64| -> Result<Model, ModelError> {
            let mut layers = Vec::new();
            for (index, (thickness, conductivity, conductance)) in stack.layers.iter().enumerate() {
                let body = layer(&format!("L{index}"), &material(*conductivity, 500.0, 500.0)?, *thickness)?;
                layers.push(if *conductance > 0.0 {
                    body.with_joint(contact(*conductance)?)
                } else {
                    body
                });
            }
            Wall {
                heating: film(stack.film.0, stack.film.1)?,
                outer: outside(stack.outside.0, stack.outside.1)?,
                phases: vec![burn(duration)?],
                ..Wall::of(layers)?
            }
            .model()
        };
        let time = 100_000.0;
        let (answers, trace) = history(&build(time)?, &[time])?;
        let mut faces = trace[0].faces.clone();
        faces.dedup();
        assert_eq!(faces.len(), stack.faces.len(), "{faces:?}");
        for (found, expected) in faces.iter().zip(stack.faces) {
            assert!((found - expected).abs() < 1e-3, "{faces:?}, not {:?}", stack.faces);
        }
        for flux in [trace[0].flux_in, trace[0].flux_out] {
            assert!((flux / stack.flux - 1.0).abs() < 1e-5, "{flux}, not {}", stack.flux);
        }
        let last = stack.faces.len() - 1;
        let early = answered(&build(2.0)?)?;
        for answers in [&answers, &early] {
            let steady = steady(answers)?;
            assert!((steady.hot_face - stack.faces[0]).abs() < 1e-5, "{steady:?}");
            assert!((steady.outer_face - stack.faces[last]).abs() < 1e-5, "{steady:?}");
        }
        // After a day the wall is there; after two seconds it is on its way.
        let shares = [&answers, &early].map(|answers| steady(answers).map(|steady| steady.hot_face_reached.unwrap_or(f64::NAN)));
        let [late, early] = shares;
        assert!((late? - 1.0).abs() < 1e-6 && early.is_ok_and(|early| (0.0..0.9).contains(&early)));
    }
    Ok(())
}

/// Rows of conductivity; flux from 1200 K to 400 K through 10 mm; depths as shares with their temperatures. COMPUTED.
type ByTemperature = (&'static [(f64, f64)], f64, &'static [(f64, f64)]);

const KIRCHHOFF: [ByTemperature; 2] = [
    (
        // 15 (1 + 0.001 (T − 300))
        &[(300.0, 15.0), (1300.0, 30.0)],
        1_800_000.0,
        &[
            (0.0, 1200.0),
            (0.1, 1135.75597507),
            (0.25, 1034.93515729),
            (0.5, 852.417469626),
            (0.75, 645.362404707),
            (0.9, 504.159457879),
        ],
    ),
    (
        &[(300.0, 14.9), (400.0, 16.6), (600.0, 19.8), (800.0, 22.6), (1000.0, 25.4), (1200.0, 28.0)],
        1_802_000.0,
        &[(0.0, 1200.0), (0.25, 1032.60201597), (0.5, 849.248757487), (0.75, 643.032202369)],
    ),
];

#[test]
fn conductivity_against_temperature_bends_the_profile_as_kirchhoff_says() -> Outcome {
    let (thickness, time) = (0.01, 500.0);
    for (rows, flux, depths) in KIRCHHOFF {
        let model = Wall {
            heating: absorbed(flux)?,
            outer: OuterFace::new(Outside::fixed(temperature(400.0))?, None),
            start: 400.0,
            ambient: 400.0,
            phases: vec![burn(time)?],
            probes: depths.iter().map(|(share, _)| share * thickness).collect(),
            ..Wall::of(vec![layer("body", &tabled(rows, 8000.0, &[(300.0, 500.0)])?, thickness)?])?
        }
        .model()?;
        let (answers, trace) = history(&model, &[time])?;
        for (probe, (share, expected)) in trace[0].probes.iter().zip(depths) {
            assert!((probe.1 - expected).abs() < 2e-3, "at {share}: {}, not {expected}", probe.1);
        }
        assert!((trace[0].flux_out / flux - 1.0).abs() < 1e-6);
        assert!((steady(&answers)?.hot_face - 1200.0).abs() < 1e-6, "{:?}", steady(&answers)?);
    }
    Ok(())
}

/// Coefficient, gas, emissivity; where the gas's heat is radiated away into cold space (1 K here; 0 K in the formula, 1e-12 of it). COMPUTED.
const RADIATION_EQUILIBRIUM: [[f64; 4]; 3] = [
    [500.0, 2800.0, 0.85, 1796.31985068],
    [100.0, 2500.0, 0.8, 1280.4776677],
    [1000.0, 3000.0, 0.9, 2067.50958796],
];

#[test]
fn a_wall_that_radiates_stops_where_it_sheds_what_it_gets() -> Outcome {
    for [gas_coefficient, gas, emissivity, expected] in RADIATION_EQUILIBRIUM {
        let heating = Heating::new(HeatingModel::film(coefficient(gas_coefficient), temperature(gas))?);
        let shell = || layer("shell", &material(50.0, 8000.0, 500.0)?, 0.001);
        // The heated face in the open, or the back of a thin shell that conducts well.
        let open = Wall {
            heating: Some(heating.clone().in_the_open(true)),
            idle: Idle::new(coefficient(0.0), temperature(300.0), pure(emissivity), 1.0)?,
            surfaces: Some(1.0),
            phases: vec![burn(3.0)?],
            ..Wall::of(vec![shell()?])?
        };
        let answers = answered(&open.model()?)?;
        let steady_state = steady(&answers)?;
        assert!((steady_state.hot_face - expected).abs() < 1e-5, "{steady_state:?}, not {expected}");
        let closed = Wall {
            heating: Some(heating),
            outer: outside(0.0, emissivity)?,
            surfaces: Some(1.0),
            phases: vec![burn(3.0)?],
            ..Wall::of(vec![layer("shell", &material(1e9, 8000.0, 500.0)?, 0.001)?])?
        };
        let answers = answered(&closed.model()?)?;
        let steady_state = steady(&answers)?;
        assert!((steady_state.outer_face - expected).abs() < 1e-3, "{steady_state:?}, not {expected}");
    }
    Ok(())
}

#[test]
fn nothing_balances_a_flux_into_an_insulated_wall() -> Outcome {
    let model = Wall {
        heating: absorbed(1e5)?,
        phases: vec![burn(3.0)?],
        ..Wall::of(vec![layer("body", &material(50.0, 8000.0, 500.0)?, 0.01)?])?
    };
    assert_eq!(answered(&model.model()?)?.stations[0].steady, Steady::None);
    Ok(())
}
