//! Walls of one to four layers with contact resistances, a flux pulse or a gas, and a film outside.
//!
//! Transfer matrices and numerical inversion of the Laplace transform (Talbot against de Hoog): Carslaw & Jaeger, Conduction of Heat in Solids,
//! 2nd ed. (1959), sec. 12.8 and 15. Numbers COMPUTED with 25 digits. From 300 K; outside 10 W/(m²·K) to 300 K. Clock, and each boundary in turn.

use crate::walls::*;
use soakdown::model::*;

const W1_PULSE: [(f64, [f64; 2]); 6] = [
    (1.0, [337.6870583, 324.7309302]),
    (4.0, [424.7925445, 411.8249708]),
    (5.0, [416.1237549, 416.1085509]),
    (10.0, [415.9551188, 415.9401004]),
    (60.0, [414.2829743, 414.2681724]),
    (600.0, [397.6901819, 397.6775291]),
];
const W1_GAS: [(f64, [f64; 2]); 3] = [
    (0.5, [398.398794, 343.888044]),
    (2.0, [570.9882681, 520.7732844]),
    (10.0, [1277.369375, 1245.438623]),
];
const W2_PULSE: [(f64, [f64; 3]); 6] = [
    (1.0, [444.4783067, 352.0657237, 300.0]),
    (4.0, [691.1239806, 596.4780083, 300.0000734]),
    (5.0, [628.0507792, 625.5416304, 300.001377]),
    (10.0, [622.6993522, 621.9032757, 300.6764435]),
    (60.0, [604.8505338, 604.6067776, 400.0608508]),
    (600.0, [544.3909502, 544.2865209, 424.8340564]),
];
const W2_GAS: [(f64, [f64; 3]); 3] = [
    (0.5, [677.003706, 358.6633588, 300.0]),
    (2.0, [1047.791188, 766.8679301, 300.0]),
    (10.0, [2033.55681, 1939.140186, 302.2924444]),
];
const W3_PULSE: [(f64, [f64; 6]); 6] = [
    (1.0, [641.0247443, 345.1320243, 335.4044624, 324.0693677, 311.3434488, 300.672081]),
    (4.0, [723.1967987, 426.3588047, 416.5694166, 403.2669593, 372.659171, 336.1553981]),
    (5.0, [406.4034104, 405.3533175, 405.2845753, 403.0882067, 383.1162793, 354.1771399]),
    (10.0, [391.503921, 391.4129044, 391.4068976, 391.2076816, 389.3883407, 386.608054]),
    (60.0, [389.0560333, 389.0534658, 389.0532946, 389.0472278, 388.9903949, 388.8105748]),
    (600.0, [378.8758652, 378.8735912, 378.8734396, 378.8680663, 378.8177301, 378.6584656]),
];
const W3_GAS: [(f64, [f64; 6]); 3] = [
    (0.5, [1168.963727, 380.7585807, 354.8584177, 326.5760468, 309.5709306, 300.0471637]),
    (2.0, [1243.323874, 495.9249653, 471.2674427, 439.822524, 382.536082, 320.2258125]),
    (10.0, [1501.37048, 906.332019, 886.6582134, 858.3718337, 782.4778994, 687.665845]),
];
const W4_PULSE: [(f64, [f64; 4]); 6] = [
    (1.0, [503.9831744, 300.0, 300.0, 300.0]),
    (4.0, [707.9663489, 300.0027732, 300.0010732, 300.0]),
    (5.0, [552.1370699, 300.0182175, 300.0091454, 300.0]),
    (10.0, [445.3965773, 301.1746001, 300.9351462, 300.0000434]),
    (60.0, [350.4527847, 331.3250593, 331.1519554, 307.6277382]),
    (600.0, [333.1363114, 332.6170927, 332.6001719, 317.9700984]),
];
const W4_GAS: [(f64, [f64; 4]); 3] = [
    (0.5, [1703.59397, 300.0, 300.0, 300.0]),
    (2.0, [2045.303227, 300.0000065, 300.0000006, 300.0]),
    (10.0, [2286.055203, 307.9057355, 306.3637939, 300.0003888]),
];

const COPPER: [f64; 3] = [386.0, 8940.0, 385.0];
const STEEL: [f64; 3] = [16.2, 8000.0, 500.0];
const COATING: [f64; 3] = [1.0, 5700.0, 500.0];
const BLANKET: [f64; 3] = [0.12, 128.0, 1100.0];
const COMPOSITE: [f64; 3] = [0.6, 1700.0, 1200.0];

fn body(name: &str, values: [f64; 3], thickness: f64) -> Result<Layer, ModelError> {
    layer(name, &material(values[0], values[1], values[2])?, thickness)
}

/// One wall under both heatings; `faces`: which of the trace's faces the boundaries are.
fn both<const N: usize>(
    name: &str,
    layers: Vec<Layer>,
    faces: [usize; N],
    flux: f64,
    pulse: &[(f64, [f64; N])],
    gas: &[(f64, [f64; N])],
) -> Result<[Case; 2], ModelError> {
    let wall = |heating, phases| {
        Wall {
            heating,
            outer: outside(10.0, 0.0)?,
            phases,
            ..Wall::of(layers.clone())?
        }
        .model()
    };
    let mut pulsed = Case::new(format!("{name}, pulse"), wall(absorbed(flux)?, vec![burn(4.0)?])?);
    for (time, temperatures) in pulse {
        for (index, value) in faces.into_iter().zip(temperatures) {
            pulsed = pulsed.expect(What::Face { index, time: *time }, *value);
        }
    }
    let mut heated = Case::new(format!("{name}, gas"), wall(film(2000.0, 2500.0)?, vec![burn(10.0)?])?);
    for (time, temperatures) in gas {
        for (index, value) in faces.into_iter().zip(temperatures) {
            heated = heated.expect(What::Face { index, time: *time }, *value);
        }
    }
    Ok([pulsed, heated])
}

pub fn cases() -> Result<Vec<Case>, ModelError> {
    let mut cases = Vec::new();
    cases.extend(both("copper", vec![body("copper", COPPER, 0.010)?], [0, 1], 1e6, &W1_PULSE, &W1_GAS)?);
    cases.extend(both(
        "steel and blanket",
        vec![body("steel", STEEL, 0.003)?, body("blanket", BLANKET, 0.012)?],
        [0, 1, 3],
        1e6,
        &W2_PULSE,
        &W2_GAS,
    )?);
    cases.extend(both(
        "coated copper in a steel jacket",
        vec![
            body("coating", COATING, 0.0003)?.with_joint(contact(1e5)?),
            body("copper", COPPER, 0.008)?.with_joint(contact(1e4)?),
            body("jacket", STEEL, 0.004)?,
        ],
        [0, 1, 2, 3, 4, 5],
        1e6,
        &W3_PULSE,
        &W3_GAS,
    )?);
    cases.extend(both(
        "composite, steel and blanket",
        vec![
            body("composite", COMPOSITE, 0.006)?,
            body("steel", STEEL, 0.002)?,
            body("blanket", BLANKET, 0.010)?,
        ],
        [0, 1, 3, 5],
        2e5,
        &W4_PULSE,
        &W4_GAS,
    )?);
    Ok(cases)
}

#[test]
fn walls_of_several_layers_follow_their_laplace_transforms() -> Outcome {
    check(&cases()?)
}
