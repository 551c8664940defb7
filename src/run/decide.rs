//! When the last phase has decided everything: where it leads, and whether anything can still change.

use super::{Moment, Quantity, Watcher};
use crate::model::{Convection, FaceCourse, Kelvin, Losses, Outside, Place, Station, Surroundings};
use crate::wall::{Equilibrium, Forcing, Over, equilibrium};
use std::sync::Arc;

/// A level that a wall at rest can't be told from, K: from above, nothing comes down to its own surroundings.
pub const SAME: f64 = 1e-6;

/// How the last phase ends for one level.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Rest {
    /// The quantity ends at or below the level.
    Below,
    /// The quantity ends above it.
    Above,
    /// Not known yet: the wall keeps its heat and has not evened out.
    Unknown,
}

/// Where the last phase leads, and what must be decided before the run may stop.
#[derive(Clone, Debug, Default)]
pub struct LastPhase {
    /// Temperatures of what acts on the wall at rest: coolest and hottest; the hottest is infinite where the sun acts.
    sources: Option<(Kelvin, Kelvin)>,
    /// Where the wall comes to rest.
    rest: Option<Equilibrium>,
    /// Levels that must be decided, by index.
    wanted: Vec<usize>,
    /// The level of the spread, by index.
    evened: Option<usize>,
    /// The followed face, if the hot end follows one, and what acts when it is at rest.
    followed: Option<(Arc<FaceCourse>, Forcing)>,
    /// Peaks within this are decided, K.
    tolerance: f64,
    /// Whether peaks must be final.
    peaks: bool,
}

/// A wall closer to rest than this is as good as there for levels further away than this (METHOD: 0.5 K).
const NEAR: f64 = 0.5;

impl LastPhase {
    /// Nothing needs to be decided: the run goes to the end of its segments.
    pub fn to_the_end() -> Self {
        Self::default()
    }

    /// Decides the levels `wanted` (by index), the spread's level `evened`, and all peaks to `tolerance`.
    pub fn deciding(
        station: &Station,
        surroundings: &Surroundings,
        at_rest: &Forcing,
        wanted: Vec<usize>,
        evened: Option<usize>,
        tolerance: f64,
    ) -> Self {
        Self {
            sources: sources(station, surroundings, at_rest),
            rest: None,
            wanted,
            evened,
            followed: station.followed().and_then(|followed| Some((followed.course.clone()?, *at_rest))),
            tolerance,
            peaks: true,
        }
    }

    /// Where the last phase leads; `None` as long as no step of its open end was seen.
    pub fn rest(&self) -> Option<&Equilibrium> {
        self.rest.as_ref()
    }

    /// Where a quantity ends, against a level.
    pub fn outcome(&self, quantity: Quantity, moment_map: &crate::wall::NodeMap, level: f64) -> Rest {
        match &self.rest {
            None => Rest::Unknown,
            Some(Equilibrium::None) => Rest::Above,
            Some(Equilibrium::Isolated(temperature)) => {
                let end = match quantity {
                    Quantity::Spread => 0.0,
                    Quantity::Coolest(_) => -temperature,
                    Quantity::Place(_) | Quantity::Truth(_) => *temperature,
                };
                if end > level { Rest::Above } else { Rest::Below }
            }
            Some(Equilibrium::At(temperatures)) => {
                if resting(quantity, moment_map, temperatures) > level {
                    Rest::Above
                } else {
                    Rest::Below
                }
            }
        }
    }

