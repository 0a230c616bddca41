//! What a reader may be told beforehand, and what it recognises.

use serde::{Deserialize, Serialize};

/// The form in which a matrix arrived.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Layout {
    /// Rows at line breaks, cells apart by spaces.
    Spaces,
    /// Cells apart by tabs, as spreadsheets copy them.
    Tabs,
    /// Cells apart by commas.
    Commas,
    /// Cells apart by commas and by spaces alike.
    CommasAndSpaces,
    /// Cells apart by semicolons.
    Semicolons,
    /// Rows apart by semicolons, cells by spaces.
    RowsAtSemicolons,
    /// Rows apart by semicolons, cells by commas.
    CommasRowsAtSemicolons,
    /// Rows in brackets of any kind.
    Brackets,
    /// Nested JSON arrays.
    Json,
    /// A matrix, array or tabular environment of LaTeX.
    Latex,
    /// A Markdown table.
    Markdown,
    /// An HTML table.
    Html,
    /// NIST's Matrix Market exchange format.
    MatrixMarket,
    /// NumPy's binary array file.
    Npy,
}

impl Layout {
    /// What people call it, to stand in a sentence.
    pub fn name(self) -> &'static str {
        match self {
            Self::Spaces => "cells apart by spaces",
            Self::Tabs => "cells apart by tabs",
            Self::Commas => "cells apart by commas",
            Self::CommasAndSpaces => "cells apart by commas and by spaces",
            Self::Semicolons => "cells apart by semicolons",
            Self::RowsAtSemicolons => "rows apart by semicolons, cells by spaces",
            Self::CommasRowsAtSemicolons => "rows apart by semicolons, cells by commas",
            Self::Brackets => "rows in brackets",
            Self::Json => "JSON arrays",
            Self::Latex => "LaTeX",
            Self::Markdown => "Markdown table",
            Self::Html => "HTML table",
            Self::MatrixMarket => "Matrix Market",
            Self::Npy => "NumPy array file",
        }
    }
}

/// What a comma inside a number means.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum DecimalMark {
    /// The decimal mark is a point; a comma inside a number is refused.
    #[default]
    Point,
    /// The decimal mark is a comma.
    Comma,
    /// The decimal mark is a point and commas group thousands. Only ever by
    /// choice, never by recognition.
    PointWithGroups,
}

/// How `1 +2i` is read where cells are apart by spaces.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum SignedWords {
    /// A word that starts with a sign is a cell of its own.
    #[default]
    Apart,
    /// A signed imaginary word belongs to the real word before it.
    Joined,
}

/// How the cells lie in the matrix.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Shape {
    /// Every row has every cell.
    Full,
    /// Rows of 1, 2, 3, … cells; the rest by symmetry.
    LowerTriangle,
    /// Rows of n, n−1, …, 1 cells; the rest by symmetry.
    UpperTriangle,
    /// A row of n diagonal cells and a row of n−1 beside it.
    Tridiagonal,
    /// One row or column that stands on the diagonal.
    Diagonal,
    /// One run of n² cells, row by row.
    PackedRows,
    /// One run of n(n+1)/2 cells, the lower triangle row by row.
    PackedLower,
}

impl Shape {
    /// What people call it, to stand in a sentence.
    pub fn name(self) -> &'static str {
        match self {
            Self::Full => "every cell given",
            Self::LowerTriangle => "lower triangle",
            Self::UpperTriangle => "upper triangle",
            Self::Tridiagonal => "diagonal and off-diagonal",
            Self::Diagonal => "diagonal",
            Self::PackedRows => "one run of cells, row by row",
            Self::PackedLower => "one run of cells, the lower triangle row by row",
        }
    }
}

/// Which of the first row and column are labels.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Labels {
    /// Every row and column holds cells.
    #[default]
    None,
    /// The first row labels the columns.
    Columns,
    /// The first column labels the rows.
    Rows,
    /// Both.
    Both,
}

impl Labels {
    pub(crate) fn first_row(self) -> bool {
        matches!(self, Self::Columns | Self::Both)
    }

    pub(crate) fn first_col(self) -> bool {
        matches!(self, Self::Rows | Self::Both)
    }
}

/// What is wanted of the text.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Wanted {
    /// A Hermitian matrix; a single row is asked about.
    #[default]
    Square,
    /// The same, but a single row is a diagonal without asking.
    Metric,
    /// A list of values, in one row, one column or running over lines.
    List,
    /// Whatever rectangle is there.
    Any,
}

/// Choices made for a text, by a person or in a document. What is `None` is
/// recognised from the content.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "camelCase", deny_unknown_fields, default)]
pub struct Settings {
    /// The layout.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub layout: Option<Layout>,
    /// The decimal mark.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub decimal: Option<DecimalMark>,
    /// Signed words apart by spaces.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub signed_words: Option<SignedWords>,
    /// The shape.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub shape: Option<Shape>,
    /// The labels.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub labels: Option<Labels>,
}

/// How much is read before a reader stops with a sentence.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Limits {
    /// Bytes of input; at most 4 GiB − 1.
    pub bytes: usize,
    /// Order of the matrix.
    pub order: usize,
    /// Nesting of brackets and markup.
    pub nesting: usize,
    /// Diagnostics listed one by one.
    pub diagnostics: usize,
}

impl Default for Limits {
    fn default() -> Self {
        Self {
            bytes: 64 << 20,
            order: 1000,
            nesting: 16,
            diagnostics: 100,
        }
    }
}
