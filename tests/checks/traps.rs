//! Where answers about a wall go wrong most easily. The lumps have closed forms (an exponential or a straight line); the rest is common practice,
//! no source.

use crate::walls::*;
use soakdown::answers::{LimitAnswer, PlaceAnswer, RunAnswers, Verdict, WaitState};
use soakdown::model::*;
use soakdown::run::LONGEST;
use std::sync::Arc;
use uom::si::f64::TemperatureInterval;
use uom::si::temperature_interval::kelvin as kelvins;

/// A layer of one temperature, of this heat capacity per area.
fn lump(name: &str, capacity: f64) -> Result<Layer, ModelError> {
    layer(name, &material(1e6, 1000.0, capacity)?, 0.001)
}

/// A steel liner in a felt: after 4 s of 1 MW/m² its outer face is as cold as before, and a minute later hot (wall W2 of the multilayer checks).
fn insulated_liner(phases: Vec<Phase>, waits: Vec<(Place, f64)>, limits: [Option<Limit>; 3]) -> Result<Model, ModelError> {
    let [liner, bond, felt] = limits;
    Wall {
        heating: absorbed(1e6)?,
        outer: outside(10.0, 0.0)?,
        phases,
        waits,
        ..Wall::of(vec![
            layer("liner", &material(16.2, 8000.0, 500.0)?, 0.003)?
                .with_limit(liner)
                .with_joint(Some(Joint::new(None, bond))),
            layer("felt", &material(0.12, 128.0, 1100.0)?, 0.012)?.with_limit(felt),
        ])?
    }
    .model()
}

fn limit_of(place: &PlaceAnswer) -> Result<&LimitAnswer, &'static str> {
    place.limit.as_ref().ok_or("no limit answered")
}

/// A lump under 30 kW/m² for 40 s that loses 20 W/(m²·K) outside, its limit at 400 K.
fn lump_with_limit(limit: Option<Limit>, allowance: Allowance) -> Result<RunAnswers, Box<dyn std::error::Error>> {
    let model = Wall {
        heating: absorbed(LUMP_FLUX)?,
        outer: outside(LUMP_LOSS, 0.0)?,
        phases: vec![burn(LUMP_BURN)?],
        waits: vec![(Place::OuterFace, 320.0)],
        allowance,
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?.with_limit(limit)])?
    };
    answered(&model.model()?)
}

const LUMP_FLUX: f64 = 30_000.0;
const LUMP_LOSS: f64 = 20.0;
const LUMP_BURN: f64 = 40.0;
const LUMP_CAPACITY: f64 = 8000.0;

/// Its peak: T₀ + q/h (1 − exp(−h t/C)).
fn lump_peak(flux: f64) -> f64 {
    300.0 - flux / LUMP_LOSS * (-LUMP_LOSS * LUMP_BURN / LUMP_CAPACITY).exp_m1()
}

/// COMPUTED: when it passes a temperature and for how long in all, from the exponentials of heating and of cooling.
fn lump_time_over(passed: f64) -> (f64, f64) {
    let rate = LUMP_LOSS / LUMP_CAPACITY;
    let up = -(1.0 - (passed - 300.0) * LUMP_LOSS / LUMP_FLUX).ln() / rate;
    let down = LUMP_BURN + ((lump_peak(LUMP_FLUX) - 300.0) / (passed - 300.0)).ln() / rate;
    (up, down - up)
}

#[test]
fn a_wait_counts_from_the_last_time_the_place_comes_down() -> Outcome {
    let below = 350.0;
    let model = insulated_liner(vec![burn(4.0)?], vec![(Place::OuterFace, below)], [None, None, None])?;
    let answers = answered(&model)?;
    let station = &answers.stations[0];
    let (wait, slope) = cooled(&station.waits[0])?;
    let clock = wait + 4.0;
    let top = station.soak_back.outer_face_peak;
    let (_, trace) = history(&model, &[4.0, 0.5 * top, top, 0.999 * clock, clock, 1.001 * clock, 2.0 * clock])?;
    let outer: Vec<f64> = trace.iter().map(|row| row.faces[3]).collect();
    assert!(outer[0] < below, "cool at shutdown: {outer:?}");
    assert!(outer[2] > below + 50.0, "hot by soak-back: {outer:?}");
    assert!(wait > top, "the wait ends before the soak-back peak: {wait} s, {top} s");
    assert!(
        (outer[4] - below).abs() < PROMISE && outer[3] > below && outer[5] < below && outer[6] < below,
        "{outer:?}"
    );
    let measured = (0.002 * clock) / (outer[3] - outer[5]);
    assert!((slope / measured - 1.0).abs() < 0.01, "{slope} s/K, from the trace {measured} s/K");
    assert!((station.soak_back.outer_face_rise - (outer[2] - outer[0])).abs() < PROMISE);
    assert!(answers.computed_until >= clock);
    Ok(())
}

