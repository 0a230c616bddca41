//! Problems, approximations and exact counts for the tests.

use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use nalgebra::{Complex, DMatrix};

use crate::matrix::{Dense, ExactMatrix};
use crate::num::{Dyadic, ExactReal};
use crate::pairs::Approximation;
use crate::problem::Problem;
use crate::prove::{Level, Proof};

/// A repeatable stream of doubles in [−1, 1) (xorshift64*; S. Vigna 2016).
pub(in crate::prove) struct Stream(pub u64);

impl Stream {
    pub fn next(&mut self) -> f64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        (self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 11) as f64 / (1u64 << 52) as f64 - 1.0
    }
}

pub(in crate::prove) fn decimal(digits: i64, exponent: i16) -> ExactReal {
    ExactReal::Decimal { digits, exponent }
}

/// A problem from entry functions of (row, column) with row ≥ column.
pub(in crate::prove) fn hermitian(
    order: usize,
    re: impl Fn(usize, usize) -> ExactReal,
    im: Option<&dyn Fn(usize, usize) -> ExactReal>,
) -> ExactMatrix {
    let cells = || (0..order * order).map(|cell| (cell / order, cell % order));
    let real = cells().map(|(i, j)| re(i.max(j), i.min(j))).collect();
    let imaginary = im.map(|im| {
        cells()
            .map(|(i, j)| match i.cmp(&j) {
                std::cmp::Ordering::Equal => ExactReal::ZERO,
                std::cmp::Ordering::Greater => im(i, j),
                std::cmp::Ordering::Less => negated(&im(j, i)),
            })
            .collect()
    });
    ExactMatrix::new(order, real, imaginary)
}

pub(in crate::prove) fn negated(x: &ExactReal) -> ExactReal {
    match x {
        ExactReal::Decimal { digits, exponent } => decimal(-digits, *exponent),
        ExactReal::Binary(x) => ExactReal::Binary(-x),
        other => ExactReal::Rational(Box::new(-other.rational().expect("a rational entry"))),
    }
}

pub(in crate::prove) fn nearest(matrix: &ExactMatrix, scale: i32) -> DMatrix<Complex<f64>> {
    DMatrix::from_fn(matrix.order(), matrix.order(), |i, j| {
        Complex::new(
            matrix.re(i, j).nearest(scale),
            matrix.im(i, j).nearest(scale),
        )
    })
}

/// An approximation by nalgebra, at the stated scale exponent of A.
pub(in crate::prove) fn approximate(problem: &Problem, scale: i32) -> Approximation {
    let a = nearest(&problem.matrix, scale);
    let (standard, back) = match &problem.metric {
        None => (a, None),
        Some(metric) => {
            let lower = nearest(metric, 0)
                .cholesky()
                .expect("positive definite")
                .unpack();
            let half = lower.solve_lower_triangular(&a).expect("nonsingular");
            let whole = lower
                .solve_lower_triangular(&half.adjoint())
                .expect("nonsingular");
            (whole, Some(lower.adjoint()))
        }
    };
    let eigen = standard.symmetric_eigen();
    let vectors = match back {
        None => eigen.eigenvectors,
        Some(upper) => upper
            .solve_upper_triangular(&eigen.eigenvectors)
            .expect("nonsingular"),
    };
    let re = vectors.map(|z| z.re);
    let im = vectors.map(|z| z.im);
    let complex =
        problem.matrix.is_complex() || problem.metric.as_ref().is_some_and(ExactMatrix::is_complex);
    Approximation {
        values: eigen.eigenvalues.iter().copied().collect(),
        vectors: if complex {
            Dense::complex(re, im)
        } else {
            Dense::real(re)
        },
        scale,
    }
}

pub(in crate::prove) fn standard(matrix: ExactMatrix) -> Problem {
    Problem {
        matrix,
        metric: None,
    }
}

pub(in crate::prove) fn rational(numerator: i64, denominator: u64) -> RBig {
    RBig::from_parts(IBig::from(numerator), UBig::from(denominator))
}

pub(in crate::prove) fn assert_contains(proof: &Proof, exact: &[RBig], what: &str) {
    assert_eq!(
        proof.enclosures().len(),
        exact.len(),
        "{what}: {:?}",
        proof.conditions()
    );
    for (enclosure, value) in proof.enclosures().iter().zip(exact) {
        assert!(
            enclosure.contains(value),
            "{what}: {value} is outside {:?}",
            enclosure.decimals()
        );
    }
    let covered: usize = proof.clusters().iter().map(|cluster| cluster.count()).sum();
    assert_eq!(
        covered,
        exact.len(),
        "{what}: clusters cover every index once"
    );
}

