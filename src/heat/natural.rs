//! Natural convection in air, properties at the film temperature, β = 1/T_film.

use super::{Slope, air};
use crate::model::{Kelvin, Metres, Pascals, STANDARD_GRAVITY};

/// Nusselt number of an isothermal vertical plate at any Rayleigh number: Churchill & Chu (1975), Int. J. Heat Mass Transfer 18, 1323, the form
/// for all Ra (Incropera & DeWitt, eq. 9.26).
pub fn vertical_plate_nusselt(rayleigh: Slope, prandtl: Slope) -> Slope {
    churchill_chu(0.825, 0.492, rayleigh, prandtl)
}

/// Nusselt number of an isothermal horizontal cylinder, to Ra = 10¹²: Churchill & Chu (1975), Int. J. Heat Mass Transfer 18, 1049 (Incropera &
/// DeWitt, eq. 9.34).
pub fn horizontal_cylinder_nusselt(rayleigh: Slope, prandtl: Slope) -> Slope {
    churchill_chu(0.60, 0.559, rayleigh, prandtl)
}

fn churchill_chu(still: f64, prandtl_scale: f64, rayleigh: Slope, prandtl: Slope) -> Slope {
    let spread = (Slope::constant(prandtl_scale) / prandtl).powf(9.0 / 16.0) + 1.0;
    (rayleigh.powf(1.0 / 6.0) * 0.387 / spread.powf(8.0 / 27.0) + still).squared()
}

/// Heat from a vertical face of this height to air, W/m², and its derivative by the face temperature; positive where the face is hotter.
pub fn vertical_plate(face: Kelvin, air: Kelvin, pressure: Pascals, height: Metres) -> Slope {
    natural(vertical_plate_nusselt, face, air, pressure, height)
}

/// Heat from a horizontal cylinder of this diameter to air, W/m², and its derivative by the face temperature; positive where the face is hotter.
pub fn horizontal_cylinder(face: Kelvin, air: Kelvin, pressure: Pascals, diameter: Metres) -> Slope {
    natural(horizontal_cylinder_nusselt, face, air, pressure, diameter)
}

fn natural(nusselt: fn(Slope, Slope) -> Slope, face: Kelvin, ambient: Kelvin, pressure: Pascals, length: Metres) -> Slope {
    let face = Slope::variable(face);
    let film = (face + ambient) * 0.5;
    let air = air(film, pressure);
    let difference = face - ambient;
    let diffusivity = air.kinematic_viscosity / air.prandtl;
    let mut rayleigh = difference.abs() * (STANDARD_GRAVITY * length.powi(3)) / (film * air.kinematic_viscosity * diffusivity);
    if rayleigh.value < 1e-12 {
        // Ra^(1/6) has no slope at 0; below this the still-air term alone is left, to fourteen digits of the flux.
        rayleigh = Slope::constant(1e-12);
    }
    nusselt(rayleigh, air.prandtl) * air.conductivity / length * difference
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Values computed with the registry library `ht` 1.2.0 (CHECKS D anchors).
    #[test]
    fn nusselt_numbers_agree_with_the_general_purpose_library() {
        let number = |nusselt: fn(Slope, Slope) -> Slope, rayleigh, prandtl| nusselt(Slope::constant(rayleigh), Slope::constant(prandtl)).value;
        for (value, expected) in [
            (number(vertical_plate_nusselt, 1e6, 0.7), 16.530_366_9),
            (number(vertical_plate_nusselt, 1e9, 0.7), 122.615_058),
            (number(vertical_plate_nusselt, 1e9, 7.0), 152.522_641),
            (number(horizontal_cylinder_nusselt, 1e6, 0.7), 14.510_190_8),
            (number(horizontal_cylinder_nusselt, 1e8, 0.7), 56.461_164_8),
        ] {
            assert!((value / expected - 1.0).abs() < 1e-6, "{value} for {expected}");
        }
    }

    /// Coefficients of an outer shell in still air at 298.15 K, film properties by CoolProp (CHECKS D).
    #[test]
    fn coefficients_of_a_shell_in_still_air() {
        for (face, plate, cylinder) in [
            (350.0, 5.573_032_72, 5.788_251_69),
            (500.0, 7.471_194, 7.733_367_27),
            (800.0, 8.276_520_23, 8.602_602_65),
        ] {
            let difference = face - 298.15;
            let found = vertical_plate(face, 298.15, 101_325.0, 0.3).value / difference;
            assert!((found / plate - 1.0).abs() < 1e-3, "plate {found} for {plate}");
            let found = horizontal_cylinder(face, 298.15, 101_325.0, 0.1).value / difference;
            assert!((found / cylinder - 1.0).abs() < 1e-3, "cylinder {found} for {cylinder}");
        }
    }

    #[test]
    fn slopes_are_the_derivatives_on_both_sides_of_the_air() {
        for face in [250.0, 299.0, 301.0, 900.0] {
            let flux = |face| vertical_plate(face, 300.0, 80_000.0, 0.5);
            let difference = (flux(face + 1e-3).value - flux(face - 1e-3).value) / 2e-3;
            assert!((flux(face).slope / difference - 1.0).abs() < 1e-5, "{face}");
        }
        assert!(vertical_plate(300.0, 300.0, 101_325.0, 0.5).slope > 0.0);
    }
}
