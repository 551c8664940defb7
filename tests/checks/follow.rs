//! A hot end that follows another station's face: against a film of constant temperature, and against the closed form of a lump that follows a lump
//! (two first-order lags in series; own derivation, the response of a linear first-order equation to exponentials).

use crate::walls::*;
use soakdown::answers::{EvenedOut, RunOptions, Steady, WaitState, run};
use soakdown::model::*;

const CONDUCTANCE: f64 = 5000.0;

fn follows(face: FollowedFace) -> Result<Option<Heating>, ModelError> {
    let followed = Followed::new("wall", face, coefficient(CONDUCTANCE))?;
    Ok(Some(Heating::new(HeatingModel::Wall(followed))))
}

#[test]
fn a_held_face_is_followed_like_a_film_of_its_temperature() -> Outcome {
    let steel = material(16.0, 8000.0, 500.0)?;
    let held = || -> Result<Wall, ModelError> {
        Ok(Wall {
            heating: absorbed(2e5)?,
            outer: OuterFace::new(Outside::fixed(temperature(550.0))?, None),
            phases: vec![burn(20.0)?, shutdown(600.0)?],
            ..Wall::of(vec![layer("body", &steel, 0.004)?])?
        })
    };
    let follower = |heating, idle| -> Result<Wall, ModelError> {
        Ok(Wall {
            heating,
            idle,
            outer: outside(20.0, 0.7)?,
            waits: vec![(Place::OuterFace, 500.0), (Place::HotFace, 560.0)],
            phases: vec![burn(20.0)?, shutdown(600.0)?],
            probes: vec![0.006],
            ..Wall::of(vec![layer("strut", &steel, 0.01)?])?
        })
    };
    let times: Vec<f64> = [0.1, 1.0, 5.0, 20.0, 21.0, 60.0, 300.0, 620.0].to_vec();
    let options = RunOptions {
        history: true,
        times: times.clone(),
        ..RunOptions::default()
    };
    let two = run(
        &held()?.beside(follower(follows(FollowedFace::Outer)?, Idle::never())?, "strut")?,
        &options,
    )?;
    // The same strut with a film, and with an idle face, of that temperature and conductance.
    let idle = Idle::new(coefficient(CONDUCTANCE), temperature(550.0), pure(0.0), 0.0)?;
    let one = run(&follower(film(CONDUCTANCE, 550.0)?, idle)?.model()?, &options)?;
    for (followed, film) in two.histories[1].trace.iter().zip(&one.histories[0].trace) {
        for (followed, film) in followed.faces.iter().zip(&film.faces) {
            assert!((followed - film).abs() < PROMISE, "{followed} for {film}");
        }
        assert!((followed.flux_in - film.flux_in).abs() < CONDUCTANCE * PROMISE);
    }
    let (strut, alone) = (&two.answers.stations[1], &one.answers.stations[0]);
    assert_eq!(strut.waits[0].state, WaitState::Never);
    assert!(matches!(strut.waits[1].state, WaitState::StaysBelow { .. }), "{:?}", strut.waits[1].state);
    assert_eq!((strut.evened_out, alone.evened_out), (EvenedOut::Never, EvenedOut::Never));
    assert!((strut.outer_face.peak - alone.outer_face.peak).abs() < PROMISE);
    assert!(strut.energy.imbalance < 1e-9, "{:?}", strut.energy);
    assert_eq!(strut.steady, Steady::None);
    Ok(())
}

/// Heat capacities per area of the followed lump and of the one that follows, J/(m²·K).
const LUMPS: [f64; 2] = [8000.0 * 500.0 * 0.010, 8000.0 * 500.0 * 0.002];
/// Loss of the followed lump, and of the one that follows, W/(m²·K); flux of the burn, W/m²; its length, s; conductance between them.
const LOSSES: [f64; 2] = [60.0, 30.0];
const FLUX: f64 = 4e5;
const BURN: f64 = 30.0;
const LINK: f64 = 500.0;

/// Excesses over 300 K of both lumps at a clock: each is a sum of a constant and two exponentials, phase by phase.
fn lumps(clock: f64) -> [f64; 2] {
    let (a, b) = (LOSSES[0] / LUMPS[0], (LINK + LOSSES[1]) / LUMPS[1]);
    let gain = LINK / LUMPS[1];
    // From (first, second) on towards a settled first lump.
    let later = |start: [f64; 2], settled: f64, time: f64| {
        let (fast, slow) = ((-b * time).exp(), (-a * time).exp());
        let swing = start[0] - settled;
        let steady = gain * settled / b;
        let follows = gain * swing / (b - a);
        [settled + swing * slow, steady + follows * slow + (start[1] - steady - follows) * fast]
    };
    let settled = FLUX / LOSSES[0];
    if clock <= BURN {
        later([0.0; 2], settled, clock)
    } else {
        later(later([0.0; 2], settled, BURN), 0.0, clock - BURN)
    }
}

fn two_lumps(face: FollowedFace) -> Result<Model, ModelError> {
    let solid = material(1e6, 8000.0, 500.0)?;
    let first = Wall {
        heating: absorbed(FLUX)?,
        outer: outside(LOSSES[0], 0.0)?,
        phases: vec![burn(BURN)?, shutdown(100.0)?],
        waits: vec![(Place::Everywhere, 320.0)],
        ..Wall::of(vec![layer("first", &solid, 0.010)?])?
    };
    let followed = Followed::new("wall", face, coefficient(LINK))?;
    let second = Wall {
        heating: Some(Heating::new(HeatingModel::Wall(followed))),
        idle: Idle::never(),
        outer: outside(LOSSES[1], 0.0)?,
        waits: vec![(Place::Everywhere, 330.0), (Place::Everywhere, 1000.0)],
        ..Wall::of(vec![layer("second", &solid, 0.002)?])?
    };
    first.beside(second, "follower")
}

