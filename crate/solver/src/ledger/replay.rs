//! The state after any entry, computed again from the nearest checkpoint by the
//! run's own steps, hence bit for bit the run's.

use super::book::Stored;
use super::{Act, Ledger};
use crate::iterate;
use crate::matrix::Dense;
use crate::reduce::Tridiagonal;
use std::fmt;

/// The matrix as it stood after an entry, in the units of the scaled problem.
#[derive(Clone, Debug, PartialEq)]
pub enum State {
    /// During the reduction: the whole Hermitian matrix, tridiagonal in the
    /// columns done, zero where reflectors zeroed.
    Matrix(Dense),
    /// From the phases on.
    Tridiagonal(Tridiagonal),
}

/// Why there is no state to show.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ReplayError {
    /// The ledger has fewer entries.
    NoSuchEntry {
        /// Asked for, from 0.
        entry: usize,
        /// How many there are.
        entries: usize,
    },
    /// The entry concerns the input before the reduction took it over; the
    /// problem itself is the state.
    BeforeReduction {
        /// Asked for, from 0.
        entry: usize,
    },
}

impl fmt::Display for ReplayError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoSuchEntry { entry, entries } => {
                write!(
                    f,
                    "There is no entry {}; the ledger ends with {entries}.",
                    entry + 1
                )
            }
            Self::BeforeReduction { entry } => write!(
                f,
                "Entry {} concerns the input; look at the problem for the matrix as it was then.",
                entry + 1
            ),
        }
    }
}

impl std::error::Error for ReplayError {}

impl Ledger {
    /// The state after `entry` (from 0). The scaling entry of a problem without
    /// a metric shows the scaled matrix; that of a pair is before the reduction.
    ///
    /// # Errors
    /// [`ReplayError`]. Cost: at most a sixth of the reduction, or
    /// 16 sweeps of O(n).
    pub fn replay(&self, entry: usize) -> Result<State, ReplayError> {
        let entries = self.entries().len();
        if entry >= entries {
            return Err(ReplayError::NoSuchEntry { entry, entries });
        }
        let wanted = entry + 1;
        // The last stored state at or before the wanted number of entries.
        let before = self.states.partition_point(|(after, _)| *after <= wanted);
        let Some((after, stored)) = before.checked_sub(1).and_then(|at| self.states.get(at)) else {
            return Err(ReplayError::BeforeReduction { entry });
        };
        match stored {
            Stored::Reduction(checkpoint) => {
                let mut run = checkpoint.resume(self.pool());
                for _ in *after..wanted {
                    run.step();
                }
                Ok(State::Matrix(run.matrix()))
            }
            Stored::Iteration(band) => {
                let (diagonal, off_diagonal) = self.numbers(*band).split_at(self.order());
                let mut state = Tridiagonal {
                    diagonal: diagonal.to_vec(),
                    off_diagonal: off_diagonal.to_vec(),
                };
                for entry in &self.entries()[*after..wanted] {
                    match &entry.act {
                        Act::Sweep { step, .. } => iterate::repeat(&mut state, *step),
                        Act::Deflation(deflation) => state.off_diagonal[deflation.index] = 0.0,
                        _ => {}
                    }
                }
                Ok(State::Tridiagonal(state))
            }
        }
    }
}
