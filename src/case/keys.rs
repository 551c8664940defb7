//! Every key of the case file: its name, what is expected there, and the numbers that make sense. Keys of features that are not built yet stand
//! here too: they are known names.

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

/// What is expected at a key.
#[derive(Debug)]
pub(super) enum Expect {
    /// Text of a number with a unit.
    Quantity(Kind, Bounds),
    /// A bare number.
    Number(Bounds),
    /// A bare whole number from the first to the second.
    Whole(i128, i128),
    /// true or false.
    Switch,
    /// One of these words.
    Word(&'static [&'static str]),
    /// Any text.
    Text,
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
}

/// A key.
#[derive(Debug)]
pub(super) struct Key {
    pub name: &'static str,
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

const fn key(name: &'static str, expect: Expect) -> Key {
    Key {
        name,
        expect,
        required: false,
    }
}

const fn required(name: &'static str, expect: Expect) -> Key {
    Key {
        name,
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

pub(super) static CASE: Section = Section {
    title: "the case file",
    keys: &[
        required("soakdown", Expect::Whole(i128::MIN, i128::MAX)),
        key("title", Expect::Text),
        required("surroundings", Expect::Section(&SURROUNDINGS)),
        key("start", Expect::Section(&START)),
        key("engine", Expect::Section(&ENGINE)),
        required("profile", Expect::Section(&PROFILE)),
        key("cut_off", Expect::Section(&CUT_OFF)),
        required("station", Expect::Sections(&STATION)),
        key("wait", Expect::Sections(&WAIT)),
        key("material", Expect::Named(&MATERIAL)),
        key("allowance", Expect::Section(&ALLOWANCE)),
        key("variant", Expect::Sections(&VARIANT)),
        key("spread", Expect::Sections(&SPREAD)),
        key("abort", Expect::Section(&ABORT)),
        key("fit", Expect::Section(&FIT)),
        key("solver", Expect::Section(&SOLVER)),
    ],
};

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
        required("air", Expect::Quantity(Kind::Temperature, WEATHER)),
        key("surfaces", Expect::Quantity(Kind::Temperature, TEMPERATURE.odd(3.0, 400.0))),
        key("pressure", Expect::Quantity(Kind::Pressure, NOT_NEGATIVE.within(0.0, 1e9).odd(0.0, 2e6))),
        key("wind", Expect::Quantity(Kind::Velocity, NOT_NEGATIVE.odd(0.0, 60.0))),
        key("sun", Expect::Quantity(Kind::HeatFlux, NOT_NEGATIVE.within(0.0, 1e5).odd(0.0, 1500.0))),
    ],
};

static START: Section = Section {
    title: "[start]",
    keys: &[
        key("temperature", Expect::Quantity(Kind::Temperature, TEMPERATURE.odd(20.0, 1500.0))),
        key("from", Expect::Text),
        key("at", time()),
    ],
};

static ENGINE: Section = Section {
    title: "[engine]",
    keys: &[
        key("chamber_pressure", Expect::Quantity(Kind::Pressure, POSITIVE.odd(1e4, 5e7))),
        key("throat_diameter", length()),
        key("throat_curvature", length()),
        key("propellants", Expect::Text),
        key("mixture_ratio", Expect::Number(POSITIVE)),
        key("c_star_efficiency", Expect::Number(POSITIVE.odd(0.5, 1.05))),
        key("gas", Expect::Section(&ENGINE_GAS)),
    ],
};

static ENGINE_GAS: Section = Section {
    title: "[engine.gas]",
    keys: &[
        required("temperature", temperature()),
        required("characteristic_velocity", Expect::Quantity(Kind::Velocity, POSITIVE)),
        required("isentropic_exponent", Expect::Number(Bounds::new(1.0, true, 2.0))),
        required("molar_mass", Expect::Quantity(Kind::MolarMass, POSITIVE)),
        required("heat_capacity", Expect::Quantity(Kind::HeatCapacity, POSITIVE)),
        key("viscosity", Expect::Quantity(Kind::Viscosity, POSITIVE)),
        key("prandtl", Expect::Number(POSITIVE)),
    ],
};

static PROFILE: Section = Section {
    title: "[profile]",
    keys: &[
        key("phases", Expect::Sections(&PHASE)),
        key("log", Expect::Text),
        key("use", Expect::Text),
        key("values", Expect::Free),
    ],
};

static PHASE: Section = Section {
    title: "a phase",
    keys: &[
        key("burn", Expect::Quantity(Kind::Time, PHASE_LENGTH.odd(0.0, 7200.0))),
        key("hold", Expect::Quantity(Kind::Time, PHASE_LENGTH)),
        key("shutdown", time()),
        key("repeat", Expect::Whole(1, i128::MAX)),
        key("phases", Expect::Sections(&PHASE)),
        key("level", Expect::Number(NOT_NEGATIVE.within(0.0, 100.0).odd(0.01, 1.5))),
        key("ramp", time()),
        key("tail", time()),
        key("purge", Expect::Switch),
        key("coolant", Expect::Switch),
        key("film", Expect::Switch),
        key("keep", Expect::Switch),
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
        required("title", Expect::Text),
        required("explanation", Expect::Text),
        required("phases", Expect::Free),
        key("values", Expect::Free),
    ],
};

pub(super) static READY_VALUE: Section = Section {
    title: "a named value",
    keys: &[required("default", Expect::Free), required("meaning", Expect::Text)],
};

/// Whether a phase knows this key.
pub(super) fn is_phase_key(name: &str) -> bool {
    PHASE.key(name).is_some()
}

static CUT_OFF: Section = Section {
    title: "[cut_off]",
    keys: &[key("delay", time()), key("overrun", time())],
};

pub(super) static STATION: Section = Section {
    title: "[[station]]",
    keys: &[
        key("name", Expect::Name),
        key("shape", Expect::Word(SHAPES)),
        key("inner_diameter", Expect::Quantity(Kind::Length, LENGTH.odd(5e-4, 10.0))),
        key("area_ratio", Expect::Number(Bounds::new(1.0, false, f64::INFINITY).odd(1.0, 1000.0))),
        key("side", Expect::Word(&["chamber", "nozzle"])),
        key("position", Expect::Quantity(Kind::Length, ANY)),
        key("section", Expect::Quantity(Kind::Area, POSITIVE)),
        key("perimeter", length()),
        required("layers", Expect::Sections(&LAYER)),
        key("heating", Expect::Section(&HEATING)),
        key("idle", Expect::Section(&IDLE)),
        required("outside", Expect::Section(&OUTSIDE)),
        key("probe", Expect::Sections(&PROBE)),
    ],
};

static LAYER: Section = Section {
    title: "a layer",
    keys: &[
        required("name", Expect::Name),
        required("material", Expect::Text),
        required("thickness", Expect::Quantity(Kind::Length, LENGTH.odd(1e-6, 1.0))),
        key("surface", Expect::Word(&["bare", "oxidised"])),
        key("limit", LIMIT),
        key("joint", Expect::Section(&JOINT)),
        key("section", Expect::Quantity(Kind::Area, POSITIVE)),
        key("perimeter", length()),
    ],
};

const LIMIT: Expect = Expect::OneOf(&[temperature(), Expect::Section(&LIMIT_TABLE)]);

static LIMIT_TABLE: Section = Section {
    title: "a limit",
    keys: &[key("value", temperature()), key("kind", Expect::Word(LIMIT_KINDS)), key("for", time())],
};

static JOINT: Section = Section {
    title: "a joint",
    keys: &[
        key("conductance", Expect::Quantity(Kind::HeatTransferCoefficient, CONDUCTANCE)),
        key("gap", Expect::Quantity(Kind::Length, LENGTH.odd(1e-6, 0.2))),
        key("gas", Expect::Word(GASES)),
        key("emissivity", Expect::List(&Expect::Number(SHARE))),
        key("pressure", Expect::Quantity(Kind::Pressure, POSITIVE)),
        key("roughness", length()),
        key(
            "slope",
            Expect::OneOf(&[Expect::Number(POSITIVE), Expect::Quantity(Kind::Angle, POSITIVE)]),
        ),
        key("hardness", Expect::Quantity(Kind::Pressure, POSITIVE)),
        key("limit", LIMIT),
    ],
};

static HEATING: Section = Section {
    title: "[station.heating]",
    keys: &[
        required("model", Expect::Word(HEATINGS)),
        key("coefficient", coefficient()),
        key("gas_temperature", temperature()),
        key("factor", Expect::Number(NOT_NEGATIVE.within(0.0, 1e4).odd(0.1, 5.0))),
        key("gas_emissivity", Expect::OneOf(&[Expect::Number(SHARE), Expect::Word(&["estimate"])])),
        key("open", Expect::Switch),
        key("flux", Expect::Quantity(Kind::HeatFlux, ANY.within(-1e12, 1e12).odd(0.0, 3e8))),
        key("file", Expect::Text),
        key("net", Expect::Switch),
        key("soot_resistance", Expect::Quantity(Kind::Resistance, NOT_NEGATIVE)),
        key("film_effectiveness", Expect::Number(SHARE)),
        key("film_temperature", temperature()),
        key("station", Expect::Text),
        key("face", Expect::Word(&["hot-face", "outer-face"])),
        key("conductance", Expect::Quantity(Kind::HeatTransferCoefficient, CONDUCTANCE)),
    ],
};

static IDLE: Section = Section {
    title: "[station.idle]",
    keys: &[
        required(
            "coefficient",
            Expect::Quantity(Kind::HeatTransferCoefficient, COEFFICIENT.odd(0.0, 500.0)),
        ),
        key("temperature", temperature()),
        key("emissivity", Expect::Property(Kind::Number, SHARE)),
        key("view", Expect::Number(SHARE)),
        key("cavity", Expect::Section(&CAVITY)),
        key("solar_absorptivity", Expect::Number(SHARE)),
        key("purge_coefficient", coefficient()),
        key("purge_temperature", temperature()),
    ],
};

static CAVITY: Section = Section {
    title: "a cavity",
    keys: &[required("length", length()), required("open_ends", Expect::Whole(1, 2))],
};

static OUTSIDE: Section = Section {
    title: "[station.outside]",
    keys: &[
        key("radiation", Expect::Switch),
        key("emissivity", Expect::Property(Kind::Number, SHARE)),
        key("solar_absorptivity", Expect::Number(SHARE)),
        key("convection", Expect::OneOf(&[Expect::Word(CONVECTIONS), Expect::Section(&CONVECTION)])),
        key("orientation", Expect::Word(ORIENTATIONS)),
        key("length", Expect::Quantity(Kind::Length, LENGTH.odd(1e-3, 50.0))),
        key("limit", LIMIT),
        key("coolant", Expect::Section(&COOLANT)),
        key("fixed", temperature()),
        key("adiabatic", Expect::Switch),
    ],
};

static CONVECTION: Section = Section {
    title: "convection",
    keys: &[required("coefficient", coefficient())],
};

static COOLANT: Section = Section {
    title: "a coolant",
    keys: &[
        key("coefficient", coefficient()),
        key("fluid", Expect::Text),
        key("velocity", Expect::Quantity(Kind::Velocity, POSITIVE)),
        key("passage", length()),
        required("temperature", temperature()),
        key("pressure", Expect::Quantity(Kind::Pressure, POSITIVE)),
        key("entrance", length()),
        key("phases", Expect::List(&Expect::Word(PHASES))),
    ],
};

static PROBE: Section = Section {
    title: "[[station.probe]]",
    keys: &[
        required("name", Expect::Name),
        key("depth", Expect::Quantity(Kind::Length, NOT_NEGATIVE)),
        key("from_outside", Expect::Quantity(Kind::Length, NOT_NEGATIVE)),
        key("in", Expect::Text),
        key("lag", Expect::Quantity(Kind::Time, DURATION.odd(0.0, 60.0))),
        key("accuracy", Expect::Quantity(Kind::TemperatureDifference, NOT_NEGATIVE.odd(0.0, 100.0))),
    ],
};

static WAIT: Section = Section {
    title: "[[wait]]",
    keys: &[
        required("name", Expect::Name),
        required("where", Expect::Text),
        key("below", Expect::Quantity(Kind::Temperature, TEMPERATURE.odd(250.0, 1500.0))),
        key("touch", Expect::Section(&TOUCH)),
        key("station", Expect::Text),
    ],
};

static TOUCH: Section = Section {
    title: "a touch",
    keys: &[
        required("contact", Expect::Quantity(Kind::Time, POSITIVE)),
        required("surface", Expect::Word(TOUCH_SURFACES)),
    ],
};

pub(super) const DENSITY: Expect = Expect::Quantity(Kind::Density, POSITIVE.within(1e-3, 1e5).odd(0.5, 25_000.0));
pub(super) const HEAT_CAPACITY: Expect = Expect::Property(Kind::HeatCapacity, POSITIVE.within(1e-3, 1e7).odd(50.0, 20_000.0));
pub(super) const CONDUCTIVITY: Expect = Expect::Property(Kind::Conductivity, POSITIVE.within(1e-6, 1e6).odd(0.005, 3000.0));
pub(super) const EMISSIVITY: Expect = Expect::OneOf(&[Expect::Property(Kind::Number, SHARE), Expect::Section(&EMISSIVITIES)]);

pub(super) static MATERIAL: Section = Section {
    title: "[material.NAME]",
    keys: &[
        key("title", Expect::Text),
        key("density", DENSITY),
        key("heat_capacity", HEAT_CAPACITY),
        key("conductivity", CONDUCTIVITY),
        key("emissivity", EMISSIVITY),
        key("limit", LIMIT),
        key("melts", temperature()),
        key("decomposes", temperature()),
        key("source", Expect::OneOf(&[Expect::Text, Expect::Section(&PER_PROPERTY)])),
        key("confidence", Expect::OneOf(&[Expect::Word(CONFIDENCES), Expect::Section(&CONFIDENCE)])),
        key("note", Expect::OneOf(&[Expect::Text, Expect::Section(&PER_PROPERTY)])),
    ],
};

static EMISSIVITIES: Section = Section {
    title: "an emissivity",
    keys: &[
        key("bare", Expect::Property(Kind::Number, SHARE)),
        key("oxidised", Expect::Property(Kind::Number, SHARE)),
    ],
};

pub(super) const CONFIDENCES: &[&str] = &["high", "medium", "low"];

static PER_PROPERTY: Section = Section {
    title: "a text for each property",
    keys: &[
        key("density", Expect::Text),
        key("heat_capacity", Expect::Text),
        key("conductivity", Expect::Text),
        key("emissivity", Expect::Text),
        key("limit", Expect::Text),
        key("melts", Expect::Text),
        key("decomposes", Expect::Text),
    ],
};

static CONFIDENCE: Section = Section {
    title: "a confidence for each property",
    keys: &[
        key("density", Expect::Word(CONFIDENCES)),
        key("heat_capacity", Expect::Word(CONFIDENCES)),
        key("conductivity", Expect::Word(CONFIDENCES)),
        key("emissivity", Expect::Word(CONFIDENCES)),
        key("limit", Expect::Word(CONFIDENCES)),
        key("melts", Expect::Word(CONFIDENCES)),
        key("decomposes", Expect::Word(CONFIDENCES)),
    ],
};

static ALLOWANCE: Section = Section {
    title: "[allowance]",
    keys: &[
        key(
            "limits",
            Expect::Quantity(Kind::TemperatureDifference, NOT_NEGATIVE.within(0.0, 1e5).odd(0.0, 500.0)),
        ),
        key("heating", Expect::Number(POSITIVE.within(1e-3, 1e3).odd(1.0, 3.0))),
    ],
};

static VARIANT: Section = Section {
    title: "[[variant]]",
    keys: &[
        required("name", Expect::Name),
        required("role", Expect::Word(&["design", "day", "upset"])),
        required("set", Expect::Free),
    ],
};

static SPREAD: Section = Section {
    title: "[[spread]]",
    keys: &[
        required("input", Expect::Text),
        required("by", Expect::Free),
        required("shape", Expect::Word(&["normal", "uniform", "triangle", "log-normal"])),
        key("sigmas", Expect::Number(POSITIVE.odd(0.5, 6.0))),
        key("shared", Expect::Switch),
        key("with", Expect::Free),
    ],
};

static ABORT: Section = Section {
    title: "[abort]",
    keys: &[key("blanking", time()), key("persistence", time()), key("reaction", time())],
};

static FIT: Section = Section {
    title: "[fit]",
    keys: &[
        // fit needs it; a run beside a log does not.
        key("free", Expect::Sections(&FREE)),
        required("time", Expect::Text),
        key("offset", Expect::Quantity(Kind::Time, ANY)),
        required("columns", Expect::Sections(&COLUMN)),
    ],
};

static FREE: Section = Section {
    title: "a free input",
    keys: &[
        required("input", Expect::Text),
        required("from", Expect::Free),
        required("to", Expect::Free),
    ],
};

static COLUMN: Section = Section {
    title: "a column",
    keys: &[
        required("probe", Expect::Text),
        required("column", Expect::Text),
        required("unit", Expect::Word(&["degC", "K", "degF", "degR"])),
        required("noise", Expect::Quantity(Kind::TemperatureDifference, POSITIVE)),
    ],
};

static SOLVER: Section = Section {
    title: "[solver]",
    keys: &[key(
        "tolerance",
        Expect::Quantity(Kind::TemperatureDifference, POSITIVE.within(1e-6, 100.0).odd(1e-3, 2.0)),
    )],
};
