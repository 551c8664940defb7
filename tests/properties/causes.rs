//! No wall gets hotter or colder than what acts on it (the maximum principle of the heat equation).

use crate::walls::*;
use proptest::prelude::*;
use proptest::test_runner::{Config, RngAlgorithm, TestError, TestRng, TestRunner};
use soakdown::answers::Finding;
use soakdown::model::*;

#[derive(Clone, Debug)]
struct Stack {
    cylinder: bool,
    start: f64,
    air: f64,
    surfaces: f64,
    gas: f64,
    film: f64,
    outside: f64,
    emissivity: f64,
    idle: f64,
    ramp: f64,
    durations: [f64; 4],
    layers: Vec<Body>,
}

/// Logarithms to base ten, but for the share of properties at 1500 K over those at 300 K.
#[derive(Clone, Debug)]
struct Body {
    thickness: f64,
    conductivity: f64,
    capacity: f64,
    change: f64,
    conductance: Option<f64>,
}

fn body() -> impl Strategy<Value = Body> {
    (-4.0..-1.7, -1.3..2.6, 5.0..6.6, 0.5..2.0, proptest::option::of(2.0..5.0)).prop_map(
        |(thickness, conductivity, capacity, change, conductance)| Body {
            thickness,
            conductivity,
            capacity,
            change,
            conductance,
        },
    )
}

fn stack() -> impl Strategy<Value = Stack> {
    let temperatures = (250.0..450.0, 250.0..330.0, 200.0..330.0, 600.0..3300.0);
    let losses = (1.5..4.2, 0.0..120.0, 0.0..1.0, 0.0..200.0);
    let times = (0.0..1.0, -1.5..1.5, -1.0..2.0, -1.5..1.0, 0.0..2.0);
    (any::<bool>(), temperatures, losses, times, proptest::collection::vec(body(), 1..4)).prop_map(
        |(cylinder, (start, air, surfaces, gas), (film, outside, emissivity, idle), (ramp, first, hold, second, shutdown), layers)| Stack {
            cylinder,
            start,
            air,
            surfaces,
            gas,
            film: 10_f64.powf(film),
            outside,
            emissivity,
            idle,
            ramp,
            durations: [first, hold, second, shutdown].map(|exponent: f64| 10_f64.powf(exponent)),
            layers,
        },
    )
}

fn model(stack: &Stack) -> Result<Model, ModelError> {
    let [first, between, second, last] = stack.durations;
    let count = stack.layers.len();
    let mut layers = Vec::new();
    for (index, body) in stack.layers.iter().enumerate() {
        let rows = |value: f64| [(300.0, value), (1500.0, value * body.change)];
        let solid = tabled(&rows(10_f64.powf(body.conductivity)), 1000.0, &rows(10_f64.powf(body.capacity - 3.0)))?;
        let made = layer(&format!("L{index}"), &solid, 10_f64.powf(body.thickness))?;
        layers.push(match body.conductance {
            Some(conductance) if index + 1 < count => made.with_joint(contact(10_f64.powf(conductance))?),
            _ => made,
        });
    }
    Wall {
        shape: if stack.cylinder { Shape::cylinder(metres(0.04))? } else { Shape::Plane },
        heating: film(stack.film, stack.gas)?,
        idle: Idle::new(coefficient(stack.idle), temperature(stack.air), pure(stack.emissivity), 0.5)?,
        outer: outside(stack.outside, stack.emissivity)?,
        start: stack.start,
        ambient: stack.air,
        surfaces: Some(stack.surfaces),
        phases: vec![
            burn(first)?.with_ramp_and_tail(seconds(stack.ramp * first), seconds(0.3 * between))?,
            hold(between)?,
            burn(second)?,
            shutdown(last)?,
        ],
        ..Wall::of(layers)?
    }
    .model()
}

/// Temperatures at many clocks, and peaks, lie between the coldest and the hottest cause; the bookkeeping closes.
fn bounded(stack: &Stack) -> Outcome {
    let end: f64 = stack.durations.iter().sum();
    let mut clock = 0.0;
    let mut times = Vec::new();
    for duration in stack.durations {
        times.extend([1e-4, 1e-3, 1e-2, 0.05, 0.2, 0.5, 1.0].map(|share| clock + share * duration));
        clock += duration;
    }
    times.push(3.0 * end);
    times.sort_by(f64::total_cmp);
    times.dedup();
    let (answers, trace) = history(&model(stack)?, &times)?;
    let station = &answers.stations[0];
    let causes = [stack.start, stack.air, stack.surfaces, stack.gas];
    let (low, high) = (causes.into_iter().fold(f64::INFINITY, f64::min), causes.into_iter().fold(0.0, f64::max));
    for row in &trace {
        for face in &row.faces {
            assert!(
                *face >= low - PROMISE && *face <= high + PROMISE,
                "{face} K at {} s, causes {low} … {high} K",
                row.time
            );
        }
    }
    let hottest = trace.iter().flat_map(|row| row.faces.iter().copied()).fold(0.0, f64::max);
    let peak = station.layers.iter().map(|layer| layer.at.peak).fold(0.0, f64::max);
    assert!(peak <= high + PROMISE, "peak {peak} K, causes up to {high} K");
    assert!(peak >= hottest - 1e-6, "peak {peak} K, in the trace {hottest} K");
    assert!(station.energy.imbalance < 1e-9, "{:?}", station.energy);
    let doubted = answers.findings.iter().any(|finding| matches!(finding, Finding::Inaccurate { .. }));
    assert_eq!(doubted, station.numerical.estimated_error > PROMISE, "{:?}", station.numerical);
    Ok(())
}

#[test]
fn no_temperature_lies_outside_the_range_of_its_causes() -> Outcome {
    let config = Config {
        cases: 40,
        failure_persistence: None,
        max_shrink_iters: 20,
        ..Config::default()
    };
    let mut runner = TestRunner::new_with_rng(config, TestRng::deterministic_rng(RngAlgorithm::ChaCha));
    let result = runner.run(&stack(), |stack| bounded(&stack).map_err(|error| TestCaseError::fail(error.to_string())));
    result.map_err(|error: TestError<Stack>| error.to_string().into())
}