#[test]
fn a_wait_counts_from_the_end_of_the_last_burn() -> Outcome {
    // COMPUTED: heated in two burns with a hold between, a lump cools by its exponential from the end of the second one.
    let rate = LUMP_LOSS / LUMP_CAPACITY;
    let model = Wall {
        heating: absorbed(LUMP_FLUX)?,
        outer: outside(LUMP_LOSS, 0.0)?,
        phases: vec![burn(40.0)?, hold(100.0)?, burn(20.0)?, shutdown(10.0)?],
        waits: vec![(Place::HotFace, 333.15)],
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?])?
    }
    .model()?;
    let heated = |rise: f64, duration: f64| LUMP_FLUX / LUMP_LOSS + (rise - LUMP_FLUX / LUMP_LOSS) * (-rate * duration).exp();
    let rise = heated(heated(0.0, 40.0) * (-rate * 100.0).exp(), 20.0);
    let answers = answered(&model)?;
    let (wait, slope) = cooled(&answers.stations[0].waits[0])?;
    let expected = (rise / 33.15).ln() / rate;
    assert!(((wait - expected) / slope).abs() < PROMISE, "{wait} s, not {expected} s");
    assert_eq!(answers.last_burn_end, Some(160.0));
    Ok(())
}

#[test]
fn a_bond_line_may_peak_after_the_burn_and_after_the_written_end() -> Outcome {
    // Composite over steel over felt (wall W4 of the multilayer checks): the bond line is cold until long after this profile's end.
    let wall = |bond: f64| {
        Wall {
            heating: absorbed(2e5)?,
            outer: outside(10.0, 0.0)?,
            phases: vec![burn(4.0)?, shutdown(6.0)?],
            ..Wall::of(vec![
                layer("composite", &material(0.6, 1700.0, 1200.0)?, 0.006)?.with_joint(Some(Joint::new(None, limit(bond)?))),
                layer("steel", &material(16.2, 8000.0, 500.0)?, 0.002)?,
                layer("felt", &material(0.12, 128.0, 1100.0)?, 0.010)?,
            ])?
        }
        .model()
    };
    let (written_end, bond) = (10.0, 320.0);
    let model = wall(bond)?;
    let (answers, trace) = history(&model, &[written_end, 60.0])?;
    let joint = &answers.stations[0].joints[0];
    // COMPUTED (multilayer checks, W4): 301.1746 K at the written end, 331.3251 K at 60 s.
    assert!((trace[0].faces[1] - 301.1746001).abs() < PROMISE && (trace[1].faces[1] - 331.3250593).abs() < PROMISE);
    assert!(joint.at.peak > 331.3 && joint.at.peak_time > 60.0, "{joint:?}");
    assert_eq!(joint.at.peak_phase, PhaseKind::Shutdown);
    let limit = limit_of(&joint.at)?;
    assert!(!limit.kept && limit.first_over.is_some_and(|first| first > written_end), "{limit:?}");
    assert!((limit.margin - (bond - joint.at.peak)).abs() < 1e-9);
    assert_eq!(answers.verdict, Verdict::OverLimit);
    assert!(
        answers.worst.as_ref().is_some_and(|worst| worst.place == "composite|steel"),
        "{:?}",
        answers.worst
    );
    assert!(answers.computed_until > joint.at.peak_time);
    assert_eq!(answered(&wall(345.0)?)?.verdict, Verdict::WithinLimits);
    Ok(())
}