/// Clement's matrix, also called after Kac: off-diagonals k and n − k made
/// symmetric have square roots, so its similar integer form is used with a
/// diagonal metric: D A x = λ D x has eigenvalues ±(n−1), ±(n−3), … (Clement,
/// SIAM Rev. 1, 1959).
pub(in crate::prove) fn clement_pair(order: usize) -> (Problem, Vec<RBig>) {
    let n = order as i64;
    // dᵢ: d₀ = 1, dᵢ₊₁ (n−1−i)⁻¹… chosen so that dᵢ·(n−1−i) = dᵢ₊₁·(i+1): binomials.
    let mut weights = vec![1i64];
    for i in 0..n - 1 {
        let last = weights[i as usize];
        weights.push(last * (n - 1 - i) / (i + 1));
    }
    let matrix = hermitian(
        order,
        |i, j| {
            if i == j + 1 {
                decimal(weights[j] * (n - 1 - j as i64), 0)
            } else {
                ExactReal::ZERO
            }
        },
        None,
    );
    let metric = hermitian(
        order,
        |i, j| {
            if i == j {
                decimal(weights[i], 0)
            } else {
                ExactReal::ZERO
            }
        },
        None,
    );
    let values = (0..n).map(|k| rational(2 * k - (n - 1), 1)).collect();
    (
        Problem {
            matrix,
            metric: Some(metric),
        },
        values,
    )
}

pub(in crate::prove) const LEVELS: [Level; 3] =
    [Level::Quick, Level::Tight, Level::Deep { digits: 40 }];

/// Number of negative eigenvalues of A − σM by exact elimination (Sylvester),
/// `None` if a pivot is zero.
pub(in crate::prove) fn exact_count_below(problem: &Problem, sigma: &RBig) -> Option<usize> {
    let order = problem.matrix.order();
    let part = |x: &ExactReal| x.rational().expect("a rational entry");
    let mut rows: Vec<Vec<(RBig, RBig)>> = (0..order)
        .map(|i| {
            (0..order)
                .map(|j| {
                    let (re, im) = (part(problem.matrix.re(i, j)), part(problem.matrix.im(i, j)));
                    match &problem.metric {
                        Some(metric) => (
                            re - sigma * part(metric.re(i, j)),
                            im - sigma * part(metric.im(i, j)),
                        ),
                        None if i == j => (re - sigma, im),
                        None => (re, im),
                    }
                })
                .collect()
        })
        .collect();
    let mut negative = 0;
    for p in 0..order {
        let pivot = rows[p][p].0.clone();
        if pivot.is_zero() {
            return None;
        }
        negative += usize::from(pivot < RBig::ZERO);
        for i in p + 1..order {
            let factor = (&rows[i][p].0 / &pivot, &rows[i][p].1 / &pivot);
            for j in p + 1..order {
                let (x, y) = rows[p][j].clone();
                rows[i][j].0 -= &factor.0 * &x - &factor.1 * &y;
                rows[i][j].1 -= &factor.0 * &y + &factor.1 * &x;
            }
        }
    }
    Some(negative)
}

/// Every enclosure holds its eigenvalue, by exact counts at its ends.
pub(in crate::prove) fn assert_holds(problem: &Problem, proof: &Proof, what: &str) {
    for enclosure in proof.enclosures() {
        let k = enclosure.index();
        // Just outside, so that an exact eigenvalue at an end makes no zero pivot.
        let nudge = (&enclosure.radius() + &Dyadic::one().scaled(-300))
            .scaled(-20)
            .to_rational();
        let below = exact_count_below(problem, &(enclosure.lower().to_rational() - &nudge));
        let above = exact_count_below(problem, &(enclosure.upper().to_rational() + &nudge));
        let ends = enclosure.decimals();
        assert!(
            below.is_none_or(|count| count <= k),
            "{what}: λ[{k}] is below {ends:?}: {problem:?}"
        );
        assert!(
            above.is_none_or(|count| count > k),
            "{what}: λ[{k}] is above {ends:?}: {problem:?}"
        );
    }
}

/// A random problem with short decimals: order 1 to 5, real or complex, with or
/// without a diagonally dominant metric, graded or with repeated rows.
pub(in crate::prove) fn random_problem(stream: &mut Stream) -> Problem {
    let mut below = |most: usize| (stream.next().abs() * most as f64) as usize;
    let (order, complex, pair, kind) = (1 + below(5), below(2) == 1, below(2) == 1, below(4));
    let mut cells = std::collections::BTreeMap::new();
    for i in 0..order {
        for j in 0..=i {
            let digits = stream.next() * 1000.0;
            let exponent = match kind {
                0 => -3,
                1 => -(3 * i as i16) - 4 * j as i16,
                2 => 0,
                _ => (stream.next() * 8.0) as i16,
            };
            let digits = if kind == 2 {
                (digits / 400.0) as i64
            } else {
                digits as i64
            };
            let small = (stream.next() * 9.0) as i64;
            cells.insert(
                (i, j),
                (digits, exponent, small, (stream.next() * 500.0) as i64),
            );
        }
    }
    let im = |i: usize, j: usize| decimal(cells[&(i, j)].3, cells[&(i, j)].1);
    let matrix = hermitian(
        order,
        |i, j| decimal(cells[&(i, j)].0, cells[&(i, j)].1),
        complex.then_some(&im as &dyn Fn(usize, usize) -> ExactReal),
    );
    let metric = pair.then(|| {
        hermitian(
            order,
            |i, j| {
                let grade = if kind == 1 {
                    -3 * (i as i16 + j as i16)
                } else {
                    0
                };
                decimal(if i == j { 50 } else { cells[&(i, j)].2 }, grade)
            },
            None,
        )
    });
    Problem { matrix, metric }
}
