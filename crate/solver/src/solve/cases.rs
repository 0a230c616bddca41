//! Matrices the stages are held against: planted, published, and hard.

use crate::matrix::Dense;
use nalgebra::{DMatrix, DVector};

/// A reproducible stream of doubles in [−1, 1) (xorshift64*, Vigna 2016).
pub(crate) struct Stream(u64);

impl Stream {
    pub fn new(seed: u64) -> Self {
        Self(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) | 1)
    }

    pub fn next(&mut self) -> f64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        let bits = self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 11;
        bits as f64 / (1u64 << 52) as f64 - 1.0
    }
}

/// Real symmetric or complex Hermitian with entries in [−1, 1).
pub(crate) fn random(order: usize, complex: bool, seed: u64) -> Dense {
    let mut stream = Stream::new(seed);
    let mut re = DMatrix::zeros(order, order);
    let mut im = DMatrix::zeros(order, order);
    for col in 0..order {
        for row in col..order {
            let x = stream.next();
            re[(row, col)] = x;
            re[(col, row)] = x;
            if complex && row != col {
                let y = stream.next();
                im[(row, col)] = y;
                im[(col, row)] = -y;
            }
        }
    }
    if complex {
        Dense::complex(re, im)
    } else {
        Dense::real(re)
    }
}

/// A real matrix from its entries.
pub(crate) fn real(order: usize, entry: impl FnMut(usize, usize) -> f64) -> Dense {
    Dense::real(DMatrix::from_fn(order, order, entry))
}

/// Tridiagonal with the given diagonal and off-diagonals.
pub(crate) fn tridiagonal(
    order: usize,
    diagonal: impl Fn(usize) -> f64,
    off: impl Fn(usize) -> f64,
) -> Dense {
    real(order, |i, j| match (i, j) {
        (i, j) if i == j => diagonal(i),
        (i, j) if i == j + 1 => off(j),
        (i, j) if j == i + 1 => off(i),
        _ => 0.0,
    })
}

/// Rosser's 8 × 8 (Rosser, Lanczos, Hestenes and Karush 1951), from memory.
pub(crate) fn rosser() -> Dense {
    let rows: [[f64; 8]; 8] = [
        [611.0, 196.0, -192.0, 407.0, -8.0, -52.0, -49.0, 29.0],
        [196.0, 899.0, 113.0, -192.0, -71.0, -43.0, -8.0, -44.0],
        [-192.0, 113.0, 899.0, 196.0, 61.0, 49.0, 8.0, 52.0],
        [407.0, -192.0, 196.0, 611.0, 8.0, 44.0, 59.0, -23.0],
        [-8.0, -71.0, 61.0, 8.0, 411.0, -599.0, 208.0, 208.0],
        [-52.0, -43.0, 49.0, 44.0, -599.0, 411.0, 208.0, 208.0],
        [-49.0, -8.0, 8.0, 59.0, 208.0, 208.0, 99.0, -911.0],
        [29.0, -44.0, 52.0, -23.0, 208.0, 208.0, -911.0, 99.0],
    ];
    real(8, |i, j| rows[i][j])
}

/// Adjacency matrix with zero rows: every third vertex isolated, the others on
/// a ring with chords.
pub(crate) fn adjacency(order: usize) -> Dense {
    let live: Vec<usize> = (0..order).filter(|v| v % 3 != 0).collect();
    let mut re = DMatrix::zeros(order, order);
    let count = live.len();
    for k in 0..count {
        for other in [(k + 1) % count, (k + 5) % count] {
            let (a, b) = (live[k], live[other]);
            if a != b {
                re[(a, b)] = 1.0;
                re[(b, a)] = 1.0;
            }
        }
    }
    Dense::real(re)
}

/// Q diag(values) Qᴴ with Q a product of reflectors, made Hermitian exactly.
pub(crate) fn planted(values: &[f64], complex: bool, seed: u64) -> Dense {
    let order = values.len();
    let mut stream = Stream::new(seed);
    let mut a = DMatrix::from_diagonal(&DVector::from_column_slice(values))
        .map(|x| nalgebra::Complex::new(x, 0.0));
    for _ in 0..3 {
        let v = DVector::from_fn(order, |_, _| {
            nalgebra::Complex::new(stream.next(), if complex { stream.next() } else { 0.0 })
        });
        let scale = nalgebra::Complex::new(2.0 / v.norm_squared(), 0.0);
        let reflector = DMatrix::identity(order, order) - &v * v.adjoint() * scale;
        a = &reflector * a * &reflector;
    }
    let a = (&a + a.adjoint()) * nalgebra::Complex::new(0.5, 0.0);
    let re = a.map(|x| x.re);
    if complex {
        Dense::complex(re, a.map(|x| x.im))
    } else {
        Dense::real(re)
    }
}

