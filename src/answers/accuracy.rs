//! How well a station is computed: the grid that keeps the promise, and the estimate of what is left.

use super::pass::{Keep, LevelOf, Pass, PassSettings};
use crate::model::{KelvinDifference, Model, Seconds};
use crate::run::{Quantity, RunError};
use crate::wall::Grid;

/// Share of the promised tolerance that one step may err by.
const STEP_SHARE: f64 = 0.3;
/// Share of the promised tolerance that the estimate must keep to.
const WANTED_SHARE: f64 = 0.5;
/// The second solution's steps may err by this many times more.
const LOOSER: f64 = 3.0;
/// Times that a grid is made finer before its estimate is accepted as it is.
const MOST_ROUNDS: usize = 6;
/// An estimate that stays above this share of the one before was not moved by a finer grid.
const UNMOVED: f64 = 0.8;
/// Then a step may err by this share of what it might before.
const SMALLER_STEPS: f64 = 0.2;
/// Most walls keep the promise with a grid this fine.
const FIRST_FINENESS: f64 = 1.5;
/// The time to the evening out must be right to this share: a spread that hardly falls says little in kelvin.
const EVENING_SHARE: f64 = 0.005;
/// Halving a grid multiplies its error by four: the difference is three times what is left.
const RICHARDSON: f64 = 3.0;
/// Most phases of a profile in which the two solutions are compared, at either end.
const COMPARED_PHASES: usize = 40;

/// A grid that keeps the promise for a station, the pass on it, and the estimated error.
#[derive(Clone, Debug)]
pub struct Resolved {
    /// The grid.
    pub grid: Grid,
    /// The pass on it.
    pub pass: Pass,
    /// Estimated error of peaks, crossings and phase ends, K.
    pub estimated_error: KelvinDifference,
    /// Error of one step that goes with the grid, K.
    pub step_tolerance: KelvinDifference,
}

/// Makes the grid for a station: finer until the estimate from a second solution, on every second node and with looser steps, keeps the promise.
///
/// # Errors
/// When the integrator gives up or the run was stopped.
pub fn resolve(model: &Model, station_index: usize, settings: &PassSettings<'_>) -> Result<Resolved, RunError> {
    let station = &model.stations[station_index];
    let keep = Keep {
        times: compared_times(model),
        profile_times: last_burn_start(model).into_iter().collect(),
        ..Keep::default()
    };
    // A hot end that follows another wall can't be surer than that wall.
    let inherited = station
        .followed()
        .and_then(|followed| followed.course.as_ref())
        .map_or(0.0, |course| course.error());
    let wanted = WANTED_SHARE * (model.tolerance - inherited).max(0.1 * model.tolerance);
    let mut step_tolerance = STEP_SHARE * model.tolerance;
    let mut fineness = FIRST_FINENESS;
    let mut before = f64::INFINITY;
    let mut round = 0;
    loop {
        let grid = Grid::new(model, station, fineness);
        let fine = PassSettings { step_tolerance, ..*settings };
        let coarse = PassSettings {
            step_tolerance: LOOSER * step_tolerance,
            progress: None,
            ..*settings
        };
        let pass = Pass::of_profile(model, station_index, &grid, &fine, &keep)?;
        let second = Pass::of_profile(model, station_index, &grid.halved(), &coarse, &keep)?;
        let estimated_error = difference(&pass, &second) / RICHARDSON;
        round += 1;
        let excess = (estimated_error / wanted).max(evening_difference(&pass, &second) / RICHARDSON / EVENING_SHARE);
        if excess <= 1.0 || round == MOST_ROUNDS {
            return Ok(Resolved {
                grid,
                pass,
                estimated_error: estimated_error + inherited,
                step_tolerance,
            });
        }
        if excess > UNMOVED * before {
            // A finer grid did not help: the steps are to blame.
            step_tolerance *= SMALLER_STEPS;
        } else {
            fineness *= (1.1 * excess.sqrt()).clamp(1.2, 2.5);
        }
        before = excess;
    }
}

/// When the last burn starts.
pub(super) fn last_burn_start(model: &Model) -> Option<Seconds> {
    model.profile.last_burn().map(|burn| model.profile.starts()[burn])
}

/// Clocks at which temperatures are promised: from a twentieth of each phase (or 1 s) on, to its end.
fn compared_times(model: &Model) -> Vec<Seconds> {
    let phases = model.profile.phases();
    let starts = model.profile.starts();
    let mut times = Vec::new();
    for (index, phase) in phases.iter().enumerate() {
        if index >= COMPARED_PHASES && index + COMPARED_PHASES < phases.len() {
            continue;
        }
        let (start, duration) = (starts[index], phase.duration());
        let last = index + 1 == phases.len();
        let mut since = (duration / 20.0).min(1.0);
        if last && duration == 0.0 {
            since = 1.0;
        }
        let end = if last { crate::run::LONGEST } else { duration };
        while since < end {
            times.push(start + since);
            since *= 2.0;
        }
        if !last {
            times.push(start + duration);
        }
    }
    times
}

/// The largest difference between two solutions, in peaks, in rows at the same clocks, and in crossings as temperature.
fn difference(pass: &Pass, second: &Pass) -> KelvinDifference {
    let mut largest: f64 = 0.0;
    for (quantity, (a, b)) in pass.plan.quantities.iter().zip(pass.watcher.peaks().iter().zip(second.watcher.peaks())) {
        if let (Quantity::Place(_) | Quantity::Truth(_), Some(a), Some(b)) = (quantity, a, b) {
            largest = largest.max((a.value - b.value).abs());
        }
    }
    for (a, b) in pass.rows.iter().zip(&second.rows) {
        let faces = a.faces.iter().zip(&b.faces).map(|(a, b)| (a - b).abs());
        let probes = a.probes.iter().zip(&b.probes).map(|(a, b)| (a.0 - b.0).abs().max((a.1 - b.1).abs()));
        largest = faces.chain(probes).fold(largest, f64::max);
    }
    for (index, (_, of)) in pass.plan.levels.iter().enumerate() {
        if !matches!(of, LevelOf::Wait(_) | LevelOf::Limit(_) | LevelOf::Even) {
            continue;
        }
        if let (Some((a, slope)), Some((b, _))) = (pass.watcher.crossings()[index].last_down, second.watcher.crossings()[index].last_down) {
            largest = largest.max((a - b).abs() * slope.abs());
        }
    }
    largest
}

/// The difference of two solutions in the time to the evening out, as a share of it.
fn evening_difference(pass: &Pass, second: &Pass) -> f64 {
    let at = |pass: &Pass| {
        pass.crossings(LevelOf::Even)
            .and_then(|(_, _, crossings)| crossings.last_down)
            .map(|down| down.0)
    };
    match (at(pass), at(second)) {
        (Some(a), Some(b)) if a > pass.watcher.last_burn_end() => (a - b).abs() / (a - pass.watcher.last_burn_end()),
        _ => 0.0,
    }
}
