//! The wall as a system of equations, `L` members side by side.

use super::curve::Share;
use super::{Curve, Forcing, Grid, NodeMap, Over};
use crate::heat::{TabulatedCoefficient, convected, gap_flux, grey_exchange};
use crate::model::{
    Convection, ForcedSurface, Gap, Kelvin, Losses, NaturalSurface, Outside, Resistance, STEFAN_BOLTZMANN, Shape, Station, Surroundings, Table,
    WattsPerSquareMetre,
};
use crate::solve::{Slot, System, Tridiagonal};
use std::ops::RangeInclusive;

/// Followers that every wall has, before those of its lagging probes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Ledger {
    /// Heat that came in over the hot face, J/m².
    Inward,
    /// Heat that left over the outer face, and over the sides of a bar, J/m² of hot face.
    Outward,
}

/// Number of ledgers.
const LEDGERS: usize = 2;

/// Nodes whose temperature is not simply their unknown, with a curve for each member.
#[derive(Clone, Debug)]
struct CurvedNodes<const L: usize> {
    nodes: RangeInclusive<usize>,
    curves: [Curve; L],
}

/// A joint between two nodes that have temperatures of their own.
#[derive(Clone, Debug)]
struct JointFace<const L: usize> {
    /// The node on its hot side.
    node: usize,
    crossing: [Crossing; L],
}

/// How heat crosses a joint, per hot-face area.
#[derive(Clone, Debug)]
enum Crossing {
    /// By a conductance.
    Contact(f64),
    /// By conduction and radiation.
    Gap { gap: Gap, area: f64, width: f64, exchange: f64 },
}

/// A node's share of the side of a bar, in one layer.
#[derive(Clone, Debug)]
struct SideFace<const L: usize> {
    node: usize,
    layer: usize,
    /// Per hot-face area.
    area: Slot<L>,
}

/// What one member's faces exchange heat with.
#[derive(Clone, Debug)]
struct Faces {
    surroundings: Surroundings,
    idle_emissivity: Table,
    outside: Outside,
    /// Its convection as a table, where that is smooth.
    natural: Option<TabulatedCoefficient>,
    /// Outer area per hot-face area.
    outer_area: f64,
    /// Area that a shown flux out of the wall is divided by: the outer face, of a bar its section at the heated end.
    shown_area: f64,
    /// What the sides lose, layer by layer; empty except in a bar.
    sides: Vec<Losses>,
    /// Their convection as tables, where that is smooth.
    side_natural: Vec<Option<TabulatedCoefficient>>,
}

/// A lagging probe, as a follower.
#[derive(Clone, Debug)]
struct LaggingProbe<const L: usize> {
    first: usize,
    weights: [Slot<L>; 4],
    rate: Slot<L>,
}

/// A flux with its derivative by the face's temperature.
type FluxAndSlope = (f64, f64);

/// The walls of `L` members on one grid.
#[derive(Clone, Debug)]
pub struct Wall<const L: usize> {
    /// Conductance between a node and the next, per hot-face area, at the anchor of the potentials; 0 across a joint.
    conductance: Vec<Slot<L>>,
    /// One over the heat capacity of a node at the anchor, per hot-face area; 0 for a held face.
    inverse_capacity: Vec<Slot<L>>,
    curved: Vec<CurvedNodes<L>>,
    /// Which entry of `curved` a node belongs to.
    curve_of: Vec<Option<usize>>,
    joints: Vec<JointFace<L>>,
    /// Empty where there are no sides: planes and cylinders pay nothing for them.
    sides: Vec<SideFace<L>>,
    faces: [Faces; L],
    held: bool,
    maps: [NodeMap; L],
    lagging: Vec<LaggingProbe<L>>,
    /// Which follower a probe is, if it lags.
    follower_of_probe: Vec<Option<usize>>,
    decay: Vec<Slot<L>>,
    follower_weights: Vec<Slot<L>>,
    forcing: [Forcing; L],
    // Room for one evaluation.
    temperature: Vec<Slot<L>>,
    inner: Vec<Slot<L>>,
    outer: Vec<Slot<L>>,
    by_unknown: Vec<Slot<L>>,
    inner_by_unknown: Vec<Slot<L>>,
    outer_by_unknown: Vec<Slot<L>>,
    /// Flux into a node from the hot side; the last is what leaves the wall.
    flux: Vec<Slot<L>>,
    /// Its derivative by the node before and by the node itself.
    flux_by_before: Vec<Slot<L>>,
    flux_by_own: Vec<Slot<L>>,
    /// Flux out of the side of each node, and its derivative by the node; empty without sides.
    side_flux: Vec<Slot<L>>,
    side_by_own: Vec<Slot<L>>,
}

