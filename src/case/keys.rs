//! Every key of the case file: its name, what it means, what is expected there, and the numbers that make sense. Keys of features that are not built yet stand
//! here too: they are known names.

use super::{library, ready};
use crate::units::Kind;

/// Numbers that make sense, in SI.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Bounds {
    pub least: f64,
    /// Whether `least` itself is out.
    pub above: bool,
    pub most: f64,
    /// Below the first and above the second it is odd, but possible.
    pub odd: (f64, f64),
}

impl Bounds {
    const fn new(least: f64, above: bool, most: f64) -> Self {
        Self {
            least,
            above,
            most,
            odd: (f64::NEG_INFINITY, f64::INFINITY),
        }
    }

    /// Beyond these it is no number of this world.
    const fn within(self, least: f64, most: f64) -> Self {
        Self {
            least,
            above: false,
            most,
            ..self
        }
    }

    const fn odd(self, below: f64, above: f64) -> Self {
        Self { odd: (below, above), ..self }
    }
}

pub(super) const ANY: Bounds = Bounds::new(f64::NEG_INFINITY, false, f64::INFINITY);
pub(super) const POSITIVE: Bounds = Bounds::new(0.0, true, f64::INFINITY);
pub(super) const NOT_NEGATIVE: Bounds = Bounds::new(0.0, false, f64::INFINITY);
pub(super) const SHARE: Bounds = Bounds::new(0.0, false, 1.0);
/// Temperatures lie above absolute zero.
const TEMPERATURE: Bounds = Bounds::new(0.0, true, 1e5).odd(1.0, 6000.0);
const WEATHER: Bounds = TEMPERATURE.odd(200.0, 340.0);
/// Durations, s: three years are enough.
const DURATION: Bounds = Bounds::new(0.0, false, 1e8);
/// Phases, s: below a microsecond nothing burns and nothing holds.
const PHASE_LENGTH: Bounds = DURATION.within(1e-6, 1e8);
/// Lengths, m: from an atom's size to a kilometre.
const LENGTH: Bounds = POSITIVE.within(1e-10, 1e3);
const COEFFICIENT: Bounds = Bounds::new(0.0, false, 1e9).odd(0.0, 1e6);
const CONDUCTANCE: Bounds = POSITIVE.within(1e-6, 1e10).odd(1.0, 1e7);

/// The version of the case file's format.
pub(super) const VERSION: i32 = 1;

/// What is expected at a key.
#[derive(Debug)]
pub(super) enum Expect {
    /// Text of a number with a unit.
    Quantity(Kind, Bounds),
    /// A bare number.
    Number(Bounds),
    /// A bare whole number from the first to the second.
    Whole(i128, i128),
    /// The version of the format, a whole number; one that is not [`VERSION`] is told apart from a slip.
    Version,
    /// true or false.
    Switch,
    /// One of these words.
    Word(&'static [&'static str]),
    /// Any text.
    Text,
    /// Any text; an editor offers these.
    Known(fn() -> Vec<&'static str>),
    /// Text by which paths, places and columns name something.
    Name,
    /// One value or a list of pairs of temperature and value; [`Kind::Number`] for pure numbers.
    Property(Kind, Bounds),
    /// A list.
    List(&'static Expect),
    /// A table.
    Section(&'static Section),
    /// A list of tables.
    Sections(&'static Section),
    /// A table of tables under names of the person's choice.
    Named(&'static Section),
    /// What fits first.
    OneOf(&'static [Expect]),
    /// Looked at where it is used.
    Free,
    /// A table whose keys and values are looked at where they are used.
    FreeTable,
}

/// A key.
#[derive(Debug)]
pub(super) struct Key {
    pub name: &'static str,
    /// What it means, for a person who writes the file.
    pub about: &'static str,
    pub expect: Expect,
    pub required: bool,
}

/// The keys that may stand together.
#[derive(Debug)]
pub(super) struct Section {
    /// How a message calls it.
    pub title: &'static str,
    pub keys: &'static [Key],
}

impl Section {
    pub fn key(&self, name: &str) -> Option<&'static Key> {
        self.keys.iter().find(|key| key.name == name)
    }

    pub fn names(&self) -> impl Iterator<Item = &'static str> {
        self.keys.iter().map(|key| key.name)
    }

    /// Whether its members are told apart by a name of their own.
    pub fn is_named(&self) -> bool {
        self.key("name").is_some_and(|key| matches!(key.expect, Expect::Name))
    }
}

const fn key(name: &'static str, about: &'static str, expect: Expect) -> Key {
    Key {
        name,
        about,
        expect,
        required: false,
    }
}

const fn required(name: &'static str, about: &'static str, expect: Expect) -> Key {
    Key {
        name,
        about,
        expect,
        required: true,
    }
}

const fn temperature() -> Expect {
    Expect::Quantity(Kind::Temperature, TEMPERATURE)
}

const fn coefficient() -> Expect {
    Expect::Quantity(Kind::HeatTransferCoefficient, COEFFICIENT)
}

const fn time() -> Expect {
    Expect::Quantity(Kind::Time, DURATION)
}

const fn length() -> Expect {
    Expect::Quantity(Kind::Length, LENGTH)
}

pub(super) const SHAPES: &[&str] = &["plane", "cylinder", "bar"];
pub(super) const HEATINGS: &[&str] = &["film", "bartz", "flux", "log", "wall"];
pub(super) const CONVECTIONS: &[&str] = &["natural", "forced", "mixed", "none"];
pub(super) const ORIENTATIONS: &[&str] = &["vertical", "facing-up", "facing-down", "horizontal-axis"];
pub(super) const GASES: &[&str] = &["air", "nitrogen", "helium", "hydrogen", "none"];
pub(super) const LIMIT_KINDS: &[&str] = &["service", "strength", "melting", "bond", "seal", "propellant"];
pub(super) const TOUCH_SURFACES: &[&str] = &["bare-metal", "coated-metal", "ceramic", "plastic", "wood"];
pub(super) const PHASES: &[&str] = &["burn", "hold", "shutdown"];
/// Places that every station has.
pub(super) const PLACES: &[&str] = &["hot-face", "outer-face", "everywhere"];

fn materials() -> Vec<&'static str> {
    let mut names: Vec<_> = library::names().collect();
    names.sort_unstable();
    names
}

fn profiles() -> Vec<&'static str> {
    ready::names().collect()
}

fn places() -> Vec<&'static str> {
    PLACES.to_vec()
}

