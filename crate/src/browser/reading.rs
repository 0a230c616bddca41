//! What the page is told of a text: layout, diagnostics, questions, cells.
//!
//! Positions are offsets in UTF-16 code units, the page's own unit.

use serde::{Deserialize, Serialize};
use tsify::Tsify;

use super::document::{Adjustment, ProblemDocument};
use crate::report::map::MagnitudePicture;

/// The reading of a whole document.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct Reading {
    /// The matrix.
    pub matrix: TextReading,
    /// The metric, when the document has one.
    #[tsify(optional)]
    pub metric: Option<TextReading>,
    /// One for each parameter of the list that has something wrong with it.
    pub parameters: Vec<ParameterDiagnostic>,
    /// Whether the problem is complete and can be solved.
    pub ready: bool,
}

/// The reading of one matrix text.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct TextReading {
    /// The layout in words ("rows apart by line breaks, cells by commas").
    pub layout: String,
    /// Rows that were read.
    pub rows: u32,
    /// Cells of the longest row.
    pub cols: u32,
    /// Whether any cell has an imaginary part.
    pub complex: bool,
    /// What is wrong or worth knowing, in order of position.
    pub diagnostics: Vec<Diagnostic>,
    /// Set where the text can be read in more than one way.
    #[tsify(optional)]
    pub question: Option<Question>,
    /// Whether a choice made earlier decides how the text is read.
    pub answered: bool,
    /// Set where mirrored cells disagree and nothing was chosen yet.
    #[tsify(optional)]
    pub disagreements: Option<Disagreements>,
    /// What was chosen for mirrored cells that disagree, if anything was.
    #[tsify(optional)]
    pub adjusted: Option<Adjustment>,
    /// Row labels, or none.
    pub row_labels: Vec<String>,
    /// Column labels, or none.
    pub col_labels: Vec<String>,
    /// Entries written with a tolerance.
    pub tolerances: Vec<ToleranceCell>,
    /// The cells as typed, row by row, for orders small enough for the grid.
    #[tsify(optional)]
    pub cells: Option<Vec<Vec<Cell>>>,
    /// Magnitudes for the map.
    #[tsify(optional)]
    pub map: Option<MagnitudePicture>,
}

/// One typed cell and where it stands.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct Cell {
    /// The text between the separators.
    pub text: String,
    /// Start of the cell in the text.
    pub from: u32,
    /// End of the cell in the text.
    pub to: u32,
}

/// Weight of a diagnostic.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "lowercase")]
pub enum Severity {
    /// The text cannot be used as it stands.
    Error,
    /// It can, but not as its writer may have meant.
    Warning,
    /// Worth knowing.
    Note,
}

/// One thing found in a text.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct Diagnostic {
    /// How much it matters.
    pub severity: Severity,
    /// Row from 1, when it concerns one.
    #[tsify(optional)]
    pub row: Option<u32>,
    /// Column from 1, when it concerns one.
    #[tsify(optional)]
    pub col: Option<u32>,
    /// Start of the offending text.
    pub from: u32,
    /// End of the offending text.
    pub to: u32,
    /// What is wrong, as a sentence.
    pub message: String,
    /// What was expected there; empty when the sentence says it all.
    pub expected: String,
    /// Repairs in one action.
    pub repairs: Vec<Repair>,
}

/// A repair on offer; the workbench applies it by its key.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct Repair {
    /// Names the repair to the module.
    pub key: String,
    /// What it does, as the label of a button.
    pub label: String,
}

/// A text that can be read in more than one way: the page asks.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct Question {
    /// The question.
    pub text: String,
    /// The answers; the key of one goes into the document's choices.
    pub answers: Vec<Answer>,
}

/// One way to read an ambiguous text.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct Answer {
    /// What goes into the document's choices.
    pub key: String,
    /// The answer in words.
    pub label: String,
    /// The shape it would give, in words.
    pub shape: String,
    /// The first cells it would give.
    pub corner: Vec<Vec<String>>,
    /// Whether it is the one in force.
    pub chosen: bool,
}