#[test]
fn a_lump_that_follows_a_lump_is_two_lags_in_series() -> Outcome {
    for face in [FollowedFace::Hot, FollowedFace::Outer] {
        let times = vec![0.5, 5.0, 15.0, 30.0, 31.0, 45.0, 130.0, 1000.0, 3000.0];
        let options = RunOptions {
            history: true,
            times: times.clone(),
            ..RunOptions::default()
        };
        let outcome = run(&two_lumps(face)?, &options)?;
        let [first, second] = [&outcome.histories[0].trace, &outcome.histories[1].trace];
        for (index, time) in times.iter().enumerate() {
            let expected = lumps(*time);
            for (found, expected) in [(first[index].faces[0], expected[0]), (second[index].faces[1], expected[1])] {
                assert!(
                    (found - 300.0 - expected).abs() < PROMISE,
                    "at {time} s: {found} for {}",
                    300.0 + expected
                );
            }
        }
        let follower = &outcome.answers.stations[1];
        // The peak comes after the burn, where the falling first lump meets the rising second one.
        let peak = (0..200_000).map(|step| lumps(BURN + 1e-3 * f64::from(step))[1]).fold(0.0, f64::max);
        assert!(
            (follower.outer_face.peak - 300.0 - peak).abs() < PROMISE,
            "{} for {}",
            follower.outer_face.peak,
            300.0 + peak
        );
        assert!(follower.outer_face.peak_time > BURN);
        let (mut low, mut high) = (200.0, 1e5);
        for _ in 0..100 {
            let middle = 0.5 * (low + high);
            if lumps(middle)[1] > 30.0 {
                low = middle;
            } else {
                high = middle;
            }
        }
        let (wait, slope) = cooled(&follower.waits[0])?;
        assert!((wait + BURN - low).abs() / slope < PROMISE, "{wait} s for {} s", low - BURN);
        assert!(matches!(follower.waits[1].state, WaitState::StaysBelow { .. }));
        assert!(follower.numerical.estimated_error > 0.002 && follower.numerical.estimated_error < PROMISE);
        assert!(follower.energy.imbalance < 1e-9);
        assert!(matches!(follower.evened_out, EvenedOut::From(_)));
    }
    Ok(())
}

#[test]
fn stations_may_stand_in_any_order_and_follow_each_other_in_a_chain() -> Outcome {
    let solid = material(16.0, 8000.0, 500.0)?;
    let station = |name: &str, heating: Heating| -> Result<Station, ModelError> {
        Station::new(StationValues {
            name: name.into(),
            shape: Shape::Plane,
            layers: vec![layer("body", &solid, 0.003)?],
            heating: Some(heating),
            idle: Idle::never(),
            outer: outside(100.0, 0.0)?,
        })
    };
    let wall =
        |name: &str, face| -> Result<Heating, ModelError> { Ok(Heating::new(HeatingModel::Wall(Followed::new(name, face, coefficient(2000.0))?))) };
    let build = |order: [usize; 3]| -> Result<Model, ModelError> {
        let stations = [
            station("first", Heating::new(HeatingModel::flux(flux(5e5))?))?,
            station("second", wall("first", FollowedFace::Outer)?)?,
            station("third", wall("second", FollowedFace::Outer)?)?,
        ];
        let base = Wall {
            phases: vec![burn(5.0)?, shutdown(10.0)?],
            ..Wall::of(vec![layer("body", &solid, 0.003)?])?
        };
        base.with_stations(order.map(|index| stations[index].clone()).to_vec())
    };
    let peaks = |order: [usize; 3]| -> Result<Vec<(String, f64)>, Box<dyn std::error::Error>> {
        let mut peaks: Vec<_> = answered(&build(order)?)?
            .stations
            .iter()
            .map(|station| (station.name.clone(), station.outer_face.peak))
            .collect();
        peaks.sort_by(|a, b| a.0.cmp(&b.0));
        Ok(peaks)
    };
    let straight = peaks([0, 1, 2])?;
    assert_eq!(straight, peaks([2, 0, 1])?);
    assert!(
        straight[0].1 > straight[1].1 && straight[1].1 > straight[2].1 && straight[2].1 > 310.0,
        "{straight:?}"
    );
    Ok(())
}

#[test]
fn nobody_follows_nobody_or_himself() -> Outcome {
    let alone = |followed: &str| -> Result<Wall, ModelError> {
        let heating = Heating::new(HeatingModel::Wall(Followed::new(followed, FollowedFace::Hot, coefficient(10.0))?));
        Ok(Wall {
            heating: Some(heating),
            ..Wall::of(vec![layer("body", &material(16.0, 8000.0, 500.0)?, 0.003)?])?
        })
    };
    assert!(matches!(alone("other")?.model(), Err(ModelError::FollowsNothing { .. })));
    assert!(matches!(alone("wall")?.model(), Err(ModelError::FollowsNothing { .. })));
    assert!(alone("b")?.beside(alone("wall")?, "b").is_err());
    Ok(())
}