pub(super) static CASE: Section = Section {
    title: "the case file",
    keys: &[
        required("soakdown", "Version of this file's format: 1.", Expect::Version),
        key("title", "What the case is about; stands on every page.", Expect::Text),
        required("surroundings", "The air and what the wall radiates to.", Expect::Section(&SURROUNDINGS)),
        key(
            "start",
            "The wall before the first burn; by default as warm as the air.",
            Expect::Section(&START),
        ),
        key(
            "engine",
            "The engine and its gas, needed where a heating model is \"bartz\".",
            Expect::Section(&ENGINE),
        ),
        required("profile", "What happens when: burns, holds and the shutdown.", Expect::Section(&PROFILE)),
        key(
            "cut_off",
            "How the gas really stops after every burn; for plan and redline. run takes burns as written.",
            Expect::Section(&CUT_OFF),
        ),
        required("station", "One wall section; at least one.", Expect::Sections(&STATION)),
        key(
            "wait",
            "A cool-down question; none given: everywhere below 48 degC.",
            Expect::Sections(&WAIT),
        ),
        key(
            "material",
            "Materials of one's own, used like built-in ones, or values over built-in ones.",
            Expect::Named(&MATERIAL),
        ),
        key(
            "allowance",
            "What is kept in hand; none given: every margin says that no allowance is taken.",
            Expect::Section(&ALLOWANCE),
        ),
        key(
            "variant",
            "The same case with other values: a stack-up, weather or something that fails.",
            Expect::Sections(&VARIANT),
        ),
        key("spread", "An input that is uncertain, and by how much.", Expect::Sections(&SPREAD)),
        key("abort", "How an abort by a reading works; for redline.", Expect::Section(&ABORT)),
        key(
            "fit",
            "What may be calibrated to a test log, and the log's columns.",
            Expect::Section(&FIT),
        ),
        key("solver", "Optional; the defaults must do for nearly everyone.", Expect::Section(&SOLVER)),
    ],
};

/// What is due at a key of this name, in words, where all sections that know it agree; only for plain values.
pub(super) fn due_everywhere(name: &str) -> Option<String> {
    fn search(expect: &Expect, name: &str, found: &mut Vec<String>) {
        match expect {
            Expect::Section(section) | Expect::Sections(section) | Expect::Named(section) => {
                for key in section.keys {
                    if key.name == name {
                        found.push(match key.expect {
                            Expect::Quantity(..) | Expect::Number(_) | Expect::Word(_) => super::form::due(&key.expect),
                            _ => String::new(),
                        });
                    }
                    // Phases hold phases.
                    if !matches!(&key.expect, Expect::Sections(inner) if std::ptr::eq(*inner, &PHASE)) {
                        search(&key.expect, name, found);
                    }
                }
            }
            Expect::OneOf(choices) => choices.iter().for_each(|choice| search(choice, name, found)),
            _ => {}
        }
    }
    let mut found = Vec::new();
    search(&Expect::Section(&CASE), name, &mut found);
    found.dedup();
    match found.as_slice() {
        [due] if !due.is_empty() => Some(due.clone()),
        _ => None,
    }
}

