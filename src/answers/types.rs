//! What happens: the answers of one run.
//!
//! Plain SI numbers: temperatures in kelvin, times in seconds from the start of the profile, areas per hot face, as `RESULTS` lists them.

pub use crate::run::TraceRow;

use crate::model::{JoulesPerSquareMetre, Kelvin, KelvinDifference, LimitKind, LimitOrigin, Metres, PhaseKind, Seconds};

/// How the case stands, worst first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Verdict {
    /// A melting point was passed: the numbers no longer describe the wall.
    OutsideModel,
    /// A limit is not kept.
    OverLimit,
    /// Every limit is kept, but not with the allowance taken.
    InsideAllowance,
    /// Nothing has a limit.
    NoLimits,
    /// Every limit is kept.
    WithinLimits,
}

/// The answers of one run.
#[derive(Clone, Debug)]
pub struct RunAnswers {
    /// How the case stands.
    pub verdict: Verdict,
    /// Where the margin is smallest; `None` without limits.
    pub worst: Option<Worst>,
    /// Layers without a limit, as `station/layer`.
    pub without_limit: Vec<String>,
    /// End of the last burn (the command); `None` without a burn.
    pub last_burn_end: Option<Seconds>,
    /// The clock to which every station was computed.
    pub computed_until: Seconds,
    /// One for each station, in file order.
    pub stations: Vec<StationAnswers>,
    /// What was found while running.
    pub findings: Vec<Finding>,
}

/// The place of the smallest margin.
#[derive(Clone, Debug)]
pub struct Worst {
    /// The station's name.
    pub station: String,
    /// The place's name.
    pub place: String,
    /// Limit − allowance − peak.
    pub margin: KelvinDifference,
}

/// The answers of one station.
#[derive(Clone, Debug)]
pub struct StationAnswers {
    /// Its name.
    pub name: String,
    /// Mass per area of the hot face, kg/m².
    pub mass: f64,
    /// Thickness of the wall.
    pub thickness: Metres,
    /// One for each layer.
    pub layers: Vec<LayerAnswer>,
    /// One for each boundary between layers.
    pub joints: Vec<JointAnswer>,
    /// The heated face.
    pub hot_face: PlaceAnswer,
    /// The face away from the heat.
    pub outer_face: PlaceAnswer,
    /// One for each probe.
    pub probes: Vec<ProbeAnswer>,
    /// What happened after the last burn.
    pub soak_back: SoakBack,
    /// Differences from a test's log, one for each of its columns at this station; `None` without a log.
    pub log: Option<Vec<LogAnswer>>,
    /// From when on hottest − coolest stays below 1 K.
    pub evened_out: EvenedOut,
    /// If the last burn went on for ever.
    pub steady: Steady,
    /// One for each question at this station.
    pub waits: Vec<WaitAnswer>,
    /// The heat's bookkeeping.
    pub energy: Energy,
    /// How well it was computed.
    pub numerical: Numerical,
}

/// A layer's peak and limit.
#[derive(Clone, Debug)]
pub struct LayerAnswer {
    /// Its name.
    pub name: String,
    /// Its material's name.
    pub material: String,
    /// Over all time and depth, its faces included.
    pub at: PlaceAnswer,
}

/// A boundary's peak and limit, at its hotter side.
#[derive(Clone, Debug)]
pub struct JointAnswer {
    /// Names of the layers on both sides.
    pub between: [String; 2],
    /// Its hotter side.
    pub at: PlaceAnswer,
}

/// The hottest moment of a place, and its limit.
#[derive(Clone, Debug, PartialEq)]
pub struct PlaceAnswer {
    /// The hottest it gets.
    pub peak: Kelvin,
    /// When.
    pub peak_time: Seconds,
    /// In which kind of phase; at a change, the ending one.
    pub peak_phase: PhaseKind,
    /// At which depth.
    pub peak_depth: Metres,
    /// Its limit, if it has one.
    pub limit: Option<LimitAnswer>,
}

