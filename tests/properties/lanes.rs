//! Eight walls side by side are the same eight walls one by one.

use crate::walls::*;
use soakdown::model::*;
use soakdown::run::{Segment, Timeline};
use soakdown::solve::{Flow, Integrator, Settings};
use soakdown::wall::{Grid, Wall as Walls};
use uom::si::{area::square_meter, f64::Area};

const STARTS: [f64; 8] = [300.0, 280.0, 310.0, 350.0, 300.0, 295.0, 400.0, 320.0];
const STEP_TOLERANCE: f64 = 0.005;

/// Members that differ in thickness, coefficient, gas, losses, conductivity, phase lengths and start.
fn member(index: usize) -> Result<Model, ModelError> {
    let share = index as f64 / 7.0;
    let rows = |value: f64, change: f64| [(250.0, value), (1500.0, value * change)];
    let ramp = seconds(0.2 + 0.3 * share);
    Wall {
        heating: film(1500.0 + 2500.0 * share, 3000.0 - 700.0 * share)?,
        idle: Idle::new(coefficient(5.0 + 40.0 * share), temperature(300.0), pure(0.6), 0.2 + 0.5 * share)?,
        outer: outside(8.0 + 10.0 * share, 0.3 + 0.6 * share)?,
        start: STARTS[index],
        phases: vec![
            burn(1.5 + 2.0 * share)?.with_ramp_and_tail(ramp, ramp)?,
            hold(20.0 - 10.0 * share)?,
            burn(1.0 + 0.5 * share)?.at_level(0.7)?,
            shutdown(200.0 + 300.0 * share)?,
        ],
        ..Wall::of(vec![
            layer(
                "coating",
                &tabled(&rows(1.0 + 0.4 * share, 0.8), 5700.0, &rows(460.0, 1.3))?,
                0.0002 + 0.0002 * share,
            )?,
            layer(
                "liner",
                &tabled(&rows(390.0 - 80.0 * share, 0.9), 8900.0, &rows(385.0, 1.2))?,
                0.006 + 0.004 * share,
            )?
            .with_joint(contact(3000.0 + 9000.0 * share)?),
            layer("jacket", &tabled(&rows(15.0, 1.8), 7900.0, &rows(480.0, 1.3))?, 0.003 + 0.001 * share)?,
        ])?
    }
    .model()
}

/// Temperatures of all nodes and the two ledgers, at the end of each segment, for each member.
type Ends = Vec<Vec<Vec<f64>>>;

fn through<const L: usize>(models: [&Model; L], starts: [f64; L], grid: &Grid) -> Result<Ends, Box<dyn std::error::Error>> {
    let mut wall = Walls::<L>::new(models.map(|model| (&model.stations()[0], model.surroundings())), grid);
    let mut integrator = Integrator::new(wall.unknowns_at(starts), wall.followers_at(starts));
    let segments: Vec<Vec<Segment>> = models
        .iter()
        .map(|model| Timeline::of_profile(model, &model.stations()[0], model.profile().starts().last().copied()))
        .collect();
    let settings = Settings::with_tolerance(STEP_TOLERANCE);
    let mut ends = Vec::new();
    for index in 0..segments[0].len() {
        if segments[0][index].jump {
            integrator.expect_jump();
        }
        wall.set_forcing(std::array::from_fn(|l| segments[l][index].forcing));
        let reached = integrator.phase(&mut wall, &settings, |_, _| Flow::Continue)?;
        assert_eq!(reached, 1.0);
        let member = |l: usize| -> Vec<f64> {
            let nodes = integrator.unknowns.iter().enumerate();
            let temperatures = nodes.map(|(node, unknown)| wall.temperature(node, l, unknown[l]));
            temperatures
                .chain(integrator.followers.iter().map(|follower| follower[l] / 1e5))
                .collect()
        };
        ends.push((0..L).map(member).collect());
    }
    Ok(ends)
}

