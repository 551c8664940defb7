//! Drives one wall through its segments.

use super::Segment;
use crate::model::{Kelvin, ModelError, Outside, PhaseKind, Seconds, Station, Surroundings, WattsPerSquareMetre};
use crate::solve::{Flow, Integrator, Settings, Slot, SolveError, Step};
use crate::wall::{Grid, NodeMap, Wall};
use std::sync::atomic::{AtomicBool, Ordering};

/// Why a run was given up: where, and at which clock.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum RunError {
    /// The integrator gave up.
    #[error("station \"{station}\": {source}, {clock:.6} s from the start; the hottest node was at {hottest:.1} K then")]
    Solver {
        /// The station's name.
        station: String,
        /// The clock reached.
        clock: Seconds,
        /// The hottest node then.
        hottest: Kelvin,
        /// What the integrator says.
        source: SolveError,
    },
    /// The face that a hot end follows is not known.
    #[error("station \"{station}\" follows a face whose course could not be had: {source}")]
    Followed {
        /// The station that follows.
        station: String,
        /// What was wrong with it.
        source: ModelError,
    },
    /// Somebody asked to stop.
    #[error("interrupted")]
    Interrupted,
}

/// One wall on its way through its segments.
#[derive(Clone, Debug)]
pub struct Course {
    station: String,
    /// The wall.
    pub wall: Wall<1>,
    integrator: Integrator<1>,
    settings: Settings,
    clock: Seconds,
}

impl Course {
    /// A wall at clock 0, at a uniform temperature or where its own start profile has it, to be integrated with this tolerance of one step, K.
    pub fn new(station: &Station, surroundings: &Surroundings, grid: &Grid, start: Kelvin, step_tolerance: f64) -> Self {
        let wall = Wall::new([(station, surroundings)], grid);
        let integrator = Integrator::new(wall.unknowns_at([start]), wall.followers_at([start]));
        let mut course = Self {
            station: station.name.clone(),
            wall,
            integrator,
            settings: Settings::with_tolerance(step_tolerance),
            clock: 0.0,
        };
        if station.start.is_some() {
            let mut temperatures = course.wall.map(0).start_temperatures(station, start);
            if let (Outside::Fixed(held), Some(last)) = (&station.outer.outside, temperatures.last_mut()) {
                *last = *held;
            }
            course.place(0.0, &temperatures);
        }
        course
    }

    /// The clock reached.
    pub fn clock(&self) -> Seconds {
        self.clock
    }

    /// The unknowns now.
    pub fn unknowns(&self) -> &[Slot<1>] {
        &self.integrator.unknowns
    }

    /// The followers now.
    pub fn followers(&self) -> &[Slot<1>] {
        &self.integrator.followers
    }

    /// What it has cost so far.
    pub fn effort(&self) -> crate::solve::Effort {
        self.integrator.effort
    }

    /// Accepted steps so far.
    pub fn steps(&self) -> usize {
        self.integrator.effort.steps
    }

    /// Puts the wall into other states (node temperatures) at a clock; probes read what they then see.
    pub fn place(&mut self, clock: Seconds, temperatures: &[Kelvin]) {
        self.clock = clock;
        for (node, temperature) in temperatures.iter().enumerate() {
            self.integrator.unknowns[node] = [self.wall.unknown(node, 0, *temperature)];
        }
        for probe in 0..self.wall.map(0).probes.len() {
            if let Some(follower) = self.wall.follower_of_probe(probe) {
                let weights = self.wall.map(0).probes[probe];
                let read = weights.weights.iter().enumerate().filter(|(_, weight)| **weight != 0.0);
                self.integrator.followers[follower] = [read.map(|(k, weight)| weight * temperatures[weights.first + k]).sum()];
            }
        }
    }

