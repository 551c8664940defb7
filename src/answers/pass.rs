//! One station once through its segments, with everything watched that an answer asks for.

use crate::model::{Kelvin, KelvinDifference, Limit, Metres, Model, Outside, Place, Seconds, Station, Table};
use crate::run::{Course, Crossings, LastPhase, Level, Moment, Peak, Quantity, Recorder, RunError, Segment, Timeline, TraceRow, Watcher};
use crate::wall::{Grid, NodeMap};
use std::sync::atomic::AtomicBool;

/// Hottest − coolest below this: the wall has evened out.
pub(super) const EVEN: KelvinDifference = 1.0;
/// A property may be used this far outside its table without a warning.
pub(super) const TABLE_GRACE: KelvinDifference = 20.0;

/// How to go through the segments.
#[derive(Clone, Copy, Default)]
pub struct PassSettings<'a> {
    /// Error of one step, K.
    pub step_tolerance: KelvinDifference,
    /// Taken off every limit that is watched.
    pub off_limits: KelvinDifference,
    /// Go on to this clock; `None`: until everything is decided.
    pub until: Option<Seconds>,
    /// Set from outside to stop.
    pub stop: Option<&'a AtomicBool>,
    /// Told the clock after every step.
    pub progress: Option<&'a (dyn Fn(Seconds) + Sync)>,
}

/// Rows and profiles to keep of a pass.
#[derive(Clone, Debug, Default)]
pub(super) struct Keep {
    pub times: Vec<Seconds>,
    pub both_sides: bool,
    pub profile_times: Vec<Seconds>,
    /// Times at which probes are read, beside the rows of the history.
    pub reading_times: Vec<Seconds>,
}

/// What a level is watched for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum LevelOf {
    Limit(Place),
    Melts(usize),
    Decomposes(usize),
    Table {
        layer: usize,
        property: &'static str,
        end: Kelvin,
        hot_end: bool,
    },
    /// By index into the model's waits.
    Wait(usize),
    Even,
}

/// Which quantity and which level stands for what.
#[derive(Clone, Debug)]
pub(super) struct Plan {
    pub quantities: Vec<Quantity>,
    pub levels: Vec<(Level, LevelOf)>,
}

impl Plan {
    pub fn new(model: &Model, station_index: usize, off_limits: KelvinDifference) -> Self {
        let station = &model.stations[station_index];
        let layers = station.layers.len();
        let mut quantities = vec![
            Quantity::Place(Place::HotFace),
            Quantity::Place(Place::OuterFace),
            Quantity::Place(Place::Everywhere),
            Quantity::Spread,
        ];
        quantities.extend((0..layers).map(|layer| Quantity::Place(Place::Layer(layer))));
        quantities.extend((0..layers - 1).map(|joint| Quantity::Place(Place::Joint(joint))));
        quantities.extend((0..station.probes.len()).map(|probe| Quantity::Place(Place::Probe(probe))));
        quantities.extend((0..station.probes.len()).map(Quantity::Truth));
        quantities.extend((0..layers).map(Quantity::Coolest));
        let mut plan = Self {
            quantities,
            levels: Vec::new(),
        };
        for (place, limit) in limits(station) {
            plan.watch(Quantity::Place(place), limit.temperature - off_limits, LevelOf::Limit(place));
        }
        for (index, layer) in station.layers.iter().enumerate() {
            let hottest = Quantity::Place(Place::Layer(index));
            if let Some(temperature) = layer.material.melts {
                plan.watch(hottest, temperature, LevelOf::Melts(index));
            }
            if let Some(temperature) = layer.material.decomposes {
                plan.watch(hottest, temperature, LevelOf::Decomposes(index));
            }
            plan.watch_table(index, "conductivity", &layer.material.conductivity, hottest, Quantity::Coolest(index));
            plan.watch_table(index, "heat_capacity", &layer.material.heat_capacity, hottest, Quantity::Coolest(index));
        }
        let hot_face = Quantity::Place(Place::HotFace);
        let outer_face = Quantity::Place(Place::OuterFace);
        plan.watch_table(0, "emissivity", &station.idle.emissivity, hot_face, Quantity::Coolest(0));
        if let Outside::Open(losses) = &station.outer.outside
            && let Some(table) = &losses.emissivity
        {
            plan.watch_table(layers - 1, "emissivity", table, outer_face, Quantity::Coolest(layers - 1));
        }
        for (index, side) in station.sides.iter().enumerate() {
            if let Some(table) = &side.emissivity {
                let hottest = Quantity::Place(Place::Layer(index));
                plan.watch_table(index, "side_emissivity", table, hottest, Quantity::Coolest(index));
            }
        }
        for (index, wait) in model.waits.iter().enumerate().filter(|(_, wait)| wait.station == station_index) {
            plan.watch(Quantity::Place(wait.place), wait.below, LevelOf::Wait(index));
        }
        plan.watch(Quantity::Spread, EVEN, LevelOf::Even);
        plan
    }

