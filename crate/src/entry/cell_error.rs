//! What can be wrong with a cell, and the sentence that says so.

use crate::num::exact::ArithmeticError;
use std::fmt;
use std::ops::Range;

/// What is wrong with a cell's text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CellErrorKind {
    /// There is nothing in the cell.
    Empty,
    /// The text is longer than a cell may be.
    TooLong,
    /// Parentheses, signs or roots are nested too deeply.
    TooDeep,
    /// The text ends where a number was due.
    UnexpectedEnd,
    /// A sign that has no place here.
    UnexpectedSign,
    /// A name that no parameter has.
    UnknownName,
    /// The name of a parameter that has itself no value.
    ValuelessName,
    /// NaN or infinity.
    NotFinite,
    /// Greater than a double can hold.
    BeyondDouble,
    /// Nearer to zero than a double can hold, but not zero.
    BelowDouble,
    /// Digits in groups: 1,234.5 or 1 234 or 1'234.
    ThousandsSeparator,
    /// A comma where numbers have decimal points.
    DecimalComma,
    /// A point where numbers have decimal commas.
    DecimalPoint,
    /// A product without sign that can be read in two ways.
    AmbiguousProduct,
    /// Two values side by side without a sign between.
    MissingOperator,
    /// A number with two points, or an exponent without digits.
    MalformedNumber,
    /// An exponent that is not a whole number, or too large.
    Exponent,
    /// The square root of a number that is not real.
    ComplexRoot,
    /// The square root of a negative number.
    NegativeRoot,
    /// Division by zero.
    DivisionByZero,
    /// A value that cannot be told from zero.
    Undecided,
    /// The exact value has too many digits.
    TooLarge,
    /// A parenthesis that is never closed.
    UnclosedParenthesis,
    /// A parenthesis that was never opened.
    UnopenedParenthesis,
    /// A tolerance that is not a real number of at least zero.
    Tolerance,
    /// A tolerance inside a larger expression.
    MisplacedTolerance,
    /// Digits of another script.
    ForeignDigit,
    /// A character that cannot be seen, such as a direction mark.
    InvisibleCharacter,
}

/// Why a cell could not be read: where, what, and what was expected.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CellError {
    /// What is wrong.
    pub kind: CellErrorKind,
    /// Bytes of the cell's text that are at fault; may be empty at the end.
    pub span: Range<usize>,
    /// One sentence, without the position: what was found and what was
    /// expected instead.
    pub expected: String,
}

impl fmt::Display for CellError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.expected)
    }
}

impl std::error::Error for CellError {}

impl CellError {
    /// An error of this kind over these bytes.
    pub(crate) fn new(
        kind: CellErrorKind,
        span: Range<usize>,
        expected: impl Into<String>,
    ) -> Self {
        Self {
            kind,
            span,
            expected: expected.into(),
        }
    }

    /// The cell's form of an arithmetic error over these bytes.
    pub(crate) fn arithmetic(error: ArithmeticError, span: Range<usize>) -> Self {
        let (kind, expected) = match error {
            ArithmeticError::DivisionByZero => {
                (CellErrorKind::DivisionByZero, "This divides by zero.")
            }
            ArithmeticError::NegativeRoot => (
                CellErrorKind::NegativeRoot,
                "This takes the square root of a negative number; if an imaginary number is \
                 meant, write i*sqrt of the positive one.",
            ),
            ArithmeticError::TooLarge => (
                CellErrorKind::TooLarge,
                "The exact value of this needs too many digits (about 10,000 is the limit); \
                 write it shorter.",
            ),
            ArithmeticError::Undecided => (
                CellErrorKind::Undecided,
                "This expression of nested roots cannot be told from zero; write the value it \
                 has in a simpler form.",
            ),
        };
        Self::new(kind, span, expected)
    }
}
