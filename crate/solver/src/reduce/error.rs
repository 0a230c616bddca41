//! Why a reduction was refused.

use super::CholeskyError;
use std::fmt;

/// Why there is no reduction.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ReduceError {
    /// An entry is infinite or not a number.
    NotFinite {
        /// Row, from 0.
        row: usize,
        /// Column, from 0.
        col: usize,
    },
    /// The largest entry is far from 1: the problem was not scaled.
    NotScaled {
        /// The largest modulus among real and imaginary parts.
        largest: f64,
    },
    /// Matrix and metric are not square of one order.
    Shape {
        /// Rows of the matrix.
        rows: usize,
        /// Columns of the matrix.
        cols: usize,
    },
    /// The metric is not positive definite.
    Metric(CholeskyError),
    /// Cancelled by the caller.
    Cancelled {
        /// Columns in tridiagonal form by then.
        column: usize,
    },
}

impl fmt::Display for ReduceError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NotFinite { row, col } => write!(
                f,
                "The entry in row {}, column {} is not a finite number; give it a finite value.",
                row + 1,
                col + 1
            ),
            Self::NotScaled { largest } => write!(
                f,
                "The largest entry is {largest:e} after scaling; scale the problem by a power of \
                 two so that it is near 1."
            ),
            Self::Shape { rows, cols } => write!(
                f,
                "The matrix has {rows} rows and {cols} columns; matrix and metric must be square \
                 of one order."
            ),
            Self::Metric(error) => error.fmt(f),
            Self::Cancelled { column } => {
                write!(
                    f,
                    "Cancelled during the reduction, at column {}.",
                    column + 1
                )
            }
        }
    }
}

impl std::error::Error for ReduceError {}
