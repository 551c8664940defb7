//! How long one history takes: a wall of 100 nodes through a 10 s burn and one hour of cooling. Run it with `cargo bench`.
//!
//! The wall: 0.5 mm of coating on 8 mm of copper alloy, a contact of 5 kW/(m²·K), and 3 mm of steel whose conductivity rises with temperature,
//! heated by 4 kW/(m²·K) from gas of 3000 K, radiating on both faces, in still air outside.

#![expect(clippy::print_stdout, reason = "a benchmark prints its figures")]

use soakdown::answers::{RunOptions, run};
use soakdown::model::*;
use soakdown::run::{Course, Recorder, Timeline};
use soakdown::solve::Flow;
use soakdown::wall::Grid;
use std::time::{Duration, Instant};

#[path = "../walls.rs"]
#[expect(dead_code, reason = "the checks use all of it, the benchmark a part")]
mod walls;
use walls::*;

const TRIALS: usize = 300;

fn wall() -> Result<Model, ModelError> {
    let coating = material(1.0, 5600.0, 500.0)?;
    let liner = material(330.0, 8900.0, 390.0)?;
    let jacket = tabled(&[(293.15, 16.0), (1293.15, 32.0)], 8000.0, &[(300.0, 500.0)])?;
    let air = Convection::Natural(NaturalSurface::vertical(metres(0.3))?);
    Wall {
        heating: film(4000.0, 3000.0)?,
        idle: Idle::new(coefficient(5.0), temperature(293.15), pure(0.8), 1.0)?,
        outer: OuterFace::new(Outside::Open(Losses::new(air, Some(pure(0.8)))?), None),
        start: 293.15,
        ambient: 293.15,
        phases: vec![burn(10.0)?, shutdown(3590.0)?],
        waits: vec![(Place::OuterFace, 321.15)],
        ..Wall::of(vec![
            layer("coating", &coating, 0.5e-3)?,
            layer("liner", &liner, 8e-3)?.with_joint(contact(5000.0)?),
            layer("jacket", &jacket, 3e-3)?,
        ])?
    }
    .model()
}

fn best(mut work: impl FnMut()) -> Duration {
    (0..TRIALS)
        .map(|_| {
            let start = Instant::now();
            work();
            start.elapsed()
        })
        .min()
        .unwrap_or_default()
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let model = wall()?;
    let station = &model.stations()[0];
    let grid = Grid::uniform(&[20, 59, 19]);
    let segments = Timeline::of_profile(&model, station, Some(3600.0));
    // What a history costs and how far it is off, against one with steps so fine that nothing is left to see.
    let clocks: Vec<f64> = [0.5, 1.0, 2.0, 4.0, 7.0, 10.0, 11.0, 13.0, 20.0, 40.0, 100.0, 300.0, 1000.0, 3600.0].into();
    let rows = |step_tolerance: f64| {
        let mut recorder = Recorder::new(clocks.clone(), false, Vec::new());
        let mut course = Course::new(station, model.surroundings(), &grid, 293.15, step_tolerance);
        let driven = course.drive(&segments, None, |moment| {
            recorder.see(moment);
            Flow::Continue
        });
        driven.map(|()| recorder.rows)
    };
    let exact = rows(1e-6)?;
    for step_tolerance in [0.5, 0.1, 0.015] {
        let found = rows(step_tolerance)?;
        let off = found
            .iter()
            .zip(&exact)
            .flat_map(|(a, b)| a.faces.iter().zip(&b.faces).map(|(a, b)| (a - b).abs()));
        let off = off.fold(0.0, f64::max);
        let mut steps = 0;
        let time = best(|| {
            let mut course = Course::new(station, model.surroundings(), &grid, 293.15, step_tolerance);
            let driven = course.drive(&segments, None, |_| Flow::Continue);
            assert!(driven.is_ok(), "{driven:?}");
            steps = course.steps();
        });
        println!(
            "one history, 100 nodes, 10 s burn + 1 h, {step_tolerance} K a step: {:.3} ms, {steps} steps, {off:.4} K off at most",
            1e3 * time.as_secs_f64()
        );
    }
    let options = RunOptions::default();
    let mut error = 0.0;
    let time = best(|| {
        if let Ok(outcome) = run(&model, &options) {
            error = outcome.answers.stations[0].numerical.estimated_error;
        }
    });
    println!(
        "all answers on a grid of its own choice: {:.3} ms, estimated error {error:.3} K",
        1e3 * time.as_secs_f64()
    );
    Ok(())
}
