//! Cautions chosen by situation: what a person must know before acting on an answer. Each one defers to those who decide on site.

use super::figures::{Figures, Units, clock};
use crate::answers::{Finding, RunAnswers, StationAnswers, Verdict, WaitState};
use crate::model::{Kelvin, KelvinDifference, LimitOrigin, Model, Station};

/// A caution.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Caution {
    /// A fixed name, such as `hot-surface`.
    pub code: &'static str,
    /// The whole caution.
    pub text: String,
    /// The caution in one line of a page.
    pub short: String,
}

/// Above this, long contact (10 min) can burn skin, whatever the surface: ISO 13732-1:2006, table 1 (from memory).
const BURN_THRESHOLD: Kelvin = 321.15;
/// A rise after the burn that counts as soak-back.
const SOAK_BACK: KelvinDifference = 1.0;

/// Cautions that follow from the case alone.
pub fn cautions_of_case(model: &Model) -> Vec<Caution> {
    let mut list = Vec::new();
    let burns = model.profile().last_burn().is_some();
    if burns {
        list.push(Caution {
            code: "residual-propellant",
            text: "Hot surfaces can ignite residual propellant, vapour and leaks after the engine has stopped. Vent, purge and measure vapour before anyone comes \
                   near, as the site's safety plan says."
                .into(),
            short: "hot walls can ignite residual propellant: vent, purge, measure, as the site's safety plan says".into(),
        });
        list.push(Caution {
            code: "pressure",
            text: "Temperatures alone were judged here. Hot material is weaker: stress under chamber and coolant pressure, creep, fatigue and leak paths \
                   are for a licensed engineer to judge, at these temperatures."
                .into(),
            short: "temperatures only: strength under pressure at these temperatures is for a licensed engineer".into(),
        });
    }
    if model.profile().phases().iter().any(|phase| phase.purge) {
        list.push(Caution {
            code: "purge",
            text: "A purge is counted on. Inert gas displaces air and kills without warning in pits, cells and chambers: measure oxygen before entry, as \
                   local codes ask. If the purge fails or is not run as written, these waits and peaks do not hold."
                .into(),
            short: "purge gas asphyxiates: measure oxygen before entry, as local codes ask; no purge, other waits".into(),
        });
    }
    if model.surroundings().pressure == 0.0 {
        list.push(Caution {
            code: "vacuum",
            text: "This is computed for a vacuum: nothing but radiation and contact cools the wall. In air the waits and the outer temperatures differ; \
                   letting air onto hot parts has risks of its own, which the site's safety plan covers."
                .into(),
            short: "computed for a vacuum: letting air onto hot parts is another case; see the site's safety plan".into(),
        });
    }
    let limits: Vec<LimitOrigin> = model.stations().iter().flat_map(limit_origins).collect();
    if limits.contains(&LimitOrigin::Library) {
        list.push(Caution {
            code: "library-limit",
            text:
                "A limit taken from a material, not written at the layer, is a usual service temperature: a margin against it is no design margin. A \
                   licensed engineer sets the limits of a design."
                    .into(),
            short: "a margin against a library limit is no design margin: a licensed engineer sets the limits".into(),
        });
    }
    if !limits.is_empty() && !model.allowance().given() {
        list.push(Caution {
            code: "no-allowance",
            text:
                "No allowance is taken: every margin is against the bare limit with the heating as given. Heating is seldom known better than 20 % \
                   (common practice, no source); a licensed engineer chooses the allowance."
                    .into(),
            short: "no allowance taken: a licensed engineer chooses what comes off the limits and onto the heating".into(),
        });
    }
    list.push(Caution {
        code: "one-dimensional",
        text: "Heat flows through the thickness only in this model. Edges, flanges, fittings, injectors, brackets and places with other gas heating can \
               get hotter and stay hot longer; the answer is one part of what local codes, the site's safety plan and licensed engineers decide by."
            .into(),
        short: "1-D: edges, flanges, fittings can be hotter; local codes, safety plan, licensed engineers decide".into(),
    });
    list
}

/// Cautions that follow from a run, the gravest first, and those of its case.
pub fn cautions_of_run(model: &Model, answers: &RunAnswers, units: Units) -> Vec<Caution> {
    let mut list: Vec<Caution> = verdict_caution(answers).into_iter().collect();
    list.extend(substance_cautions(answers));
    list.extend(hot_surface(answers, units));
    list.extend(soak_back(answers, units));
    list.extend(unreached(answers));
    if answers.stations.iter().any(|station| !station.waits.is_empty()) {
        list.push(Caution {
            code: "measure-before-touch",
            text: "A wait holds in this model and weather only. Measure before touching, at the hottest places too; temperature is one of several \
                   conditions for entry, which the site's safety plan lists."
                .into(),
            short: "waits hold in this model only: measure; the site's safety plan lists all conditions for entry".into(),
        });
    }
    list.extend(cautions_of_case(model));
    list
}

