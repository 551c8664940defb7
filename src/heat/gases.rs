//! Properties of air and of the gases that fill gaps.
//!
//! Values: CoolProp 8.0.0 at 101 325 Pa (Lemmon et al. 2000 and Lemmon & Jacobsen 2004 for air and nitrogen, Ortiz-Vega 2013 and Hands &
//! Arp 1981 for helium, Leachman et al. 2009 and Assael et al. 2011 for hydrogen), every 50 K from 100 K to 2000 K. Above 1000 K those of
//! hydrogen are its correlation carried on, without dissociation.

use super::Slope;
use crate::model::{GapGas, Kelvin, Pascals};

const FIRST: Kelvin = 100.0;
const SPACING: Kelvin = 50.0;
const ROWS: usize = 39;

/// W/(m·K).
const AIR_CONDUCTIVITY: [f64; ROWS] = [
    0.0094707, 0.014152, 0.018503, 0.022564, 0.026384, 0.030003, 0.033453, 0.03676, 0.039945, 0.043024, 0.046011, 0.048919, 0.051755, 0.05453,
    0.057249, 0.059918, 0.062543, 0.065128, 0.067677, 0.070193, 0.07268, 0.07514, 0.077576, 0.079989, 0.082382, 0.084756, 0.087113, 0.089454,
    0.091782, 0.094096, 0.096398, 0.098689, 0.10097, 0.10324, 0.1055, 0.10776, 0.11001, 0.11225, 0.11449,
];

/// Pa·s.
const AIR_VISCOSITY: [f64; ROWS] = [
    7.1069e-06, 1.0377e-05, 1.3334e-05, 1.6038e-05, 1.8537e-05, 2.0867e-05, 2.3055e-05, 2.5124e-05, 2.709e-05, 2.8968e-05, 3.0769e-05, 3.2502e-05,
    3.4176e-05, 3.5796e-05, 3.737e-05, 3.8901e-05, 4.0394e-05, 4.1853e-05, 4.328e-05, 4.4679e-05, 4.6052e-05, 4.7401e-05, 4.8728e-05, 5.0036e-05,
    5.1325e-05, 5.2597e-05, 5.3854e-05, 5.5096e-05, 5.6325e-05, 5.7542e-05, 5.8748e-05, 5.9942e-05, 6.1127e-05, 6.2303e-05, 6.3471e-05, 6.4631e-05,
    6.5783e-05, 6.6929e-05, 6.8068e-05,
];

/// J/(kg·K).
const AIR_HEAT_CAPACITY: [f64; ROWS] = [
    1040.3, 1012.1, 1006.8, 1005.5, 1006.4, 1009.2, 1014.1, 1021.1, 1029.9, 1040.0, 1051.2, 1063.0, 1075.0, 1087.0, 1098.7, 1110.0, 1120.9, 1131.2,
    1141.0, 1150.2, 1158.8, 1166.9, 1174.5, 1181.6, 1188.2, 1194.5, 1200.3, 1205.8, 1211.0, 1215.9, 1220.5, 1224.9, 1229.1, 1233.0, 1236.7, 1240.3,
    1243.7, 1247.0, 1250.2,
];

/// W/(m·K).
const NITROGEN_CONDUCTIVITY: [f64; ROWS] = [
    0.009382, 0.014005, 0.01828, 0.022251, 0.025969, 0.029476, 0.032806, 0.035988, 0.039043, 0.041989, 0.044841, 0.04761, 0.050306, 0.052939,
    0.055514, 0.05804, 0.06052, 0.06296, 0.065363, 0.067734, 0.070075, 0.072389, 0.074679, 0.076946, 0.079194, 0.081423, 0.083635, 0.085832,
    0.088015, 0.090185, 0.092344, 0.094493, 0.096631, 0.098761, 0.10088, 0.103, 0.10511, 0.10721, 0.10931,
];

/// W/(m·K).
const HELIUM_CONDUCTIVITY: [f64; ROWS] = [
    0.073714, 0.096938, 0.11798, 0.13754, 0.15597, 0.17353, 0.19037, 0.20659, 0.2223, 0.23755, 0.2524, 0.26689, 0.28105, 0.29492, 0.30852, 0.32187,
    0.33499, 0.34789, 0.3606, 0.37312, 0.38547, 0.39765, 0.40968, 0.42156, 0.4333, 0.44491, 0.45639, 0.46775, 0.479, 0.49013, 0.50116, 0.51209,
    0.52292, 0.53366, 0.5443, 0.55486, 0.56534, 0.57573, 0.58605,
];

/// W/(m·K).
const HYDROGEN_CONDUCTIVITY: [f64; ROWS] = [
    0.068369, 0.10114, 0.13301, 0.16142, 0.1867, 0.20969, 0.2311, 0.25143, 0.27104, 0.29018, 0.30904, 0.32775, 0.34642, 0.36511, 0.38388, 0.40276,
    0.4218, 0.441, 0.46039, 0.47996, 0.49972, 0.51967, 0.53981, 0.56012, 0.5806, 0.60124, 0.62203, 0.64294, 0.66398, 0.68512, 0.70634, 0.72763,
    0.74896, 0.77033, 0.79172, 0.81309, 0.83444, 0.85574, 0.87697,
];

