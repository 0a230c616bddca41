//! Expressions in a cell, evaluated exactly as they are read.
//!
//! Recursive descent over the grammar in [`super::cell`]; nesting is bounded,
//! so the stack is.

use super::cell::{CellError, CellErrorKind, CellOptions, CellValue};
use super::complex::ExactComplex;
use super::expression_lexer::{Lexer, Token};
use super::number::{below_double, beyond_double};
use super::parameters::{Lookup, Parameters};
use crate::num::exact::MAX_BITS;
use crate::num::ExactReal;
use dashu_base::UnsignedAbs;
use std::ops::Range;

/// How deep parentheses, roots, signs and powers may nest.
const MAX_DEPTH: usize = 64;

/// Greatest whole exponent after ^: room for the binary fractions that exact
/// results are printed as.
const MAX_POWER: i32 = MAX_BITS as i32;

/// Where a product without sign would stand.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Place {
    /// It can be read in one way only.
    Clear,
    /// After a division or in an exponent, where it can be read in two ways.
    Doubtful,
}

/// Reads a cell's text as an expression with an optional tolerance.
pub(super) fn parse(
    text: &str,
    parameters: &Parameters,
    options: CellOptions,
) -> Result<CellValue, CellError> {
    let mut parser = Parser::new(text, parameters, options)?;
    if matches!(parser.token, Token::End) {
        return Err(CellError::new(
            CellErrorKind::Empty,
            0..text.len(),
            "This cell is empty; a number was expected.",
        ));
    }
    let first = parser.span.start;
    let value = parser.sum()?;
    let within = first..parser.last_end;
    check_range(&value, within)?;
    let tolerance = if matches!(parser.token, Token::PlusMinus) {
        Some(parser.tolerance()?)
    } else {
        None
    };
    match parser.token {
        Token::End => Ok(CellValue {
            re: value.re,
            im: value.im,
            tolerance,
        }),
        Token::Close => Err(parser.error(
            CellErrorKind::UnopenedParenthesis,
            "This parenthesis closes nothing; delete it or open one before.",
        )),
        _ => Err(parser.missing_operator()),
    }
}

/// Refuses parts that no double can stand for.
fn check_range(value: &ExactComplex, span: Range<usize>) -> Result<(), CellError> {
    for part in [&value.re, &value.im] {
        let near = part.nearest(0);
        if !near.is_finite() {
            return Err(beyond_double(span));
        }
        if near == 0.0 && !part.is_zero() {
            return Err(below_double(span));
        }
    }
    Ok(())
}

struct Parser<'a> {
    lexer: Lexer<'a>,
    parameters: &'a Parameters,
    token: Token<'a>,
    span: Range<usize>,
    /// Where the last word taken ended.
    last_end: usize,
    depth: usize,
}

impl<'a> Parser<'a> {
    fn new(
        text: &'a str,
        parameters: &'a Parameters,
        options: CellOptions,
    ) -> Result<Self, CellError> {
        let mut parser = Self {
            lexer: Lexer::new(text, options),
            parameters,
            token: Token::End,
            span: 0..0,
            last_end: 0,
            depth: 0,
        };
        parser.advance()?;
        Ok(parser)
    }

