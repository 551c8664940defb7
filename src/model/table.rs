//! A property against temperature.

use super::{Kelvin, ModelError};
use uom::si::{Dimension, Quantity, SI, f64::ThermodynamicTemperature};

/// One point of a table: a temperature and the value there.
pub type TablePoint<D> = (ThermodynamicTemperature, Quantity<D, SI<f64>, f64>);

/// A property against temperature: straight lines between the points, constant outside. One point is a constant.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    points: Vec<(Kelvin, f64)>,
}

impl Table {
    /// The same value at every temperature.
    pub fn constant<D: Dimension + ?Sized>(value: Quantity<D, SI<f64>, f64>) -> Self {
        Self {
            points: vec![(0.0, value.value)],
        }
    }

    /// A property given at rising temperatures.
    ///
    /// # Errors
    /// When there is no point or the temperatures do not rise.
    pub fn new<D: Dimension + ?Sized>(points: &[TablePoint<D>]) -> Result<Self, ModelError> {
        if points.is_empty() {
            return Err(ModelError::Missing {
                what: "a point of the table",
            });
        }
        for (row, pair) in points.windows(2).enumerate() {
            if pair[1].0.value.partial_cmp(&pair[0].0.value) != Some(std::cmp::Ordering::Greater) {
                return Err(ModelError::NotRising {
                    what: "property table",
                    row: row + 2,
                });
            }
        }
        Ok(Self {
            points: points.iter().map(|(temperature, value)| (temperature.value, value.value)).collect(),
        })
    }

    /// The points, kelvin and SI value; one point for a constant.
    pub(crate) fn points(&self) -> &[(Kelvin, f64)] {
        &self.points
    }

    /// Lowest and highest temperature of the table, K; `None` for a constant, which holds everywhere.
    pub fn range(&self) -> Option<(Kelvin, Kelvin)> {
        match self.points.as_slice() {
            [] | [_] => None,
            [first, .., last] => Some((first.0, last.0)),
        }
    }

    /// Value and slope (per kelvin) at a temperature, K. At a point, the slope to the hotter side.
    pub fn value_and_slope(&self, temperature: Kelvin) -> (f64, f64) {
        let after = self.points.partition_point(|point| point.0 <= temperature);
        match (after.checked_sub(1).map(|before| self.points[before]), self.points.get(after)) {
            (Some(low), Some(high)) => {
                let slope = (high.1 - low.1) / (high.0 - low.0);
                (low.1 + slope * (temperature - low.0), slope)
            }
            (Some(last), None) => (last.1, 0.0),
            (None, Some(first)) => (first.1, 0.0),
            (None, None) => (0.0, 0.0),
        }
    }

    /// Value at a temperature, K.
    pub fn value(&self, temperature: Kelvin) -> f64 {
        self.value_and_slope(temperature).0
    }

    /// The smallest of its values.
    pub fn smallest(&self) -> f64 {
        self.points.iter().map(|point| point.1).fold(f64::INFINITY, f64::min)
    }

    /// The largest of its values.
    pub fn largest(&self) -> f64 {
        self.points.iter().map(|point| point.1).fold(f64::NEG_INFINITY, f64::max)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::f64::ThermalConductivity;
    use uom::si::thermal_conductivity::watt_per_meter_kelvin;
    use uom::si::thermodynamic_temperature::kelvin;

    #[test]
    fn straight_lines_between_the_points_and_constant_outside() -> Result<(), ModelError> {
        let at = ThermodynamicTemperature::new::<kelvin>;
        let conductivity = ThermalConductivity::new::<watt_per_meter_kelvin>;
        let table = Table::new(&[(at(300.0), conductivity(10.0)), (at(500.0), conductivity(20.0))])?;
        assert_eq!(table.value_and_slope(400.0), (15.0, 0.05));
        assert_eq!(table.value_and_slope(100.0), (10.0, 0.0));
        assert_eq!(table.value_and_slope(900.0), (20.0, 0.0));
        assert_eq!(table.range(), Some((300.0, 500.0)));
        assert!(Table::new(&[(at(300.0), conductivity(10.0)), (at(300.0), conductivity(20.0))]).is_err());
        Ok(())
    }
}
