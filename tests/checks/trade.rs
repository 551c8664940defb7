//! Facts that everybody on a test stand knows. Common practice, no source.

use crate::walls::*;
use soakdown::answers::{EvenedOut, Steady};
use soakdown::model::*;

/// A radiatively cooled shell under a constant flux.
#[test]
fn radiation_grows_until_losses_equal_the_input_and_the_temperature_stands_still() -> Outcome {
    let (flux, emissivity, duration) = (80_000.0, 0.8, 2000.0);
    let model = Wall {
        heating: absorbed(flux)?,
        outer: outside(0.0, emissivity)?,
        phases: vec![burn(duration)?],
        ..Wall::of(vec![layer("shell", &material(30.0, 8600.0, 300.0)?, 0.0015)?])?
    }
    .model()?;
    let times: Vec<f64> = (1..=40).map(|row| duration * f64::from(row) / 40.0).collect();
    let (answers, trace) = history(&model, &times)?;
    for pair in trace.windows(2) {
        assert!(pair[1].flux_out >= pair[0].flux_out - 1e-6 * flux, "losses fall while heating: {pair:?}");
        assert!(pair[1].faces[1] >= pair[0].faces[1] - 1e-4, "the shell cools while heating: {pair:?}");
    }
    assert!(trace[0].flux_out < 0.8 * flux, "not a start-up: {:?}", trace[0]);
    let [before, last] = [&trace[38], &trace[39]];
    assert!((last.flux_out / flux - 1.0).abs() < 1e-6, "{last:?}");
    assert!((last.faces[1] - before.faces[1]).abs() < 1e-3);
    // Where ε σ (T⁴ − T₀⁴) = q.
    let standing = (flux / (emissivity * STEFAN_BOLTZMANN) + 300.0_f64.powi(4)).powf(0.25);
    assert!((last.faces[1] - standing).abs() < PROMISE, "{} K, not {standing} K", last.faces[1]);
    let Steady::At(steady) = &answers.stations[0].steady else {
        return Err("no steady state".into());
    };
    assert!((steady.outer_face - standing).abs() < 1e-3);
    assert!(
        steady.time_to_95_percent.is_some_and(|time| time > times[0] && time < duration),
        "{steady:?}"
    );
    Ok(())
}

/// A hot liner in a cold jacket, which the air cools slowly.
#[test]
fn after_shutdown_the_hotter_part_feeds_the_cooler_one_until_both_are_level_then_the_whole_drops_evenly() -> Outcome {
    let model = Wall {
        heating: film(2500.0, 2800.0)?,
        outer: outside(4.0, 0.0)?,
        phases: vec![burn(6.0)?],
        waits: vec![(Place::Everywhere, 330.0)],
        ..Wall::of(vec![
            layer("liner", &material(40.0, 8000.0, 500.0)?, 0.006)?.with_joint(contact(2000.0)?),
            layer("jacket", &material(40.0, 8000.0, 500.0)?, 0.004)?,
        ])?
    }
    .model()?;
    let answers = answered(&model)?;
    let station = &answers.stations[0];
    let EvenedOut::From(level) = station.evened_out else {
        return Err(format!("{:?}", station.evened_out).into());
    };
    let (wait, _) = cooled(&station.waits[0])?;
    assert!(level > 10.0 && level < 0.5 * wait, "level at {level} s, cool after {wait} s");
    let times: Vec<f64> = (0..=90).map(|row| 6.0 + (wait - 6.0) * (f64::from(row) / 90.0).powi(4)).collect();
    let (_, trace) = history(&model, &times)?;
    let mut fed = 0;
    for pair in trace.windows(2) {
        let [liner, jacket] = [0, 3].map(|face| pair[1].faces[face] - pair[0].faces[face]);
        let gap = pair[0].faces[0] - pair[0].faces[3];
        assert!(gap > 0.0 && pair[1].faces[0] > pair[1].faces[3], "heat flows from hot to cold: {pair:?}");
        assert!(liner < 0.0, "the hotter part only cools: {pair:?}");
        if pair[1].time < station.soak_back.outer_face_peak {
            fed += 1;
            assert!(jacket > 0.0, "the cooler part is fed: {pair:?}");
        }
        if pair[0].time > level {
            assert!(jacket < 0.0, "the whole drops: {pair:?}");
            assert!((liner / jacket - 1.0).abs() < 0.01, "evenly: {pair:?}");
        }
    }
    assert!(fed > 5, "{fed} rows while the liner feeds the jacket");
    // The jacket stands still where it gets from the liner what the air takes.
    let top = station.soak_back.outer_face_peak;
    let (_, at_top) = history(&model, &[top])?;
    let passed = 2000.0 * (at_top[0].faces[1] - at_top[0].faces[2]);
    assert!(
        (passed / at_top[0].flux_out - 1.0).abs() < 0.05,
        "{passed} against {}",
        at_top[0].flux_out
    );
    Ok(())
}

/// Thermocouples in a thick slab.
#[test]
fn the_peak_at_depth_lags_the_burn_and_is_lower_the_deeper_it_lies() -> Outcome {
    let duration = 5.0;
    let model = Wall {
        heating: film(3000.0, 2800.0)?,
        phases: vec![burn(duration)?],
        probes: vec![0.0, 0.004, 0.008, 0.012, 0.016],
        ..Wall::of(vec![layer("body", &material(20.0, 8000.0, 500.0)?, 0.06)?])?
    }
    .model()?;
    let answers = answered(&model)?;
    let probes = &answers.stations[0].probes;
    assert!(
        (probes[0].peak_time - duration).abs() < 1e-9,
        "the heated face peaks as the burn ends: {:?}",
        probes[0]
    );
    for pair in probes.windows(2) {
        assert!(pair[1].peak_time > pair[0].peak_time + 0.1, "{pair:?}");
        assert!(pair[1].peak < pair[0].peak - 1.0, "{pair:?}");
    }
    Ok(())
}
