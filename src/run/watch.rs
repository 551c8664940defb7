//! What is seen of a run without keeping it: peaks, crossings of levels, what happens after the last burn.

use super::{LastPhase, Moment};
use crate::model::{Kelvin, Metres, PhaseKind, Place, Seconds};
use crate::solve::{Flow, bracketed_root};
use std::ops::RangeInclusive;

/// What is watched. All are the largest of something, so that "above a level" has one meaning.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Quantity {
    /// The hottest point of a place; a probe as it reads.
    Place(Place),
    /// The true temperature at a probe.
    Truth(usize),
    /// The coolest point of a layer, with its sign turned.
    Coolest(usize),
    /// Hottest − coolest node.
    Spread,
}

/// A peak of a quantity.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Peak {
    /// How high.
    pub value: f64,
    /// When.
    pub clock: Seconds,
    /// In which kind of phase; at a change, the ending one.
    pub kind: PhaseKind,
    /// At which depth.
    pub depth: Metres,
}

/// A level of a quantity, by index into the watcher's quantities.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Level {
    /// Which quantity.
    pub quantity: usize,
    /// The level.
    pub value: f64,
}

/// How a quantity crossed a level.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Crossings {
    /// When it was first above.
    pub first_above: Option<Seconds>,
    /// How long it was above altogether.
    pub time_above: Seconds,
    /// When it last came down to the level, and how fast (K/s, negative).
    pub last_down: Option<(Seconds, f64)>,
    /// Whether it is above now.
    pub above: bool,
}

/// Watches quantities and levels of one wall, step by step.
#[derive(Clone, Debug)]
pub struct Watcher {
    quantities: Vec<Quantity>,
    levels: Vec<Level>,
    peaks: Vec<Option<Peak>>,
    crossings: Vec<Crossings>,
    /// Values at the end of the step before.
    values: Vec<f64>,
    temperatures: Vec<Kelvin>,
    last_burn_end: Seconds,
    /// Node temperatures at the end of the last burn, and each node's peak from then on.
    burnt: Option<Burnt>,
    gross: [f64; 2],
    last_phase: LastPhase,
    /// Clock and steps when everything was decided.
    computed_until: Seconds,
}

/// What each node does after the last burn.
#[derive(Clone, Debug)]
pub struct Burnt {
    /// Temperatures at its end.
    pub at_end: Vec<Kelvin>,
    /// The hottest from then on.
    pub peak: Vec<(Kelvin, Seconds)>,
}

/// An extremum of a node inside a step.
#[derive(Clone, Copy, Debug)]
struct Extremum {
    node: usize,
    theta: f64,
    temperature: Kelvin,
}

/// A node that leaves the range of a step's ends by less than this is taken to peak at the end, K.
const UNSEEN: f64 = 2e-5;

impl Watcher {
    /// Watches these quantities and levels; what happens from `last_burn_end` on counts as after the last burn.
    pub fn new(quantities: Vec<Quantity>, levels: Vec<Level>, last_burn_end: Seconds, last_phase: LastPhase) -> Self {
        Self {
            peaks: vec![None; quantities.len()],
            crossings: vec![Crossings::default(); levels.len()],
            values: Vec::new(),
            temperatures: Vec::new(),
            burnt: None,
            gross: [0.0; 2],
            computed_until: 0.0,
            quantities,
            levels,
            last_burn_end,
            last_phase,
        }
    }

    /// The quantities, in the order given.
    pub fn quantities(&self) -> &[Quantity] {
        &self.quantities
    }

    /// The levels, in the order given.
    pub fn levels(&self) -> &[Level] {
        &self.levels
    }

    /// Peak of each quantity.
    pub fn peaks(&self) -> &[Option<Peak>] {
        &self.peaks
    }

    /// Crossings of each level.
    pub fn crossings(&self) -> &[Crossings] {
        &self.crossings
    }

    /// Values of the quantities now.
    pub fn values(&self) -> &[f64] {
        &self.values
    }

    /// Node temperatures now.
    pub fn temperatures(&self) -> &[Kelvin] {
        &self.temperatures
    }

    /// What happened after the last burn; `None` before its end.
    pub fn burnt(&self) -> Option<&Burnt> {
        self.burnt.as_ref()
    }

    /// Heat that came in over the hot face without what went back, and went out over the outer face without what came back.
    pub fn gross(&self) -> [f64; 2] {
        self.gross
    }

    /// End of the last burn, or 0.
    pub fn last_burn_end(&self) -> Seconds {
        self.last_burn_end
    }

