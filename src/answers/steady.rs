//! How close the wall comes to the steady state of an endless last burn, and what that would mean.

use super::pass::{Keep, LevelOf, Pass, PassSettings, Plan, Stretch, limits};
use super::types::{Steady, SteadyState};
use crate::model::{HeatingModel, Kelvin, Model, Seconds};
use crate::run::{Course, LastPhase, Moment, RunError, Timeline};
use crate::solve::bracketed_root;
use crate::wall::{Equilibrium, Grid, equilibrium};

/// A face whose steady state is nearer to its start than this has no share of it reached.
const LEAST_RISE: f64 = 1.0;
/// The share that counts as arrived.
const ARRIVED: f64 = 0.95;

/// Faces at the start of the run and at the end of its last burn.
pub(super) struct Burn<'a> {
    /// Clock at which the last burn starts.
    pub start: Seconds,
    /// Node temperatures then; empty: the start of the run.
    pub from: &'a [Kelvin],
    /// Node temperatures at its end.
    pub at_end: &'a [Kelvin],
}

/// The steady state of the last burn going on for ever.
pub(super) fn steady(model: &Model, station_index: usize, grid: &Grid, settings: &PassSettings<'_>, burn: &Burn<'_>) -> Result<Steady, RunError> {
    let station = &model.stations[station_index];
    let logged = station
        .heating
        .as_ref()
        .is_none_or(|heating| matches!(heating.model, HeatingModel::Log(_) | HeatingModel::Wall(_)));
    let segments = Timeline::of_endless_burn(model, station, burn.start);
    let Some(endless) = segments.last().filter(|_| !logged).map(|segment| segment.forcing) else {
        return Ok(Steady::None);
    };
    let mut course = Course::new(station, &model.surroundings, grid, model.start, settings.step_tolerance);
    let start = course.unknowns().to_vec();
    let cold = course.wall.map(0).start_temperatures(station, model.start);
    course.wall.set_forcing([endless]);
    let Equilibrium::At(rest) = equilibrium(&mut course.wall, &start) else {
        return Ok(Steady::None);
    };
    let last = rest.len() - 1;
    let reached = |node: usize, now: Kelvin| {
        let rise = rest[node] - cold[node];
        (rise.abs() >= LEAST_RISE).then(|| (now - cold[node]) / rise)
    };
    let faces = [0, last];
    let lowest = |moment: &Moment<'_>, theta: f64| {
        faces
            .iter()
            .filter_map(|node| reached(*node, moment.temperature(*node, theta)))
            .fold(f64::INFINITY, f64::min)
    };
    let from: Vec<Kelvin> = if burn.from.is_empty() { cold.clone() } else { burn.from.to_vec() };
    let mut arrived = (faces.iter().filter_map(|node| reached(*node, from[*node])).all(|share| share >= ARRIVED)).then_some(0.0);
    let keep = Keep::default();
    let plan = Plan::new(model, station_index, settings.off_limits);
    let stretch = |segments, from, last_phase| Stretch {
        plan: plan.clone(),
        origin: burn.start,
        last_phase,
        segments,
        from,
    };
    let deciding = LastPhase::deciding(station, &model.surroundings, &endless, Vec::new(), None, model.tolerance);
    let settings = PassSettings {
        until: None,
        progress: None,
        ..*settings
    };
    let way = Pass::through(
        model,
        station_index,
        grid,
        &settings,
        &keep,
        stretch(segments, (!burn.from.is_empty()).then_some(burn.from), deciding),
        |moment| {
            if arrived.is_none() && lowest(moment, 1.0) >= ARRIVED {
                let theta = bracketed_root(|theta| lowest(moment, theta) - ARRIVED, 0.0, 1.0, 1e-9);
                arrived = Some(moment.clock(theta) - burn.start);
            }
        },
    )?;
    let rest_within = limits(station).iter().all(|(place, limit)| {
        let hottest = rest[way.map.nodes(*place)].iter().copied().fold(f64::NEG_INFINITY, f64::max);
        hottest <= limit.temperature - settings.off_limits
    });
    let mut within_limits = rest_within && way.keeps_limits(station);
    if within_limits && !limits(station).is_empty() {
        let segments = Timeline::after_last_burn(model, station, burn.start);
        let deciding = plan.deciding(model, station, |of| matches!(of, LevelOf::Limit(_)), false);
        let soak = Pass::through(
            model,
            station_index,
            grid,
            &settings,
            &keep,
            stretch(segments, Some(&rest), deciding),
            |_| {},
        )?;
        within_limits = soak.keeps_limits(station);
    }
    Ok(Steady::At(SteadyState {
        hot_face: rest[0],
        outer_face: rest[last],
        hot_face_reached: reached(0, burn.at_end[0]),
        outer_face_reached: reached(last, burn.at_end[last]),
        time_to_95_percent: arrived,
        within_limits,
    }))
}
