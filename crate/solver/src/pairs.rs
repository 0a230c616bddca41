//! Approximate eigenpairs from a reduction and its iteration. They carry no
//! bound: only `prove` can give one.
//!
//! Notation: T = Z Λ Zᵀ the tridiagonal form, X = L⁻ᴴ Q D Z the vectors wanted
//! (Q the reflectors, D the phases, L the metric's factor).
//!
//! *Phase convention.* Of each vector, the component of largest modulus is real
//! and positive; among components whose moduli differ by less than one part in
//! 2²⁰ (a tie, up to rounding) the first one counts. Its imaginary part is
//! exactly zero.

mod back;
mod convention;
mod judge;
mod rotations;
mod turned;
mod twisted;

#[cfg(test)]
mod tests;

use crate::control::{Control, Flow, Stage};
use crate::iterate::Iteration;
use crate::matrix::Dense;
use crate::reduce::{solve_adjoint, Reduction};
use std::fmt;

pub(crate) use turned::{Basis, LARGEST as LARGEST_TURNED};

/// Approximate eigenpairs of the *scaled* problem (see
/// [`crate::rounded::Rounded`]); λ = value · 2^`scale`.
#[derive(Clone, Debug)]
pub struct Approximation {
    /// Approximate eigenvalues of the scaled problem, ascending; length n.
    pub values: Vec<f64>,
    /// Columns are the approximate vectors, in the order of `values`; n × n.
    /// Standard problem: unit 2-norm. Pair: unit M-norm for the scaled metric.
    pub vectors: Dense,
    /// λ of the typed problem is value · 2^scale
    /// (scale = matrix_scale − metric_scale).
    pub scale: i32,
}

/// Why there are no vectors.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PairsError {
    /// The iteration belongs to a matrix of another order.
    Mismatch {
        /// Rows of the reduction.
        reduction: usize,
        /// Values of the iteration.
        iteration: usize,
    },
    /// Cancelled by the caller.
    Cancelled,
}

impl fmt::Display for PairsError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Mismatch {
                reduction,
                iteration,
            } => write!(
                f,
                "The iteration has {iteration} values but the reduction {reduction} rows; give \
                 the iteration of this reduction."
            ),
            Self::Cancelled => write!(f, "Cancelled while the vectors were computed."),
        }
    }
}

impl std::error::Error for PairsError {}

/// How the vectors of the tridiagonal form are found.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Road {
    /// Twisted factorisations, O(n²) where values are apart; the result is
    /// checked, and the rotations take over when it does not pass.
    #[default]
    Checked,
    /// Accumulation of the recorded rotations, about 5·n³ operations.
    Rotations,
}

/// Eigenpairs, ascending, with vectors in the stated phase.
///
/// # Errors
/// [`PairsError`]. Cost: back-transformation 2·n³ operations (8·n³ complex),
/// and n³ (4·n³) more for a pair, besides the vectors of T.
pub fn pairs(
    reduction: &Reduction,
    iteration: &Iteration,
    road: Road,
    control: &mut dyn Control,
) -> Result<Approximation, PairsError> {
    let order = reduction.order();
    if iteration.values.len() != order {
        return Err(PairsError::Mismatch {
            reduction: order,
            iteration: iteration.values.len(),
        });
    }
    let ascending = ascending(&iteration.values);
    heard(control, 0.0)?;
    let basis = match road {
        Road::Checked => twisted::vectors(&reduction.tridiagonal, iteration, &ascending).ok(),
        Road::Rotations => None,
    };
    let basis =
        basis.unwrap_or_else(|| rotations::vectors(&reduction.tridiagonal, iteration, &ascending));
    heard(control, 0.5)?;
    let vectors = back::transform(reduction, basis);
    finish(reduction, iteration, &ascending, vectors, control)
}

/// Eigenpairs from a basis that was turned by the iteration's own rotations.
///
/// # Errors
/// [`PairsError::Cancelled`]. Cost: O(n²), and n³ (4·n³ complex) for a pair.
pub(crate) fn turned_pairs(
    reduction: &Reduction,
    iteration: &Iteration,
    basis: Basis,
    control: &mut dyn Control,
) -> Result<Approximation, PairsError> {
    heard(control, 0.0)?;
    let ascending = ascending(&iteration.values);
    let vectors = basis.into_vectors(&ascending);
    finish(reduction, iteration, &ascending, vectors, control)
}

/// The metric's factor taken off Q D Z, and the phases fixed.
fn finish(
    reduction: &Reduction,
    iteration: &Iteration,
    ascending: &[usize],
    mut vectors: Dense,
    control: &mut dyn Control,
) -> Result<Approximation, PairsError> {
    if let Some(factor) = &reduction.factor {
        solve_adjoint(factor, &mut vectors);
    }
    convention::fix_phases(&mut vectors);
    heard(control, 1.0)?;
    Ok(Approximation {
        values: ascending.iter().map(|at| iteration.values[*at]).collect(),
        vectors,
        scale: reduction.scale,
    })
}

fn heard(control: &mut dyn Control, done: f64) -> Result<(), PairsError> {
    match control.progress(Stage::Pairs, done) {
        Flow::Cancel => Err(PairsError::Cancelled),
        Flow::Continue => Ok(()),
    }
}

/// Positions of the values in ascending order; equal ones keep their order.
fn ascending(values: &[f64]) -> Vec<usize> {
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_by(|a, b| values[*a].total_cmp(&values[*b]));
    order
}
