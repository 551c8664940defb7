//! What acts on the two faces between two kinks of the profile.

use crate::model::{Kelvin, Seconds, WattsPerSquareMetre, WattsPerSquareMetreKelvin};

/// A straight line over a stretch of time, from its start to its end.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Ramp {
    /// At the start.
    pub start: f64,
    /// At the end.
    pub end: f64,
}

impl Ramp {
    /// The same throughout.
    pub fn constant(value: f64) -> Self {
        Self { start: value, end: value }
    }

    /// Value at a share of the stretch.
    #[inline]
    pub fn at(self, share: f64) -> f64 {
        self.start + (self.end - self.start) * share
    }

    /// Change over the stretch.
    #[inline]
    pub fn rise(self) -> f64 {
        self.end - self.start
    }
}

/// What acts on one wall between two kinks: everything constant or straight in time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Forcing {
    /// Length of the stretch.
    pub length: Seconds,
    /// Coefficient from the gas, the factor and the heating scale in it, W/(m²·K).
    pub film: Ramp,
    /// Recovery temperature of the gas, K.
    pub gas: Ramp,
    /// Absorbed flux, the factor and the heating scale in it, W/m².
    pub flux: Ramp,
    /// Emissivity of the gas, times its share in a tail.
    pub gas_emissivity: Ramp,
    /// Coefficient of the idle face to `idle_temperature`; 0 where the idle losses don't act.
    pub idle_coefficient: WattsPerSquareMetreKelvin,
    /// What the idle face (or the purge) exchanges with.
    pub idle_temperature: Kelvin,
    /// View of the idle face to the surroundings; 0 where the idle losses don't act.
    pub idle_view: f64,
    /// Sun absorbed by the hot face, W/m².
    pub sun: WattsPerSquareMetre,
    /// What happens on the outer face.
    pub over: Over,
}

/// What takes heat from the outer face during a stretch; held or insulated faces ignore it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Over {
    /// Convection, radiation and sun as the station has them.
    Losses,
    /// A coolant instead.
    Coolant {
        /// Its coefficient.
        coefficient: WattsPerSquareMetreKelvin,
        /// Its temperature.
        temperature: Kelvin,
    },
}

impl Forcing {
    /// Whether nothing changes with time.
    pub fn is_constant(&self) -> bool {
        [self.film, self.gas, self.flux, self.gas_emissivity]
            .iter()
            .all(|ramp| ramp.rise() == 0.0)
    }
}
