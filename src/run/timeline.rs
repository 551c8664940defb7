//! The profile as stretches between kinks, in each of which everything that acts on a wall is constant or straight in time.

use crate::model::{HeatingModel, Kelvin, LogRows, Model, Outside, Phase, PhaseKind, Seconds, Station};
use crate::wall::{Forcing, Over, Ramp};

/// A run goes on no longer than this: 100 h.
pub const LONGEST: Seconds = 360_000.0;

/// A stretch between two kinks.
#[derive(Clone, Debug, PartialEq)]
pub struct Segment {
    /// Clock at its start.
    pub start: Seconds,
    /// What kind of phase it belongs to.
    pub kind: PhaseKind,
    /// What acts on the wall.
    pub forcing: Forcing,
    /// Whether the heat jumps at its start.
    pub jump: bool,
    /// Whether a phase starts with it.
    pub starts_phase: bool,
    /// Whether a phase (or the written profile) ends with it.
    pub ends_phase: bool,
    /// Whether it lies beyond the written profile and may end as soon as everything is decided.
    pub open_ended: bool,
}

/// Builds segments phase by phase.
#[derive(Clone, Debug)]
pub struct Timeline<'a> {
    model: &'a Model,
    station: &'a Station,
    clock: Seconds,
    segments: Vec<Segment>,
    /// Heat that outlasts its burn.
    afterglow: Option<Afterglow>,
}

/// Heat that outlasts the burn it comes from.
#[derive(Clone, Copy, Debug)]
enum Afterglow {
    /// Falls linearly to nothing.
    Tail { start: Seconds, end: Seconds, scale: f64 },
    /// The rows of a log that are later than the burn's end.
    Log { origin: Seconds },
}

/// What the gas does at one instant.
#[derive(Clone, Copy, Debug, Default)]
struct Gas {
    film: f64,
    temperature: Kelvin,
    flux: f64,
    emissivity: f64,
}

impl<'a> Timeline<'a> {
    /// A timeline that starts at a clock, with no heat left from before.
    pub fn starting(model: &'a Model, station: &'a Station, clock: Seconds) -> Self {
        Self {
            model,
            station,
            clock,
            segments: Vec::new(),
            afterglow: None,
        }
    }

    /// The whole profile as written, and after it the last phase on to `end` (or to [`LONGEST`], whichever is later than the profile).
    pub fn of_profile(model: &'a Model, station: &'a Station, end: Option<Seconds>) -> Vec<Segment> {
        let mut timeline = Self::starting(model, station, 0.0);
        for phase in model.profile.phases() {
            timeline.phase(phase, phase.duration());
        }
        timeline.last_phase_on(end.unwrap_or(LONGEST));
        timeline.segments
    }

    /// The last burn, from its start on without end: to 100 h from there.
    pub fn of_endless_burn(model: &'a Model, station: &'a Station, start: Seconds) -> Vec<Segment> {
        let mut timeline = Self::starting(model, station, start);
        if let Some(index) = model.profile.last_burn() {
            timeline.phase(&model.profile.phases()[index], LONGEST);
        }
        if let Some(last) = timeline.segments.last_mut() {
            last.open_ended = true;
        }
        timeline.segments
    }

    /// What follows the last burn, as if it had just ended in full flow at `clock`.
    pub fn after_last_burn(model: &'a Model, station: &'a Station, clock: Seconds) -> Vec<Segment> {
        let mut timeline = Self::starting(model, station, clock);
        if let Some(index) = model.profile.last_burn() {
            let phases = model.profile.phases();
            timeline.end_burn(&phases[index], clock, phases[index].scale());
            for phase in &phases[index + 1..] {
                timeline.phase(phase, phase.duration());
            }
            timeline.last_phase_on(timeline.clock + LONGEST);
        }
        timeline.segments
    }

    /// The last phase's forcing when all afterglow is over.
    pub fn at_rest(model: &'a Model, station: &'a Station) -> Option<Forcing> {
        let phase = model.profile.phases().last()?;
        let timeline = Self::starting(model, station, 0.0);
        match timeline.followed_gas(f64::INFINITY) {
            Some(gas) => Some(timeline.forcing(phase, 0.0, 1.0, gas, gas, true)),
            None => Some(timeline.forcing(phase, 0.0, 1.0, Gas::default(), Gas::default(), false)),
        }
    }

    /// Adds the last phase once more, from the end of the written profile to a clock.
    fn last_phase_on(&mut self, end: Seconds) {
        let length = end - self.clock;
        let Some(phase) = self.model.profile.phases().last() else { return };
        if length <= 0.0 {
            return;
        }
        let before = self.segments.len();
        self.phase(phase, length);
        let added = &mut self.segments[before..];
        if let Some(first) = added.first_mut() {
            first.starts_phase = before == 0;
            first.jump = before == 0;
        }
        if self.station.followed().is_some() {
            // What a followed face still does is known: the run may end before it is at rest.
            for segment in added {
                segment.open_ended = true;
            }
        } else if let Some(last) = added.last_mut() {
            last.open_ended = true;
        }
    }