    fn watch(&mut self, quantity: Quantity, value: f64, of: LevelOf) {
        if let Some(index) = self.index(quantity) {
            self.levels.push((Level { quantity: index, value }, of));
        }
    }

    fn watch_table(&mut self, layer: usize, property: &'static str, table: &Table, hottest: Quantity, coolest: Quantity) {
        if let Some((low, high)) = table.range() {
            self.watch(
                hottest,
                high + TABLE_GRACE,
                LevelOf::Table {
                    layer,
                    property,
                    end: high,
                    hot_end: true,
                },
            );
            self.watch(
                coolest,
                TABLE_GRACE - low,
                LevelOf::Table {
                    layer,
                    property,
                    end: low,
                    hot_end: false,
                },
            );
        }
    }

    /// What must be decided before a run may stop in its last phase: levels that stand for what is `wanted`, perhaps the evening out, and all peaks.
    pub fn deciding(&self, model: &Model, station: &Station, wanted: impl Fn(LevelOf) -> bool, evened: bool) -> LastPhase {
        let Some(at_rest) = Timeline::at_rest(model, station) else {
            return LastPhase::to_the_end();
        };
        let indices = |wanted: &dyn Fn(LevelOf) -> bool| -> Vec<usize> {
            self.levels
                .iter()
                .enumerate()
                .filter(|(_, level)| wanted(level.1))
                .map(|(index, _)| index)
                .collect()
        };
        let even = indices(&|of| evened && of == LevelOf::Even).first().copied();
        LastPhase::deciding(station, &model.surroundings, &at_rest, indices(&wanted), even, model.tolerance)
    }

    pub fn index(&self, quantity: Quantity) -> Option<usize> {
        self.quantities.iter().position(|known| *known == quantity)
    }
}

/// Every limit of a station with its place.
pub(super) fn limits(station: &Station) -> Vec<(Place, &Limit)> {
    let mut limits = Vec::new();
    for (index, layer) in station.layers.iter().enumerate() {
        limits.extend(layer.limit.as_ref().map(|limit| (Place::Layer(index), limit)));
        limits.extend(
            layer
                .joint
                .as_ref()
                .and_then(|joint| joint.limit.as_ref())
                .map(|limit| (Place::Joint(index), limit)),
        );
    }
    limits.extend(station.outer.limit.as_ref().map(|limit| (Place::OuterFace, limit)));
    limits
}

/// What one pass saw.
#[derive(Clone, Debug)]
pub struct Pass {
    pub(super) plan: Plan,
    pub(super) watcher: Watcher,
    pub(super) map: NodeMap,
    pub(super) rows: Vec<TraceRow>,
    /// At the reading times.
    pub(super) readings: Vec<TraceRow>,
    pub(super) profiles: Vec<(Seconds, Vec<(Metres, Kelvin)>)>,
    /// Net heat in and out, and what the wall holds more than at the start, J per m² of hot face.
    pub(super) heat: [f64; 3],
    /// Heat capacity of the wall per m² of hot face.
    pub(super) capacity: f64,
    pub(super) steps: usize,
    /// Clocks at the ends of steps, with the number of rows that a curve through the step needs.
    pub(super) step_ends: Vec<(Seconds, usize)>,
}

impl Pass {
    /// The whole profile, from the start temperature on.
    pub(super) fn of_profile(model: &Model, station_index: usize, grid: &Grid, settings: &PassSettings<'_>, keep: &Keep) -> Result<Self, RunError> {
        let station = &model.stations[station_index];
        let plan = Plan::new(model, station_index, settings.off_limits);
        let origin = model.profile.last_burn_end().unwrap_or(0.0);
        let last_phase = match settings.until {
            None => plan.deciding(
                model,
                station,
                |of| !matches!(of, LevelOf::Melts(_) | LevelOf::Decomposes(_) | LevelOf::Even),
                true,
            ),
            Some(_) => LastPhase::to_the_end(),
        };
        let segments = Timeline::of_profile(model, station, settings.until);
        Self::through(
            model,
            station_index,
            grid,
            settings,
            keep,
            Stretch {
                plan,
                origin,
                last_phase,
                segments,
                from: None,
            },
            |_| {},
        )
    }

