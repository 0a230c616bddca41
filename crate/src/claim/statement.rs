//! What can be claimed, and why a text is not a claim.

use core::fmt;

use super::figure::{Digits, Figure};

/// What is claimed.
#[derive(Clone, Debug, PartialEq)]
pub enum Kind {
    /// Eigenvalues, or readings of them.
    Values(Values),
    /// One eigenvector, any scale and phase.
    Vector {
        /// Its eigenvalue, where stated.
        value: Option<Figure>,
        /// Its place in ascending order from 1, where stated.
        place: Option<usize>,
        /// Components.
        vector: Vec<Figure>,
    },
    /// All eigenvectors as columns, with their values for a decomposition.
    Vectors {
        /// n × n, columns are vectors.
        columns: Table,
        /// Stated values, in the order of the columns.
        values: Option<Vec<Figure>>,
        /// Whether each column must have length one (in the metric).
        length: Length,
    },
    /// A tridiagonal form of the matrix.
    Tridiagonal {
        /// n figures.
        diagonal: Vec<Figure>,
        /// n − 1 figures, below the diagonal.
        off_diagonal: Vec<Figure>,
        /// Figures stated outside the band, with row and column from 0.
        outside: Vec<(usize, usize, Figure)>,
        /// Q with A = QTQᴴ, where stated.
        basis: Option<Table>,
    },
    /// The reflector meant for a column.
    Reflector {
        /// Column from 1.
        column: usize,
        /// What is stated of it.
        stated: Reflector,
    },
    /// The matrix after so many reflectors.
    State {
        /// Reflectors applied, from 1.
        step: usize,
        /// The matrix.
        matrix: Table,
    },
    /// A triangular factor of the metric (of the matrix, without a metric).
    Cholesky(Table),
    /// Coefficients of the characteristic polynomial, highest power first.
    Polynomial(Vec<Figure>),
    /// One number.
    Scalar(Scalar, Figure),
    /// An outside solver's output, taken as it stands.
    Output {
        /// Values, in the order of the columns.
        values: Vec<Figure>,
        /// Vectors as columns, where stated.
        columns: Option<Table>,
    },
}

/// Stated eigenvalues.
#[derive(Clone, Debug, PartialEq)]
pub struct Values {
    /// Figures with the multiplicity stated for each.
    pub figures: Vec<(Figure, usize)>,
    /// Whether these are meant to be all.
    pub extent: Extent,
    /// What the figures measure.
    pub quantity: Quantity,
    /// For a single value, its place in ascending order from 1, where stated.
    pub place: Option<usize>,
}

/// Whether a list is meant to be complete.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Extent {
    /// All eigenvalues with multiplicities.
    All,
    /// Some of them.
    Some,
}

/// How a figure depends on its eigenvalue.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Quantity {
    /// λ itself.
    Eigenvalue,
    /// ω = √λ.
    AngularFrequency,
    /// f = √λ/2π.
    Frequency,
}

/// Whether vectors are stated with unit length.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Length {
    /// Any length.
    Any,
    /// Length one, in the metric where there is one.
    Unit,
}

/// What is stated of a reflector.
#[derive(Clone, Debug, PartialEq)]
pub enum Reflector {
    /// v of H = I − 2vvᴴ/vᴴv.
    Vector(Vec<Figure>),
    /// v and s of H = I − s·vvᴴ.
    Scaled(Vec<Figure>, Box<Figure>),
    /// H itself.
    Matrix(Table),
}

/// Single numbers that can be claimed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Scalar {
    /// det A.
    Determinant,
    /// tr A.
    Trace,
    /// Eigenvalues above zero.
    Positive,
    /// Eigenvalues below zero.
    Negative,
    /// Eigenvalues that are zero.
    Zero,
    /// max|λ| / min|λ|.
    Condition,
    /// max|λ|.
    Radius,
}

/// A rectangle of figures, row by row.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// Rows.
    pub rows: usize,
    /// Columns.
    pub cols: usize,
    /// rows · cols figures.
    pub cells: Vec<Figure>,
}

impl Table {
    /// The figure in `row` and `col`, from 0.
    pub fn at(&self, row: usize, col: usize) -> &Figure {
        &self.cells[row * self.cols + col]
    }
}

/// One claim.
#[derive(Clone, Debug, PartialEq)]
pub struct Claim {
    /// The head as typed, without the colon.
    pub head: String,
    /// What it claims.
    pub kind: Kind,
    /// How its digits are understood.
    pub digits: Digits,
}

/// Why a text is not a claim.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ClaimError {
    /// The head names nothing that can be claimed.
    UnknownKind {
        /// The head as typed.
        head: String,
    },
    /// An option that is none.
    UnknownOption {
        /// The option as typed.
        option: String,
    },
    /// Nothing follows the head.
    NoFigures {
        /// The head as typed.
        head: String,
    },
    /// A figure cannot be read.
    Figure {
        /// Line of the claim, from 1.
        line: usize,
        /// Place in the line, from 1.
        place: usize,
        /// The text.
        text: String,
    },
    /// A comma that may be a decimal mark or stand between two figures.
    Comma {
        /// The text with the comma in it.
        text: String,
    },
    /// The figures do not have the shape this kind needs.
    Shape {
        /// The head as typed.
        head: String,
        /// What is needed.
        needed: &'static str,
    },
}

impl fmt::Display for ClaimError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::UnknownKind { head } => write!(
                f,
                "“{head}” is nothing that can be claimed; begin with eigenvalue, eigenvalues, vector, \
                 vectors, decomposition, tridiagonal, reflector, matrix, cholesky, polynomial, \
                 determinant, trace, positive, negative, zero, condition, radius, frequency or output, \
                 then a colon"
            ),
            Self::UnknownOption { option } => write!(
                f,
                "“{option}” is no option; use truncated, exact, decimal commas, a number of figures \
                 such as “4 figures”, or a tolerance such as “± 0.01”"
            ),
            Self::NoFigures { head } => write!(f, "nothing is stated after “{head}”"),
            Self::Figure { line, place, text } => {
                write!(f, "“{text}” (line {line}, figure {place}) is not a number")
            }
            Self::Comma { text } => write!(
                f,
                "“{text}” may be one figure with a decimal comma or two figures; write “decimal \
                 commas” behind the head and a comma (“eigenvalues, decimal commas: …”), or a \
                 blank after a comma that separates"
            ),
            Self::Shape { head, needed } => write!(f, "“{head}” needs {needed}"),
        }
    }
}

impl core::error::Error for ClaimError {}