    /// What a followed face does at a clock, burn or not; `None`: the hot end follows none.
    fn followed_gas(&self, clock: Seconds) -> Option<Gas> {
        let followed = self.station.followed()?;
        let factor = self.station.heating.as_ref().map_or(1.0, |heating| heating.factor);
        let temperature = followed.course.as_ref().map_or(self.model.start, |course| course.at(clock));
        Some(Gas {
            film: factor * followed.conductance,
            temperature,
            ..Gas::default()
        })
    }

    fn phase(&mut self, phase: &Phase, duration: Seconds) {
        if duration <= 0.0 {
            return;
        }
        let (start, end) = (self.clock, self.clock + duration);
        let burning = phase.kind() == PhaseKind::Burn;
        if burning {
            self.afterglow = None;
        }
        let mut kinks = vec![start];
        kinks.extend(self.kinks(phase, start).into_iter().filter(|kink| *kink > start && *kink < end));
        kinks.push(end);
        for (index, pair) in kinks.windows(2).enumerate() {
            let (from, to) = (pair[0], pair[1]);
            let [gas_from, gas_to] = [(from, true), (to, false)].map(|(clock, after)| self.gas(phase, start, clock, after));
            let replaces_idle = gas_from.1;
            let forcing = self.forcing(phase, from, to, gas_from.0, gas_to.0, replaces_idle);
            let jumps = index == 0 || self.segments.last().is_some_and(|before| jumps(&before.forcing, &forcing));
            self.segments.push(Segment {
                start: from,
                kind: phase.kind(),
                forcing,
                jump: jumps,
                starts_phase: index == 0,
                ends_phase: index + 2 == kinks.len(),
                open_ended: false,
            });
        }
        self.clock = end;
        if burning {
            let scale = if phase.ramp > duration {
                phase.scale() * duration / phase.ramp
            } else {
                phase.scale()
            };
            self.end_burn_at(phase, start, end, scale);
        }
    }

    fn end_burn(&mut self, phase: &Phase, end: Seconds, scale: f64) {
        self.end_burn_at(phase, end, end, scale);
    }

    fn end_burn_at(&mut self, phase: &Phase, start: Seconds, end: Seconds, scale: f64) {
        self.afterglow = match self.station.heating.as_ref().map(|heating| &heating.model) {
            Some(HeatingModel::Wall(_)) => None,
            Some(HeatingModel::Log(_)) => Some(Afterglow::Log { origin: start }),
            Some(_) if phase.tail > 0.0 => Some(Afterglow::Tail {
                start: end,
                end: end + phase.tail,
                scale,
            }),
            _ => None,
        };
    }

    /// Clocks at which something bends or jumps, from the start of a phase on.
    fn kinks(&self, phase: &Phase, start: Seconds) -> Vec<Seconds> {
        let Some(heating) = &self.station.heating else { return Vec::new() };
        if let Some(course) = self.station.followed().and_then(|followed| followed.course.as_ref()) {
            return course.clocks().collect();
        }
        let rows = |origin: Seconds| -> Vec<Seconds> {
            match &heating.model {
                HeatingModel::Log(LogRows::Flux { rows, .. }) => rows.iter().map(|row| origin + row.0).collect(),
                HeatingModel::Log(LogRows::Film { rows }) => rows.iter().map(|row| origin + row.0).collect(),
                _ => Vec::new(),
            }
        };
        if phase.kind() == PhaseKind::Burn {
            return match heating.model {
                HeatingModel::Log(_) => rows(start),
                _ => vec![start + phase.ramp],
            };
        }
        match self.afterglow {
            Some(Afterglow::Tail { end, .. }) => vec![end],
            Some(Afterglow::Log { origin }) => rows(origin),
            None => Vec::new(),
        }
    }

