//! Residuals in plain double precision, with an a-priori rounding bound.
//!
//! They concern the problem as rounded to doubles; the proof concerns it as
//! typed. Notation: A, M the rounded matrices (M = I without a metric), x and λ
//! an approximate pair, r = Ax − λMx, u = 2⁻⁵³, γₖ = ku/(1 − ku).
//!
//! The computed r is off by at most √2·γ_{2n+2}(‖A‖_F + |λ|‖M‖_F)‖x‖ in the
//! 2-norm: each real part of a complex product is a sum of 2n products, followed
//! by one product with λ and one difference (Higham, Accuracy and Stability of
//! Numerical Algorithms, sections 3.1 and 3.6, from memory). Real matrices need
//! half of it and get the same.

use nalgebra::DMatrix;

use crate::matrix::kernels::{adjoint_product, product};
use crate::matrix::norms::norm2;
use crate::matrix::Dense;
use crate::pairs::Approximation;
use crate::problem::Rounded;

/// 2⁻⁵³.
const UNIT: f64 = f64::EPSILON / 2.0;

/// Bounds on ‖Ax − λMx‖ in the units of the scaled problem, in the order of
/// the values. Cost: one n³ product, two with a metric.
pub fn residual_bounds(rounded: &Rounded, approximation: &Approximation) -> Vec<f64> {
    let order = approximation.values.len();
    let vectors = &approximation.vectors;
    let image = product(&rounded.matrix, vectors);
    let weighted = match &rounded.metric {
        Some(metric) => product(metric, vectors),
        None => vectors.clone(),
    };
    let matrix_norm = frobenius(&rounded.matrix);
    let metric_norm = rounded.metric.as_ref().map_or(1.0, frobenius);
    let count = (2 * order + 2) as f64 * UNIT;
    let gamma = std::f64::consts::SQRT_2 * count / (1.0 - count);
    // The norms are sums of at most n² squares, and some thirty operations
    // put them together; each rounds once.
    let inflation = 1.0 + 2.0 * ((order * order) as f64 + 32.0) * UNIT;
    (0..order)
        .map(|k| {
            let value = approximation.values[k];
            let parts = column_difference(&image, &weighted, k, value);
            let length = norm2(column(vectors, k).iter());
            let rounding = gamma * (matrix_norm + value.abs() * metric_norm) * length;
            (norm2(parts.iter()) + rounding) * inflation + f64::MIN_POSITIVE
        })
        .collect()
}

/// How good the whole set is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Quality {
    /// ‖A − XΛXᴴ‖/(n·u·‖A‖), Frobenius norms; `None` for a pair.
    pub backward: Option<f64>,
    /// ‖XᴴMX − I‖/(n·u), Frobenius norm.
    pub orthogonality: f64,
}

/// The quality in plain double precision, without a bound on its own rounding.
/// Cost: two n³ products, three with a metric.
pub fn quality(rounded: &Rounded, approximation: &Approximation) -> Quality {
    let order = approximation.values.len();
    let unit = order as f64 * UNIT;
    let vectors = &approximation.vectors;
    let gram = match &rounded.metric {
        Some(metric) => adjoint_product(vectors, &product(metric, vectors)),
        None => adjoint_product(vectors, vectors),
    };
    let mut defect = gram;
    for k in 0..order {
        defect.re[(k, k)] -= 1.0;
    }
    let backward = rounded.metric.is_none().then(|| {
        let mut weighted = vectors.clone();
        for (k, value) in approximation.values.iter().enumerate() {
            for plane in std::iter::once(&mut weighted.re).chain(weighted.im.as_mut()) {
                plane.column_mut(k).scale_mut(*value);
            }
        }
        let back = product(&weighted, &adjoint(vectors));
        let size = frobenius(&rounded.matrix);
        if size == 0.0 {
            return 0.0;
        }
        frobenius(&difference(&rounded.matrix, &back)) / (unit * size)
    });
    Quality {
        backward,
        orthogonality: frobenius(&defect) / unit,
    }
}

fn frobenius(matrix: &Dense) -> f64 {
    norm2(
        matrix
            .re
            .iter()
            .chain(matrix.im.iter().flat_map(DMatrix::iter)),
    )
}

fn column(matrix: &Dense, k: usize) -> Vec<f64> {
    let planes = std::iter::once(&matrix.re).chain(&matrix.im);
    planes
        .flat_map(|plane| plane.column(k).iter().copied().collect::<Vec<f64>>())
        .collect()
}

