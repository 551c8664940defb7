//! Tridiagonal linear algebra: assemble, factor, solve.

use super::Slot;

/// A tridiagonal matrix for each of `L` members, and room for the factors of 1/γ − h·J.
///
/// Elimination runs from both ends to the middle at once: two independent chains of divisions instead of one, which is what a step costs most
/// (the "twisted" or "burn at both ends" elimination, Babuška 1972).
#[derive(Clone, Debug)]
pub struct Tridiagonal<const L: usize> {
    /// `lower[i]`: row i, column i − 1 (the first is unused).
    pub lower: Vec<Slot<L>>,
    /// `diagonal[i]`: row i, column i.
    pub diagonal: Vec<Slot<L>>,
    /// `upper[i]`: row i, column i + 1 (the last is unused).
    pub upper: Vec<Slot<L>>,
    multiplier: Vec<Slot<L>>,
    inverse: Vec<Slot<L>>,
    back: Vec<Slot<L>>,
    /// Inverse of the two-by-two block in the middle, row by row.
    middle: [Slot<L>; 4],
}

impl<const L: usize> Tridiagonal<L> {
    /// A matrix of zeros with `len` rows, two at least.
    pub fn new(len: usize) -> Self {
        let zeros = vec![[0.0; L]; len];
        Self {
            lower: zeros.clone(),
            diagonal: zeros.clone(),
            upper: zeros.clone(),
            multiplier: zeros.clone(),
            inverse: zeros.clone(),
            back: zeros,
            middle: [[0.0; L]; 4],
        }
    }

    /// Factors shift·I − h·J, with h for each member.
    pub fn factor(&mut self, shift: f64, step: Slot<L>) {
        let len = self.diagonal.len();
        let half = len / 2;
        let Self {
            lower,
            diagonal,
            upper,
            multiplier,
            inverse,
            back,
            middle,
        } = self;
        let mut pivot = |i: usize, neighbour: Option<usize>| {
            let mut value = [0.0; L];
            for l in 0..L {
                value[l] = shift - step[l] * diagonal[i][l];
                if let Some(done) = neighbour {
                    // Row i loses its entry in column `done`; that row's entry in column i is the outer off-diagonal seen from the other side.
                    let (own, other) = if done < i {
                        (lower[i][l], upper[done][l])
                    } else {
                        (upper[i][l], lower[done][l])
                    };
                    let factor = -step[l] * own * inverse[done][l];
                    multiplier[i][l] = factor;
                    value[l] += factor * step[l] * other;
                }
            }
            if i + 1 < half || i > half {
                for l in 0..L {
                    inverse[i][l] = 1.0 / value[l];
                }
            }
            value
        };
        let mut left = pivot(0, None);
        let mut right = pivot(len - 1, None);
        for i in 1..half {
            left = pivot(i, Some(i - 1));
            if len - 1 - i >= half {
                right = pivot(len - 1 - i, Some(len - i));
            }
        }
        if len % 2 == 1 && len > 2 {
            right = pivot(half, Some(half + 1));
        }
        for l in 0..L {
            let across = -step[l] * upper[half - 1][l];
            let down = -step[l] * lower[half][l];
            let determinant = 1.0 / (left[l] * right[l] - across * down);
            middle[0][l] = right[l] * determinant;
            middle[1][l] = -across * determinant;
            middle[2][l] = -down * determinant;
            middle[3][l] = left[l] * determinant;
        }
        for i in 0..half.saturating_sub(1) {
            for l in 0..L {
                back[i][l] = step[l] * upper[i][l] * inverse[i][l];
            }
        }
        for i in half + 1..len {
            for l in 0..L {
                back[i][l] = step[l] * lower[i][l] * inverse[i][l];
            }
        }
    }

    /// Solves the factored system in place.
    pub fn solve(&self, x: &mut [Slot<L>]) {
        let len = x.len();
        let half = len / 2;
        let (multiplier, inverse, back) = (&self.multiplier[..len], &self.inverse[..len], &self.back[..len]);
        for i in 1..half {
            let j = len - 1 - i;
            for l in 0..L {
                x[i][l] -= multiplier[i][l] * x[i - 1][l];
            }
            if j >= half {
                for l in 0..L {
                    x[j][l] -= multiplier[j][l] * x[j + 1][l];
                }
            }
        }
        if len % 2 == 1 && len > 2 {
            for l in 0..L {
                x[half][l] -= multiplier[half][l] * x[half + 1][l];
            }
        }
        for l in 0..L {
            let (first, second) = (x[half - 1][l], x[half][l]);
            x[half - 1][l] = self.middle[0][l] * first + self.middle[1][l] * second;
            x[half][l] = self.middle[2][l] * first + self.middle[3][l] * second;
        }
        for k in 1..=half {
            if k < half {
                let i = half - 1 - k;
                for l in 0..L {
                    x[i][l] = x[i][l] * inverse[i][l] + back[i][l] * x[i + 1][l];
                }
            }
            let j = half + k;
            if j < len {
                for l in 0..L {
                    x[j][l] = x[j][l] * inverse[j][l] + back[j][l] * x[j - 1][l];
                }
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_factored_matrix_times_its_solution_gives_the_right_hand_side() {
        for len in 2..12 {
            let mut matrix = Tridiagonal::<2>::new(len);
            for i in 0..len {
                for l in 0..2 {
                    let wave = ((i * 7 + l * 3) as f64).sin();
                    matrix.diagonal[i][l] = -4.0 - wave;
                    matrix.lower[i][l] = 1.0 + 0.3 * wave;
                    matrix.upper[i][l] = 1.5 - 0.4 * wave;
                }
            }
            let (shift, step) = (4.7, [0.3, 20.0]);
            let right: Vec<Slot<2>> = (0..len).map(|i| [(i as f64).cos(), 1.0 + i as f64]).collect();
            matrix.factor(shift, step);
            let mut x = right.clone();
            matrix.solve(&mut x);
            for i in 0..len {
                for l in 0..2 {
                    let mut sum = (shift - step[l] * matrix.diagonal[i][l]) * x[i][l];
                    if i > 0 {
                        sum -= step[l] * matrix.lower[i][l] * x[i - 1][l];
                    }
                    if i + 1 < len {
                        sum -= step[l] * matrix.upper[i][l] * x[i + 1][l];
                    }
                    assert!(
                        (sum - right[i][l]).abs() < 1e-12 * (1.0 + right[i][l].abs()),
                        "{len} rows, row {i}: {sum} for {}",
                        right[i][l]
                    );
                }
            }
        }
    }
}
