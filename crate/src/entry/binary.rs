//! Binary floating-point numbers as text that denotes them exactly, and back.
//!
//! Notation: a finite number is ± m · 2^e with integers m and e.

use super::cell::{parse_cell, CellOptions, Parameters};
use crate::num::ExactReal;
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// A number of one of the IEEE 754 formats, or of the 80-bit extended one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Float {
    /// ± magnitude · 2^exponent.
    Finite {
        negative: bool,
        magnitude: u128,
        exponent: i32,
    },
    Infinite {
        negative: bool,
    },
    NotANumber,
}

impl Float {
    /// From the bits of a number of `width` bytes: 2, 4, 8 (binary16, 32, 64)
    /// or 16, which are taken in the format given.
    pub fn from_bits(bits: u128, width: usize, sixteen: Sixteen) -> Self {
        match (width, sixteen) {
            (2, _) => Self::interchange(bits, 10, 5),
            (4, _) => Self::interchange(bits, 23, 8),
            (8, _) => Self::interchange(bits, 52, 11),
            (_, Sixteen::Extended) => Self::extended(bits),
            (_, Sixteen::Quadruple) => Self::interchange(bits, 112, 15),
        }
    }

    /// Whether a double could hold the number, if not exactly: zero, infinite,
    /// not a number, or of ordinary size.
    fn is_plausible(self) -> bool {
        match self {
            Self::Finite { magnitude: 0, .. } | Self::Infinite { .. } | Self::NotANumber => true,
            Self::Finite {
                magnitude,
                exponent,
                ..
            } => (exponent + 128 - magnitude.leading_zeros() as i32).abs() <= LARGEST_EXPONENT,
        }
    }

    /// An interchange format with these numbers of fraction and exponent bits.
    fn interchange(bits: u128, fraction_bits: u32, exponent_bits: u32) -> Self {
        let negative = (bits >> (fraction_bits + exponent_bits)) & 1 == 1;
        let fraction = bits & ((1 << fraction_bits) - 1);
        let top = (1u32 << exponent_bits) - 1;
        let biased = (bits >> fraction_bits) as u32 & top;
        let bias = (top / 2) as i32;
        if biased == top {
            return if fraction == 0 {
                Self::Infinite { negative }
            } else {
                Self::NotANumber
            };
        }
        let implicit = if biased == 0 { 0 } else { 1 << fraction_bits };
        let exponent = biased.max(1) as i32 - bias - fraction_bits as i32;
        Self::Finite {
            negative,
            magnitude: fraction | implicit,
            exponent,
        }
    }

    /// The 80-bit format, whose leading bit is explicit.
    fn extended(bits: u128) -> Self {
        let magnitude = bits & u128::from(u64::MAX);
        let biased = (bits >> 64) as i32 & 0x7FFF;
        let negative = (bits >> 79) & 1 == 1;
        if biased == 0x7FFF {
            return if magnitude << 65 == 0 {
                Self::Infinite { negative }
            } else {
                Self::NotANumber
            };
        }
        Self::Finite {
            negative,
            magnitude,
            exponent: biased.max(1) - 16383 - 63,
        }
    }
}

/// What numbers of sixteen bytes are.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Sixteen {
    /// The 80-bit extended format and six bytes of padding, of any content.
    Extended,
    /// IEEE 754 binary128.
    Quadruple,
}

impl Sixteen {
    /// Which of the two the numbers of a file are; the file does not say.
    ///
    /// They are extended (as on most machines) unless read so some number is of
    /// absurd size, or all are zero with something in the padding, while read
    /// as binary128 every one is of ordinary size.
    pub fn of(numbers: impl Iterator<Item = u128> + Clone) -> Self {
        let plausible = |format: Self| {
            numbers
                .clone()
                .all(|bits| Float::from_bits(bits, 16, format).is_plausible())
        };
        let only_padding =
            || numbers.clone().all(|bits| bits << 48 == 0) && numbers.clone().any(|bits| bits != 0);
        if plausible(Self::Quadruple) && (!plausible(Self::Extended) || only_padding()) {
            Self::Quadruple
        } else {
            Self::Extended
        }
    }
}

/// How numbers are written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Style {
    /// In decimal where the exact decimal has at most this many places.
    Decimal { places: i32 },
}

impl Style {
    /// Long exact decimals only in tables that people read cell by cell; in
    /// larger ones they would be several times the file.
    pub fn for_cells(cells: usize) -> Self {
        Self::Decimal {
            places: if cells <= 1024 { 60 } else { 16 },
        }
    }
}