    /// Where the last phase leads.
    pub fn last_phase(&self) -> &LastPhase {
        &self.last_phase
    }

    /// The clock reached.
    pub fn computed_until(&self) -> Seconds {
        self.computed_until
    }

    /// Takes in one step; stops in the open end as soon as everything is decided.
    pub fn see(&mut self, moment: &Moment<'_>) -> Flow {
        let len = moment.map().len();
        if self.temperatures.is_empty() {
            self.temperatures = (0..len).map(|node| moment.temperature(node, 0.0)).collect();
            self.values = self
                .quantities
                .iter()
                .map(|quantity| value(*quantity, moment, 0.0, &self.temperatures))
                .collect();
            self.note_ends(moment, 0.0);
            for (level, crossings) in self.levels.iter().zip(&mut self.crossings) {
                if self.values[level.quantity] > level.value {
                    crossings.above = true;
                    crossings.first_above = Some(moment.from);
                }
            }
        }
        if self.burnt.is_none() && moment.from >= self.last_burn_end {
            let peak = self.temperatures.iter().map(|temperature| (*temperature, moment.from)).collect();
            self.burnt = Some(Burnt {
                at_end: self.temperatures.clone(),
                peak,
            });
        }
        let extrema = self.extrema(moment);
        let before = std::mem::take(&mut self.values);
        for (temperature, evaluated) in self.temperatures.iter_mut().zip(moment.wall.evaluated()) {
            *temperature = evaluated[0];
        }
        self.values = self
            .quantities
            .iter()
            .map(|quantity| value(*quantity, moment, 1.0, &self.temperatures))
            .collect();
        self.note_ends(moment, 1.0);
        self.note_extrema(moment, &extrema);
        self.note_levels(moment, &before, &extrema);
        self.note_gross(moment);
        self.computed_until = moment.to;
        if moment.segment.open_ended && self.decided(moment) {
            Flow::Stop
        } else {
            Flow::Continue
        }
    }

    /// Takes in that the wall stands at the end of a step: peaks there.
    fn note_ends(&mut self, moment: &Moment<'_>, theta: f64) {
        let clock = moment.clock(theta);
        for (index, quantity) in self.quantities.iter().enumerate() {
            let found = self.values[index];
            if self.peaks[index].is_none_or(|peak| found > peak.value) {
                let depth = depth(*quantity, moment, &self.temperatures);
                self.peaks[index] = Some(Peak {
                    value: found,
                    clock,
                    kind: moment.kind(),
                    depth,
                });
            }
        }
        if let Some(burnt) = &mut self.burnt {
            for (peak, temperature) in burnt.peak.iter_mut().zip(&self.temperatures) {
                if *temperature > peak.0 {
                    *peak = (*temperature, clock);
                }
            }
        }
    }

    /// Extrema of nodes inside the step.
    fn extrema(&self, moment: &Moment<'_>) -> Vec<Extremum> {
        let step = moment.step;
        let length = step.length[0];
        let mut extrema = Vec::new();
        for node in 0..self.temperatures.len() {
            let (start, end) = (step.rate_before[node][0], step.rate_after[node][0]);
            // A parabola with these slopes at its ends leaves the range of its ends by this much.
            let (steep, flat) = (start.abs().max(end.abs()), start.abs().min(end.abs()));
            if start * end < 0.0 && flat * flat * length > 2.0 * UNSEEN * (steep + flat) {
                let theta = bracketed_root(|theta| step.slope(node, theta)[0], 0.0, 1.0, 1e-9);
                if theta > 0.0 && theta < 1.0 {
                    extrema.push(Extremum {
                        node,
                        theta,
                        temperature: moment.temperature(node, theta),
                    });
                }
            }
        }
        extrema
    }

    fn note_extrema(&mut self, moment: &Moment<'_>, extrema: &[Extremum]) {
        for extremum in extrema {
            let clock = moment.clock(extremum.theta);
            let depth = moment.map().depths[extremum.node];
            for (index, quantity) in self.quantities.iter().enumerate() {
                let Some(nodes) = hottest_nodes(*quantity, moment) else { continue };
                let peak = &mut self.peaks[index];
                if nodes.contains(&extremum.node) && peak.is_none_or(|peak| extremum.temperature > peak.value) {
                    *peak = Some(Peak {
                        value: extremum.temperature,
                        clock,
                        kind: moment.kind(),
                        depth,
                    });
                }
            }
            if let Some(burnt) = &mut self.burnt
                && extremum.temperature > burnt.peak[extremum.node].0
            {
                burnt.peak[extremum.node] = (extremum.temperature, clock);
            }
        }
        for index in 0..self.quantities.len() {
            if let Some(theta) = own_turn(self.quantities[index], moment, extrema) {
                let found = value_at(self.quantities[index], moment, theta);
                if self.peaks[index].is_none_or(|peak| found > peak.value) {
                    let depth = depth(self.quantities[index], moment, &self.temperatures);
                    self.peaks[index] = Some(Peak {
                        value: found,
                        clock: moment.clock(theta),
                        kind: moment.kind(),
                        depth,
                    });
                }
            }
        }
    }

