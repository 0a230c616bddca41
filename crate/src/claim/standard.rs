//! The matrix a reduction starts from, in intervals.
//!
//! Notation: M = LLᴴ; C = L⁻¹AL⁻ᴴ has the eigenvalues of the pair. Without a
//! metric C = A.

use super::evidence::entries;
use super::interval::{one, Complex, Precision};
use crate::matrix::ExactMatrix;
use crate::problem::Problem;

/// Why there is no factor.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum NoFactor {
    /// The leading block of this order is proven not to be positive definite.
    NotPositive(usize),
    /// Not decided at this precision.
    Unclear,
}

/// The lower triangular L with positive diagonal and LLᴴ = `matrix`, in
/// intervals, row-major.
pub(super) fn cholesky(matrix: &ExactMatrix, p: Precision) -> Result<Vec<Complex>, NoFactor> {
    let order = matrix.order();
    let cells = entries(matrix, p);
    let mut factor = vec![Complex::zero(); order * order];
    for col in 0..order {
        let mut square = cells[col * order + col].re.clone();
        for k in 0..col {
            square = p.sub(&square, &p.norm_squared(&factor[col * order + k]));
        }
        if square.upper <= dashu_int::IBig::ZERO {
            return Err(NoFactor::NotPositive(col + 1));
        }
        if square.lower <= dashu_int::IBig::ZERO {
            return Err(NoFactor::Unclear);
        }
        let pivot = p.sqrt(&square).ok_or(NoFactor::Unclear)?;
        let inverse = p.div(&one(), &pivot).ok_or(NoFactor::Unclear)?;
        factor[col * order + col].re = pivot;
        for row in col + 1..order {
            let mut value = cells[row * order + col].clone();
            for k in 0..col {
                let product = p.cmul(&factor[row * order + k], &factor[col * order + k].conj());
                value = p.csub(&value, &product);
            }
            factor[row * order + col] = p.scale(&value, &inverse);
        }
    }
    Ok(factor)
}

/// C in intervals, row-major; `None` when the precision does not suffice or
/// the metric has no factor.
pub(super) fn standard(problem: &Problem, p: Precision) -> Option<Vec<Complex>> {
    let order = problem.matrix.order();
    let cells = entries(&problem.matrix, p);
    let Some(metric) = &problem.metric else {
        return Some(cells);
    };
    let factor = cholesky(metric, p).ok()?;
    // L⁻¹A column by column, then the same from the right by conjugation.
    let half = solved(&factor, &cells, order, p)?;
    let turned = adjoint(&half, order);
    let whole = solved(&factor, &turned, order, p)?;
    Some(adjoint(&whole, order))
}

/// L⁻¹B.
fn solved(
    factor: &[Complex],
    right: &[Complex],
    order: usize,
    p: Precision,
) -> Option<Vec<Complex>> {
    let mut result = right.to_vec();
    for row in 0..order {
        let inverse = p.div(&one(), &factor[row * order + row].re)?;
        for col in 0..order {
            let mut value = result[row * order + col].clone();
            for k in 0..row {
                let product = p.cmul(&factor[row * order + k], &result[k * order + col]);
                value = p.csub(&value, &product);
            }
            result[row * order + col] = p.scale(&value, &inverse);
        }
    }
    Some(result)
}

/// Conjugate transpose.
fn adjoint(cells: &[Complex], order: usize) -> Vec<Complex> {
    (0..order * order)
        .map(|place| cells[(place % order) * order + place / order].conj())
        .collect()
}