impl<const L: usize> Wall<L> {
    /// The walls of these members, which have the same layers and joints and may differ in every number, in a forcing of no length.
    pub fn new(members: [(&Station, &Surroundings); L], grid: &Grid) -> Self {
        let maps = members.map(|(station, _)| NodeMap::new(station, grid));
        let geometry = std::array::from_fn::<_, L, _>(|l| Geometry::new(members[l].0, grid));
        let len = maps[0].len();
        let station = members[0].0;
        let held = matches!(station.outer.outside, Outside::Fixed(_));
        let slots = |value: &dyn Fn(usize) -> f64| -> Slot<L> { std::array::from_fn(value) };
        let conductance = (0..len - 1).map(|node| slots(&|l| geometry[l].conductance[node])).collect();
        let inverse_capacity = (0..len)
            .map(|node| {
                if held && node == len - 1 {
                    [0.0; L]
                } else {
                    slots(&|l| 1.0 / geometry[l].capacity[node])
                }
            })
            .collect();
        let mut curved = Vec::new();
        let mut curve_of = vec![None; len];
        let mut add = |nodes: RangeInclusive<usize>, curves: [Curve; L]| {
            if nodes.is_empty() || curves.iter().all(Curve::is_constant) {
                return;
            }
            curve_of[nodes.clone()].fill(Some(curved.len()));
            curved.push(CurvedNodes { nodes, curves });
        };
        let mut joints = Vec::new();
        for (index, nodes) in maps[0].layers.iter().enumerate() {
            let shared_before = index > 0 && station.resistance(index - 1).is_none();
            let shared_after = index + 1 < maps[0].layers.len() && station.resistance(index).is_none();
            let own = nodes.start() + usize::from(shared_before)..=nodes.end() - usize::from(shared_after);
            let share = |l: usize, layer: usize, volume: f64| Share {
                material: &members[l].0.layers[layer].material,
                volume,
            };
            add(own, std::array::from_fn(|l| Curve::new(share(l, index, 1.0), share(l, index, 1.0))));
            let end = *nodes.end();
            if shared_after {
                let curves = std::array::from_fn(|l| {
                    let [inner, outer] = geometry[l].shared_volume[index];
                    Curve::new(share(l, index, inner), share(l, index + 1, outer))
                });
                add(end..=end, curves);
            } else if index + 1 < maps[0].layers.len() {
                joints.push(JointFace {
                    node: end,
                    crossing: std::array::from_fn(|l| Crossing::new(members[l].0, index)),
                });
            }
        }
        let faces = std::array::from_fn(|l| {
            let (station, surroundings) = members[l];
            Faces {
                surroundings: surroundings.clone(),
                idle_emissivity: station.idle.emissivity.clone(),
                outside: station.outer.outside.clone(),
                natural: match &station.outer.outside {
                    Outside::Open(losses) => tabulated(losses, surroundings),
                    Outside::Fixed(_) | Outside::Adiabatic => None,
                },
                outer_area: station.outer_area(),
                shown_area: if station.shape == Shape::Bar { 1.0 } else { station.outer_area() },
                side_natural: station.sides.iter().map(|losses| tabulated(losses, surroundings)).collect(),
                sides: station.sides.clone(),
            }
        });
        let sides = if station.sides.is_empty() {
            Vec::new()
        } else {
            side_faces(members.map(|member| member.0), grid, &maps[0], held)
        };
        let side_len = if sides.is_empty() { 0 } else { len };
        let mut lagging = Vec::new();
        let mut follower_of_probe = Vec::new();
        for (index, probe) in station.probes.iter().enumerate() {
            follower_of_probe.push((probe.lag > 0.0).then_some(LEDGERS + lagging.len()));
            if probe.lag > 0.0 {
                lagging.push(LaggingProbe {
                    first: maps[0].probes[index].first,
                    weights: std::array::from_fn(|k| slots(&|l| maps[l].probes[index].weights[k])),
                    rate: slots(&|l| 1.0 / members[l].0.probes[index].lag),
                });
            }
        }
        let followers = LEDGERS + lagging.len();
        let decay = (0..followers)
            .map(|index| if index < LEDGERS { [0.0; L] } else { lagging[index - LEDGERS].rate })
            .collect();
        let zeros = vec![[0.0; L]; len];
        let ones = vec![[1.0; L]; len];
        let edges = vec![[0.0; L]; len + 1];
        let nothing = Forcing {
            length: 0.0,
            film: super::Ramp::default(),
            gas: super::Ramp::constant(super::curve::ANCHOR),
            flux: super::Ramp::default(),
            gas_emissivity: super::Ramp::default(),
            idle_coefficient: 0.0,
            idle_temperature: super::curve::ANCHOR,
            idle_view: 0.0,
            sun: 0.0,
            over: Over::Losses,
        };
        Self {
            conductance,
            inverse_capacity,
            curved,
            curve_of,
            joints,
            sides,
            faces,
            held,
            maps,
            lagging,
            follower_of_probe,
            decay,
            follower_weights: (0..followers).map(|index| if index < LEDGERS { [0.0; L] } else { [1.0; L] }).collect(),
            forcing: [nothing; L],
            temperature: zeros.clone(),
            inner: zeros.clone(),
            outer: zeros.clone(),
            by_unknown: ones.clone(),
            inner_by_unknown: ones.clone(),
            outer_by_unknown: ones,
            flux: edges.clone(),
            flux_by_before: edges.clone(),
            flux_by_own: edges,
            side_flux: vec![[0.0; L]; side_len],
            side_by_own: vec![[0.0; L]; side_len],
        }
    }

