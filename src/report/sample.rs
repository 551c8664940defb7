//! A case and its answers, built by hand for the tests of this room: an invented chamber. The numbers only have to look like a run's.

use crate::answers::{
    CheckAnswers, Energy, EvenedOut, HeatingCheck, JointAnswer, LayerAnswer, LimitAnswer, Numerical, PhaseCheck, PlaceAnswer, ProbeAnswer,
    RunAnswers, SoakBack, StationAnswers, StationCheck, Steady, SteadyState, Verdict, WaitAnswer, WaitState, Worst,
};
use crate::case::{Case, CaseFile, Input, InputValue};
use crate::diagnostics::{Diagnostics, Notice};
use crate::model::{
    Allowance, Convection, Heating, HeatingModel, Idle, Joint, Layer, Limit, LimitKind, LimitOrigin, Losses, Material, MaterialValues, Model,
    ModelParts, OuterFace, Outside, Phase, PhaseKind, Place, Profile, Purge, Resistance, Shape, Station, StationValues, Surroundings, Table, Wait,
};
use std::sync::Arc;
use uom::si::f64::{
    HeatFluxDensity, HeatTransfer, Length, MassDensity, Pressure, Ratio, SpecificHeatCapacity, TemperatureInterval, ThermalConductivity,
    ThermodynamicTemperature, Time,
};
use uom::si::{
    heat_flux_density::watt_per_square_meter, heat_transfer::watt_per_square_meter_kelvin, length::millimeter,
    mass_density::kilogram_per_cubic_meter, pressure::pascal, ratio::ratio, specific_heat_capacity::joule_per_kilogram_kelvin, temperature_interval,
    thermal_conductivity::watt_per_meter_kelvin, thermodynamic_temperature::degree_celsius, time::second,
};

/// What no screen and no page says.
pub(super) const FORBIDDEN: [&str; 7] = ["safe", "safely", "all clear", "cool to touch", "permitted", "allowed", "unlimited"];

/// Whether a text says these words (so that "safety" is not taken for "safe").
pub(super) fn says(text: &str, words: &str) -> bool {
    let plain: String = text
        .to_lowercase()
        .chars()
        .map(|letter| if letter.is_alphanumeric() { letter } else { ' ' })
        .collect();
    let plain = format!(" {} ", plain.split_whitespace().collect::<Vec<_>>().join(" "));
    plain.contains(&format!(" {words} "))
}

/// A text without its escape codes.
pub(super) fn plain(text: &str) -> String {
    let mut parts = text.split("\u{1b}[");
    let mut plain = parts.next().unwrap_or_default().to_owned();
    for part in parts {
        plain.push_str(part.split_once('m').map_or("", |(_, rest)| rest));
    }
    plain
}

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(value)
}

fn seconds(value: f64) -> Time {
    Time::new::<second>(value)
}

fn film(value: f64) -> HeatTransfer {
    HeatTransfer::new::<watt_per_square_meter_kelvin>(value)
}

fn emissivity() -> Table {
    Table::constant(Ratio::new::<ratio>(0.3))
}

fn limit(value: f64, kind: LimitKind, origin: LimitOrigin) -> Option<Limit> {
    Some(Limit::new(celsius(value), kind, origin, seconds(0.0)).expect("a limit"))
}

fn layer(name: &str, material: &str, conductivity: f64, thickness: f64) -> Layer {
    let material = Material::new(MaterialValues {
        name: material.into(),
        density: MassDensity::new::<kilogram_per_cubic_meter>(8000.0),
        heat_capacity: Table::constant(SpecificHeatCapacity::new::<joule_per_kilogram_kelvin>(400.0)),
        conductivity: Table::constant(ThermalConductivity::new::<watt_per_meter_kelvin>(conductivity)),
        melts: None,
        decomposes: None,
    });
    Layer::new(name, Arc::new(material.expect("a material")), Length::new::<millimeter>(thickness)).expect("a layer")
}

