//! Exact real numbers, as typed.
//!
//! A cell of the pasted matrix is kept as the number its text denotes, not as
//! the double nearest to it: what is proved later concerns the typed matrix.

use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

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
}

impl ExactReal {
    /// Exact zero.
    pub const ZERO: Self = Self::Decimal {
        digits: 0,
        exponent: 0,
    };

    /// The number as a ratio of integers; `None` when it is irrational.
    pub fn rational(&self) -> Option<RBig> {
        match self {
            Self::Decimal { digits, exponent } => {
                let power = UBig::from(10u8).pow(exponent.unsigned_abs() as usize);
                Some(if *exponent >= 0 {
                    RBig::from(IBig::from(*digits) * IBig::from(power))
                } else {
                    RBig::from_parts(IBig::from(*digits), power)
                })
            }
            Self::Binary(x) => RBig::try_from(*x).ok(),
            Self::Rational(r) => Some((**r).clone()),
        }
    }

    /// Whether the number is exactly zero.
    pub fn is_zero(&self) -> bool {
        match self {
            Self::Decimal { digits, .. } => *digits == 0,
            Self::Binary(x) => *x == 0.0,
            Self::Rational(r) => r.is_zero(),
        }
    }

    /// The double nearest to self · 2^−scale (ties to even; subnormal results
    /// and overflow as in IEEE 754).
    pub fn nearest(&self, scale: i32) -> f64 {
        match self {
            Self::Decimal { digits: 0, .. } => 0.0,
            Self::Decimal { digits, exponent } if scale == 0 => {
                // Rust's own parser is correctly rounded on every target.
                format!("{digits}e{exponent}").parse().unwrap_or(f64::NAN)
            }
            Self::Binary(x) if scale == 0 => *x,
            _ => match self.rational() {
                Some(r) => scaled(r, -scale).to_f64().value(),
                None => f64::NAN,
            },
        }
    }
}

/// r · 2^power.
fn scaled(r: RBig, power: i32) -> RBig {
    let two = UBig::ONE << (power.unsigned_abs() as usize);
    if power >= 0 {
        r * RBig::from(two)
    } else {
        r / RBig::from(two)
    }
}
