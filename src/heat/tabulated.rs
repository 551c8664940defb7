//! A correlation evaluated once for many faces.

use super::Slope;
use crate::model::{Kelvin, KelvinDifference};

/// Cells on each side of the ambient temperature.
const CELLS: usize = 64;
/// Farthest from the ambient temperature that is tabulated, K; beyond it the coefficient stays what it is there.
const FARTHEST: KelvinDifference = 4096.0;

/// A coefficient from a face to air as a cubic through its values and slopes, against the sixth root of the temperature difference, in which
/// natural-convection correlations are smooth (Nu goes with Ra^(1/6)). Off by less than a fifty-thousandth of the coefficient; the tests say so.
#[derive(Clone, Debug)]
pub struct TabulatedCoefficient {
    ambient: Kelvin,
    /// Value and slope against the root at the cells' edges: colder faces, hotter faces.
    sides: [Vec<[f64; 2]>; 2],
}

impl TabulatedCoefficient {
    /// Tabulates heat from a face, W/m², with its derivative by the face temperature.
    pub fn new(ambient: Kelvin, flux: impl Fn(Kelvin) -> Slope) -> Self {
        let last = FARTHEST.powf(1.0 / 6.0);
        let edge = |sign: f64, index: usize| {
            let root = last * index as f64 / CELLS as f64;
            let face = (ambient + sign * root.powi(6)).max(1.0);
            let flux = flux(face);
            let difference = face - ambient;
            let coefficient = flux.value / difference;
            let by_difference = (flux.slope - coefficient) / difference;
            [coefficient, by_difference * sign * 6.0 * root.powi(5)]
        };
        let side = |sign: f64| {
            // At zero the difference says nothing; a parabola through the next two edges does, and is what the correlations are there.
            let mut edges: Vec<[f64; 2]> = (1..=CELLS).map(|index| edge(sign, index)).collect();
            let width = last / CELLS as f64;
            let ([value, slope], [_, next_slope]) = (edges[0], edges[1]);
            let bend = (next_slope - slope) / width;
            edges.insert(0, [value - slope * width + 0.5 * bend * width * width, slope - bend * width]);
            edges
        };
        Self {
            ambient,
            sides: [side(-1.0), side(1.0)],
        }
    }

    /// Heat from a face, W/m², with its derivative by the face temperature.
    #[inline]
    pub fn flux(&self, face: Kelvin) -> Slope {
        let difference = face - self.ambient;
        let distance = difference.abs();
        let width = FARTHEST.powf(1.0 / 6.0) / CELLS as f64;
        let root = distance.cbrt().sqrt();
        let place = (root / width).min(CELLS as f64);
        let cell = (place as usize).min(CELLS - 1);
        let share = place - cell as f64;
        let edges = &self.sides[usize::from(difference > 0.0)];
        let ([start, start_slope], [end, end_slope]) = (edges[cell], edges[cell + 1]);
        let (start_slope, end_slope, rise) = (start_slope * width, end_slope * width, end - start);
        let (quadratic, cubic) = (3.0 * rise - 2.0 * start_slope - end_slope, start_slope + end_slope - 2.0 * rise);
        let coefficient = start + share * (start_slope + share * (quadratic + share * cubic));
        let by_root = (start_slope + share * (2.0 * quadratic + 3.0 * share * cubic)) / width;
        // d(h·ΔT)/dT = h + ΔT · dh/dr · dr/dT, dr/dT = r/(6 ΔT).
        Slope {
            value: coefficient * difference,
            slope: coefficient + by_root * root / 6.0,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::heat::{horizontal_cylinder, vertical_plate};

    #[test]
    fn the_table_is_the_correlation() {
        type Correlation = fn(Kelvin, Kelvin, f64, f64) -> Slope;
        for correlation in [vertical_plate as Correlation, horizontal_cylinder as Correlation] {
            for (pressure, length) in [(101_325.0, 0.3), (5_000.0, 0.02), (101_325.0, 3.0)] {
                let exact = |face| correlation(face, 293.15, pressure, length);
                let table = TabulatedCoefficient::new(293.15, exact);
                for face in [
                    150.0, 250.0, 292.0, 293.0, 293.1501, 293.2, 294.0, 300.0, 321.15, 400.0, 777.0, 1500.0, 2900.0,
                ] {
                    let (found, expected) = (table.flux(face), exact(face));
                    assert!((found.value / expected.value - 1.0).abs() < 2e-5, "{face}: {found:?} for {expected:?}");
                    assert!((found.slope / expected.slope - 1.0).abs() < 2e-2, "{face}: {found:?} for {expected:?}");
                }
            }
        }
    }

    #[test]
    fn a_face_as_warm_as_the_air_loses_nothing_and_has_a_slope() {
        let table = TabulatedCoefficient::new(293.15, |face| vertical_plate(face, 293.15, 101_325.0, 0.3));
        let still = table.flux(293.15);
        assert_eq!(still.value, 0.0);
        // Still air alone: 0.825² k/L.
        assert!((still.slope / (0.825 * 0.825 * 0.025_87 / 0.3) - 1.0).abs() < 0.01, "{still:?}");
    }

    #[test]
    fn the_slope_is_that_of_the_table() {
        let table = TabulatedCoefficient::new(293.15, |face| vertical_plate(face, 293.15, 101_325.0, 0.3));
        for face in [200.0, 290.0, 294.0, 301.3, 555.5, 1999.0] {
            let step = 1e-4;
            let difference = (table.flux(face + step).value - table.flux(face - step).value) / (2.0 * step);
            assert!((table.flux(face).slope / difference - 1.0).abs() < 2e-5, "{face}");
        }
    }
}