fn verdict_caution(answers: &RunAnswers) -> Option<Caution> {
    match answers.verdict {
        Verdict::OverLimit => Some(Caution {
            code: "over-limit",
            text: "A limit is passed. Do not fire this profile on this wall on the strength of these numbers: shorten the burn, change the wall, or have a \
                   licensed engineer set another limit."
                .into(),
            short: "a limit is passed: do not fire on these numbers; changing a limit is for a licensed engineer".into(),
        }),
        Verdict::InsideAllowance => Some(Caution {
            code: "inside-allowance",
            text: "The limits are kept only by using up the allowance that the case asks for. Whether that may be used is for a licensed engineer to say."
                .into(),
            short: "the allowance is used up: whether it may be is for a licensed engineer to say".into(),
        }),
        Verdict::NoLimits => Some(Caution {
            code: "no-limits",
            text: "Nothing in this case has a limit, so nothing was judged. A licensed engineer sets limits for layers, bond lines and seals.".into(),
            short: "nothing has a limit, so nothing was judged: a licensed engineer sets the limits".into(),
        }),
        Verdict::OutsideModel | Verdict::WithinLimits => None,
    }
}

fn substance_cautions(answers: &RunAnswers) -> Vec<Caution> {
    let mut list = Vec::new();
    if answers.findings.iter().any(|finding| matches!(finding, Finding::Melts { .. })) {
        list.push(Caution {
            code: "melts",
            text:
                "A melting point is passed: molten metal, burn-through and a breach under pressure must be expected, and no number after that moment \
                   describes the wall. Keep people behind protection as the site's safety plan says."
                    .into(),
            short: "a melting point is passed: expect burn-through; people stay away as the site's safety plan says".into(),
        });
    }
    if answers.findings.iter().any(|finding| matches!(finding, Finding::Decomposes { .. })) {
        list.push(Caution {
            code: "decomposes",
            text: "A material passes its decomposition temperature: it gives off gas that can burn or poison, and no longer insulates as computed. \
                   Ventilate and protect breathing as local codes and the site's safety plan ask."
                .into(),
            short: "a material decomposes: its gas can burn or poison; ventilate as local codes ask".into(),
        });
    }
    list
}

fn hot_surface(answers: &RunAnswers, units: Units) -> Option<Caution> {
    let threshold = Figures::new(units, 0.0).given(BURN_THRESHOLD);
    let hot: Vec<String> = answers
        .stations
        .iter()
        .filter_map(|station| {
            let faces = match (station.hot_face.peak > BURN_THRESHOLD, station.outer_face.peak > BURN_THRESHOLD) {
                (true, true) => "both faces",
                (true, false) => "the hot face",
                (false, true) => "the outer face",
                (false, false) => return None,
            };
            Some(format!("{faces} of {}", station.name))
        })
        .collect();
    (!hot.is_empty()).then(|| Caution {
        code: "hot-surface",
        text: format!(
            "Hot surface: {} get{} above {threshold}, from where long contact burns skin, and may stay there long after shutdown without looking hot. \
             Barriers, gloves and signs as the site's safety plan says.",
            hot.join(", "),
            if hot.len() == 1 && !hot[0].starts_with("both") { "s" } else { "" },
        ),
        short: format!("hot surface, above {threshold}, without looking hot: barriers as the site's safety plan says"),
    })
}

fn soak_back(answers: &RunAnswers, units: Units) -> Option<Caution> {
    let end = answers.last_burn_end?;
    let station = answers
        .stations
        .iter()
        .filter(|station| station.soak_back.outer_face_rise >= SOAK_BACK || station.soak_back.last_peak.is_some())
        .max_by(|one, other| last_rise(one).total_cmp(&last_rise(other)))?;
    let latest = clock(last_rise(station) - end);
    let rise = Figures::new(units, station.numerical.estimated_error).rise(station.soak_back.outer_face_rise);
    Some(Caution {
        code: "soak-back",
        text: format!(
            "Soak-back: stored heat moves outwards after the burn, and {} gets hotter inside or outside until {latest} after it (outer face by {rise}). Do \
             not take a reading at cut-off for the peak; nobody goes near earlier than the site's safety plan says.",
            station.name
        ),
        short: format!("soak-back: hotter until {latest} after the burn; a reading at cut-off is not the peak (safety plan)"),
    })
}