    /// Takes the word at hand and reads the next.
    fn advance(&mut self) -> Result<Token<'a>, CellError> {
        self.last_end = self.span.end;
        let (token, span) = self.lexer.next(|name| self.parameters.has(name))?;
        self.span = span;
        Ok(std::mem::replace(&mut self.token, token))
    }

    fn error(&self, kind: CellErrorKind, expected: impl Into<String>) -> CellError {
        CellError::new(kind, self.span.clone(), expected)
    }

    fn missing_operator(&self) -> CellError {
        self.error(
            CellErrorKind::MissingOperator,
            "A sign such as + or · is missing before this.",
        )
    }

    /// Runs `inner` one level deeper.
    fn deeper<T>(
        &mut self,
        inner: impl FnOnce(&mut Self) -> Result<T, CellError>,
    ) -> Result<T, CellError> {
        if self.depth == MAX_DEPTH {
            return Err(self.error(
                CellErrorKind::TooDeep,
                format!("This is nested more than {MAX_DEPTH} deep; name a part as a parameter."),
            ));
        }
        self.depth += 1;
        let result = inner(self);
        self.depth -= 1;
        result
    }

    fn tolerance(&mut self) -> Result<ExactReal, CellError> {
        self.advance()?;
        let start = self.span.start;
        let value = self.sum()?;
        let span = start..self.last_end;
        if !value.is_real() || value.re.is_negative() {
            return Err(CellError::new(
                CellErrorKind::Tolerance,
                span,
                "A tolerance is a real number of at least zero.",
            ));
        }
        check_range(&value, span)?;
        if matches!(self.token, Token::PlusMinus) {
            return Err(self.error(
                CellErrorKind::MisplacedTolerance,
                "A cell has one tolerance at most, at its end.",
            ));
        }
        Ok(value.re)
    }

    fn sum(&mut self) -> Result<ExactComplex, CellError> {
        let start = self.span.start;
        let mut total = self.product(Place::Clear)?;
        loop {
            let minus = match self.token {
                Token::Plus => false,
                Token::Minus => true,
                _ => return Ok(total),
            };
            self.advance()?;
            let next = self.product(Place::Clear)?;
            let sum = if minus {
                total.sub(&next)
            } else {
                total.add(&next)
            };
            total = sum.map_err(|e| CellError::arithmetic(e, start..self.last_end))?;
        }
    }

    fn product(&mut self, place: Place) -> Result<ExactComplex, CellError> {
        let start = self.span.start;
        let mut total = self.signed(place)?;
        loop {
            let over = match self.token {
                Token::Times => false,
                Token::Over => true,
                _ => return Ok(total),
            };
            self.advance()?;
            let divisor_start = self.span.start;
            let next = self.signed(if over { Place::Doubtful } else { Place::Clear })?;
            let (result, from) = if over {
                (
                    total.div(&next),
                    if next.is_zero() { divisor_start } else { start },
                )
            } else {
                (total.mul(&next), start)
            };
            total = result.map_err(|e| CellError::arithmetic(e, from..self.last_end))?;
        }
    }

    fn signed(&mut self, place: Place) -> Result<ExactComplex, CellError> {
        match self.token {
            Token::Minus => {
                self.advance()?;
                Ok(self.deeper(|p| p.signed(place))?.neg())
            }
            Token::Plus => {
                self.advance()?;
                self.deeper(|p| p.signed(place))
            }
            _ => self.implicit(place),
        }
    }

    /// A power, or a number written directly before what it multiplies.
    fn implicit(&mut self, place: Place) -> Result<ExactComplex, CellError> {
        let start = self.span.start;
        let bare_number = matches!(self.token, Token::Number(_));
        let mut total = self.power()?;
        let mut follows = bare_number && self.starts_factor();
        while follows {
            if place == Place::Doubtful {
                return Err(CellError::new(
                    CellErrorKind::AmbiguousProduct,
                    start..self.span.end,
                    "This product has no sign and can be read in two ways; write · and \
                     parentheses, as in 1/(2·π) or (1/2)·π.",
                ));
            }
            if matches!(self.token, Token::Open) {
                self.refuse_concise_form(start)?;
            }
            let rooted = matches!(self.token, Token::RootSign | Token::RootWord | Token::Open);
            let next = self.power()?;
            total = total
                .mul(&next)
                .map_err(|e| CellError::arithmetic(e, start..self.last_end))?;
            follows = !rooted && matches!(self.token, Token::Pi | Token::Imaginary);
        }
        Ok(total)
    }

    /// Whether the word at hand can follow a number without a sign.
    fn starts_factor(&self) -> bool {
        matches!(
            self.token,
            Token::Name(_)
                | Token::Pi
                | Token::Imaginary
                | Token::RootSign
                | Token::RootWord
                | Token::Open
        )
    }

    /// Refuses 12.5(1), which may be a product or the short form of 12.5 ± 0.1.
    fn refuse_concise_form(&self, start: usize) -> Result<(), CellError> {
        let inside = self.lexer.rest(self.span.end);
        let digits = inside.trim_start_matches(|c: char| c.is_ascii_digit());
        if digits.len() < inside.len() && digits.starts_with(')') {
            let end = self.span.end + inside.len() - digits.len() + 1;
            return Err(CellError::new(
                CellErrorKind::AmbiguousProduct,
                start..end,
                "Digits in parentheses may be a tolerance or a factor; write ± or · .",
            ));
        }
        Ok(())
    }

    fn power(&mut self) -> Result<ExactComplex, CellError> {
        let start = self.span.start;
        let base = self.atom()?;
        let exponent = match self.token {
            Token::Raised(n) => {
                self.advance()?;
                n
            }
            Token::Caret => {
                self.advance()?;
                self.exponent()?
            }
            _ => return Ok(base),
        };
        base.pow(exponent)
            .map_err(|e| CellError::arithmetic(e, start..self.last_end))
    }

    fn exponent(&mut self) -> Result<i32, CellError> {
        let start = self.span.start;
        let value = self.deeper(|p| p.signed(Place::Doubtful))?;
        let span = start..self.last_end;
        let whole = value
            .re
            .rational()
            .filter(|r| r.is_int() && value.is_real());
        let Some(r) = whole else {
            return Err(CellError::new(
                CellErrorKind::Exponent,
                span,
                "An exponent must be a whole number; for a square root write sqrt( ).",
            ));
        };
        let size = i32::try_from(r.numerator().clone().unsigned_abs()).unwrap_or(i32::MAX);
        if size > MAX_POWER {
            return Err(CellError::new(
                CellErrorKind::Exponent,
                span,
                format!("An exponent may be {MAX_POWER} at most."),
            ));
        }
        Ok(if value.re.is_negative() { -size } else { size })
    }

    fn atom(&mut self) -> Result<ExactComplex, CellError> {
        match self.token {
            Token::Number(_) => match self.advance()? {
                Token::Number(value) => Ok(ExactComplex::from(value)),
                _ => Ok(ExactComplex::ZERO),
            },
            Token::Name(name) => {
                let value = self.named(name)?;
                self.advance()?;
                if matches!(self.token, Token::Open) {
                    return Err(self.error(
                        CellErrorKind::MissingOperator,
                        format!("“{name}(” is no function here; write · for a product."),
                    ));
                }
                Ok(value)
            }
            Token::Pi => {
                self.advance()?;
                Ok(ExactComplex::from(ExactReal::pi()))
            }
            Token::Imaginary => {
                self.advance()?;
                Ok(ExactComplex::I)
            }
            Token::Open => self.group(),
            Token::RootSign | Token::RootWord => self.root(),
            Token::End => Err(self.error(
                CellErrorKind::UnexpectedEnd,
                "The cell ends where a number was expected.",
            )),
            Token::PlusMinus => Err(self.error(
                CellErrorKind::MisplacedTolerance,
                "A value must stand before its tolerance.",
            )),
            _ => Err(self.error(CellErrorKind::UnexpectedSign, "A number was expected here.")),
        }
    }

    fn named(&self, name: &str) -> Result<ExactComplex, CellError> {
        match self.parameters.lookup(name) {
            Lookup::Value(value) => Ok(value.clone()),
            Lookup::Valueless => Err(self.error(
                CellErrorKind::ValuelessName,
                format!("{name} has no value yet; see the list of parameters."),
            )),
            Lookup::Unknown => Err(self.error(
                CellErrorKind::UnknownName,
                format!("“{name}” is neither a number nor the name of a parameter."),
            )),
        }
    }

    fn group(&mut self) -> Result<ExactComplex, CellError> {
        let opened = self.span.clone();
        self.advance()?;
        let value = self.deeper(Self::sum)?;
        match self.token {
            Token::Close => {
                self.advance()?;
                Ok(value)
            }
            Token::PlusMinus => Err(self.error(
                CellErrorKind::MisplacedTolerance,
                "A tolerance belongs at the end of the cell, outside parentheses.",
            )),
            Token::End => Err(CellError::new(
                CellErrorKind::UnclosedParenthesis,
                opened,
                "This parenthesis is never closed.",
            )),
            _ => Err(self.missing_operator()),
        }
    }

    fn root(&mut self) -> Result<ExactComplex, CellError> {
        let start = self.span.start;
        let is_word = matches!(self.advance()?, Token::RootWord);
        if is_word && !matches!(self.token, Token::Open) {
            return Err(self.error(
                CellErrorKind::UnexpectedSign,
                "sqrt must be followed by a parenthesis, as in sqrt(2).",
            ));
        }
        let inner = if is_word {
            self.group()?
        } else {
            self.deeper(Self::atom)?
        };
        let span = start..self.last_end;
        if !inner.is_real() {
            return Err(CellError::new(
                CellErrorKind::ComplexRoot,
                span,
                "The square root of a number that is not real has two values; write the one meant.",
            ));
        }
        let root = inner
            .re
            .sqrt()
            .map_err(|e| CellError::arithmetic(e, span))?;
        Ok(ExactComplex::from(root))
    }
}
