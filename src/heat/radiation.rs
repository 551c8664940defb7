//! Grey radiation between faces.

use crate::model::STEFAN_BOLTZMANN;

/// Net grey exchange factor per area of the inner (or first) face, between two faces that see only each other: parallel planes
/// 1/(1/ε₁ + 1/ε₂ − 1), and coaxial cylinders 1/(1/ε₁ + (A₁/A₂)(1/ε₂ − 1)) with `area_ratio` = A₁/A₂ (Incropera & DeWitt, Fundamentals of Heat
/// and Mass Transfer, Table 13.3 in the 6th edition). 0 where either face does not radiate.
pub fn grey_exchange(first: f64, second: f64, area_ratio: f64) -> f64 {
    if first <= 0.0 || second <= 0.0 {
        0.0
    } else {
        1.0 / (1.0 / first + area_ratio * (1.0 / second - 1.0))
    }
}

/// View factor between two equal coaxial parallel disks of radius r at distance `distance` (Incropera & DeWitt, Table 13.2; Howell's catalogue
/// of radiation configuration factors, C-41).
pub fn disk_to_disk_view(radius: f64, distance: f64) -> f64 {
    let ratio = radius / distance;
    // With X = 1 + (1 + R²)/R² and equal radii, F = (X − √(X² − 4))/2, written so that it does not cancel for far disks.
    let x = 2.0 + 1.0 / (ratio * ratio);
    2.0 / (x + (x * x - 4.0).max(0.0).sqrt())
}

/// What part of the view of a cylinder's inner wall is its open ends, the rest being the wall itself, by reciprocity: one open end, the other
/// closed by wall as hot, 1/(1 + 4 L/D); two open ends, (1 − F)·D/(2 L), F from end to end.
pub fn open_cylinder_view(diameter: f64, length: f64, open_ends: u8) -> f64 {
    match open_ends {
        0 => 0.0,
        1 => 1.0 / (1.0 + 4.0 * length / diameter),
        _ => (1.0 - disk_to_disk_view(0.5 * diameter, length)) * diameter / (2.0 * length),
    }
}

/// σ T⁴ and its derivative.
#[inline]
pub(crate) fn black(temperature: f64) -> (f64, f64) {
    let cube = temperature * temperature * temperature;
    (STEFAN_BOLTZMANN * cube * temperature, 4.0 * STEFAN_BOLTZMANN * cube)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn disks_see_each_other_by_the_crossed_strings_of_their_rims() {
        // Howell's C-41 at r/a = 1: F = (3 − √5)/2.
        assert!((disk_to_disk_view(1.0, 1.0) - (3.0 - 5f64.sqrt()) / 2.0).abs() < 1e-15);
        // Far away, the solid angle: F → (r/a)².
        assert!((disk_to_disk_view(0.01, 10.0) / 1e-6 - 1.0).abs() < 1e-5);
        assert!(disk_to_disk_view(100.0, 0.1) > 0.998);
    }

    #[test]
    fn a_long_tube_sees_little_of_its_ends() {
        assert!((open_cylinder_view(0.04, 0.12, 1) - 1.0 / 13.0).abs() < 1e-15);
        assert!(open_cylinder_view(0.04, 4.0, 2) < 0.006);
        assert!(open_cylinder_view(0.04, 0.000_04, 2) > 0.49);
    }
}