/// Specific gas constant of dry air, J/(kg·K): R/M with M = 28.9647 g/mol (Picard et al. 2008, CIPM-2007).
const AIR_GAS_CONSTANT: f64 = 8.314_462_618 / 0.028_964_7;

/// Transport properties of air at a film temperature.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AirProperties {
    /// Conductivity, W/(m·K).
    pub conductivity: Slope,
    /// Kinematic viscosity, m²/s.
    pub kinematic_viscosity: Slope,
    /// Prandtl number.
    pub prandtl: Slope,
}

/// Air at a film temperature and an absolute pressure above zero, as an ideal gas whose viscosity, conductivity and heat capacity do not depend
/// on pressure.
pub fn air(film: Slope, pressure: Pascals) -> AirProperties {
    let conductivity = at(&AIR_CONDUCTIVITY, film);
    let viscosity = at(&AIR_VISCOSITY, film);
    AirProperties {
        conductivity,
        kinematic_viscosity: viscosity * film * (AIR_GAS_CONSTANT / pressure),
        prandtl: viscosity * at(&AIR_HEAT_CAPACITY, film) / conductivity,
    }
}

/// Conductivity of a gap's gas, W/(m·K), at its mean temperature; 0 in a vacuum.
pub fn gap_gas_conductivity(gas: GapGas, mean: Slope) -> Slope {
    match gas {
        GapGas::Air => at(&AIR_CONDUCTIVITY, mean),
        GapGas::Nitrogen => at(&NITROGEN_CONDUCTIVITY, mean),
        GapGas::Helium => at(&HELIUM_CONDUCTIVITY, mean),
        GapGas::Hydrogen => at(&HYDROGEN_CONDUCTIVITY, mean),
        GapGas::None => Slope::constant(0.0),
    }
}

/// A table's value: cubic between its points with slopes from their neighbours (Catmull & Rom 1974), so that the slope has no jumps; beyond the
/// ends a power of temperature, as transport properties of gases go.
fn at(table: &[f64; ROWS], temperature: Slope) -> Slope {
    let place = (temperature.value - FIRST) / SPACING;
    let last = ROWS - 1;
    if place < 0.0 || place > last as f64 {
        let (edge, inner) = if place < 0.0 { (0, 1) } else { (last, last - 1) };
        let edge_temperature = FIRST + SPACING * edge as f64;
        let exponent = (table[inner] / table[edge]).ln() / ((FIRST + SPACING * inner as f64) / edge_temperature).ln();
        return (temperature / edge_temperature).powf(exponent) * table[edge];
    }
    let row = (place as usize).min(last - 1);
    let share = place - row as f64;
    let (before, after) = (table[row], table[row + 1]);
    let slope = |row: usize| match row {
        0 => table[1] - table[0],
        row if row == last => table[last] - table[last - 1],
        row => 0.5 * (table[row + 1] - table[row - 1]),
    };
    let (slope_before, slope_after) = (slope(row), slope(row + 1));
    let rise = after - before;
    let (quadratic, cubic) = (3.0 * rise - 2.0 * slope_before - slope_after, slope_before + slope_after - 2.0 * rise);
    Slope {
        value: before + share * (slope_before + share * (quadratic + share * cubic)),
        slope: (slope_before + share * (2.0 * quadratic + 3.0 * share * cubic)) / SPACING * temperature.slope,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn values_between_the_rows_agree_with_coolprop_at_other_temperatures() {
        // CoolProp 8.0.0: conductivity of air at 120 K, 101 325 Pa.
        let value = gap_gas_conductivity(GapGas::Air, Slope::variable(120.0)).value;
        assert!((value / 0.011_383_25 - 1.0).abs() < 5e-3, "{value}");
        // Incropera & DeWitt, Table A.4 at 350 K: ν = 20.92e-6, Pr = 0.700, k = 0.030 (from memory).
        let film = air(Slope::variable(350.0), 101_325.0);
        assert!((film.kinematic_viscosity.value / 20.92e-6 - 1.0).abs() < 0.02);
        assert!((film.prandtl.value / 0.700 - 1.0).abs() < 0.01);
    }

    #[test]
    fn slopes_are_the_derivatives() {
        for temperature in [60.0, 130.0, 333.3, 1999.0, 2500.0] {
            let step = 1e-3;
            let at = |temperature| gap_gas_conductivity(GapGas::Hydrogen, Slope::variable(temperature));
            let difference = (at(temperature + step).value - at(temperature - step).value) / (2.0 * step);
            assert!((at(temperature).slope / difference - 1.0).abs() < 1e-5, "{temperature}");
        }
    }
}
