//! What happens: peaks, margins, soak-back, approach to steady state, waits, energy balance.

use super::accuracy::{Resolved, last_burn_start};
use super::follow::{ResolvedWall, informed, resolve_all};
use super::log::{self, reading_times};
use super::pass::{Keep, LevelOf, Pass, PassSettings, kept, limits};
use super::steady::{Burn, steady};
use super::types::*;
use crate::model::{HeatingModel, Kelvin, Limit, Model, PhaseKind, Place, Readings, Seconds, Shape, Station};
use crate::run::{Peak, Quantity, Rest, RunError, SAME};
use std::sync::atomic::AtomicBool;

/// What to compute beside the answers.
#[derive(Clone, Default)]
pub struct RunOptions<'a> {
    /// Whether to keep histories to write.
    pub history: bool,
    /// Exactly these rows in the trace; empty: the program's own, dense enough to draw.
    pub times: Vec<Seconds>,
    /// Readings of a test to put beside the run; empty: none.
    pub log: &'a [Readings],
    /// Set from outside to stop.
    pub stop: Option<&'a AtomicBool>,
    /// Told the share of the work done, as far as it is known.
    pub progress: Option<&'a (dyn Fn(f64) + Sync)>,
}

/// Answers, and histories if asked for: one for each station, with rows at the same clocks.
#[derive(Clone, Debug)]
pub struct RunOutcome {
    /// The answers.
    pub answers: RunAnswers,
    /// The histories.
    pub histories: Vec<StationHistory>,
    /// Every reading of a log beside the computed one: station by index, probe's name, and the readings in rising time.
    pub compared: Vec<(usize, String, Vec<ComparedReading>)>,
}

/// Points that get this much hotter after the last burn have a soak-back peak.
const SOAKS: f64 = 1.0;

/// Runs a model.
///
/// # Errors
/// When the integrator gives up or the run was stopped.
pub fn run(model: &Model, options: &RunOptions<'_>) -> Result<RunOutcome, RunError> {
    let written_end = model.profile.starts().last().copied().unwrap_or(0.0);
    let count = model.stations.len();
    let logged = options.log.iter().filter_map(|readings| readings.points.last()).map(|point| point.0);
    let asked = options.times.iter().copied().chain(logged).fold(0.0, f64::max);
    let progress: Vec<_> = (0..count)
        .map(|place| {
            let share = move |clock: Seconds| (place as f64 + (clock / written_end.max(1.0)).min(1.0)) / (2 * count) as f64;
            options.progress.map(|progress| move |clock: Seconds| progress(share(clock)))
        })
        .collect();
    let walls = resolve_all(model, |place| PassSettings {
        stop: options.stop,
        progress: progress[place].as_ref().map(|progress| progress as &(dyn Fn(Seconds) + Sync)),
        ..PassSettings::default()
    })?;
    let until = walls.iter().map(|wall| wall.resolved.pass.watcher.computed_until()).fold(asked, f64::max);
    let step_ends = if options.history && options.times.is_empty() {
        own_times(&walls, until, options)?
    } else {
        Vec::new()
    };
    let times = if options.times.is_empty() { step_ends } else { sorted(&options.times) };
    let mut stations = Vec::with_capacity(count);
    let mut histories = Vec::new();
    let mut compared = Vec::new();
    let mut findings = Vec::new();
    let mut inside = true;
    for (index, wall) in walls.iter().enumerate() {
        let (own, resolved) = (&*wall.model, &wall.resolved);
        let station = &own.stations[index];
        let last_burn_start = last_burn_start(model);
        let settings = PassSettings {
            step_tolerance: resolved.step_tolerance,
            until: Some(until),
            stop: options.stop,
            ..PassSettings::default()
        };
        // What the grid was made with serves, where nothing more is asked and this station decides how long the run goes on.
        let again = options.history || !options.log.is_empty() || resolved.pass.watcher.computed_until() < until;
        let mut longer = None;
        if again {
            let mut keep = Keep {
                profile_times: last_burn_start.into_iter().collect(),
                reading_times: reading_times(options.log, index),
                ..Keep::default()
            };
            if options.history {
                keep.times.clone_from(&times);
                keep.both_sides = options.times.is_empty();
                keep.profile_times.extend(profile_times(model, &resolved.pass, until, &options.times));
                keep.profile_times.sort_by(f64::total_cmp);
                keep.profile_times.dedup();
            }
            longer = Some(Pass::of_profile(own, index, &resolved.grid, &settings, &keep)?);
        }
        let pass = longer.as_ref().unwrap_or(&resolved.pass);
        let from = last_burn_start.and_then(|start| pass.profiles.iter().find(|profile| profile.0 == start));
        let from: Vec<Kelvin> = from.map(|profile| profile.1.iter().map(|point| point.1).collect()).unwrap_or_default();
        let state = match (last_burn_start, pass.watcher.burnt()) {
            (Some(start), Some(burnt)) => {
                let from = if start > 0.0 { &from[..] } else { &[] };
                steady(
                    own,
                    index,
                    &resolved.grid,
                    &settings,
                    &Burn {
                        start,
                        from,
                        at_end: &burnt.at_end,
                    },
                )?
            }
            _ => Steady::None,
        };
        inside &= !model.allowance.given || keeps_allowance(model, index, &walls, options)?;
        findings.extend(found(model, station, pass, resolved));
        let mut answered = answers(model, index, pass, resolved, state);
        if !options.log.is_empty() {
            let (rows, points): (Vec<_>, Vec<_>) = log::compared(options.log, index, station, &pass.readings).into_iter().unzip();
            compared.extend(
                rows.iter()
                    .zip(points)
                    .map(|(row, points): (&LogAnswer, _)| (index, row.probe.clone(), points)),
            );
            answered.log = Some(rows);
        }
        stations.push(answered);
        if let Some(pass) = longer.filter(|_| options.history) {
            histories.push(history(pass));
        }
        if let Some(progress) = options.progress {
            progress(0.5 + 0.5 * (index + 1) as f64 / count as f64);
        }
    }
    let answers = RunAnswers {
        verdict: verdict(model, &stations, &findings, inside),
        worst: worst(&stations),
        without_limit: without_limit(model),
        last_burn_end: model.profile.last_burn_end(),
        computed_until: until,
        stations,
        findings,
    };
    Ok(RunOutcome {
        answers,
        histories,
        compared,
    })
}

