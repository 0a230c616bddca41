//! The problem with its denominators cleared.
//!
//! Notation: A = Ã / a, M = M̃ / m with integer Ã, M̃; then Ã x = μ M̃ x with
//! λ = μ · m / a.

use dashu_base::Gcd;
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::gauss::Gauss;
use super::limits::{ExactError, Meter};
use crate::matrix::ExactMatrix;
use crate::problem::Problem;

/// Integer pair with the factor that leads back to the typed problem.
pub(super) struct Integers {
    pub(super) order: usize,
    /// Ã, row-major.
    pub(super) matrix: Vec<Gauss>,
    /// M̃, row-major; `None` for the standard problem.
    pub(super) metric: Option<Vec<Gauss>>,
    /// λ = μ · unit.
    pub(super) unit: RBig,
}

/// Clears the denominators of a rational problem.
pub(super) fn integers(problem: &Problem, meter: &mut Meter<'_>) -> Result<Integers, ExactError> {
    let order = problem.matrix.order();
    let (matrix, matrix_unit) = cleared(&problem.matrix, false, meter)?;
    let (metric, metric_unit) = match &problem.metric {
        Some(metric) => {
            let (cells, unit) = cleared(metric, true, meter)?;
            (Some(cells), unit)
        }
        None => (None, UBig::ONE),
    };
    let unit = RBig::from_parts(IBig::from(metric_unit), matrix_unit);
    Ok(Integers {
        order,
        matrix,
        metric,
        unit,
    })
}

/// The integer cells of `matrix` times its least common denominator.
fn cleared(
    matrix: &ExactMatrix,
    in_metric: bool,
    meter: &mut Meter<'_>,
) -> Result<(Vec<Gauss>, UBig), ExactError> {
    let order = matrix.order();
    let mut cells = Vec::with_capacity(order * order);
    let mut common = UBig::ONE;
    for row in 0..order {
        for col in 0..order {
            let irrational = ExactError::Irrational {
                row,
                col,
                in_metric,
            };
            let re = matrix
                .re(row, col)
                .rational()
                .ok_or_else(|| irrational.clone())?;
            let im = matrix.im(row, col).rational().ok_or(irrational)?;
            for part in [&re, &im] {
                let denominator = part.denominator();
                if !denominator.is_one() {
                    let shared = (&common).gcd(denominator);
                    common *= denominator / shared;
                    meter.see(common.as_ibig())?;
                }
            }
            cells.push((re, im));
        }
    }
    let mut integers = Vec::with_capacity(cells.len());
    for (re, im) in cells {
        let value = Gauss {
            re: over(&re, &common),
            im: over(&im, &common),
        };
        meter.see_gauss(&value)?;
        integers.push(value);
    }
    Ok((integers, common))
}

/// r · common, where common is a multiple of r's denominator.
fn over(r: &RBig, common: &UBig) -> IBig {
    r.numerator() * IBig::from(common / r.denominator())
}

/// det(M̃) and det(M̃) · M̃⁻¹Ã by fraction-free Gauss–Jordan elimination
/// (Bareiss 1968). Needs M̃ positive definite and proves it: every leading
/// determinant appears as a pivot.
pub(super) fn metric_quotient(
    matrix: &[Gauss],
    metric: &[Gauss],
    order: usize,
    meter: &mut Meter<'_>,
) -> Result<(IBig, Vec<Gauss>), ExactError> {
    let mut left = metric.to_vec();
    let mut right = matrix.to_vec();
    let mut previous = IBig::ONE;
    for k in 0..order {
        let pivot = left[k * order + k].re.clone();
        if pivot <= IBig::ZERO {
            return Err(ExactError::MetricNotPositive { leading: k + 1 });
        }
        for row in (0..order).filter(|&row| row != k) {
            let factor = left[row * order + k].clone();
            for cells in [&mut left, &mut right] {
                for col in 0..order {
                    let value = cells[row * order + col]
                        .scaled(&pivot)
                        .minus(&factor.times(&cells[k * order + col]))
                        .divided(&previous);
                    meter.see_gauss(&value)?;
                    cells[row * order + col] = value;
                }
            }
        }
        previous = pivot;
        meter.progress(0.3 * (k + 1) as f64 / order as f64)?;
    }
    Ok((previous, right))
}
