//! Why cells make no problem.

use super::{Asymmetry, MetricFault, Part};

/// Why cells make no problem.
#[derive(Clone, Debug, PartialEq)]
pub enum ProblemError {
    /// There are no cells.
    Empty(Part),
    /// Rows and columns differ in number.
    NotSquare {
        /// Which matrix.
        part: Part,
        /// Its rows.
        rows: usize,
        /// Its columns.
        cols: usize,
    },
    /// The order is beyond what is worked on here.
    TooLarge {
        /// Which matrix.
        part: Part,
        /// Its order.
        order: usize,
    },
    /// Mirrored cells disagree and no repair was chosen.
    NotHermitian(Asymmetry),
    /// Matrix and metric differ in order.
    OrderDiffers {
        /// Order of the matrix.
        matrix: usize,
        /// Order of the metric.
        metric: usize,
    },
    /// The metric is not positive definite.
    MetricNotPositive(MetricFault),
}

impl std::fmt::Display for ProblemError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::Empty(part) => write!(f, "The {} has no cells yet.", part.name()),
            Self::NotSquare { part, rows, cols } => write!(
                f,
                "The {} has {rows} {} and {cols} {}; eigenvalues need as many rows as columns.",
                part.name(),
                if *rows == 1 { "row" } else { "rows" },
                if *cols == 1 { "column" } else { "columns" },
            ),
            Self::TooLarge { part, order } => write!(
                f,
                "The {} has order {order}; orders up to {} are worked here.",
                part.name(),
                super::assemble::MAX_ORDER
            ),
            Self::NotHermitian(asymmetry) => asymmetry.fmt(f),
            Self::OrderDiffers { matrix, metric } => write!(
                f,
                "The matrix has order {matrix} but the metric has order {metric}; a pair needs \
                 the same order."
            ),
            Self::MetricNotPositive(fault) => fault.fmt(f),
        }
    }
}

impl std::error::Error for ProblemError {}
