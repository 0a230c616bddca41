//! Numbers without sign: digits, a decimal mark, an exponent.

use super::cell::{CellError, CellErrorKind, DecimalMark};
use crate::num::ExactReal;
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use std::ops::Range;

/// Greatest exponent written after e; what is beyond has no double near it.
const MAX_EXPONENT: i64 = 9_999;

/// Reads the number that `text` begins with: its value and its length in
/// bytes.
pub(crate) fn read_number(
    text: &str,
    mark: DecimalMark,
    is_parameter: impl Fn(&str) -> bool,
) -> Result<(ExactReal, usize), CellError> {
    let bytes = text.as_bytes();
    let whole = match mark {
        DecimalMark::PointWithGroups => count_grouped(bytes),
        _ => count_digits(bytes),
    };
    let (mark_byte, other) = match mark {
        DecimalMark::Point | DecimalMark::PointWithGroups => (b'.', b','),
        DecimalMark::Comma => (b',', b'.'),
    };
    let mut end = whole;
    let mut fraction = 0..0;
    if bytes.get(end) == Some(&mark_byte) {
        let places = count_digits(&bytes[end + 1..]);
        fraction = end + 1..end + 1 + places;
        end = fraction.end;
    }
    if bytes.get(end) == Some(&mark_byte) || bytes.get(end) == Some(&other) {
        return Err(stray_mark(text, end, mark));
    }
    if whole + fraction.len() == 0 {
        return Err(CellError::new(
            CellErrorKind::MalformedNumber,
            0..end,
            "A decimal mark without digits is no number; write 0 or a number.",
        ));
    }
    if let Some(error) = group_separator(text, end) {
        return Err(error);
    }
    let (exponent, end) = read_exponent(text, end, is_parameter)?;
    let digits = [&text[..whole], &text[fraction.clone()]];
    let value = assemble(digits, exponent - fraction.len() as i64);
    Ok((value, end))
}

fn count_digits(bytes: &[u8]) -> usize {
    bytes.iter().take_while(|c| c.is_ascii_digit()).count()
}

/// Length of digits in groups of three parted by commas, or without groups.
fn count_grouped(bytes: &[u8]) -> usize {
    let mut end = count_digits(bytes);
    if !(1..=3).contains(&end) {
        return end;
    }
    while bytes.get(end) == Some(&b',') && count_digits(&bytes[end + 1..]) == 3 {
        end += 4;
    }
    end
}

/// A second mark, or the other one: groups of digits, or the wrong choice of
/// decimal mark.
fn stray_mark(text: &str, at: usize, mark: DecimalMark) -> CellError {
    let end = text
        .find(|c: char| !(c.is_ascii_digit() || c == '.' || c == ','))
        .unwrap_or(text.len());
    let word = &text[..end];
    let points = word.matches('.').count();
    let commas = word.matches(',').count();
    let parts: Vec<&str> = word.split(['.', ',']).collect();
    let grouped = parts.len() > 2
        && parts[1..parts.len() - 1].iter().all(|part| part.len() == 3)
        && (1..=3).contains(&parts[0].len());
    let span = 0..end;
    match mark {
        _ if grouped => CellError::new(
            CellErrorKind::ThousandsSeparator,
            span,
            format!("“{word}” looks like digits in groups; write the number without separators."),
        ),
        DecimalMark::Point | DecimalMark::PointWithGroups if points == 0 && commas == 1 => {
            CellError::new(
                CellErrorKind::DecimalComma,
                span,
                format!(
                    "“{word}” has a comma, but decimal points are being read; write a point, or \
                 choose decimal commas."
                ),
            )
        }
        DecimalMark::Comma if points == 1 && commas == 0 => CellError::new(
            CellErrorKind::DecimalPoint,
            span,
            format!(
                "“{word}” has a point, but decimal commas are being read; write a comma, or \
                 choose decimal points."
            ),
        ),
        _ => CellError::new(
            CellErrorKind::MalformedNumber,
            at..at + 1,
            format!("“{word}” is not one number: it has more than one decimal mark."),
        ),
    }
}

