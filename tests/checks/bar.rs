//! A bar heated at one end that loses heat from its sides: fins.
//!
//! Incropera & DeWitt, Fundamentals of Heat and Mass Transfer, 6th ed., Table 3.4 (tip conditions A to D) and example 3.9; Carslaw & Jaeger, Conduction
//! of Heat in Solids, 2nd ed. (1959), sec. 4.5 and 3.11 (a rod with loss from its side: the slab's series times exp(−m²αt)). Formulas FROM MEMORY,
//! evaluated here.

use crate::walls::*;
use soakdown::answers::Steady;
use soakdown::model::*;
use std::f64::consts::PI;
use uom::si::{area::square_meter, f64::Area};

/// A round rod of constant properties between a source behind a conductance and air, all in SI.
#[derive(Clone, Copy)]
struct Rod {
    conductivity: f64,
    diameter: f64,
    length: f64,
    /// Coefficient of the sides.
    loss: f64,
    /// Conductance to the source at the heated end.
    contact: f64,
    source: f64,
    air: f64,
}

/// Density times heat capacity of every rod, J/(m³·K).
const CAPACITY: [f64; 2] = [8000.0, 500.0];
const ROD: Rod = Rod {
    conductivity: 16.0,
    diameter: 0.012,
    length: 0.12,
    loss: 25.0,
    contact: 4000.0,
    source: 800.0,
    air: 300.0,
};

/// A layer that is a length of a round rod.
fn length_of(name: &str, rod: &Rod) -> Result<Layer, ModelError> {
    let section = Area::new::<square_meter>(0.25 * PI * rod.diameter * rod.diameter);
    let solid = material(rod.conductivity, CAPACITY[0], CAPACITY[1])?;
    Ok(layer(name, &solid, rod.length)?.with_cross_section(CrossSection::new(section, metres(PI * rod.diameter))?))
}

fn side(loss: f64) -> Result<Losses, ModelError> {
    Losses::new(Convection::coefficient(coefficient(loss))?, None)
}

/// What the far end does.
#[derive(Clone, Copy)]
enum Tip {
    /// Table 3.4 A, with this coefficient.
    Loses(f64),
    /// B.
    Insulated,
    /// C, at this temperature.
    Held(f64),
}

/// A burn of this length on a rod whose whole length starts as warm as the air.
fn burning(rod: &Rod, tip: Tip, time: f64, probes: &[f64]) -> Result<Wall, ModelError> {
    let outer = match tip {
        Tip::Loses(loss) => outside(loss, 0.0)?,
        Tip::Insulated => insulated(),
        Tip::Held(at) => OuterFace::new(Outside::fixed(temperature(at))?, None),
    };
    Ok(Wall {
        shape: Shape::Bar,
        sides: vec![side(rod.loss)?],
        heating: film(rod.contact, rod.source)?,
        outer,
        start: rod.air,
        ambient: rod.air,
        phases: vec![burn(time)?],
        probes: probes.to_vec(),
        ..Wall::of(vec![length_of("rod", rod)?])?
    })
}

impl Rod {
    /// √(hP/kA), 1/m.
    fn decay(&self) -> f64 {
        (4.0 * self.loss / (self.conductivity * self.diameter)).sqrt()
    }

    /// Excess over the air at a depth over that of the heated end, and the heat rate per section and per kelvin of that end's excess (Table 3.4).
    fn fin(&self, tip: Tip, depth: f64, end: f64) -> (f64, f64) {
        let m = self.decay();
        let scale = self.conductivity * m;
        let (to_tip, whole) = (m * (self.length - depth), m * self.length);
        match tip {
            Tip::Loses(loss) => {
                let ratio = loss / scale;
                let below = whole.cosh() + ratio * whole.sinh();
                (
                    (to_tip.cosh() + ratio * to_tip.sinh()) / below,
                    scale * (whole.sinh() + ratio * whole.cosh()) / below,
                )
            }
            Tip::Insulated => (to_tip.cosh() / whole.cosh(), scale * whole.tanh()),
            Tip::Held(at) => {
                let held = (at - self.air) / end;
                (
                    (held * (m * depth).sinh() + to_tip.sinh()) / whole.sinh(),
                    scale * (whole.cosh() - held) / whole.sinh(),
                )
            }
        }
    }

    /// Excess of the heated end over the air: where what comes through the contact is what the rod takes.
    fn end(&self, tip: Tip) -> f64 {
        let given = self.contact * (self.source - self.air);
        match tip {
            // The rate falls in a straight line with the held end: q = a·θ − b.
            Tip::Held(at) => {
                let (m, whole) = (self.decay(), self.decay() * self.length);
                let scale = self.conductivity * m / whole.sinh();
                (given + scale * (at - self.air)) / (self.contact + scale * whole.cosh())
            }
            Tip::Loses(_) | Tip::Insulated => given / (self.contact + self.fin(tip, 0.0, 1.0).1),
        }
    }
}

