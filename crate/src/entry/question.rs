//! When a text can be read in more than one way: the choices, each with the
//! matrix it would give.

use super::settings::Settings;
use serde::Serialize;

/// A question about the text. Nothing is computed before it is answered,
/// unless `preferred` says that only one reading gives what is wanted.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(rename_all = "camelCase")]
pub struct Question {
    /// The question as a sentence.
    pub sentence: String,
    /// The readings, at least two.
    pub choices: Vec<Choice>,
    /// The only reading that gives what is wanted, if there is just one; the
    /// entry then holds its cells, and the question may still be answered
    /// otherwise. `None`: it must be asked.
    pub preferred: Option<usize>,
}

/// One reading of the text.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(rename_all = "camelCase")]
pub struct Choice {
    /// What it means, to stand on a button.
    pub label: String,
    /// Read again with these settings to take it.
    pub settings: Settings,
    /// What it would give.
    pub preview: Preview,
}

/// A first look at a reading.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(rename_all = "camelCase")]
pub struct Preview {
    /// Rows it would give.
    pub rows: usize,
    /// Columns it would give (of the widest row).
    pub cols: usize,
    /// In words: `2 rows of 2 cells`, `order 3, lower triangle`.
    pub shape: String,
    /// The first cells of the first rows, as text.
    pub corner: Vec<Vec<String>>,
}