/// What is expected of one member of each list of tables.
pub(super) static MEMBERS: &[Expect] = &[
    Expect::Section(&PHASE),
    Expect::Section(&STATION),
    Expect::Section(&LAYER),
    Expect::Section(&PROBE),
    Expect::Section(&WAIT),
    Expect::Section(&VARIANT),
    Expect::Section(&SPREAD),
    Expect::Section(&FREE),
    Expect::Section(&COLUMN),
];

static SURROUNDINGS: Section = Section {
    title: "[surroundings]",
    keys: &[
        required("air", "Temperature of the air.", Expect::Quantity(Kind::Temperature, WEATHER)),
        key(
            "surfaces",
            "Temperature of what the wall radiates to; default: air.",
            Expect::Quantity(Kind::Temperature, TEMPERATURE.odd(3.0, 400.0)),
        ),
        key(
            "pressure",
            "Absolute pressure of the air; default 1 atm. \"0 Pa\" is vacuum: no correlation applies.",
            Expect::Quantity(Kind::Pressure, NOT_NEGATIVE.within(0.0, 1e9).odd(0.0, 2e6)),
        ),
        key(
            "wind",
            "Wind speed; counts where convection is \"forced\" or \"mixed\". Default 0.",
            Expect::Quantity(Kind::Velocity, NOT_NEGATIVE.odd(0.0, 60.0)),
        ),
        key(
            "sun",
            "Sunshine on outer faces, and on the hot face with open = true, taken in by the solar_absorptivity. Default 0.",
            Expect::Quantity(Kind::HeatFlux, NOT_NEGATIVE.within(0.0, 1e5).odd(0.0, 1500.0)),
        ),
    ],
};

static START: Section = Section {
    title: "[start]",
    keys: &[
        key(
            "temperature",
            "Temperature of the whole wall; default: surroundings.air.",
            Expect::Quantity(Kind::Temperature, TEMPERATURE.odd(20.0, 1500.0)),
        ),
        key(
            "from",
            "depths.csv of an earlier run, instead of a temperature: the next firing of the day.",
            Expect::Text,
        ),
        key("at", "Which of that file's times the start is; required with from.", time()),
    ],
};

static ENGINE: Section = Section {
    title: "[engine]",
    keys: &[
        key(
            "chamber_pressure",
            "Absolute chamber pressure at level 1.",
            Expect::Quantity(Kind::Pressure, POSITIVE.odd(1e4, 5e7)),
        ),
        key("throat_diameter", "Diameter of the throat.", length()),
        key("throat_curvature", "Radius of curvature of the throat contour.", length()),
        key(
            "propellants",
            "A built-in gas table, with mixture_ratio; instead of [engine.gas].",
            Expect::Text,
        ),
        key("mixture_ratio", "Oxidiser to fuel, by mass.", Expect::Number(POSITIVE)),
        key(
            "c_star_efficiency",
            "Multiplies the characteristic velocity, and its square the gas temperature. Default 1.",
            Expect::Number(POSITIVE.odd(0.5, 1.05)),
        ),
        key("gas", "The gas itself, instead of propellants.", Expect::Section(&ENGINE_GAS)),
    ],
};

static ENGINE_GAS: Section = Section {
    title: "[engine.gas]",
    keys: &[
        required("temperature", "Chamber gas temperature.", temperature()),
        required(
            "characteristic_velocity",
            "Characteristic velocity, c*.",
            Expect::Quantity(Kind::Velocity, POSITIVE),
        ),
        required(
            "isentropic_exponent",
            "Isentropic exponent (ratio of heat capacities).",
            Expect::Number(Bounds::new(1.0, true, 2.0)),
        ),
        required("molar_mass", "Molar mass.", Expect::Quantity(Kind::MolarMass, POSITIVE)),
        required(
            "heat_capacity",
            "Specific heat capacity at constant pressure.",
            Expect::Quantity(Kind::HeatCapacity, POSITIVE),
        ),
        key(
            "viscosity",
            "Dynamic viscosity; left out, it is estimated.",
            Expect::Quantity(Kind::Viscosity, POSITIVE),
        ),
        key("prandtl", "Prandtl number; left out, it is estimated.", Expect::Number(POSITIVE)),
    ],
};

static PROFILE: Section = Section {
    title: "[profile]",
    keys: &[
        key(
            "phases",
            "Burns, holds, repeats and the shutdown, in the order in which they run.",
            Expect::Sections(&PHASE),
        ),
        key(
            "log",
            "Pressure log instead of phases: one burn; columns time_s and pressure_Pa.",
            Expect::Text,
        ),
        key(
            "use",
            "A ready profile, by name or by path of a file, instead of phases.",
            Expect::Known(profiles),
        ),
        key("values", "Values for the ready profile.", Expect::FreeTable),
    ],
};

