//! Residuals in plain double precision, each with an a-priori bound on the
//! rounding of its own computation. No proof of the eigenpairs: that is `prove`'s.
//!
//! Notation: R = A X − M X Λ with columns r, G = Xᴴ M X − I, B = A − Y Λ Yᴴ with
//! Y = M X (M = I without a metric), u = 2⁻⁵³, γₖ = ku/(1 − ku), p the terms summed
//! for an entry of a product, |fl(AB) − AB| ≤ γₚ|A||B| (see `matrix::kernels`).
//! All quantities are those of the scaled problem.

use crate::matrix::kernels::{adjoint_product, product, DEPTH};
use crate::matrix::norms::norm2;
use crate::matrix::passes::subtract_multiple;
use crate::matrix::Dense;
use crate::pairs::Approximation;
use crate::rounded::Rounded;

/// A norm as computed, and how far rounding may have moved it:
/// the exact norm, for the rounded problem and the given pairs, lies within
/// `rounding` of `approx_norm`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Measured {
    /// The norm in plain double.
    pub approx_norm: f64,
    /// A-priori bound on its error.
    pub rounding: f64,
}

/// Residuals of an approximation.
#[derive(Clone, Debug, PartialEq)]
pub struct Residuals {
    /// ‖A x − λ M x‖₂ of each pair.
    pub pairs: Vec<Measured>,
    /// Orthogonality defect ‖Xᴴ M X − I‖_F.
    pub orthogonality: Measured,
    /// Reconstruction defect ‖A − M X Λ Xᴴ M‖_F.
    pub reconstruction: Measured,
    /// ‖A‖_F, for scale.
    pub matrix_norm: f64,
}

/// Computes the residuals. Cost: three products, 6·n³ operations (24·n³
/// complex), one more for a pair.
///
/// # Panics
/// If the approximation's order is not the problem's.
pub fn residuals(rounded: &Rounded, approximation: &Approximation) -> Residuals {
    let (matrix, vectors) = (&rounded.matrix, &approximation.vectors);
    let values = &approximation.values;
    let order = matrix.rows();
    assert_eq!(
        (vectors.rows(), values.len()),
        (order, order),
        "orders of problem and pairs"
    );
    let weighted = match &rounded.metric {
        None => vectors.clone(),
        Some(metric) => product(metric, vectors),
    };
    let complex = [matrix, vectors, &weighted].iter().any(|x| x.is_complex());
    let terms = order.div_ceil(DEPTH) + if complex { 2 * order } else { order };
    let metric_norm = rounded.metric.as_ref().map(frobenius);
    // A product with M adds its own p terms to whatever it enters.
    let depth = |products: usize| match metric_norm {
        None => terms + 2,
        Some(_) => products * terms + 2,
    };
    let (matrix_norm, vectors_norm) = (frobenius(matrix), frobenius(vectors));
    let weight = metric_norm.unwrap_or(1.0);
    let largest = values
        .iter()
        .fold(0.0, |top: f64, x| if x.abs() > top { x.abs() } else { top });

    let mut residual = product(matrix, vectors);
    subtract_scaled(&mut residual, &weighted, values);
    let pairs = (0..order)
        .map(|col| {
            let norm = norm2(column(&residual, col));
            let size = norm2(column(vectors, col)) * (matrix_norm + values[col].abs() * weight);
            measured(norm, gamma(depth(2)) * size, order)
        })
        .collect();

    let mut gram = adjoint_product(vectors, &weighted);
    gram.re
        .iter_mut()
        .step_by(order + 1)
        .for_each(|entry| *entry -= 1.0);
    let size = vectors_norm * vectors_norm * weight + (order as f64).sqrt();
    let orthogonality = measured(frobenius(&gram), gamma(depth(2)) * size, order * order);

    let mut scaled = weighted.clone();
    for (col, value) in values.iter().enumerate() {
        for plane in planes_mut(&mut scaled) {
            plane.column_mut(col).scale_mut(*value);
        }
    }
    let adjoint = Dense {
        re: weighted.re.transpose(),
        im: weighted.im.as_ref().map(|im| -im.transpose()),
    };
    let mut defect = product(&scaled, &adjoint);
    defect.re -= &matrix.re;
    if let (Some(defect), Some(im)) = (&mut defect.im, &matrix.im) {
        *defect -= im;
    }
    let part = weight * vectors_norm;
    let size = matrix_norm + part * part * largest;
    let reconstruction = measured(frobenius(&defect), gamma(depth(3)) * size, order * order);

    Residuals {
        pairs,
        orthogonality,
        reconstruction,
        matrix_norm,
    }
}

/// A norm over `count` entries, each off by what `entries` bounds in norm.
fn measured(approx_norm: f64, entries: f64, count: usize) -> Measured {
    // Taking the norm costs count/2 + 2 roundings per part; the norms in the
    // bounds are themselves rounded, by far less than the 1 % added.
    let own = gamma(count + 4) * approx_norm;
    Measured {
        approx_norm,
        rounding: (entries + own) * 1.01 + f64::MIN_POSITIVE,
    }
}

