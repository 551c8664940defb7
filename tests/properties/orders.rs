//! Errors vanish as the method says: with the square of the cells' width, and in time with order 3.5 and better where the data is smooth and the
//! wall starts at rest (METHOD; Steinebach, BIT 63:27, 2023, for the order of RODAS5P on parabolic problems).

use crate::walls::*;
use soakdown::model::*;
use soakdown::run::{Course, Timeline};
use soakdown::solve::Flow;
use soakdown::wall::Grid;

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

/// Largest error of any node at the end against the mean step, on one grid.
fn time_order(model: &Model, time: f64) -> Result<f64, Box<dyn std::error::Error>> {
    let grid = Grid::new(model, &model.stations()[0], 1.0);
    let (exact, most) = state(model, &grid, 1e-8, 300.0, time)?;
    let mut errors = Vec::new();
    for tolerance in [1e-1, 1e-2, 1e-3, 1e-4, 1e-5] {
        let (temperatures, steps) = state(model, &grid, tolerance, 300.0, time)?;
        let error = temperatures
            .iter()
            .zip(&exact)
            .map(|(found, exact)| (found - exact).abs())
            .fold(0.0, f64::max);
        assert!(steps < most && error > 1e-9, "{steps} steps, {error} K");
        errors.push((time / steps as f64, error));
    }
    let order = slope(&errors);
    assert!(order >= 3.5, "order {order} in time: {errors:?}");
    Ok(order)
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
        time_order(&coated(heating, burn(3.0)?)?, 3.0)?;
    }
    Ok(())
}

#[test]
fn order_three_and_a_half_in_time_under_a_ramp_of_heating() -> Outcome {
    for heating in [film(3000.0, 2800.0)?, absorbed(4e6)?] {
        let ramp = burn(3.0)?.with_ramp_and_tail(seconds(3.0), seconds(0.0))?;
        time_order(&coated(heating, ramp)?, 3.0)?;
    }
    Ok(())
}