/// Whether every limit of a station is kept with the allowance taken off it and put on the heating.
fn keeps_allowance(model: &Model, index: usize, walls: &[ResolvedWall<'_>], options: &RunOptions<'_>) -> Result<bool, RunError> {
    let doubted = model.with_heating_times(model.allowance.heating);
    let doubted = informed(&doubted, index, &|followed| walls.get(followed).map(|wall| &wall.resolved), options.stop)?;
    let resolved = &walls[index].resolved;
    let settings = PassSettings {
        step_tolerance: resolved.step_tolerance,
        off_limits: model.allowance.limits,
        stop: options.stop,
        ..PassSettings::default()
    };
    let pass = Pass::of_profile(&doubted, index, &resolved.grid, &settings, &Keep::default())?;
    Ok(pass.keeps_limits(&model.stations[index]))
}

fn verdict(model: &Model, stations: &[StationAnswers], findings: &[Finding], inside: bool) -> Verdict {
    let limited = |station: &Station| !limits(station).is_empty();
    if findings.iter().any(|finding| matches!(finding, Finding::Melts { .. })) {
        return Verdict::OutsideModel;
    }
    if places(stations).any(|(_, _, at)| at.limit.as_ref().is_some_and(|limit| !limit.kept)) {
        return Verdict::OverLimit;
    }
    if !model.stations.iter().any(limited) {
        return Verdict::NoLimits;
    }
    if inside { Verdict::WithinLimits } else { Verdict::InsideAllowance }
}

/// Every place with its station's and its own name.
fn places(stations: &[StationAnswers]) -> impl Iterator<Item = (&str, String, &PlaceAnswer)> {
    stations.iter().flat_map(|station| {
        let layers = station.layers.iter().map(|layer| (layer.name.clone(), &layer.at));
        let joints = station.joints.iter().map(|joint| (joint.between.join("|"), &joint.at));
        let faces = [("hot-face".to_owned(), &station.hot_face), ("outer-face".to_owned(), &station.outer_face)];
        layers.chain(joints).chain(faces).map(|(place, at)| (station.name.as_str(), place, at))
    })
}

fn worst(stations: &[StationAnswers]) -> Option<Worst> {
    places(stations)
        .filter_map(|(station, place, at)| at.limit.as_ref().map(|limit| (station, place, limit)))
        .filter(|(_, _, limit)| limit.margin >= 0.0 || !limit.kept)
        .min_by(|a, b| a.2.margin.total_cmp(&b.2.margin))
        .map(|(station, place, limit)| Worst {
            station: station.to_owned(),
            place,
            margin: limit.margin,
        })
}

fn without_limit(model: &Model) -> Vec<String> {
    let of = |station: &Station| {
        let name = station.name.clone();
        station
            .layers
            .iter()
            .filter(|layer| layer.limit.is_none())
            .map(move |layer| format!("{name}/{}", layer.name))
            .collect::<Vec<_>>()
    };
    model.stations.iter().flat_map(of).collect()
}

fn answers(model: &Model, index: usize, pass: &Pass, resolved: &Resolved, state: Steady) -> StationAnswers {
    let station = &model.stations[index];
    let at = |place: Place, limit: Option<&Limit>| place_answer(model, pass, place, limit);
    let layers = station.layers.iter().enumerate().map(|(index, layer)| LayerAnswer {
        name: layer.name.clone(),
        material: layer.material.name.clone(),
        at: at(Place::Layer(index), layer.limit.as_ref()),
    });
    let joints = station.layers.windows(2).enumerate().map(|(index, pair)| JointAnswer {
        between: [pair[0].name.clone(), pair[1].name.clone()],
        at: at(Place::Joint(index), pair[0].joint.as_ref().and_then(|joint| joint.limit.as_ref())),
    });
    let probes = station.probes.iter().enumerate().map(|(index, probe)| {
        let reading = peak_of(pass, Quantity::Place(Place::Probe(index)));
        ProbeAnswer {
            name: probe.name.clone(),
            depth: probe.depth,
            peak: reading.value,
            peak_time: reading.clock,
            peak_true: peak_of(pass, Quantity::Truth(index)).value,
        }
    });
    let [inward, outward, stored] = pass.heat;
    let [gross_inward, gross_outward] = pass.watcher.gross();
    let scale = gross_inward.max(gross_outward).max(10.0 * pass.capacity);
    StationAnswers {
        name: station.name.clone(),
        mass: station.mass(),
        thickness: station.thickness(),
        layers: layers.collect(),
        joints: joints.collect(),
        hot_face: at(Place::HotFace, None),
        outer_face: at(Place::OuterFace, station.outer.limit.as_ref()),
        probes: probes.collect(),
        soak_back: soak_back(pass),
        log: None,
        evened_out: evened_out(resolved),
        steady: state,
        waits: waits(model, index, resolved),
        energy: Energy {
            inward,
            gross_inward,
            outward,
            gross_outward,
            stored,
            imbalance: (inward - outward - stored).abs() / scale,
        },
        numerical: Numerical {
            nodes: pass.map.len(),
            steps: pass.steps,
            estimated_error: resolved.estimated_error,
        },
    }
}

/// The peak of a quantity that every pass watches.
fn peak_of(pass: &Pass, quantity: Quantity) -> Peak {
    pass.peak(quantity).unwrap_or(Peak {
        value: 0.0,
        clock: 0.0,
        kind: PhaseKind::Shutdown,
        depth: 0.0,
    })
}

fn place_answer(model: &Model, pass: &Pass, place: Place, limit: Option<&Limit>) -> PlaceAnswer {
    let peak = peak_of(pass, Quantity::Place(place));
    let crossings = pass.crossings(LevelOf::Limit(place)).map(|(_, _, crossings)| crossings);
    let limit = limit.zip(crossings).map(|(limit, crossings)| LimitAnswer {
        limit: limit.temperature,
        kind: limit.kind,
        origin: limit.origin,
        allowance: model.allowance.limits,
        margin: limit.temperature - model.allowance.limits - peak.value,
        first_over: crossings.first_above,
        time_over: crossings.time_above,
        allowed_over: limit.allowed_over,
        kept: kept(limit, &crossings),
    });
    PlaceAnswer {
        peak: peak.value,
        peak_time: peak.clock,
        peak_phase: peak.kind,
        peak_depth: peak.depth,
        limit,
    }
}

fn soak_back(pass: &Pass) -> SoakBack {
    let origin = pass.watcher.last_burn_end();
    let Some(burnt) = pass.watcher.burnt() else {
        return SoakBack {
            outer_face_rise: 0.0,
            outer_face_peak: origin,
            last_peak: None,
        };
    };
    let last = burnt.peak.len() - 1;
    let rising = (0..=last).filter(|node| burnt.peak[*node].0 - burnt.at_end[*node] >= SOAKS);
    let latest = rising.max_by(|a, b| burnt.peak[*a].1.total_cmp(&burnt.peak[*b].1));
    SoakBack {
        outer_face_rise: burnt.peak[last].0 - burnt.at_end[last],
        outer_face_peak: burnt.peak[last].1,
        last_peak: latest.map(|node| (burnt.peak[node].1, pass.map.depths[node])),
    }
}

fn evened_out(resolved: &Resolved) -> EvenedOut {
    let pass = &resolved.pass;
    let Some((level, quantity, crossings)) = pass.crossings(LevelOf::Even) else {
        return EvenedOut::Beyond;
    };
    if pass.watcher.last_phase().outcome(quantity, &pass.map, level) == Rest::Above {
        return EvenedOut::Never;
    }
    match crossings.last_down {
        _ if crossings.above => EvenedOut::Beyond,
        Some((clock, _)) => EvenedOut::From(clock),
        None => EvenedOut::From(0.0),
    }
}

fn waits(model: &Model, index: usize, resolved: &Resolved) -> Vec<WaitAnswer> {
    let station = &model.stations[index];
    let pass = &resolved.pass;
    let origin = pass.watcher.last_burn_end();
    let asked = model.waits.iter().enumerate().filter(|(_, wait)| wait.station == index);
    asked
        .filter_map(|(question, wait)| {
            let (level, quantity, crossings) = pass.crossings(LevelOf::Wait(question))?;
            // From above, nothing comes down to its own surroundings.
            let ends_above = pass.watcher.last_phase().outcome(quantity, &pass.map, level - SAME) == Rest::Above;
            let was_above = crossings.above || crossings.last_down.is_some_and(|down| down.0 > origin);
            let rises_above = pass.watcher.last_phase().outcome(quantity, &pass.map, level + SAME) == Rest::Above;
            let state = if rises_above || (ends_above && was_above) {
                WaitState::Never
            } else if crossings.above {
                WaitState::Beyond
            } else {
                match crossings.last_down {
                    Some((clock, slope)) if clock > origin => WaitState::Cools {
                        wait: clock - origin,
                        clock,
                        slope: -1.0 / slope,
                    },
                    _ => WaitState::StaysBelow { clock: origin },
                }
            };
            Some(WaitAnswer {
                name: wait.name.clone(),
                place: station.place_name(wait.place),
                below: wait.below,
                meaning: wait.meaning.clone(),
                state,
            })
        })
        .collect()
}

fn found(model: &Model, station: &Station, pass: &Pass, resolved: &Resolved) -> Vec<Finding> {
    let name = || station.name.clone();
    let mut findings = Vec::new();
    for (index, (level, of)) in pass.plan.levels.iter().enumerate() {
        let crossings = pass.watcher.crossings()[index];
        let Some(first) = crossings.first_above else { continue };
        let layer = |layer: usize| station.layers[layer].name.clone();
        let peak = pass.watcher.peaks()[level.quantity].map_or(level.value, |peak| peak.value);
        match *of {
            LevelOf::Melts(at) => findings.push(Finding::Melts {
                station: name(),
                layer: layer(at),
                at: level.value,
                first,
            }),
            LevelOf::Decomposes(at) => findings.push(Finding::Decomposes {
                station: name(),
                layer: layer(at),
                at: level.value,
                first,
            }),
            LevelOf::Table {
                layer: at,
                property,
                end,
                hot_end,
            } => findings.push(Finding::TableLeft {
                station: name(),
                layer: layer(at),
                property,
                hot_end,
                by: if hot_end { peak - end } else { end + peak },
                lasting: crossings.time_above,
            }),
            LevelOf::Limit(_) | LevelOf::Wait(_) | LevelOf::Even => {}
        }
    }
    if let Some(HeatingModel::Log(rows)) = station.heating.as_ref().map(|heating| &heating.model) {
        let longest = model
            .profile
            .phases()
            .iter()
            .filter(|phase| phase.kind() == PhaseKind::Burn)
            .map(|phase| phase.duration())
            .fold(0.0, f64::max);
        if longest > rows.end() {
            findings.push(Finding::LogHeld {
                station: name(),
                lasting: longest - rows.end(),
            });
        }
    }
    if let (Shape::Cylinder { inner_radius }, Some(end)) = (station.shape, model.profile.last_burn_end()) {
        let sum = |value: &dyn Fn(usize) -> f64| (0..station.layers.len()).map(value).sum::<f64>();
        let layer = |index: usize| &station.layers[index];
        let conducts = sum(&|index| layer(index).material.conductivity.value(model.start) * layer(index).thickness);
        let holds = sum(&|index| layer(index).material.density * layer(index).material.heat_capacity.value(model.start) * layer(index).thickness);
        let diffusion_length = (conducts / holds * end).sqrt();
        if diffusion_length > inner_radius {
            findings.push(Finding::Sideways {
                station: name(),
                diffusion_length,
            });
        }
    }
    if resolved.estimated_error > model.tolerance {
        findings.push(Finding::Inaccurate {
            station: name(),
            estimated_error: resolved.estimated_error,
        });
    }
    findings
}

fn sorted(times: &[Seconds]) -> Vec<Seconds> {
    let mut times = times.to_vec();
    times.sort_by(f64::total_cmp);
    times.dedup();
    times
}

/// Clocks dense enough to draw every curve of every station.
fn own_times(walls: &[ResolvedWall<'_>], until: Seconds, options: &RunOptions<'_>) -> Result<Vec<Seconds>, RunError> {
    let mut times = vec![0.0];
    for (index, wall) in walls.iter().enumerate() {
        let resolved = &wall.resolved;
        let settings = PassSettings {
            step_tolerance: resolved.step_tolerance,
            until: Some(until),
            stop: options.stop,
            ..PassSettings::default()
        };
        let keep = Keep {
            both_sides: true,
            ..Keep::default()
        };
        let pass = Pass::of_profile(&wall.model, index, &resolved.grid, &settings, &keep)?;
        let mut before = 0.0;
        for (end, rows) in pass.step_ends {
            times.extend((1..rows).map(|row| before + (end - before) * row as f64 / rows as f64));
            times.push(end);
            before = end;
        }
    }
    times.extend(walls.iter().take(1).flat_map(|wall| wall.model.profile.starts()));
    Ok(sorted(&times))
}

/// Clocks of whole profiles: changes of phase, asked times, telling times of the soak-back, the written end and the last clock.
fn profile_times(model: &Model, pass: &Pass, until: Seconds, asked: &[Seconds]) -> Vec<Seconds> {
    let starts = model.profile.starts();
    let written_end = starts.last().copied().unwrap_or(0.0);
    let origin = pass.watcher.last_burn_end();
    let soaked = soak_back(pass).last_peak.map_or(written_end.min(until), |peak| peak.0);
    let mut times = starts;
    times.extend(asked);
    times.extend([0.003, 0.01, 0.03, 0.1, 0.3, 1.0, 3.0].map(|share| origin + share * (soaked - origin)));
    times.push(until);
    times.retain(|time| *time <= until);
    sorted(&times)
}

fn history(pass: Pass) -> StationHistory {
    let depths = pass.profiles.into_iter().map(|(time, points)| DepthProfile { time, points });
    StationHistory {
        trace: pass.rows,
        depths: depths.collect(),
    }
}