fn station() -> Station {
    let joint = Joint::new(
        Some(Resistance::contact(film(5000.0)).expect("a contact")),
        limit(250.0, LimitKind::Bond, LimitOrigin::Case),
    );
    let idle = Idle::new(film(5.0), celsius(20.0), emissivity(), 0.2).expect("an idle face");
    let outside = Losses::new(
        Convection::natural_vertical(Length::new::<millimeter>(300.0)).expect("convection"),
        Some(emissivity()),
    );
    Station::new(StationValues {
        name: "throat".into(),
        shape: Shape::cylinder(Length::new::<millimeter>(40.0)).expect("a shape"),
        layers: vec![
            layer("coating", "zirconia", 1.0, 0.25),
            layer("liner", "copper", 380.0, 8.0)
                .with_limit(limit(600.0, LimitKind::Service, LimitOrigin::Library))
                .with_joint(Some(joint)),
            layer("jacket", "stainless-304", 15.0, 3.0).with_limit(limit(600.0, LimitKind::Strength, LimitOrigin::Case)),
        ],
        heating: Some(Heating::new(HeatingModel::film(film(4000.0), celsius(2726.85)).expect("heating"))),
        idle: idle.with_purge(Some(Purge::new(film(40.0), celsius(15.0)).expect("a purge"))),
        outer: OuterFace::new(
            Outside::Open(outside.expect("losses")),
            limit(200.0, LimitKind::Service, LimitOrigin::Case),
        ),
    })
    .expect("a station")
    .with_probe("TC1", Length::new::<millimeter>(4.0), None, seconds(0.3))
    .expect("a probe")
    .with_probe("TC2", Length::new::<millimeter>(11.25), None, seconds(0.0))
    .expect("a probe")
}

/// An invented chamber: coating, liner, jacket; a perfect and a resisting joint; a probe with a lag and one without.
pub(super) fn case() -> Case {
    let model = Model::new(ModelParts {
        title: "Heat-sink chamber, 2 s firing".into(),
        surroundings: Surroundings::new(
            celsius(20.0),
            celsius(20.0),
            Pressure::new::<pascal>(101_325.0),
            HeatFluxDensity::new::<watt_per_square_meter>(0.0),
        )
        .expect("surroundings"),
        start: celsius(20.0),
        profile: Profile::new(vec![
            Phase::burn(seconds(2.0))
                .and_then(|burn| burn.with_ramp_and_tail(seconds(0.1), seconds(0.1)))
                .expect("a burn"),
            Phase::hold(seconds(30.0)).expect("a hold").with_purge(true),
            Phase::shutdown(seconds(7200.0)).expect("a shutdown"),
        ]),
        stations: vec![station()],
        waits: vec![
            Wait::new("hands on the jacket", 0, Place::OuterFace, celsius(48.0))
                .expect("a wait")
                .meaning("bare skin up to 10 min"),
            Wait::new("next firing", 0, Place::Everywhere, celsius(40.0)).expect("a wait"),
        ],
        allowance: Allowance::none(),
        tolerance: TemperatureInterval::new::<temperature_interval::kelvin>(0.05),
    });
    let input = |path: &str, value, unit, from: &str| Input {
        path: path.into(),
        value,
        unit,
        from: from.into(),
    };
    Case {
        path: "chamber.toml".into(),
        digest: "sha256:00".into(),
        files: vec![CaseFile {
            path: "heat.csv".into(),
            digest: "sha256:01".into(),
        }],
        model: model.expect("a model"),
        log_format: None,
        inputs: vec![
            input("surroundings.air", InputValue::Number(293.15), "K", "case"),
            input("surroundings.pressure", InputValue::Number(101_325.0), "Pa", "default"),
            input("solver.tolerance", InputValue::Number(0.05), "K", "default"),
            input("station.throat.layers.liner.thickness", InputValue::Number(0.008), "m", "case"),
            input("station.throat.outside.convection", InputValue::Word("natural".into()), "", "case"),
            input("station.throat.heating.open", InputValue::Switch(false), "", "default"),
            input(
                "material.copper.conductivity",
                InputValue::Table(vec![(293.15, 390.0), (1273.15, 330.0)]),
                "W/m/K",
                "handbook of an invented author, a long title that goes on and on until it no longer fits into the line of a page",
            ),
        ],
        notices: vec![Notice {
            code: "odd-value",
            text: "an odd value".into(),
            station: Some("throat".into()),
            place: None,
        }],
        doubts: Diagnostics::default(),
    }
}

fn place(peak: f64, peak_time: f64, peak_phase: PhaseKind, peak_depth: f64) -> PlaceAnswer {
    PlaceAnswer {
        peak: peak + 273.15,
        peak_time,
        peak_phase,
        peak_depth,
        limit: None,
    }
}

fn limited(place: PlaceAnswer, value: f64, kind: LimitKind, origin: LimitOrigin) -> PlaceAnswer {
    let limit = value + 273.15;
    PlaceAnswer {
        limit: Some(LimitAnswer {
            limit,
            kind,
            origin,
            allowance: 0.0,
            margin: limit - place.peak,
            first_over: None,
            time_over: 0.0,
            allowed_over: 0.0,
            kept: place.peak <= limit,
        }),
        ..place
    }
}