#[test]
fn eight_members_side_by_side_end_each_phase_where_each_ends_alone() -> Outcome {
    let models = (0..8).map(member).collect::<Result<Vec<_>, _>>()?;
    let grid = Grid::new(&models[0], &models[0].stations()[0], 1.0);
    let members: [&Model; 8] = std::array::from_fn(|l| &models[l]);
    let together = through(members, STARTS, &grid)?;
    assert!(together.len() >= 6, "{} segments", together.len());
    let mut largest: f64 = 0.0;
    for l in 0..8 {
        let alone = through([members[l]], [STARTS[l]], &grid)?;
        for (segment, (together, alone)) in together.iter().zip(&alone).enumerate() {
            for (entry, (side_by_side, single)) in together[l].iter().zip(&alone[0]).enumerate() {
                let difference = (side_by_side - single).abs();
                largest = largest.max(difference);
                assert!(
                    difference < PROMISE,
                    "member {l}, segment {segment}, entry {entry}: {side_by_side}, alone {single}"
                );
            }
        }
    }
    // Members really share their steps, and differ.
    assert!(largest > 0.0);
    let hot = |l: usize| together[0][l][0];
    assert!((hot(0) - hot(7)).abs() > 20.0);
    Ok(())
}

#[test]
fn eight_equal_members_are_one_wall_eight_times() -> Outcome {
    let model = member(3)?;
    let grid = Grid::new(&model, &model.stations()[0], 1.0);
    let together = through([&model; 8], [STARTS[3]; 8], &grid)?;
    let alone = through([&model], [STARTS[3]], &grid)?;
    for (together, alone) in together.iter().zip(&alone) {
        for lane in together {
            for (side_by_side, single) in lane.iter().zip(&alone[0]) {
                assert!(
                    (side_by_side - single).abs() < 1e-6 * single.abs().max(1.0),
                    "{side_by_side}, alone {single}"
                );
            }
        }
    }
    Ok(())
}

/// The same members as lengths of bars, with sides that differ too.
fn bar_member(index: usize) -> Result<Model, ModelError> {
    let share = index as f64 / 7.0;
    let cross_section = |area: f64| CrossSection::new(Area::new::<square_meter>(area), metres(0.04 + 0.02 * share));
    Wall {
        shape: Shape::Bar,
        heating: film(300.0 + 500.0 * share, 1500.0 - 400.0 * share)?,
        outer: outside(8.0, 0.5)?,
        sides: vec![
            Losses::new(
                Convection::natural_horizontal_cylinder(metres(0.013 + 0.006 * share))?,
                Some(pure(0.2 + 0.6 * share)),
            )?,
            Losses::new(Convection::coefficient(coefficient(5.0 + 20.0 * share))?, None)?,
        ],
        start: STARTS[index],
        phases: vec![burn(30.0 + 20.0 * share)?, shutdown(400.0)?],
        ..Wall::of(vec![
            layer("strut", &material(15.0 + 10.0 * share, 7900.0, 500.0)?, 0.04)?.with_cross_section(cross_section(1e-4)?),
            layer("foot", &material(120.0, 2700.0, 900.0)?, 0.02)?.with_cross_section(cross_section(5e-5 + 2e-5 * share)?),
        ])?
    }
    .model()
}

#[test]
fn eight_bars_side_by_side_end_each_phase_where_each_ends_alone() -> Outcome {
    let models = (0..8).map(bar_member).collect::<Result<Vec<_>, _>>()?;
    let grid = Grid::new(&models[0], &models[0].stations()[0], 1.0);
    let together = through(std::array::from_fn::<&Model, 8, _>(|l| &models[l]), STARTS, &grid)?;
    for l in 0..8 {
        let alone = through([&models[l]], [STARTS[l]], &grid)?;
        for (together, alone) in together.iter().zip(&alone) {
            for (side_by_side, single) in together[l].iter().zip(&alone[0]) {
                assert!((side_by_side - single).abs() < PROMISE, "member {l}: {side_by_side}, alone {single}");
            }
        }
    }
    let far = |l: usize| together[0][l][20];
    assert!((far(0) - far(7)).abs() > 1.0);
    Ok(())
}