/// Every hard case with its name.
pub(crate) fn hard() -> Vec<(String, Dense)> {
    let mut cases: Vec<(String, Dense)> = Vec::new();
    let mut add = |name: &str, matrix: Dense| cases.push((name.to_string(), matrix));
    for unit in [1e300, 1e-300, 5e-324, 1e-310] {
        let mut stream = Stream::new(3);
        let mut base = DMatrix::from_fn(9, 9, |_, _| (stream.next() * 8.0).round());
        base = &base + base.transpose();
        add(&format!("unit {unit:e}"), Dense::real(base * unit));
    }
    add("zero", real(7, |_, _| 0.0));
    add("one by one", real(1, |_, _| -3.0));
    add("two by two", real(2, |i, j| (i + j) as f64));
    add(
        "diagonal",
        real(6, |i, j| if i == j { (i * i) as f64 - 4.0 } else { 0.0 }),
    );
    add("identity", real(12, |i, j| if i == j { 1.0 } else { 0.0 }));
    add("all ones", real(15, |_, _| 1.0));
    add("second differences", tridiagonal(40, |_| 2.0, |_| -1.0));
    add(
        "second differences 100",
        tridiagonal(100, |_| 2.0, |_| -1.0),
    );
    add(
        "Clement 30",
        tridiagonal(30, |_| 0.0, |k| (((k + 1) * (29 - k)) as f64).sqrt()),
    );
    add(
        "Wilkinson 21",
        tridiagonal(21, |k| (k as f64 - 10.0).abs(), |_| 1.0),
    );
    add(
        "glued Wilkinson",
        tridiagonal(
            84,
            |k| ((k % 21) as f64 - 10.0).abs(),
            |k| if k % 21 == 20 { 1e-8 } else { 1.0 },
        ),
    );
    add("Rosser", rosser());
    add(
        "graded down",
        real(20, |i, j| 10f64.powi(-((i + j) as i32))),
    );
    add(
        "graded up",
        real(20, |i, j| 10f64.powi(i as i32 + j as i32 - 38)),
    );
    add(
        "graded full",
        real(21, |i, j| {
            10f64.powi(-((i + j) as i32))
                * if i == j {
                    2.0
                } else {
                    1.0 / (1 + i + j) as f64
                }
        }),
    );
    add("Hilbert 60", real(60, |i, j| 1.0 / (i + j + 1) as f64));
    for order in [20, 33] {
        add(&format!("adjacency {order}"), adjacency(order));
    }
    add(
        "equal diagonal",
        real(10, |i, j| if i == j { 1.0 } else { 0.01 }),
    );
    add(
        "equal diagonal, tiny",
        real(10, |i, j| if i == j { 1.0 } else { 1e-18 }),
    );
    let spread = [
        [2.0e6, 1.0e3, 3.0, 1.0],
        [1.0e3, 1.5e6, 2.0, 2.0],
        [3.0, 2.0, 1.0, 1.0e-7],
        [1.0, 2.0, 1.0e-7, 1.000_001],
    ];
    add("four by four, wide", real(4, |i, j| spread[i][j]));
    for permutation in [
        [0, 1, 2, 3, 4, 5, 6, 7],
        [0, 4, 1, 5, 2, 6, 3, 7],
        [7, 0, 6, 1, 5, 2, 4, 3],
        [3, 7, 2, 6, 1, 5, 0, 4],
    ] {
        let block = |i: usize, j: usize| match (i / 3, j / 3) {
            (a, b) if a == b => ((i % 3 + 1) * (j % 3 + 1) + a) as f64,
            _ => 0.0,
        };
        add(
            &format!("blocks permuted by {permutation:?}"),
            real(8, |i, j| block(permutation[i], permutation[j])),
        );
    }
    let cluster: Vec<f64> = (0..50)
        .map(|k| {
            if k < 45 {
                1.0 + k as f64 * 1e-14
            } else {
                k as f64
            }
        })
        .collect();
    add("near-repeated", planted(&cluster, false, 5));
    add("near-repeated, complex", planted(&cluster, true, 6));
    let few: Vec<f64> = (0..60).map(|k| (k % 3) as f64).collect();
    add("three values, each 20 times", planted(&few, false, 7));
    add("three values, complex", planted(&few, true, 8));
    let decay: Vec<f64> = (0..64).map(|k| 0.5f64.powi(k)).collect();
    add("halving values", planted(&decay, false, 9));
    add("halving values, complex", planted(&decay, true, 10));
    for order in [3, 10, 31, 64, 101] {
        add(&format!("random {order}"), random(order, false, 11));
        add(&format!("random complex {order}"), random(order, true, 12));
    }
    cases
}