/// Answers of a run of [`case`].
pub(super) fn answers() -> RunAnswers {
    use PhaseKind::{Burn, Hold, Shutdown};
    let layer = |name: &str, material: &str, at| LayerAnswer {
        name: name.into(),
        material: material.into(),
        at,
    };
    let joint = |inner: &str, outer: &str, at| JointAnswer {
        between: [inner.into(), outer.into()],
        at,
    };
    let station = StationAnswers {
        name: "throat".into(),
        mass: 96.91,
        thickness: 0.01125,
        layers: vec![
            layer("coating", "zirconia", place(1243.17, 2.0, Burn, 0.0)),
            layer(
                "liner",
                "copper",
                limited(place(312.44, 2.013, Hold, 0.00025), 600.0, LimitKind::Service, LimitOrigin::Library),
            ),
            layer(
                "jacket",
                "stainless-304",
                limited(place(187.21, 41.37, Shutdown, 0.01125), 600.0, LimitKind::Strength, LimitOrigin::Case),
            ),
        ],
        joints: vec![
            joint("coating", "liner", place(312.44, 2.013, Hold, 0.00025)),
            joint(
                "liner",
                "jacket",
                limited(place(225.91, 12.3, Hold, 0.00825), 250.0, LimitKind::Bond, LimitOrigin::Case),
            ),
        ],
        hot_face: place(1243.17, 2.0, Burn, 0.0),
        outer_face: limited(place(187.21, 41.37, Shutdown, 0.01125), 200.0, LimitKind::Service, LimitOrigin::Case),
        probes: vec![
            ProbeAnswer {
                name: "TC1".into(),
                depth: 0.004,
                peak: 560.0,
                peak_time: 2.4,
                peak_true: 565.0,
            },
            ProbeAnswer {
                name: "TC2".into(),
                depth: 0.01125,
                peak: 460.36,
                peak_time: 41.37,
                peak_true: 460.36,
            },
        ],
        log: None,
        soak_back: SoakBack {
            outer_face_rise: 131.14,
            outer_face_peak: 41.37,
            last_peak: Some((41.37, 0.01125)),
        },
        evened_out: EvenedOut::From(63.21),
        steady: Steady::At(SteadyState {
            hot_face: 2500.0,
            outer_face: 900.0,
            hot_face_reached: Some(0.4912),
            outer_face_reached: Some(0.0512),
            time_to_95_percent: Some(412.3),
            within_limits: false,
        }),
        waits: vec![
            WaitAnswer {
                name: "hands on the jacket".into(),
                place: "outer-face".into(),
                below: 321.15,
                meaning: Some("bare skin up to 10 min".into()),
                state: WaitState::Cools {
                    wait: 5312.4,
                    clock: 5314.4,
                    slope: 310.0,
                },
            },
            WaitAnswer {
                name: "next firing".into(),
                place: "everywhere".into(),
                below: 313.15,
                meaning: None,
                state: WaitState::Cools {
                    wait: 9300.3,
                    clock: 9302.3,
                    slope: 612.0,
                },
            },
        ],
        energy: Energy {
            inward: 11.21e6,
            gross_inward: 11.4e6,
            outward: 9.1e6,
            gross_outward: 9.1e6,
            stored: 2.11e6,
            imbalance: 2.1e-12,
        },
        numerical: Numerical {
            nodes: 96,
            steps: 64,
            estimated_error: 0.03,
        },
    };
    RunAnswers {
        verdict: Verdict::WithinLimits,
        worst: Some(Worst {
            station: "throat".into(),
            place: "outer-face".into(),
            margin: 12.79,
        }),
        without_limit: vec!["throat/coating".into()],
        last_burn_end: Some(2.0),
        computed_until: 9316.0,
        stations: vec![station],
        findings: vec![],
    }
}

/// What a check of [`case`] finds.
pub(super) fn check() -> CheckAnswers {
    let phase = |kind, start, duration| PhaseCheck {
        kind,
        start,
        duration,
        level: 1.0,
        ramp: 0.0,
        tail: 0.0,
        purge: false,
    };
    let mut phases = vec![PhaseCheck {
        ramp: 0.1,
        tail: 0.1,
        ..phase(PhaseKind::Burn, 0.0, 2.0)
    }];
    for index in 0..40 {
        let start = 2.0 + 5.0 * f64::from(index);
        phases.push(phase(PhaseKind::Hold, start, 4.0));
        phases.push(phase(PhaseKind::Burn, start + 4.0, 1.0));
    }
    phases.push(PhaseCheck {
        purge: true,
        ..phase(PhaseKind::Shutdown, 202.0, 7200.0)
    });
    CheckAnswers {
        stations: vec![StationCheck {
            name: "throat".into(),
            nodes: 96,
            heating: Some(HeatingCheck {
                wall: 293.15,
                coefficient: Some(4000.0),
                gas_temperature: Some(3000.0),
                flux: 10.83e6,
                parts: vec![("convection", 10.83e6)],
            }),
        }],
        phases,
    }
}