static PHASE: Section = Section {
    title: "a phase",
    keys: &[
        key(
            "burn",
            "Length of a burn, from its start to its cut-off command.",
            Expect::Quantity(Kind::Time, PHASE_LENGTH.odd(0.0, 7200.0)),
        ),
        key("hold", "Length of a pause with the gas off.", Expect::Quantity(Kind::Time, PHASE_LENGTH)),
        key(
            "shutdown",
            "Length of the cool-down as written; the last phase. Left out, one is added.",
            time(),
        ),
        key("repeat", "How many times the inner phases run.", Expect::Whole(1, i128::MAX)),
        key("phases", "The phases that are repeated.", Expect::Sections(&PHASE)),
        key(
            "level",
            "Chamber pressure against its nominal value; convective heating goes with level^0.8. Default 1.",
            Expect::Number(NOT_NEGATIVE.within(0.0, 100.0).odd(0.01, 1.5)),
        ),
        key(
            "ramp",
            "Time in which the heating rises to its value at the start of the burn. Default 0.",
            time(),
        ),
        key(
            "tail",
            "Time in which the heating falls to 0 after the end of the burn. Default 0.",
            time(),
        ),
        key(
            "purge",
            "Whether the purge of [station.idle] flows in this hold or shutdown. Default false.",
            Expect::Switch,
        ),
        key("coolant", "false: the coolant is off in this burn. Default true.", Expect::Switch),
        key("film", "false: no film cooling in this burn. Default true.", Expect::Switch),
        key("keep", "true: plan does not stretch this burn. Default false.", Expect::Switch),
    ],
};

/// A list of phases.
pub(super) static PHASES_LIST: Expect = Expect::Sections(&PHASE);

/// What is expected at a key of a phase.
pub(super) fn phase_expect(name: &str) -> Option<&'static Expect> {
    PHASE.key(name).map(|key| &key.expect)
}

/// A ready profile's file. Its phases are looked at once the values are put in.
pub(super) static READY_PROFILE: Section = Section {
    title: "a ready profile",
    keys: &[
        required("title", "In a few words.", Expect::Text),
        required("explanation", "What it stands for.", Expect::Text),
        required("phases", "As in a case, with \"$name\" where a value goes.", Expect::Free),
        key("values", "Each value with its default and meaning.", Expect::Free),
    ],
};

pub(super) static READY_VALUE: Section = Section {
    title: "a named value",
    keys: &[
        required("default", "Taken where the case gives no other.", Expect::Free),
        required("meaning", "What it is.", Expect::Text),
    ],
};

/// Whether a phase knows this key.
pub(super) fn is_phase_key(name: &str) -> bool {
    PHASE.key(name).is_some()
}

static CUT_OFF: Section = Section {
    title: "[cut_off]",
    keys: &[
        key("delay", "The gas stays on that long after the command. Default 0.", time()),
        key(
            "overrun",
            "Backup cut-off: how much longer the gas burns then, the over-run case. Default 0.",
            time(),
        ),
    ],
};

pub(super) static STATION: Section = Section {
    title: "[[station]]",
    keys: &[
        key("name", "Unique name; a single station may leave it out and is \"wall\".", Expect::Name),
        key(
            "shape",
            "\"plane\" (default), \"cylinder\", heated on the inside, or \"bar\", heated at one end.",
            Expect::Word(SHAPES),
        ),
        key(
            "inner_diameter",
            "Inner diameter of a cylinder: its hot face.",
            Expect::Quantity(Kind::Length, LENGTH.odd(5e-4, 10.0)),
        ),
        key(
            "area_ratio",
            "For bartz: area over throat area; default (inner_diameter / throat_diameter)^2.",
            Expect::Number(Bounds::new(1.0, false, f64::INFINITY).odd(1.0, 1000.0)),
        ),
        key(
            "side",
            "For bartz, with area_ratio above 1: \"chamber\" (subsonic) or \"nozzle\" (supersonic).",
            Expect::Word(&["chamber", "nozzle"]),
        ),
        key(
            "position",
            "Place along the axis; for coupled cases.",
            Expect::Quantity(Kind::Length, ANY),
        ),
        key("section", "Cross-section of a bar.", Expect::Quantity(Kind::Area, POSITIVE)),
        key("perimeter", "Perimeter of a bar's cross-section.", length()),
        required("layers", "The layers, from the hot face outwards.", Expect::Sections(&LAYER)),
        key("heating", "What heats the hot face while burning.", Expect::Section(&HEATING)),
        key(
            "idle",
            "The hot face while the gas is off; required, except with heating model \"wall\".",
            Expect::Section(&IDLE),
        ),
        required("outside", "The outer face, at all times.", Expect::Section(&OUTSIDE)),
        key("probe", "Thermocouples, or any points of interest.", Expect::Sections(&PROBE)),
    ],
};

