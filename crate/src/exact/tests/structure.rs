//! Hand calculations, split blocks, pairs, limits.

use super::*;
use crate::exact::inertia::{count_between, inertia, Inertia};
use crate::exact::tridiagonal::Counts;
use crate::exact::{ClosedForm, ExactError, Polynomial};

#[test]
fn three_by_three_by_hand() {
    // p₂ = (0, 1, 2), Ap₂ = (5, 3, 2), p₃ = (0, 8, −4)/5.
    let form = form_of(&real(&[&[4, 1, 2], &[1, 3, 0], &[2, 0, 1]]));
    assert_eq!(form.diagonal, [ratio(4, 1), ratio(7, 5), ratio(13, 5)]);
    assert_eq!(form.squares, [ratio(5, 1), ratio(16, 25)]);
    assert_eq!(form.blocks, [0]);
}

#[test]
fn four_by_four_by_hand() {
    // p₂ = (0, 1, 2, 3), α₂ = 28/14, p₃ = (0, 4, −5, 2) of squared norm 45;
    // α₃ = 34/45, and α₄ from the trace, β₃² from the Frobenius norm.
    let form = form_of(&real(&[
        &[5, 1, 2, 3],
        &[1, 6, 0, 0],
        &[2, 0, -2, 1],
        &[3, 0, 1, 2],
    ]));
    assert_eq!(
        form.diagonal[..3],
        [ratio(5, 1), ratio(2, 1), ratio(34, 45)]
    );
    assert_eq!(form.squares[..2], [ratio(14, 1), ratio(45, 14)]);
    assert_eq!(form.diagonal[3], ratio(146, 45));
    let frobenius = ratio(25 + 36 + 4 + 4 + 2 * (1 + 4 + 9 + 1), 1);
    let diagonal: RBig = form.diagonal.iter().fold(RBig::ZERO, |sum, a| sum + a * a);
    let squares: RBig = form.squares.iter().fold(RBig::ZERO, |sum, b| sum + b);
    assert_eq!(diagonal + squares * ratio(2, 1), frobenius);
}

#[test]
fn complex_two_by_two_by_hand() {
    // [[2, 3−4i], [3+4i, 5]]: β² = 25, λ = (7 ± √109)/2.
    let problem = hermitian(&[&[(2, 0)], &[(3, 4), (5, 0)]]);
    let result = spectrum_of(&problem);
    assert_eq!(result.tridiagonal.squares, [ratio(25, 1)]);
    expect_forms(&result, &[("(7 − √109)/2", 1), ("(7 + √109)/2", 1)]);
}

#[test]
fn split_blocks_restart_and_are_named() {
    // e₁ decouples; the second block restarts at e₂.
    let problem = real(&[&[2, 0, 0, 0], &[0, 2, 1, 0], &[0, 1, 2, 0], &[0, 0, 0, 3]]);
    let result = spectrum_of(&problem);
    assert_eq!(result.tridiagonal.blocks, [0, 1, 3]);
    assert_eq!(
        result.tridiagonal.squares,
        [RBig::ZERO, ratio(1, 1), RBig::ZERO]
    );
    expect_forms(&result, &[("1", 1), ("2", 1), ("3", 2)]);
    assert_eq!(result.at(3).map(|e| e.first_index), Some(2));
    assert_eq!(result.at(4).map(|e| e.first_index), None);
}

#[test]
fn zero_matrix_and_order_one() {
    expect_forms(
        &spectrum_of(&real(&[&[0, 0, 0], &[0, 0, 0], &[0, 0, 0]])),
        &[("0", 3)],
    );
    expect_forms(&spectrum_of(&real(&[&[-7]])), &[("−7", 1)]);
}

