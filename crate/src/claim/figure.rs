//! Stated figures and the interval each one claims.
//!
//! The rules: a decimal claims half a unit of its last digit either way
//! (rounded) or one unit away from zero (truncated); `±` and the bracketed
//! form 3.414(2) claim what they say; a figure without decimals is meant
//! exactly, unless it stands beside decimals, when it is read to as many places
//! as the most precise of them. Ends belong to the interval.

use dashu_base::{Abs, Sign};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use crate::entry::cell::{parse_cell, CellOptions, CellValue, Parameters};
use crate::num::ExactReal;
use crate::report::decimal::{leading_place, ten_to};

/// How stated digits are to be understood.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Digits {
    /// The last digit is rounded.
    Rounded,
    /// The last digit is cut off.
    Truncated,
    /// Every figure is meant exactly.
    Exact,
    /// So many significant figures, rounded, whatever is typed.
    Significant(u32),
    /// Every figure is meant within this.
    Within(RBig),
}

/// One real part of a figure as typed.
#[derive(Clone, Debug)]
struct Part {
    value: RBig,
    negative: bool,
    /// Power of ten of the last digit, where decimals or an exponent show one.
    place: Option<i32>,
    /// Explicit tolerance.
    within: Option<RBig>,
}

/// An interval with the number stated in it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Span {
    /// The number typed.
    pub stated: RBig,
    /// Least number claimed.
    pub low: RBig,
    /// Greatest number claimed.
    pub high: RBig,
}

impl Span {
    /// Whether one number only is claimed.
    pub fn is_exact(&self) -> bool {
        self.low == self.high
    }

    /// Middle of the interval.
    pub fn centre(&self) -> RBig {
        (&self.low + &self.high) / RBig::from(2)
    }

    /// Half its width.
    pub fn half_width(&self) -> RBig {
        (&self.high - &self.low) / RBig::from(2)
    }
}

/// One stated figure.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Figure {
    /// As typed.
    pub text: String,
    /// What it claims of the real part.
    pub re: Span,
    /// What it claims of the imaginary part.
    pub im: Span,
}

impl Figure {
    /// Whether one number only is claimed.
    pub fn is_exact(&self) -> bool {
        self.re.is_exact() && self.im.is_exact()
    }

    /// Whether an imaginary part is stated.
    pub fn is_complex(&self) -> bool {
        !self.im.stated.is_zero()
    }
}

/// A figure read but not yet given its interval.
#[derive(Clone, Debug)]
pub(super) struct Raw {
    text: String,
    re: Part,
    im: Part,
}

impl Raw {
    /// The same, told as it was typed.
    pub(super) fn typed_as(mut self, text: &str) -> Self {
        text.trim().clone_into(&mut self.text);
        self
    }
}

/// Reads one figure: a number with its printed digits, else any cell of the
/// entry stage's grammar, which is meant exactly (`(3 + √5)/2`). `None` when it
/// is neither.
pub(super) fn raw(text: &str) -> Option<Raw> {
    printed(text).or_else(|| {
        let cell = parse_cell(text, &Parameters::none(), CellOptions::default()).ok()?;
        Some(of_cell(text, &cell))
    })
}

/// Irrational figures are compared to 2,048 bits (about 600 digits).
const IRRATIONAL_BITS: usize = 2_048;

/// A cell of the entry stage as a figure. What is irrational is claimed within
/// its enclosure.
pub(super) fn of_cell(text: &str, cell: &CellValue) -> Raw {
    let within = cell
        .tolerance
        .as_ref()
        .map(|t| t.enclose(IRRATIONAL_BITS).upper_ratio());
    let part = |value: &ExactReal| {
        let (value, loose) = match value.rational() {
            Some(value) => (value, None),
            None => {
                let ends = value.enclose(IRRATIONAL_BITS);
                let (low, high) = (ends.lower_ratio(), ends.upper_ratio());
                (
                    (&low + &high) / RBig::from(2),
                    Some((high - low) / RBig::from(2)),
                )
            }
        };
        let negative = value < RBig::ZERO;
        let within = match (&within, loose) {
            (Some(within), Some(loose)) => Some(within + loose),
            (Some(within), None) => Some(within.clone()),
            (None, loose) => loose,
        };
        Part {
            value,
            negative,
            place: None,
            within,
        }
    };
    Raw {
        text: text.trim().to_owned(),
        re: part(&cell.re),
        im: part(&cell.im),
    }
}

