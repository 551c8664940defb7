//! Wind: forced convection over plates and across cylinders, and together with natural convection. Properties at the film temperature.

use super::{Slope, air, natural_coefficient};
use crate::model::{Convection, ForcedSurface, Kelvin, MetresPerSecond, Pascals, Surroundings};

/// Reynolds number at which the boundary layer of a plate turns turbulent (Incropera & DeWitt, section 7.2).
const TRANSITION: f64 = 5e5;

/// Average Nusselt number of an isothermal plate along which air flows over its length: 0.664 Re^½ Pr^⅓ where it stays laminar (Pohlhausen 1921),
/// (0.037 Re^⅘ − 871) Pr^⅓ where it turns turbulent at Re = 5·10⁵ (Incropera & DeWitt, eqs 7.30 and 7.38 in the 6th edition). The two differ by
/// 0.07 % at the transition; near it the larger counts, which does not jump.
pub fn plate_along_nusselt(reynolds: Slope, prandtl: Slope) -> Slope {
    let laminar = reynolds.powf(0.5) * 0.664;
    let mut number = laminar;
    if reynolds.value > 0.99 * TRANSITION {
        let mixed = reynolds.powf(0.8) * 0.037 - 871.0;
        if mixed.value > laminar.value {
            number = mixed;
        }
    }
    number * prandtl.powf(1.0 / 3.0)
}

/// Average Nusselt number of an isothermal cylinder across which air flows: Churchill & Bernstein (1977), J. Heat Transfer 99, 300, for Re Pr above
/// 0.2 (Incropera & DeWitt, eq. 7.54 in the 6th edition).
pub fn cylinder_across_nusselt(reynolds: Slope, prandtl: Slope) -> Slope {
    let spread = ((Slope::constant(0.4) / prandtl).powf(2.0 / 3.0) + 1.0).powf(0.25);
    let turbulence = ((reynolds / 282_000.0).powf(5.0 / 8.0) + 1.0).powf(0.8);
    reynolds.powf(0.5) * prandtl.powf(1.0 / 3.0) * 0.62 / spread * turbulence + 0.3
}

/// Coefficient of forced convection, W/(m²·K), and its derivative by the face temperature; 0 over a plate without wind.
pub fn forced_coefficient(surface: ForcedSurface, wind: MetresPerSecond, face: Kelvin, ambient: Kelvin, pressure: Pascals) -> Slope {
    if wind <= 0.0 {
        return Slope::constant(0.0);
    }
    let film = (Slope::variable(face) + ambient) * 0.5;
    let air = air(film, pressure);
    let (length, nusselt): (f64, fn(Slope, Slope) -> Slope) = match surface {
        ForcedSurface::AlongPlate(length) => (length, plate_along_nusselt),
        ForcedSurface::AcrossCylinder(diameter) => (diameter, cylinder_across_nusselt),
    };
    let reynolds = Slope::constant(wind * length) / air.kinematic_viscosity;
    nusselt(reynolds, air.prandtl) * air.conductivity / length
}

