//! The table of unit names.

use super::Dimension;

/// One factor that units are made of.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Factor {
    /// As it is written.
    pub name: &'static str,
    /// What one of it is in SI.
    pub scale: f64,
    /// What is added to a number of it, before scaling, where it stands alone for a temperature: degC and degF don't start at absolute zero.
    pub offset: f64,
    /// Its dimension.
    pub dimension: Dimension,
}

const LENGTH: Dimension = Dimension::new([1, 0, 0, 0, 0, 0]);
const MASS: Dimension = Dimension::new([0, 1, 0, 0, 0, 0]);
const TIME: Dimension = Dimension::new([0, 0, 1, 0, 0, 0]);
const TEMPERATURE: Dimension = Dimension::new([0, 0, 0, 1, 0, 0]);
const AMOUNT: Dimension = Dimension::new([0, 0, 0, 0, 1, 0]);
const ANGLE: Dimension = Dimension::new([0, 0, 0, 0, 0, 1]);
const FORCE: Dimension = Dimension::new([1, 1, -2, 0, 0, 0]);
const PRESSURE: Dimension = Dimension::new([-1, 1, -2, 0, 0, 0]);
const ENERGY: Dimension = Dimension::new([2, 1, -2, 0, 0, 0]);
const POWER: Dimension = Dimension::new([2, 1, -3, 0, 0, 0]);
const VELOCITY: Dimension = Dimension::new([1, 0, -1, 0, 0, 0]);
const PURE: Dimension = Dimension::new([0; 6]);

/// International avoirdupois pound, kg, and inch, m: exact since 1959 (NIST SP 811, Appendix B).
const POUND: f64 = 0.453_592_37;
const INCH: f64 = 0.025_4;
/// Pound-force per square inch, Pa, by the standard acceleration of free fall.
const PSI: f64 = POUND * 9.806_65 / (INCH * INCH);
/// International Table British thermal unit, J (NIST SP 811, Appendix B.8).
const BTU: f64 = 1_055.055_852_62;

const fn factor(name: &'static str, scale: f64, dimension: Dimension) -> Factor {
    Factor {
        name,
        scale,
        offset: 0.0,
        dimension,
    }
}

const fn degree(name: &'static str, scale: f64, offset: f64) -> Factor {
    Factor {
        name,
        scale,
        offset,
        dimension: TEMPERATURE,
    }
}

/// Every factor. Scales by NIST SP 811 (2008), Appendix B.
pub const FACTORS: &[Factor] = &[
    factor("m", 1.0, LENGTH),
    factor("cm", 1e-2, LENGTH),
    factor("mm", 1e-3, LENGTH),
    factor("um", 1e-6, LENGTH),
    factor("in", INCH, LENGTH),
    factor("ft", 12.0 * INCH, LENGTH),
    factor("mil", INCH / 1000.0, LENGTH),
    factor("s", 1.0, TIME),
    factor("ms", 1e-3, TIME),
    factor("min", 60.0, TIME),
    factor("h", 3600.0, TIME),
    factor("d", 86_400.0, TIME),
    degree("K", 1.0, 0.0),
    degree("degC", 1.0, 273.15),
    degree("degF", 5.0 / 9.0, 459.67),
    degree("degR", 5.0 / 9.0, 0.0),
    factor("Pa", 1.0, PRESSURE),
    factor("kPa", 1e3, PRESSURE),
    factor("MPa", 1e6, PRESSURE),
    factor("bar", 1e5, PRESSURE),
    factor("mbar", 1e2, PRESSURE),
    factor("atm", 101_325.0, PRESSURE),
    factor("torr", 101_325.0 / 760.0, PRESSURE),
    factor("psi", PSI, PRESSURE),
    factor("psia", PSI, PRESSURE),
    factor("W", 1.0, POWER),
    factor("kW", 1e3, POWER),
    factor("MW", 1e6, POWER),
    factor("J", 1.0, ENERGY),
    factor("kJ", 1e3, ENERGY),
    factor("MJ", 1e6, ENERGY),
    factor("Btu", BTU, ENERGY),
    factor("kg", 1.0, MASS),
    factor("g", 1e-3, MASS),
    factor("lb", POUND, MASS),
    factor("lbm", POUND, MASS),
    factor("mol", 1.0, AMOUNT),
    factor("kmol", 1e3, AMOUNT),
    factor("N", 1.0, FORCE),
    factor("mph", 1609.344 / 3600.0, VELOCITY),
    factor("knot", 1852.0 / 3600.0, VELOCITY),
    factor("deg", std::f64::consts::PI / 180.0, ANGLE),
    factor("%", 1e-2, PURE),
];