static LAYER: Section = Section {
    title: "a layer",
    keys: &[
        required("name", "Unique name of the layer in its station.", Expect::Name),
        required(
            "material",
            "Name of a built-in material (soakdown materials lists them) or of a [material.NAME].",
            Expect::Known(materials),
        ),
        required(
            "thickness",
            "Thickness; in a bar, the length of this part of it.",
            Expect::Quantity(Kind::Length, LENGTH.odd(1e-6, 1.0)),
        ),
        key(
            "surface",
            "Which of the material's two emissivities counts; left out: the lower.",
            Expect::Word(&["bare", "oxidised"]),
        ),
        key(
            "limit",
            "The highest temperature this layer may reach: a temperature, or { value, kind, for }. Default: the material's limit.",
            LIMIT,
        ),
        key(
            "joint",
            "Contact with the next layer outwards; left out: perfect contact.",
            Expect::Section(&JOINT),
        ),
        key(
            "section",
            "Cross-section of this part of a bar; default: the station's.",
            Expect::Quantity(Kind::Area, POSITIVE),
        ),
        key("perimeter", "Perimeter of this part of a bar; default: the station's.", length()),
    ],
};

const LIMIT: Expect = Expect::OneOf(&[temperature(), Expect::Section(&LIMIT_TABLE)]);

static LIMIT_TABLE: Section = Section {
    title: "a limit",
    keys: &[
        key("value", "The temperature; kept at or below it.", temperature()),
        key("kind", "What the limit protects; default \"service\".", Expect::Word(LIMIT_KINDS)),
        key("for", "Total time allowed above it; until then the limit is kept. Default 0.", time()),
    ],
};

static JOINT: Section = Section {
    title: "a joint",
    keys: &[
        key(
            "conductance",
            "Contact conductance.",
            Expect::Quantity(Kind::HeatTransferCoefficient, CONDUCTANCE),
        ),
        key(
            "gap",
            "Width of a gap: conduction through its gas and radiation across.",
            Expect::Quantity(Kind::Length, LENGTH.odd(1e-6, 0.2)),
        ),
        key(
            "gas",
            "Gas in the gap or between the rough faces; \"none\" for vacuum.",
            Expect::Word(GASES),
        ),
        key(
            "emissivity",
            "Emissivities of the two faces of the gap, the inner first; default: the layers'.",
            Expect::List(&Expect::Number(SHARE)),
        ),
        key(
            "pressure",
            "Contact pressure; with roughness, slope and hardness the conductance follows by a published correlation.",
            Expect::Quantity(Kind::Pressure, POSITIVE),
        ),
        key("roughness", "Combined root-mean-square roughness of the two faces.", length()),
        key(
            "slope",
            "Combined mean slope of the roughness: an angle, or a bare number (its tangent).",
            Expect::OneOf(&[Expect::Number(POSITIVE), Expect::Quantity(Kind::Angle, POSITIVE)]),
        ),
        key(
            "hardness",
            "Microhardness of the softer face.",
            Expect::Quantity(Kind::Pressure, POSITIVE),
        ),
        key("limit", "The highest temperature of the joint's hotter side: a bond line, a seal.", LIMIT),
    ],
};

static HEATING: Section = Section {
    title: "[station.heating]",
    keys: &[
        required(
            "model",
            "\"film\": coefficient and gas temperature; \"bartz\": from [engine]; \"flux\": absorbed heat flux; \"log\": a file; \"wall\": follows a face of another station.",
            Expect::Word(HEATINGS),
        ),
        key("coefficient", "Film coefficient at level 1; model \"film\".", coefficient()),
        key(
            "gas_temperature",
            "Recovery (adiabatic-wall) temperature of the gas; model \"film\".",
            temperature(),
        ),
        key(
            "factor",
            "Multiplies the convective heating of any model: the thing to spread, fit and doubt. Default 1.",
            Expect::Number(NOT_NEGATIVE.within(0.0, 1e4).odd(0.1, 5.0)),
        ),
        key(
            "gas_emissivity",
            "Emissivity of the gas, or \"estimate\" from the gas table. Default 0.",
            Expect::OneOf(&[Expect::Number(SHARE), Expect::Word(&["estimate"])]),
        ),
        key(
            "open",
            "true: the heated face lies in the open; the losses of [station.idle] go on while burning. Default false.",
            Expect::Switch,
        ),
        key(
            "flux",
            "Absorbed heat flux at level 1; model \"flux\".",
            Expect::Quantity(Kind::HeatFlux, ANY.within(-1e12, 1e12).odd(0.0, 3e8)),
        ),
        key(
            "file",
            "CSV file of model \"log\": columns time_s and flux_W_m2, or time_s, coefficient_W_m2_K and gas_temperature_K.",
            Expect::Text,
        ),
        key(
            "net",
            "true: the log's flux replaces [station.idle] until its last row. Default false.",
            Expect::Switch,
        ),
        key(
            "soot_resistance",
            "Thermal resistance of a carbon deposit, in series while burning. Default 0.",
            Expect::Quantity(Kind::Resistance, NOT_NEGATIVE),
        ),
        key(
            "film_effectiveness",
            "(T_aw - T_aw with film)/(T_aw - film_temperature); with film_temperature.",
            Expect::Number(SHARE),
        ),
        key("film_temperature", "Temperature of the film coolant.", temperature()),
        key("station", "The station whose face is followed; model \"wall\".", Expect::Text),
        key(
            "face",
            "Which face of that station; model \"wall\".",
            Expect::Word(&["hot-face", "outer-face"]),
        ),
        key(
            "conductance",
            "Conductance between that face and this one; model \"wall\".",
            Expect::Quantity(Kind::HeatTransferCoefficient, CONDUCTANCE),
        ),
    ],
};

