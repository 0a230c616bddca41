//! The three numerical stages in a row: reduce, iterate, pairs.

use crate::control::Control;
use crate::iterate::{iterate, iterate_turning, IterateError, Iteration, Limits};
use crate::ledger::Recorder;
use crate::pairs::{pairs, turned_pairs, Approximation, Basis, PairsError, Road, LARGEST_TURNED};
use crate::reduce::{reduce, ReduceError, Reduction};
use crate::rounded::Rounded;
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
    let limits = Limits::default();
    if reduction.order() <= LARGEST_TURNED {
        let mut basis = Basis::of(&reduction);
        let iteration = iterate_turning(
            &reduction.tridiagonal,
            limits,
            recorder,
            control,
            &mut |column, rotation| basis.turn(column, rotation),
        )
        .map_err(SolveError::Iterate)?;
        let approximation =
            turned_pairs(&reduction, &iteration, basis, control).map_err(SolveError::Pairs)?;
        return Ok(Solution {
            reduction,
            iteration,
            approximation,
        });
    }
    let iteration =
        iterate(&reduction.tridiagonal, limits, recorder, control).map_err(SolveError::Iterate)?;
    let approximation =
        pairs(&reduction, &iteration, Road::Checked, control).map_err(SolveError::Pairs)?;
    Ok(Solution {
        reduction,
        iteration,
        approximation,
    })
}

#[cfg(test)]
pub(crate) mod cases;
#[cfg(test)]
mod operations;
#[cfg(test)]
mod tests;
