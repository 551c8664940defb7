//! Rows of a history at asked times, from the dense output.

use super::Moment;
use crate::model::{Kelvin, Metres, PhaseKind, Seconds, WattsPerSquareMetre};

/// One row of a trace: everything drawn against time at one station.
#[derive(Clone, Debug, PartialEq)]
pub struct TraceRow {
    /// The clock.
    pub time: Seconds,
    /// The phase it belongs to; at a change, there may be two rows, the ending phase first.
    pub phase: PhaseKind,
    /// Hot face, then each boundary's inner and outer side (equal at a perfect joint), then the outer face, K.
    pub faces: Vec<Kelvin>,
    /// Each probe's reading and the wall's true temperature there, K.
    pub probes: Vec<(Kelvin, Kelvin)>,
    /// Heat into the wall over the hot face.
    pub flux_in: WattsPerSquareMetre,
    /// Out of the outer face, per its area; of a bar out of its sides and far end, per section at the heated end.
    pub flux_out: WattsPerSquareMetre,
}

/// Writes rows at asked times; at a change of phase the ending one's, and with `both_sides` the starting one's too.
#[derive(Clone, Debug, Default)]
pub struct Recorder {
    times: Vec<Seconds>,
    next: usize,
    both_sides: bool,
    /// Times at which whole profiles are kept.
    profile_times: Vec<Seconds>,
    next_profile: usize,
    /// The rows.
    pub rows: Vec<TraceRow>,
    /// Whole profiles: clock, and depth and temperature of each node.
    pub profiles: Vec<(Seconds, Vec<(Metres, Kelvin)>)>,
}

impl Recorder {
    /// Rows at these times (rising), and whole profiles at those (rising).
    pub fn new(times: Vec<Seconds>, both_sides: bool, profile_times: Vec<Seconds>) -> Self {
        Self {
            times,
            next: 0,
            both_sides,
            profile_times,
            next_profile: 0,
            rows: Vec::new(),
            profiles: Vec::new(),
        }
    }

    /// Takes in one step.
    pub fn see(&mut self, moment: &Moment<'_>) {
        let first = moment.step.from == 0.0;
        if first && self.both_sides && moment.segment.starts_phase && moment.from > 0.0 {
            self.rows.push(row(moment, 0.0));
        }
        while let Some(time) = self.times.get(self.next).copied() {
            if time > moment.to {
                break;
            }
            // The asked clock itself, not what θ makes of it.
            self.rows.push(TraceRow {
                time,
                ..row(moment, moment.theta(time))
            });
            self.next += 1;
        }
        while let Some(time) = self.profile_times.get(self.next_profile).copied() {
            if time > moment.to {
                break;
            }
            let theta = moment.theta(time);
            let map = moment.map();
            let points = map
                .depths
                .iter()
                .enumerate()
                .map(|(node, depth)| (*depth, moment.temperature(node, theta)))
                .collect();
            self.profiles.push((time, points));
            self.next_profile += 1;
        }
    }
}

fn row(moment: &Moment<'_>, theta: f64) -> TraceRow {
    let map = moment.map();
    let faces = map
        .layers
        .iter()
        .flat_map(|nodes| [*nodes.start(), *nodes.end()])
        .map(|node| moment.temperature(node, theta))
        .collect();
    let probes = (0..map.probes.len())
        .map(|probe| (moment.reading(probe, theta), moment.truth(probe, theta)))
        .collect();
    let (flux_in, flux_out) = moment.fluxes(theta);
    TraceRow {
        time: moment.clock(theta),
        phase: moment.kind(),
        faces,
        probes,
        flux_in,
        flux_out,
    }
}
