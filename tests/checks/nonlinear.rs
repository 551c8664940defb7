//! The exact transient with conductivity and heat capacity both proportional to 1 + b (T − 300 K): the diffusivity is constant, and
//! θ = ΔT + b ΔT²/2 obeys the linear equation.
//!
//! Kirchhoff's transformation (Carslaw & Jaeger, Conduction of Heat in Solids, 2nd ed., 1959, sec. 1.6) of the slab of sec. 3.8 and the half space
//! of sec. 2.9. Numbers COMPUTED with 30 digits.

use crate::walls::*;
use soakdown::model::*;
use std::sync::Arc;

/// Conductivity and ρ·c at 300 K, b, thickness, flux, time; temperatures at the insulated face, the middle, the heated face.
const SLAB: [[f64; 9]; 9] = [
    [
        15.0,
        4000000.0,
        0.0008,
        0.006,
        1000000.0,
        0.2,
        300.000029868,
        300.382244091,
        363.532452575,
    ],
    [
        15.0,
        4000000.0,
        0.0008,
        0.006,
        1000000.0,
        1.0,
        303.657195769,
        325.080110373,
        438.050811795,
    ],
    [
        15.0,
        4000000.0,
        0.0008,
        0.006,
        1000000.0,
        3.0,
        360.575023959,
        404.006482832,
        532.922563321,
    ],
    [1.0, 2000000.0, 0.0005, 0.004, 100000.0, 0.2, 300.0, 300.000071139, 335.36972791],
    [1.0, 2000000.0, 0.0005, 0.004, 100000.0, 1.0, 300.002858101, 301.697420246, 378.257400882],
    [1.0, 2000000.0, 0.0005, 0.004, 100000.0, 3.0, 302.466311763, 321.2211984, 433.727186806],
    [
        380.0,
        3400000.0,
        -0.0003,
        0.01,
        10000000.0,
        0.2,
        320.900025315,
        348.209196857,
        443.768698643,
    ],
    [
        380.0,
        3400000.0,
        -0.0003,
        0.01,
        10000000.0,
        1.0,
        560.432635255,
        596.323914087,
        706.639424893,
    ],
    [
        380.0,
        3400000.0,
        -0.0003,
        0.01,
        10000000.0,
        3.0,
        1283.61934419,
        1330.75704032,
        1478.34775373,
    ],
];

/// Conductivity and ρ·c at 300 K, b, flux, time; temperatures at 0, 1 and 5 mm.
const HALF_SPACE: [[f64; 8]; 9] = [
    [15.0, 4000000.0, 0.0008, 1000000.0, 0.2, 363.532452575, 318.922234166, 300.000806987],
    [15.0, 4000000.0, 0.0008, 1000000.0, 1.0, 438.050002773, 385.6754048, 304.874875078],
    [15.0, 4000000.0, 0.0008, 1000000.0, 3.0, 530.973710268, 478.489475025, 346.616182447],
    [1.0, 2000000.0, 0.0005, 100000.0, 0.2, 335.36972791, 300.394225791, 300.0],
    [1.0, 2000000.0, 0.0005, 100000.0, 1.0, 378.257400882, 316.594251819, 300.000010692],
    [1.0, 2000000.0, 0.0005, 100000.0, 3.0, 433.726936408, 359.719890926, 300.196378083],
    [380.0, 3400000.0, -0.0003, 10000000.0, 0.2, 443.478772707, 417.721036371, 346.660633538],
    [380.0, 3400000.0, -0.0003, 10000000.0, 1.0, 630.286896862, 601.989254304, 506.109853399],
    [380.0, 3400000.0, -0.0003, 10000000.0, 3.0, 897.234837752, 865.848708026, 753.043741093],
];

/// A material whose properties change in proportion to 1 + b (T − 300 K): straight lines, as tables have them.
fn proportional(conductivity: f64, capacity: f64, change: f64) -> Result<Arc<Material>, ModelError> {
    let row = |value: f64, at: f64| (at, value * (1.0 + change * (at - 300.0)));
    let rows = |value: f64| [row(value, 300.0), row(value, 1700.0)];
    tabled(&rows(conductivity), 1.0, &rows(capacity))
}

pub fn cases() -> Result<Vec<Case>, ModelError> {
    let mut cases = Vec::new();
    let heated = |body: Layer, flux: f64, time: f64, probes: Vec<f64>| -> Result<Model, ModelError> {
        Wall {
            heating: absorbed(flux)?,
            phases: vec![burn(time)?],
            probes,
            ..Wall::of(vec![body])?
        }
        .model()
    };
    for [conductivity, capacity, change, thickness, flux, time, back, middle, face] in SLAB {
        let body = layer("body", &proportional(conductivity, capacity, change)?, thickness)?;
        cases.push(
            Case::new(
                format!("slab, k = {conductivity}, b = {change}, {time} s"),
                heated(body, flux, time, vec![0.5 * thickness])?,
            )
            .expect(What::Peak { layer: 0 }, face)
            .expect(What::Probe { index: 0, time }, middle)
            .expect(What::Face { index: 1, time }, back),
        );
    }
    for [conductivity, capacity, change, flux, time, at_0, at_1, at_5] in HALF_SPACE {
        let thickness = (12.0 * (conductivity / capacity * time).sqrt()).max(0.012);
        let body = layer("body", &proportional(conductivity, capacity, change)?, thickness)?;
        let name = format!("half space, k = {conductivity}, b = {change}, {time} s");
        cases.push(
            Case::new(name, heated(body, flux, time, vec![0.001, 0.005])?)
                .expect(What::Peak { layer: 0 }, at_0)
                .expect(What::Probe { index: 0, time }, at_1)
                .expect(What::Probe { index: 1, time }, at_5),
        );
    }
    Ok(cases)
}

#[test]
fn conductivity_and_heat_capacity_that_rise_or_fall_with_temperature() -> Outcome {
    check(&cases()?)
}