    /// What the gas does at a clock within a phase (just after or just before it), and whether that replaces the idle losses.
    fn gas(&self, phase: &Phase, start: Seconds, clock: Seconds, after: bool) -> (Gas, bool) {
        let Some(heating) = &self.station.heating else {
            return (Gas::default(), false);
        };
        if let Some(gas) = self.followed_gas(clock) {
            return (gas, true);
        }
        let burning = phase.kind() == PhaseKind::Burn;
        let (scale, tail_share) = if burning {
            let full = phase.scale();
            let risen = if phase.ramp > 0.0 {
                ((clock - start) / phase.ramp).min(1.0)
            } else {
                1.0
            };
            (full * risen, 1.0)
        } else {
            match self.afterglow {
                Some(Afterglow::Tail { start, end, scale }) if clock < end || (clock == end && !after) => {
                    let share = ((end - clock) / (end - start)).clamp(0.0, 1.0);
                    (scale * share, share)
                }
                Some(Afterglow::Log { .. }) => (0.0, 1.0),
                _ => return (Gas::default(), false),
            }
        };
        let origin = match self.afterglow {
            Some(Afterglow::Log { origin }) if !burning => origin,
            _ => start,
        };
        let since = clock - origin;
        let factor = heating.factor;
        match &heating.model {
            HeatingModel::Film {
                coefficient,
                gas_temperature,
            } => {
                let gas = Gas {
                    film: factor * scale * coefficient,
                    temperature: *gas_temperature,
                    flux: 0.0,
                    emissivity: heating.gas_emissivity * tail_share,
                };
                (gas, false)
            }
            HeatingModel::Wall(_) => (Gas::default(), true),
            HeatingModel::Flux(flux) => (
                Gas {
                    flux: factor * scale * flux,
                    ..Gas::default()
                },
                false,
            ),
            HeatingModel::Log(rows) => {
                let last = rows.end();
                if !burning && (since > last || (since >= last && after)) {
                    return (Gas::default(), false);
                }
                match rows {
                    LogRows::Flux { rows, net } => {
                        let [flux] = between(rows.iter().map(|row| (row.0, [row.1])), since);
                        (
                            Gas {
                                flux: factor * flux,
                                ..Gas::default()
                            },
                            *net && !burning,
                        )
                    }
                    LogRows::Film { rows } => {
                        let [film, temperature] = between(rows.iter().map(|row| (row.0, [row.1, row.2])), since);
                        (
                            Gas {
                                film: factor * film,
                                temperature,
                                flux: 0.0,
                                emissivity: heating.gas_emissivity,
                            },
                            false,
                        )
                    }
                }
            }
        }
    }

    fn forcing(&self, phase: &Phase, from: Seconds, to: Seconds, gas: Gas, gas_end: Gas, replaces_idle: bool) -> Forcing {
        let burning = phase.kind() == PhaseKind::Burn;
        let station = self.station;
        let open = station.heating.as_ref().is_some_and(|heating| heating.open);
        let idles = (!burning || open) && !replaces_idle;
        let idle = &station.idle;
        let (coefficient, temperature) = match &idle.purge {
            Some(purge) if phase.purge && !burning => (purge.coefficient, purge.temperature),
            _ => (idle.coefficient, idle.temperature),
        };
        // A gas that does nothing at one end has no temperature there: take the other end's.
        let (gas_from, gas_to) = match (gas.temperature > 0.0, gas_end.temperature > 0.0) {
            (true, true) => (gas.temperature, gas_end.temperature),
            (true, false) => (gas.temperature, gas.temperature),
            (false, true) => (gas_end.temperature, gas_end.temperature),
            (false, false) => (temperature, temperature),
        };
        let over = match &station.outer.outside {
            Outside::Open(losses) => match &losses.coolant {
                Some(coolant)
                    if match phase.kind() {
                        PhaseKind::Burn => coolant.phases.burn && phase.coolant,
                        PhaseKind::Hold => coolant.phases.hold,
                        PhaseKind::Shutdown => coolant.phases.shutdown,
                    } =>
                {
                    Over::Coolant {
                        coefficient: coolant.coefficient,
                        temperature: coolant.temperature,
                    }
                }
                _ => Over::Losses,
            },
            Outside::Fixed(_) | Outside::Adiabatic => Over::Losses,
        };
        Forcing {
            length: to - from,
            film: Ramp {
                start: gas.film,
                end: gas_end.film,
            },
            gas: Ramp {
                start: gas_from,
                end: gas_to,
            },
            flux: Ramp {
                start: gas.flux,
                end: gas_end.flux,
            },
            gas_emissivity: Ramp {
                start: gas.emissivity,
                end: gas_end.emissivity,
            },
            idle_coefficient: if idles { coefficient } else { 0.0 },
            idle_temperature: temperature,
            idle_view: if idles { idle.view } else { 0.0 },
            sun: if open && idles {
                idle.solar_absorptivity * self.model.surroundings.sun
            } else {
                0.0
            },
            over,
        }
    }
}

/// Whether the heat jumps from one stretch to the next.
fn jumps(before: &Forcing, after: &Forcing) -> bool {
    let ends = |forcing: &Forcing| (forcing.idle_coefficient, forcing.idle_temperature, forcing.idle_view, forcing.over);
    let gas_before = [before.film.end, before.flux.end, before.gas_emissivity.end];
    let gas_after = [after.film.start, after.flux.start, after.gas_emissivity.start];
    ends(before) != ends(after) || gas_before.iter().zip(gas_after).any(|(a, b)| (a - b).abs() > 1e-9 * (a.abs() + b.abs()))
}

/// Linear between rows, held before the first and after the last.
fn between<const K: usize>(rows: impl Iterator<Item = (Seconds, [f64; K])>, time: Seconds) -> [f64; K] {
    let mut before: Option<(Seconds, [f64; K])> = None;
    for row in rows {
        if row.0 >= time {
            return match before {
                Some((start, values)) => {
                    let share = (time - start) / (row.0 - start);
                    std::array::from_fn(|k| values[k] + share * (row.1[k] - values[k]))
                }
                None => row.1,
            };
        }
        before = Some(row);
    }
    before.map_or([0.0; K], |row| row.1)
}
