//! Containment tests of the stage. Approximations come from nalgebra, or are
//! made bad on purpose.

use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use nalgebra::{Complex, DMatrix};

use super::{prove, ConditionKind, Level, Proof, Verdict};
use crate::control::Unattended;
use crate::matrix::{Dense, ExactMatrix};
use crate::num::{Dyadic, ExactReal, Toward};
use crate::pairs::Approximation;
use crate::problem::Problem;

/// A repeatable stream of doubles in [−1, 1) (xorshift64*; S. Vigna 2016).
pub(super) struct Stream(pub u64);

impl Stream {
    pub fn next(&mut self) -> f64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        (self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 11) as f64 / (1u64 << 52) as f64 - 1.0
    }
}

pub(super) fn decimal(digits: i64, exponent: i16) -> ExactReal {
    ExactReal::Decimal { digits, exponent }
}

/// A problem from entry functions of (row, column) with row ≥ column.
pub(super) fn hermitian(
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

fn negated(x: &ExactReal) -> ExactReal {
    match x {
        ExactReal::Decimal { digits, exponent } => decimal(-digits, *exponent),
        ExactReal::Binary(x) => ExactReal::Binary(-x),
        other => ExactReal::Rational(Box::new(-other.rational().expect("a rational entry"))),
    }
}

fn nearest(matrix: &ExactMatrix, scale: i32) -> DMatrix<Complex<f64>> {
    DMatrix::from_fn(matrix.order(), matrix.order(), |i, j| {
        Complex::new(
            matrix.re(i, j).nearest(scale),
            matrix.im(i, j).nearest(scale),
        )
    })
}

/// An approximation by nalgebra, at the stated scale exponent of A.
pub(super) fn approximate(problem: &Problem, scale: i32) -> Approximation {
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

pub(super) fn standard(matrix: ExactMatrix) -> Problem {
    Problem {
        matrix,
        metric: None,
    }
}

pub(super) fn rational(numerator: i64, denominator: u64) -> RBig {
    RBig::from_parts(IBig::from(numerator), UBig::from(denominator))
}

pub(super) fn assert_contains(proof: &Proof, exact: &[RBig], what: &str) {
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
fn clement_pair(order: usize) -> (Problem, Vec<RBig>) {
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

#[test]
fn the_typed_decimal_is_meant() {
    // diag(0.1, 0.2) turned by the exact rotation (3, 4)/5, entries as decimals.
    let problem = standard(hermitian(
        2,
        |i, j| match (i, j) {
            (0, 0) => decimal(164, -3),
            (1, 0) => decimal(-48, -3),
            _ => decimal(136, -3),
        },
        None,
    ));
    let proof = prove(
        &problem,
        &approximate(&problem, 0),
        Level::Quick,
        &mut Unattended,
    );
    assert_contains(
        &proof,
        &[rational(1, 10), rational(1, 5)],
        "turned decimals",
    );
    assert_eq!(proof.clusters().len(), 2);
    assert!(
        proof.digits().expect("no zero") >= 13,
        "{:?}",
        proof.enclosures()
    );
}

#[test]
fn a_pair_with_integer_eigenvalues_is_enclosed() {
    for order in [1, 2, 5, 12, 25] {
        let (problem, values) = clement_pair(order);
        let proof = prove(
            &problem,
            &approximate(&problem, 0),
            Level::Quick,
            &mut Unattended,
        );
        assert_contains(&proof, &values, &format!("order {order}"));
        assert_eq!(
            proof.clusters().len(),
            order,
            "order {order}: all are proven apart"
        );
        assert_eq!(proof.verdict(ConditionKind::Nonsingular), Verdict::Proved);
    }
}

const LEVELS: [Level; 3] = [Level::Quick, Level::Tight, Level::Deep { digits: 40 }];

#[test]
fn tight_bounds_hold_and_reach_their_digits() {
    for order in [1, 2, 5, 12, 25] {
        let (problem, values) = clement_pair(order);
        let proof = prove(
            &problem,
            &approximate(&problem, 0),
            Level::Tight,
            &mut Unattended,
        );
        assert_contains(&proof, &values, &format!("order {order}"));
        let worst = proof.closing_bound().expect("proven").to_f64(Toward::Up);
        assert!(worst < 1e-26, "order {order}: {worst:e}");
    }
}

#[test]
fn a_cluster_gets_a_quadratic_bound_too() {
    let problem = standard(hermitian(6, |_, _| decimal(1, 0), None));
    let proof = prove(
        &problem,
        &approximate(&problem, 0),
        Level::Tight,
        &mut Unattended,
    );
    let mut values = vec![RBig::ZERO; 5];
    values.push(RBig::from(6));
    assert_contains(&proof, &values, "all ones");
    assert_eq!(proof.clusters()[0].count(), 5);
    assert!(
        proof.closing_bound().expect("proven").to_f64(Toward::Up) < 1e-27,
        "{:?}",
        proof.enclosures()
    );
}

/// Number of negative eigenvalues of A − σM by exact elimination (Sylvester),
/// `None` if a pivot is zero.
fn exact_count_below(problem: &Problem, sigma: &RBig) -> Option<usize> {
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
fn assert_holds(problem: &Problem, proof: &Proof, what: &str) {
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
fn random_problem(stream: &mut Stream) -> Problem {
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

#[test]
fn random_enclosures_hold_by_exact_counts() {
    let mut stream = Stream(2026);
    for round in 0..60 {
        let problem = random_problem(&mut stream);
        let approximation = approximate(&problem, 0);
        for level in LEVELS {
            let proof = prove(&problem, &approximation, level, &mut Unattended);
            assert_eq!(
                proof.enclosures().len(),
                problem.matrix.order(),
                "{problem:?}: {:?}",
                proof.conditions()
            );
            assert_holds(&problem, &proof, &format!("round {round}, {level:?}"));
        }
    }
}

#[test]
fn corrupted_approximations_leave_true_statements() {
    let mut stream = Stream(99);
    for round in 0..60 {
        let problem = random_problem(&mut stream);
        let mut bad = approximate(&problem, 0);
        let order = problem.matrix.order();
        let size = [1e-14, 1e-9, 1e-5, 1e-2, 1.0][round % 5];
        for k in 0..order {
            bad.values[k] *= 1.0 + size * stream.next();
            let i = (stream.next().abs() * order as f64) as usize;
            bad.vectors.re[(i, k)] += size * stream.next();
        }
        for level in LEVELS {
            let proof = prove(&problem, &bad, level, &mut Unattended);
            assert_holds(
                &problem,
                &proof,
                &format!("round {round}, {level:?}, corrupted by {size:e}"),
            );
        }
    }
}

#[test]
fn deep_digits_on_demand_for_integers_surds_and_repetitions() {
    for (order, digits) in [(2, 100), (10, 100), (5, 500)] {
        let (problem, values) = clement_pair(order);
        let proof = prove(
            &problem,
            &approximate(&problem, 0),
            Level::Deep { digits },
            &mut Unattended,
        );
        assert_contains(&proof, &values, &format!("order {order}, {digits} digits"));
        for enclosure in proof.enclosures() {
            let enough = enclosure
                .digits()
                .is_none_or(|proven| proven >= i64::from(digits));
            assert!(enough, "order {order}: {:?}", enclosure.decimals());
        }
    }
    // [[√2, 1], [1, √2]]: √2 ± 1.
    let root = ExactReal::from(2).sqrt().expect("a surd");
    let problem = standard(hermitian(
        2,
        |i, j| if i == j { root.clone() } else { decimal(1, 0) },
        None,
    ));
    let proof = prove(
        &problem,
        &approximate(&problem, 0),
        Level::Deep { digits: 80 },
        &mut Unattended,
    );
    for (enclosure, shift) in proof.enclosures().iter().zip([1, -1]) {
        let shift = RBig::from(shift);
        let (low, high) = (
            enclosure.lower().to_rational() + &shift,
            enclosure.upper().to_rational() + &shift,
        );
        assert!(
            &low * &low <= RBig::from(2) && &high * &high >= RBig::from(2),
            "{:?}",
            enclosure.decimals()
        );
        assert!(enclosure.digits() >= Some(80), "{:?}", enclosure.decimals());
    }
    assert_eq!(proof.verdict(ConditionKind::Digits), Verdict::Proved);
    let ones = standard(hermitian(4, |_, _| decimal(3, -1), None));
    let proof = prove(
        &ones,
        &approximate(&ones, 0),
        Level::Deep { digits: 60 },
        &mut Unattended,
    );
    assert_contains(
        &proof,
        &[RBig::ZERO, RBig::ZERO, RBig::ZERO, rational(6, 5)],
        "0.3 everywhere",
    );
    assert_eq!(proof.clusters()[0].count(), 3);
}

#[test]
fn a_useless_approximation_is_rescued_in_extended_precision() {
    // A graded metric with an indefinite start: nothing but the matrices is left.
    let matrix = hermitian(3, |i, j| decimal(if i == j { 3 } else { 1 }, 0), None);
    let metric = hermitian(
        3,
        |i, j| {
            if i == j {
                decimal(1_000_000_000_001, -12)
            } else {
                decimal(1, 0)
            }
        },
        None,
    );
    let problem = Problem {
        matrix,
        metric: Some(metric),
    };
    let rubbish = Approximation {
        values: vec![f64::NAN; 3],
        vectors: Dense::real(DMatrix::zeros(3, 3)),
        scale: 0,
    };
    let proof = prove(
        &problem,
        &rubbish,
        Level::Deep { digits: 30 },
        &mut Unattended,
    );
    assert_eq!(proof.enclosures().len(), 3, "{:?}", proof.conditions());
    assert_holds(&problem, &proof, "nearly singular metric");
    // (3 − 1)/(10^−12) twice, and 5/(3 + 10^−12).
    assert_eq!(proof.clusters().last().expect("clusters").count(), 2);
}

#[test]
fn a_cancelled_proof_keeps_what_was_proven() {
    struct Impatient(usize);
    impl crate::control::Control for Impatient {
        fn progress(&mut self, _: crate::control::Stage, done: f64) -> crate::control::Flow {
            assert!((0.0..=1.0).contains(&done), "{done}");
            self.0 -= 1;
            if self.0 == 0 {
                crate::control::Flow::Cancel
            } else {
                crate::control::Flow::Continue
            }
        }
    }
    let (problem, values) = clement_pair(8);
    for patience in [1, 2, 5] {
        let level = Level::Deep { digits: 200 };
        let proof = prove(
            &problem,
            &approximate(&problem, 0),
            level,
            &mut Impatient(patience),
        );
        assert_contains(&proof, &values, &format!("patience {patience}"));
        assert_eq!(proof.verdict(ConditionKind::Finished), Verdict::Undecided);
    }
}

#[test]
fn scales_at_the_ends_of_the_range_do_no_harm() {
    for exponent in [-320, -300, -40, 0, 40, 299] {
        let problem = standard(hermitian(
            2,
            |i, j| decimal(if i == j { 2 } else { 1 }, exponent),
            None,
        ));
        let scale = (f64::from(exponent) * 3.32) as i32;
        let proof = prove(
            &problem,
            &approximate(&problem, scale),
            Level::Quick,
            &mut Unattended,
        );
        let power = RBig::from(UBig::from(10u8).pow(exponent.unsigned_abs() as usize));
        let unit = if exponent >= 0 {
            power
        } else {
            RBig::ONE / power
        };
        assert_contains(
            &proof,
            &[unit.clone(), unit * RBig::from(3)],
            &format!("1e{exponent}"),
        );
    }
}

#[test]
fn repeated_eigenvalues_are_one_cluster_with_its_count() {
    // All ones: 0 with multiplicity n − 1, and n.
    let order = 6;
    let problem = standard(hermitian(order, |_, _| decimal(1, 0), None));
    let proof = prove(
        &problem,
        &approximate(&problem, 0),
        Level::Quick,
        &mut Unattended,
    );
    let mut values = vec![RBig::ZERO; order - 1];
    values.push(RBig::from(order as i64));
    assert_contains(&proof, &values, "all ones");
    assert_eq!(proof.clusters()[0].count(), order - 1);
    assert!(proof.clusters()[0].sine_up().expect("the space is proven") < 1e-12);
    assert_eq!(proof.count_above(&RBig::ONE).exactly(), Some(1));
}

#[test]
fn complex_entries_and_a_zero_matrix() {
    // [[0, i, 0], [−i, 0, i], [0, −i, 0]]: −√2, 0, √2; squared bounds hold 2.
    let im = |i: usize, j: usize| {
        if i == j + 1 {
            decimal(-1, 0)
        } else {
            ExactReal::ZERO
        }
    };
    let problem = standard(hermitian(3, |_, _| ExactReal::ZERO, Some(&im)));
    let proof = prove(
        &problem,
        &approximate(&problem, 0),
        Level::Quick,
        &mut Unattended,
    );
    let top = &proof.enclosures()[2];
    let (low, high) = (top.lower().to_rational(), top.upper().to_rational());
    assert!(
        &low * &low <= RBig::from(2) && &high * &high >= RBig::from(2),
        "{:?}",
        top.decimals()
    );
    let zero = standard(hermitian(4, |_, _| ExactReal::ZERO, None));
    let proof = prove(&zero, &approximate(&zero, 0), Level::Quick, &mut Unattended);
    assert_contains(&proof, &vec![RBig::ZERO; 4], "zero");
    assert_eq!(proof.enclosures()[0].figure(), "0");
}

#[test]
fn rubbish_makes_the_statement_weaker_and_never_false() {
    let order = 5;
    let (problem, values) = {
        // diag(1..5) plus the exact rank-one ones·onesᵀ has no closed form, so a
        // diagonal problem is used: its eigenvalues are typed.
        let matrix = hermitian(
            order,
            |i, j| {
                if i == j {
                    decimal(i as i64 + 1, 0)
                } else {
                    ExactReal::ZERO
                }
            },
            None,
        );
        (
            standard(matrix),
            (1..=order as i64).map(RBig::from).collect::<Vec<_>>(),
        )
    };
    let mut stream = Stream(7);
    let good = approximate(&problem, 0);
    for round in 0..200 {
        let mut bad = good.clone();
        for _ in 0..1 + round % 4 {
            let at = (stream.next().abs() * order as f64) as usize;
            let to = (stream.next().abs() * order as f64) as usize;
            let poison = match round % 6 {
                0 => f64::NAN,
                1 => f64::INFINITY,
                2 => 0.0,
                3 => 1e300,
                4 => stream.next(),
                _ => -1.0,
            };
            if stream.next() > 0.0 {
                bad.values[at] = poison;
            } else {
                bad.vectors.re[(at, to)] = poison;
            }
        }
        for level in LEVELS {
            let proof = prove(&problem, &bad, level, &mut Unattended);
            assert_contains(
                &proof,
                &values,
                &format!("round {round}, {level:?}: {bad:?}"),
            );
        }
    }
    let empty = Approximation {
        values: vec![],
        vectors: Dense::real(DMatrix::zeros(0, 0)),
        scale: 0,
    };
    let proof = prove(&problem, &empty, Level::Quick, &mut Unattended);
    assert_contains(&proof, &values, "an approximation of the wrong order");
}

#[test]
fn a_metric_that_is_not_positive_is_refuted_or_undecided() {
    let matrix = hermitian(2, |_, _| decimal(1, 0), None);
    let negative = hermitian(2, |i, j| decimal(if i == j { -1 } else { 0 }, 0), None);
    let good = Approximation {
        values: vec![0.0, 2.0],
        vectors: Dense::real(DMatrix::identity(2, 2)),
        scale: 0,
    };
    let problem = Problem {
        matrix: matrix.clone(),
        metric: Some(negative),
    };
    let proof = prove(&problem, &good, Level::Quick, &mut Unattended);
    assert_eq!(proof.verdict(ConditionKind::Nonsingular), Verdict::Refuted);
    assert!(proof.enclosures().is_empty());
    let indefinite = hermitian(2, |i, j| decimal(if i == j { 1 } else { 2 }, 0), None);
    let problem = Problem {
        matrix,
        metric: Some(indefinite),
    };
    let proof = prove(&problem, &good, Level::Quick, &mut Unattended);
    assert_ne!(proof.verdict(ConditionKind::Nonsingular), Verdict::Proved);
}

#[test]
#[cfg_attr(target_arch = "wasm32", ignore = "reads the source tree")]
fn the_stage_imports_only_what_its_rule_allows() {
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("src/prove");
    let allowed = [
        "num",
        "matrix",
        "problem",
        "pairs::Approximation",
        "control",
        "prove",
    ];
    let mut folders = vec![folder];
    let mut seen = 0;
    while let Some(folder) = folders.pop() {
        for entry in std::fs::read_dir(&folder).expect("the stage's folder") {
            let path = entry.expect("an entry").path();
            if path.is_dir() {
                folders.push(path);
                continue;
            }
            seen += 1;
            let source = std::fs::read_to_string(&path).expect("a source file");
            for tail in source.split(concat!("crate", "::")).skip(1) {
                let fine = allowed.iter().any(|name| tail.starts_with(name));
                assert!(
                    fine,
                    "{} imports {}",
                    path.display(),
                    tail.lines().next().unwrap_or("")
                );
            }
            assert!(
                !source.contains(concat!("super::super", "::super")),
                "{}",
                path.display()
            );
        }
    }
    assert!(seen > 5, "the sources were read");
}
