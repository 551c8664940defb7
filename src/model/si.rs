//! Aliases that say the unit where a kernel holds a bare number. All SI; temperatures in kelvin above absolute zero.

/// Temperature above absolute zero, K.
pub type Kelvin = f64;
/// Temperature difference, K.
pub type KelvinDifference = f64;
/// Time or duration, s.
pub type Seconds = f64;
/// Length, depth or thickness, m.
pub type Metres = f64;
/// Velocity, m/s.
pub type MetresPerSecond = f64;
/// Heat flux density, W/m².
pub type WattsPerSquareMetre = f64;
/// Heat transfer coefficient or conductance, W/(m²·K).
pub type WattsPerSquareMetreKelvin = f64;
/// Heat per area, J/m².
pub type JoulesPerSquareMetre = f64;
/// Absolute pressure, Pa.
pub type Pascals = f64;

/// Stands where a temperature is asked for and acts on nothing, K.
pub(crate) const ROOM: Kelvin = 293.15;
/// Stefan–Boltzmann constant, W/(m²·K⁴): exact in the SI since 2019 to the digits given (CODATA 2018).
pub const STEFAN_BOLTZMANN: f64 = 5.670_374_419e-8;
/// Standard acceleration of free fall, m/s² (3rd CGPM, 1901).
pub const STANDARD_GRAVITY: f64 = 9.806_65;
