//! Upper bounds on norms, in n² work, and the rounding constants of products.
//!
//! Notation: ‖·‖_F Frobenius, ‖·‖₁ largest column sum, ‖·‖_∞ largest row sum of
//! moduli; u = 2^−53; γₖ as in [`crate::num::upper`].
//!
//! ‖A‖₂ ≤ min(‖A‖_F, √(‖A‖₁‖A‖_∞)) (Higham 2002, section 6.2). The same two
//! numbers bound the norm of |A|, the matrix of moduli, so one bound serves
//! both in the rounding analysis.

use nalgebra::DMatrix;

use crate::matrix::kernels::DEPTH;
use crate::matrix::passes::{column, column_sums, complex_column_sums, square_sum};
use crate::matrix::Dense;
use crate::num::upper::{bound_square_sum, gamma, square_sum_up, stretched};
use crate::num::Upper;

/// Bounds on the norms of a matrix.
#[derive(Clone, Debug)]
pub(super) struct Norms {
    /// ≥ ‖A‖_F.
    pub frobenius: Upper,
    /// ≥ ‖A‖₂ and ≥ ‖ |A| ‖₂.
    pub spectral: Upper,
    /// ≥ the 2-norm of each column.
    pub columns: Vec<Upper>,
}

impl Norms {
    /// Bounds for a matrix of any shape.
    pub fn of(matrix: &Dense) -> Self {
        let (rows, cols) = (matrix.rows(), matrix.cols());
        let mut columns = Vec::with_capacity(cols);
        let mut largest_column = Upper::ZERO;
        let mut row_sums = vec![0.0; rows];
        let mut is_zero = true;
        for k in 0..cols {
            let re = column(&matrix.re, k);
            let (sums, parts) = match &matrix.im {
                None => (column_sums(re, &mut row_sums), 1),
                Some(im) => (complex_column_sums(re, column(im, k), &mut row_sums), 2),
            };
            is_zero &= sums.is_zero;
            columns.push(bound_square_sum(sums.squares, parts * rows, sums.is_zero).sqrt());
            largest_column = largest_column.most(bound_moduli(sums.moduli, rows, sums.is_zero));
        }
        let largest_row = row_sums.iter().fold(Upper::ZERO, |most, &sum| {
            most.most(bound_moduli(sum, cols, is_zero))
        });
        let frobenius = square_sum_up(columns.iter().map(|norm| norm.get())).sqrt();
        let spectral = frobenius.least(largest_column.times(largest_row).sqrt());
        Self {
            frobenius,
            spectral,
            columns,
        }
    }
}

/// Bounds on the 2-norm of each column, and on the Frobenius norm: one pass,
/// where the rest of [`Norms`] is not needed.
pub(super) fn column_norms(matrix: &Dense) -> (Vec<Upper>, Upper) {
    let columns: Vec<Upper> = (0..matrix.cols()).map(|k| column_norm(matrix, k)).collect();
    let frobenius = square_sum_up(columns.iter().map(|norm| norm.get())).sqrt();
    (columns, frobenius)
}

/// ≥ the 2-norm of column k.
pub(super) fn column_norm(matrix: &Dense, k: usize) -> Upper {
    let re = column_square(&matrix.re, k);
    match &matrix.im {
        None => re.sqrt(),
        Some(im) => re.plus(column_square(im, k)).sqrt(),
    }
}

/// A bound on the sum of squares of column k of a plane.
fn column_square(plane: &DMatrix<f64>, k: usize) -> Upper {
    let (sum, is_zero) = square_sum(column(plane, k));
    bound_square_sum(sum, plane.nrows(), is_zero)
}

/// A bound on a sum of `count` moduli from its computed value: `count` additions
/// and the two roundings of each modulus, and 2^−537 that underflow may take
/// from one.
fn bound_moduli(computed: f64, count: usize, is_zero: bool) -> Upper {
    if is_zero {
        return Upper::ZERO;
    }
    let lost = Upper::of(count as f64).times(Upper::of(LOST_OF_A_MODULUS));
    stretched(Upper::of(computed), count + 2).plus(lost)
}