#[test]
fn what_its_surroundings_hold_above_the_value_never_cools_to_it() -> Outcome {
    // The outer face is cooled by air of 300 K, but the idle hot face stands in gas of 500 K: between 20 and 10 W/(m²·K) it settles at 433 K.
    let wall = |below: f64| {
        Wall {
            heating: absorbed(1e6)?,
            idle: Idle::new(coefficient(20.0), temperature(500.0), pure(0.0), 0.0)?,
            outer: outside(10.0, 0.0)?,
            phases: vec![burn(2.0)?],
            waits: vec![(Place::OuterFace, below)],
            ..Wall::of(vec![layer("body", &material(400.0, 8000.0, 500.0)?, 0.003)?])?
        }
        .model()
    };
    for below in [310.0, 400.0, 430.0] {
        let answers = answered(&wall(below)?)?;
        assert_eq!(answers.stations[0].waits[0].state, WaitState::Never, "{below} K");
        assert!(
            answers.computed_until < 0.1 * LONGEST,
            "found without integrating for ever: {} s",
            answers.computed_until
        );
    }
    assert!(cooled(&answered(&wall(436.0)?)?.stations[0].waits[0])?.0 > 0.0);
    // Warm air outside alone.
    let model = Wall {
        outer: outside(10.0, 0.5)?,
        start: 500.0,
        ambient: 318.0,
        waits: vec![(Place::OuterFace, 317.0), (Place::OuterFace, 319.0)],
        ..Wall::of(vec![layer("body", &material(40.0, 8000.0, 500.0)?, 0.003)?])?
    };
    let waits = answered(&model.model()?)?.stations[0].waits.clone();
    assert_eq!(waits[0].state, WaitState::Never);
    assert!(matches!(waits[1].state, WaitState::Cools { .. }), "{:?}", waits[1]);
    Ok(())
}

#[test]
fn an_insulated_wall_never_cools_below_what_it_evens_out_to() -> Outcome {
    // COMPUTED: 1 MW/m² for 4 s into 12 kJ/(m²·K) of steel and 1.69 kJ/(m²·K) of felt: 300 K + 4e6/13690 K = 592.2 K.
    let wall = |below: f64| {
        Wall {
            heating: absorbed(1e6)?,
            phases: vec![burn(4.0)?],
            waits: vec![(Place::HotFace, below)],
            ..Wall::of(vec![
                layer("liner", &material(16.2, 8000.0, 500.0)?, 0.003)?,
                layer("felt", &material(0.12, 128.0, 1100.0)?, 0.012)?,
            ])?
        }
        .model()
    };
    let mean = 300.0 + 4e6 / (12_000.0 + 128.0 * 1100.0 * 0.012);
    assert_eq!(answered(&wall(mean - 1.0)?)?.stations[0].waits[0].state, WaitState::Never);
    assert!(matches!(
        answered(&wall(mean + 1.0)?)?.stations[0].waits[0].state,
        WaitState::Cools { .. }
    ));
    Ok(())
}

#[test]
fn margins_are_against_the_peak_over_all_time_and_depth() -> Outcome {
    let kept = 800.0;
    let model = insulated_liner(vec![burn(4.0)?], Vec::new(), [limit(kept)?, limit(kept)?, limit(kept)?])?;
    let mut times: Vec<f64> = (0..400).map(|row| 0.01 * 1.03_f64.powi(row)).filter(|time| *time < 2000.0).collect();
    times.push(4.0);
    times.sort_by(f64::total_cmp);
    let (answers, trace) = history(&model, &times)?;
    let station = &answers.stations[0];
    let hottest = |faces: &[usize]| trace.iter().flat_map(|row| faces.iter().map(|face| row.faces[*face])).fold(0.0, f64::max);
    // The liner peaks at its heated face as the burn ends; bond and felt just after it, when the liner has evened out.
    for (at, seen) in [(&station.layers[0].at, hottest(&[0, 1])), (&station.joints[0].at, hottest(&[1, 2]))] {
        let limit = limit_of(at)?;
        assert!(at.peak >= seen - PROMISE && at.peak <= seen + 0.5, "{at:?}, in the trace {seen} K");
        assert!((limit.margin - (kept - at.peak)).abs() < 1e-9 && limit.kept);
    }
    assert!((station.layers[0].at.peak_time - 4.0).abs() < 1e-9 && station.layers[0].at.peak_depth == 0.0);
    assert!(station.joints[0].at.peak_time > 4.1, "{:?}", station.joints[0]);
    // The felt is hottest at the bond line, not at its middle or outer face.
    let felt = &station.layers[1].at;
    assert!(
        (felt.peak - station.joints[0].at.peak).abs() < 1e-9 && (felt.peak_depth - 0.003).abs() < 1e-9,
        "{felt:?}"
    );
    assert!(station.outer_face.peak < felt.peak - 50.0);
    let worst = answers.worst.as_ref().ok_or("no worst place")?;
    assert_eq!(worst.place, "liner");
    Ok(())
}