    pub(super) fn decides(&mut self, watcher: &Watcher, moment: &Moment<'_>) -> bool {
        if !self.peaks || !(moment.segment.forcing.is_constant() || self.followed.is_some()) {
            return false;
        }
        if self.rest.is_none() {
            let mut wall = moment.wall.clone();
            self.rest = Some(match &self.followed {
                Some((course, _)) if course.rest().is_none() => Equilibrium::None,
                Some((_, at_rest)) => {
                    wall.set_forcing([*at_rest]);
                    equilibrium(&mut wall, moment.step.after)
                }
                None => equilibrium(&mut wall, moment.step.after),
            });
        }
        let outlook = self.followed.as_ref().map(|(course, _)| (course.to_come(moment.to), course.rest()));
        let temperatures = watcher.temperatures();
        let (low, high) = temperatures.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), value| {
            (low.min(*value), high.max(*value))
        });
        let (coolest_source, hottest_source) = self.sources.unwrap_or((f64::INFINITY, f64::NEG_INFINITY));
        let mut ceiling = high.max(hottest_source);
        let mut floor = low.min(coolest_source);
        let mut from_rest = match &self.rest {
            Some(Equilibrium::At(rest)) => rest.iter().zip(temperatures).map(|(rest, now)| (rest - now).abs()).fold(0.0, f64::max),
            Some(Equilibrium::Isolated(rest)) => (high - rest).max(rest - low),
            _ => f64::INFINITY,
        };
        // A followed face counts by all that it still does: a wall that only cools goes on doing so only while that face only falls (the same
        // comparison as below, with a forcing that falls).
        let mut falls = true;
        if let Some((outlook, rest)) = outlook {
            ceiling = ceiling.max(outlook.hottest);
            floor = floor.min(outlook.coolest);
            falls = outlook.only_falls;
            let rest = rest.unwrap_or(f64::INFINITY);
            from_rest = from_rest.max((outlook.hottest - rest).abs()).max((outlook.coolest - rest).abs());
        }
        // Heat conduction with losses that rise with temperature is cooperative: once no node warms, none ever will again under the same
        // surroundings (Smith, Monotone Dynamical Systems, 1995, Prop. 3.2.1). A node at rest may warm by less than a tenth of the tolerance
        // until the clock has doubled.
        let since = (moment.to - watcher.last_burn_end()).max(1.0);
        let calm = 0.1 * self.tolerance / since;
        let only_cools = falls
            && (0..temperatures.len()).all(|node| moment.warming(node) <= calm)
            && (0..moment.map().probes.len()).all(|probe| moment.reading(probe, 1.0) >= moment.truth(probe, 1.0) - self.tolerance);
        let peaks_final = only_cools
            || from_rest < self.tolerance
            || watcher.quantities().iter().zip(watcher.peaks()).all(|(quantity, peak)| match quantity {
                Quantity::Place(_) => peak.is_some_and(|peak| peak.value >= ceiling),
                _ => true,
            });
        if !peaks_final {
            return false;
        }
        let decided = |index: usize| {
            let level = watcher.levels()[index];
            let quantity = watcher.quantities()[level.quantity];
            let now = watcher.values()[level.quantity];
            if now > level.value && self.outcome(quantity, moment.map(), level.value - SAME) == Rest::Above {
                return true;
            }
            match self.outcome(quantity, moment.map(), level.value) {
                Rest::Above => true,
                Rest::Unknown => false,
                Rest::Below => {
                    let all_below = ceiling <= level.value;
                    let near = from_rest < NEAR && self.resting_far(quantity, moment, level.value);
                    now <= level.value && (all_below || near || only_cools)
                }
            }
        };
        if !self.wanted.iter().all(|index| decided(*index)) {
            return false;
        }
        let Some(evened) = self.evened else { return true };
        let level = watcher.levels()[evened];
        if self.outcome(Quantity::Spread, moment.map(), level.value) == Rest::Above {
            return true;
        }
        if high - low > level.value {
            return false;
        }
        // Below the level now. It stays so where nothing reaches further, where the wall can't leave its rest by more than it is away from it,
        // or where it has only cooled for as long again and for longer than heat takes to cross the wall.
        let resting_spread = match &self.rest {
            Some(Equilibrium::At(rest)) => {
                let (low, high) = rest.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), value| {
                    (low.min(*value), high.max(*value))
                });
                high - low
            }
            _ => 0.0,
        };
        let crossed = watcher.crossings()[evened].last_down.map_or(watcher.last_burn_end(), |down| down.0);
        let origin = watcher.last_burn_end();
        let settling = moment.wall.resistance(0) * moment.wall.capacity(0);
        let settled =
            only_cools && moment.segment.forcing.is_constant() && moment.to - origin >= 2.0 * (crossed - origin) && moment.to - crossed >= settling;
        ceiling - floor <= level.value || resting_spread + 2.0 * from_rest <= level.value || settled
    }

    fn resting_far(&self, quantity: Quantity, moment: &Moment<'_>, level: f64) -> bool {
        match &self.rest {
            Some(Equilibrium::At(rest)) => (resting(quantity, moment.map(), rest) - level).abs() > NEAR,
            Some(Equilibrium::Isolated(rest)) => (rest - level).abs() > NEAR,
            _ => false,
        }
    }
}