/// Parts of column k of a − value·b.
fn column_difference(a: &Dense, b: &Dense, k: usize, value: f64) -> Vec<f64> {
    let zero = DMatrix::zeros(0, 0);
    let mut parts: Vec<f64> =
        a.re.column(k)
            .iter()
            .zip(b.re.column(k).iter())
            .map(|(a, b)| a - value * b)
            .collect();
    if a.is_complex() || b.is_complex() {
        let (left, right) = (
            a.im.as_ref().unwrap_or(&zero),
            b.im.as_ref().unwrap_or(&zero),
        );
        for row in 0..a.rows() {
            let left = left.get((row, k)).copied().unwrap_or(0.0);
            let right = right.get((row, k)).copied().unwrap_or(0.0);
            parts.push(left - value * right);
        }
    }
    parts
}

fn adjoint(matrix: &Dense) -> Dense {
    Dense {
        re: matrix.re.transpose(),
        im: matrix.im.as_ref().map(|im| -im.transpose()),
    }
}

fn difference(a: &Dense, b: &Dense) -> Dense {
    let im = match (&a.im, &b.im) {
        (None, None) => None,
        (Some(im), None) => Some(im.clone()),
        (None, Some(im)) => Some(-im.clone()),
        (Some(left), Some(right)) => Some(left - right),
    };
    Dense {
        re: &a.re - &b.re,
        im,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::control::Unattended;
    use crate::ledger::Silent;
    use crate::prove::{prove, Level};
    use crate::report::working::tests::run_of_order;
    use crate::solve::solve;

    fn hermitian(order: usize) -> Dense {
        let re = DMatrix::from_fn(order, order, |i, j| {
            ((i * j + i + j) % 7) as f64 / 8.0 - 0.3
        });
        let im = DMatrix::from_fn(order, order, |i, j| (i as f64 - j as f64) / 16.0);
        Dense::complex(re, im)
    }

    #[test]
    fn bounds_are_near_rounding_level_for_good_pairs_and_grow_with_bad_ones() {
        let rounded = Rounded::from_doubles(hermitian(9), None);
        let solution = solve(&rounded, &mut Silent, &mut Unattended).expect("converges");
        let mut approximation = solution.approximation;
        let size = frobenius(&rounded.matrix);
        let good = residual_bounds(&rounded, &approximation);
        // The bound's own share is about √2·20·u·(‖A‖ + |λ|) ≤ 60·u·‖A‖, and a
        // backward stable solver adds a small multiple of n·u·‖A‖.
        assert!(
            good.iter().all(|bound| *bound < 300.0 * UNIT * size),
            "{good:?} for a norm of {size}"
        );
        approximation.values[3] += 1e-6;
        let bad = residual_bounds(&rounded, &approximation);
        assert!(bad[3] > 0.9e-6 && bad[2] == good[2], "{bad:?}");
    }

    #[test]
    fn an_eigenvalue_is_where_the_residual_says() {
        let mut run = run_of_order(8);
        let solution = run.outcome.as_ref().expect("converges");
        let proof = prove(
            &run.problem,
            &solution.approximation,
            Level::Tight,
            &mut Unattended,
        );
        let bounds = residual_bounds(&run.rounded, &solution.approximation);
        let scale = run.scale();
        for (k, bound) in bounds.iter().enumerate() {
            let value = crate::report::decimal::exact(solution.approximation.values[k], scale)
                .expect("finite");
            // Vectors are of unit length to within rounding: twice the bound is ample.
            let reach = crate::report::decimal::exact(2.0 * bound, scale).expect("finite");
            let (low, high) = (&value - &reach, &value + &reach);
            let near = proof
                .enclosures()
                .iter()
                .any(|e| e.lower().to_rational() <= high && low <= e.upper().to_rational());
            assert!(near, "no eigenvalue within {bound} of value {k}");
        }
        run.proof = Some(proof);
        assert!(run.proven().is_some());
    }

    #[test]
    fn quality_is_of_order_one_and_tells_a_spoilt_vector() {
        let rounded = Rounded::from_doubles(hermitian(12), None);
        let mut approximation = solve(&rounded, &mut Silent, &mut Unattended)
            .expect("converges")
            .approximation;
        let good = quality(&rounded, &approximation);
        assert!(
            good.backward.expect("standard problem") < 10.0 && good.orthogonality < 10.0,
            "{good:?}"
        );
        approximation.vectors.re[(2, 5)] += 1e-3;
        let bad = quality(&rounded, &approximation);
        assert!(bad.orthogonality > 1e9, "{bad:?}");
    }
}