#[test]
fn no_limits_is_a_verdict_of_its_own() -> Outcome {
    let answers = lump_with_limit(None, Allowance::none())?;
    assert_eq!(answers.verdict, Verdict::NoLimits);
    assert!(answers.worst.is_none());
    assert_eq!(answers.without_limit, ["wall/body"]);
    Ok(())
}

#[test]
fn a_place_that_never_gets_there_stays_below() -> Outcome {
    let model = insulated_liner(
        vec![burn(4.0)?],
        vec![(Place::OuterFace, 600.0), (Place::HotFace, 600.0)],
        [None, None, None],
    )?;
    let waits = answered(&model)?.stations[0].waits.clone();
    assert_eq!(waits[0].state, WaitState::StaysBelow { clock: 4.0 });
    assert!(cooled(&waits[1])?.0 > 0.0);
    // Hot during a burn, but cool again before the last one ends and never above after it: nothing to wait for.
    let model = Wall {
        heating: absorbed(LUMP_FLUX)?,
        outer: outside(200.0, 0.0)?,
        phases: vec![burn(40.0)?, hold(400.0)?, burn(0.5)?],
        waits: vec![(Place::OuterFace, 333.15)],
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?])?
    };
    let answers = answered(&model.model()?)?;
    assert!(answers.stations[0].outer_face.peak > 390.0);
    assert_eq!(answers.stations[0].waits[0].state, WaitState::StaysBelow { clock: 440.5 });
    Ok(())
}

#[test]
fn a_limit_may_be_passed_for_a_stated_time_in_all() -> Outcome {
    let passed = 400.0;
    let (up, over) = lump_time_over(passed);
    for (allowed, kept) in [(0.0, false), (0.99 * over, false), (1.01 * over, true)] {
        let answers = lump_with_limit(limit_for(passed, allowed)?, Allowance::none())?;
        let limit = limit_of(&answers.stations[0].layers[0].at)?;
        assert!((limit.time_over / over - 1.0).abs() < 1e-3, "{} s over, not {over} s", limit.time_over);
        assert!(
            limit.first_over.is_some_and(|first| (first / up - 1.0).abs() < 1e-3),
            "{limit:?}, not {up} s"
        );
        assert_eq!(limit.kept, kept, "{allowed} s allowed: {limit:?}");
        assert!(limit.margin < 0.0, "{limit:?}");
        assert_eq!(answers.verdict, if kept { Verdict::WithinLimits } else { Verdict::OverLimit });
    }
    Ok(())
}

#[test]

fn the_time_above_a_limit_is_counted_to_its_end_though_nobody_asks_for_a_wait() -> Outcome {
    let model = Wall {
        heating: absorbed(LUMP_FLUX)?,
        outer: outside(LUMP_LOSS, 0.0)?,
        phases: vec![burn(LUMP_BURN)?],
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?.with_limit(limit_for(400.0, 100.0)?)])?
    }
    .model()?;
    let answers = answered(&model)?;
    let limit = limit_of(&answers.stations[0].layers[0].at)?;
    let over = lump_time_over(400.0).1;
    assert!((limit.time_over / over - 1.0).abs() < 1e-3, "{} s over, not {over} s", limit.time_over);
    assert!(!limit.kept, "{limit:?}");
    Ok(())
}

#[test]