static IDLE: Section = Section {
    title: "[station.idle]",
    keys: &[
        required(
            "coefficient",
            "Film coefficient while the gas is off: 2 to 15 W/m2/K is usual in a still cavity; 0 is the careful end for waits and bond lines.",
            Expect::Quantity(Kind::HeatTransferCoefficient, COEFFICIENT.odd(0.0, 500.0)),
        ),
        key("temperature", "Temperature of the gas then; default: surroundings.air.", temperature()),
        key(
            "emissivity",
            "Emissivity of the hot face; default: the first layer's.",
            Expect::Property(Kind::Number, SHARE),
        ),
        key(
            "view",
            "What part of the hot face's view is the surroundings, the rest being wall as hot as itself. Default 1 for plane and bar; a cylinder needs it, or cavity.",
            Expect::Number(SHARE),
        ),
        key(
            "cavity",
            "The view of a cylinder from its length and open ends, instead of view.",
            Expect::Section(&CAVITY),
        ),
        key(
            "solar_absorptivity",
            "Share of the sunshine that the hot face takes in; with open = true.",
            Expect::Number(SHARE),
        ),
        key("purge_coefficient", "Film coefficient in phases with purge = true.", coefficient()),
        key("purge_temperature", "Temperature of the purge gas.", temperature()),
    ],
};

static CAVITY: Section = Section {
    title: "a cavity",
    keys: &[
        required("length", "Length of the cylinder.", length()),
        required("open_ends", "How many of its ends are open.", Expect::Whole(1, 2)),
    ],
};

static OUTSIDE: Section = Section {
    title: "[station.outside]",
    keys: &[
        key(
            "radiation",
            "Whether the outer face radiates to surroundings.surfaces. Default true.",
            Expect::Switch,
        ),
        key(
            "emissivity",
            "Emissivity of the outer face; default: the outer layer's.",
            Expect::Property(Kind::Number, SHARE),
        ),
        key(
            "solar_absorptivity",
            "Share of the sunshine that the outer face takes in; needed where sun is above 0.",
            Expect::Number(SHARE),
        ),
        key(
            "convection",
            "\"natural\", \"forced\", \"mixed\", \"none\", or { coefficient = … }; required unless fixed or adiabatic.",
            Expect::OneOf(&[Expect::Word(CONVECTIONS), Expect::Section(&CONVECTION)]),
        ),
        key(
            "orientation",
            "How the face lies; default \"horizontal-axis\" for a cylinder or bar; a plane must say.",
            Expect::Word(ORIENTATIONS),
        ),
        key(
            "length",
            "The length that the correlation asks for; a horizontal-axis cylinder takes its outer diameter.",
            Expect::Quantity(Kind::Length, LENGTH.odd(1e-3, 50.0)),
        ),
        key("limit", "The highest temperature the outer face may reach.", LIMIT),
        key(
            "coolant",
            "Coolant on the outer face in some phases; replaces its convection and radiation there.",
            Expect::Section(&COOLANT),
        ),
        key("fixed", "Holds the outer face at this temperature.", temperature()),
        key("adiabatic", "true: no heat through the outer face. Default false.", Expect::Switch),
    ],
};

static CONVECTION: Section = Section {
    title: "convection",
    keys: &[required("coefficient", "Film coefficient of the outer face.", coefficient())],
};

static COOLANT: Section = Section {
    title: "a coolant",
    keys: &[
        key(
            "coefficient",
            "Film coefficient; or fluid, velocity, passage and the rest.",
            coefficient(),
        ),
        key("fluid", "A built-in fluid.", Expect::Text),
        key("velocity", "Velocity in the passage.", Expect::Quantity(Kind::Velocity, POSITIVE)),
        key("passage", "Hydraulic diameter of the passage.", length()),
        required("temperature", "Temperature of the coolant.", temperature()),
        key(
            "pressure",
            "Absolute pressure of the coolant.",
            Expect::Quantity(Kind::Pressure, POSITIVE),
        ),
        key("entrance", "Length from the entrance of the passage.", length()),
        key(
            "phases",
            "The phases in which it flows; default: burns only.",
            Expect::List(&Expect::Word(PHASES)),
        ),
    ],
};