    /// Sets what acts on the faces from now on.
    pub fn set_forcing(&mut self, forcing: [Forcing; L]) {
        self.forcing = forcing;
    }

    /// The nodes of a member.
    pub fn map(&self, member: usize) -> &NodeMap {
        &self.maps[member]
    }

    /// Unknowns of walls at uniform temperatures; a held face has its own.
    pub fn unknowns_at(&self, start: [Kelvin; L]) -> Vec<Slot<L>> {
        let last = self.curve_of.len() - 1;
        (0..=last)
            .map(|node| {
                std::array::from_fn(|l| {
                    let temperature = match &self.faces[l].outside {
                        Outside::Fixed(fixed) if node == last => *fixed,
                        _ => start[l],
                    };
                    self.unknown(node, l, temperature)
                })
            })
            .collect()
    }

    /// Followers at the start: empty ledgers, and probes that read the start temperature.
    pub fn followers_at(&self, start: [Kelvin; L]) -> Vec<Slot<L>> {
        (0..self.decay.len())
            .map(|index| if index < LEDGERS { [0.0; L] } else { start })
            .collect()
    }

    /// Temperature that a node's unknown says.
    pub fn temperature(&self, node: usize, member: usize, unknown: f64) -> Kelvin {
        match self.curve_of[node] {
            Some(index) => self.curved[index].curves[member].temperature(unknown),
            None => unknown,
        }
    }

    /// Temperature of a node and its derivative by the unknown.
    pub fn temperature_and_slope(&self, node: usize, member: usize, unknown: f64) -> (Kelvin, f64) {
        match self.curve_of[node] {
            Some(index) => {
                let point = self.curved[index].curves[member].point(unknown);
                (point.temperature, point.by_unknown)
            }
            None => (unknown, 1.0),
        }
    }

    /// Temperatures of all nodes at the point of the last evaluation: for an observer of steps, at the end of its step.
    pub fn evaluated(&self) -> &[Slot<L>] {
        &self.temperature
    }

    /// The unknown of a node at a temperature.
    pub fn unknown(&self, node: usize, member: usize, temperature: Kelvin) -> f64 {
        match self.curve_of[node] {
            Some(index) => self.curved[index].curves[member].unknown(temperature),
            None => temperature,
        }
    }

    /// Which follower a probe is; `None`: it reads its nodes at once.
    pub fn follower_of_probe(&self, probe: usize) -> Option<usize> {
        self.follower_of_probe[probe]
    }

    /// Heat that a member's wall holds more in one state than in another, J per m² of hot face; a held face does not count.
    pub fn stored(&self, member: usize, from: &[Slot<L>], to: &[Slot<L>]) -> f64 {
        let parts = self.inverse_capacity.iter().zip(from.iter().zip(to));
        parts
            .filter(|(inverse, _)| inverse[member] > 0.0)
            .map(|(inverse, (from, to))| (to[member] - from[member]) / inverse[member])
            .sum()
    }

    /// Heat capacity of a member's wall at the anchor temperature, J per m² of hot face and kelvin.
    pub fn capacity(&self, member: usize) -> f64 {
        self.inverse_capacity
            .iter()
            .filter(|inverse| inverse[member] > 0.0)
            .map(|inverse| 1.0 / inverse[member])
            .sum()
    }

