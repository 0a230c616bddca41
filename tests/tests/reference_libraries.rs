//! Eigenvalues against two libraries of general linear algebra, nalgebra and
//! faer, on random Hermitian matrices.
//!
//! Tolerance: a backward stable method returns the eigenvalues of A + E with
//! ‖E‖ ≤ p(n)·u·‖A‖, and Weyl's inequality (H. Weyl, Math. Ann. 71, 1912) moves
//! each by at most ‖E‖. p(n) = 10·n is allowed to each of the two sides.

use eigenledger::control::Unattended;
use eigenledger::ledger::Silent;
use eigenledger::matrix::Dense;
use eigenledger::problem::Rounded;
use eigenledger::solve::solve;
use eigenledger_tests::{frobenius, random_hermitian, Field, UNIT_ROUNDOFF};
use nalgebra::{Complex, DMatrix, SymmetricEigen};

const ORDERS: [usize; 9] = [1, 2, 3, 4, 7, 16, 33, 64, 100];

fn our_values(matrix: &Dense) -> Vec<f64> {
    let rounded = Rounded::from_doubles(matrix.clone(), None);
    let solution = solve(&rounded, &mut Silent, &mut Unattended).expect("random matrices converge");
    let approximation = solution.approximation;
    // Entries in the unit square: the scale is a small power of two, and exact.
    let unit = f64::from(approximation.scale).exp2();
    approximation
        .values
        .iter()
        .map(|value| value * unit)
        .collect()
}

fn complex_entry(matrix: &Dense, row: usize, col: usize) -> Complex<f64> {
    let im = matrix.im.as_ref().map_or(0.0, |im| im[(row, col)]);
    Complex::new(matrix.re[(row, col)], im)
}

fn nalgebra_values(matrix: &Dense) -> Vec<f64> {
    let order = matrix.rows();
    let mut values: Vec<f64> = if matrix.is_complex() {
        let full = DMatrix::from_fn(order, order, |row, col| complex_entry(matrix, row, col));
        SymmetricEigen::new(full)
            .eigenvalues
            .iter()
            .copied()
            .collect()
    } else {
        SymmetricEigen::new(matrix.re.clone())
            .eigenvalues
            .iter()
            .copied()
            .collect()
    };
    values.sort_by(f64::total_cmp);
    values
}

fn faer_values(matrix: &Dense) -> Vec<f64> {
    let order = matrix.rows();
    let mut values = if matrix.is_complex() {
        faer::Mat::from_fn(order, order, |row, col| complex_entry(matrix, row, col))
            .self_adjoint_eigenvalues(faer::Side::Lower)
    } else {
        faer::Mat::from_fn(order, order, |row, col| matrix.re[(row, col)])
            .self_adjoint_eigenvalues(faer::Side::Lower)
    }
    .expect("random matrices converge");
    values.sort_by(f64::total_cmp);
    values
}

fn assert_agree(reference: fn(&Dense) -> Vec<f64>) {
    for field in [Field::Real, Field::Complex] {
        for order in ORDERS {
            for seed in 0..3 {
                let matrix = random_hermitian(order, field, seed + 1000 * order as u64);
                let tolerance = 20.0 * order as f64 * UNIT_ROUNDOFF * frobenius(&matrix);
                let (ours, theirs) = (our_values(&matrix), reference(&matrix));
                assert_eq!(ours.len(), theirs.len());
                for (index, (our, their)) in ours.iter().zip(&theirs).enumerate() {
                    assert!(
                        (our - their).abs() <= tolerance,
                        "{field:?}, order {order}, seed {seed}, value {index}: {our:e} against {their:e}, \
                         tolerance {tolerance:e}"
                    );
                }
            }
        }
    }
}

#[test]
fn eigenvalues_agree_with_nalgebra() {
    assert_agree(nalgebra_values);
}

#[test]
fn eigenvalues_agree_with_faer() {
    assert_agree(faer_values);
}
