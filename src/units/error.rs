//! Why a text is no quantity.

use super::Kind;
use std::ops::Range;

/// Why a text is not the quantity that is due, and which of its characters are to blame.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("{problem}; {}", due.units_that_fit())]
pub struct UnitError {
    /// What is wrong.
    pub problem: UnitProblem,
    /// The offending characters, as a byte range of the text.
    pub range: Range<usize>,
    /// What is due.
    pub due: Kind,
}

/// What is wrong with a text that should be a quantity.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum UnitProblem {
    /// It does not begin with a number.
    #[error("\"{0}\" is no number")]
    NoNumber(String),
    /// Its number is too large to count with.
    #[error("\"{0}\" is too large a number")]
    TooLarge(String),
    /// It has no unit.
    #[error("a unit is missing: {} is due", .0.words())]
    NoUnit(Kind),
    /// A factor that is not in the table.
    #[error("unknown unit \"{name}\"")]
    UnknownUnit {
        /// As written.
        name: String,
        /// What was most likely meant.
        nearest: Option<&'static str>,
    },
    /// A gauge pressure.
    #[error("\"psig\" is a gauge pressure: give the absolute pressure")]
    Gauge,
    /// A unit of something else.
    #[error("\"{unit}\" is {found}, and {} is due", .due.words())]
    OtherDimension {
        /// The unit, as written.
        unit: String,
        /// What it measures.
        found: String,
        /// What is due.
        due: Kind,
    },
    /// Not how units are written.
    #[error("\"{0}\" is not how units are written")]
    Spelling(String),
}

impl UnitError {
    /// The fixed name of the mistake.
    pub fn code(&self) -> &'static str {
        match self.problem {
            UnitProblem::NoNumber(_) => "bad-number",
            UnitProblem::TooLarge(_) => "out-of-range",
            UnitProblem::NoUnit(_) => "missing-unit",
            UnitProblem::UnknownUnit { .. } | UnitProblem::Spelling(_) => "unknown-unit",
            UnitProblem::Gauge => "gauge-pressure",
            UnitProblem::OtherDimension { .. } => "wrong-unit",
        }
    }

    /// What to do about it: the nearest known unit, the grammar, units that fit.
    pub fn help(&self) -> Vec<String> {
        let mut help = Vec::new();
        match &self.problem {
            UnitProblem::UnknownUnit { nearest: Some(nearest), .. } => help.push(format!("did you mean \"{nearest}\"?")),
            UnitProblem::Gauge => {
                help.push("absolute = gauge + the pressure of the surroundings: 300 psig at 14.7 psia is \"314.7 psia\"".to_owned())
            }
            UnitProblem::Spelling(_) => {
                help.push("factors are joined by . and /, with exponents as in m2: W/m2/K, cm2.K/W".to_owned());
            }
            UnitProblem::NoNumber(text) if text.contains(',') => help.push("decimals are written with a point: 0.5".to_owned()),
            _ => {}
        }
        if !self.due.examples().is_empty() {
            help.push(self.due.units_that_fit());
        }
        help
    }
}
