//! What the stages start from: the matrix and the metric in doubles, scaled.

use crate::matrix::norms::{largest, power_of_two};
use crate::matrix::Dense;

/// The problem in doubles: each entry of 2^−scale · A, rounded to nearest.
#[derive(Clone, Debug)]
pub struct Rounded {
    /// A · 2^−matrix_scale, to nearest, full (both triangles).
    pub matrix: Dense,
    /// Power of two taken out of A.
    pub matrix_scale: i32,
    /// M · 2^−metric_scale, to nearest.
    pub metric: Option<Dense>,
    /// Power of two taken out of M.
    pub metric_scale: i32,
}

impl Rounded {
    /// A problem given in doubles, scaled by powers of two so that the largest
    /// part of an entry lies in [1/2, 1). Entries more than 2⁻¹⁰²² below it may
    /// lose bits to underflow.
    pub fn from_doubles(matrix: Dense, metric: Option<Dense>) -> Self {
        let (matrix, matrix_scale) = scaled(matrix);
        let (metric, metric_scale) = match metric.map(scaled) {
            Some((metric, scale)) => (Some(metric), scale),
            None => (None, 0),
        };
        Self {
            matrix,
            matrix_scale,
            metric,
            metric_scale,
        }
    }
}

fn scaled(mut matrix: Dense) -> (Dense, i32) {
    let planes = [Some(&matrix.re), matrix.im.as_ref()];
    let largest = largest(
        planes
            .into_iter()
            .flatten()
            .flat_map(|plane| plane.as_slice()),
    );
    if largest == 0.0 || !largest.is_finite() {
        return (matrix, 0);
    }
    let scale = exponent(largest);
    // In two halves: 2^scale itself may lie outside the range of doubles.
    let (first, second) = (
        power_of_two(-scale / 2),
        power_of_two(-scale - (-scale / 2)),
    );
    for plane in [Some(&mut matrix.re), matrix.im.as_mut()]
        .into_iter()
        .flatten()
    {
        plane
            .as_mut_slice()
            .iter_mut()
            .for_each(|x| *x = *x * first * second);
    }
    (matrix, scale)
}

/// s with 2^(s−1) ≤ x < 2^s, for positive finite x.
fn exponent(x: f64) -> i32 {
    let biased = |x: f64| (x.to_bits() >> 52) as i32;
    match biased(x) {
        0 => biased(x * power_of_two(100)) - 100 - 1022,
        normal => normal - 1022,
    }
}