static PROBE: Section = Section {
    title: "[[station.probe]]",
    keys: &[
        required("name", "Unique name of the probe in its station.", Expect::Name),
        key(
            "depth",
            "Depth from the hot face; with in, from that layer's hot side.",
            Expect::Quantity(Kind::Length, NOT_NEGATIVE),
        ),
        key(
            "from_outside",
            "Depth from the outer face instead; with in, from that layer's outer side.",
            Expect::Quantity(Kind::Length, NOT_NEGATIVE),
        ),
        key("in", "The layer it sits in.", Expect::Text),
        key(
            "lag",
            "First-order time constant of the reading. Default 0.",
            Expect::Quantity(Kind::Time, DURATION.odd(0.0, 60.0)),
        ),
        key(
            "accuracy",
            "For redlines: a fixed error per firing, normal, two standard deviations. Default 0.",
            Expect::Quantity(Kind::TemperatureDifference, NOT_NEGATIVE.odd(0.0, 100.0)),
        ),
    ],
};

static WAIT: Section = Section {
    title: "[[wait]]",
    keys: &[
        required("name", "Unique name of the question.", Expect::Name),
        required(
            "where",
            "\"outer-face\", \"hot-face\", \"everywhere\", a layer, a joint \"liner|jacket\", or a probe.",
            Expect::Known(places),
        ),
        key(
            "below",
            "The temperature to stay below for good.",
            Expect::Quantity(Kind::Temperature, TEMPERATURE.odd(250.0, 1500.0)),
        ),
        key(
            "touch",
            "Burn thresholds of ISO 13732-1, lower ends, instead of below.",
            Expect::Section(&TOUCH),
        ),
        key("station", "The station; default: every station that has such a place.", Expect::Text),
    ],
};

static TOUCH: Section = Section {
    title: "a touch",
    keys: &[
        required(
            "contact",
            "How long skin touches the face, 1 s to 8 h; between two table times the longer one's value.",
            Expect::Quantity(Kind::Time, POSITIVE),
        ),
        required("surface", "What the face is made of.", Expect::Word(TOUCH_SURFACES)),
    ],
};

pub(super) const DENSITY: Expect = Expect::Quantity(Kind::Density, POSITIVE.within(1e-3, 1e5).odd(0.5, 25_000.0));
pub(super) const HEAT_CAPACITY: Expect = Expect::Property(Kind::HeatCapacity, POSITIVE.within(1e-3, 1e7).odd(5.0, 20_000.0));
pub(super) const CONDUCTIVITY: Expect = Expect::Property(Kind::Conductivity, POSITIVE.within(1e-6, 1e6).odd(0.005, 3000.0));
pub(super) const EMISSIVITY: Expect = Expect::OneOf(&[Expect::Property(Kind::Number, SHARE), Expect::Section(&EMISSIVITIES)]);

pub(super) static MATERIAL: Section = Section {
    title: "[material.NAME]",
    keys: &[
        key("title", "What the material is.", Expect::Text),
        key("density", "Density, held constant.", DENSITY),
        key(
            "heat_capacity",
            "Specific heat capacity: one value or pairs of temperature and value.",
            HEAT_CAPACITY,
        ),
        key(
            "conductivity",
            "Thermal conductivity: one value or pairs of temperature and value.",
            CONDUCTIVITY,
        ),
        key(
            "emissivity",
            "Total hemispherical emissivity: a value, a table, or { bare, oxidised }.",
            EMISSIVITY,
        ),
        key("limit", "The default limit of every layer made of it.", LIMIT),
        key(
            "melts",
            "Melting point; above it the run is outside the model, and says so.",
            temperature(),
        ),
        key("decomposes", "Decomposition temperature; above it a warning.", temperature()),
        key(
            "source",
            "Where the values come from: one text, or one for each property.",
            Expect::OneOf(&[Expect::Text, Expect::Section(&PER_PROPERTY)]),
        ),
        key(
            "confidence",
            "How far to trust them: one word, or one for each property.",
            Expect::OneOf(&[Expect::Word(CONFIDENCES), Expect::Section(&CONFIDENCE)]),
        ),
        key(
            "note",
            "What to know about them: one text, or one for each property.",
            Expect::OneOf(&[Expect::Text, Expect::Section(&PER_PROPERTY)]),
        ),
    ],
};

static EMISSIVITIES: Section = Section {
    title: "an emissivity",
    keys: &[
        key("bare", "Of the bare, clean surface.", Expect::Property(Kind::Number, SHARE)),
        key(
            "oxidised",
            "Of the oxidised, sooted or aged surface.",
            Expect::Property(Kind::Number, SHARE),
        ),
    ],
};

pub(super) const CONFIDENCES: &[&str] = &["high", "medium", "low"];

static PER_PROPERTY: Section = Section {
    title: "a text for each property",
    keys: &[
        key("density", "About the density.", Expect::Text),
        key("heat_capacity", "About the heat capacity.", Expect::Text),
        key("conductivity", "About the conductivity.", Expect::Text),
        key("emissivity", "About the emissivity.", Expect::Text),
        key("limit", "About the limit.", Expect::Text),
        key("melts", "About the melting point.", Expect::Text),
        key("decomposes", "About the decomposition temperature.", Expect::Text),
    ],
};

