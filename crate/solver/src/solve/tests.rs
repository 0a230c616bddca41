use super::cases;
use super::*;
use crate::control::Unattended;
use crate::ledger::{Ledger, Silent};
use crate::matrix::kernels::{adjoint_product, product};
use crate::matrix::Dense;
use nalgebra::DMatrix;

const UNIT: f64 = f64::EPSILON / 2.0;

fn frobenius(x: &Dense) -> f64 {
    crate::matrix::norms::norm2(
        x.re.as_slice()
            .iter()
            .chain(x.im.iter().flat_map(|im| im.as_slice())),
    )
}

/// ‖A X − X Λ‖/(n u ‖A‖) and ‖Xᴴ X − I‖/(n u), Frobenius norms: with X
/// orthogonal to rounding the first is the backward error.
pub(crate) fn defects(matrix: &Dense, approximation: &Approximation) -> (f64, f64) {
    let order = matrix.rows();
    let x = &approximation.vectors;
    let mut residual = product(matrix, x);
    for col in 0..order {
        let value = approximation.values[col];
        for row in 0..order {
            residual.re[(row, col)] -= value * x.re[(row, col)];
        }
    }
    if let (Some(r_im), Some(x_im)) = (&mut residual.im, &x.im) {
        for col in 0..order {
            for row in 0..order {
                r_im[(row, col)] -= approximation.values[col] * x_im[(row, col)];
            }
        }
    }
    let mut gram = adjoint_product(x, x);
    gram.re -= DMatrix::identity(order, order);
    let unit = order as f64 * UNIT;
    let norm = frobenius(matrix);
    let backward = if norm == 0.0 {
        frobenius(&residual)
    } else {
        frobenius(&residual) / (unit * norm)
    };
    (backward, frobenius(&gram) / unit)
}

fn solved(matrix: &Dense, recorder: &mut dyn Recorder) -> (Rounded, Solution) {
    let rounded = Rounded::from_doubles(matrix.clone(), None);
    let solution =
        solve(&rounded, recorder, &mut Unattended).expect("the matrix is finite and Hermitian");
    (rounded, solution)
}

#[test]
fn every_hard_case_is_solved_to_rounding() {
    let mut worst = (0.0_f64, 0.0_f64);
    for (name, matrix) in cases::hard() {
        let (rounded, solution) = solved(&matrix, &mut Silent);
        let (backward, orthogonality) = defects(&rounded.matrix, &solution.approximation);
        assert!(backward < 10.0, "{name}: backward error {backward} n·u·‖A‖");
        assert!(
            orthogonality < 10.0,
            "{name}: orthogonality defect {orthogonality} n·u"
        );
        assert!(
            solution.approximation.values.is_sorted(),
            "{name}: values not ascending"
        );
        worst = (worst.0.max(backward), worst.1.max(orthogonality));
    }
    println!(
        "worst backward error {} n·u·‖A‖, orthogonality {} n·u",
        worst.0, worst.1
    );
}

#[test]
fn recording_does_not_change_a_bit() {
    for (name, matrix) in cases::hard() {
        let mut ledger = Ledger::new();
        let (_, silent) = solved(&matrix, &mut Silent);
        let (_, recorded) = solved(&matrix, &mut ledger);
        let bits = |x: &DMatrix<f64>| x.iter().map(|x| x.to_bits()).collect::<Vec<_>>();
        let values = |s: &Solution| {
            s.approximation
                .values
                .iter()
                .map(|x| x.to_bits())
                .collect::<Vec<_>>()
        };
        assert_eq!(values(&silent), values(&recorded), "{name}");
        assert_eq!(
            bits(&silent.approximation.vectors.re),
            bits(&recorded.approximation.vectors.re),
            "{name}"
        );
        assert_eq!(
            silent.approximation.vectors.im.as_ref().map(bits),
            recorded.approximation.vectors.im.as_ref().map(bits),
            "{name}"
        );
        assert!(!ledger.entries().is_empty(), "{name}");
    }
}

#[test]
fn both_roads_agree_and_the_fallback_stands_alone() {
    use crate::iterate::{iterate, Limits};
    use crate::pairs::{pairs, Road};
    use crate::reduce::reduce;
    for (name, matrix) in cases::hard() {
        let rounded = Rounded::from_doubles(matrix, None);
        let reduction = reduce(&rounded, &mut Silent, &mut Unattended).expect(&name);
        let iteration = iterate(
            &reduction.tridiagonal,
            Limits::default(),
            &mut Silent,
            &mut Unattended,
        )
        .expect(&name);
        let found = pairs(&reduction, &iteration, Road::Rotations, &mut Unattended).expect(&name);
        let (backward, orthogonality) = defects(&rounded.matrix, &found);
        assert!(backward < 10.0, "{name}: backward error {backward} n·u·‖A‖");
        assert!(
            orthogonality < 10.0,
            "{name}: orthogonality defect {orthogonality} n·u"
        );
    }
}

