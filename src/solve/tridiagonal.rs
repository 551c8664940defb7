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
        let (lower, diagonal, upper) = (&lower[..len], &diagonal[..len], &upper[..len]);
        let (multiplier, inverse, back) = (&mut multiplier[..len], &mut inverse[..len], &mut back[..len]);
        // Each side is carried in registers: pivot of the row before, from the left and from the right.
        let entry = |i: usize| -> Slot<L> { std::array::from_fn(|l| shift - step[l] * diagonal[i][l]) };
        let mut left = entry(0);
        let mut right = entry(len - 1);
        let mut eliminate = |i: usize, before: usize, own: &Slot<L>, across: &Slot<L>, pivot: &mut Slot<L>| {
            for l in 0..L {
                let inverted = 1.0 / pivot[l];
                let factor = -step[l] * own[l] * inverted;
                inverse[before][l] = inverted;
                multiplier[i][l] = factor;
                back[before][l] = step[l] * across[l] * inverted;
                pivot[l] = shift - step[l] * diagonal[i][l] + factor * step[l] * across[l];
            }
        };
        for i in 1..half {
            eliminate(i, i - 1, &lower[i], &upper[i - 1], &mut left);
            let j = len - 1 - i;
            if j >= half {
                eliminate(j, j + 1, &upper[j], &lower[j + 1], &mut right);
            }
        }
        if len - half > half {
            eliminate(half, half + 1, &upper[half], &lower[half + 1], &mut right);
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
    }

    /// Solves the factored system in place.
    pub fn solve(&self, x: &mut [Slot<L>]) {
        let len = x.len();
        let half = len / 2;
        let rest = len - half;
        let (x_left, x_right) = x.split_at_mut(half);
        let [multiplier, inverse, back] = [&self.multiplier, &self.inverse, &self.back].map(|values| values[..len].split_at(half));
        // Slices of equal, named lengths: one bound serves them all. Both sides at once, each carried in registers; the right side may be longer by
        // one row, which comes last inwards and first outwards.
        let (multiplier_left, inverse_left, back_left) = (&multiplier.0[..half], &inverse.0[..half], &back.0[..half]);
        let (multiplier_right, inverse_right, back_right) = (&multiplier.1[..rest], &inverse.1[..rest], &back.1[..rest]);
        let (x_left, x_right) = (&mut x_left[..half], &mut x_right[..rest]);
        let mut left = x_left[0];
        let mut right = x_right[rest - 1];
        for i in 1..half {
            let j = rest - 1 - i;
            for l in 0..L {
                left[l] = x_left[i][l] - multiplier_left[i][l] * left[l];
                right[l] = x_right[j][l] - multiplier_right[j][l] * right[l];
            }
            x_left[i] = left;
            x_right[j] = right;
        }
        if rest > half {
            for l in 0..L {
                right[l] = x_right[0][l] - multiplier_right[0][l] * right[l];
            }
        }
        for l in 0..L {
            let (first, second) = (left[l], right[l]);
            left[l] = self.middle[0][l] * first + self.middle[1][l] * second;
            right[l] = self.middle[2][l] * first + self.middle[3][l] * second;
        }
        x_left[half - 1] = left;
        x_right[0] = right;
        if rest > half {
            for l in 0..L {
                right[l] = x_right[1][l] * inverse_right[1][l] + back_right[1][l] * right[l];
            }
            x_right[1] = right;
        }
        for k in 1..half {
            let (i, j) = (half - 1 - k, rest - half + k);
            for l in 0..L {
                left[l] = x_left[i][l] * inverse_left[i][l] + back_left[i][l] * left[l];
                right[l] = x_right[j][l] * inverse_right[j][l] + back_right[j][l] * right[l];
            }
            x_left[i] = left;
            x_right[j] = right;
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
