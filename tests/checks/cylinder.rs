//! A hollow cylinder heated on its inside, and a steady tube of three layers.
//!
//! Carslaw & Jaeger, Conduction of Heat in Solids, 2nd ed. (1959), ch. 7 and 13 (Bessel series); radial resistances: Incropera et al., Fundamentals
//! of Heat and Mass Transfer, 7th ed., eq. 3.35. Numbers COMPUTED (scipy), the series and a Laplace inversion agreeing to 1e-8 K.

use crate::walls::*;
use soakdown::answers::Steady;
use soakdown::model::*;

/// Inner and outer radius; conductivity, density, heat capacity; coefficient and gas temperature, or flux and 0; time; temperatures at the inner radius,
/// half-way and at the outer radius. COMPUTED.
const HOLLOW: [[f64; 11]; 24] = [
    [0.01, 0.03, 386.0, 8940.0, 385.0, 8000.0, 3000.0, 0.5, 624.114095, 360.094913, 313.608669],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 5000000.0, 0.0, 0.5, 383.570012, 315.100519, 303.360074],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 8000.0, 3000.0, 2.0, 831.078696, 562.453493, 496.436631],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 5000000.0, 0.0, 2.0, 447.391376, 370.760633, 352.23022],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 8000.0, 3000.0, 5.0, 1143.64637, 913.518528, 856.828829],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 5000000.0, 0.0, 5.0, 556.447291, 479.725724, 461.118448],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 8000.0, 3000.0, 20.0, 2146.88202, 2041.12296, 2015.07026],
    [0.01, 0.03, 386.0, 8940.0, 385.0, 5000000.0, 0.0, 20.0, 1101.20456, 1024.48298, 1005.8757],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 3000.0, 2800.0, 0.5, 883.423521, 344.584942, 301.211091],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 1000000.0, 0.0, 0.5, 396.112833, 306.806537, 300.177439],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 3000.0, 2800.0, 2.0, 1253.4411, 634.66003, 451.246084],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 1000000.0, 0.0, 2.0, 487.056214, 360.615301, 325.956943],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 3000.0, 2800.0, 5.0, 1597.66024, 1092.41705, 925.093674],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 1000000.0, 0.0, 5.0, 603.438043, 469.608425, 427.911266],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 3000.0, 2800.0, 20.0, 2429.39408, 2273.48495, 2221.73111],
    [0.02, 0.026, 16.2, 8000.0, 500.0, 1000000.0, 0.0, 20.0, 1147.19616, 1013.09761, 971.143906],
    [0.008, 0.02, 80.0, 1800.0, 1500.0, 6000.0, 3000.0, 0.5, 894.624494, 387.065152, 311.524444],
    [0.008, 0.02, 80.0, 1800.0, 1500.0, 3000000.0, 0.0, 0.5, 435.357323, 318.738362, 302.391922],
    [0.008, 0.02, 80.0, 1800.0, 1500.0, 6000.0, 3000.0, 2.0, 1218.45309, 707.177937, 572.437734],
    [0.008, 0.02, 80.0, 1800.0, 1500.0, 3000000.0, 0.0, 2.0, 540.769173, 400.772836, 365.270041],
    [0.008, 0.02, 80.0, 1800.0, 1500.0, 6000.0, 3000.0, 5.0, 1611.81484, 1211.55556, 1104.85452],
    [0.008, 0.02, 80.0, 1800.0, 1500.0, 3000000.0, 0.0, 5.0, 700.55657, 559.623829, 523.312618],
    [
        0.008, 0.02, 80.0, 1800.0, 1500.0, 6000.0, 3000.0, 20.0, 2598.75029, 2483.05642, 2452.21449,
    ],
    [
        0.008, 0.02, 80.0, 1800.0, 1500.0, 3000000.0, 0.0, 20.0, 1494.20902, 1353.27481, 1316.96233,
    ],
];

/// Steady tube: faces from the inside out, K, and heat per length, W/m. COMPUTED.
const TUBE: [f64; 4] = [2471.47725474, 2461.93025474, 1886.1035413, 1884.59695864];
const TUBE_HEAT: f64 = 5376.41081731;

pub fn cases() -> Result<Vec<Case>, ModelError> {
    let mut cases = Vec::new();
    for [inner, outer, conductivity, density, heat_capacity, by, gas, time, face, middle, back] in HOLLOW {
        let thickness = outer - inner;
        let model = Wall {
            shape: Shape::cylinder(metres(2.0 * inner))?,
            heating: if gas > 0.0 { film(by, gas)? } else { absorbed(by)? },
            phases: vec![burn(time)?],
            probes: vec![0.5 * thickness],
            ..Wall::of(vec![layer("body", &material(conductivity, density, heat_capacity)?, thickness)?])?
        }
        .model()?;
        cases.push(
            Case::new(format!("hollow cylinder, k = {conductivity}, gas {gas}, {time} s"), model)
                .expect(What::Peak { layer: 0 }, face)
                .expect(What::Face { index: 0, time }, face)
                .expect(What::Probe { index: 0, time }, middle)
                .expect(What::Face { index: 1, time }, back),
        );
    }
    Ok(cases)
}

/// Radii 20, 25, 35 and 36 mm, conductivities 20, 0.5 and 16; 1500 W/(m²·K) to 2500 K inside, 15 to 300 K outside.
fn tube(duration: f64) -> Result<Model, ModelError> {
    Wall {
        shape: Shape::cylinder(metres(0.04))?,
        heating: film(1500.0, 2500.0)?,
        outer: outside(15.0, 0.0)?,
        phases: vec![burn(duration)?],
        ..Wall::of(vec![
            layer("liner", &material(20.0, 8000.0, 500.0)?, 0.005)?,
            layer("felt", &material(0.5, 200.0, 1000.0)?, 0.010)?,
            layer("shell", &material(16.0, 8000.0, 500.0)?, 0.001)?,
        ])?
    }
    .model()
}

#[test]
fn a_hollow_cylinder_follows_the_bessel_series() -> Outcome {
    check(&cases()?)
}

#[test]
fn a_tube_comes_to_the_steady_state_of_its_resistances() -> Outcome {
    let time = 40_000.0;
    let (answers, trace) = history(&tube(time)?, &[time])?;
    for (face, expected) in [0, 1, 3, 5].into_iter().zip(TUBE) {
        assert!((trace[0].faces[face] - expected).abs() < 1e-3, "{:?}", trace[0].faces);
    }
    let around = 2.0 * std::f64::consts::PI;
    assert!((trace[0].flux_in * around * 0.020 - TUBE_HEAT).abs() < 1e-3 * TUBE_HEAT);
    assert!((trace[0].flux_out * around * 0.036 - TUBE_HEAT).abs() < 1e-3 * TUBE_HEAT);
    // A short burn knows the steady state of an endless one as well.
    for answers in [&answers, &answered(&tube(5.0)?)?] {
        let Steady::At(steady) = &answers.stations[0].steady else {
            return Err("no steady state".into());
        };
        assert!((steady.hot_face - TUBE[0]).abs() < 1e-5, "{}", steady.hot_face);
        assert!((steady.outer_face - TUBE[3]).abs() < 1e-5, "{}", steady.outer_face);
    }
    Ok(())
}
