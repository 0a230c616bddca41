//! The words of a cell: numbers, names and signs, with their places.

use super::cell::{CellError, CellErrorKind, CellOptions};
use super::number::read_number;
use crate::num::ExactReal;
use std::ops::Range;

/// Words for what is not a number, in lower case.
const NOT_FINITE: [&str; 3] = ["nan", "inf", "infinity"];

/// Whether a name has a meaning of its own in cells.
pub(crate) fn is_reserved(name: &str) -> bool {
    matches!(name, "i" | "j" | "π" | "∞")
        || ["pi", "sqrt"]
            .iter()
            .chain(&NOT_FINITE)
            .any(|word| name.eq_ignore_ascii_case(word))
}

/// One word.
#[derive(Clone, Debug)]
pub(crate) enum Token<'a> {
    /// A number without sign.
    Number(ExactReal),
    /// A name that is none of the reserved ones.
    Name(&'a str),
    /// π or pi.
    Pi,
    /// i or j.
    Imaginary,
    /// √
    RootSign,
    /// sqrt
    RootWord,
    /// +
    Plus,
    /// − in any of its forms.
    Minus,
    /// * · × and their like.
    Times,
    /// / ÷
    Over,
    /// ^
    Caret,
    /// Raised digits.
    Raised(i32),
    /// (
    Open,
    /// )
    Close,
    /// ± or +/-
    PlusMinus,
    /// The end of the text.
    End,
}

/// Whether `c` can stand first in a name.
fn starts_name(c: char) -> bool {
    c.is_alphabetic() && c != 'π'
}

/// Whether `c` can follow in a name.
fn continues_name(c: char) -> bool {
    starts_name(c) || c.is_ascii_digit() || c == '_' || c == '′' || ('₀'..='₉').contains(&c)
}

/// Whether `text` is a name.
pub(crate) fn is_name(text: &str) -> bool {
    text.chars().next().is_some_and(starts_name) && text.chars().all(continues_name)
}

/// The names that occur in a text, numbers' exponents aside.
pub(crate) fn names_in(text: &str) -> impl Iterator<Item = &str> {
    text.split(|c: char| !continues_name(c)).filter_map(|word| {
        let start = word.find(starts_name)?;
        Some(&word[start..])
    })
}

/// The sign of minus in each form in which it arrives.
pub(crate) fn is_minus(c: char) -> bool {
    matches!(
        c,
        '-' | '−' | '–' | '—' | '‐' | '‑' | '‒' | '―' | '﹣' | '－' | '➖'
    )
}

/// Blanks that may stand between words.
pub(crate) fn is_blank(c: char) -> bool {
    c.is_whitespace()
}

/// Reads words one after the other.
pub(crate) struct Lexer<'a> {
    text: &'a str,
    at: usize,
    options: CellOptions,
}

impl<'a> Lexer<'a> {
    pub(crate) fn new(text: &'a str, options: CellOptions) -> Self {
        Self {
            text,
            at: 0,
            options,
        }
    }

    /// The text from byte `at` on.
    pub(crate) fn rest(&self, at: usize) -> &'a str {
        self.text.get(at..).unwrap_or_default()
    }

    /// The next word and its bytes. `is_parameter` tells whether a name is
    /// taken, which matters after a number: in 2e3 the e may be one.
    pub(crate) fn next(
        &mut self,
        is_parameter: impl Fn(&str) -> bool,
    ) -> Result<(Token<'a>, Range<usize>), CellError> {
        let rest = self.rest(self.at);
        let blanks = rest.len() - rest.trim_start_matches(is_blank).len();
        let start = self.at + blanks;
        let rest = self.rest(start);
        let Some(c) = rest.chars().next() else {
            self.at = start;
            return Ok((Token::End, start..start));
        };
        if c.is_ascii_digit() || c == '.' || c == ',' {
            let (value, length) = read_number(rest, self.options.decimal_mark, is_parameter)
                .map_err(|error| {
                    let span = start + error.span.start..start + error.span.end;
                    CellError { span, ..error }
                })?;
            self.at = start + length;
            return Ok((Token::Number(value), start..self.at));
        }
        if starts_name(c) {
            let length = rest.find(|c| !continues_name(c)).unwrap_or(rest.len());
            self.at = start + length;
            let word = &rest[..length];
            return Ok((name_token(word, start..self.at)?, start..self.at));
        }
        if let Some((power, length)) = raised(rest) {
            self.at = start + length;
            let span = start..self.at;
            return match power {
                Some(power) => Ok((Token::Raised(power), span)),
                None => Err(CellError::new(
                    CellErrorKind::Exponent,
                    span,
                    "This raised exponent is not a whole number of at most four digits.",
                )),
            };
        }
        let (token, length) = sign(rest, c).ok_or_else(|| misfit(c, start))?;
        self.at = start + length;
        Ok((token, start..self.at))
    }
}

