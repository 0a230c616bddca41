//! Diagonal problems: their eigenvalues are typed.

use dashu_ratio::RBig;

use crate::matrix::ExactMatrix;
use crate::num::{Dyadic, Toward};
use crate::problem::Problem;

use super::enclosure::Theorem;
use super::spectrum::Spectrum;

/// The eigenvalues aᵢᵢ/mᵢᵢ of a diagonal problem with rational entries,
/// ascending; `None` for any other problem. The diagonal of the metric must be
/// positive.
fn typed_eigenvalues(problem: &Problem) -> Option<Vec<RBig>> {
    let metric = problem.metric.as_ref();
    if !is_diagonal(&problem.matrix) || metric.is_some_and(|metric| !is_diagonal(metric)) {
        return None;
    }
    let mut values = Vec::with_capacity(problem.matrix.order());
    for i in 0..problem.matrix.order() {
        let value = problem.matrix.re(i, i).rational()?;
        values.push(match metric {
            None => value,
            Some(metric) => value / metric.re(i, i).rational()?,
        });
    }
    values.sort();
    Some(values)
}

fn is_diagonal(matrix: &ExactMatrix) -> bool {
    let order = matrix.order();
    (0..order).all(|i| (0..i).all(|j| matrix.re(i, j).is_zero() && matrix.im(i, j).is_zero()))
}

/// Tightens the spectrum of a diagonal problem to its typed eigenvalues, exact
/// where they are binary fractions, else to `bits` significant bits. The frame
/// is in units of 2^`scale`.
pub(super) fn tighten(problem: &Problem, spectrum: &mut Spectrum, scale: i64, bits: u32) {
    let Some(values) = typed_eigenvalues(problem) else {
        return;
    };
    for (k, value) in values.iter().enumerate() {
        let near = Dyadic::from_rational(value, -i64::from(bits), Toward::Up);
        let size = spectrum.lower(k).magnitude().unwrap_or(0) + scale;
        let grid = near.magnitude().unwrap_or(size) - i64::from(bits);
        let lower = Dyadic::from_rational(value, grid, Toward::Down).scaled(-scale);
        let upper = Dyadic::from_rational(value, grid, Toward::Up).scaled(-scale);
        spectrum.tighten(k, lower, upper, Theorem::Diagonal);
    }
    spectrum.ascend();
}
