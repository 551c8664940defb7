//! Coefficients of RODAS5P: G. Steinebach, "Construction of Rosenbrock–Wanner method Rodas5P and numerical benchmarks within the Julia
//! Differential Equations package", BIT Numerical Mathematics 63:27 (2023), in the form of Hairer & Wanner II.IV.7 (stages U = Γ K).
//! Order 5 with an embedded error estimate of order 4, stiffly accurate, L-stable, without order reduction on parabolic problems, dense
//! output of order 4. The tests check the order conditions.

/// Number of stages.
pub(super) const STAGES: usize = 8;

/// The diagonal γ.
pub(super) const GAMMA: f64 = 0.21193756319429014;

/// Combination of earlier stages in the argument of stage k (rows 6 and 7 are row 5 and all later stages once).
pub(super) const A: [[f64; 7]; STAGES] = [
    [0.0; 7],
    [3.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0],
    [2.849394379747939, 0.45842242204463923, 0.0, 0.0, 0.0, 0.0, 0.0],
    [-6.954028509809101, 2.489845061869568, -10.358996098473584, 0.0, 0.0, 0.0, 0.0],
    [
        2.8029986275628964,
        0.5072464736228206,
        -0.3988312541770524,
        -0.04721187230404641,
        0.0,
        0.0,
        0.0,
    ],
    [
        -7.502846399306121,
        2.561846144803919,
        -11.627539656261098,
        -0.18268767659942256,
        0.030198172008377946,
        0.0,
        0.0,
    ],
    [
        -7.502846399306121,
        2.561846144803919,
        -11.627539656261098,
        -0.18268767659942256,
        0.030198172008377946,
        1.0,
        0.0,
    ],
    [
        -7.502846399306121,
        2.561846144803919,
        -11.627539656261098,
        -0.18268767659942256,
        0.030198172008377946,
        1.0,
        1.0,
    ],
];

/// Combination of earlier stages on the right-hand side of stage k.
pub(super) const C: [[f64; 7]; STAGES] = [
    [0.0; 7],
    [-14.155112264123755, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0],
    [-17.97296035885952, -2.859693295451294, 0.0, 0.0, 0.0, 0.0, 0.0],
    [147.12150275711716, -1.41221402718213, 71.68940251302358, 0.0, 0.0, 0.0, 0.0],
    [
        165.43517024871676,
        -0.4592823456491126,
        42.90938336958603,
        -5.961986721573306,
        0.0,
        0.0,
        0.0,
    ],
    [
        24.854864614690072,
        -3.0009227002832186,
        47.4931110020768,
        5.5814197821558125,
        -0.6610691825249471,
        0.0,
        0.0,
    ],
    [
        30.91273214028599,
        -3.1208243349937974,
        77.79954646070892,
        34.28646028294783,
        -19.097331116725623,
        -28.087943162872662,
        0.0,
    ],
    [
        37.80277123390563,
        -3.2571969029072276,
        112.26918849496327,
        66.9347231244047,
        -40.06618937091002,
        -54.66780262877968,
        -9.48861652309627,
    ],
];

/// Where in the step each stage stands (row sums of α).
pub(super) const ALPHA: [f64; STAGES] = [
    0.0,
    0.6358126895828702,
    0.40957983933975334,
    0.976930672506071,
    0.4288403609558665,
    1.0,
    1.0,
    1.0,
];

/// Weight of the time derivative in each stage (row sums of Γ).
pub(super) const GAMMA_SUM: [f64; STAGES] = [
    GAMMA,
    -0.4238751263885802,
    -0.33846271262359223,
    1.8046452872882754,
    2.325825639765066,
    0.0,
    0.0,
    0.0,
];

