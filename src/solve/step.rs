//! One accepted step, with its dense output.

use super::Slot;
use super::rodas5p::{DENSE, STAGES};

/// One accepted step from share `from` to share `to` of the phase. Inside, a place is named by θ, 0 … 1.
#[derive(Debug)]
pub struct Step<'a, const L: usize> {
    /// Share of the phase at its start.
    pub from: f64,
    /// Share of the phase at its end.
    pub to: f64,
    /// Its length in time, for each member.
    pub length: Slot<L>,
    /// Unknowns at its start.
    pub before: &'a [Slot<L>],
    /// Unknowns at its end.
    pub after: &'a [Slot<L>],
    /// Rates at its start.
    pub rate_before: &'a [Slot<L>],
    /// Rates at its end.
    pub rate_after: &'a [Slot<L>],
    /// Followers at its start.
    pub followers_before: &'a [Slot<L>],
    /// Followers at its end.
    pub followers_after: &'a [Slot<L>],
    pub(super) stages: &'a [Vec<Slot<L>>; STAGES],
    pub(super) follower_stages: &'a [Vec<Slot<L>>; STAGES],
}

impl<const L: usize> Step<'_, L> {
    /// Unknown `index` at θ.
    pub fn value(&self, index: usize, theta: f64) -> Slot<L> {
        dense(self.before[index], self.after[index], self.stages, index, theta)
    }

    /// Follower `index` at θ.
    pub fn follower(&self, index: usize, theta: f64) -> Slot<L> {
        dense(
            self.followers_before[index],
            self.followers_after[index],
            self.follower_stages,
            index,
            theta,
        )
    }

    /// Slope of unknown `index` at θ, per unit of θ.
    pub fn slope(&self, index: usize, theta: f64) -> Slot<L> {
        dense_slope(self.before[index], self.after[index], self.stages, index, theta)
    }

    /// Slope of follower `index` at θ, per unit of θ.
    pub fn follower_slope(&self, index: usize, theta: f64) -> Slot<L> {
        dense_slope(
            self.followers_before[index],
            self.followers_after[index],
            self.follower_stages,
            index,
            theta,
        )
    }
}

#[inline]
fn coefficients<const L: usize>(stages: &[Vec<Slot<L>>; STAGES], index: usize, member: usize) -> [f64; 3] {
    let mut sums = [0.0; 3];
    for (k, stage) in stages.iter().enumerate() {
        let value = stage[index][member];
        for (sum, row) in sums.iter_mut().zip(&DENSE) {
            *sum += row[k] * value;
        }
    }
    sums
}

fn dense<const L: usize>(before: Slot<L>, after: Slot<L>, stages: &[Vec<Slot<L>>; STAGES], index: usize, theta: f64) -> Slot<L> {
    if theta <= 0.0 {
        return before;
    }
    if theta >= 1.0 {
        return after;
    }
    let rest = 1.0 - theta;
    std::array::from_fn(|l| {
        let d = coefficients(stages, index, l);
        rest * before[l] + theta * (after[l] + rest * (d[0] + theta * (d[1] + theta * d[2])))
    })
}

fn dense_slope<const L: usize>(before: Slot<L>, after: Slot<L>, stages: &[Vec<Slot<L>>; STAGES], index: usize, theta: f64) -> Slot<L> {
    let rest = 1.0 - theta;
    std::array::from_fn(|l| {
        let d = coefficients(stages, index, l);
        let curve = d[0] + theta * (d[1] + theta * d[2]);
        let inner = after[l] + rest * curve;
        inner - before[l] + theta * (-curve + rest * (d[1] + 2.0 * theta * d[2]))
    })
}