static CONFIDENCE: Section = Section {
    title: "a confidence for each property",
    keys: &[
        key("density", "In the density.", Expect::Word(CONFIDENCES)),
        key("heat_capacity", "In the heat capacity.", Expect::Word(CONFIDENCES)),
        key("conductivity", "In the conductivity.", Expect::Word(CONFIDENCES)),
        key("emissivity", "In the emissivity.", Expect::Word(CONFIDENCES)),
        key("limit", "In the limit.", Expect::Word(CONFIDENCES)),
        key("melts", "In the melting point.", Expect::Word(CONFIDENCES)),
        key("decomposes", "In the decomposition temperature.", Expect::Word(CONFIDENCES)),
    ],
};

static ALLOWANCE: Section = Section {
    title: "[allowance]",
    keys: &[
        key(
            "limits",
            "Taken off every limit. Default 0.",
            Expect::Quantity(Kind::TemperatureDifference, NOT_NEGATIVE.within(0.0, 1e5).odd(0.0, 500.0)),
        ),
        key(
            "heating",
            "Multiplies every heating factor in plan, size and compare, and in a second run by which run judges. Default 1.",
            Expect::Number(POSITIVE.within(1e-3, 1e3).odd(1.0, 3.0)),
        ),
    ],
};

static VARIANT: Section = Section {
    title: "[[variant]]",
    keys: &[
        required("name", "Unique name of the variant.", Expect::Name),
        required(
            "role",
            "\"design\": a row of compare; \"day\": weather the answer must hold in; \"upset\": something that fails.",
            Expect::Word(&["design", "day", "upset"]),
        ),
        required(
            "set",
            "Inputs by their paths, and the values they take: { \"surroundings.air\" = \"40 degC\" }.",
            Expect::FreeTable,
        ),
    ],
};

static SPREAD: Section = Section {
    title: "[[spread]]",
    keys: &[
        required("input", "Path of the input.", Expect::Text),
        required(
            "by",
            "How far it strays: \"20 %\", an absolute value such as \"0.1 mm\", or \"factor 2\" with log-normal.",
            Expect::Free,
        ),
        required(
            "shape",
            "Shape of the distribution.",
            Expect::Word(&["normal", "uniform", "triangle", "log-normal"]),
        ),
        key(
            "sigmas",
            "normal, log-normal: how many standard deviations `by` is; required there. Others: by is the bound.",
            Expect::Number(POSITIVE.odd(0.5, 6.0)),
        ),
        key(
            "shared",
            "true: one draw for all stations that the path names with *. Default false.",
            Expect::Switch,
        ),
        key("with", "Correlation with other inputs of the list, by their paths.", Expect::FreeTable),
    ],
};

static ABORT: Section = Section {
    title: "[abort]",
    keys: &[
        key("blanking", "No abort that long after a start. Default 0.", time()),
        key("persistence", "How long a reading must stand before it counts. Default 0.", time()),
        key(
            "reaction",
            "From there until the cut-off command; cut_off.delay comes on top. Default 0.",
            time(),
        ),
    ],
};

static FIT: Section = Section {
    title: "[fit]",
    keys: &[
        // fit needs it; a run beside a log does not.
        key(
            "free",
            "The inputs that may be calibrated; a run with --log does without.",
            Expect::Sections(&FREE),
        ),
        required(
            "time",
            "The log's time column; its zero is the start of the profile, unless offset is given.",
            Expect::Text,
        ),
        key(
            "offset",
            "Log time at the start of the profile. Default 0.",
            Expect::Quantity(Kind::Time, ANY),
        ),
        required("columns", "The log's columns, and the probes that they read.", Expect::Sections(&COLUMN)),
    ],
};

static FREE: Section = Section {
    title: "a free input",
    keys: &[
        required("input", "Path of the input.", Expect::Text),
        required("from", "Its lower bound.", Expect::Free),
        required("to", "Its upper bound.", Expect::Free),
    ],
};

static COLUMN: Section = Section {
    title: "a column",
    keys: &[
        required("probe", "STATION/PROBE, as in \"throat/TC1\".", Expect::Text),
        required("column", "Name of the column in the log.", Expect::Text),
        required("unit", "Unit of its readings.", Expect::Word(&["degC", "K", "degF", "degR"])),
        required(
            "noise",
            "Standard deviation of a reading.",
            Expect::Quantity(Kind::TemperatureDifference, POSITIVE),
        ),
    ],
};

static SOLVER: Section = Section {
    title: "[solver]",
    keys: &[key(
        "tolerance",
        "How far temperatures may be off by the time steps and the grid. Default 0.05 K.",
        Expect::Quantity(Kind::TemperatureDifference, POSITIVE.within(1e-6, 100.0).odd(1e-3, 2.0)),
    )],
};