fn name_token(word: &str, span: Range<usize>) -> Result<Token<'_>, CellError> {
    if !is_reserved(word) {
        return Ok(Token::Name(word));
    }
    match word.as_bytes()[0].to_ascii_lowercase() {
        b'p' => Ok(Token::Pi),
        b's' => Ok(Token::RootWord),
        _ if word.len() == 1 => Ok(Token::Imaginary),
        _ => Err(not_finite(span)),
    }
}

fn not_finite(span: Range<usize>) -> CellError {
    CellError::new(
        CellErrorKind::NotFinite,
        span,
        "This is not a number (NaN or infinity); a matrix needs a finite number in every cell.",
    )
}

fn sign<'a>(rest: &str, c: char) -> Option<(Token<'a>, usize)> {
    let token = match c {
        '+' | '＋' => {
            let mut next = rest.chars().skip(1);
            if let (Some('/'), Some(minus)) = (next.next(), next.next()) {
                if is_minus(minus) {
                    return Some((Token::PlusMinus, c.len_utf8() + 1 + minus.len_utf8()));
                }
            }
            Token::Plus
        }
        '±' => Token::PlusMinus,
        '*' | '·' | '×' | '⋅' | '∙' | '•' | '∗' | '✕' | '⨯' => Token::Times,
        '/' | '÷' | '∕' | '⁄' => Token::Over,
        '^' => Token::Caret,
        '(' | '（' => Token::Open,
        ')' | '）' => Token::Close,
        'π' => Token::Pi,
        '√' => Token::RootSign,
        _ if is_minus(c) => Token::Minus,
        _ => return None,
    };
    Some((token, c.len_utf8()))
}

/// Raised digits with an optional raised sign: their value (`None` when too
/// long or without digits) and length.
fn raised(text: &str) -> Option<(Option<i32>, usize)> {
    let digit = |c: char| match c {
        '⁰' => Some(0),
        '¹' => Some(1),
        '²' => Some(2),
        '³' => Some(3),
        '⁴'..='⁹' => Some(c as i32 - '⁴' as i32 + 4),
        _ => None,
    };
    let length = text
        .find(|c| !(matches!(c, '⁺' | '⁻') || digit(c).is_some()))
        .unwrap_or(text.len());
    if length == 0 {
        return None;
    }
    let word = &text[..length];
    let (negative, digits) = match (word.strip_prefix('⁻'), word.strip_prefix('⁺')) {
        (Some(digits), _) => (true, digits),
        (_, Some(digits)) => (false, digits),
        _ => (false, word),
    };
    let count = digits.chars().count();
    let mut value = Some(0).filter(|_| (1..=4).contains(&count));
    for c in digits.chars() {
        value = match (value, digit(c)) {
            (Some(v), Some(d)) => Some(10 * v + d),
            _ => None,
        };
    }
    Some((value.map(|v| if negative { -v } else { v }), length))
}

/// The sentence for a character that has no place in a cell.
fn misfit(c: char, start: usize) -> CellError {
    let span = start..start + c.len_utf8();
    if c == '∞' {
        return not_finite(span);
    }
    if c.is_numeric() {
        return CellError::new(
            CellErrorKind::ForeignDigit,
            span,
            format!("“{c}” is not one of the digits 0 to 9; write numbers with those."),
        );
    }
    let hidden = c.is_control()
        || matches!(c, '\u{ad}' | '\u{200b}'..='\u{200f}' | '\u{202a}'..='\u{202e}'
            | '\u{2060}'..='\u{206f}' | '\u{feff}' | '\u{fff0}'..='\u{fffd}');
    if hidden {
        return CellError::new(
            CellErrorKind::InvisibleCharacter,
            span,
            format!(
                "There is an invisible character here (U+{:04X}); delete it.",
                c as u32
            ),
        );
    }
    let expected = if c == '\'' || c == '’' || c == '_' {
        "Digits in groups are not read, since they could be two cells; write 1234, not 1'234."
            .to_owned()
    } else {
        format!("“{c}” has no meaning in a cell; a number or an expression was expected.")
    };
    CellError::new(CellErrorKind::UnexpectedSign, span, expected)
}