/// Whole part bits up to which a number is written in decimal.
const WHOLE_BITS: u32 = 80;

/// Writes the number exactly.
pub(crate) fn write(number: Float, style: Style, out: &mut String) {
    let (negative, magnitude, exponent) = match number {
        Float::NotANumber => return out.push_str("nan"),
        Float::Infinite { negative } => return out.push_str(if negative { "-inf" } else { "inf" }),
        Float::Finite {
            negative,
            magnitude,
            exponent,
        } => (negative, magnitude, exponent),
    };
    if magnitude == 0 {
        return out.push('0');
    }
    let twos = magnitude.trailing_zeros();
    let (magnitude, exponent) = (magnitude >> twos, exponent + twos as i32);
    if negative {
        out.push('-');
    }
    let Style::Decimal { places } = style;
    let bits = (128 - magnitude.leading_zeros()) as i32 + exponent;
    if -exponent <= places && bits <= WHOLE_BITS as i32 {
        write_decimal(magnitude, exponent, out);
    } else {
        write_hexadecimal(magnitude, exponent, out);
    }
}

/// Writes `re + im i`.
pub(crate) fn write_complex(re: Float, im: Float, style: Style, out: &mut String) {
    write(re, style, out);
    let mut imaginary = String::new();
    write(im, style, &mut imaginary);
    if !imaginary.starts_with('-') {
        out.push('+');
    }
    out.push_str(&imaginary);
    out.push('i');
}

/// m · 2^e in decimal: with k = −e > 0 it is m · 5^k · 10^−k.
fn write_decimal(magnitude: u128, exponent: i32, out: &mut String) {
    let m = UBig::from(magnitude);
    if exponent >= 0 {
        out.push_str(&(m << exponent as usize).to_string());
        return;
    }
    let places = exponent.unsigned_abs() as usize;
    let digits = (m * UBig::from(5u8).pow(places)).to_string();
    let digits = format!("{digits:0>width$}", width = places + 1);
    let (whole, fraction) = digits.split_at(digits.len() - places);
    out.push_str(whole);
    out.push('.');
    out.push_str(fraction);
}

/// As C writes it: one digit, the fraction, the power of two.
fn write_hexadecimal(magnitude: u128, exponent: i32, out: &mut String) {
    let below = 127 - magnitude.leading_zeros();
    // The bits after the first, moved up to whole hexadecimal digits.
    let digits = below.div_ceil(4);
    let fraction = (magnitude ^ (1 << below)) << (4 * digits - below);
    out.push_str("0x1");
    if fraction != 0 {
        out.push('.');
        out.push_str(format!("{fraction:0width$x}", width = digits as usize).trim_end_matches('0'));
    }
    out.push_str(&format!("p{}", exponent + below as i32));
}

/// Hexadecimal digits of a number, exponents beyond which no double lies.
const MOST_DIGITS: usize = 32;
const LARGEST_EXPONENT: i32 = 1100;

/// Reads a number in this notation, with its sign; `None` for anything else
/// and for numbers that no double comes near.
pub(crate) fn parse(text: &str) -> Option<ExactReal> {
    let unsigned = text.trim_start_matches(['+', '-']);
    if text.len() - unsigned.len() > 1 {
        return None;
    }
    let digits = unsigned
        .strip_prefix("0x")
        .or_else(|| unsigned.strip_prefix("0X"))?;
    let (mantissa, exponent) = digits.split_once(['p', 'P'])?;
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    let length = whole.len() + fraction.len();
    if length == 0 || length > MOST_DIGITS {
        return None;
    }
    let mut magnitude: u128 = 0;
    for digit in whole.chars().chain(fraction.chars()) {
        magnitude = magnitude << 4 | u128::from(digit.to_digit(16)?);
    }
    let exponent = exponent
        .parse::<i32>()
        .ok()
        .filter(|e| e.abs() <= 2 * LARGEST_EXPONENT)?;
    let exponent = exponent - 4 * fraction.len() as i32;
    let top = (128 - magnitude.leading_zeros()) as i32 + exponent;
    if magnitude != 0 && top.abs() > LARGEST_EXPONENT {
        return None;
    }
    Some(exact(text.starts_with('-'), magnitude, exponent))
}

