//! Bodies of one temperature: waits under radiation, convection and both, a burn to a limit; and two bodies that exchange heat after a burn.
//!
//! Incropera et al., Fundamentals of Heat and Mass Transfer, 7th ed., eqs 5.6, 5.18, 5.19; the pair by its two eigenvalues (any text on linear
//! systems). Numbers COMPUTED with 30 digits. A conductivity of 1e6 W/(m·K) and more makes a layer one body.

use crate::walls::*;
use soakdown::model::*;
use soakdown::run::{Course, LastPhase, Level, Quantity, Timeline, Watcher};
use soakdown::wall::Grid;

/// Density, heat capacity, thickness, emissivity, start; how long until 700, 500, 400 and 333.15 K, s. COMPUTED.
const RADIATION: [([f64; 5], [f64; 4]); 9] = [
    (
        [8000.0, 500.0, 0.006, 0.8, 800.0],
        [174.352289691, 1148.95088159, 2880.42860135, 6919.8413687],
    ),
    (
        [8000.0, 500.0, 0.006, 0.8, 1100.0],
        [388.938992402, 1363.5375843, 3095.01530406, 7134.42807141],
    ),
    (
        [8000.0, 500.0, 0.006, 0.8, 1400.0],
        [457.424989329, 1432.02358123, 3163.50130098, 7202.91406834],
    ),
    (
        [8940.0, 385.0, 0.01, 0.65, 800.0],
        [307.745203019, 2027.98668684, 5084.1780528, 12214.0523112],
    ),
    (
        [8940.0, 385.0, 0.01, 0.65, 1100.0],
        [686.507239973, 2406.7487238, 5462.94008976, 12592.8143482],
    ),
    (
        [8940.0, 385.0, 0.01, 0.65, 1400.0],
        [807.390292703, 2527.63177653, 5583.82314249, 12713.6974009],
    ),
    (
        [8600.0, 270.0, 0.001, 0.7, 800.0],
        [19.2783817458, 127.041140336, 318.493105349, 765.136745625],
    ),
    (
        [8600.0, 270.0, 0.001, 0.7, 1100.0],
        [43.005540017, 150.768298607, 342.22026362, 788.863903896],
    ),
    (
        [8600.0, 270.0, 0.001, 0.7, 1400.0],
        [50.5781345343, 158.340893124, 349.792858137, 796.436498413],
    ),
];

/// Emissivity, coefficient, start; how long until 317.15 and 333.15 K, s, of 24 kJ/(m²·K) in surroundings of 298.15 K. COMPUTED (quadrature; logarithm
/// where nothing radiates).
const LOSSES: [([f64; 3], [f64; 2]); 21] = [
    ([0.1, 5.0, 800.0], [12527.1474775, 9948.20271785]),
    ([0.1, 5.0, 1100.0], [13487.6340513, 10908.6892917]),
    ([0.1, 10.0, 800.0], [6944.29053932, 5572.13187988]),
    ([0.1, 10.0, 1100.0], [7614.81373562, 6242.65507617]),
    ([0.3, 5.0, 800.0], [9181.41005358, 7103.31682733]),
    ([0.3, 5.0, 1100.0], [9633.48923974, 7555.39601349]),
    ([0.3, 10.0, 800.0], [5724.63812283, 4508.44968911]),
    ([0.3, 10.0, 1100.0], [6099.23625593, 4883.04782221]),
    ([0.8, 5.0, 800.0], [5640.12325786, 4241.15591328]),
    ([0.8, 5.0, 1100.0], [5835.12244355, 4436.15509898]),
    ([0.8, 10.0, 800.0], [4069.49479247, 3122.40632268]),
    ([0.8, 10.0, 1100.0], [4248.34029048, 3301.25182069]),
    ([0.0, 5.0, 500.0], [11342.812167, 8410.44857189]),
    ([0.0, 5.0, 800.0], [15714.5389972, 12782.1754021]),
    ([0.0, 5.0, 1100.0], [17963.9163782, 15031.552783]),
    ([0.0, 10.0, 500.0], [5671.40608352, 4205.22428594]),
    ([0.0, 10.0, 800.0], [7857.26949862, 6391.08770105]),
    ([0.0, 10.0, 1100.0], [8981.95818909, 7515.77639152]),
    ([0.0, 25.0, 500.0], [2268.56243341, 1682.08971438]),
    ([0.0, 25.0, 800.0], [3142.90779945, 2556.43508042]),
    ([0.0, 25.0, 1100.0], [3592.78327564, 3006.31055661]),
];