/// A quantity of a wall at rest.
fn resting(quantity: Quantity, map: &crate::wall::NodeMap, temperatures: &[Kelvin]) -> f64 {
    let (fold_high, fold_low) = (|high: f64, value: &f64| high.max(*value), |low: f64, value: &f64| low.min(*value));
    match quantity {
        Quantity::Place(Place::Probe(probe)) | Quantity::Truth(probe) => {
            let weights = map.probes[probe];
            let nodes = weights.weights.iter().enumerate().filter(|(_, weight)| **weight != 0.0);
            nodes.map(|(k, weight)| weight * temperatures[weights.first + k]).sum()
        }
        Quantity::Place(place) => temperatures[map.nodes(place)].iter().fold(f64::NEG_INFINITY, fold_high),
        Quantity::Coolest(layer) => -temperatures[map.layers[layer].clone()].iter().fold(f64::INFINITY, fold_low),
        Quantity::Spread => temperatures.iter().fold(f64::NEG_INFINITY, fold_high) - temperatures.iter().fold(f64::INFINITY, fold_low),
    }
}

/// Coolest and hottest temperature of what acts on the wall at rest; `None` where nothing does.
fn sources(station: &Station, surroundings: &Surroundings, at_rest: &Forcing) -> Option<(Kelvin, Kelvin)> {
    let mut sources = Vec::new();
    if at_rest.film.end > 0.0 || at_rest.gas_emissivity.end > 0.0 {
        sources.push(at_rest.gas.end);
    }
    if at_rest.flux.end > 0.0 {
        sources.push(f64::INFINITY);
    }
    if at_rest.idle_coefficient > 0.0 {
        sources.push(at_rest.idle_temperature);
    }
    if at_rest.idle_view > 0.0 {
        sources.push(surroundings.surfaces);
    }
    if at_rest.sun > 0.0 {
        sources.push(f64::INFINITY);
    }
    match (&station.outer.outside, at_rest.over) {
        (Outside::Fixed(temperature), _) => sources.push(*temperature),
        (Outside::Adiabatic, _) => {}
        (Outside::Open(_), Over::Coolant { temperature, .. }) => sources.push(temperature),
        (Outside::Open(losses), Over::Losses) => loss_sources(losses, surroundings, &mut sources),
    }
    for side in &station.sides {
        loss_sources(side, surroundings, &mut sources);
    }
    let low = sources.iter().copied().reduce(f64::min)?;
    let high = sources.iter().copied().reduce(f64::max)?;
    Some((low, high))
}

/// What acts by the losses of a face.
fn loss_sources(losses: &Losses, surroundings: &Surroundings, sources: &mut Vec<Kelvin>) {
    if losses.convection != Convection::None {
        sources.push(surroundings.air);
    }
    if losses.emissivity.is_some() {
        sources.push(surroundings.surfaces);
    }
    if losses.solar_absorptivity * surroundings.sun > 0.0 {
        sources.push(f64::INFINITY);
    }
}
