//! What the integrator integrates.

use super::Tridiagonal;

/// One value for each of `L` members side by side.
pub type Slot<const L: usize> = [f64; L];

/// A stiff system y' = f(t, y) through one phase, for `L` members side by side, and followers z' = g(t, y) − d·z that are driven by y and do
/// not act back on it (ledgers, lagging probes).
///
/// Members share the share τ of the phase (0 … 1) and have phase lengths of their own; all rates are per unit of time, not per τ.
pub trait System<const L: usize> {
    /// Number of unknowns.
    fn len(&self) -> usize;

    /// Whether there are no unknowns.
    fn is_empty(&self) -> bool {
        self.len() == 0
    }

    /// Number of followers.
    fn followers(&self) -> usize;

    /// Length of the phase for each member.
    fn phase_length(&self) -> Slot<L>;

    /// f and g − d·z at a share of the phase.
    fn rate(&mut self, share: f64, unknowns: &[Slot<L>], followers: &[Slot<L>], rate: &mut [Slot<L>], follower_rate: &mut [Slot<L>]);

    /// As [`System::rate`], and the exact Jacobian ∂f/∂y; keeps ∂g/∂y at this point for [`System::drive`] and refreshes [`System::weights`].
    fn jacobian(
        &mut self,
        share: f64,
        unknowns: &[Slot<L>],
        followers: &[Slot<L>],
        rate: &mut [Slot<L>],
        follower_rate: &mut [Slot<L>],
        jacobian: &mut Tridiagonal<L>,
    );

    /// ∂f/∂t and ∂g/∂t at the point of the last Jacobian; `false` (and nothing written) where neither depends on time. Without it a Rosenbrock
    /// method drops to order 1.5 on a ramp.
    fn rate_of_time(&mut self, share: f64, unknowns: &[Slot<L>], rate: &mut [Slot<L>], follower_rate: &mut [Slot<L>]) -> bool;

    /// ∂g/∂y · direction, at the point of the last Jacobian.
    fn drive(&self, direction: &[Slot<L>], out: &mut [Slot<L>]);

    /// The decay d ≥ 0 of each follower, per unit of time.
    fn decay(&self) -> &[Slot<L>];

    /// What one unit of each unknown's error counts against the tolerance, at the point of the last Jacobian.
    fn weights(&self) -> &[Slot<L>];

    /// The same for followers; 0 where the tolerance does not watch them.
    fn follower_weights(&self) -> &[Slot<L>];
}