/// Mirrored cells that disagree.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "camelCase")]
pub struct Disagreements {
    /// How many pairs disagree in all.
    pub total: u32,
    /// The first of them, by row.
    pub pairs: Vec<DisagreeingPair>,
    /// Whether all differences are of the size of rounding errors.
    pub rounding_sized: bool,
}

/// One pair of mirrored cells that disagree.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct DisagreeingPair {
    /// Row of the cell below the diagonal, from 1.
    pub row: u32,
    /// Its column, from 1.
    pub col: u32,
    /// The cell below the diagonal, as typed.
    pub lower: String,
    /// The cell above the diagonal, as typed.
    pub upper: String,
    /// How far they are apart, in words and figures.
    pub difference: String,
}

/// One entry written with a tolerance.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct ToleranceCell {
    /// Row, from 1.
    pub row: u32,
    /// Column, from 1.
    pub col: u32,
    /// The cell as typed.
    pub text: String,
}

/// Something wrong with one parameter of the list.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct ParameterDiagnostic {
    /// Place in the list, from 0; absent for a name the list lacks.
    #[tsify(optional)]
    pub index: Option<u32>,
    /// The name.
    pub name: String,
    /// How much it matters.
    pub severity: Severity,
    /// The sentence.
    pub message: String,
}

/// Which text of the document is meant.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "lowercase")]
pub enum Which {
    /// The matrix.
    Matrix,
    /// The metric.
    Metric,
}

/// An edit of one text made cell by cell; rows and columns from 0.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(tag = "act", rename_all = "lowercase")]
pub enum GridEdit {
    /// One cell gets a new text.
    Set {
        /// Its row.
        row: u32,
        /// Its column.
        col: u32,
        /// The new text.
        text: String,
        /// Whether the cell across the diagonal follows.
        mirror: Mirroring,
    },
    /// A block of cells, from one cell on to the right and down.
    Paste {
        /// Row of its first cell.
        row: u32,
        /// Column of its first cell.
        col: u32,
        /// The block as text.
        block: String,
        /// Whether the cells across the diagonal follow.
        mirror: Mirroring,
    },
    /// A row and a column of zeros in front of this one.
    Insert {
        /// The place.
        at: u32,
    },
    /// This row and column go.
    Remove {
        /// The place.
        at: u32,
    },
    /// The text becomes a zero matrix.
    Zeros {
        /// Its order.
        order: u32,
    },
}

/// Whether an edit is carried over the diagonal.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, Tsify)]
#[serde(rename_all = "lowercase")]
pub enum Mirroring {
    /// The mirrored cell gets the complex conjugate.
    Conjugate,
    /// Only the cell itself changes.
    Off,
}

/// A change of one text, and how it is to be read from then on.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
pub struct TextChange {
    /// Start of the stretch replaced.
    pub from: u32,
    /// End of the stretch.
    pub to: u32,
    /// What takes its place.
    pub insert: String,
    /// What to put into the document's choices if a layout was chosen there.
    #[tsify(optional)]
    pub layout: Option<String>,
}

/// A document opened from a file, a link or a repair, or why it was not.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(tag = "outcome", rename_all = "lowercase")]
pub enum Opened {
    /// The whole document.
    Document {
        /// The document.
        document: ProblemDocument,
    },
    /// Only a matrix text; title and the rest stay.
    Matrix {
        /// The matrix as text.
        text: String,
    },
    /// Not opened.
    Refused {
        /// The reason as one sentence.
        reason: String,
    },
}

/// What output files make of a claim.
#[derive(Clone, Debug, Serialize, Deserialize, Tsify)]
#[serde(tag = "outcome", rename_all = "lowercase")]
pub enum ClaimedFiles {
    /// The text of the claim.
    Claim {
        /// It.
        text: String,
    },
    /// Nothing can be claimed of them.
    Refused {
        /// Why, as a sentence.
        reason: String,
    },
}
