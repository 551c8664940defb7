//! `soakdown-result/1`: the answers of one run as JSON, field for field.

use super::PROGRAM;
use super::cautions::cautions_of_run;
use super::figures::Units;
use super::findings::warnings_of_run;
use crate::answers::{
    EvenedOut, JointAnswer, LayerAnswer, LimitAnswer, LogAnswer, PlaceAnswer, ProbeAnswer, RunAnswers, StationAnswers, Steady, Verdict, WaitAnswer,
    WaitState,
};
use crate::case::{Case, CaseFile};
use crate::diagnostics::Notice;
use crate::model::{LimitKind, LimitOrigin};
use schemars::JsonSchema;
use serde::Serialize;

/// `result.json`.
#[derive(Debug, Serialize, JsonSchema)]
pub struct ResultDocument<'a> {
    /// Name and version of this document.
    #[schemars(extend("const" = "soakdown-result/1"))]
    format: &'static str,
    /// Name and version of the program.
    program: &'static str,
    /// The command as it would be typed again, without --jobs, --out, --quiet and --color.
    command: &'a str,
    /// Path of the case file, as given.
    case: &'a str,
    /// sha256: and the hexadecimal digest of the case file's bytes and the settings put on it.
    case_digest: &'a str,
    /// The other files that the case reads.
    files: Vec<FileRow<'a>>,
    /// Title of the case.
    title: &'a str,
    /// The worst that was found; from worst to best: outside-model (a melting point is passed), over-limit, inside-allowance (kept, but not with [allowance]), no-limits, within-limits.
    #[schemars(extend("enum" = ["outside-model", "over-limit", "inside-allowance", "no-limits", "within-limits"]))]
    verdict: &'static str,
    /// The place with the least margin; null without limits.
    worst: Option<WorstRow<'a>>,
    /// STATION/LAYER of each layer without a limit.
    without_limit: &'a [String],
    /// End of the last burn: the command, before a tail; null without a burn.
    last_burn_end_s: Option<f64>,
    /// Clock to which the run was computed.
    computed_until_s: f64,
    /// The stations, in the order of the case.
    stations: Vec<StationRow<'a>>,
    /// What should be known about the answer.
    warnings: Vec<WarningRow>,
    /// What people must mind, chosen by situation.
    cautions: Vec<CautionRow>,
}

impl<'a> ResultDocument<'a> {
    /// The document of one run; `command` as it would be typed again.
    pub fn new(case: &'a Case, command: &'a str, answers: &'a RunAnswers) -> Self {
        let found = warnings_of_run(answers, Units::Si);
        Self {
            format: "soakdown-result/1",
            program: PROGRAM,
            command,
            case: &case.path,
            case_digest: &case.digest,
            files: file_rows(&case.files),
            title: case.model.title(),
            verdict: verdict_word(answers.verdict),
            worst: answers.worst.as_ref().map(|worst| WorstRow {
                station: &worst.station,
                place: &worst.place,
                margin: worst.margin,
            }),
            without_limit: &answers.without_limit,
            last_burn_end_s: answers.last_burn_end,
            computed_until_s: answers.computed_until,
            stations: answers.stations.iter().map(StationRow::new).collect(),
            warnings: warning_rows(case.notices.iter().cloned().chain(found)),
            cautions: cautions_of_run(&case.model, answers, Units::Si)
                .into_iter()
                .map(|caution| CautionRow {
                    code: caution.code,
                    text: caution.text,
                })
                .collect(),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
pub(super) struct FileRow<'a> {
    /// As the case names it.
    path: &'a str,
    /// sha256: and the hexadecimal digest of its bytes.
    digest: &'a str,
}

pub(super) fn file_rows(files: &[CaseFile]) -> Vec<FileRow<'_>> {
    files
        .iter()
        .map(|file| FileRow {
            path: &file.path,
            digest: &file.digest,
        })
        .collect()
}

#[derive(Debug, Serialize, JsonSchema)]
pub(super) struct WarningRow {
    /// A fixed name, such as property-table-left.
    code: &'static str,
    /// In words.
    text: String,
    /// The station it is about.
    station: Option<String>,
    /// The place in that station.
    #[serde(rename = "where")]
    place: Option<String>,
}

pub(super) fn warning_rows(notices: impl Iterator<Item = Notice>) -> Vec<WarningRow> {
    notices
        .map(|notice| WarningRow {
            code: notice.code,
            text: notice.text,
            station: notice.station,
            place: notice.place,
        })
        .collect()
}

#[derive(Debug, Serialize, JsonSchema)]
pub(super) struct CautionRow {
    /// A fixed name, such as hot-surface.
    pub(super) code: &'static str,
    /// In words.
    pub(super) text: String,
}

#[derive(Debug, Serialize, JsonSchema)]
struct WorstRow<'a> {
    /// Name of the station.
    station: &'a str,
    /// Place in that station.
    #[serde(rename = "where")]
    place: &'a str,
    /// Its margin, K.
    #[serde(rename = "margin_K")]
    margin: f64,
}

