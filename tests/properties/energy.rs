//! The heat's bookkeeping closes, with properties that depend on temperature and several phases.

use crate::walls::*;
use soakdown::model::*;
use uom::si::{area::square_meter, f64::Area};

/// Conductivity and heat capacity against temperature.
const STEEL: [[(f64, f64); 4]; 2] = [
    [(300.0, 14.9), (600.0, 19.8), (1000.0, 25.4), (1500.0, 31.7)],
    [(300.0, 477.0), (600.0, 557.0), (1000.0, 611.0), (1500.0, 682.0)],
];
const FELT: [[(f64, f64); 3]; 2] = [
    [(300.0, 0.05), (700.0, 0.12), (1300.0, 0.33)],
    [(300.0, 900.0), (700.0, 1000.0), (1300.0, 1150.0)],
];

fn phases() -> Result<Vec<Phase>, ModelError> {
    Ok(vec![
        burn(3.0)?.with_ramp_and_tail(seconds(0.5), seconds(0.8))?,
        hold(5.0)?,
        burn(2.0)?.at_level(0.6)?.with_ramp_and_tail(seconds(0.0), seconds(2.0))?,
        hold(1.0)?.with_purge(true),
        burn(1.0)?,
        shutdown(30.0)?.with_purge(true),
    ])
}

#[test]
fn in_minus_out_is_stored_to_rounding() -> Outcome {
    let steel = tabled(&STEEL[0], 7900.0, &STEEL[1])?;
    let felt = tabled(&FELT[0], 128.0, &FELT[1])?;
    let idle = || -> Result<Idle, ModelError> {
        Ok(Idle::new(coefficient(5.0), temperature(320.0), pure(0.7), 0.3)?.with_purge(Some(Purge::new(coefficient(150.0), temperature(290.0))?)))
    };
    for shape in [Shape::Plane, Shape::cylinder(metres(0.03))?] {
        for outer in [
            outside(12.0, 0.8)?,
            insulated(),
            OuterFace::new(Outside::fixed(temperature(310.0))?, None),
        ] {
            for heating in [film(2500.0, 2800.0)?, absorbed(1.5e6)?] {
                let gap = Gap::new(metres(0.0005), GapGas::Nitrogen, [0.6, 0.4])?;
                let layers = vec![
                    layer("liner", &steel, 0.004)?,
                    layer("felt", &felt, 0.006)?.with_joint(Some(Joint::new(Some(Resistance::Gap(gap)), None))),
                    layer("ring", &steel, 0.002)?.with_joint(contact(3000.0)?),
                    layer("shell", &steel, 0.001)?,
                ];
                let heated = heating.map(|heating| heating.in_the_open(true));
                let model = Wall {
                    shape,
                    heating: heated,
                    idle: idle()?,
                    outer: outer.clone(),
                    phases: phases()?,
                    ..Wall::of(layers)?
                }
                .model()?;
                let energy = answered(&model)?.stations[0].energy.clone();
                assert!(energy.imbalance < 1e-9, "{shape:?} {outer:?}: {energy:?}");
                assert!(energy.gross_inward > 1e6 && energy.gross_inward >= energy.inward, "{energy:?}");
                assert!(energy.gross_outward >= energy.outward, "{energy:?}");
            }
        }
    }
    Ok(())
}

#[test]
fn a_bar_counts_what_its_sides_lose_to_rounding() -> Outcome {
    let steel = tabled(&STEEL[0], 7900.0, &STEEL[1])?;
    let felt = tabled(&FELT[0], 128.0, &FELT[1])?;
    let cross_section = |area: f64, perimeter: f64| CrossSection::new(Area::new::<square_meter>(area), metres(perimeter));
    let natural = |diameter: f64| Convection::natural_horizontal_cylinder(metres(diameter));
    for outer in [
        outside(12.0, 0.8)?,
        insulated(),
        OuterFace::new(Outside::fixed(temperature(310.0))?, None),
    ] {
        let layers = vec![
            layer("seat", &steel, 0.01)?.with_cross_section(cross_section(2e-4, 0.06)?),
            layer("strut", &steel, 0.03)?
                .with_cross_section(cross_section(5e-5, 0.03)?)
                .with_joint(contact(3000.0)?),
            layer("pad", &felt, 0.003)?.with_cross_section(cross_section(1e-4, 0.05)?),
        ];
        let bar = Wall {
            shape: Shape::Bar,
            heating: film(2500.0, 1800.0)?,
            idle: Idle::new(coefficient(5.0), temperature(320.0), pure(0.7), 0.3)?,
            outer,
            sides: vec![
                Losses::new(natural(0.06)?, Some(pure(0.8)))?,
                Losses::new(natural(0.03)?, Some(pure(0.3)))?,
                Losses::new(Convection::coefficient(coefficient(7.0))?, None)?,
            ],
            phases: phases()?,
            ..Wall::of(layers)?
        };
        let (answers, trace) = history(&bar.model()?, &[5.0, 20.0])?;
        let energy = &answers.stations[0].energy;
        assert!(energy.imbalance < 1e-9, "{energy:?}");
        assert!(energy.outward > 1e4 && trace.iter().all(|row| row.flux_out > 0.0), "{energy:?}");
    }
    Ok(())
}

#[test]
fn an_insulated_wall_keeps_what_a_flux_brought_and_ends_at_its_temperature() -> Outcome {
    // COMPUTED: ∫ρ c dT of piecewise straight c, 7900 · (477 ΔT + (557 − 477)/300 ΔT²/2) · 5 mm = 5.0e6 J/m² below 600 K, solved for ΔT.
    let (thickness, heat) = (0.005, 5.0e6);
    let steel = tabled(&STEEL[0], 7900.0, &STEEL[1])?;
    let model = Wall {
        heating: absorbed(1e6)?,
        phases: vec![burn(5.0)?, shutdown(300.0)?],
        ..Wall::of(vec![layer("body", &steel, thickness)?])?
    }
    .model()?;
    let (answers, trace) = history(&model, &[305.0])?;
    let energy = &answers.stations[0].energy;
    assert!(
        (energy.inward / heat - 1.0).abs() < 1e-9 && (energy.stored / heat - 1.0).abs() < 1e-9,
        "{energy:?}"
    );
    let (linear, slope) = (477.0, 80.0 / 300.0);
    let wanted = heat / (7900.0 * thickness);
    let rise = (-linear + (linear * linear + 2.0 * slope * wanted).sqrt()) / slope;
    assert!(rise < 300.0);
    for face in &trace[0].faces {
        assert!((face - 300.0 - rise).abs() < 1e-3, "{face} K, not {} K", 300.0 + rise);
    }
    Ok(())
}