/// Capacities, conductance between, coefficient outside, starts of both; when the outer one is hottest, how hot, when it comes down to 333.15 K, s.
/// Surroundings at 300 K. COMPUTED.
const PAIRS: [[f64; 9]; 3] = [
    [20000.0, 12000.0, 50.0, 8.0, 900.0, 320.0, 488.582825151, 619.705898768, 10284.5469502],
    [40000.0, 8000.0, 5.0, 10.0, 1000.0, 300.0, 1719.78478667, 498.232565432, 24211.7353507],
    [10000.0, 10000.0, 200.0, 12.0, 800.0, 300.0, 105.70058303, 531.338370566, 3417.8705339],
];

/// A layer of one temperature, of this heat capacity per area.
fn lump(name: &str, capacity: f64) -> Result<Layer, ModelError> {
    layer(name, &material(1e8, 1000.0, capacity)?, 0.001)
}

fn waits() -> Result<Vec<Case>, ModelError> {
    let mut cases = Vec::new();
    for ([density, heat_capacity, thickness, emissivity, start], waits) in RADIATION {
        let model = Wall {
            outer: outside(0.0, emissivity)?,
            start,
            waits: [700.0, 500.0, 400.0, 333.15].map(|below| (Place::OuterFace, below)).to_vec(),
            ..Wall::of(vec![layer("body", &material(1e6, density, heat_capacity)?, thickness)?])?
        }
        .model()?;
        let case = Case::new(format!("lump that radiates, {thickness} m, from {start} K"), model);
        cases.push((0..4).fold(case, |case, index| case.expect(What::Wait(index), waits[index])));
    }
    for ([emissivity, coefficient, start], waits) in LOSSES {
        let model = Wall {
            outer: outside(coefficient, emissivity)?,
            start,
            ambient: 298.15,
            waits: vec![(Place::OuterFace, 317.15), (Place::Everywhere, 333.15)],
            ..Wall::of(vec![lump("body", 24000.0)?])?
        }
        .model()?;
        cases.push(
            Case::new(format!("lump that cools, {emissivity}, {coefficient} W/(m²·K), from {start} K"), model)
                .expect(What::Wait(0), waits[0])
                .expect(What::Wait(1), waits[1]),
        );
    }
    Ok(cases)
}

/// COMPUTED from the exponential.
fn burns_to_limit() -> Result<Vec<Case>, ModelError> {
    [
        (12000.0, 1000.0, 2500.0, 1100.0, 5.42382148492),
        (34419.0, 5000.0, 3000.0, 800.0, 1.40976377777),
    ]
    .into_iter()
    .map(|(capacity, coefficient, gas, passed, time)| {
        let model = Wall {
            heating: film(coefficient, gas)?,
            phases: vec![burn(1.2 * time)?],
            ..Wall::of(vec![lump("body", capacity)?.with_limit(limit(passed)?)])?
        }
        .model()?;
        Ok(Case::new(format!("lump to {passed} K"), model).expect(What::FirstOver { layer: 0 }, time))
    })
    .collect()
}

fn pair(values: [f64; 9]) -> Result<Wall, ModelError> {
    let [first, second, between, coefficient, ..] = values;
    Ok(Wall {
        outer: outside(coefficient, 0.0)?,
        waits: vec![(Place::OuterFace, 333.15)],
        ..Wall::of(vec![lump("liner", first)?.with_joint(contact(between)?), lump("shell", second)?])?
    })
}