/// Heat from a face to the air by convection, W/m², and its derivative by the face temperature; positive where the face is hotter. Natural and forced
/// convection together: the third root of the sum of their cubes (Churchill 1977; Incropera & DeWitt, eq. 9.64 with n = 3), which is for wind that
/// goes with the rising air or across it; wind against it takes less.
pub fn convected(convection: &Convection, surroundings: &Surroundings, face: Kelvin) -> Slope {
    let (ambient, pressure, wind) = (surroundings.air, surroundings.pressure, surroundings.wind);
    let coefficient = match *convection {
        Convection::None => return Slope::constant(0.0),
        Convection::Coefficient(coefficient) => Slope::constant(coefficient),
        Convection::Natural(surface) => natural_coefficient(surface, face, ambient, pressure),
        Convection::Forced(surface) => forced_coefficient(surface, wind, face, ambient, pressure),
        Convection::Mixed { natural, forced } => {
            let natural = natural_coefficient(natural, face, ambient, pressure);
            let forced = forced_coefficient(forced, wind, face, ambient, pressure);
            (natural.squared() * natural + forced.squared() * forced).powf(1.0 / 3.0)
        }
    };
    coefficient * (Slope::variable(face) - ambient)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::{ModelError, NaturalSurface};
    use uom::si::f64::{HeatFluxDensity, Pressure, ThermodynamicTemperature, Velocity};
    use uom::si::{heat_flux_density, pressure, thermodynamic_temperature, velocity};

    fn number(nusselt: fn(Slope, Slope) -> Slope, reynolds: f64, prandtl: f64) -> f64 {
        nusselt(Slope::constant(reynolds), Slope::constant(prandtl)).value
    }

    /// Values computed with the registry library `ht` 1.2.0 (cylinder) and by hand from the formulas named (plates): CHECKS D, convection.csv.
    #[test]
    fn nusselt_numbers_agree_with_the_general_purpose_library() {
        for (value, expected) in [
            (number(cylinder_across_nusselt, 1e2, 0.7), 5.156_131_72),
            (number(cylinder_across_nusselt, 1e4, 0.7), 53.327_788_7),
            (number(cylinder_across_nusselt, 1e5, 0.7), 214.126_043),
            (number(cylinder_across_nusselt, 1e6, 7.0), 2_909.921_23),
            (number(plate_along_nusselt, 1e4, 0.7), 58.956_825_7),
            (number(plate_along_nusselt, 1e5, 0.7), 186.437_853),
            (number(plate_along_nusselt, 4e5, 0.7), 372.875_706),
            (number(plate_along_nusselt, 1e6, 0.7), 1_299.484_95),
            (number(plate_along_nusselt, 1e7, 0.7), 12_305.430_8),
        ] {
            assert!((value / expected - 1.0).abs() < 1e-6, "{value} for {expected}");
        }
        let values: Vec<f64> = (0..=1000)
            .map(|step| number(plate_along_nusselt, 4.9e5 + 20.0 * f64::from(step), 0.7))
            .collect();
        assert!(values.windows(2).all(|pair| pair[1] > pair[0] && pair[1] - pair[0] < 0.1));
    }

    /// Coefficients of an outer shell of 0.1 m diameter in wind of 3 m/s and 298.15 K, film properties by CoolProp (CHECKS D).
    #[test]
    fn coefficients_of_a_shell_in_wind() {
        for (face, expected) in [(350.0, 20.000_951_5), (500.0, 19.254_808_6), (800.0, 18.361_228_8)] {
            let found = forced_coefficient(ForcedSurface::AcrossCylinder(0.1), 3.0, face, 298.15, 101_325.0).value;
            assert!((found / expected - 1.0).abs() < 1e-3, "{found} for {expected}");
        }
        // Incropera & DeWitt, cylinder in cross flow, 12.7 mm, 10 m/s, film at 350 K: Nu 40.6, h 96 W/m²K (from memory).
        let found = forced_coefficient(ForcedSurface::AcrossCylinder(0.0127), 10.0, 401.55, 299.35, 101_325.0).value;
        assert!((found / 96.0 - 1.0).abs() < 0.01, "{found}");
        // Half the pressure is half the density, and half the Reynolds number.
        let thin = forced_coefficient(ForcedSurface::AlongPlate(0.1), 6.0, 350.0, 300.0, 50_000.0).value;
        let dense = forced_coefficient(ForcedSurface::AlongPlate(0.1), 3.0, 350.0, 300.0, 100_000.0).value;
        assert!((thin / dense - 1.0).abs() < 1e-12, "{thin} {dense}");
    }

    fn windy(wind: f64) -> Result<Surroundings, ModelError> {
        let air = ThermodynamicTemperature::new::<thermodynamic_temperature::kelvin>(300.0);
        let sun = HeatFluxDensity::new::<heat_flux_density::watt_per_square_meter>(0.0);
        Surroundings::new(air, air, Pressure::new::<pressure::pascal>(101_325.0), sun)?.with_wind(Velocity::new::<velocity::meter_per_second>(wind))
    }

    #[test]
    fn mixed_convection_is_the_third_root_of_the_cubes_and_slopes_are_the_derivatives() -> Result<(), ModelError> {
        let natural = NaturalSurface::Vertical(0.3);
        let forced = ForcedSurface::AlongPlate(0.3);
        let mixed = Convection::Mixed { natural, forced };
        for wind in [0.0, 0.5, 3.0, 40.0] {
            let surroundings = windy(wind)?;
            for face in [280.0, 305.0, 400.0, 900.0] {
                let all = [Convection::Natural(natural), Convection::Forced(forced), mixed.clone()];
                let [one, other, both] = all.each_ref().map(|convection| convected(convection, &surroundings, face).value);
                assert!((both.powi(3) / (one.powi(3) + other.powi(3)) - 1.0).abs() < 1e-12, "{wind} {face}");
                for convection in &all {
                    let flux = |face| convected(convection, &surroundings, face);
                    let difference = (flux(face + 1e-4).value - flux(face - 1e-4).value) / 2e-4;
                    assert!(
                        (flux(face).slope - difference).abs() <= 1e-5 * difference.abs() + 1e-9,
                        "{convection:?} {wind} {face}"
                    );
                }
            }
            assert!(convected(&mixed, &surroundings, 300.0).slope > 0.0);
        }
        Ok(())
    }
}
