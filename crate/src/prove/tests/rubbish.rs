//! Bad vectors, values and metrics: the statement weakens and stays true.

use dashu_ratio::RBig;
use nalgebra::DMatrix;

use super::support::*;
use crate::control::Unattended;
use crate::matrix::Dense;
use crate::num::ExactReal;
use crate::pairs::Approximation;
use crate::problem::Problem;
use crate::prove::{prove, ConditionKind, Level, Verdict};

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