#[test]
fn pairs_with_a_metric_are_solved_to_rounding() {
    for (order, complex, seed) in [
        (1, false, 1),
        (2, true, 2),
        (9, false, 3),
        (24, true, 4),
        (50, false, 5),
    ] {
        let spectrum: Vec<f64> = (0..order).map(|k| 1.0 + (k % 7) as f64).collect();
        let metric = cases::planted(&spectrum, complex, seed);
        let matrix = cases::random(order, seed % 2 == 0, seed + 10);
        let rounded = Rounded::from_doubles(matrix, Some(metric));
        let solution = solve(&rounded, &mut Silent, &mut Unattended).expect("definite metric");
        let found = &solution.approximation;
        let m = rounded.metric.as_ref().expect("a pair");
        let mx = product(m, &found.vectors);
        let mut residual = product(&rounded.matrix, &found.vectors);
        let mut gram = adjoint_product(&found.vectors, &mx);
        gram.re -= DMatrix::identity(order, order);
        for (col, value) in found.values.iter().enumerate() {
            for row in 0..order {
                residual.re[(row, col)] -= value * mx.re[(row, col)];
                if let Some(im) = &mut residual.im {
                    im[(row, col)] -= value * mx.im.as_ref().map_or(0.0, |im| im[(row, col)]);
                }
            }
        }
        // κ(M) ≤ 7 here multiplies what a standard problem may show.
        let slack = 7.0 * 10.0 * order as f64 * UNIT;
        let scale = frobenius(&rounded.matrix) * frobenius(&found.vectors);
        assert!(
            frobenius(&residual) <= slack * scale,
            "order {order}: {}",
            frobenius(&residual)
        );
        assert!(
            frobenius(&gram) <= slack,
            "order {order}: {}",
            frobenius(&gram)
        );
    }
}

#[test]
fn an_indefinite_metric_is_refused_with_its_row() {
    let metric = cases::real(3, |i, j| if i == j && i < 2 { 1.0 } else { 0.0 });
    let rounded = Rounded::from_doubles(cases::random(3, false, 1), Some(metric));
    let error = solve(&rounded, &mut Silent, &mut Unattended).expect_err("singular metric");
    let SolveError::Reduce(ReduceError::Metric(error)) = error else {
        panic!("{error:?}")
    };
    assert_eq!((error.row, error.pivot), (2, 0.0));
}

#[test]
fn the_phase_convention_holds() {
    for complex in [false, true] {
        let (_, solution) = solved(&cases::random(21, complex, 8), &mut Silent);
        let vectors = &solution.approximation.vectors;
        for col in 0..21 {
            let modulus = |row: usize| {
                let im = vectors.im.as_ref().map_or(0.0, |im| im[(row, col)]);
                vectors.re[(row, col)].hypot(im)
            };
            let largest = (0..21).map(modulus).fold(0.0, f64::max);
            let first = (0..21)
                .find(|row| modulus(*row) >= largest * (1.0 - 1e-7))
                .expect("some");
            assert!(vectors.re[(first, col)] > 0.0, "column {col}, row {first}");
            assert_eq!(
                vectors.im.as_ref().map_or(0.0, |im| im[(first, col)]),
                0.0,
                "column {col}"
            );
        }
    }
    // (1, −1)/√2 ties: the first component is the positive one.
    let (_, solution) = solved(
        &cases::real(2, |i, j| if i == j { 2.0 } else { 1.0 }),
        &mut Silent,
    );
    assert!(solution.approximation.vectors.re[(0, 0)] > 0.0);
}

#[test]
fn published_values_are_met() {
    // Rosser's matrix: 0, 1000, 1000, 1020, ±10√10405, 510 ± 100√26; the
    // original paper's exact values, from memory.
    let root = |x: f64| x.sqrt();
    let expected = [
        -10.0 * root(10405.0),
        0.0,
        510.0 - 100.0 * root(26.0),
        1000.0,
        1000.0,
        510.0 + 100.0 * root(26.0),
        1020.0,
        10.0 * root(10405.0),
    ];
    let (rounded, solution) = solved(&cases::rosser(), &mut Silent);
    let unit = 2f64.powi(rounded.matrix_scale);
    for (value, expected) in solution.approximation.values.iter().zip(expected) {
        let slack = 10.0 * 8.0 * UNIT * 1021.0;
        assert!(
            (value * unit - expected).abs() <= slack,
            "{} against {expected}",
            value * unit
        );
    }
}