#[test]
fn pair_by_hand() {
    // K = [[2, −1], [−1, 1]], M = diag(2, 1): 2λ² − 4λ + 1 = 0, the two-storey
    // frame with equal stiffness; λ = (2 ± √2)/2.
    let problem = Problem {
        matrix: matrix(&integer_rows(&[&[2, -1], &[-1, 1]])),
        metric: Some(matrix(&integer_rows(&[&[2, 0], &[0, 1]]))),
    };
    let result = spectrum_of(&problem);
    expect_forms(&result, &[("(2 − √2)/2", 1), ("(2 + √2)/2", 1)]);
    assert_eq!(result.tridiagonal.diagonal, [ratio(1, 1), ratio(1, 1)]);
    assert_eq!(result.tridiagonal.squares, [ratio(1, 2)]);
}

#[test]
fn indefinite_metric_is_refused_with_its_block() {
    let problem = Problem {
        matrix: matrix(&integer_rows(&[&[2, -1], &[-1, 1]])),
        metric: Some(matrix(&integer_rows(&[&[1, 2], &[2, 1]]))),
    };
    let error = spectrum(&problem, &Limits::default(), &mut Unattended).map(|_| ());
    assert_eq!(error, Err(ExactError::MetricNotPositive { leading: 2 }));
    let error = inertia(&problem, &RBig::ZERO, &Limits::default(), &mut Unattended);
    assert_eq!(error, Err(ExactError::MetricNotPositive { leading: 2 }));
}

#[test]
fn decimals_and_fractions_scale_exactly() {
    // 0.1·[[2, 1], [1, 2]]: eigenvalues 1/10 and 3/10, not nearby doubles.
    let tenth = |digits| ExactReal::Decimal {
        digits,
        exponent: -1,
    };
    let cells = vec![tenth(2), tenth(1), tenth(1), tenth(2)];
    let problem = Problem {
        matrix: ExactMatrix::new(2, cells, None),
        metric: None,
    };
    expect_forms(&spectrum_of(&problem), &[("1/10", 1), ("3/10", 1)]);
}

#[test]
fn limits_and_cancel_end_the_work() {
    let problem = real(&[&[4, 1, 2], &[1, 3, 0], &[2, 0, 1]]);
    let run = |limits: Limits, control: &mut dyn Control| {
        spectrum(&problem, &limits, control).map(|_| ())
    };
    assert_eq!(
        run(
            Limits {
                order: 2,
                bits: 1000
            },
            &mut Unattended
        ),
        Err(ExactError::OrderTooLarge { order: 3, limit: 2 })
    );
    assert_eq!(
        run(Limits { order: 3, bits: 3 }, &mut Unattended),
        Err(ExactError::GrowthTooLarge { bits: 4, limit: 3 })
    );
    for after in 0..4 {
        assert_eq!(
            run(Limits::default(), &mut CancelAfter(after)),
            Err(ExactError::Cancelled)
        );
    }
}

#[test]
fn growth_is_reported() {
    let small = form_of(&real(&[&[4, 1], &[1, 3]])).largest_bits;
    let large = form_of(&real(&[&[40_000, 10_001], &[10_001, 30_007]])).largest_bits;
    assert!(small > 0 && large > small, "{small} bits, then {large}");
}

#[test]
fn counts_about_rational_points() {
    let form = form_of(&real(&[&[2, 0, 0], &[0, 2, 1], &[0, 1, 2]]));
    for (x, below, equal) in [(0, 0, 0), (1, 0, 1), (2, 1, 1), (3, 2, 1), (4, 3, 0)] {
        let expected = Counts {
            below,
            equal,
            above: 3 - below - equal,
        };
        assert_eq!(form.counts(&ratio(x, 1)), expected, "at {x}");
    }
}