/// ± m · 2^e, as a double where it is one.
fn exact(negative: bool, magnitude: u128, exponent: i32) -> ExactReal {
    if magnitude == 0 {
        return ExactReal::ZERO;
    }
    let mut ratio = RBig::from(IBig::from(magnitude));
    let power = RBig::from(UBig::ONE << exponent.unsigned_abs() as usize);
    ratio = if exponent >= 0 {
        ratio * power
    } else {
        ratio / power
    };
    if negative {
        ratio = -ratio;
    }
    let double = ratio.to_f64().value();
    if double.is_finite() && RBig::try_from(double).is_ok_and(|same| same == ratio) {
        ExactReal::Binary(double)
    } else {
        ExactReal::Rational(Box::new(ratio))
    }
}

/// Reads a real number, or the sum of one and an imaginary one, in this
/// notation.
pub(crate) fn parse_complex(text: &str) -> Option<(ExactReal, ExactReal)> {
    let Some(body) = text.strip_suffix(['i', 'j']) else {
        return parse(text).map(|re| (re, ExactReal::ZERO));
    };
    // The sign that parts them follows a digit; that of an exponent follows p.
    let split = body
        .char_indices()
        .rev()
        .find(|&(at, c)| matches!(c, '+' | '-') && at > 0 && !body[..at].ends_with(['p', 'P']));
    match split {
        None => parse(body).map(|im| (ExactReal::ZERO, im)),
        Some((at, _)) => Some((parse_part(&body[..at])?, parse_part(&body[at..])?)),
    }
}

/// One part of a complex number: its other part may be short enough to be a
/// plain decimal.
fn parse_part(text: &str) -> Option<ExactReal> {
    parse(text).or_else(|| {
        let value = parse_cell(text, &Parameters::none(), CellOptions::default()).ok()?;
        value.is_real().then_some(value.re)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn written(x: f64, places: i32) -> String {
        let mut out = String::new();
        write(
            Float::from_bits(u128::from(x.to_bits()), 8, Sixteen::Extended),
            Style::Decimal { places },
            &mut out,
        );
        out
    }

    proptest! {
        #[test]
        fn hexadecimal_text_reads_back_to_the_same_double(bits in any::<u64>()) {
            let x = f64::from_bits(bits);
            prop_assume!(x.is_finite());
            let text = written(x, -2000);
            let back = parse(&text).or_else(|| (text == "0").then_some(ExactReal::ZERO));
            prop_assert_eq!(back.map(|value| value.nearest(0)), Some(x), "{} as {}", x, text);
        }

        #[test]
        fn decimal_text_is_the_exact_double(x in -1e6f64..1e6) {
            let text = written(x, 2000);
            // Rust prints as many exact digits as it is asked for.
            let exact = format!("{x:.1100}");
            let exact = exact.trim_end_matches('0').trim_end_matches('.');
            prop_assert_eq!(&text, exact);
        }
    }

    #[test]
    fn texts_that_are_no_such_numbers() {
        for text in [
            "0x",
            "0x1",
            "0xp1",
            "1p3",
            "0x1p",
            "--0x1p0",
            "0xgp0",
            "0x1p99999",
            "0x1.p+-1",
            "x",
        ] {
            assert!(parse(text).is_none(), "{text}");
        }
    }

    #[test]
    fn sixteen_bytes_are_told_apart() {
        let tenth_128: u128 = 0x3FFB_9999_9999_9999_9999_9999_9999_999A;
        let one_128: u128 = 0x3FFF << 112;
        let one_80: u128 = 0x3FFF << 64 | 1 << 63;
        let garbage: u128 = 0xFEDE << 112;
        for (numbers, wanted) in [
            (vec![one_80, 0], Sixteen::Extended),
            (vec![one_80 | garbage, 0], Sixteen::Extended),
            (vec![0, 0], Sixteen::Extended),
            (vec![one_128, 0], Sixteen::Quadruple),
            (vec![one_128, tenth_128], Sixteen::Quadruple),
        ] {
            assert_eq!(Sixteen::of(numbers.iter().copied()), wanted, "{numbers:x?}");
        }
    }

    #[test]
    fn complex_numbers_in_both_notations() {
        for (text, re, im) in [
            ("0x1p-1+0x1.8p1i", 0.5, 3.0),
            ("-0x1p-1-2i", -0.5, -2.0),
            ("0x1p0i", 0.0, 1.0),
            ("0x1p4", 16.0, 0.0),
            ("0.5+0x1p-2i", 0.5, 0.25),
        ] {
            let (found_re, found_im) = parse_complex(text).unwrap_or_else(|| panic!("{text}"));
            assert_eq!(
                (found_re.nearest(0), found_im.nearest(0)),
                (re, im),
                "{text}"
            );
        }
    }
}