    /// Resistance of a member's wall from face to face at the anchor temperature, m²·K/W of hot face, joints left out.
    pub fn resistance(&self, member: usize) -> f64 {
        self.conductance
            .iter()
            .filter(|conductance| conductance[member] > 0.0)
            .map(|conductance| 1.0 / conductance[member])
            .sum()
    }

    /// Flux into the hot face, and out of the outer face per area of that face (of a bar: out of its sides and far end, per section at the heated
    /// end), W/m², in a state at a share of the stretch.
    pub fn face_fluxes(&self, member: usize, share: f64, unknown: impl Fn(usize) -> f64) -> (WattsPerSquareMetre, WattsPerSquareMetre) {
        let last = self.curve_of.len() - 1;
        let inward = self.hot_flux(member, share, self.temperature(0, member, unknown(0))).0;
        let outward = if self.held {
            self.conducted(last - 1, member, unknown(last - 1), unknown(last))
        } else {
            self.outer_flux(member, self.temperature(last, member, unknown(last))).0
        };
        let sides: f64 = self
            .sides
            .iter()
            .map(|side| self.side_flux(side, member, self.temperature(side.node, member, unknown(side.node))).0)
            .sum();
        (inward, (outward + sides) / self.faces[member].shown_area)
    }

    /// Heat out of a node's side at its temperature, per hot-face area.
    #[inline]
    fn side_flux(&self, side: &SideFace<L>, member: usize, temperature: Kelvin) -> FluxAndSlope {
        let faces = &self.faces[member];
        let (flux, slope) = outside_losses(
            &faces.sides[side.layer],
            &faces.surroundings,
            faces.side_natural[side.layer].as_ref(),
            temperature,
        );
        (flux * side.area[member], slope * side.area[member])
    }

    /// Heat that crosses from a node to the next, per hot-face area.
    fn conducted(&self, node: usize, member: usize, unknown: f64, next: f64) -> f64 {
        let point = |node: usize, unknown: f64| match self.curve_of[node] {
            Some(index) => {
                let [_, inner, outer] = self.curved[index].curves[member].values(unknown);
                (inner, outer)
            }
            None => (unknown, unknown),
        };
        self.conductance[node][member] * (point(node, unknown).1 - point(node + 1, next).0)
    }

    /// Whether no face's and no side's exchange depends on its temperature, at the end of the stretch: nothing can balance a flux.
    pub fn answers_nothing(&self, unknowns: &[Slot<L>]) -> bool {
        let last = self.curve_of.len() - 1;
        !self.held
            && (0..L).all(|l| {
                self.hot_flux(l, 1.0, self.temperature(0, l, unknowns[0][l])).1 == 0.0
                    && self.outer_flux(l, self.temperature(last, l, unknowns[last][l])).1 == 0.0
                    && self
                        .sides
                        .iter()
                        .all(|side| self.side_flux(side, l, self.temperature(side.node, l, unknowns[side.node][l])).1 == 0.0)
            })
    }

    /// Heat into the hot face at its temperature, at a share of the stretch.
    #[inline]
    fn hot_flux(&self, member: usize, share: f64, face: Kelvin) -> FluxAndSlope {
        let forcing = &self.forcing[member];
        let film = forcing.film.at(share);
        let gas = forcing.gas.at(share);
        let mut flux = film * (gas - face) + forcing.flux.at(share) + forcing.sun + forcing.idle_coefficient * (forcing.idle_temperature - face);
        let mut slope = -film - forcing.idle_coefficient;
        let cube = face * face * face;
        let gas_emissivity = forcing.gas_emissivity.at(share) * STEFAN_BOLTZMANN;
        if gas_emissivity > 0.0 {
            flux += gas_emissivity * (gas * gas * gas * gas - cube * face);
            slope -= 4.0 * gas_emissivity * cube;
        }
        if forcing.idle_view > 0.0 {
            let faces = &self.faces[member];
            let (emissivity, change) = faces.idle_emissivity.value_and_slope(face);
            let (lost, lost_slope) = radiated(face, faces.surroundings.surfaces);
            flux -= forcing.idle_view * emissivity * lost;
            slope -= forcing.idle_view * (emissivity * lost_slope + change * lost);
        }
        (flux, slope)
    }