fn a_limit_that_stays_passed_is_not_kept_by_any_allowed_time() -> Outcome {
    // An insulated lump keeps its heat: 400 K + 50 K for ever.
    let model = Wall {
        heating: absorbed(LUMP_FLUX)?,
        phases: vec![burn(LUMP_BURN)?],
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?.with_limit(limit_for(400.0, 3600.0)?)])?
    }
    .model()?;
    let answers = answered(&model)?;
    let limit = limit_of(&answers.stations[0].layers[0].at)?;
    assert!(!limit.kept, "{limit:?}");
    assert_eq!(answers.verdict, Verdict::OverLimit);
    Ok(())
}

#[test]
fn a_limit_kept_only_without_the_allowance_is_said_so() -> Outcome {
    let degrees = |value: f64| TemperatureInterval::new::<kelvins>(value);
    let peak = lump_peak(LUMP_FLUX);
    let with = |allowance| lump_with_limit(limit(peak + 10.0)?, allowance);
    let bare = with(Allowance::none())?;
    assert_eq!(bare.verdict, Verdict::WithinLimits);
    assert!((limit_of(&bare.stations[0].layers[0].at)?.margin - 10.0).abs() < PROMISE);
    for (allowance, verdict, margin) in [
        (Allowance::new(degrees(5.0), 1.0)?, Verdict::WithinLimits, 5.0),
        (Allowance::new(degrees(20.0), 1.0)?, Verdict::InsideAllowance, -10.0),
        // A tenth more heat is 14 K more here.
        (Allowance::new(degrees(0.0), 1.1)?, Verdict::InsideAllowance, 10.0),
        (Allowance::new(degrees(0.0), 1.01)?, Verdict::WithinLimits, 10.0),
    ] {
        let answers = with(allowance.clone())?;
        assert_eq!(answers.verdict, verdict, "{allowance:?}");
        let at = &answers.stations[0].layers[0].at;
        assert!(
            (limit_of(at)?.margin - margin).abs() < PROMISE && limit_of(at)?.kept,
            "{allowance:?}: {at:?}"
        );
        assert!((at.peak - peak).abs() < PROMISE, "peaks are shown without the allowance: {at:?}");
    }
    Ok(())
}

#[test]
fn a_passed_melting_point_is_outside_the_model() -> Outcome {
    let solid = material(1e6, 1000.0, LUMP_CAPACITY)?;
    for (melts, verdict) in [
        (lump_peak(LUMP_FLUX) - 1.0, Verdict::OutsideModel),
        (lump_peak(LUMP_FLUX) + 1.0, Verdict::WithinLimits),
    ] {
        let meltable = Arc::new(Material::new(MaterialValues {
            name: "solder".into(),
            density: uom::si::f64::MassDensity::new::<uom::si::mass_density::kilogram_per_cubic_meter>(1000.0),
            heat_capacity: Table::constant(uom::si::f64::SpecificHeatCapacity::new::<
                uom::si::specific_heat_capacity::joule_per_kilogram_kelvin,
            >(LUMP_CAPACITY)),
            conductivity: Table::constant(uom::si::f64::ThermalConductivity::new::<
                uom::si::thermal_conductivity::watt_per_meter_kelvin,
            >(1e6)),
            melts: Some(temperature(melts)),
            decomposes: None,
        })?);
        for (body, expected) in [(&meltable, verdict), (&solid, Verdict::WithinLimits)] {
            let model = Wall {
                heating: absorbed(LUMP_FLUX)?,
                outer: outside(LUMP_LOSS, 0.0)?,
                phases: vec![burn(LUMP_BURN)?],
                ..Wall::of(vec![layer("body", body, 0.001)?.with_limit(limit(900.0)?)])?
            };
            assert_eq!(answered(&model.model()?)?.verdict, expected, "melts at {melts} K");
        }
    }
    Ok(())
}

/// What an insulated lump of 8 kJ/(m²·K) has taken up under 100 kW/m², as a time at full flux, s.
fn full_flux_time(phases: Vec<Phase>) -> Result<f64, Box<dyn std::error::Error>> {
    let model = Wall {
        heating: absorbed(1e5)?,
        phases,
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?])?
    };
    let answers = answered(&model.model()?)?;
    let peak = answers.stations[0].hot_face.peak;
    let energy = answers.stations[0].energy.inward;
    assert!((energy / LUMP_CAPACITY - (peak - 300.0)).abs() < PROMISE, "{energy} J/m², peak {peak} K");
    Ok((peak - 300.0) * LUMP_CAPACITY / 1e5)
}

