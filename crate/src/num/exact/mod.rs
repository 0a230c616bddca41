//! Exact real numbers, as typed.
//!
//! A cell of the pasted matrix is kept as the number its text denotes, not as
//! the double nearest to it: what is proved later concerns the typed matrix.
//!
//! Rational numbers stay rational. Surds and π are carried in a normal form
//! or, outside it, as an expression that can be enclosed to any precision
//! ([`Irrational`]). Nothing here panics on a number that
//! [`crate::entry::cell::parse_cell`] lets through; every operation that can
//! fail or grow without bound answers an [`ArithmeticError`].

mod arithmetic;
mod dyadic;
mod irrational;
mod rounding;
mod terms;
mod text;
mod wide;

#[cfg(test)]
mod tests;

pub use dyadic::DyadicInterval;
pub use irrational::Irrational;
pub use rounding::Expansion;

use dashu_base::Signed;
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use std::sync::Arc;

/// Numbers whose numerator or denominator needs more bits than this are
/// refused (about 10,000 decimal digits).
pub const MAX_BITS: usize = 1 << 15;

/// One exact real number. Most cells are short decimals, so those are stored
/// inline (16 bytes); everything else is boxed.
#[derive(Clone, Debug)]
pub enum ExactReal {
    /// digits · 10^exponent.
    Decimal {
        /// Signed significand.
        digits: i64,
        /// Power of ten.
        exponent: i16,
    },
    /// A finite double, meant exactly (from a binary file).
    Binary(f64),
    /// A rational number that fits neither of the above.
    Rational(Box<RBig>),
    /// A number that is irrational, or not recognised as rational.
    Irrational(Arc<Irrational>),
}

/// Why an exact operation has no answer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ArithmeticError {
    /// The divisor is exactly zero.
    DivisionByZero,
    /// The square root of a negative number.
    NegativeRoot,
    /// The exact result would need more than [`MAX_BITS`] bits, or an
    /// expression of surds grew beyond its bound.
    TooLarge,
    /// An expression of nested surds could not be told from zero at the
    /// greatest precision tried.
    Undecided,
}

impl std::fmt::Display for ArithmeticError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(match self {
            Self::DivisionByZero => "division by zero",
            Self::NegativeRoot => "the square root of a negative number",
            Self::TooLarge => {
                "the exact value is too long to carry (about 10,000 digits is the limit)"
            }
            Self::Undecided => "this expression cannot be told from zero",
        })
    }
}

impl std::error::Error for ArithmeticError {}

impl ExactReal {
    /// Exact zero.
    pub const ZERO: Self = Self::Decimal {
        digits: 0,
        exponent: 0,
    };
    /// Exact one.
    pub const ONE: Self = Self::Decimal {
        digits: 1,
        exponent: 0,
    };

    /// π.
    pub fn pi() -> Self {
        Self::Irrational(Arc::new(Irrational::pi()))
    }

    /// The number as a ratio of integers; `None` when it is irrational or not
    /// recognised as rational.
    pub fn rational(&self) -> Option<RBig> {
        match self {
            Self::Decimal { digits, exponent } => {
                let power = UBig::from(10u8).pow(usize::from(exponent.unsigned_abs()));
                Some(if *exponent >= 0 {
                    RBig::from(IBig::from(*digits) * IBig::from(power))
                } else {
                    RBig::from_parts(IBig::from(*digits), power)
                })
            }
            Self::Binary(x) => Some(rounding::ratio_of_double(*x)),
            Self::Rational(r) => Some((**r).clone()),
            Self::Irrational(_) => None,
        }
    }

    /// Whether the number is known as a ratio of integers.
    pub fn is_rational(&self) -> bool {
        !matches!(self, Self::Irrational(_))
    }

    /// Whether the number is exactly zero. An [`Irrational`] is never zero:
    /// it is built only after zero has been ruled out.
    pub fn is_zero(&self) -> bool {
        match self {
            Self::Decimal { digits, .. } => *digits == 0,
            Self::Binary(x) => *x == 0.0,
            Self::Rational(r) => r.is_zero(),
            Self::Irrational(_) => false,
        }
    }

    /// Whether the number is less than zero.
    pub fn is_negative(&self) -> bool {
        match self {
            Self::Decimal { digits, .. } => *digits < 0,
            Self::Binary(x) => *x < 0.0,
            Self::Rational(r) => r.is_negative(),
            Self::Irrational(x) => x.is_negative(),
        }
    }

    /// Whether the two are the same number: `Some(true)` and `Some(false)`
    /// are certain; `None` when two expressions of nested surds agree to the
    /// greatest precision tried and no rule shows them equal.
    pub fn equals(&self, other: &Self) -> Option<bool> {
        match (self, other) {
            (
                Self::Decimal {
                    digits: a,
                    exponent: e,
                },
                Self::Decimal {
                    digits: b,
                    exponent: f,
                },
            ) if e == f => Some(a == b),
            (Self::Binary(a), Self::Binary(b)) => Some(a == b),
            (Self::Irrational(a), Self::Irrational(b)) if a == b => Some(true),
            _ => match self.sub(other) {
                Ok(difference) => Some(difference.is_zero()),
                Err(_) => None,
            },
        }
    }

    /// Bounds of the number: an interval with dyadic ends that certainly
    /// contains it, at most about 2^−`bits` of its size wide (a point when
    /// the number is a dyadic rational of few bits).
    ///
    /// Wider only for an expression of nested surds that cancels beyond the
    /// greatest precision tried.
    pub fn enclose(&self, bits: usize) -> DyadicInterval {
        match self {
            Self::Irrational(x) => x.enclose(bits),
            _ => {
                let r = self.rational().unwrap_or(RBig::ZERO);
                DyadicInterval::of_ratio(&r, bits + 2)
            }
        }
    }
}

impl From<i64> for ExactReal {
    fn from(digits: i64) -> Self {
        Self::Decimal {
            digits,
            exponent: 0,
        }
    }
}

impl From<RBig> for ExactReal {
    fn from(r: RBig) -> Self {
        if r.is_int() {
            if let Ok(digits) = i64::try_from(r.numerator()) {
                return Self::Decimal {
                    digits,
                    exponent: 0,
                };
            }
        }
        Self::Rational(Box::new(r))
    }
}