    /// Heat out of the outer face at its temperature, per hot-face area.
    #[inline]
    fn outer_flux(&self, member: usize, face: Kelvin) -> FluxAndSlope {
        let faces = &self.faces[member];
        let Outside::Open(losses) = &faces.outside else { return (0.0, 0.0) };
        let (flux, slope) = match self.forcing[member].over {
            Over::Coolant { coefficient, temperature } => (coefficient * (face - temperature), coefficient),
            Over::Losses => outside_losses(losses, &faces.surroundings, faces.natural.as_ref(), face),
        };
        (flux * faces.outer_area, slope * faces.outer_area)
    }

    /// Temperatures and potentials of all nodes; with slopes for a Jacobian.
    #[inline]
    fn evaluate<const SLOPES: bool>(&mut self, unknowns: &[Slot<L>]) {
        self.temperature.copy_from_slice(unknowns);
        if self.curved.is_empty() {
            return;
        }
        self.inner.copy_from_slice(unknowns);
        self.outer.copy_from_slice(unknowns);
        for group in &self.curved {
            for node in group.nodes.clone() {
                for l in 0..L {
                    if SLOPES {
                        let point = group.curves[l].point(unknowns[node][l]);
                        self.temperature[node][l] = point.temperature;
                        self.inner[node][l] = point.inner;
                        self.outer[node][l] = point.outer;
                        self.by_unknown[node][l] = point.by_unknown;
                        self.inner_by_unknown[node][l] = point.inner_by_unknown;
                        self.outer_by_unknown[node][l] = point.outer_by_unknown;
                    } else {
                        [self.temperature[node][l], self.inner[node][l], self.outer[node][l]] = group.curves[l].values(unknowns[node][l]);
                    }
                }
            }
        }
    }

    /// Fluxes between the nodes and over the faces; with their derivatives for a Jacobian.
    #[inline]
    fn fluxes<const SLOPES: bool>(&mut self, share: f64, unknowns: &[Slot<L>]) {
        self.evaluate::<SLOPES>(unknowns);
        let last = unknowns.len() - 1;
        {
            let (inner, outer) = if self.curved.is_empty() {
                (unknowns, unknowns)
            } else {
                (&self.inner[..], &self.outer[..])
            };
            let count = last * L;
            let flux = &mut self.flux[1..=last].as_flattened_mut()[..count];
            let conductance = &self.conductance.as_flattened()[..count];
            let (hot, cold) = (&outer[..last].as_flattened()[..count], &inner[1..=last].as_flattened()[..count]);
            for i in 0..count {
                flux[i] = conductance[i] * (hot[i] - cold[i]);
            }
        }
        if SLOPES {
            let count = last * L;
            let conductance = &self.conductance.as_flattened()[..count];
            let outer = &self.outer_by_unknown[..last].as_flattened()[..count];
            let inner = &self.inner_by_unknown[1..=last].as_flattened()[..count];
            let by_before = &mut self.flux_by_before[1..=last].as_flattened_mut()[..count];
            let by_own = &mut self.flux_by_own[1..=last].as_flattened_mut()[..count];
            for i in 0..count {
                by_before[i] = conductance[i] * outer[i];
                by_own[i] = -conductance[i] * inner[i];
            }
        }
        for joint in &self.joints {
            let node = joint.node;
            for l in 0..L {
                let (flux, by_hot, by_cold) = joint.crossing[l].flux(self.temperature[node][l], self.temperature[node + 1][l]);
                self.flux[node + 1][l] = flux;
                if SLOPES {
                    self.flux_by_before[node + 1][l] = by_hot * self.by_unknown[node][l];
                    self.flux_by_own[node + 1][l] = by_cold * self.by_unknown[node + 1][l];
                }
            }
        }
        if !self.sides.is_empty() {
            self.side_fluxes::<SLOPES>();
        }
        for l in 0..L {
            let (inward, inward_slope) = self.hot_flux(l, share, self.temperature[0][l]);
            // What leaves over a held face is what the last pair of nodes conducts into it.
            let (outward, outward_slope) = if self.held {
                (self.flux[last][l], 0.0)
            } else {
                self.outer_flux(l, self.temperature[last][l])
            };
            self.flux[0][l] = inward;
            self.flux[last + 1][l] = outward;
            // Between two Jacobians the derivatives must stay those that the matrix was made of, or the ledgers no longer close.
            if SLOPES {
                self.flux_by_own[0][l] = inward_slope * self.by_unknown[0][l];
                self.flux_by_before[last + 1][l] = outward_slope * self.by_unknown[last][l];
            }
        }
    }

