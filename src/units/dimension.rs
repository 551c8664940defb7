//! Exponents of the base quantities.

use std::fmt;

/// Exponents of metre, kilogram, second, kelvin, mole and radian.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Dimension([i32; 6]);

const BASE: [&str; 6] = ["m", "kg", "s", "K", "mol", "rad"];

impl Dimension {
    /// From the exponents of metre, kilogram, second, kelvin, mole and radian.
    pub const fn new(exponents: [i32; 6]) -> Self {
        Self(exponents)
    }

    /// This dimension times another one to a power; saturates, as no unit that fits anything comes near the end.
    #[must_use]
    pub fn times(self, other: Self, power: i32) -> Self {
        let mut exponents = self.0;
        for (exponent, factor) in exponents.iter_mut().zip(other.0) {
            *exponent = exponent.saturating_add(factor.saturating_mul(power));
        }
        Self(exponents)
    }

    /// Whether all exponents are 0.
    pub fn is_pure(self) -> bool {
        self == Self::default()
    }
}

impl fmt::Display for Dimension {
    /// In the case file's own grammar: `kg.m2/s3`.
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        let part = |(name, exponent): (&str, i32)| match exponent.unsigned_abs() {
            1 => name.to_owned(),
            power => format!("{name}{power}"),
        };
        let above: Vec<_> = BASE.into_iter().zip(self.0).filter(|pair| pair.1 > 0).map(part).collect();
        let below: Vec<_> = BASE.into_iter().zip(self.0).filter(|pair| pair.1 < 0).map(part).collect();
        formatter.write_str(&if above.is_empty() { "1".to_owned() } else { above.join(".") })?;
        below.iter().try_for_each(|name| write!(formatter, "/{name}"))
    }
}
