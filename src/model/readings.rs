//! What was measured, for a run to be compared with.

use super::{Kelvin, KelvinDifference, ModelError, Seconds};
use uom::si::f64::{TemperatureInterval, ThermodynamicTemperature, Time};

/// What one probe read in a test, on the clock of the profile.
#[derive(Clone, Debug, PartialEq)]
pub struct Readings {
    pub(crate) station: usize,
    pub(crate) probe: usize,
    pub(crate) noise: KelvinDifference,
    pub(crate) points: Vec<(Seconds, Kelvin)>,
}

impl Readings {
    /// Readings of a probe of a station (both by index), with the standard deviation of each.
    ///
    /// # Errors
    /// When a time is negative or not after the one before, a temperature is not above absolute zero, or the deviation is negative.
    pub fn new(station: usize, probe: usize, noise: TemperatureInterval, points: &[(Time, ThermodynamicTemperature)]) -> Result<Self, ModelError> {
        let noise = ModelError::not_negative("noise", noise.value)?;
        let mut checked: Vec<(Seconds, Kelvin)> = Vec::with_capacity(points.len());
        for (time, reading) in points {
            let time = ModelError::not_negative("time of a reading", time.value)?;
            if let Some(last) = checked.last() {
                ModelError::above_zero("time between two readings", time - last.0)?;
            }
            checked.push((time, ModelError::above_zero("reading", reading.value)?));
        }
        Ok(Self {
            station,
            probe,
            noise,
            points: checked,
        })
    }

    /// Time and reading, in rising time.
    pub fn points(&self) -> &[(Seconds, Kelvin)] {
        &self.points
    }
}
