//! A wall that starts from an earlier run.

use super::{Kelvin, Metres, ModelError};
use uom::si::f64::{Length, ThermodynamicTemperature};

/// Temperatures through a wall at time 0, layer by layer: so a joint with a resistance may have two.
#[derive(Clone, Debug, PartialEq)]
pub struct StartProfile {
    /// For each layer, rising distances from its hot side, from 0 to its thickness, with the temperature there.
    layers: Vec<Vec<(Metres, Kelvin)>>,
}

impl StartProfile {
    /// Distances from each layer's hot side, and temperatures.
    ///
    /// # Errors
    /// When a layer has less than two points, its distances do not rise, or a temperature is not above absolute zero.
    pub fn new(layers: &[Vec<(Length, ThermodynamicTemperature)>]) -> Result<Self, ModelError> {
        let mut profile = Vec::with_capacity(layers.len());
        for points in layers {
            if points.len() < 2 {
                return Err(ModelError::Missing {
                    what: "two points of the start profile in each layer",
                });
            }
            if let Some(row) = points
                .windows(2)
                .position(|pair| pair[1].0.value.partial_cmp(&pair[0].0.value) != Some(std::cmp::Ordering::Greater))
            {
                return Err(ModelError::NotRising {
                    what: "start profile",
                    row: row + 2,
                });
            }
            let points = points
                .iter()
                .map(|(distance, temperature)| Ok((distance.value, ModelError::above_zero("start temperature", temperature.value)?)));
            profile.push(points.collect::<Result<Vec<_>, ModelError>>()?);
        }
        Ok(Self { layers: profile })
    }

    /// Points of each layer: distance from its hot side, and temperature.
    pub fn layers(&self) -> &[Vec<(Metres, Kelvin)>] {
        &self.layers
    }

    /// Temperature of the hot face.
    pub fn hot_face(&self) -> Option<Kelvin> {
        Some(self.layers.first()?.first()?.1)
    }
}