    /// Fluxes out of the sides of all nodes.
    fn side_fluxes<const SLOPES: bool>(&mut self) {
        self.side_flux.fill([0.0; L]);
        if SLOPES {
            self.side_by_own.fill([0.0; L]);
        }
        for index in 0..self.sides.len() {
            let node = self.sides[index].node;
            for l in 0..L {
                let (flux, slope) = self.side_flux(&self.sides[index], l, self.temperature[node][l]);
                self.side_flux[node][l] += flux;
                if SLOPES {
                    self.side_by_own[node][l] += slope * self.by_unknown[node][l];
                }
            }
        }
    }

    fn rates(&self, followers: &[Slot<L>], rate: &mut [Slot<L>], follower_rate: &mut [Slot<L>]) {
        let len = rate.len();
        // Lanes and nodes in one row: each node's flux from the hot side and, a node further, the flux it passes on.
        let flux = self.flux.as_flattened();
        let (received, passed_on) = (&flux[..len * L], &flux[L..(len + 1) * L]);
        let inverse = &self.inverse_capacity.as_flattened()[..len * L];
        let flat_rate = &mut rate.as_flattened_mut()[..len * L];
        for i in 0..len * L {
            flat_rate[i] = (received[i] - passed_on[i]) * inverse[i];
        }
        follower_rate[Ledger::Inward as usize] = self.flux[0];
        follower_rate[Ledger::Outward as usize] = self.flux[len];
        for (node, side) in self.side_flux.iter().enumerate() {
            for l in 0..L {
                rate[node][l] -= side[l] * self.inverse_capacity[node][l];
                follower_rate[Ledger::Outward as usize][l] += side[l];
            }
        }
        for (index, probe) in self.lagging.iter().enumerate() {
            for l in 0..L {
                let read: f64 = (0..4)
                    .map(|k| probe.weights[k][l] * self.temperature[(probe.first + k).min(len - 1)][l])
                    .sum();
                follower_rate[LEDGERS + index][l] = (read - followers[LEDGERS + index][l]) * probe.rate[l];
            }
        }
    }
}

impl<const L: usize> System<L> for Wall<L> {
    fn len(&self) -> usize {
        self.curve_of.len()
    }

    fn followers(&self) -> usize {
        self.decay.len()
    }

    fn phase_length(&self) -> Slot<L> {
        std::array::from_fn(|l| self.forcing[l].length)
    }

    fn rate(&mut self, share: f64, unknowns: &[Slot<L>], followers: &[Slot<L>], rate: &mut [Slot<L>], follower_rate: &mut [Slot<L>]) {
        self.fluxes::<false>(share, unknowns);
        self.rates(followers, rate, follower_rate);
    }

    fn jacobian(
        &mut self,
        share: f64,
        unknowns: &[Slot<L>],
        followers: &[Slot<L>],
        rate: &mut [Slot<L>],
        follower_rate: &mut [Slot<L>],
        jacobian: &mut Tridiagonal<L>,
    ) {
        self.fluxes::<true>(share, unknowns);
        self.rates(followers, rate, follower_rate);
        let count = unknowns.len() * L;
        let inverse = &self.inverse_capacity.as_flattened()[..count];
        let (by_before, by_own) = (self.flux_by_before.as_flattened(), self.flux_by_own.as_flattened());
        let (by_before, passed_by_own) = (&by_before[..count], &by_before[L..count + L]);
        let (by_own, passed_by_next) = (&by_own[..count], &by_own[L..count + L]);
        let Tridiagonal { lower, diagonal, upper, .. } = jacobian;
        let [lower, diagonal, upper] = [lower, diagonal, upper].map(|values| &mut values.as_flattened_mut()[..count]);
        for i in 0..count {
            lower[i] = by_before[i] * inverse[i];
            diagonal[i] = (by_own[i] - passed_by_own[i]) * inverse[i];
            upper[i] = -passed_by_next[i] * inverse[i];
        }
        for (node, slope) in self.side_by_own.iter().enumerate() {
            for l in 0..L {
                jacobian.diagonal[node][l] -= slope[l] * self.inverse_capacity[node][l];
            }
        }
    }

    fn rate_of_time(&mut self, share: f64, unknowns: &[Slot<L>], rate: &mut [Slot<L>], follower_rate: &mut [Slot<L>]) -> bool {
        if self.forcing.iter().all(Forcing::is_constant) {
            return false;
        }
        rate.fill([0.0; L]);
        follower_rate.fill([0.0; L]);
        for l in 0..L {
            let forcing = &self.forcing[l];
            let face = self.temperature(0, l, unknowns[0][l]);
            let gas = forcing.gas.at(share);
            let emission = gas.powi(4) - face.powi(4);
            let change = forcing.film.rise() * (gas - face)
                + forcing.film.at(share) * forcing.gas.rise()
                + forcing.flux.rise()
                + STEFAN_BOLTZMANN
                    * (forcing.gas_emissivity.rise() * emission + forcing.gas_emissivity.at(share) * 4.0 * gas.powi(3) * forcing.gas.rise());
            let change = change / forcing.length;
            rate[0][l] = change * self.inverse_capacity[0][l];
            follower_rate[Ledger::Inward as usize][l] = change;
        }
        true
    }

