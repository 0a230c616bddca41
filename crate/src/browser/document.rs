//! The problem document as it crosses to the page.

pub use crate::document::{Adjustment, Choices, Parameter, ProblemDocument};

use super::reading::Which;
use crate::problem::{Part, ProblemError};

impl ProblemDocument {
    /// The text of one of the matrices; empty when there is none.
    pub(super) fn text(&self, which: Which) -> &str {
        match which {
            Which::Matrix => &self.matrix,
            Which::Metric => self.metric.as_deref().unwrap_or_default(),
        }
    }

    /// The key of the answer taken for it, if one was.
    pub(super) fn layout(&self, which: Which) -> Option<&str> {
        match which {
            Which::Matrix => self.choices.matrix_layout.as_deref(),
            Which::Metric => self.choices.metric_layout.as_deref(),
        }
    }
}

/// The text that an error is about.
pub(super) fn part_of(error: &ProblemError) -> Part {
    match error {
        ProblemError::Empty(part)
        | ProblemError::NotSquare { part, .. }
        | ProblemError::TooLarge { part, .. } => *part,
        ProblemError::NotHermitian(asymmetry) => asymmetry.part,
        ProblemError::OrderDiffers { .. } | ProblemError::MetricNotPositive(_) => Part::Metric,
    }
}