/// Long enough that nothing moves any more: m²α = 0.083 1/s at least.
const FOR_EVER: f64 = 20_000.0;

#[test]
fn tips_of_table_3_4_have_their_temperatures_and_heat_rates() -> Outcome {
    for (rod, tip) in [
        (ROD, Tip::Loses(25.0)),
        (ROD, Tip::Loses(400.0)),
        (ROD, Tip::Insulated),
        (ROD, Tip::Held(320.0)),
        (ROD, Tip::Held(600.0)),
        // D, as good as endless: mL = 9.
        (Rod { length: 0.4, ..ROD }, Tip::Insulated),
        (Rod { conductivity: 390.0, ..ROD }, Tip::Loses(25.0)),
    ] {
        let depths = [0.0, 0.3 * rod.length, 0.7 * rod.length, rod.length];
        let (answers, trace) = history(&burning(&rod, tip, FOR_EVER, &depths)?.model()?, &[FOR_EVER])?;
        let end = rod.end(tip);
        for (probe, depth) in trace[0].probes.iter().zip(depths) {
            let expected = rod.air + end * rod.fin(tip, depth, end).0;
            assert!((probe.1 - expected).abs() < PROMISE, "at {depth} m: {} for {expected}", probe.1);
        }
        let rate = end * rod.fin(tip, 0.0, end).1;
        assert!((trace[0].flux_in / rate - 1.0).abs() < 1e-3, "{} for {rate} W/m²", trace[0].flux_in);
        // In steady flow, what comes in leaves over the sides and the far end.
        assert!((trace[0].flux_out / rate - 1.0).abs() < 2e-3, "{} for {rate} W/m²", trace[0].flux_out);
        let station = &answers.stations[0];
        assert!(station.energy.imbalance < 1e-9, "{:?}", station.energy);
        let Steady::At(steady) = &station.steady else {
            return Err("no steady state".into());
        };
        assert!((steady.outer_face - rod.air - end * rod.fin(tip, rod.length, end).0).abs() < PROMISE);
        assert!((steady.hot_face - rod.air - end).abs() < PROMISE);
    }
    Ok(())
}

#[test]
fn very_long_rods_take_the_heat_of_incroperas_example_3_9() -> Outcome {
    // Rods of 5 mm, one end at 100 °C, air at 25 °C and 100 W/m²K: conductivity, heat rate in W, and 2.65/m, "infinite" to one per cent, in m.
    for (conductivity, watts, infinite) in [(398.0, 8.3, 0.19), (180.0, 5.6, 0.13), (14.0, 1.6, 0.04)] {
        let rod = Rod {
            conductivity,
            diameter: 0.005,
            length: infinite,
            loss: 100.0,
            contact: 1e8,
            source: 373.15,
            air: 298.15,
        };
        let (_, trace) = history(&burning(&rod, Tip::Insulated, FOR_EVER, &[])?.model()?, &[FOR_EVER])?;
        let found = trace[0].flux_in * 0.25 * PI * rod.diameter * rod.diameter;
        // Printed to two digits; the rod stops where one per cent is left.
        assert!((found - watts).abs() < 0.05 + 0.01 * watts, "{found} W for {watts} W");
    }
    Ok(())
}

#[test]
fn the_length_for_a_tip_temperature_is_that_of_the_fin() -> Outcome {
    // A strut whose far end must not be warmer than 330 K: cosh(mL) = θ_b/θ_tip, with θ_b itself from the contact.
    let excess = |length: f64| {
        let rod = Rod { length, ..ROD };
        let end = rod.end(Tip::Insulated);
        end * rod.fin(Tip::Insulated, length, end).0
    };
    let (mut short, mut long) = (0.01, 0.5);
    for _ in 0..80 {
        let middle = 0.5 * (short + long);
        if excess(middle) > 30.0 {
            short = middle;
        } else {
            long = middle;
        }
    }
    let tip_at = |length: f64| -> Result<f64, Box<dyn std::error::Error>> {
        let (_, trace) = history(&burning(&Rod { length, ..ROD }, Tip::Insulated, FOR_EVER, &[])?.model()?, &[FOR_EVER])?;
        Ok(trace[0].faces[1])
    };
    assert!((tip_at(short)? - 330.0).abs() < PROMISE);
    assert!(tip_at(0.95 * short)? > 331.0 && tip_at(1.05 * short)? < 329.0);
    Ok(())
}