    fn drive(&self, direction: &[Slot<L>], out: &mut [Slot<L>]) {
        let last = direction.len() - 1;
        for l in 0..L {
            out[Ledger::Inward as usize][l] = self.flux_by_own[0][l] * direction[0][l];
            out[Ledger::Outward as usize][l] = if self.held {
                self.flux_by_before[last][l] * direction[last - 1][l] + self.flux_by_own[last][l] * direction[last][l]
            } else {
                self.flux_by_before[last + 1][l] * direction[last][l]
            };
        }
        for (slope, direction) in self.side_by_own.iter().zip(direction) {
            for l in 0..L {
                out[Ledger::Outward as usize][l] += slope[l] * direction[l];
            }
        }
        for (index, probe) in self.lagging.iter().enumerate() {
            for l in 0..L {
                let read: f64 = (0..4)
                    .map(|k| {
                        let node = (probe.first + k).min(last);
                        probe.weights[k][l] * self.by_unknown[node][l] * direction[node][l]
                    })
                    .sum();
                out[LEDGERS + index][l] = read * probe.rate[l];
            }
        }
    }

    fn decay(&self) -> &[Slot<L>] {
        &self.decay
    }

    fn weights(&self) -> &[Slot<L>] {
        &self.by_unknown
    }

    fn follower_weights(&self) -> &[Slot<L>] {
        &self.follower_weights
    }
}

impl Crossing {
    fn new(station: &Station, joint: usize) -> Self {
        let distance = station.distances()[joint] + station.layers[joint].thickness;
        let area = station.joint_area(joint);
        match station.resistance(joint) {
            Some(Resistance::Gap(gap)) => {
                let (width, ratio) = match station.shape {
                    Shape::Plane | Shape::Bar => (gap.width, 1.0),
                    Shape::Cylinder { inner_radius } => {
                        let inner = inner_radius + distance;
                        (inner * (1.0 + gap.width / inner).ln(), inner / (inner + gap.width))
                    }
                };
                Self::Gap {
                    gap: gap.clone(),
                    area,
                    width,
                    exchange: grey_exchange(gap.emissivity[0], gap.emissivity[1], ratio),
                }
            }
            Some(Resistance::Contact(conductance)) => Self::Contact(conductance * area),
            // A wall is only asked for the joints that resist.
            None => Self::Contact(f64::INFINITY),
        }
    }

    /// Heat across, per hot-face area, and its derivatives by both temperatures.
    #[inline]
    fn flux(&self, hot: Kelvin, cold: Kelvin) -> (f64, f64, f64) {
        match self {
            Self::Contact(conductance) => (conductance * (hot - cold), *conductance, -conductance),
            Self::Gap { gap, area, width, exchange } => {
                let crossing = gap_flux(gap.gas, *width, *exchange, hot, cold);
                (crossing.flux * area, crossing.by_first * area, crossing.by_second * area)
            }
        }
    }
}

/// σ (T⁴ − T₀⁴) and its derivative.
#[inline]
fn radiated(face: Kelvin, surfaces: Kelvin) -> FluxAndSlope {
    let cube = face * face * face;
    (
        STEFAN_BOLTZMANN * (cube * face - surfaces * surfaces * surfaces * surfaces),
        4.0 * STEFAN_BOLTZMANN * cube,
    )
}

/// A table of a convection whose correlation is smooth; those with a change of régime are evaluated as they are.
fn tabulated(losses: &Losses, surroundings: &Surroundings) -> Option<TabulatedCoefficient> {
    let smooth_rise = |natural: &NaturalSurface| matches!(natural, NaturalSurface::Vertical(_) | NaturalSurface::HorizontalCylinder(_));
    let smooth = match &losses.convection {
        Convection::Natural(natural) => smooth_rise(natural),
        Convection::Forced(forced) => matches!(forced, ForcedSurface::AcrossCylinder(_)),
        Convection::Mixed { natural, forced } => smooth_rise(natural) && matches!(forced, ForcedSurface::AcrossCylinder(_)),
        Convection::None | Convection::Coefficient(_) => false,
    };
    smooth.then(|| TabulatedCoefficient::new(surroundings.air, |face| convected(&losses.convection, surroundings, face)))
}