/// How a limit was kept.
#[derive(Clone, Debug, PartialEq)]
pub struct LimitAnswer {
    /// The limit.
    pub limit: Kelvin,
    /// What it protects.
    pub kind: LimitKind,
    /// Whose it is.
    pub origin: LimitOrigin,
    /// What the allowance takes off it.
    pub allowance: KelvinDifference,
    /// Limit − allowance − peak.
    pub margin: KelvinDifference,
    /// When the limit itself was first passed.
    pub first_over: Option<Seconds>,
    /// Total time above the limit itself.
    pub time_over: Seconds,
    /// Total time allowed above it.
    pub allowed_over: Seconds,
    /// Whether the limit is kept: never passed, or no longer than allowed.
    pub kept: bool,
}

/// What a probe reads at most.
#[derive(Clone, Debug)]
pub struct ProbeAnswer {
    /// Its name.
    pub name: String,
    /// Its depth from the hot face.
    pub depth: Metres,
    /// The highest reading.
    pub peak: Kelvin,
    /// When it reads that.
    pub peak_time: Seconds,
    /// The highest temperature of the wall there.
    pub peak_true: Kelvin,
}

/// How far the readings of a test are from the computed ones, for one probe.
#[derive(Clone, Debug, PartialEq)]
pub struct LogAnswer {
    /// The probe's name.
    pub probe: String,
    /// Standard deviation of a reading, as the case says.
    pub noise: KelvinDifference,
    /// How many readings were compared.
    pub count: usize,
    /// Where the two differ most; `None` if nothing was compared.
    pub largest: Option<ComparedReading>,
    /// The last reading.
    pub end: Option<ComparedReading>,
    /// Root of the mean of the squared differences.
    pub root_mean_square: Option<KelvinDifference>,
}

/// A reading of a test beside the computed one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ComparedReading {
    /// The clock.
    pub time: Seconds,
    /// What the test's probe read.
    pub reading: Kelvin,
    /// What the run's probe reads then, its lag included.
    pub computed: Kelvin,
}

impl ComparedReading {
    /// Computed − read: above zero, the run is the hotter one.
    pub fn difference(&self) -> KelvinDifference {
        self.computed - self.reading
    }
}

/// Stored heat on its way outwards after the last burn.
#[derive(Clone, Debug)]
pub struct SoakBack {
    /// How much hotter the outer face still gets after the end of the last burn; 0 if it only cools.
    pub outer_face_rise: KelvinDifference,
    /// When it is hottest; the end of the last burn if it only cools.
    pub outer_face_peak: Seconds,
    /// The latest peak of any point that gets at least 1 K hotter after the last burn: time and depth.
    pub last_peak: Option<(Seconds, Metres)>,
}

/// From when on the wall is level.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum EvenedOut {
    /// From this clock on, hottest − coolest stays below 1 K.
    From(Seconds),
    /// The last phase's steady state itself has a larger difference.
    Never,
    /// Not within 100 h.
    Beyond,
}

/// If the last burn went on for ever, everything of that phase held.
#[derive(Clone, Debug, PartialEq)]
pub enum Steady {
    /// There is none: no burn, a heating log, a hot end that follows another wall, or nothing balances the heat.
    None,
    /// There is one.
    At(SteadyState),
}

/// The steady state of an endless last burn.
#[derive(Clone, Debug, PartialEq)]
pub struct SteadyState {
    /// Hot face.
    pub hot_face: Kelvin,
    /// Outer face.
    pub outer_face: Kelvin,
    /// (T at the end of the burn − start)/(steady − start) at the hot face; `None` if that is below 1 K.
    pub hot_face_reached: Option<f64>,
    /// The same at the outer face.
    pub outer_face_reached: Option<f64>,
    /// Of the endless burn, from its start until both faces have 95 %; `None` if that takes more than 100 h.
    pub time_to_95_percent: Option<Seconds>,
    /// Whether the steady profile, the way to it and the soak-back from it keep every limit.
    pub within_limits: bool,
}

/// The answer to a cool-down question.
#[derive(Clone, Debug)]
pub struct WaitAnswer {
    /// The question's name.
    pub name: String,
    /// The place's name.
    pub place: String,
    /// The value.
    pub below: Kelvin,
    /// What the value stands for, if the case says so.
    pub meaning: Option<String>,
    /// The answer.
    pub state: WaitState,
}