#[derive(Debug, Serialize, JsonSchema)]
struct StationRow<'a> {
    /// Name of the station.
    name: &'a str,
    /// Mass of the wall per area of the hot face.
    mass_kg_per_m2: f64,
    /// Thickness of the wall.
    thickness_m: f64,
    /// The layers, from the hot face outwards.
    layers: Vec<LayerRow<'a>>,
    /// The joints, from the hot face outwards.
    joints: Vec<JointRow<'a>>,
    /// The heated face.
    hot_face: PlaceRow,
    /// The face away from the heat.
    outer_face: PlaceRow,
    /// The probes, as they read.
    probes: Vec<ProbeRow<'a>>,
    /// What the heat in the wall still does after the last burn.
    soak_back: SoakBackRow,
    /// With a log: how far the readings are off; else null.
    log: Option<Vec<LogRow<'a>>>,
    /// Clock from which the hottest and the coolest point stay within 1 K; null with never and beyond-100-h.
    evened_out_s: Option<f64>,
    /// Whether the wall evens out.
    #[schemars(extend("enum" = ["evens-out", "never", "beyond-100-h"]))]
    evened_out_state: &'static str,
    /// If the last burn went on for ever, everything of that phase held.
    steady: SteadyRow,
    /// The cool-down questions.
    waits: Vec<WaitRow<'a>>,
    /// The heat ledger, per area of the hot face, to computed_until_s.
    energy: EnergyRow,
    /// How it was computed, and how far it may be off.
    numerical: NumericalRow,
}