/// Heat from an outer face by convection and radiation, less the sun, per area of that face.
pub(super) fn outside_losses(losses: &Losses, surroundings: &Surroundings, natural: Option<&TabulatedCoefficient>, face: Kelvin) -> FluxAndSlope {
    let (mut flux, mut slope) = match (&losses.convection, natural) {
        (Convection::None, _) => (0.0, 0.0),
        (Convection::Coefficient(coefficient), _) => (coefficient * (face - surroundings.air), *coefficient),
        (_, Some(table)) => {
            let lost = table.flux(face);
            (lost.value, lost.slope)
        }
        (convection, None) => {
            let lost = convected(convection, surroundings, face);
            (lost.value, lost.slope)
        }
    };
    if let Some(table) = &losses.emissivity {
        let (emissivity, change) = table.value_and_slope(face);
        let (lost, lost_slope) = radiated(face, surroundings.surfaces);
        flux += emissivity * lost;
        slope += emissivity * lost_slope + change * lost;
    }
    (flux - losses.solar_absorptivity * surroundings.sun, slope)
}

/// Which node has how much of the side of which layer. What a held node loses is its holder's affair.
fn side_faces<const L: usize>(stations: [&Station; L], grid: &Grid, map: &NodeMap, held: bool) -> Vec<SideFace<L>> {
    let last = map.len() - 1;
    let mut sides = Vec::new();
    for (layer, nodes) in map.layers.iter().enumerate() {
        let shares = &grid.layers()[layer];
        for (index, node) in nodes.clone().enumerate().filter(|(_, node)| !(held && *node == last)) {
            // From the middle of the cell before to the middle of the cell after.
            let before = index.checked_sub(1).map_or(0.0, |before| 0.5 * (shares[index] - shares[before]));
            let after = shares.get(index + 1).map_or(0.0, |after| 0.5 * (after - shares[index]));
            sides.push(SideFace {
                node,
                layer,
                area: std::array::from_fn(|l| stations[l].side_area(layer, (before + after) * stations[l].layers[layer].thickness)),
            });
        }
    }
    sides
}

/// Conductances and capacities of one member's nodes, per hot-face area.
struct Geometry {
    /// Between a node and the next; 0 across a joint.
    conductance: Vec<f64>,
    /// At the anchor.
    capacity: Vec<f64>,
    /// Volumes on the two sides of the node that layer i shares with the next.
    shared_volume: Vec<[f64; 2]>,
}

impl Geometry {
    fn new(station: &Station, grid: &Grid) -> Self {
        let map = NodeMap::new(station, grid);
        let mut conductance = vec![0.0; map.len() - 1];
        let mut capacity = vec![0.0; map.len()];
        let mut shared_volume = vec![[0.0; 2]; station.layers.len()];
        let distances = station.distances();
        for (index, (layer, nodes)) in station.layers.iter().zip(&map.layers).enumerate() {
            let material = &layer.material;
            let heat = material.density * material.heat_capacity.value(super::curve::ANCHOR);
            let conductivity = material.conductivity.value(super::curve::ANCHOR);
            let start = *nodes.start();
            let distance: Vec<f64> = grid.layers()[index]
                .iter()
                .map(|share| distances[index] + share * layer.thickness)
                .collect();
            for (cell, pair) in distance.windows(2).enumerate() {
                let node = start + cell;
                let middle = 0.5 * (pair[0] + pair[1]);
                let volumes = [station.volume(index, pair[0], middle), station.volume(index, middle, pair[1])];
                capacity[node] += heat * volumes[0];
                capacity[node + 1] += heat * volumes[1];
                conductance[node] = match station.shape {
                    Shape::Plane | Shape::Bar => conductivity * station.area_ratio(index, middle) / (pair[1] - pair[0]),
                    // Exact for steady flow: k/(r₀ ln(r₂/r₁)) per area of the hot face at r₀.
                    Shape::Cylinder { inner_radius } => conductivity / (inner_radius * ((pair[1] - pair[0]) / (inner_radius + pair[0])).ln_1p()),
                };
                if cell == 0 && index > 0 {
                    shared_volume[index - 1][1] = volumes[0];
                }
                shared_volume[index][0] = volumes[1];
            }
        }
        Self {
            conductance,
            capacity,
            shared_volume,
        }
    }
}
