//! Errors vanish as the method says: with the square of the cells' width, and in time with order 3.5 and better where the data is smooth and the
//! wall starts at rest (METHOD; Steinebach, BIT 63:27, 2023, for the order of RODAS5P on parabolic problems).

use crate::walls::*;
use soakdown::model::*;
use soakdown::run::{Course, Recorder, Segment, Timeline};
use soakdown::solve::Flow;
use soakdown::wall::{Forcing, Grid, Ramp};

/// Temperatures of all nodes at a clock, and the steps to there.
fn state(model: &Model, grid: &Grid, step_tolerance: f64, start: f64, time: f64) -> Result<(Vec<f64>, usize), Box<dyn std::error::Error>> {
    let station = &model.stations()[0];
    let mut course = Course::new(station, model.surroundings(), grid, start, step_tolerance);
    course.drive(&Timeline::of_profile(model, station, Some(time)), None, |_| Flow::Continue)?;
    assert!((course.clock() - time).abs() < 1e-9 * time);
    let unknowns = course.unknowns();
    let temperatures = (0..unknowns.len())
        .map(|node| course.wall.temperature(node, 0, unknowns[node][0]))
        .collect();
    Ok((temperatures, course.steps()))
}

/// Slope of a straight line through (ln x, ln y), least squares.
fn slope(points: &[(f64, f64)]) -> f64 {
    let logs: Vec<(f64, f64)> = points.iter().map(|(x, y)| (x.ln(), y.ln())).collect();
    let count = logs.len() as f64;
    let mean = logs.iter().fold((0.0, 0.0), |sum, log| (sum.0 + log.0 / count, sum.1 + log.1 / count));
    let above: f64 = logs.iter().map(|log| (log.0 - mean.0) * (log.1 - mean.1)).sum();
    let below: f64 = logs.iter().map(|log| (log.0 - mean.0).powi(2)).sum();
    above / below
}

/// Errors at both faces against the number of cells, on four grids.
fn grid_order(model: &Model, time: f64, [face, back]: [f64; 2]) -> Outcome {
    let mut errors = [Vec::new(), Vec::new()];
    for fineness in [1.0, 2.0, 4.0, 8.0] {
        let grid = Grid::new(model, &model.stations()[0], fineness);
        let (temperatures, _) = state(model, &grid, 1e-7, 300.0, time)?;
        let last = temperatures.len() - 1;
        errors[0].push((1.0 / last as f64, (temperatures[0] - face).abs()));
        errors[1].push((1.0 / last as f64, (temperatures[last] - back).abs()));
    }
    for errors in errors {
        let order = slope(&errors);
        assert!((1.85..2.25).contains(&order), "order {order} in the grid: {errors:?}");
        assert!(errors.windows(2).all(|pair| pair[1].1 < 0.35 * pair[0].1), "{errors:?}");
    }
    Ok(())
}

#[test]
fn order_two_in_the_grid_for_a_slab_under_a_gas() -> Outcome {
    // Slab of Bi = 1 at Fo = 0.2 (slab checks; COMPUTED from the series, Carslaw & Jaeger sec. 3.11), 300 K to a gas of 3000 K.
    let time = 0.2 * 0.01 * 0.01 * 8940.0 * 385.0 / 386.0;
    let model = Wall {
        heating: film(38_600.0, 3000.0)?,
        phases: vec![burn(time)?],
        ..Wall::of(vec![layer("body", &material(386.0, 8940.0, 385.0)?, 0.01)?])?
    }
    .model()?;
    grid_order(&model, time, [0.643390784477, 0.950641778505].map(|theta| 3000.0 - 2700.0 * theta))
}

#[test]
fn order_two_in_the_grid_where_properties_depend_on_temperature() -> Outcome {
    // COMPUTED (nonlinear checks; Kirchhoff's transformation): k = 15 (1 + 0.0008 ΔT), ρ c in proportion, 6 mm, 1 MW/m², 3 s.
    let rows = |value: f64| [(300.0, value), (1700.0, value * (1.0 + 0.0008 * 1400.0))];
    let model = Wall {
        heating: absorbed(1e6)?,
        phases: vec![burn(3.0)?],
        ..Wall::of(vec![layer("body", &tabled(&rows(15.0), 1.0, &rows(4e6))?, 0.006)?])?
    }
    .model()?;
    grid_order(&model, 3.0, [532.922563321, 360.575023959])
}

#[test]
fn order_two_in_the_grid_across_layers_and_a_contact() -> Outcome {
    // COMPUTED (multilayer checks, W3; Laplace inversion): a coating on copper in a steel jacket, 1 MW/m² for 4 s.
    let model = Wall {
        heating: absorbed(1e6)?,
        outer: outside(10.0, 0.0)?,
        phases: vec![burn(4.0)?],
        ..Wall::of(vec![
            layer("coating", &material(1.0, 5700.0, 500.0)?, 0.0003)?.with_joint(contact(1e5)?),
            layer("copper", &material(386.0, 8940.0, 385.0)?, 0.008)?.with_joint(contact(1e4)?),
            layer("jacket", &material(16.2, 8000.0, 500.0)?, 0.004)?,
        ])?
    }
    .model()?;
    grid_order(&model, 4.0, [723.1967987, 336.1553981])
}