/// How long until a place stays below a value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum WaitState {
    /// It comes down to the value for the last time.
    Cools {
        /// From the end of the last burn (without a burn: from 0).
        wait: Seconds,
        /// The clock then.
        clock: Seconds,
        /// How much longer for each kelvin lower, s/K.
        slope: f64,
    },
    /// It is never above it after the last burn; the clock from which that holds.
    StaysBelow {
        /// End of the last burn, or 0.
        clock: Seconds,
    },
    /// The surroundings of the last phase hold it above.
    Never,
    /// Not decided within 100 h.
    Beyond,
}

/// The heat's bookkeeping, per area of the hot face, to `computed_until`.
#[derive(Clone, Debug)]
pub struct Energy {
    /// Net heat into the wall over the hot face.
    pub inward: JoulesPerSquareMetre,
    /// What came in over the hot face, without what went back.
    pub gross_inward: JoulesPerSquareMetre,
    /// Net heat out over the outer face, and over the sides of a bar.
    pub outward: JoulesPerSquareMetre,
    /// What went out over the outer face, without what came back.
    pub gross_outward: JoulesPerSquareMetre,
    /// What the wall holds more than at the start.
    pub stored: JoulesPerSquareMetre,
    /// |in − out − stored| / max(gross in, gross out, capacity × 10 K): checks the bookkeeping, not the accuracy.
    pub imbalance: f64,
}

/// How well a station was computed.
#[derive(Clone, Debug)]
pub struct Numerical {
    /// Unknown temperatures through the wall.
    pub nodes: usize,
    /// Accepted steps.
    pub steps: usize,
    /// Estimated error of peaks, crossings and phase ends, from a second solution on the half grid.
    pub estimated_error: KelvinDifference,
}

/// Something found while running that a person must know.
#[derive(Clone, Debug, PartialEq)]
pub enum Finding {
    /// A property was used outside its table by more than 20 K.
    TableLeft {
        /// The station's name.
        station: String,
        /// The layer's name.
        layer: String,
        /// `conductivity`, `heat_capacity` or `emissivity`.
        property: &'static str,
        /// Whether at the hot end.
        hot_end: bool,
        /// By how much at most.
        by: KelvinDifference,
        /// For how long it was more than 20 K outside.
        lasting: Seconds,
    },
    /// A layer's melting point was passed.
    Melts {
        /// The station's name.
        station: String,
        /// The layer's name.
        layer: String,
        /// The melting point.
        at: Kelvin,
        /// When it was first passed.
        first: Seconds,
    },
    /// A layer's decomposition temperature was passed.
    Decomposes {
        /// The station's name.
        station: String,
        /// The layer's name.
        layer: String,
        /// The temperature.
        at: Kelvin,
        /// When it was first passed.
        first: Seconds,
    },
    /// A burn was longer than the heating log, whose last row was held.
    LogHeld {
        /// The station's name.
        station: String,
        /// How long the last row was held.
        lasting: Seconds,
    },
    /// The lateral diffusion length exceeds half the diameter: one-dimensional heat flow is doubtful beside a throat.
    Sideways {
        /// The station's name.
        station: String,
        /// √(α t) to the end of the last burn.
        diffusion_length: Metres,
    },
    /// The estimated error is above the promised tolerance.
    Inaccurate {
        /// The station's name.
        station: String,
        /// The estimate.
        estimated_error: KelvinDifference,
    },
}

/// A temperature profile through the wall at one time; a joint with a resistance gives two points of equal depth.
#[derive(Clone, Debug, PartialEq)]
pub struct DepthProfile {
    /// The clock.
    pub time: Seconds,
    /// Depth and temperature, hot face first.
    pub points: Vec<(Metres, Kelvin)>,
}

/// What is written beside the answers with `--out`: the histories of one station.
#[derive(Clone, Debug, Default)]
pub struct StationHistory {
    /// Rows of the trace, in time order.
    pub trace: Vec<TraceRow>,
    /// Profiles through the wall, in time order.
    pub depths: Vec<DepthProfile>,
}
