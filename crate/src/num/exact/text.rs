//! Exact numbers as text. What is written parses back to the same number in
//! the grammar of cells.

use super::terms::{Term, Terms};
use super::ExactReal;
use dashu_base::{Abs, Signed, UnsignedAbs};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use std::fmt::{self, Display, Formatter, Write};

/// Zeros written before an exponent is used instead.
const PLAIN_ZEROS: usize = 6;

impl Display for ExactReal {
    fn fmt(&self, f: &mut Formatter<'_>) -> fmt::Result {
        match self {
            Self::Decimal { digits, exponent } => write_decimal(*digits, *exponent, f),
            Self::Binary(x) => write_ratio(&super::rounding::ratio_of_double(*x), f),
            Self::Rational(r) => write_ratio(r, f),
            Self::Irrational(x) => x.write(f),
        }
    }
}

fn write_decimal(digits: i64, exponent: i16, f: &mut Formatter<'_>) -> fmt::Result {
    if digits < 0 {
        f.write_char('-')?;
    }
    write_scaled(&digits.unsigned_abs().to_string(), i32::from(exponent), f)
}

/// `digits`·10^exponent, plainly where that is short.
fn write_scaled(digits: &str, exponent: i32, f: &mut Formatter<'_>) -> fmt::Result {
    let places = exponent.unsigned_abs() as usize;
    if exponent == 0 {
        return f.write_str(digits);
    }
    if exponent > 0 || places > digits.len() + PLAIN_ZEROS {
        return write!(f, "{digits}e{exponent}");
    }
    if places >= digits.len() {
        f.write_str("0.")?;
        for _ in digits.len()..places {
            f.write_char('0')?;
        }
        return f.write_str(digits);
    }
    let (whole, fraction) = digits.split_at(digits.len() - places);
    write!(f, "{whole}.{fraction}")
}

/// A terminating decimal if it is short, m*2^k for a long dyadic number, else
/// p/q.
fn write_ratio(r: &RBig, f: &mut Formatter<'_>) -> fmt::Result {
    let (top, bottom) = (r.numerator(), r.denominator());
    if bottom.is_one() {
        return write!(f, "{top}");
    }
    if let Some((digits, places)) = terminating(top, bottom) {
        if top.is_negative() {
            f.write_char('-')?;
        }
        return write_scaled(&digits, -places, f);
    }
    if bottom.is_power_of_two_ref() {
        let k = bottom.trailing_zeros().unwrap_or(0);
        return write!(f, "{top}*2^-{k}");
    }
    write!(f, "{top}/{bottom}")
}

trait PowerOfTwo {
    fn is_power_of_two_ref(&self) -> bool;
}

impl PowerOfTwo for UBig {
    fn is_power_of_two_ref(&self) -> bool {
        self.count_ones() == 1
    }
}

/// Digits and number of decimal places when the ratio has at most 30 places.
fn terminating(top: &IBig, bottom: &UBig) -> Option<(String, i32)> {
    let twos = bottom.trailing_zeros().unwrap_or(0);
    let mut rest = bottom.clone() >> twos;
    let mut fives = 0;
    let five = UBig::from(5u8);
    while !rest.is_one() {
        let quotient = &rest / &five;
        if &quotient * &five != rest || fives > 30 {
            return None;
        }
        rest = quotient;
        fives += 1;
    }
    let places = twos.max(fives);
    if places > 30 {
        return None;
    }
    let lifted =
        top.clone().unsigned_abs() * UBig::from(2u8).pow(places - twos) * five.pow(places - fives);
    Some((lifted.to_string(), places as i32))
}

/// A sum of terms c·√d·π^k.
pub(super) fn write_terms(terms: &Terms, f: &mut Formatter<'_>) -> fmt::Result {
    for (i, term) in terms.0.iter().enumerate() {
        if term.factor.is_negative() {
            f.write_char('-')?;
        } else if i > 0 {
            f.write_char('+')?;
        }
        write_term(term, f)?;
    }
    Ok(())
}

/// |c|·√d·π^k.
fn write_term(term: &Term, f: &mut Formatter<'_>) -> fmt::Result {
    let size = term.factor.clone().abs();
    let (top, bottom) = (size.numerator(), size.denominator());
    let mut factors = Vec::new();
    if !top.is_one() || (term.radicand.is_one() && term.pi_power == 0) {
        factors.push(top.to_string());
    }
    if !term.radicand.is_one() {
        factors.push(format!("sqrt({})", term.radicand));
    }
    match term.pi_power {
        0 => {}
        1 => factors.push("pi".to_owned()),
        k => factors.push(format!("pi^{k}")),
    }
    if factors.is_empty() {
        factors.push("1".to_owned());
    }
    f.write_str(&factors.join("*"))?;
    if bottom.is_one() {
        Ok(())
    } else {
        write!(f, "/{bottom}")
    }
}