/// Temperatures of all nodes at equal parts of the time, by as many equal steps as asked: a stretch for each step, and a tolerance that accepts it.
fn by_equal_steps(model: &Model, grid: &Grid, time: f64, steps: usize) -> Result<Vec<Vec<f64>>, Box<dyn std::error::Error>> {
    let station = &model.stations()[0];
    let whole = Timeline::of_profile(model, station, Some(time));
    assert_eq!(whole.len(), 1, "one straight stretch");
    let whole = &whole[0];
    let part = |ramp: Ramp, step: usize| {
        let [start, end] = [step, step + 1].map(|step| ramp.at(step as f64 / steps as f64));
        Ramp { start, end }
    };
    let segments: Vec<Segment> = (0..steps)
        .map(|step| Segment {
            start: time * step as f64 / steps as f64,
            jump: true,
            forcing: Forcing {
                length: time / steps as f64,
                film: part(whole.forcing.film, step),
                gas: part(whole.forcing.gas, step),
                flux: part(whole.forcing.flux, step),
                ..whole.forcing
            },
            ..whole.clone()
        })
        .collect();
    let mut course = Course::new(station, model.surroundings(), grid, 300.0, 1e12);
    let mut states = Vec::new();
    course.drive(&segments, None, |moment| {
        assert!(
            moment.step.from == 0.0 && moment.step.to == 1.0,
            "one step a stretch: {} {} {}",
            moment.from,
            moment.step.from,
            moment.step.to
        );
        states.push((0..moment.map().len()).map(|node| moment.temperature(node, 1.0)).collect());
        Flow::Continue
    })?;
    assert_eq!(course.steps(), steps);
    Ok(states)
}

/// Largest error of any node from a quarter of the time on against the step, on one grid.
fn order_by_equal_steps(model: &Model, time: f64) -> Outcome {
    let grid = Grid::new(model, &model.stations()[0], 1.0);
    let most = 4096;
    let exact = by_equal_steps(model, &grid, time, most)?;
    let mut errors = Vec::new();
    for steps in [8, 16, 32, 64, 128, 256] {
        let states = by_equal_steps(model, &grid, time, steps)?;
        let mut largest: f64 = 0.0;
        for step in steps / 4..=steps {
            let (found, exact) = (&states[step - 1], &exact[step * (most / steps) - 1]);
            largest = found
                .iter()
                .zip(exact)
                .map(|(found, exact)| (found - exact).abs())
                .fold(largest, f64::max);
        }
        errors.push((time / steps as f64, largest));
    }
    let order = slope(&errors);
    assert!(order >= 3.5, "order {order} in time by equal steps: {errors:?}");
    // And at no halving less than order 3.
    assert!(errors.windows(2).all(|pair| pair[1].1 < pair[0].1 / 8.0), "{errors:?}");
    Ok(())
}

/// Temperatures of all nodes at twenty clocks, by steps of a tolerance, and how many steps those were.
fn by_tolerance(model: &Model, grid: &Grid, time: f64, step_tolerance: f64) -> Result<(Vec<f64>, usize), Box<dyn std::error::Error>> {
    let station = &model.stations()[0];
    let clocks = (1..=20).map(|clock| time * f64::from(clock) / 20.0).collect();
    let mut course = Course::new(station, model.surroundings(), grid, 300.0, step_tolerance);
    let mut recorder = Recorder::new(Vec::new(), false, clocks);
    course.drive(&Timeline::of_profile(model, station, Some(time)), None, |moment| {
        recorder.see(moment);
        Flow::Continue
    })?;
    assert_eq!(recorder.profiles.len(), 20);
    let temperatures = recorder.profiles.iter().flat_map(|profile| profile.1.iter().map(|point| point.1));
    Ok((temperatures.collect(), course.steps()))
}

/// Largest error of any node at any of twenty clocks (between the steps by dense output) against the mean step, on one grid.
fn order_by_tolerance(model: &Model, time: f64) -> Outcome {
    let grid = Grid::new(model, &model.stations()[0], 1.0);
    let (exact, most) = by_tolerance(model, &grid, time, 1e-7)?;
    let mut errors = Vec::new();
    for tolerance in [0.3, 0.1, 0.03, 0.01, 0.003, 0.001, 0.0003, 0.0001] {
        let (found, steps) = by_tolerance(model, &grid, time, tolerance)?;
        let pairs = found.iter().zip(&exact);
        let error = pairs.map(|(found, exact)| (found - exact).abs()).fold(0.0, f64::max);
        assert!(
            steps < most && error < 2.0 * tolerance,
            "{steps} steps, {error} K at a tolerance of {tolerance} K"
        );
        errors.push((time / steps as f64, error));
    }
    let order = slope(&errors);
    assert!(order >= 3.5, "order {order} in time by tolerances: {errors:?}");
    Ok(())
}

/// A coating on copper, from rest.
fn coated(heating: Option<Heating>, phase: Phase) -> Result<Model, ModelError> {
    Wall {
        heating,
        outer: outside(10.0, 0.8)?,
        phases: vec![phase],
        ..Wall::of(vec![
            layer("coating", &material(1.0, 5700.0, 500.0)?, 0.00025)?,
            layer("copper", &material(386.0, 8940.0, 385.0)?, 0.008)?,
        ])?
    }
    .model()
}

#[test]
fn order_three_and_a_half_in_time_under_constant_heating() -> Outcome {
    for heating in [film(3000.0, 2800.0)?, absorbed(4e6)?] {
        let model = coated(heating, burn(3.0)?)?;
        order_by_equal_steps(&model, 3.0)?;
        order_by_tolerance(&model, 3.0)?;
    }
    Ok(())
}

#[test]
fn order_three_and_a_half_in_time_under_a_ramp_of_heating() -> Outcome {
    for heating in [film(3000.0, 2800.0)?, absorbed(4e6)?] {
        let model = coated(heating, burn(3.0)?.with_ramp_and_tail(seconds(3.0), seconds(0.0))?)?;
        order_by_equal_steps(&model, 3.0)?;
        order_by_tolerance(&model, 3.0)?;
    }
    Ok(())
}