/// Reads a number with its printed digits.
fn printed(text: &str) -> Option<Raw> {
    let text = text.trim();
    let plain: String = text
        .chars()
        .map(|c| match c {
            '−' | '–' | '‐' | '﹣' | '－' => '-',
            other => other,
        })
        .collect();
    let plain = plain.replace("+/-", "±");
    let (number, within) = match plain.split_once('±') {
        Some((number, within)) => (number.trim(), Some(unsigned(within.trim())?.value)),
        None => (plain.trim(), None),
    };
    let (mut re, mut im) = complex(&without_blanks(number)?)?;
    if within.is_some() {
        re.within.clone_from(&within);
        if !im.value.is_zero() {
            im.within = within;
        }
    }
    Some(Raw {
        text: text.to_owned(),
        re,
        im,
    })
}

/// The number without its blanks; `None` where one stands between two digits,
/// since `381 3` is two numbers.
fn without_blanks(number: &str) -> Option<String> {
    let mut compact = String::with_capacity(number.len());
    for word in number.split_whitespace() {
        let joins = |c: Option<char>| c.is_some_and(|c| c.is_ascii_alphanumeric() || c == '.');
        if joins(compact.chars().next_back()) && joins(word.chars().next()) {
            return None;
        }
        compact.push_str(word);
    }
    Some(compact)
}

/// Gives the figures of one claim their intervals.
pub(super) fn spanned(raws: Vec<Raw>, digits: &Digits) -> Vec<Figure> {
    let finest = raws
        .iter()
        .flat_map(|raw| [raw.re.place, raw.im.place])
        .flatten()
        .min();
    let has_complex = raws
        .iter()
        .any(|raw| !raw.im.value.is_zero() || raw.im.place.is_some());
    raws.into_iter()
        .map(|raw| {
            let re = span(&raw.re, digits, finest);
            let im = if has_complex {
                span(&raw.im, digits, finest)
            } else {
                exactly(&RBig::ZERO)
            };
            Figure {
                text: raw.text,
                re,
                im,
            }
        })
        .collect()
}

fn exactly(value: &RBig) -> Span {
    Span {
        stated: value.clone(),
        low: value.clone(),
        high: value.clone(),
    }
}

fn about(value: &RBig, within: &RBig) -> Span {
    Span {
        stated: value.clone(),
        low: value - within,
        high: value + within,
    }
}

fn span(part: &Part, digits: &Digits, finest: Option<i32>) -> Span {
    if let Some(within) = &part.within {
        return about(&part.value, within);
    }
    let place = match digits {
        Digits::Exact => None,
        Digits::Within(within) => return about(&part.value, within),
        Digits::Significant(count) => leading_place(&part.value)
            .map(|leading| leading + 1 - i32::try_from(*count).unwrap_or(i32::MAX)),
        Digits::Rounded | Digits::Truncated => part.place.or(finest),
    };
    let Some(place) = place else {
        return exactly(&part.value);
    };
    let unit = ten_to(place);
    match digits {
        Digits::Truncated if part.value.is_zero() && part.place.is_none() => {
            about(&part.value, &unit)
        }
        Digits::Truncated if part.negative => Span {
            stated: part.value.clone(),
            low: &part.value - unit,
            high: part.value.clone(),
        },
        Digits::Truncated => Span {
            stated: part.value.clone(),
            low: part.value.clone(),
            high: &part.value + unit,
        },
        _ => about(&part.value, &(unit / RBig::from(2))),
    }
}

