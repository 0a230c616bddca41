//! Exact arithmetic. Short decimals take a path without big integers.

use super::irrational::Irrational;
use super::terms::bounded;
use super::{ArithmeticError, ExactReal, MAX_BITS};
use dashu_base::{BitTest, Signed};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

impl ExactReal {
    fn ratio_or_zero(&self) -> RBig {
        self.rational().unwrap_or(RBig::ZERO)
    }

    /// −x.
    pub fn neg(&self) -> Self {
        match self {
            Self::Decimal { digits, exponent } => match digits.checked_neg() {
                Some(digits) => Self::Decimal {
                    digits,
                    exponent: *exponent,
                },
                None => Self::from(-self.ratio_or_zero()),
            },
            Self::Binary(x) => Self::Binary(-x),
            Self::Rational(r) => Self::Rational(Box::new(-(**r).clone())),
            Self::Irrational(_) => match self.mul(&Self::from(-1)) {
                Ok(x) => x,
                // A change of sign adds one node at most; at the very bound on
                // nodes the expression is kept whole through the normal road.
                Err(_) => Irrational::negated(self),
            },
        }
    }

    /// |x|.
    pub fn abs(&self) -> Self {
        if self.is_negative() {
            self.neg()
        } else {
            self.clone()
        }
    }

    /// x + y.
    ///
    /// # Errors
    /// [`ArithmeticError::TooLarge`]; [`ArithmeticError::Undecided`] when two
    /// expressions of nested surds cannot be told from opposites.
    pub fn add(&self, other: &Self) -> Result<Self, ArithmeticError> {
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
            ) => {
                if let Some(sum) = add_decimals((*a, *e), (*b, *f)) {
                    return Ok(sum);
                }
            }
            _ if self.is_zero() => return Ok(other.clone()),
            _ if other.is_zero() => return Ok(self.clone()),
            (Self::Irrational(_), _) | (_, Self::Irrational(_)) => {
                return Irrational::sum(self, other);
            }
            _ => {}
        }
        Ok(Self::from(bounded(
            self.ratio_or_zero() + other.ratio_or_zero(),
        )?))
    }

    /// x − y.
    ///
    /// # Errors
    /// As [`ExactReal::add`].
    pub fn sub(&self, other: &Self) -> Result<Self, ArithmeticError> {
        self.add(&other.neg())
    }

    /// x·y.
    ///
    /// # Errors
    /// [`ArithmeticError::TooLarge`]; [`ArithmeticError::Undecided`].
    pub fn mul(&self, other: &Self) -> Result<Self, ArithmeticError> {
        if self.is_zero() || other.is_zero() {
            return Ok(Self::ZERO);
        }
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
            ) => {
                if let (Some(digits), Some(exponent)) = (a.checked_mul(*b), e.checked_add(*f)) {
                    return Ok(Self::Decimal { digits, exponent });
                }
            }
            (Self::Irrational(_), _) | (_, Self::Irrational(_)) => {
                return Irrational::product(self, other);
            }
            _ => {}
        }
        Ok(Self::from(bounded(
            self.ratio_or_zero() * other.ratio_or_zero(),
        )?))
    }

    /// x/y.
    ///
    /// # Errors
    /// [`ArithmeticError::DivisionByZero`]; [`ArithmeticError::TooLarge`];
    /// [`ArithmeticError::Undecided`].
    pub fn div(&self, other: &Self) -> Result<Self, ArithmeticError> {
        if other.is_zero() {
            return Err(ArithmeticError::DivisionByZero);
        }
        match other {
            Self::Irrational(y) => self.mul(&Irrational::reciprocal(y)?),
            _ => {
                let inverse = RBig::ONE / other.ratio_or_zero();
                match self {
                    Self::Irrational(_) => self.mul(&Self::from(inverse)),
                    _ => Ok(Self::from(bounded(self.ratio_or_zero() * inverse)?)),
                }
            }
        }
    }

    /// x/2.
    ///
    /// # Errors
    /// [`ArithmeticError::TooLarge`] only for numbers at the bound already.
    pub fn half(&self) -> Result<Self, ArithmeticError> {
        match self {
            Self::Decimal { digits, exponent } if digits % 2 == 0 => Ok(Self::Decimal {
                digits: digits / 2,
                exponent: *exponent,
            }),
            // x/2 = 5x/10.
            _ => self.mul(&Self::Decimal {
                digits: 5,
                exponent: -1,
            }),
        }
    }

    /// √x for x ≥ 0.
    ///
    /// # Errors
    /// [`ArithmeticError::NegativeRoot`]; [`ArithmeticError::TooLarge`].
    pub fn sqrt(&self) -> Result<Self, ArithmeticError> {
        if self.is_zero() {
            return Ok(Self::ZERO);
        }
        match self {
            Self::Irrational(x) => Irrational::root(x),
            _ => Irrational::root_of_ratio(&self.ratio_or_zero()),
        }
    }

    /// x^n for an integer n; 0⁰ is 1, as in polynomials.
    ///
    /// # Errors
    /// [`ArithmeticError::DivisionByZero`] for zero to a negative power;
    /// [`ArithmeticError::TooLarge`] before the power is formed.
    pub fn pow(&self, n: i32) -> Result<Self, ArithmeticError> {
        if n < 0 {
            return Self::ONE.div(&self.pow_unsigned(n.unsigned_abs())?);
        }
        self.pow_unsigned(n.unsigned_abs())
    }

    fn pow_unsigned(&self, n: u32) -> Result<Self, ArithmeticError> {
        if let Some(r) = self.rational() {
            return power_of_ratio(&r, n);
        }
        let mut result = Self::ONE;
        let mut base = self.clone();
        let mut left = n;
        while left > 0 {
            if left % 2 == 1 {
                result = result.mul(&base)?;
            }
            left /= 2;
            if left > 0 {
                base = base.mul(&base)?;
            }
        }
        Ok(result)
    }
}

/// a·10^e + b·10^f when it fits the inline form.
fn add_decimals((a, e): (i64, i16), (b, f): (i64, i16)) -> Option<ExactReal> {
    if a == 0 {
        return Some(ExactReal::Decimal {
            digits: b,
            exponent: f,
        });
    }
    if b == 0 {
        return Some(ExactReal::Decimal {
            digits: a,
            exponent: e,
        });
    }
    let low = e.min(f);
    let lifted = |x: i64, from: i16| {
        let steps = u32::from(from.abs_diff(low));
        10i64
            .checked_pow(steps)
            .and_then(|power| x.checked_mul(power))
    };
    let digits = lifted(a, e)?.checked_add(lifted(b, f)?)?;
    Some(ExactReal::Decimal {
        digits,
        exponent: low,
    })
}

fn power_of_ratio(r: &RBig, n: u32) -> Result<ExactReal, ArithmeticError> {
    let unit = r.denominator().is_one() && r.numerator().bit_len() <= 1;
    let bits = r.numerator().bit_len().max(r.denominator().bit_len());
    if !unit && (bits - 1).saturating_mul(n as usize) > MAX_BITS {
        return Err(ArithmeticError::TooLarge);
    }
    if unit {
        // 0, 1 and −1 need no arithmetic.
        let odd = n % 2 == 1;
        return Ok(match (r.is_zero(), r.is_negative()) {
            (true, _) if n > 0 => ExactReal::ZERO,
            (false, true) if odd => ExactReal::from(-1),
            _ => ExactReal::ONE,
        });
    }
    let top: IBig = r.numerator().pow(n as usize);
    let bottom: UBig = r.denominator().pow(n as usize);
    bounded(RBig::from_parts(top, bottom)).map(ExactReal::from)
}