/// The latest time at which any point, or the outer face, still gets hotter.
fn last_rise(station: &StationAnswers) -> f64 {
    let face = station.soak_back.outer_face_peak;
    station.soak_back.last_peak.map_or(face, |(time, _)| time.max(face))
}

fn unreached(answers: &RunAnswers) -> Vec<Caution> {
    let any = |state: WaitState| answers.stations.iter().flat_map(|station| &station.waits).any(|wait| wait.state == state);
    let mut list = Vec::new();
    if any(WaitState::Never) {
        list.push(Caution {
            code: "never-cools",
            text:
                "A place never stays below the temperature asked for: its surroundings, the sun or the purge hold it above, however long one waits. \
                   Protection against contact has to come from elsewhere, as local codes and the site's safety plan ask."
                    .into(),
            short: "a place never cools to what was asked: waiting does not help; see the site's safety plan".into(),
        });
    }
    if any(WaitState::Beyond) {
        list.push(Caution {
            code: "beyond-100-h",
            text: "A wait is not decided within 100 h: treat the place as hot for all that time and measure, as the site's safety plan says.".into(),
            short: "a wait is not decided within 100 h: treat the place as hot, as the site's safety plan says".into(),
        });
    }
    list
}

fn limit_origins(station: &Station) -> Vec<LimitOrigin> {
    let layers = station.layers().iter().filter_map(|layer| layer.limit.as_ref());
    let joints = station
        .layers()
        .iter()
        .filter_map(|layer| layer.joint.as_ref().and_then(|joint| joint.limit.as_ref()));
    layers
        .chain(joints)
        .chain(station.outer.limit.as_ref())
        .map(|limit| limit.origin)
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::page::WIDTH;
    use crate::report::sample;

    fn codes(list: &[Caution]) -> Vec<&'static str> {
        list.iter().map(|caution| caution.code).collect()
    }

    /// A run in which everything that a caution looks for has happened.
    fn worst_day() -> (Model, RunAnswers) {
        let mut model = sample::case().model;
        model.surroundings.pressure = 0.0;
        let mut answers = sample::answers();
        answers.verdict = Verdict::OverLimit;
        answers.stations[0].waits[0].state = WaitState::Never;
        answers.stations[0].waits[1].state = WaitState::Beyond;
        let (station, layer) = ("throat".to_owned(), "liner".to_owned());
        answers.findings.push(Finding::Melts {
            station: station.clone(),
            layer: layer.clone(),
            at: 1357.0,
            first: 1.0,
        });
        answers.findings.push(Finding::Decomposes {
            station,
            layer,
            at: 600.0,
            first: 1.0,
        });
        (model, answers)
    }

    #[test]
    fn cautions_follow_the_situation() {
        let case = sample::case();
        let usual = codes(&cautions_of_run(&case.model, &sample::answers(), Units::Si));
        assert_eq!(
            usual,
            [
                "hot-surface",
                "soak-back",
                "measure-before-touch",
                "residual-propellant",
                "pressure",
                "purge",
                "library-limit",
                "no-allowance",
                "one-dimensional"
            ]
        );
        let (model, answers) = worst_day();
        let all = codes(&cautions_of_run(&model, &answers, Units::Si));
        for code in ["over-limit", "melts", "decomposes", "never-cools", "beyond-100-h", "vacuum"] {
            assert!(all.contains(&code), "no {code}");
        }
    }

    #[test]
    fn a_cold_wall_is_not_called_hot() {
        let case = sample::case();
        let mut answers = sample::answers();
        let station = &mut answers.stations[0];
        station.hot_face.peak = 310.0;
        station.outer_face.peak = 300.0;
        station.soak_back.outer_face_rise = 0.0;
        station.soak_back.last_peak = None;
        let list = codes(&cautions_of_run(&case.model, &answers, Units::Si));
        assert!(!list.contains(&"hot-surface") && !list.contains(&"soak-back"));
    }

    #[test]
    fn every_caution_defers_fits_a_line_and_promises_nothing() {
        let (model, answers) = worst_day();
        for units in [Units::Si, Units::Us] {
            for verdict in [Verdict::OverLimit, Verdict::InsideAllowance, Verdict::NoLimits] {
                let answers = RunAnswers { verdict, ..answers.clone() };
                for caution in cautions_of_run(&model, &answers, units) {
                    let text = &caution.text;
                    assert!(
                        text.contains("local codes") || text.contains("the site's safety plan") || text.contains("licensed engineer"),
                        "{text}"
                    );
                    assert!(textwrap::core::display_width(&caution.short) + 2 <= WIDTH, "{}", caution.short);
                    for forbidden in sample::FORBIDDEN {
                        assert!(!sample::says(text, forbidden) && !sample::says(&caution.short, forbidden), "{text}");
                    }
                }
            }
        }
    }
}
