//! The problem: an exactly Hermitian matrix, or a pair with a metric.
//!
//! One verb: [`assemble`], from cells to a [`Problem`], with what was adjusted
//! on the way. The test for Hermitian form is made on the exact values.
//!
//! Notation: A the matrix, M the metric, n the order, s the scale exponents.

mod assemble;
mod error;
mod hermitian;
pub mod metric;
mod scale;
mod tolerances;

#[cfg(test)]
mod tests;

pub use assemble::{assemble, Assembly, Cells, Choices};
pub use error::ProblemError;
pub use hermitian::{Adjustment, Asymmetry, AsymmetrySize, Disagreement, Mirror};
pub use metric::{metric_check, MetricFault, MetricVerdict};
pub use tolerances::Tolerances;

pub use eigenledger_solver::rounded::Rounded;

use crate::matrix::ExactMatrix;

/// A x = λ x, or A x = λ M x when there is a metric.
#[derive(Clone, Debug)]
pub struct Problem {
    /// A, exactly Hermitian.
    pub matrix: ExactMatrix,
    /// M, exactly Hermitian; its definiteness is proved later, not assumed.
    pub metric: Option<ExactMatrix>,
}

/// Which of the two matrices of a problem.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Part {
    /// A.
    Matrix,
    /// M.
    Metric,
}

impl Part {
    /// The word for it.
    pub fn name(self) -> &'static str {
        match self {
            Self::Matrix => "matrix",
            Self::Metric => "metric",
        }
    }
}
