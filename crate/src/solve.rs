//! The three numerical stages in a row: reduce, iterate, pairs.

use crate::control::Control;
use crate::iterate::{iterate, IterateError, Iteration, Limits};
use crate::ledger::Recorder;
use crate::matrix::norms::{largest, power_of_two};
use crate::matrix::Dense;
use crate::pairs::{pairs, Approximation, PairsError, Road};
use crate::problem::Rounded;
use crate::reduce::{reduce, ReduceError, Reduction};
use std::fmt;

/// What the three stages hand over.
#[derive(Clone, Debug)]
pub struct Solution {
    /// The tridiagonal form.
    pub reduction: Reduction,
    /// The iteration on it.
    pub iteration: Iteration,
    /// The eigenpairs.
    pub approximation: Approximation,
}

/// Which stage failed, and why.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum SolveError {
    /// No reduction.
    Reduce(ReduceError),
    /// No convergence.
    Iterate(IterateError),
    /// No vectors.
    Pairs(PairsError),
}

impl fmt::Display for SolveError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Reduce(error) => error.fmt(f),
            Self::Iterate(error) => error.fmt(f),
            Self::Pairs(error) => error.fmt(f),
        }
    }
}

impl std::error::Error for SolveError {}

/// Approximate eigenpairs of a rounded problem.
///
/// # Errors
/// [`SolveError`]; what was recorded until then stays with the recorder.
pub fn solve(
    rounded: &Rounded,
    recorder: &mut dyn Recorder,
    control: &mut dyn Control,
) -> Result<Solution, SolveError> {
    let reduction = reduce(rounded, recorder, control).map_err(SolveError::Reduce)?;
    let iteration = iterate(&reduction.tridiagonal, Limits::default(), recorder, control)
        .map_err(SolveError::Iterate)?;
    let approximation =
        pairs(&reduction, &iteration, Road::Checked, control).map_err(SolveError::Pairs)?;
    Ok(Solution {
        reduction,
        iteration,
        approximation,
    })
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

#[cfg(test)]
pub(crate) mod cases;
#[cfg(test)]
mod tests;
