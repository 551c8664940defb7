//! Two bodies of different temperatures brought into contact.
//!
//! Carslaw & Jaeger, Conduction of Heat in Solids, 2nd ed. (1959), sec. 2.15: the interface goes at once to the mean weighted by the effusivities
//! √(k ρ c). ASTM C1057 judges touch by the same idea. Numbers COMPUTED with 30 digits.

use crate::walls::*;
use soakdown::model::*;
use soakdown::wall::NodeMap;

/// Clock, distance from the interface, temperatures there in copper (900 K at first) and in steel (300 K). COMPUTED.
const COPPER_ON_STEEL: [[f64; 4]; 9] = [
    [0.1, 0.001, 814.796988822, 429.794515279],
    [0.1, 0.003, 846.138449904, 300.369325153],
    [0.1, 0.010, 896.446718775, 300.0],
    [1.0, 0.001, 803.13403074, 659.399093257],
    [1.0, 0.003, 813.930972701, 442.367923305],
    [1.0, 0.010, 848.402039578, 300.187384556],
    [5.0, 0.001, 800.124588545, 734.802043795],
    [5.0, 0.003, 804.990524038, 615.184165158],
    [5.0, 0.010, 821.706516019, 355.624890464],
];
const INTERFACE: f64 = 797.687279342;

/// A body at 80 °C touched by skin (k 0.37, ρ 1000, c 3770) at 35 °C: the contact temperature, °C. COMPUTED.
const TOUCHED: [([f64; 3], f64); 5] = [
    ([386.0, 8940.0, 385.0], 78.5876503739),
    ([14.9, 7900.0, 477.0], 73.8729287569),
    ([1.4, 2500.0, 750.0], 61.0271266251),
    ([0.17, 700.0, 2400.0], 49.0186879908),
    ([0.06, 128.0, 1000.0], 38.1083941408),
];

/// Both bodies at their own temperature, the shared node at the mean of its two halves by their heat capacities.
fn state(map: &NodeMap, capacities: [f64; 2], temperatures: [f64; 2]) -> Vec<f64> {
    let shared = *map.layers[0].end();
    let halves = [map.depths[shared] - map.depths[shared - 1], map.depths[shared + 1] - map.depths[shared]];
    let heat = [capacities[0] * halves[0], capacities[1] * halves[1]];
    let mean = (heat[0] * temperatures[0] + heat[1] * temperatures[1]) / (heat[0] + heat[1]);
    (0..map.len())
        .map(|node| match node.cmp(&shared) {
            std::cmp::Ordering::Less => temperatures[0],
            std::cmp::Ordering::Equal => mean,
            std::cmp::Ordering::Greater => temperatures[1],
        })
        .collect()
}

/// Two bodies twelve diffusion lengths thick; the interface lies between the layers.
fn bodies(values: [[f64; 3]; 2], time: f64, distances: &[f64]) -> Result<Model, ModelError> {
    let thickness = values.map(|[conductivity, density, heat_capacity]| (12.0 * (conductivity / (density * heat_capacity) * time).sqrt()).max(0.012));
    let body = |name: &str, side: usize| layer(name, &material(values[side][0], values[side][1], values[side][2])?, thickness[side]);
    let probes = distances.iter().flat_map(|distance| [thickness[0] - distance, thickness[0] + distance]);
    Wall {
        phases: vec![shutdown(time)?],
        probes: probes.collect(),
        ..Wall::of(vec![body("first", 0)?, body("second", 1)?])?
    }
    .model()
}

fn capacities(values: [[f64; 3]; 2]) -> [f64; 2] {
    values.map(|[_, density, heat_capacity]| density * heat_capacity)
}

#[test]
fn copper_on_steel_follows_the_error_function_on_both_sides() -> Outcome {
    let values = [[386.0, 8940.0, 385.0], [14.9, 7900.0, 477.0]];
    for rows in COPPER_ON_STEEL.chunks(3) {
        let time = rows[0][0];
        let distances: Vec<f64> = rows.iter().map(|row| row[1]).collect();
        let model = bodies(values, time, &distances)?;
        let found = from_state(&model, 12.0, 0.002, &[time], |map| state(map, capacities(values), [900.0, 300.0]))?;
        assert!(
            (found[0].faces[1] - INTERFACE).abs() < PROMISE,
            "interface at {time} s: {}",
            found[0].faces[1]
        );
        for (index, [_, distance, copper, steel]) in rows.iter().enumerate() {
            for (found, expected) in [found[0].probes[2 * index].1, found[0].probes[2 * index + 1].1]
                .into_iter()
                .zip([copper, steel])
            {
                assert!(
                    (found - expected).abs() < PROMISE,
                    "{distance} m from the interface at {time} s: {found}, not {expected}"
                );
            }
        }
    }
    Ok(())
}

#[test]
fn a_touched_body_and_skin_meet_at_the_mean_of_their_effusivities() -> Outcome {
    for (body, expected) in TOUCHED {
        let values = [body, [0.37, 1000.0, 3770.0]];
        let model = bodies(values, 1.0, &[])?;
        let found = from_state(&model, 4.0, 0.002, &[1.0], |map| state(map, capacities(values), [353.15, 308.15]))?;
        let found = found[0].faces[1] - 273.15;
        assert!((found - expected).abs() < PROMISE, "{body:?}: {found} °C, not {expected} °C");
    }
    Ok(())
}
