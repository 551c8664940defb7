//! Places in a wall, and the questions asked at them.

use super::{Kelvin, KelvinDifference, ModelError};
use uom::si::f64::{TemperatureInterval, ThermodynamicTemperature};

/// A place in a wall. A layer counts at its hottest depth, a joint at its hotter side, a probe as it reads.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Place {
    /// The heated face.
    HotFace,
    /// The face away from the heat.
    OuterFace,
    /// The hottest point of the whole wall.
    Everywhere,
    /// A layer, by index.
    Layer(usize),
    /// The boundary between layer `i` and layer `i + 1`.
    Joint(usize),
    /// A probe, by index.
    Probe(usize),
}

/// A cool-down question: from when on a place stays below a value.
#[derive(Clone, Debug, PartialEq)]
pub struct Wait {
    pub(crate) name: String,
    pub(crate) station: usize,
    pub(crate) place: Place,
    pub(crate) below: Kelvin,
    /// What the value stands for, such as "bare skin up to 10 min"; `None` where the case gives a bare temperature.
    pub(crate) meaning: Option<String>,
}

impl Wait {
    /// A question at one place of one station (by index).
    ///
    /// # Errors
    /// When the temperature is not above absolute zero.
    pub fn new(name: impl Into<String>, station: usize, place: Place, below: ThermodynamicTemperature) -> Result<Self, ModelError> {
        Ok(Self {
            name: name.into(),
            station,
            place,
            below: ModelError::above_zero("wait temperature", below.value)?,
            meaning: None,
        })
    }

    /// The same question, saying what its value stands for.
    #[must_use]
    pub fn meaning(mut self, meaning: impl Into<String>) -> Self {
        self.meaning = Some(meaning.into());
        self
    }
}

/// What is taken off every limit and put on every heating before a wall is called within its limits.
#[derive(Clone, Debug, PartialEq)]
pub struct Allowance {
    pub(crate) limits: KelvinDifference,
    pub(crate) heating: f64,
    pub(crate) given: bool,
}

impl Allowance {
    /// No allowance is taken.
    pub fn none() -> Self {
        Self {
            limits: 0.0,
            heating: 1.0,
            given: false,
        }
    }

    /// Kelvin taken off every limit, and a factor on every heating.
    ///
    /// # Errors
    /// When the difference is negative or the factor not above zero.
    pub fn new(limits: TemperatureInterval, heating: f64) -> Result<Self, ModelError> {
        Ok(Self {
            limits: ModelError::not_negative("allowance on limits", limits.value)?,
            heating: ModelError::above_zero("allowance on heating", heating)?,
            given: true,
        })
    }

    /// Whether the case has an allowance.
    pub fn given(&self) -> bool {
        self.given
    }
}