#[test]
fn a_stress_tensor_has_the_trigonometric_closed_form() {
    // Principal stresses by Cardano's angle, as in Smith, Comm. ACM 4 (1961).
    let stress = [
        [120.0, 35.0, -18.0],
        [35.0, -40.0, 22.0],
        [-18.0, 22.0, 75.0],
    ];
    let mean = (stress[0][0] + stress[1][1] + stress[2][2]) / 3.0;
    let deviator: DMatrix<f64> =
        DMatrix::from_fn(3, 3, |i, j| stress[i][j] - if i == j { mean } else { 0.0 });
    let p: f64 = (deviator.norm_squared() / 6.0_f64).sqrt();
    let angle: f64 = (deviator.determinant() / (2.0 * p * p * p)).acos() / 3.0;
    let third = 2.0 * std::f64::consts::PI / 3.0;
    let mut expected = [0.0, third, -third].map(|turn| mean + 2.0 * p * (angle + turn).cos());
    expected.sort_by(f64::total_cmp);
    let (rounded, solution) = solved(&cases::real(3, |i, j| stress[i][j]), &mut Silent);
    let unit = 2f64.powi(rounded.matrix_scale);
    for (value, expected) in solution.approximation.values.iter().zip(expected) {
        // The closed form itself loses a few digits in the arc cosine.
        assert!(
            (value * unit - expected).abs() < 1e-11 * 150.0,
            "{} {expected}",
            value * unit
        );
    }
}

#[test]
fn nalgebra_finds_the_same_values() {
    for order in [4, 17, 60] {
        let real = cases::random(order, false, 20);
        let complex = cases::random(order, true, 21);
        let joined = complex.re.zip_map(
            complex.im.as_ref().expect("complex"),
            nalgebra::Complex::new,
        );
        let theirs = [
            real.re.clone().symmetric_eigenvalues(),
            joined.symmetric_eigenvalues(),
        ];
        for (matrix, theirs) in [real, complex].iter().zip(theirs) {
            let (rounded, solution) = solved(matrix, &mut Silent);
            let unit = 2f64.powi(rounded.matrix_scale);
            let mut theirs: Vec<f64> = theirs.iter().copied().collect();
            theirs.sort_by(f64::total_cmp);
            // Both backward errors at their limit.
            let slack = 20.0 * order as f64 * UNIT * frobenius(matrix);
            for (value, other) in solution.approximation.values.iter().zip(theirs) {
                assert!(
                    (value * unit - other).abs() <= slack,
                    "{} against {other}",
                    value * unit
                );
            }
        }
    }
}

mod planted {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #![proptest_config(ProptestConfig { cases: 48, failure_persistence: None, ..ProptestConfig::default() })]

        /// Values planted on a grid with repeats and near-repeats are found to
        /// the accuracy of planting and solving together.
        #[test]
        fn spectra_are_recovered(
            grid in prop::collection::vec((-4_i32..5, 0_u8..3), 1..28),
            complex in any::<bool>(),
            exponent in -300_i32..300,
            seed in any::<u64>(),
        ) {
            let mut values: Vec<f64> =
                grid.iter().map(|(k, near)| f64::from(*k) + f64::from(*near) * 1e-12).collect();
            let unit = 2f64.powi(exponent);
            let mut matrix = cases::planted(&values, complex, seed);
            matrix.re *= unit;
            if let Some(im) = &mut matrix.im {
                *im *= unit;
            }
            let (rounded, solution) = solved(&matrix, &mut Silent);
            let (backward, orthogonality) = defects(&rounded.matrix, &solution.approximation);
            prop_assert!(backward < 10.0 && orthogonality < 10.0, "{backward} {orthogonality}");
            values.sort_by(f64::total_cmp);
            let scale = 2f64.powi(rounded.matrix_scale - exponent);
            let order = values.len() as f64;
            // Planting takes three similarities with their rounding, 4·n·u each.
            let slack = (10.0 + 12.0) * order * UNIT * (5.0 * order.sqrt());
            for (found, planted) in solution.approximation.values.iter().zip(&values) {
                prop_assert!((found * scale - planted).abs() <= slack, "{found} {planted} {slack:e}");
            }
        }
    }
}
