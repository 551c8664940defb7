//! What a model refuses.

/// Why a part of a model can't be built. The case room finds these before, with their place in the file; a caller who builds a wall in code meets them here.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum ModelError {
    /// A quantity that must be above zero is not (or is no number).
    #[error("{what} must be above zero, not {value}")]
    NotAboveZero {
        /// Which quantity.
        what: &'static str,
        /// Its SI value.
        value: f64,
    },
    /// A quantity that must not be negative is (or is no number).
    #[error("{what} must not be negative, and is {value}")]
    Negative {
        /// Which quantity.
        what: &'static str,
        /// Its SI value.
        value: f64,
    },
    /// A share lies outside 0 … 1.
    #[error("{what} must lie between 0 and 1, not {value}")]
    NotAShare {
        /// Which quantity.
        what: &'static str,
        /// Its value.
        value: f64,
    },
    /// A table whose temperatures or times do not rise.
    #[error("{what}: each row must lie above the one before, and row {row} does not")]
    NotRising {
        /// Which table.
        what: &'static str,
        /// The offending row, counted from 1.
        row: usize,
    },
    /// Something needed is not there.
    #[error("missing: {what}")]
    Missing {
        /// What is missing.
        what: &'static str,
    },
    /// Two stations of one name.
    #[error("the name \"{name}\" is given twice")]
    Repeated {
        /// The name.
        name: String,
    },
    /// A wait at a place that its station does not have.
    #[error("the wait \"{wait}\" names a place that its station does not have")]
    NoSuchPlace {
        /// The wait's name.
        wait: String,
    },
    /// A station that follows no other station, or at last itself.
    #[error("the station \"{station}\" follows a station that is not there, or at last itself")]
    FollowsNothing {
        /// The station's name.
        station: String,
    },
    /// A depth outside its wall.
    #[error("the probe \"{probe}\" lies at {depth} m, outside the wall")]
    OutsideTheWall {
        /// The probe's name.
        probe: String,
        /// Its depth, m.
        depth: f64,
    },
}

impl ModelError {
    /// `value`, if it is a finite number above zero.
    pub(crate) fn above_zero(what: &'static str, value: f64) -> Result<f64, Self> {
        if value.is_finite() && value > 0.0 {
            Ok(value)
        } else {
            Err(Self::NotAboveZero { what, value })
        }
    }

    /// `value`, if it is a finite number and not negative.
    pub(crate) fn not_negative(what: &'static str, value: f64) -> Result<f64, Self> {
        if value.is_finite() && value >= 0.0 {
            Ok(value)
        } else {
            Err(Self::Negative { what, value })
        }
    }

    /// `value`, if it lies between 0 and 1.
    pub(crate) fn share(what: &'static str, value: f64) -> Result<f64, Self> {
        if (0.0..=1.0).contains(&value) {
            Ok(value)
        } else {
            Err(Self::NotAShare { what, value })
        }
    }
}
