//! Enclosures hold what they claim, over problems with known or countable
//! eigenvalues.

use dashu_int::UBig;
use dashu_ratio::RBig;

use super::support::*;
use crate::control::Unattended;
use crate::num::{ExactReal, Toward};
use crate::prove::{prove, ConditionKind, Level, Verdict};

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