/// Refuses 1'234, 1_234 and digits parted by any kind of blank.
fn group_separator(text: &str, end: usize) -> Option<CellError> {
    let rest = &text[end..];
    let tail = rest.trim_start_matches(|c: char| c.is_whitespace());
    let blanks = rest.len() - tail.len();
    let skipped = match tail.chars().next() {
        Some(c) if blanks == 0 && matches!(c, '\'' | '’' | '_' | '˙' | '`' | '٬') => {
            c.len_utf8()
        }
        _ if blanks > 0 => 0,
        _ => return None,
    };
    let group = count_digits(&tail.as_bytes()[skipped..]);
    if group == 0 {
        return None;
    }
    let span = 0..end + blanks + skipped + group;
    let word = &text[span.clone()];
    Some(if group == 3 {
        CellError::new(
            CellErrorKind::ThousandsSeparator,
            span.clone(),
            format!(
                "“{word}” may be one number with its digits in groups, or two cells; write \
                     it without separators."
            ),
        )
    } else {
        CellError::new(
            CellErrorKind::MissingOperator,
            span.clone(),
            format!("“{word}” is two numbers in one cell, with no sign between them."),
        )
    })
}

/// The exponent after the digits that end at `end`, and where it ends.
fn read_exponent(
    text: &str,
    end: usize,
    is_parameter: impl Fn(&str) -> bool,
) -> Result<(i64, usize), CellError> {
    let bytes = text.as_bytes();
    // D is the exponent letter of double precision in Fortran's output.
    let Some(b'e' | b'E' | b'd' | b'D') = bytes.get(end) else {
        return Ok((0, end));
    };
    let (negative, from) = match text[end + 1..].chars().next() {
        Some('+') => (false, end + 2),
        Some(c) if super::expression_lexer::is_minus(c) => (true, end + 1 + c.len_utf8()),
        _ => (false, end + 1),
    };
    let count = count_digits(&bytes[from..]);
    if count == 0 {
        // Not an exponent: a name, if anything, such as 3e for 3·e.
        return Ok((0, end));
    }
    let to = from + count;
    let as_name = if from == end + 1 {
        &text[end..to]
    } else {
        &text[end..=end]
    };
    if is_parameter(as_name) {
        return Err(CellError::new(
            CellErrorKind::AmbiguousProduct,
            0..to,
            format!(
                "“{}” may be a power of ten or a product with {as_name}; write 10^ or · .",
                &text[..to]
            ),
        ));
    }
    let digits = text[from..to].trim_start_matches('0');
    let size = if digits.len() > 6 {
        i64::MAX
    } else {
        digits.parse().unwrap_or(0)
    };
    let mantissa_is_zero = text[..end].bytes().all(|c| !matches!(c, b'1'..=b'9'));
    if mantissa_is_zero {
        return Ok((0, to));
    }
    if size > MAX_EXPONENT {
        let range = 0..to;
        return Err(if negative {
            below_double(range)
        } else {
            beyond_double(range)
        });
    }
    Ok((if negative { -size } else { size }, to))
}

/// The sentence for a value too large to compute with.
pub(crate) fn beyond_double(span: Range<usize>) -> CellError {
    CellError::new(
        CellErrorKind::BeyondDouble,
        span,
        "This is beyond the range of double precision (about 1.8e308); choose a larger unit.",
    )
}

/// The sentence for a value too small to compute with.
pub(crate) fn below_double(span: Range<usize>) -> CellError {
    CellError::new(
        CellErrorKind::BelowDouble,
        span,
        "This is not zero but below the range of double precision (about 5e-324); choose a \
         smaller unit, or write 0.",
    )
}

/// digits·10^exponent, the digits in two runs.
fn assemble(digits: [&str; 2], exponent: i64) -> ExactReal {
    let mut all: String = digits.concat();
    let zeros = all.len() - all.trim_start_matches('0').len();
    all.drain(..zeros);
    all.retain(|c| c != ',');
    if all.is_empty() {
        return ExactReal::ZERO;
    }
    if let (Ok(digits), Ok(exponent)) = (all.parse::<i64>(), i16::try_from(exponent)) {
        return ExactReal::Decimal { digits, exponent };
    }
    let significand = all.parse::<IBig>().unwrap_or(IBig::ZERO);
    let power = UBig::from(10u8).pow(exponent.unsigned_abs() as usize);
    ExactReal::from(if exponent >= 0 {
        RBig::from(significand * IBig::from(power))
    } else {
        RBig::from_parts(significand, power)
    })
}
