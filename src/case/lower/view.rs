//! How much of its surroundings the inside of a cylinder sees.

/// View from the inside of a cylindrical cavity, closed end included, out of its one open end, by reciprocity: the open end sees nothing but the
/// cavity, so F = A_end/(A_side + A_end) = 1/(1 + 4 L/D) (Incropera & `DeWitt`, Fundamentals of Heat and Mass Transfer, ch. 13: reciprocity and
/// summation rules). Length and diameter, m.
pub(super) fn through_one_end(length: f64, diameter: f64) -> f64 {
    1.0 / (1.0 + 4.0 * length / diameter)
}

/// View from the side of a cylinder out of its two open ends: (1 − F)·D/(2 L), with F the view from end to end of two equal coaxial disks (Howell,
/// A Catalog of Radiation Heat Transfer Configuration Factors, C-41). Length and diameter, m.
pub(super) fn through_two_ends(length: f64, diameter: f64) -> f64 {
    let ratio = 2.0 * length / diameter;
    // F = (S − √(S² − 4))/2 with S = 2 + (2 L/D)², written without the difference of near numbers.
    let sum = 2.0 + ratio * ratio;
    let end_to_end = 2.0 / (sum + (sum * sum - 4.0).sqrt());
    (1.0 - end_to_end) / ratio
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Howell C-41 at r/L = 1: F = (3 − √5)/2 = 0.381966.
    #[test]
    fn two_ends_by_the_catalogue() {
        let side = through_two_ends(1.0, 2.0);
        assert!((side - (1.0 - 0.381_966_011)).abs() < 1e-8, "{side}");
    }

    /// What the side sees of both ends is what both ends see of the side, by areas: 2·(πD²/4)·(1 − F) = πDL·view.
    #[test]
    fn reciprocity_holds() {
        for (length, diameter) in [(0.1, 0.06), (1.0, 0.02), (0.01, 1.0)] {
            let ratio: f64 = 2.0 * length / diameter;
            let sum = 2.0 + ratio.powi(2);
            let end_to_end = 0.5 * (sum - (sum * sum - 4.0).sqrt());
            let expected = 2.0 * (diameter * diameter / 4.0) * (1.0 - end_to_end) / (diameter * length);
            assert!(
                (through_two_ends(length, diameter) - expected).abs() < 1e-6 * expected,
                "{length} {diameter}"
            );
        }
    }

    #[test]
    fn a_short_ring_sees_everything_and_a_long_bore_little() {
        assert!(through_two_ends(1e-6, 1.0) > 0.999);
        assert!(through_two_ends(100.0, 1.0) < 0.006);
        assert!((through_one_end(0.12, 0.04) - 1.0 / 13.0).abs() < 1e-12);
    }
}
