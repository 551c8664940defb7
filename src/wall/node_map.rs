//! Which node lies where: depths, layers, joints, probes.

use super::Grid;
use crate::model::{Kelvin, Metres, Place, Station};
use std::ops::RangeInclusive;

/// Which node lies where in one station. A perfect joint shares one node; a joint with a resistance has one on each side.
#[derive(Clone, Debug)]
pub struct NodeMap {
    /// Nodes of each layer, its faces included.
    pub layers: Vec<RangeInclusive<usize>>,
    /// Depth of each node from the hot face, m.
    pub depths: Vec<Metres>,
    /// How to read each probe.
    pub probes: Vec<ProbeWeights>,
}

/// A temperature between nodes: the polynomial through the nearest nodes of its layer.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ProbeWeights {
    /// First of the nodes.
    pub first: usize,
    /// Their weights; unused ones are 0.
    pub weights: [f64; 4],
}

impl NodeMap {
    /// The nodes of a station on a grid made for it.
    pub fn new(station: &Station, grid: &Grid) -> Self {
        let boundaries = station.boundaries();
        let mut layers = Vec::with_capacity(station.layers.len());
        let mut depths: Vec<Metres> = Vec::new();
        for (index, shares) in grid.layers().iter().enumerate() {
            let shared = index > 0 && station.resistance(index - 1).is_none();
            let first = depths.len() - usize::from(shared);
            let thickness = station.layers[index].thickness;
            depths.extend(shares.iter().skip(usize::from(shared)).map(|share| boundaries[index] + share * thickness));
            layers.push(first..=depths.len() - 1);
        }
        let probes = station
            .probes
            .iter()
            .map(|probe| weights(&depths, &layers[probe.layer], probe.depth))
            .collect();
        Self { layers, depths, probes }
    }

    /// Node temperatures of a station at time 0: its own profile, read by cubics through its points as probes are, or the same everywhere.
    pub fn start_temperatures(&self, station: &Station, uniform: Kelvin) -> Vec<Kelvin> {
        let mut temperatures = vec![uniform; self.len()];
        let Some(start) = &station.start else { return temperatures };
        for (nodes, points) in self.layers.iter().zip(start.layers()) {
            let distances: Vec<Metres> = points.iter().map(|point| point.0).collect();
            let (whole, hot_side) = (distances.last().copied().unwrap_or(0.0), self.depths[*nodes.start()]);
            for node in nodes.clone() {
                let distance = (self.depths[node] - hot_side).clamp(0.0, whole);
                let read = weights(&distances, &(0..=distances.len() - 1), distance);
                temperatures[node] = (0..4)
                    .filter(|k| read.weights[*k] != 0.0)
                    .map(|k| read.weights[k] * points[read.first + k].1)
                    .sum();
            }
        }
        temperatures
    }

    /// Number of nodes.
    pub fn len(&self) -> usize {
        self.depths.len()
    }

    /// Whether there are no nodes.
    pub fn is_empty(&self) -> bool {
        self.depths.is_empty()
    }

    /// The nodes at which a place counts by its hottest; a probe has nodes that it is read from.
    pub fn nodes(&self, place: Place) -> RangeInclusive<usize> {
        let last = self.len() - 1;
        match place {
            Place::HotFace => 0..=0,
            Place::OuterFace => last..=last,
            Place::Everywhere => 0..=last,
            Place::Layer(index) => self.layers[index].clone(),
            Place::Joint(index) => *self.layers[index].end()..=*self.layers[index + 1].start(),
            Place::Probe(index) => {
                let probe = self.probes[index];
                let used = probe.weights.iter().rposition(|weight| *weight != 0.0).unwrap_or(0);
                probe.first..=probe.first + used
            }
        }
    }
}

/// Lagrange weights of up to four nodes around a depth.
fn weights(depths: &[Metres], layer: &RangeInclusive<usize>, depth: Metres) -> ProbeWeights {
    let nodes = &depths[layer.clone()];
    let count = nodes.len().min(4);
    let after = nodes.partition_point(|node| *node < depth);
    let first = after.saturating_sub(2).min(nodes.len() - count);
    let mut weights = [0.0; 4];
    for (i, weight) in weights.iter_mut().enumerate().take(count) {
        *weight = (0..count)
            .filter(|j| *j != i)
            .map(|j| (depth - nodes[first + j]) / (nodes[first + i] - nodes[first + j]))
            .product();
    }
    ProbeWeights {
        first: layer.start() + first,
        weights,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn weights_read_a_cubic_exactly_and_a_node_by_itself() {
        let depths = [0.0, 0.1, 0.25, 0.5, 0.9, 1.0];
        let cubic = |x: f64| 1.0 + x * (2.0 - x * (3.0 - 0.5 * x));
        for depth in [0.0, 0.05, 0.3, 0.5, 0.95, 1.0] {
            let probe = weights(&depths, &(0..=5), depth);
            let read: f64 = probe
                .weights
                .iter()
                .enumerate()
                .map(|(k, weight)| weight * cubic(depths[probe.first + k]))
                .sum();
            assert!((read - cubic(depth)).abs() < 1e-12, "{depth}");
        }
        assert_eq!(
            weights(&depths, &(2..=5), 0.25),
            ProbeWeights {
                first: 2,
                weights: [1.0, 0.0, 0.0, 0.0]
            }
        );
    }
}