/// How long the pulse lasts that heats the first body, s: so short that the second one feels nothing of it.
const PULSE: f64 = 0.01;

/// The pairs whose second body starts as cold as the surroundings, their first body heated by a pulse.
fn pulsed() -> Result<Vec<(Case, f64)>, ModelError> {
    PAIRS
        .into_iter()
        .filter(|values| values[5] == 300.0)
        .map(|values| {
            let [first, _, _, _, hot, cold, peak_time, peak, wait] = values;
            let model = Wall {
                heating: absorbed(first * (hot - cold) / PULSE)?,
                phases: vec![burn(PULSE)?],
                ..pair(values)?
            }
            .model()?;
            // The heat goes over from the middle of the pulse on, and the clock counts from its end.
            let case = Case::new(format!("pair of {first} J/(m²·K)"), model)
                .expect(What::OuterPeak, peak)
                .expect(What::Wait(0), wait - 0.5 * PULSE);
            Ok((case, peak_time))
        })
        .collect()
}

pub fn cases() -> Result<Vec<Case>, ModelError> {
    let mut cases = waits()?;
    cases.extend(burns_to_limit()?);
    cases.extend(pulsed()?.into_iter().map(|pair| pair.0));
    Ok(cases)
}

#[test]
fn waits_of_lumps_agree_with_their_closed_forms() -> Outcome {
    check(&waits()?)
}

#[test]
fn a_lump_reaches_its_limit_when_the_exponential_does() -> Outcome {
    check(&burns_to_limit()?)
}

#[test]
fn soak_back_of_a_pair_peaks_and_ends_when_the_eigenvalues_say() -> Outcome {
    let pulsed = pulsed()?;
    assert_eq!(pulsed.len(), 2);
    for (case, peak_time) in pulsed {
        let soak_back = answered(&case.model)?.stations[0].soak_back.clone();
        let found = soak_back.outer_face_peak - PULSE;
        assert!(
            (found / peak_time - 1.0).abs() < 0.002,
            "{}: peak {found} s after the burn, not {peak_time} s",
            case.name
        );
        assert!(
            soak_back
                .last_peak
                .is_some_and(|(time, _)| (time - PULSE - peak_time).abs() < 0.002 * peak_time),
            "{}: {:?}",
            case.name,
            soak_back.last_peak
        );
        check(&[case])?;
    }
    Ok(())
}

#[test]
fn a_pair_at_two_temperatures_peaks_and_cools_as_its_eigenvalues_say() -> Outcome {
    for values in PAIRS {
        let [_, _, _, _, hot, cold, peak_time, peak, wait] = values;
        let model = pair(values)?.model()?;
        let station = &model.stations()[0];
        let grid = Grid::new(&model, station, 1.0);
        let mut course = Course::new(station, model.surroundings(), &grid, 300.0, 0.005);
        let layers = course.wall.map(0).layers.clone();
        let state: Vec<f64> = (0..course.wall.map(0).len())
            .map(|node| if layers[0].contains(&node) { hot } else { cold })
            .collect();
        course.place(0.0, &state);
        let outer = vec![Quantity::Place(Place::OuterFace)];
        let mut watcher = Watcher::new(outer, vec![Level { quantity: 0, value: 333.15 }], 0.0, LastPhase::to_the_end());
        course.drive(&Timeline::of_profile(&model, station, Some(1.2 * wait)), None, |moment| {
            watcher.see(moment)
        })?;
        let found = watcher.peaks()[0].ok_or("no peak")?;
        assert!((found.value - peak).abs() < PROMISE, "{values:?}: {found:?}");
        assert!((found.clock / peak_time - 1.0).abs() < 0.002, "{values:?}: {found:?}");
        let (down, slope) = watcher.crossings()[0].last_down.ok_or("it did not come down")?;
        assert!(((down - wait) * slope).abs() < PROMISE, "{values:?}: {down} s");
    }
    Ok(())
}
