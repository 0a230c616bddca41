//! The problem document as it crosses to the page.

use serde::{Deserialize, Serialize};
use tsify::Tsify;

use super::reading::Which;

/// Everything a person typed and chose; the page keeps nothing else of the
/// problem.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct ProblemDocument {
    /// One line, printed on the sheet and the foot line.
    pub title: String,
    /// Free text; never interpreted.
    pub notes: String,
    /// The matrix as typed.
    pub matrix: String,
    /// The metric as typed; absent for the standard problem.
    #[tsify(optional)]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub metric: Option<String>,
    /// Names and their values, in the order of the list.
    pub parameters: Vec<Parameter>,
    /// What was chosen where the text left a choice.
    pub choices: Choices,
    /// Claims as typed, one text each.
    #[serde(default)]
    pub claims: Vec<String>,
}

/// One name that cells may use.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize, Tsify)]
pub struct Parameter {
    /// The name, a word.
    pub name: String,
    /// Its value: any cell text, names included.
    pub value: String,
}

/// Choices that are part of the problem, recorded in the ledger and the file.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct Choices {
    /// Key of the answer taken where the matrix text could be read two ways.
    #[tsify(optional)]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub matrix_layout: Option<String>,
    /// The same for the metric text.
    #[tsify(optional)]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub metric_layout: Option<String>,
    /// What to take where mirrored cells of the matrix disagree.
    #[tsify(optional)]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub matrix_adjustment: Option<Adjustment>,
    /// The same for the metric.
    #[tsify(optional)]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub metric_adjustment: Option<Adjustment>,
}

/// How a matrix whose mirrored cells disagree is made Hermitian.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "lowercase")]
pub enum Adjustment {
    /// The cells below the diagonal count.
    Lower,
    /// The cells above the diagonal count.
    Upper,
    /// The mean of each cell and its mirror's conjugate counts.
    Mean,
}

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