/// Dense output: y(θ) = (1 − θ) y₀ + θ (y₁ + (1 − θ)(d₀ + θ (d₁ + θ d₂))), d = DENSE · U.
pub(super) const DENSE: [[f64; STAGES]; 3] = [
    [
        25.948786856663858,
        -2.5579724845846235,
        10.433815404888879,
        -2.3679251022685204,
        0.524948541321073,
        1.1241088310450404,
        0.4272876194431874,
        -0.17202221070155493,
    ],
    [
        -9.91568850695171,
        -0.9689944594115154,
        3.0438037242978453,
        -24.495224566215796,
        20.176138334709044,
        15.98066361424651,
        -6.789040303419874,
        -6.710236069923372,
    ],
    [
        11.419903575922262,
        2.8879645146136994,
        72.92137995996029,
        80.12511834622643,
        -52.072871366152654,
        -59.78993625266729,
        -0.15582684782751913,
        4.883087185713722,
    ],
];

#[cfg(test)]
mod tests {
    use super::*;

    type Square = [[f64; STAGES]; STAGES];

    /// Γ = (I/γ − C)⁻¹ by forward substitution: the matrix is lower triangular.
    fn gamma_matrix() -> Square {
        let mut gamma = [[0.0; STAGES]; STAGES];
        for column in 0..STAGES {
            for row in column..STAGES {
                let right = if row == column { 1.0 } else { 0.0 };
                let known: f64 = (column..row).map(|k| C[row][k] * gamma[k][column]).sum();
                gamma[row][column] = GAMMA * (right + known);
            }
        }
        gamma
    }

    fn row_of(coefficients: &[f64], gamma: &Square) -> [f64; STAGES] {
        let mut row = [0.0; STAGES];
        for (k, coefficient) in coefficients.iter().enumerate() {
            for (sum, value) in row.iter_mut().zip(gamma[k]) {
                *sum += coefficient * value;
            }
        }
        row
    }

    fn dot(a: &[f64; STAGES], b: &[f64; STAGES]) -> f64 {
        a.iter().zip(b).map(|(a, b)| a * b).sum()
    }

    fn times(matrix: &Square, vector: &[f64; STAGES]) -> [f64; STAGES] {
        std::array::from_fn(|row| dot(&matrix[row], vector))
    }

    /// Order conditions of Rosenbrock methods, Hairer & Wanner II.IV.7, Table 7.1 (orders 1 to 4) and the quadrature condition of order 5.
    #[test]
    fn the_order_conditions_hold() {
        let gamma = gamma_matrix();
        let alpha: Square = std::array::from_fn(|row| row_of(&A[row], &gamma));
        let beta: Square = std::array::from_fn(|row| std::array::from_fn(|k| alpha[row][k] + gamma[row][k]));
        let ones = [1.0; STAGES];
        let weights = row_of(&[A[7][0], A[7][1], A[7][2], A[7][3], A[7][4], 1.0, 1.0, 1.0], &gamma);
        let (a, b, g) = (times(&alpha, &ones), times(&beta, &ones), times(&gamma, &ones));
        let power = |n: i32| a.map(|value: f64| value.powi(n));
        let mixed: [f64; STAGES] = std::array::from_fn(|k| a[k] * times(&alpha, &b)[k]);
        for (left, right) in [
            (dot(&weights, &ones), 1.0),
            (dot(&weights, &b), 1.0 / 2.0),
            (dot(&weights, &power(2)), 1.0 / 3.0),
            (dot(&weights, &times(&beta, &b)), 1.0 / 6.0),
            (dot(&weights, &power(3)), 1.0 / 4.0),
            (dot(&weights, &mixed), 1.0 / 8.0),
            (dot(&weights, &times(&beta, &power(2))), 1.0 / 12.0),
            (dot(&weights, &times(&beta, &times(&beta, &b))), 1.0 / 24.0),
            (dot(&weights, &power(4)), 1.0 / 5.0),
        ] {
            assert!((left - right).abs() < 1e-12, "{left} for {right}");
        }
        for k in 0..STAGES {
            assert!((a[k] - ALPHA[k]).abs() < 1e-12 && (g[k] - GAMMA_SUM[k]).abs() < 1e-12, "stage {k}");
        }
    }
}