/// γₖ, rounded upwards by more than its own rounding.
fn gamma(terms: usize) -> f64 {
    let share = terms as f64 * (f64::EPSILON / 2.0);
    share / (1.0 - share) * (1.0 + 8.0 * f64::EPSILON)
}

fn frobenius(matrix: &Dense) -> f64 {
    let im = matrix.im.iter().flat_map(|im| im.as_slice());
    norm2(matrix.re.as_slice().iter().chain(im))
}

fn column(matrix: &Dense, col: usize) -> impl Iterator<Item = &f64> + Clone {
    let range = col * matrix.rows()..(col + 1) * matrix.rows();
    let im = matrix
        .im
        .as_ref()
        .map_or(&[][..], |im| &im.as_slice()[range.clone()]);
    matrix.re.as_slice()[range].iter().chain(im)
}

fn planes_mut(matrix: &mut Dense) -> impl Iterator<Item = &mut nalgebra::DMatrix<f64>> {
    [Some(&mut matrix.re), matrix.im.as_mut()]
        .into_iter()
        .flatten()
}

/// R ← R − Y Λ.
fn subtract_scaled(residual: &mut Dense, weighted: &Dense, values: &[f64]) {
    let rows = weighted.rows();
    let subtract = |target: &mut nalgebra::DMatrix<f64>, source: &nalgebra::DMatrix<f64>| {
        let columns = source.as_slice().chunks_exact(rows.max(1));
        let targets = target.as_mut_slice().chunks_exact_mut(rows.max(1));
        for ((target, source), value) in targets.zip(columns).zip(values) {
            subtract_multiple(target, *value, source);
        }
    };
    subtract(&mut residual.re, &weighted.re);
    if let (Some(target), Some(source)) = (&mut residual.im, &weighted.im) {
        subtract(target, source);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::control::Unattended;
    use crate::ledger::Silent;
    use crate::solve::{cases, solve};
    use nalgebra::DMatrix;

    const UNIT: f64 = f64::EPSILON / 2.0;

    #[test]
    fn exact_pairs_of_small_integers_have_no_residual_and_wrong_ones_their_own() {
        // (1, 1) and (1, −1) over √2 are not doubles; scaled by 2 they are, and
        // the orthogonality defect is then exactly ‖2I − I‖.
        let matrix = cases::real(2, |i, j| if i == j { 2.0 } else { 1.0 });
        let vectors = Dense::real(DMatrix::from_row_slice(2, 2, &[1.0, 1.0, -1.0, 1.0]));
        let rounded = Rounded {
            matrix,
            matrix_scale: 0,
            metric: None,
            metric_scale: 0,
        };
        let mut approximation = Approximation {
            values: vec![1.0, 3.0],
            vectors,
            scale: 0,
        };
        let found = residuals(&rounded, &approximation);
        assert!(
            found.pairs.iter().all(|pair| pair.approx_norm == 0.0),
            "{found:?}"
        );
        assert_eq!(found.orthogonality.approx_norm, 2f64.sqrt(), "{found:?}");
        approximation.values[1] = 3.5;
        // (A − 3.5) (1, 1) = −0.5 (1, 1).
        let found = residuals(&rounded, &approximation);
        assert_eq!(found.pairs[1].approx_norm, 0.5 * 2f64.sqrt(), "{found:?}");
    }

    #[test]
    fn solved_problems_show_rounding_only() {
        for (complex, with_metric) in [(false, false), (true, false), (false, true), (true, true)] {
            let order = 23;
            let spectrum: Vec<f64> = (0..order).map(|k| 1.0 + (k % 5) as f64).collect();
            let metric = with_metric.then(|| cases::planted(&spectrum, complex, 4));
            let rounded = Rounded::from_doubles(cases::random(order, complex, 3), metric);
            let solution = solve(&rounded, &mut Silent, &mut Unattended).expect("definite");
            let found = residuals(&rounded, &solution.approximation);
            // κ(M) ≤ 5 enters a pair's errors, and ‖M‖_F ≤ 17 the bounds.
            let slack = 5.0 * 10.0 * order as f64 * UNIT;
            for (k, pair) in found.pairs.iter().enumerate() {
                assert!(
                    pair.approx_norm <= slack * found.matrix_norm * 5.0,
                    "pair {k}: {pair:?}"
                );
                assert!(
                    pair.rounding > 0.0 && pair.rounding < 1e-10,
                    "pair {k}: {pair:?}"
                );
            }
            assert!(
                found.orthogonality.approx_norm <= slack,
                "{:?}",
                found.orthogonality
            );
            assert!(
                found.orthogonality.rounding < 1e-10,
                "{:?}",
                found.orthogonality
            );
            let allowed = slack * found.matrix_norm * 5.0;
            assert!(
                found.reconstruction.approx_norm <= allowed,
                "{:?}",
                found.reconstruction
            );
        }
    }
}
