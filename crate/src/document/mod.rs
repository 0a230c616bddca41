//! The problem document: everything a person typed and chose.
//!
//! As a file it is JSON of a form of our own, version 1, described by
//! `schema/problem-1.schema.json`. Reading is strict about structure (a field
//! it does not know is refused by name) and lenient about order. Numbers are
//! never read as doubles: a matrix given as nested arrays is kept as the text
//! of those arrays, digit by digit.

mod fields;
mod read;
mod understand;
mod write;

#[cfg(test)]
mod tests;

pub use fields::{DocumentError, DocumentErrorKind};
pub use read::read;
pub use understand::{problem, understand, NotReady, Understanding};
pub use write::{write, write_compact};

use crate::problem::Mirror;
use serde::{Deserialize, Serialize};

/// What stands in the field `format` of every document.
pub const FORMAT: &str = "eigenledger problem";

/// The version that is read and written.
pub const VERSION: u64 = 1;

/// Everything a person typed and chose; nothing else of the problem is kept.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct ProblemDocument {
    /// One line, printed on the sheet and the foot line.
    pub title: String,
    /// Free text; never interpreted.
    pub notes: String,
    /// The matrix as typed, in any layout the entry stage reads.
    pub matrix: String,
    /// The metric as typed; absent for the standard problem.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
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
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Parameter {
    /// The name, a word.
    pub name: String,
    /// Its value: any cell text, names included.
    pub value: String,
}

/// Choices that are part of the problem, recorded in the ledger and the file.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct Choices {
    /// Key of the answer taken where the matrix text could be read two ways:
    /// the JSON text of [`crate::entry::Settings`].
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub matrix_layout: Option<String>,
    /// The same for the metric text.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub metric_layout: Option<String>,
    /// What to take where mirrored cells of the matrix disagree.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub matrix_adjustment: Option<Adjustment>,
    /// The same for the metric.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub metric_adjustment: Option<Adjustment>,
}

/// How a matrix whose mirrored cells disagree is made Hermitian.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "lowercase")]
pub enum Adjustment {
    /// The cells below the diagonal count.
    Lower,
    /// The cells above the diagonal count.
    Upper,
    /// The mean of each cell and its mirror's conjugate counts.
    Mean,
}

impl Adjustment {
    /// The repair it asks for.
    pub fn mirror(self) -> Mirror {
        match self {
            Self::Lower => Mirror::Lower,
            Self::Upper => Mirror::Upper,
            Self::Mean => Mirror::Mean,
        }
    }
}