    /// Goes through segments, in order, showing every step to the observer, until they end or it stops.
    ///
    /// # Errors
    /// When the integrator gives up or `stop` was set.
    pub fn drive(&mut self, segments: &[Segment], stop: Option<&AtomicBool>, mut observer: impl FnMut(&Moment<'_>) -> Flow) -> Result<(), RunError> {
        for segment in segments {
            if segment.jump {
                self.integrator.expect_jump();
            }
            self.wall.set_forcing([segment.forcing]);
            let mut flow = Flow::Continue;
            let mut interrupted = false;
            let length = segment.forcing.length;
            let mut clock = segment.start;
            let reached = self.integrator.phase(&mut self.wall, &self.settings, |wall, step| {
                let to = if step.to >= 1.0 {
                    segment.start + length
                } else {
                    segment.start + step.to * length
                };
                flow = observer(&Moment {
                    wall,
                    step,
                    segment,
                    from: clock,
                    to,
                });
                clock = to;
                if stop.is_some_and(|stop| stop.load(Ordering::Relaxed)) {
                    interrupted = true;
                    flow = Flow::Stop;
                }
                flow
            });
            self.clock = clock;
            if let Err(source) = reached {
                let temperatures = self
                    .integrator
                    .unknowns
                    .iter()
                    .enumerate()
                    .map(|(node, unknown)| self.wall.temperature(node, 0, unknown[0]));
                let hottest = temperatures.fold(0.0, f64::max);
                return Err(RunError::Solver {
                    station: self.station.clone(),
                    clock,
                    hottest,
                    source,
                });
            }
            if interrupted {
                return Err(RunError::Interrupted);
            }
            if flow == Flow::Stop {
                break;
            }
        }
        Ok(())
    }
}

/// One accepted step of a course, with everything that can be read off it. θ names a place inside, 0 … 1.
#[derive(Debug)]
pub struct Moment<'a> {
    /// The wall.
    pub wall: &'a Wall<1>,
    /// The step.
    pub step: &'a Step<'a, 1>,
    /// The segment that it lies in.
    pub segment: &'a Segment,
    /// Clock at its start.
    pub from: Seconds,
    /// Clock at its end.
    pub to: Seconds,
}

impl Moment<'_> {
    /// The nodes.
    pub fn map(&self) -> &NodeMap {
        self.wall.map(0)
    }

    /// In which kind of phase it lies.
    pub fn kind(&self) -> PhaseKind {
        self.segment.kind
    }

    /// Clock at θ.
    pub fn clock(&self, theta: f64) -> Seconds {
        if theta >= 1.0 {
            self.to
        } else {
            self.from + theta * (self.to - self.from)
        }
    }

    /// θ at a clock.
    pub fn theta(&self, clock: Seconds) -> f64 {
        ((clock - self.from) / (self.to - self.from)).clamp(0.0, 1.0)
    }

    /// Temperature of a node at θ.
    pub fn temperature(&self, node: usize, theta: f64) -> Kelvin {
        self.wall.temperature(node, 0, self.step.value(node, theta)[0])
    }

    /// True temperature at a probe at θ.
    pub fn truth(&self, probe: usize, theta: f64) -> Kelvin {
        let weights = self.map().probes[probe];
        let nodes = weights.weights.iter().enumerate().filter(|(_, weight)| **weight != 0.0);
        nodes.map(|(k, weight)| weight * self.temperature(weights.first + k, theta)).sum()
    }

    /// What a probe reads at θ.
    pub fn reading(&self, probe: usize, theta: f64) -> Kelvin {
        match self.wall.follower_of_probe(probe) {
            Some(follower) => self.step.follower(follower, theta)[0],
            None => self.truth(probe, theta),
        }
    }

    /// Flux into the hot face, and out of the outer face per area of that face (a bar: sides and far end, per section), at θ.
    pub fn fluxes(&self, theta: f64) -> (WattsPerSquareMetre, WattsPerSquareMetre) {
        let share = self.step.from + theta * (self.step.to - self.step.from);
        self.wall.face_fluxes(0, share, |node| self.step.value(node, theta)[0])
    }

    /// Rate of a node's temperature at the end of the step, K/s.
    pub fn warming(&self, node: usize) -> f64 {
        let slope = self.wall.temperature_and_slope(node, 0, self.step.after[node][0]).1;
        self.step.rate_after[node][0] * slope
    }
}