/// 2^−537.
const LOST_OF_A_MODULUS: f64 = f64::from_bits((1023 - 537) << 52);

/// A double not below √(re² + im²).
pub(super) fn modulus_up(re: f64, im: f64) -> f64 {
    if re == 0.0 {
        return im.abs();
    }
    if im == 0.0 {
        return re.abs();
    }
    let squares = (re * re + im * im).next_up().next_up();
    // Two squares below the normal range may have lost 2^−1074 each.
    (squares + f64::MIN_POSITIVE).next_up().sqrt().next_up()
}

/// Constants of one product with inner length n:
/// ‖fl(AB)ₖ − (AB)ₖ‖₂ ≤ `factor` · ‖ |A||B|ₖ ‖₂ + `underflow` for each column.
#[derive(Clone, Copy, Debug)]
pub(super) struct Rounding {
    /// γ of the product: see [`Rounding::new`].
    pub factor: Upper,
    /// Bound on what underflow loses in a column.
    pub underflow: Upper,
}

impl Rounding {
    /// For inner length `inner` and columns of `rows` entries. A real entry is a
    /// sum of n products taken in slices ([`DEPTH`]): γ_{n + slices}. Each part
    /// of a complex entry is a sum of 2n products, Σ|aᵣ||bᵣ| + |aᵢ||bᵢ| ≤ Σ|a||b|,
    /// and there are two parts: √2 · γ_{2(n + slices)}. A product below the
    /// normal range errs by 2^−1075 at most; 2^−1074 for each term is counted.
    pub fn new(inner: usize, rows: usize, complex: bool) -> Self {
        let terms = inner + inner.div_ceil(DEPTH) + 1;
        let (factor, parts) = if complex {
            (
                gamma(2 * terms).times(Upper::of(std::f64::consts::SQRT_2.next_up())),
                4,
            )
        } else {
            (gamma(terms), 1)
        };
        let lost = (parts * inner * rows.max(1)) as f64 * f64::from_bits(1);
        Self {
            factor,
            underflow: Upper::of(lost),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::DMatrix;

    #[test]
    fn norms_bound_known_matrices() {
        // ‖ones(3)‖₂ = 3; ‖[[0, i], [−i, 0]]‖₂ = 1.
        let ones = Norms::of(&Dense::real(DMatrix::from_element(3, 3, 1.0)));
        assert!(
            ones.spectral.get() >= 3.0 && ones.spectral.get() < 3.0 + 1e-12,
            "{ones:?}"
        );
        let zero = DMatrix::zeros(2, 2);
        let im = DMatrix::from_row_slice(2, 2, &[0.0, 1.0, -1.0, 0.0]);
        let rotation = Norms::of(&Dense::complex(zero, im));
        assert!(
            rotation.spectral.get() >= 1.0 && rotation.spectral.get() < 1.0 + 1e-12,
            "{rotation:?}"
        );
    }

    #[test]
    fn an_exact_zero_has_norm_zero_and_nan_has_none() {
        assert_eq!(
            Norms::of(&Dense::real(DMatrix::zeros(4, 4))).spectral,
            Upper::ZERO
        );
        let poisoned = Norms::of(&Dense::real(DMatrix::from_element(2, 2, f64::NAN)));
        assert!(!poisoned.spectral.is_known(), "{poisoned:?}");
    }

    #[test]
    fn moduli_are_not_below() {
        for (re, im) in [
            (3.0, 4.0),
            (1e-200, 1e-200),
            (5e-324, 5e-324),
            (1.0, 1e-300),
        ] {
            let bound = modulus_up(re, im);
            assert!(
                bound >= f64::max(re, im) && bound >= re / 2.0 + im / 2.0,
                "{re:e} {im:e}: {bound:e}"
            );
        }
        assert!(modulus_up(3.0, 4.0) < 5.0 + 1e-14);
    }
}