    fn note_levels(&mut self, moment: &Moment<'_>, before: &[f64], extrema: &[Extremum]) {
        let duration = moment.to - moment.from;
        for (level, crossings) in self.levels.iter().zip(&mut self.crossings) {
            let quantity = self.quantities[level.quantity];
            let (start, end) = (before[level.quantity], self.values[level.quantity]);
            let turns = turns(quantity, level.value, [start, end], moment, extrema);
            if turns.is_empty() && start <= level.value && end <= level.value {
                continue;
            }
            let mut stops: Vec<(f64, f64)> = turns.into_iter().map(|theta| (theta, value_at(quantity, moment, theta))).collect();
            stops.push((1.0, end));
            let (mut theta, mut above) = (0.0, start > level.value);
            // A level that was reached from above and never left counts as it did before.
            debug_assert!(above == crossings.above || start == level.value || crossings.above);
            crossings.above = above;
            for (next, found) in stops {
                let rises = found > level.value;
                if rises == above {
                    if above {
                        crossings.time_above += (next - theta) * duration;
                    }
                } else {
                    let at = bracketed_root(|theta| value_at(quantity, moment, theta) - level.value, theta, next, 1e-12);
                    let clock = moment.clock(at);
                    if above {
                        crossings.time_above += (at - theta) * duration;
                        crossings.last_down = Some((clock, slope_at(quantity, moment, at)));
                    } else {
                        crossings.first_above.get_or_insert(clock);
                        crossings.time_above += (next - at) * duration;
                    }
                    above = rises;
                    crossings.above = rises;
                }
                theta = next;
            }
        }
    }

    /// Adds what flowed in the counted direction; a flux that turns inside the step is followed in eighths.
    fn note_gross(&mut self, moment: &Moment<'_>) {
        for (ledger, gross) in self.gross.iter_mut().enumerate() {
            let mut last = moment.step.followers_before[ledger][0];
            for eighth in 1..=8 {
                let next = moment.step.follower(ledger, f64::from(eighth) / 8.0)[0];
                *gross += (next - last).max(0.0);
                last = next;
            }
        }
    }

    fn decided(&mut self, moment: &Moment<'_>) -> bool {
        let mut last_phase = std::mem::take(&mut self.last_phase);
        let decided = last_phase.decides(self, moment);
        self.last_phase = last_phase;
        decided
    }
}

/// Value of a quantity, all node temperatures being known.
fn value(quantity: Quantity, moment: &Moment<'_>, theta: f64, temperatures: &[Kelvin]) -> f64 {
    let hottest = |nodes: RangeInclusive<usize>| temperatures[nodes].iter().copied().fold(f64::NEG_INFINITY, f64::max);
    match quantity {
        Quantity::Place(Place::Probe(probe)) => moment.reading(probe, theta),
        Quantity::Truth(probe) => moment.truth(probe, theta),
        Quantity::Place(place) => hottest(moment.map().nodes(place)),
        Quantity::Coolest(layer) => -temperatures[moment.map().layers[layer].clone()]
            .iter()
            .copied()
            .fold(f64::INFINITY, f64::min),
        Quantity::Spread => {
            let (low, high) = temperatures.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), value| {
                (low.min(*value), high.max(*value))
            });
            high - low
        }
    }
}

/// Value of a quantity inside a step.
fn value_at(quantity: Quantity, moment: &Moment<'_>, theta: f64) -> f64 {
    let over = |nodes: RangeInclusive<usize>| nodes.map(|node| moment.temperature(node, theta));
    match quantity {
        Quantity::Place(Place::Probe(probe)) => moment.reading(probe, theta),
        Quantity::Truth(probe) => moment.truth(probe, theta),
        Quantity::Place(place) => over(moment.map().nodes(place)).fold(f64::NEG_INFINITY, f64::max),
        Quantity::Coolest(layer) => -over(moment.map().layers[layer].clone()).fold(f64::INFINITY, f64::min),
        Quantity::Spread => {
            let all = over(0..=moment.map().len() - 1);
            let (low, high) = all.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), value| (low.min(value), high.max(value)));
            high - low
        }
    }
}

