//! Roots of a function between two points of opposite sign.

/// Where `function` crosses zero between `low` and `high`, to `tolerance` in its argument: regula falsi with the Illinois change
/// (Dowell & Jarratt 1971), with a bisection wherever that gains too little. The ends must have opposite signs (or one be zero); else the end
/// nearer to zero.
pub fn bracketed_root(mut function: impl FnMut(f64) -> f64, mut low: f64, mut high: f64, tolerance: f64) -> f64 {
    let mut at_low = function(low);
    let mut at_high = function(high);
    if at_low == 0.0 {
        return low;
    }
    if at_high == 0.0 {
        return high;
    }
    if (at_low > 0.0) == (at_high > 0.0) {
        return if at_low.abs() < at_high.abs() { low } else { high };
    }
    let mut before = high - low;
    for round in 0..200 {
        let width = high - low;
        if width.abs() <= tolerance {
            break;
        }
        let secant = high - at_high * width / (at_high - at_low);
        // Every third round must have halved the bracket, else it is halved here.
        let middle = if round % 3 == 2 && width.abs() > 0.5 * before.abs() {
            low + 0.5 * width
        } else {
            secant
        };
        if round % 3 == 2 {
            before = width;
        }
        let middle = if (middle - low) * (middle - high) < 0.0 {
            middle
        } else {
            low + 0.5 * width
        };
        let value = function(middle);
        if value == 0.0 {
            return middle;
        }
        if (value > 0.0) == (at_high > 0.0) {
            high = middle;
            at_high = value;
            at_low *= 0.5;
        } else {
            low = middle;
            at_low = value;
            at_high *= 0.5;
        }
    }
    0.5 * (low + high)
}

#[cfg(test)]
mod tests {
    use super::bracketed_root;

    #[test]
    fn finds_simple_flat_and_end_roots() {
        assert!((bracketed_root(|x| x * x - 2.0, 0.0, 2.0, 1e-13) - 2f64.sqrt()).abs() < 1e-12);
        assert!((bracketed_root(|x: f64| (x - 0.3).powi(9), 0.0, 1.0, 1e-13) - 0.3).abs() < 1e-9);
        assert!((bracketed_root(|x| x, 0.0, 1.0, 1e-13)).abs() < 1e-12);
        assert!((bracketed_root(|x| 1.0 - x, 0.0, 1.0, 1e-13) - 1.0).abs() < 1e-12);
    }
}
