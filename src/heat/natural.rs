//! Natural convection in air, properties at the film temperature, β = 1/T_film.

use super::{Slope, air};
use crate::model::{Kelvin, Metres, NaturalSurface, Pascals, STANDARD_GRAVITY};

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

/// Nusselt number of an isothermal horizontal plate that warms the air above it (a hot face up, or a cold face down), with the length area/perimeter:
/// 0.54 Ra^¼ to Ra = 10⁷ and 0.15 Ra^⅓ beyond (McAdams 1954, Lloyd & Moran 1974; Incropera & DeWitt, eqs 9.30 and 9.31 in the 6th edition). The
/// two differ by 6 % where they meet; the first passes into the second between 10⁷ and 2·10⁷, so that no flux jumps, on the side of slower cooling.
/// Below Ra = 10⁴, where nothing was measured, the first is carried on: less than still air would take.
pub fn plate_upward_nusselt(rayleigh: Slope) -> Slope {
    const MEET: f64 = 1e7;
    let laminar = rayleigh.powf(0.25) * 0.54;
    if rayleigh.value <= MEET {
        return laminar;
    }
    let turbulent = rayleigh.powf(1.0 / 3.0) * 0.15;
    if rayleigh.value >= 2.0 * MEET {
        return turbulent;
    }
    let share = (rayleigh - MEET) / MEET;
    let weight = share.squared() * (Slope::constant(3.0) - share * 2.0);
    laminar + (turbulent - laminar) * weight
}

/// Nusselt number of an isothermal horizontal plate whose air layer can't rise (a hot face down, or a cold face up), with the length
/// area/perimeter: 0.27 Ra^¼ for Ra from 10⁵ to 10¹⁰ (McAdams 1954; Incropera & DeWitt, eq. 9.32 in the 6th edition), carried on outside.
pub fn plate_downward_nusselt(rayleigh: Slope) -> Slope {
    rayleigh.powf(0.25) * 0.27
}

/// Heat from a vertical face of this height to air, W/m², and its derivative by the face temperature; positive where the face is hotter.
pub fn vertical_plate(face: Kelvin, air: Kelvin, pressure: Pascals, height: Metres) -> Slope {
    natural_coefficient(NaturalSurface::Vertical(height), face, air, pressure) * (Slope::variable(face) - air)
}

/// Heat from a horizontal cylinder of this diameter to air, W/m², and its derivative by the face temperature; positive where the face is hotter.
pub fn horizontal_cylinder(face: Kelvin, air: Kelvin, pressure: Pascals, diameter: Metres) -> Slope {
    natural_coefficient(NaturalSurface::HorizontalCylinder(diameter), face, air, pressure) * (Slope::variable(face) - air)
}

/// Coefficient of natural convection, W/(m²·K), and its derivative by the face temperature.
pub fn natural_coefficient(surface: NaturalSurface, face: Kelvin, ambient: Kelvin, pressure: Pascals) -> Slope {
    let hotter = face >= ambient;
    let length = match surface {
        NaturalSurface::Vertical(length)
        | NaturalSurface::FacingUp(length)
        | NaturalSurface::FacingDown(length)
        | NaturalSurface::HorizontalCylinder(length) => length,
    };
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
    let nusselt = match surface {
        NaturalSurface::Vertical(_) => vertical_plate_nusselt(rayleigh, air.prandtl),
        NaturalSurface::HorizontalCylinder(_) => horizontal_cylinder_nusselt(rayleigh, air.prandtl),
        NaturalSurface::FacingUp(_) if hotter => plate_upward_nusselt(rayleigh),
        NaturalSurface::FacingDown(_) if !hotter => plate_upward_nusselt(rayleigh),
        NaturalSurface::FacingUp(_) | NaturalSurface::FacingDown(_) => plate_downward_nusselt(rayleigh),
    };
    nusselt * air.conductivity / length
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

    /// CHECKS D, convection.csv, computed there by hand from the formulas named (0.54, 0.15, 0.27), to nine digits.
    #[test]
    fn plates_facing_up_and_down_take_the_handbook_values() {
        for (rayleigh, up, down) in [
            (1e5, 9.602_708_81, 4.801_354_41),
            (1e7, 30.366_431_6, 15.183_215_8),
            (1e9, 150.0, 48.013_544_1),
        ] {
            let rayleigh = Slope::constant(rayleigh);
            assert!((plate_upward_nusselt(rayleigh).value / up - 1.0).abs() < 1e-6, "{rayleigh:?}");
            assert!((plate_downward_nusselt(rayleigh).value / down - 1.0).abs() < 1e-6, "{rayleigh:?}");
        }
        // No jump and no fall between the two forms.
        let values: Vec<f64> = (0..=1000)
            .map(|step| plate_upward_nusselt(Slope::constant(0.9e7 + 1.3e4 * f64::from(step))).value)
            .collect();
        assert!(values.windows(2).all(|pair| pair[1] > pair[0] && pair[1] - pair[0] < 0.03));
    }

    /// A hot face up is a cold face down, and the other way round: it is the air layer that rises or not.
    #[test]
    fn a_cold_face_turned_over_is_a_hot_one() {
        let coefficient = |surface, face, air| natural_coefficient(surface, face, air, 101_325.0).value;
        let (up, down) = (NaturalSurface::FacingUp(0.2), NaturalSurface::FacingDown(0.2));
        for (one, other) in [(320.0, 300.0), (300.0, 320.0)] {
            let (rising, held) = (coefficient(up, one, other), coefficient(down, one, other));
            assert_eq!(rising > held, one > other, "{one} {other}: {rising} {held}");
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
        for surface in [NaturalSurface::FacingUp(0.25), NaturalSurface::FacingDown(0.25)] {
            for face in [250.0, 299.0, 301.0, 314.0, 900.0] {
                let flux = |face| natural_coefficient(surface, face, 300.0, 101_325.0);
                let difference = (flux(face + 1e-4).value - flux(face - 1e-4).value) / 2e-4;
                assert!((flux(face).slope / difference - 1.0).abs() < 1e-5, "{surface:?} {face}");
            }
        }
    }
}
