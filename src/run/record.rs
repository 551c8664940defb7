//! Rows of a history at asked times, from the dense output.

use super::Moment;
use crate::model::{Kelvin, Metres, PhaseKind, Seconds, WattsPerSquareMetre};

/// Everything of one wall at one time.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// The clock.
    pub clock: Seconds,
    /// In which kind of phase.
    pub kind: PhaseKind,
    /// Hot face, both sides of each boundary, outer face.
    pub faces: Vec<Kelvin>,
    /// Reading and true temperature of each probe.
    pub probes: Vec<(Kelvin, Kelvin)>,
    /// Into the hot face.
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
    pub rows: Vec<Row>,
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
            self.rows.push(Row {
                clock: time,
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

fn row(moment: &Moment<'_>, theta: f64) -> Row {
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
    Row {
        clock: moment.clock(theta),
        kind: moment.kind(),
        faces,
        probes,
        flux_in,
        flux_out,
    }
}