#[test]
fn inertia_with_zero_diagonals() {
    let at = |problem: &Problem, sigma: RBig| {
        inertia(problem, &sigma, &Limits::default(), &mut Unattended).expect("inertia")
    };
    // Eigenvalues ±1 twice: every diagonal entry is zero.
    let swap = real(&[&[0, 1, 0, 0], &[1, 0, 0, 0], &[0, 0, 0, 1], &[0, 0, 1, 0]]);
    assert_eq!(
        at(&swap, RBig::ZERO),
        Inertia {
            negative: 2,
            zero: 0,
            positive: 2
        }
    );
    assert_eq!(
        at(&swap, RBig::ONE),
        Inertia {
            negative: 2,
            zero: 2,
            positive: 0
        }
    );
    // The imaginary swap takes the other congruence; the last row is null.
    let turn = hermitian(&[&[(0, 0)], &[(0, 1), (0, 0)], &[(0, 0), (0, 0), (0, 0)]]);
    assert_eq!(
        at(&turn, RBig::ZERO),
        Inertia {
            negative: 1,
            zero: 1,
            positive: 1
        }
    );
    let inside = count_between(
        &swap,
        &ratio(-1, 1),
        &RBig::ZERO,
        &Limits::default(),
        &mut Unattended,
    );
    assert_eq!(inside, Ok(0), "(−1, 0] leaves out the pair at −1");
}

#[test]
fn square_free_factors_rebuild_the_polynomial() {
    let poly = |c: &[i64]| Polynomial::new(c.iter().map(|&c| IBig::from(c)).collect());
    let (a, b, c) = (poly(&[-1, 1]), poly(&[-2, 0, 1]), poly(&[3, 1]));
    let product = a
        .product(&b)
        .product(&b)
        .product(&c)
        .product(&c)
        .product(&c);
    assert_eq!(product.square_free(), [(1, a), (2, b), (3, c)]);
}

#[test]
fn closed_forms_are_printed_by_one_rule() {
    let surd = |p: i64, q: i64, d: u64, r: u64| {
        ClosedForm::Surd {
            rational: IBig::from(p),
            factor: IBig::from(q),
            radicand: UBig::from(d),
            divisor: UBig::from(r),
        }
        .to_string()
    };
    assert_eq!(surd(3, 1, 5, 2), "(3 + √5)/2");
    assert_eq!(surd(-3, -2, 5, 1), "−3 − 2√5");
    assert_eq!(surd(0, -1, 2, 1), "−√2");
    assert_eq!(surd(0, 2, 3, 5), "2√3/5");
    assert_eq!(ClosedForm::Rational(ratio(-3, 2)).to_string(), "−3/2");
}

#[test]
fn refinement_reaches_five_hundred_digits() {
    // √2 from [[0, 1, 0], [1, 0, 1], [0, 1, 0]]: the square of the ends must
    // enclose 2, and the width is what was asked for.
    let mut result = spectrum_of(&real(&[&[0, 1, 0], &[1, 0, 1], &[0, 1, 0]]));
    let bits = 1_670;
    result.refine(bits);
    let root = &result.eigenvalues[2].root;
    let (low, high) = (root.lower(), root.upper());
    assert!(&low * &low <= ratio(2, 1) && ratio(2, 1) <= &high * &high);
    let width = RBig::from_parts(IBig::ONE, UBig::ONE << 1_670);
    assert!(&high - &low <= width, "width {}", &high - &low);
    assert!(low > RBig::ZERO);
}

#[test]
fn order_eight_with_three_digits_stays_small() {
    // A measure of work that does not depend on the machine: bits of the
    // largest integer. n·(n−1)·(b + log₂n) bits for the unreduced vectors with
    // b = 10 is 728; products of two norms of them cost about six times that.
    let order = 8;
    let mut state = 12_345u64;
    let mut rows = vec![vec![RBig::ZERO; order]; order];
    for i in 0..order {
        for j in 0..=i {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1);
            let a = (state >> 33) as i64 % 1_999 - 999;
            rows[i][j] = ratio(a, 1);
            rows[j][i] = ratio(a, 1);
        }
    }
    let result = spectrum_of(&Problem {
        matrix: matrix(&rows),
        metric: None,
    });
    assert_eq!(result.eigenvalues.len(), order);
    assert!(
        result.largest_bits() < 6_000,
        "{} bits",
        result.largest_bits()
    );
}
