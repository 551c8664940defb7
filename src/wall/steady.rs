//! Where a wall comes to rest.

use super::Wall;
use crate::model::Kelvin;
use crate::solve::{Slot, System, Tridiagonal};

/// Where a wall comes to rest under what acts on it at the end of a stretch.
#[derive(Clone, Debug, PartialEq)]
pub enum Equilibrium {
    /// At these temperatures, node by node.
    At(Vec<Kelvin>),
    /// Nothing acts on it: it keeps its heat and evens out at this temperature.
    Isolated(Kelvin),
    /// Nowhere: something heats it and nothing takes the heat away.
    None,
}

/// Hotter than anything that could balance, K.
const RUNAWAY: Kelvin = 1e5;

/// The equilibrium of a single wall under its present forcing (its end), from these unknowns on: implicit Euler steps that grow until they are
/// Newton's (pseudo-transient continuation, Kelley & Keyes 1998).
pub fn equilibrium(wall: &mut Wall<1>, unknowns: &[Slot<1>]) -> Equilibrium {
    let len = unknowns.len();
    let mut state = unknowns.to_vec();
    let followers = vec![[0.0; 1]; wall.followers()];
    let mut rate = vec![[0.0; 1]; len];
    let mut follower_rate = followers.clone();
    let mut matrix = Tridiagonal::new(len);
    let mut step = 1.0;
    // The wall alone passes heat on; whether anything takes it away shows in how a uniform rise changes the rate of the whole.
    wall.jacobian(1.0, &state, &followers, &mut rate, &mut follower_rate, &mut matrix);
    let own_scale = wall.capacity(0);
    if wall.answers_nothing(&state) {
        let net = follower_rate[0][0] - follower_rate[1][0];
        if net.abs() > 1e-9 * own_scale {
            return Equilibrium::None;
        }
        return Equilibrium::Isolated(even_temperature(wall, unknowns));
    }
    for _ in 0..400 {
        wall.jacobian(1.0, &state, &followers, &mut rate, &mut follower_rate, &mut matrix);
        matrix.factor(1.0, [step]);
        let mut change: Vec<Slot<1>> = rate.iter().map(|rate| [rate[0] * step]).collect();
        matrix.solve(&mut change);
        let largest = change.iter().map(|change| change[0].abs()).fold(0.0, f64::max);
        if !largest.is_finite() || largest > 500.0 {
            step *= 0.1;
            if step < 1e-9 {
                return Equilibrium::None;
            }
            continue;
        }
        for (state, change) in state.iter_mut().zip(&change) {
            state[0] = (state[0] + change[0]).max(0.5);
        }
        if state.iter().any(|state| state[0] > RUNAWAY) {
            return Equilibrium::None;
        }
        if step >= 1e11 && largest < 1e-9 {
            return Equilibrium::At((0..len).map(|node| wall.temperature(node, 0, state[node][0])).collect());
        }
        step = (step * if largest < 20.0 { 10.0 } else { 2.0 }).min(1e13);
    }
    Equilibrium::None
}

/// The uniform temperature at which the wall holds the heat that it holds now.
fn even_temperature(wall: &Wall<1>, unknowns: &[Slot<1>]) -> Kelvin {
    let len = unknowns.len();
    let held = |temperature: Kelvin| {
        let even: Vec<Slot<1>> = (0..len).map(|node| [wall.unknown(node, 0, temperature)]).collect();
        wall.stored(0, unknowns, &even)
    };
    let temperatures = (0..len).map(|node| wall.temperature(node, 0, unknowns[node][0]));
    let (low, high) = temperatures.fold((f64::INFINITY, 0.0_f64), |(low, high), value| (low.min(value), high.max(value)));
    crate::solve::bracketed_root(held, low, high, 1e-9)
}
