//! Why an iteration ended early.

use std::fmt;

/// Why the iteration did not finish. What was recorded up to then stays with
/// the recorder.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum IterateError {
    /// The cap on sweeps was reached.
    NotConverged {
        /// First row of the active block, from 0.
        first: usize,
        /// Last row of it.
        last: usize,
        /// Sweeps done.
        sweeps: usize,
    },
    /// T has an entry that is not finite.
    NotFinite {
        /// Row, from 0.
        row: usize,
    },
    /// Cancelled by the caller.
    Cancelled {
        /// Sweeps done.
        sweeps: usize,
    },
}

impl fmt::Display for IterateError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NotConverged {
                first,
                last,
                sweeps,
            } => write!(
                f,
                "The iteration did not settle rows {} to {} within {sweeps} sweeps. The ledger \
                 holds what was done; solve the matrix in another order of its rows.",
                first + 1,
                last + 1
            ),
            Self::NotFinite { row } => write!(
                f,
                "Row {} of the tridiagonal form is not finite; scale the problem so that its \
                 largest entry is near 1.",
                row + 1
            ),
            Self::Cancelled { sweeps } => {
                write!(f, "Cancelled during the iteration, after {sweeps} sweeps.")
            }
        }
    }
}

impl std::error::Error for IterateError {}
