//! A value with its derivative.

use std::ops::{Add, Div, Mul, Sub};

/// A value and its derivative by one variable, carried through a formula by the chain rule: exact Jacobians without a second formula.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Slope {
    /// The value.
    pub value: f64,
    /// Its derivative.
    pub slope: f64,
}

impl Slope {
    /// The variable itself.
    pub fn variable(value: f64) -> Self {
        Self { value, slope: 1.0 }
    }

    /// A constant.
    pub fn constant(value: f64) -> Self {
        Self { value, slope: 0.0 }
    }

    /// To a constant power.
    #[must_use]
    pub fn powf(self, exponent: f64) -> Self {
        let value = self.value.powf(exponent);
        Self {
            value,
            slope: exponent * value / self.value * self.slope,
        }
    }

    /// Squared.
    #[must_use]
    pub fn squared(self) -> Self {
        self * self
    }

    /// Without its sign.
    #[must_use]
    pub fn abs(self) -> Self {
        if self.value < 0.0 {
            Self {
                value: -self.value,
                slope: -self.slope,
            }
        } else {
            self
        }
    }
}

impl From<f64> for Slope {
    fn from(value: f64) -> Self {
        Self::constant(value)
    }
}

impl<T: Into<Slope>> Add<T> for Slope {
    type Output = Self;
    fn add(self, other: T) -> Self {
        let other = other.into();
        Self {
            value: self.value + other.value,
            slope: self.slope + other.slope,
        }
    }
}

impl<T: Into<Slope>> Sub<T> for Slope {
    type Output = Self;
    fn sub(self, other: T) -> Self {
        let other = other.into();
        Self {
            value: self.value - other.value,
            slope: self.slope - other.slope,
        }
    }
}

impl<T: Into<Slope>> Mul<T> for Slope {
    type Output = Self;
    fn mul(self, other: T) -> Self {
        let other = other.into();
        Self {
            value: self.value * other.value,
            slope: self.slope * other.value + self.value * other.slope,
        }
    }
}

impl<T: Into<Slope>> Div<T> for Slope {
    type Output = Self;
    fn div(self, other: T) -> Self {
        let other = other.into();
        let value = self.value / other.value;
        Self {
            value,
            slope: (self.slope - value * other.slope) / other.value,
        }
    }
}