    /// Any stretch of segments, from any state.
    pub(super) fn through(
        model: &Model,
        station_index: usize,
        grid: &Grid,
        settings: &PassSettings<'_>,
        keep: &Keep,
        stretch: Stretch<'_>,
        mut also: impl FnMut(&Moment<'_>),
    ) -> Result<Self, RunError> {
        let station = &model.stations[station_index];
        let Stretch {
            plan,
            origin,
            last_phase,
            segments,
            from,
        } = stretch;
        let mut course = Course::new(station, &model.surroundings, grid, model.start, settings.step_tolerance);
        if let (Some(temperatures), Some(first)) = (from, segments.first()) {
            course.place(first.start, temperatures);
        }
        let start = course.unknowns().to_vec();
        let levels = plan.levels.iter().map(|level| level.0).collect();
        let mut watcher = Watcher::new(plan.quantities.clone(), levels, origin, last_phase);
        let mut recorder = Recorder::new(keep.times.clone(), keep.both_sides, keep.profile_times.clone());
        let mut reader = Recorder::new(keep.reading_times.clone(), false, Vec::new());
        let mut step_ends = Vec::new();
        course.drive(&segments, settings.stop, |moment| {
            if keep.both_sides {
                step_ends.push((moment.to, rows_for_a_curve(moment)));
            }
            recorder.see(moment);
            reader.see(moment);
            also(moment);
            if let Some(progress) = settings.progress {
                progress(moment.to);
            }
            watcher.see(moment)
        })?;
        let [inward, outward] = [0, 1].map(|ledger| course.followers()[ledger][0]);
        Ok(Self {
            plan,
            watcher,
            map: course.wall.map(0).clone(),
            rows: recorder.rows,
            readings: reader.rows,
            profiles: recorder.profiles,
            heat: [inward, outward, course.wall.stored(0, &start, course.unknowns())],
            capacity: course.wall.capacity(0),
            steps: course.steps(),
            step_ends,
        })
    }

    /// The peak of a quantity.
    pub(super) fn peak(&self, quantity: Quantity) -> Option<Peak> {
        self.plan.index(quantity).and_then(|index| self.watcher.peaks()[index])
    }

    /// How the level watched for this was crossed, with the level itself.
    pub(super) fn crossings(&self, of: LevelOf) -> Option<(f64, Quantity, Crossings)> {
        let index = self.plan.levels.iter().position(|level| level.1 == of)?;
        let level = self.plan.levels[index].0;
        Some((level.value, self.plan.quantities[level.quantity], self.watcher.crossings()[index]))
    }

    /// Whether every limit watched was kept.
    pub(super) fn keeps_limits(&self, station: &Station) -> bool {
        limits(station).into_iter().all(|(place, limit)| {
            self.crossings(LevelOf::Limit(place))
                .is_none_or(|(_, _, crossings)| kept(limit, &crossings))
        })
    }
}

/// A limit is kept where it was never passed, or for no longer than allowed and for good at the end of the run.
pub(super) fn kept(limit: &Limit, crossings: &Crossings) -> bool {
    crossings.first_above.is_none() || (!crossings.above && limit.allowed_over > 0.0 && crossings.time_above <= limit.allowed_over)
}

/// Segments to go through, and from where.
pub(super) struct Stretch<'a> {
    pub plan: Plan,
    /// The clock that counts as the end of the last burn.
    pub origin: Seconds,
    pub last_phase: LastPhase,
    pub segments: Vec<Segment>,
    /// Node temperatures at the start; `None`: the model's start.
    pub from: Option<&'a [Kelvin]>,
}

/// How many straight pieces draw the faces' curves through a step to a twentieth of a kelvin.
fn rows_for_a_curve(moment: &Moment<'_>) -> usize {
    const SEEN: KelvinDifference = 0.05;
    const MOST: f64 = 64.0;
    let sag = |node: usize| {
        let straight = 0.5 * (moment.temperature(node, 0.0) + moment.temperature(node, 1.0));
        (moment.temperature(node, 0.5) - straight).abs()
    };
    let worst = moment
        .map()
        .layers
        .iter()
        .flat_map(|nodes| [*nodes.start(), *nodes.end()])
        .map(sag)
        .fold(0.0, f64::max);
    (worst / SEEN).sqrt().ceil().clamp(1.0, MOST) as usize
}