/// Excess over the air of a rod with an insulated tip at a time, at a depth: steady fin less a series (own projection of the steady fin on the slab's
/// eigenfunctions; Carslaw & Jaeger 3.11 with 4.5).
fn transient(rod: &Rod, depth: f64, time: f64) -> f64 {
    let diffusivity = rod.conductivity / (CAPACITY[0] * CAPACITY[1]);
    let biot = rod.contact * rod.length / rod.conductivity;
    let whole = rod.decay() * rod.length;
    let end = rod.end(Tip::Insulated);
    let place = 1.0 - depth / rod.length;
    let mut sum = end * rod.fin(Tip::Insulated, depth, end).0;
    for n in 0..400 {
        let (mut low, mut high) = (f64::from(n) * PI, (f64::from(n) + 0.5) * PI);
        for _ in 0..100 {
            let middle = 0.5 * (low + high);
            // ζ tan ζ rises from 0 to infinity in this quarter period.
            if middle * middle.tan() < biot {
                low = middle;
            } else {
                high = middle;
            }
        }
        let zeta = 0.5 * (low + high);
        let projected = (whole * whole.sinh() * zeta.cos() + zeta * whole.cosh() * zeta.sin()) / (whole * whole + zeta * zeta) / whole.cosh();
        let norm = 0.5 + (2.0 * zeta).sin() / (4.0 * zeta);
        let rate = diffusivity * (zeta * zeta + whole * whole) / (rod.length * rod.length);
        sum -= end * projected / norm * (zeta * place).cos() * (-rate * time).exp();
    }
    sum
}

/// Rods on their way to the steady fin, at the heated end, a third, and the tip.
pub fn cases() -> Result<Vec<Case>, ModelError> {
    let mut cases = Vec::new();
    for (name, rod) in [
        ("steel rod", ROD),
        ("strong loss", Rod { loss: 300.0, ..ROD }),
        (
            "copper rod",
            Rod {
                conductivity: 390.0,
                contact: 20_000.0,
                ..ROD
            },
        ),
    ] {
        let depths = [0.0, rod.length / 3.0, rod.length];
        let times = [5.0, 50.0, 300.0, 2000.0];
        let mut case = Case::new(name, burning(&rod, Tip::Insulated, 2000.0, &depths)?.model()?);
        for time in times {
            for (index, depth) in depths.into_iter().enumerate() {
                case = case.expect(What::Probe { index, time }, rod.air + transient(&rod, depth, time));
            }
        }
        cases.push(case);
    }
    Ok(cases)
}

#[test]
fn rods_warm_as_the_series_says() -> Outcome {
    check(&cases()?)
}

#[test]
fn a_rod_that_gets_thinner_is_two_fins_end_to_end() -> Outcome {
    let thin = Rod {
        diameter: 0.006,
        length: 0.05,
        conductivity: 120.0,
        ..ROD
    };
    let thick = Rod { length: 0.04, ..ROD };
    // What the thin end takes per kelvin of the shoulder, spread over the thick section, is a loss of the thick one's tip (Table 3.4 A).
    let ratio = (thin.diameter / thick.diameter).powi(2);
    let tip = Tip::Loses(ratio * thin.fin(Tip::Insulated, 0.0, 1.0).1);
    let end = thick.end(tip);
    let shoulder = end * thick.fin(tip, thick.length, end).0;
    let far = thin.fin(Tip::Insulated, thin.length, shoulder).0;
    let model = Wall {
        shape: Shape::Bar,
        sides: vec![side(thick.loss)?, side(thin.loss)?],
        heating: film(thick.contact, thick.source)?,
        outer: insulated(),
        phases: vec![burn(FOR_EVER)?],
        ..Wall::of(vec![length_of("thick", &thick)?, length_of("thin", &thin)?])?
    }
    .model()?;
    let (answers, trace) = history(&model, &[FOR_EVER])?;
    for (found, expected) in trace[0].faces.iter().zip([end, shoulder, shoulder, shoulder * far]) {
        assert!((found - 300.0 - expected).abs() < PROMISE, "{found} for {}", 300.0 + expected);
    }
    // Mass per section at the heated end.
    let mass = CAPACITY[0] * (thick.length + ratio * thin.length);
    assert!((answers.stations[0].mass / mass - 1.0).abs() < 1e-12);
    // flux_out counts per section at the heated end, although the far end is thinner.
    assert!((trace[0].flux_out / trace[0].flux_in - 1.0).abs() < 2e-3);
    Ok(())
}

#[test]
fn a_long_thin_rod_cools_from_its_side_alone_as_a_lump() -> Outcome {
    // An insulated heated end and tip: T − air falls by exp(−hPt/(ρcA)) everywhere.
    let rate = 4.0 * ROD.loss / (ROD.diameter * CAPACITY[0] * CAPACITY[1]);
    let wall = Wall {
        heating: absorbed(0.0)?,
        start: 600.0,
        waits: vec![(Place::Everywhere, 330.0)],
        ..burning(&ROD, Tip::Insulated, 1.0, &[])?
    };
    let expected = (300.0_f64 / 30.0).ln() / rate - 1.0;
    check(&[Case::new("rod", wall.model()?).expect(What::Wait(0), expected)])
}
