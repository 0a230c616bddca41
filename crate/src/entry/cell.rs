//! One cell: its text to an exact number, with an optional tolerance.
//!
//! The grammar is plain mathematics (`crate/docs/cells.md` has it in words):
//!
//! ```text
//! cell     = sum [ ("±" | "+/-") sum ]
//! sum      = product { ("+" | "−") product }
//! product  = signed { ("*" | "·" | "×" | "/" | "÷") signed }
//! signed   = ("+" | "−") signed | implicit
//! implicit = number (π | i | name | root | "(" sum ")") { π | i } | power
//! power    = atom [ "^" signed | superscript ]
//! atom     = number | name | π | pi | i | j | root | "(" sum ")"
//! root     = "sqrt" "(" sum ")" | "√" power
//! ```
//!
//! A product without sign is refused after a division and in an exponent,
//! where it could be read in two ways, and digits in groups are refused
//! everywhere.

pub use super::cell_error::{CellError, CellErrorKind};
pub use super::complex::ExactComplex;
pub use super::parameters::Parameters;
pub use super::settings::DecimalMark;

use super::expression;
use crate::num::ExactReal;

/// Bytes a cell may have.
pub const MAX_CELL_BYTES: usize = 50_000;

/// Significant digits an inline decimal surely holds.
const INLINE_DIGITS: usize = 18;

/// How cells are written.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct CellOptions {
    /// The decimal mark of every number.
    pub decimal_mark: DecimalMark,
}

/// The exact value of a cell.
#[derive(Clone, Debug)]
pub struct CellValue {
    /// Real part.
    pub re: ExactReal,
    /// Imaginary part.
    pub im: ExactReal,
    /// How far the true value may lie from the one written: a radius, also
    /// for complex values; at least zero.
    pub tolerance: Option<ExactReal>,
}

impl CellValue {
    /// Exact zero.
    pub const ZERO: Self = Self {
        re: ExactReal::ZERO,
        im: ExactReal::ZERO,
        tolerance: None,
    };

    /// A real value without tolerance.
    pub fn real(re: ExactReal) -> Self {
        Self {
            re,
            im: ExactReal::ZERO,
            tolerance: None,
        }
    }

    /// A complex value without tolerance.
    pub fn complex(re: ExactReal, im: ExactReal) -> Self {
        Self {
            re,
            im,
            tolerance: None,
        }
    }

    /// The complex conjugate, with the same tolerance.
    pub fn conj(&self) -> Self {
        Self {
            re: self.re.clone(),
            im: self.im.neg(),
            tolerance: self.tolerance.clone(),
        }
    }

    /// Whether the imaginary part is exactly zero.
    pub fn is_real(&self) -> bool {
        self.im.is_zero()
    }
}

impl std::fmt::Display for CellValue {
    /// Text that [`parse_cell`] reads back to the same value, as long as it is
    /// not longer than a cell may be.
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        if self.im.is_zero() {
            write!(f, "{}", self.re)?;
        } else {
            if !self.re.is_zero() {
                write!(f, "{}", self.re)?;
                if !self.im.is_negative() {
                    f.write_str("+")?;
                }
            }
            match &self.im {
                ExactReal::Decimal { .. } => write!(f, "{}i", self.im)?,
                im if im.is_negative() => write!(f, "-({})*i", im.neg())?,
                im => write!(f, "({im})*i")?,
            }
        }
        match &self.tolerance {
            Some(tolerance) => write!(f, " ± {tolerance}"),
            None => Ok(()),
        }
    }
}

/// Reads one cell. Blanks around it are ignored.
///
/// Linear in the length of the text for plain numbers; the exact arithmetic
/// of an expression is bounded by [`crate::num::exact::MAX_BITS`].
///
/// # Errors
/// A [`CellError`] with the bytes at fault and a sentence.
pub fn parse_cell(
    text: &str,
    parameters: &Parameters,
    options: CellOptions,
) -> Result<CellValue, CellError> {
    if let Some(re) = parse_plain(text.as_bytes(), options.decimal_mark, parameters) {
        return Ok(CellValue::real(re));
    }
    if text.len() > MAX_CELL_BYTES {
        return Err(CellError::new(
            CellErrorKind::TooLong,
            MAX_CELL_BYTES..text.len(),
            format!("A cell may have {MAX_CELL_BYTES} characters at most."),
        ));
    }
    expression::parse(text, parameters, options)
}

/// The fast road: an optional sign, digits with at most one mark, an optional
/// short exponent; nothing else, and no value near the ends of the range.
fn parse_plain(bytes: &[u8], mark: DecimalMark, parameters: &Parameters) -> Option<ExactReal> {
    let mark = match mark {
        DecimalMark::Point | DecimalMark::PointWithGroups => b'.',
        DecimalMark::Comma => b',',
    };
    let (negative, mut rest) = match bytes {
        [b'-', rest @ ..] => (true, rest),
        [b'+', rest @ ..] => (false, rest),
        _ => (false, bytes),
    };
    if rest.len() > INLINE_DIGITS + 8 {
        return None;
    }
    let mut digits: i64 = 0;
    let mut seen = 0usize;
    let mut places = 0i16;
    let mut past_mark = false;
    while let [c, tail @ ..] = rest {
        if c.is_ascii_digit() {
            if seen == INLINE_DIGITS {
                return None;
            }
            digits = digits * 10 + i64::from(c - b'0');
            seen += 1;
            places += i16::from(past_mark);
        } else if *c == mark && !past_mark {
            past_mark = true;
        } else {
            break;
        }
        rest = tail;
    }
    if seen == 0 {
        return None;
    }
    let mut exponent = -places;
    if !rest.is_empty() {
        // In 2e3 the letter may begin a parameter's name: the slow road asks.
        if !parameters.is_empty() {
            return None;
        }
        exponent += plain_exponent(rest)?;
    }
    let digits = if negative { -digits } else { digits };
    Some(ExactReal::Decimal { digits, exponent })
}

/// e or E, a sign, one or two digits.
fn plain_exponent(bytes: &[u8]) -> Option<i16> {
    let [b'e' | b'E', rest @ ..] = bytes else {
        return None;
    };
    let (negative, digits) = match rest {
        [b'-', digits @ ..] => (true, digits),
        [b'+', digits @ ..] => (false, digits),
        _ => (false, rest),
    };
    let value = match digits {
        [a] if a.is_ascii_digit() => i16::from(a - b'0'),
        [a, b] if a.is_ascii_digit() && b.is_ascii_digit() => {
            i16::from(a - b'0') * 10 + i16::from(b - b'0')
        }
        _ => return None,
    };
    Some(if negative { -value } else { value })
}
