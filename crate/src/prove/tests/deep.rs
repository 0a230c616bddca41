//! Digits on demand.

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
    for patience in [1, 4, 12, 40] {
        let level = Level::Deep { digits: 200 };
        let control = &mut Impatient(patience);
        let proof = prove(&problem, &approximate(&problem, 0), level, control);
        assert_eq!(
            proof.verdict(ConditionKind::Finished),
            Verdict::Undecided,
            "patience {patience}"
        );
        if patience == 1 {
            assert!(proof.enclosures().is_empty(), "nothing was proven yet");
        } else {
            assert_contains(&proof, &values, &format!("patience {patience}"));
        }
    }
}

#[test]
fn a_zero_eigenvalue_reaches_the_digits_by_its_width() {
    // Rank one: n·0.3 and zeros.
    for order in [2, 4] {
        let problem = standard(hermitian(order, |_, _| decimal(3, -1), None));
        let proof = prove(
            &problem,
            &approximate(&problem, 0),
            Level::Deep { digits: 60 },
            &mut Unattended,
        );
        let (count, least) = proof.held_at_zero().expect("zero is enclosed");
        assert_eq!(count, order - 1, "order {order}");
        assert!(least >= Some(60), "order {order}: {least:?}");
        assert_eq!(proof.verdict(ConditionKind::Digits), Verdict::Proved);
        let digits = proof
            .conditions()
            .iter()
            .find(|condition| condition.kind() == ConditionKind::Digits);
        let sentence = digits.expect("a condition").sentence();
        assert!(sentence.contains("1e-60 of the largest"), "{sentence}");
    }
}

#[test]
fn a_zero_matrix_is_known_exactly_and_holds_nothing_open() {
    let problem = standard(hermitian(3, |_, _| decimal(0, 0), None));
    let proof = prove(
        &problem,
        &approximate(&problem, 0),
        Level::Deep { digits: 30 },
        &mut Unattended,
    );
    assert_eq!(proof.held_at_zero(), None);
    assert_eq!(proof.verdict(ConditionKind::Digits), Verdict::Proved);
}