/// Other spellings that are read: written name, name in the table.
pub(super) const READ_AS: &[(&str, &str)] = &[("C", "degC"), ("°C", "degC"), ("F", "degF"), ("°F", "degF")];

/// Spellings that are not read, and what was meant.
const MEANT: &[(&str, &str)] = &[
    ("celsius", "degC"),
    ("fahrenheit", "degF"),
    ("rankine", "degR"),
    ("°r", "degR"),
    ("kelvin", "K"),
    ("°k", "K"),
    ("degk", "K"),
    ("inch", "in"),
    ("inches", "in"),
    ("foot", "ft"),
    ("feet", "ft"),
    ("metre", "m"),
    ("meter", "m"),
    ("millimetre", "mm"),
    ("millimeter", "mm"),
    ("micron", "um"),
    ("µm", "um"),
    ("μm", "um"),
    ("thou", "mil"),
    ("sec", "s"),
    ("second", "s"),
    ("seconds", "s"),
    ("msec", "ms"),
    ("minute", "min"),
    ("minutes", "min"),
    ("hr", "h"),
    ("hrs", "h"),
    ("hour", "h"),
    ("hours", "h"),
    ("day", "d"),
    ("days", "d"),
    ("watt", "W"),
    ("joule", "J"),
    ("pascal", "Pa"),
    ("lbs", "lb"),
    ("kt", "knot"),
    ("kn", "knot"),
    ("knots", "knot"),
    ("percent", "%"),
    ("mmhg", "torr"),
    ("ksi", "psi"),
    ("degree", "deg"),
];

impl Factor {
    /// The factor of this name, other accepted spellings included.
    pub fn named(name: &str) -> Option<&'static Self> {
        let name = READ_AS.iter().find(|pair| pair.0 == name).map_or(name, |pair| pair.1);
        FACTORS.iter().find(|factor| factor.name == name)
    }
}

/// The known factor that was most likely meant: another spelling, another case, or one letter off in a longer name.
pub fn nearest_factor(name: &str) -> Option<&'static str> {
    let lower = name.to_lowercase();
    MEANT
        .iter()
        .find(|pair| pair.0 == lower)
        .map(|pair| pair.1)
        .or_else(|| {
            FACTORS
                .iter()
                .find(|factor| factor.name.eq_ignore_ascii_case(name))
                .map(|factor| factor.name)
        })
        .or_else(|| {
            FACTORS
                .iter()
                .filter(|factor| name.chars().count() >= 3 && factor.name.len() >= 2)
                .find(|factor| one_letter_off(&factor.name.to_lowercase(), &lower))
                .map(|factor| factor.name)
        })
}

/// Whether two words differ by one letter more, less or other, or by two neighbours swapped.
fn one_letter_off(one: &str, other: &str) -> bool {
    let (one, other): (Vec<char>, Vec<char>) = (one.chars().collect(), other.chars().collect());
    let shorter = one.len().min(other.len());
    let start = one.iter().zip(&other).take_while(|pair| pair.0 == pair.1).count();
    let end = one
        .iter()
        .rev()
        .zip(other.iter().rev())
        .take_while(|pair| pair.0 == pair.1)
        .count()
        .min(shorter - start);
    match (&one[start..one.len() - end], &other[start..other.len() - end]) {
        ([] | [_], [] | [_]) => true,
        ([a, b], [c, d]) => a == d && b == c,
        _ => false,
    }
}
