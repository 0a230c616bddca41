use super::cases;
use super::*;
use crate::control::Unattended;
use crate::ledger::{Ledger, Silent};
use crate::matrix::kernels::{adjoint_product, product};
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