/// Slope of a quantity inside a step, K/s.
fn slope_at(quantity: Quantity, moment: &Moment<'_>, theta: f64) -> f64 {
    let (low, high) = ((theta - 1e-4).max(0.0), (theta + 1e-4).min(1.0));
    (value_at(quantity, moment, high) - value_at(quantity, moment, low)) / ((high - low) * (moment.to - moment.from))
}

/// Depth at which a quantity counts now.
fn depth(quantity: Quantity, moment: &Moment<'_>, temperatures: &[Kelvin]) -> Metres {
    let map = moment.map();
    let nodes = match quantity {
        Quantity::Place(place) => map.nodes(place),
        Quantity::Truth(probe) => map.nodes(Place::Probe(probe)),
        Quantity::Coolest(layer) => map.layers[layer].clone(),
        Quantity::Spread => return 0.0,
    };
    let hottest = nodes.max_by(|a, b| temperatures[*a].total_cmp(&temperatures[*b]));
    hottest.map_or(0.0, |node| map.depths[node])
}

/// The nodes whose own peaks are the quantity's.
fn hottest_nodes(quantity: Quantity, moment: &Moment<'_>) -> Option<RangeInclusive<usize>> {
    match quantity {
        Quantity::Place(Place::Probe(_)) | Quantity::Truth(_) | Quantity::Coolest(_) | Quantity::Spread => None,
        Quantity::Place(place) => Some(moment.map().nodes(place)),
    }
}

/// Where a probe, which is no node, turns inside the step: its own slope's root.
fn own_turn(quantity: Quantity, moment: &Moment<'_>, extrema: &[Extremum]) -> Option<f64> {
    let probe = match quantity {
        Quantity::Place(Place::Probe(probe)) => match moment.wall.follower_of_probe(probe) {
            Some(follower) => {
                let slope = |theta| moment.step.follower_slope(follower, theta)[0];
                return (slope(0.0) * slope(1.0) < 0.0).then(|| bracketed_root(slope, 0.0, 1.0, 1e-9));
            }
            None => probe,
        },
        Quantity::Truth(probe) => probe,
        _ => return None,
    };
    let nodes = moment.map().nodes(Place::Probe(probe));
    if !extrema.iter().any(|extremum| nodes.contains(&extremum.node)) {
        return None;
    }
    let change = |theta: f64| {
        let (low, high) = ((theta - 1e-5).max(0.0), (theta + 1e-5).min(1.0));
        (moment.truth(probe, high) - moment.truth(probe, low)) / (high - low)
    };
    (change(0.0) * change(1.0) < 0.0).then(|| bracketed_root(change, 0.0, 1.0, 1e-9))
}

/// Where inside the step a quantity may stand on the other side of a level than at both ends, in order. The hottest of several nodes is only
/// looked at where one of them turns above a level that both ends keep: that it dips below in between takes all of them at once.
fn turns(quantity: Quantity, level: f64, [start, end]: [f64; 2], moment: &Moment<'_>, extrema: &[Extremum]) -> Vec<f64> {
    let nodes = match quantity {
        Quantity::Place(Place::Probe(_)) | Quantity::Truth(_) => return own_turn(quantity, moment, extrema).into_iter().collect(),
        Quantity::Place(place) => moment.map().nodes(place),
        Quantity::Coolest(layer) => moment.map().layers[layer].clone(),
        Quantity::Spread => 0..=moment.map().len() - 1,
    };
    let mut turning = extrema.iter().filter(|extremum| nodes.contains(&extremum.node)).peekable();
    if turning.peek().is_none() {
        return Vec::new();
    }
    if nodes.start() != nodes.end() {
        if start.max(end) > level {
            return Vec::new();
        }
        let (low, high) = turning.clone().fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), extremum| {
            (low.min(extremum.temperature), high.max(extremum.temperature))
        });
        let most = match quantity {
            Quantity::Place(_) | Quantity::Truth(_) => high,
            Quantity::Coolest(_) => -low,
            // What turns may have left the range of its ends by no more than the nodes that turn.
            Quantity::Spread => start.max(end) + (high - low),
        };
        if most <= level {
            return Vec::new();
        }
    }
    let mut turns: Vec<f64> = turning.map(|extremum| extremum.theta).collect();
    turns.sort_by(f64::total_cmp);
    turns
}