#[test]
fn ramps_and_tails_carry_their_heat_and_the_next_burn_ends_a_tail() -> Outcome {
    let ramped = |duration: f64, ramp: f64, tail: f64| burn(duration)?.with_ramp_and_tail(seconds(ramp), seconds(tail));
    // Areas under straight lines; the scale of a burn is level^0.8 (Bartz 1957).
    let cases: Vec<(&str, Vec<Phase>, f64)> = vec![
        ("full", vec![burn(10.0)?], 10.0),
        ("ramp", vec![ramped(10.0, 4.0, 0.0)?], 8.0),
        ("tail", vec![ramped(10.0, 0.0, 3.0)?], 11.5),
        ("both", vec![ramped(10.0, 4.0, 3.0)?], 9.5),
        (
            "tail over a hold's end",
            vec![ramped(10.0, 0.0, 3.0)?, hold(1.0)?, hold(1.0)?, shutdown(0.0)?],
            11.5,
        ),
        (
            "next burn ends the tail",
            vec![ramped(10.0, 0.0, 4.0)?, hold(2.0)?, burn(5.0)?],
            10.0 + 1.5 + 5.0,
        ),
        ("burn upon burn ends the tail", vec![ramped(10.0, 0.0, 4.0)?, burn(5.0)?], 15.0),
        ("ramp longer than its burn", vec![ramped(2.0, 4.0, 0.0)?], 0.5),
        ("tail from where that ramp came to", vec![ramped(2.0, 4.0, 4.0)?], 0.5 + 1.0),
        ("half level", vec![burn(10.0)?.at_level(0.5)?], 10.0 * 0.5_f64.powf(0.8)),
        (
            "half level, ramp and tail",
            vec![ramped(10.0, 4.0, 3.0)?.at_level(0.5)?],
            9.5 * 0.5_f64.powf(0.8),
        ),
    ];
    for (name, phases, expected) in cases {
        let found = full_flux_time(phases)?;
        // The promise as a time at full flux.
        assert!(
            (found - expected).abs() < PROMISE * LUMP_CAPACITY / 1e5,
            "{name}: {found} s, not {expected} s"
        );
    }
    Ok(())
}

#[test]
fn heat_of_a_tail_after_the_last_burn_counts_for_peaks_and_waits() -> Outcome {
    // COMPUTED: a lump that loses 20 W/(m²·K), 30 kW/m² for 40 s and falling to nothing in 20 s more.
    let (tail, rate) = (20.0, LUMP_LOSS / LUMP_CAPACITY);
    let model = Wall {
        heating: absorbed(LUMP_FLUX)?,
        outer: outside(LUMP_LOSS, 0.0)?,
        phases: vec![burn(LUMP_BURN)?.with_ramp_and_tail(seconds(0.0), seconds(tail))?],
        waits: vec![(Place::OuterFace, 350.0)],
        ..Wall::of(vec![lump("body", LUMP_CAPACITY)?])?
    }
    .model()?;
    let (end, full) = (lump_peak(LUMP_FLUX) - 300.0, LUMP_FLUX / LUMP_LOSS);
    // u' = r (f (1 − s/τ) − u): u = f (1 − s/τ + 1/(r τ)) + c exp(−r s).
    let constant = end - full * (1.0 + 1.0 / (rate * tail));
    let rise = |since: f64| full * (1.0 - since / tail + 1.0 / (rate * tail)) + constant * (-rate * since).exp();
    let top = (-rate * tail * constant / full).ln() / rate;
    let wait = tail + (rise(tail) / 50.0).ln() / rate;
    let station = &answered(&model)?.stations[0];
    assert!(top > 1.0 && top < tail, "{top} s");
    assert!(
        (station.outer_face.peak - 300.0 - rise(top)).abs() < PROMISE,
        "{:?}, not {} K",
        station.outer_face,
        300.0 + rise(top)
    );
    assert!(
        (station.soak_back.outer_face_peak - LUMP_BURN - top).abs() < 0.5,
        "{:?}",
        station.soak_back
    );
    let (found, slope) = cooled(&station.waits[0])?;
    assert!(((found - wait) / slope).abs() < PROMISE, "{found} s, not {wait} s");
    Ok(())
}
