//! Cholesky factor of the metric and the standard form of a pair.
//!
//! Notation: M = L Lᴴ with L lower triangular and a positive diagonal;
//! A x = λ M x becomes C y = λ y with C = L⁻¹ A L⁻ᴴ and x = L⁻ᴴ y.
//! Source: Wilkinson and Reinsch, "Handbook for Automatic Computation II",
//! contribution II/10 (1971).

use crate::matrix::Dense;
use nalgebra::DMatrix;
use std::fmt;

/// The metric is not positive definite in doubles.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CholeskyError {
    /// Row (from 0) whose pivot failed.
    pub row: usize,
    /// What was left of the diagonal entry; not positive.
    pub pivot: f64,
}

impl fmt::Display for CholeskyError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(
            f,
            "The metric is not positive definite: what remains of its diagonal in row {} is {:e}. \
             Check the metric's entries up to that row, or remove a direction without mass.",
            self.row + 1,
            self.pivot
        )
    }
}

impl std::error::Error for CholeskyError {}

/// Column `col` of a plane.
fn column(plane: &DMatrix<f64>, col: usize) -> &[f64] {
    let rows = plane.nrows();
    &plane.as_slice()[col * rows..(col + 1) * rows]
}

fn column_mut(plane: &mut DMatrix<f64>, col: usize) -> &mut [f64] {
    let rows = plane.nrows();
    &mut plane.as_mut_slice()[col * rows..(col + 1) * rows]
}

/// L with M = L Lᴴ, from the lower triangle of M; n × n, zero above the diagonal.
///
/// # Errors
/// [`CholeskyError`] at the first pivot that is not positive.
/// Cost: n³/3 operations, four times that when complex.
pub fn cholesky(metric: &Dense) -> Result<Dense, CholeskyError> {
    let order = metric.rows();
    let mut factor = metric.clone();
    for col in 0..order {
        let pivot = factor.re[(col, col)];
        if pivot.is_nan() || pivot <= 0.0 {
            return Err(CholeskyError { row: col, pivot });
        }
        let root = pivot.sqrt();
        for plane in [Some(&mut factor.re), factor.im.as_mut()]
            .into_iter()
            .flatten()
        {
            let entries = column_mut(plane, col);
            entries[..col].fill(0.0);
            entries[col + 1..].iter_mut().for_each(|x| *x /= root);
        }
        factor.re[(col, col)] = root;
        if let Some(im) = &mut factor.im {
            im[(col, col)] = 0.0;
        }
        for later in col + 1..order {
            subtract_column(&mut factor, later, col);
        }
    }
    Ok(factor)
}

/// Column `later` −= column `col` · conj(entry (later, col)), rows from `later` on.
fn subtract_column(factor: &mut Dense, later: usize, col: usize) {
    let order = factor.rows();
    let c_re = factor.re[(later, col)];
    let split = later * order;
    let (done, rest) = factor.re.as_mut_slice().split_at_mut(split);
    let source_re = &done[col * order..(col + 1) * order][later..];
    let target_re = &mut rest[..order][later..];
    let Some(im) = &mut factor.im else {
        target_re
            .iter_mut()
            .zip(source_re)
            .for_each(|(t, s)| *t -= s * c_re);
        return;
    };
    let c_im = im[(later, col)];
    let (done, rest) = im.as_mut_slice().split_at_mut(split);
    let source_im = &done[col * order..(col + 1) * order][later..];
    let target_im = &mut rest[..order][later..];
    for k in 0..target_re.len() {
        target_re[k] -= source_re[k] * c_re + source_im[k] * c_im;
        target_im[k] -= source_im[k] * c_re - source_re[k] * c_im;
    }
}

/// B ← L⁻¹ B. Cost: n³ operations for n columns, four times that when complex.
fn solve_lower(factor: &Dense, b: &mut Dense) {
    let order = factor.rows();
    for col in 0..b.cols() {
        for k in 0..order {
            let pivot = factor.re[(k, k)];
            let x_re = b.re[(k, col)] / pivot;
            b.re[(k, col)] = x_re;
            let l_re = &column(&factor.re, k)[k + 1..];
            let below_re = &mut column_mut(&mut b.re, col)[k + 1..];
            let (Some(l_im), Some(b_im)) = (&factor.im, &mut b.im) else {
                below_re
                    .iter_mut()
                    .zip(l_re)
                    .for_each(|(t, l)| *t -= l * x_re);
                continue;
            };
            let x_im = b_im[(k, col)] / pivot;
            b_im[(k, col)] = x_im;
            let l_im = &column(l_im, k)[k + 1..];
            let below_im = &mut column_mut(b_im, col)[k + 1..];
            for i in 0..below_re.len() {
                below_re[i] -= l_re[i] * x_re - l_im[i] * x_im;
                below_im[i] -= l_re[i] * x_im + l_im[i] * x_re;
            }
        }
    }
}

/// X ← L⁻ᴴ X. Cost as for the forward substitution.
pub(crate) fn solve_adjoint(factor: &Dense, x: &mut Dense) {
    let order = factor.rows();
    for col in 0..x.cols() {
        for k in (0..order).rev() {
            let l_re = &column(&factor.re, k)[k + 1..];
            let below_re = &column(&x.re, col)[k + 1..];
            let pivot = factor.re[(k, k)];
            let (Some(l_im), Some(x_im)) = (&factor.im, &mut x.im) else {
                let sum = super::run::dot(l_re, below_re);
                let entry = (x.re[(k, col)] - sum) / pivot;
                x.re[(k, col)] = entry;
                continue;
            };
            let l_im = &column(l_im, k)[k + 1..];
            let below_im = &column(x_im, col)[k + 1..];
            use super::run::dot;
            let sum_re = dot(l_re, below_re) + dot(l_im, below_im);
            let sum_im = dot(l_re, below_im) - dot(l_im, below_re);
            x.re[(k, col)] = (x.re[(k, col)] - sum_re) / pivot;
            x_im[(k, col)] = (x_im[(k, col)] - sum_im) / pivot;
        }
    }
}

/// C = L⁻¹ A L⁻ᴴ; the lower triangle is what the reduction reads.
pub(crate) fn standard_form(matrix: &Dense, factor: &Dense) -> Dense {
    let (matrix, factor) = same_kind(matrix, factor);
    let mut half = matrix;
    solve_lower(&factor, &mut half);
    // (L⁻¹ A)ᴴ = A L⁻ᴴ, and L⁻¹ of that is C.
    let mut form = Dense {
        re: half.re.transpose(),
        im: half.im.map(|im| -im.transpose()),
    };
    solve_lower(&factor, &mut form);
    form
}

/// Both with an imaginary plane when either has one.
pub(crate) fn same_kind(a: &Dense, b: &Dense) -> (Dense, Dense) {
    let widen = |x: &Dense| {
        let im =
            x.im.clone()
                .unwrap_or_else(|| DMatrix::zeros(x.rows(), x.cols()));
        Dense::complex(x.re.clone(), im)
    };
    if a.is_complex() == b.is_complex() {
        (a.clone(), b.clone())
    } else {
        (widen(a), widen(b))
    }
}