/// Real and imaginary part of `a`, `bi`, `a+bi`, `i`.
fn complex(text: &str) -> Option<(Part, Part)> {
    let nothing = Part {
        value: RBig::ZERO,
        negative: false,
        place: None,
        within: None,
    };
    let Some(body) = text.strip_suffix(['i', 'j']) else {
        return Some((signed(text)?, nothing));
    };
    let split = body
        .char_indices()
        .rev()
        .find(|&(at, c)| matches!(c, '+' | '-') && !body[..at].ends_with(['e', 'E']))
        .map_or(0, |(at, _)| at);
    let (re, im) = body.split_at(split);
    let re = if re.is_empty() { nothing } else { signed(re)? };
    let im = if matches!(im, "" | "+" | "-") {
        format!("{im}1")
    } else {
        im.to_owned()
    };
    Some((re, signed(&im)?))
}

fn signed(text: &str) -> Option<Part> {
    let (negative, rest) = match text.strip_prefix('-') {
        Some(rest) => (true, rest),
        None => (false, text.strip_prefix('+').unwrap_or(text)),
    };
    let mut part = unsigned(rest)?;
    if negative {
        part.value = -part.value;
        part.negative = true;
    }
    Some(part)
}

/// A decimal, a decimal with a bracketed uncertainty, or a fraction.
fn unsigned(text: &str) -> Option<Part> {
    if let Some((top, bottom)) = text.split_once('/') {
        let (top, bottom) = (decimal(top)?, decimal(bottom)?);
        if bottom.0.is_zero() {
            return None;
        }
        return Some(Part {
            value: top.0 / bottom.0,
            negative: false,
            place: None,
            within: None,
        });
    }
    if let Some((number, rest)) = text.split_once('(') {
        let (inside, exponent) = rest.split_once(')')?;
        let (value, place) = decimal(&format!("{number}{exponent}"))?;
        if inside.is_empty() || !inside.bytes().all(|b| b.is_ascii_digit()) {
            return None;
        }
        let units = RBig::from(inside.parse::<UBig>().ok()?);
        let within = Some(units * ten_to(place.unwrap_or(0)));
        return Some(Part {
            value,
            negative: false,
            place,
            within,
        });
    }
    let (value, place) = decimal(text)?;
    Some(Part {
        value,
        negative: false,
        place,
        within: None,
    })
}

/// Longest decimal accepted, in characters, and largest exponent: figures are
/// short, and a longer one would only cost time.
const MAX_LENGTH: usize = 2_000;
const MAX_EXPONENT: i32 = 5_000;

/// An unsigned decimal and the place of its last digit, if decimals or an
/// exponent show it.
fn decimal(text: &str) -> Option<(RBig, Option<i32>)> {
    if text.len() > MAX_LENGTH {
        return None;
    }
    let (mantissa, exponent) = match text.find(['e', 'E']) {
        Some(at) => (&text[..at], Some(text[at + 1..].parse::<i32>().ok()?)),
        None => (text, None),
    };
    if exponent.is_some_and(|e| e.abs() > MAX_EXPONENT) {
        return None;
    }
    let (whole, fraction) = match mantissa.split_once('.') {
        Some((whole, fraction)) => (whole, Some(fraction)),
        None => (mantissa, None),
    };
    let digits = format!("{whole}{}", fraction.unwrap_or(""));
    if digits.is_empty() || !digits.bytes().all(|b| b.is_ascii_digit()) {
        return None;
    }
    let count = i32::try_from(fraction.map_or(0, str::len)).ok()?;
    let place = exponent.unwrap_or(0) - count;
    let value = RBig::from(IBig::from_parts(Sign::Positive, digits.parse().ok()?)) * ten_to(place);
    let shown = exponent.is_some() || fraction.is_some_and(|f| !f.is_empty());
    Some((value, shown.then_some(place)))
}

/// |x|.
pub(super) fn size(x: &RBig) -> RBig {
    x.clone().abs()
}
