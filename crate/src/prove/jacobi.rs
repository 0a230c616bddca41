//! A small Hermitian eigenproblem in plain double, for clusters. What comes out
//! is checked by residual like any other approximation.
//!
//! Notation: H the matrix, Q the product of rotations, p < q the rotated rows.

use nalgebra::{Complex, DMatrix};

use crate::matrix::Dense;

/// Most sweeps over all pairs; convergence is quadratic after the first few.
const SWEEPS: usize = 12;

/// Approximate eigenvalues (ascending) and vectors (columns, in that order) of
/// a Hermitian matrix by cyclic Jacobi rotations (C. G. J. Jacobi 1846).
///
/// `budget` is the most rotations done. Nothing is guaranteed of the result.
pub(super) fn eigen(matrix: &Dense, budget: usize) -> (Vec<f64>, Dense) {
    let order = matrix.rows();
    let mut h = DMatrix::from_fn(order, order, |i, j| {
        Complex::new(
            matrix.re[(i, j)],
            matrix.im.as_ref().map_or(0.0, |im| im[(i, j)]),
        )
    });
    let mut vectors = DMatrix::<Complex<f64>>::identity(order, order);
    let mut left = budget;
    for _ in 0..SWEEPS {
        let mut rotated = false;
        for q in 1..order {
            for p in 0..q {
                if left > 0 && rotate(&mut h, &mut vectors, p, q) {
                    rotated = true;
                    left -= 1;
                }
            }
        }
        if !rotated {
            break;
        }
    }
    let mut places: Vec<usize> = (0..order).collect();
    places.sort_by(|&i, &j| h[(i, i)].re.total_cmp(&h[(j, j)].re));
    let values = places.iter().map(|&k| h[(k, k)].re).collect();
    let re = DMatrix::from_fn(order, order, |i, k| vectors[(i, places[k])].re);
    let im = matrix
        .is_complex()
        .then(|| DMatrix::from_fn(order, order, |i, k| vectors[(i, places[k])].im));
    (values, Dense { re, im })
}

/// Makes the entry (p, q) zero; false if it is negligible already.
fn rotate(
    h: &mut DMatrix<Complex<f64>>,
    vectors: &mut DMatrix<Complex<f64>>,
    p: usize,
    q: usize,
) -> bool {
    let (a, b, c) = (h[(p, p)].re, h[(q, q)].re, h[(p, q)]);
    let size = (c.re * c.re + c.im * c.im).sqrt();
    // The second test keeps exactly repeated values from turning for ever.
    if size == 0.0 || size <= f64::EPSILON * 0.25 * (a.abs() * b.abs()).sqrt() || !size.is_finite()
    {
        return false;
    }
    let theta = (b - a) / (2.0 * size);
    let t = 1.0 / (theta.abs() + (theta * theta + 1.0).sqrt());
    let t = if theta < 0.0 { -t } else { t };
    let cos = 1.0 / (t * t + 1.0).sqrt();
    // Column p turns into cos·p − sin·e^{−iφ}·q with c = |c|e^{iφ}.
    let sin = c.unscale(size).scale(t * cos);
    for k in 0..h.nrows() {
        let (x, y) = (h[(k, p)], h[(k, q)]);
        h[(k, p)] = x.scale(cos) - y * sin.conj();
        h[(k, q)] = x * sin + y.scale(cos);
        let (x, y) = (vectors[(k, p)], vectors[(k, q)]);
        vectors[(k, p)] = x.scale(cos) - y * sin.conj();
        vectors[(k, q)] = x * sin + y.scale(cos);
    }
    for k in 0..h.ncols() {
        let (x, y) = (h[(p, k)], h[(q, k)]);
        h[(p, k)] = x.scale(cos) - y * sin;
        h[(q, k)] = x * sin.conj() + y.scale(cos);
    }
    h[(p, q)] = Complex::new(0.0, 0.0);
    h[(q, p)] = Complex::new(0.0, 0.0);
    true
}