impl<'a> StationRow<'a> {
    fn new(station: &'a StationAnswers) -> Self {
        let (evened_out_s, evened_out_state) = match station.evened_out {
            EvenedOut::From(clock) => (Some(clock), "evens-out"),
            EvenedOut::Never => (None, "never"),
            EvenedOut::Beyond => (None, "beyond-100-h"),
        };
        Self {
            name: &station.name,
            mass_kg_per_m2: station.mass,
            thickness_m: station.thickness,
            layers: station.layers.iter().map(LayerRow::new).collect(),
            joints: station.joints.iter().map(JointRow::new).collect(),
            hot_face: PlaceRow::new(&station.hot_face),
            outer_face: PlaceRow::new(&station.outer_face),
            probes: station.probes.iter().map(ProbeRow::new).collect(),
            soak_back: SoakBackRow {
                outer_face_rise: station.soak_back.outer_face_rise,
                outer_face_peak_s: station.soak_back.outer_face_peak,
                last_peak_s: station.soak_back.last_peak.map(|(time, _)| time),
                last_peak_depth_m: station.soak_back.last_peak.map(|(_, depth)| depth),
            },
            log: station
                .log
                .as_ref()
                .map(|rows| rows.iter().map(|row| LogRow::new(&station.name, row)).collect()),
            evened_out_s,
            evened_out_state,
            steady: SteadyRow::new(&station.steady),
            waits: station.waits.iter().map(WaitRow::new).collect(),
            energy: EnergyRow {
                in_: station.energy.inward,
                gross_in: station.energy.gross_inward,
                out: station.energy.outward,
                gross_out: station.energy.gross_outward,
                stored: station.energy.stored,
                imbalance: station.energy.imbalance,
            },
            numerical: NumericalRow {
                nodes: station.numerical.nodes,
                steps: station.numerical.steps,
                estimated_error: station.numerical.estimated_error,
            },
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct PlaceRow {
    /// Highest temperature over all time and depth.
    #[serde(rename = "peak_K")]
    peak: f64,
    /// When.
    peak_s: f64,
    /// In which phase; at a phase change the ending one.
    #[schemars(extend("enum" = ["burn", "hold", "shutdown"]))]
    peak_phase: &'static str,
    /// At which depth from the hot face.
    peak_depth_m: f64,
    /// The limit; null if there is none.
    #[serde(rename = "limit_K")]
    limit: Option<f64>,
    /// What the limit protects.
    #[schemars(extend("enum" = ["service", "strength", "melting", "bond", "seal", "propellant", null]))]
    limit_kind: Option<&'static str>,
    /// Whose limit it is.
    #[schemars(extend("enum" = ["case", "library", null]))]
    limit_from: Option<&'static str>,
    /// What [allowance] takes off it.
    #[serde(rename = "allowance_K")]
    allowance: Option<f64>,
    /// limit_K - allowance_K - peak_K.
    #[serde(rename = "margin_K")]
    margin: Option<f64>,
    /// Clock at which the limit is first passed; null if never.
    first_over_s: Option<f64>,
    /// Total time above the limit.
    time_over_limit_s: Option<f64>,
    /// Total time allowed above it.
    allowed_over_s: Option<f64>,
    /// Whether the limit is kept.
    kept: Option<bool>,
}

impl PlaceRow {
    fn new(at: &PlaceAnswer) -> Self {
        let limit: Option<&LimitAnswer> = at.limit.as_ref();
        Self {
            peak: at.peak,
            peak_s: at.peak_time,
            peak_phase: at.peak_phase.word(),
            peak_depth_m: at.peak_depth,
            limit: limit.map(|limit| limit.limit),
            limit_kind: limit.map(|limit| limit_kind_word(limit.kind)),
            limit_from: limit.map(|limit| limit_origin_word(limit.origin)),
            allowance: limit.map(|limit| limit.allowance),
            margin: limit.map(|limit| limit.margin),
            first_over_s: limit.and_then(|limit| limit.first_over),
            time_over_limit_s: limit.map(|limit| limit.time_over),
            allowed_over_s: limit.map(|limit| limit.allowed_over),
            kept: limit.map(|limit| limit.kept),
        }
    }
}

/// Differences are computed − read.
#[derive(Debug, Serialize, JsonSchema)]
struct LogRow<'a> {
    /// Name of the station.
    station: &'a str,
    /// Name of the probe.
    probe: &'a str,
    /// Computed − read where the two differ most; null where nothing was compared.
    #[serde(rename = "largest_difference_K")]
    largest_difference: Option<f64>,
    /// When that is.
    at_s: Option<f64>,
    /// Computed − read at the last reading.
    #[serde(rename = "end_difference_K")]
    end_difference: Option<f64>,
}

impl<'a> LogRow<'a> {
    fn new(station: &'a str, row: &'a LogAnswer) -> Self {
        Self {
            station,
            probe: &row.probe,
            largest_difference: row.largest.map(|point| point.difference()),
            at_s: row.largest.map(|point| point.time),
            end_difference: row.end.map(|point| point.difference()),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct LayerRow<'a> {
    /// Name of the layer.
    name: &'a str,
    /// Its material.
    material: &'a str,
    #[serde(flatten)]
    at: PlaceRow,
}

impl<'a> LayerRow<'a> {
    fn new(layer: &'a LayerAnswer) -> Self {
        Self {
            name: &layer.name,
            material: &layer.material,
            at: PlaceRow::new(&layer.at),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct JointRow<'a> {
    /// The two layers, the inner first.
    between: [&'a str; 2],
    #[serde(flatten)]
    at: PlaceRow,
}

impl<'a> JointRow<'a> {
    fn new(joint: &'a JointAnswer) -> Self {
        Self {
            between: [&joint.between[0], &joint.between[1]],
            at: PlaceRow::new(&joint.at),
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct ProbeRow<'a> {
    /// Name of the probe.
    name: &'a str,
    /// Depth from the hot face.
    depth_m: f64,
    /// Highest reading.
    #[serde(rename = "peak_K")]
    peak: f64,
    /// When.
    peak_s: f64,
    /// Highest temperature at its place, without its lag.
    #[serde(rename = "peak_true_K")]
    peak_true: f64,
}

impl<'a> ProbeRow<'a> {
    fn new(probe: &'a ProbeAnswer) -> Self {
        Self {
            name: &probe.name,
            depth_m: probe.depth,
            peak: probe.peak,
            peak_s: probe.peak_time,
            peak_true: probe.peak_true,
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct SoakBackRow {
    /// How much hotter the outer face still gets after the end of the last burn; 0 if it only cools.
    #[serde(rename = "outer_face_rise_K")]
    outer_face_rise: f64,
    /// When; last_burn_end_s if it only cools.
    outer_face_peak_s: f64,
    /// Latest peak of any point that gets at least 1 K hotter after the last burn; null if there is none.
    last_peak_s: Option<f64>,
    /// Its depth from the hot face.
    last_peak_depth_m: Option<f64>,
}

#[derive(Debug, Default, Serialize, JsonSchema)]
struct SteadyRow {
    /// Whether there is a steady state; false for a log, or where nothing balances the heat.
    exists: bool,
    /// Hot face in the steady state.
    #[serde(rename = "hot_face_K")]
    hot_face: Option<f64>,
    /// Outer face in the steady state.
    #[serde(rename = "outer_face_K")]
    outer_face: Option<f64>,
    /// (T at the end of the burn - start)/(steady - start); null if that is below 1 K.
    hot_face_reached: Option<f64>,
    /// The same of the outer face.
    outer_face_reached: Option<f64>,
    /// Of that endless burn, until both faces have 95 %.
    time_to_95_percent_s: Option<f64>,
    /// Whether the steady state, the way to it and the soak-back from it keep every limit.
    within_limits: Option<bool>,
}

impl SteadyRow {
    fn new(steady: &Steady) -> Self {
        match steady {
            Steady::None => Self::default(),
            Steady::At(state) => Self {
                exists: true,
                hot_face: Some(state.hot_face),
                outer_face: Some(state.outer_face),
                hot_face_reached: state.hot_face_reached,
                outer_face_reached: state.outer_face_reached,
                time_to_95_percent_s: state.time_to_95_percent,
                within_limits: Some(state.within_limits),
            },
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct WaitRow<'a> {
    /// Name of the question.
    name: &'a str,
    /// Where.
    #[serde(rename = "where")]
    place: &'a str,
    /// The temperature to stay below.
    #[serde(rename = "below_K")]
    below: f64,
    /// What came out.
    #[schemars(extend("enum" = ["cools", "stays-below", "never", "beyond-100-h"]))]
    state: &'static str,
    /// From the end of the last burn (no burn: from 0) to the last time the place comes down to the value; 0 with stays-below, null with never and beyond-100-h.
    wait_s: Option<f64>,
    /// The same as a clock.
    clock_s: Option<f64>,
    /// How much longer for each K lower.
    #[serde(rename = "slope_s_per_K")]
    slope: Option<f64>,
}

impl<'a> WaitRow<'a> {
    fn new(wait: &'a WaitAnswer) -> Self {
        let (state, wait_s, clock_s, slope) = match wait.state {
            WaitState::Cools { wait, clock, slope } => ("cools", Some(wait), Some(clock), Some(slope)),
            WaitState::StaysBelow { clock } => ("stays-below", Some(0.0), Some(clock), None),
            WaitState::Never => ("never", None, None, None),
            WaitState::Beyond => ("beyond-100-h", None, None, None),
        };
        Self {
            name: &wait.name,
            place: &wait.place,
            below: wait.below,
            state,
            wait_s,
            clock_s,
            slope,
        }
    }
}

#[derive(Debug, Serialize, JsonSchema)]
struct EnergyRow {
    /// Net heat into the hot face.
    #[serde(rename = "in_J_per_m2")]
    in_: f64,
    /// Heat into the hot face, without what it gave back.
    #[serde(rename = "gross_in_J_per_m2")]
    gross_in: f64,
    /// Net heat out of the outer face.
    #[serde(rename = "out_J_per_m2")]
    out: f64,
    /// Heat out of the outer face, without what it took back.
    #[serde(rename = "gross_out_J_per_m2")]
    gross_out: f64,
    /// Heat stored in the wall.
    #[serde(rename = "stored_J_per_m2")]
    stored: f64,
    /// (in - out - stored) against the heat turned over: bookkeeping, not accuracy.
    imbalance: f64,
}

#[derive(Debug, Serialize, JsonSchema)]
struct NumericalRow {
    /// Nodes through the wall.
    nodes: usize,
    /// Time steps.
    steps: usize,
    /// Estimated numerical error of the temperatures.
    #[serde(rename = "estimated_error_K")]
    estimated_error: f64,
}

fn verdict_word(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::OutsideModel => "outside-model",
        Verdict::OverLimit => "over-limit",
        Verdict::InsideAllowance => "inside-allowance",
        Verdict::NoLimits => "no-limits",
        Verdict::WithinLimits => "within-limits",
    }
}

/// The word of the case file for what a limit protects.
pub(super) fn limit_kind_word(kind: LimitKind) -> &'static str {
    match kind {
        LimitKind::Service => "service",
        LimitKind::Strength => "strength",
        LimitKind::Melting => "melting",
        LimitKind::Bond => "bond",
        LimitKind::Seal => "seal",
        LimitKind::Propellant => "propellant",
    }
}

/// Whose limit it is.
pub(super) fn limit_origin_word(origin: LimitOrigin) -> &'static str {
    match origin {
        LimitOrigin::Case => "case",
        LimitOrigin::Library => "library",
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::sample;
    use serde_json::Value;

    fn keys(value: &Value) -> Vec<&str> {
        value.as_object().expect("an object").keys().map(String::as_str).collect()
    }

    const PLACE: [&str; 13] = [
        "peak_K",
        "peak_s",
        "peak_phase",
        "peak_depth_m",
        "limit_K",
        "limit_kind",
        "limit_from",
        "allowance_K",
        "margin_K",
        "first_over_s",
        "time_over_limit_s",
        "allowed_over_s",
        "kept",
    ];

    fn sorted<'a>(names: impl IntoIterator<Item = &'a str>) -> Vec<&'a str> {
        let mut names: Vec<&str> = names.into_iter().collect();
        names.sort_unstable();
        names
    }

    /// Against the list of keys in RESULTS.md, typed here anew.
    #[test]
    fn every_key_of_the_contract_is_there_and_no_other() {
        let case = sample::case();
        let answers = sample::answers();
        let document = serde_json::to_value(ResultDocument::new(&case, "soakdown run chamber.toml", &answers)).expect("a value");
        let expect = |value: &Value, names: &[&str]| assert_eq!(sorted(keys(value)), sorted(names.iter().copied()));
        expect(
            &document,
            &[
                "format",
                "program",
                "command",
                "case",
                "case_digest",
                "files",
                "title",
                "verdict",
                "worst",
                "without_limit",
                "last_burn_end_s",
                "computed_until_s",
                "stations",
                "warnings",
                "cautions",
            ],
        );
        expect(&document["files"][0], &["path", "digest"]);
        expect(&document["worst"], &["station", "where", "margin_K"]);
        let station = &document["stations"][0];
        expect(
            station,
            &[
                "name",
                "mass_kg_per_m2",
                "thickness_m",
                "layers",
                "joints",
                "hot_face",
                "outer_face",
                "probes",
                "soak_back",
                "log",
                "evened_out_s",
                "evened_out_state",
                "steady",
                "waits",
                "energy",
                "numerical",
            ],
        );
        let with = |first: &[&'static str]| first.iter().chain(&PLACE).copied().collect::<Vec<_>>();
        expect(&station["layers"][0], &with(&["name", "material"]));
        expect(&station["joints"][0], &with(&["between"]));
        expect(&station["hot_face"], &PLACE);
        expect(&station["outer_face"], &PLACE);
        expect(&station["probes"][0], &["name", "depth_m", "peak_K", "peak_s", "peak_true_K"]);
        expect(
            &station["soak_back"],
            &["outer_face_rise_K", "outer_face_peak_s", "last_peak_s", "last_peak_depth_m"],
        );
        expect(
            &station["steady"],
            &[
                "exists",
                "hot_face_K",
                "outer_face_K",
                "hot_face_reached",
                "outer_face_reached",
                "time_to_95_percent_s",
                "within_limits",
            ],
        );
        expect(
            &station["waits"][0],
            &["name", "where", "below_K", "state", "wait_s", "clock_s", "slope_s_per_K"],
        );
        expect(
            &station["energy"],
            &[
                "in_J_per_m2",
                "gross_in_J_per_m2",
                "out_J_per_m2",
                "gross_out_J_per_m2",
                "stored_J_per_m2",
                "imbalance",
            ],
        );
        expect(&station["numerical"], &["nodes", "steps", "estimated_error_K"]);
        expect(&document["warnings"][0], &["code", "text", "station", "where"]);
        expect(&document["cautions"][0], &["code", "text"]);
    }

    #[test]
    fn keys_stand_in_the_order_of_the_contract() {
        let case = sample::case();
        let answers = sample::answers();
        let text = serde_json::to_string(&ResultDocument::new(&case, "c", &answers)).expect("text");
        let order = [
            "\"format\"",
            "\"program\"",
            "\"command\"",
            "\"case\"",
            "\"case_digest\"",
            "\"files\"",
            "\"title\"",
            "\"verdict\"",
            "\"worst\"",
            "\"without_limit\"",
            "\"last_burn_end_s\"",
            "\"computed_until_s\"",
            "\"stations\"",
            "\"peak_K\"",
            "\"peak_s\"",
            "\"joints\"",
            "\"probes\"",
            "\"soak_back\"",
            "\"log\":null",
            "\"evened_out_s\"",
            "\"steady\"",
            "\"waits\"",
            "\"energy\"",
            "\"numerical\"",
            "\"warnings\"",
            "\"cautions\"",
        ];
        let places: Vec<usize> = order.iter().map(|key| text.find(key).unwrap_or_else(|| panic!("no {key}"))).collect();
        assert!(places.is_sorted(), "{places:?}");
    }

    #[test]
    fn states_and_what_does_not_exist() {
        let case = sample::case();
        let mut answers = sample::answers();
        answers.worst = None;
        answers.last_burn_end = None;
        let station = &mut answers.stations[0];
        station.steady = Steady::None;
        station.evened_out = EvenedOut::Beyond;
        station.waits[0].state = WaitState::Never;
        let below = WaitState::StaysBelow { clock: 2.0 };
        station.waits[1].state = below;
        let document = serde_json::to_value(ResultDocument::new(&case, "c", &answers)).expect("a value");
        assert_eq!(document["worst"], Value::Null);
        assert_eq!(document["last_burn_end_s"], Value::Null);
        let station = &document["stations"][0];
        assert_eq!(station["steady"]["exists"], false);
        assert_eq!(station["steady"]["within_limits"], Value::Null);
        assert_eq!(station["evened_out_state"], "beyond-100-h");
        assert_eq!(station["evened_out_s"], Value::Null);
        assert_eq!(station["waits"][0]["state"], "never");
        assert_eq!(station["waits"][0]["wait_s"], Value::Null);
        assert_eq!(station["waits"][1]["state"], "stays-below");
        assert_eq!(station["waits"][1]["wait_s"], 0.0);
        assert_eq!(station["hot_face"]["limit_K"], Value::Null);
        assert_eq!(station["hot_face"]["kept"], Value::Null);
    }
}
