//! Intervals with dyadic ends, rounded outward at a chosen working precision.
//!
//! Notation: [a, b]·2^e with integers a ≤ b.
//!
//! Every operation contains the exact result for every choice of operands in
//! the intervals given; that is the only claim. Width is the caller's affair:
//! evaluate again at a higher precision when the result is too wide.

use dashu_base::{BitTest, DivRem, Signed, SquareRoot};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// lower·2^exponent ≤ x ≤ upper·2^exponent.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DyadicInterval {
    /// Integer of the lower end.
    pub lower: IBig,
    /// Integer of the upper end.
    pub upper: IBig,
    /// Power of two both ends are multiplied by.
    pub exponent: i64,
}

/// ⌊x / 2^k⌋.
fn shift_down(x: &IBig, k: usize) -> IBig {
    let magnitude = x.unsigned_abs_ref();
    let quotient = &magnitude >> k;
    if x.is_negative() {
        let exact = (&quotient << k) == magnitude;
        let floor = -IBig::from(quotient);
        if exact {
            floor
        } else {
            floor - IBig::ONE
        }
    } else {
        IBig::from(quotient)
    }
}

/// ⌈x / 2^k⌉.
fn shift_up(x: &IBig, k: usize) -> IBig {
    -shift_down(&-x, k)
}

/// Magnitude of a borrowed integer.
trait Magnitude {
    fn unsigned_abs_ref(&self) -> UBig;
}

impl Magnitude for IBig {
    fn unsigned_abs_ref(&self) -> UBig {
        self.clone().into_parts().1
    }
}

impl DyadicInterval {
    /// The ratio `r`, to about `bits` significant bits.
    pub fn of_ratio(r: &RBig, bits: usize) -> Self {
        let numerator = r.numerator();
        let denominator = r.denominator();
        let magnitude = numerator.unsigned_abs_ref();
        if magnitude.is_zero() {
            return Self {
                lower: IBig::ZERO,
                upper: IBig::ZERO,
                exponent: 0,
            };
        }
        let shift = bits as i64 + 1 + denominator.bit_len() as i64 - magnitude.bit_len() as i64;
        if shift <= 0 && denominator.is_one() {
            return Self::point(numerator.clone(), 0).trimmed(bits);
        }
        let (top, bottom) = if shift >= 0 {
            (magnitude << shift as usize, denominator.clone())
        } else {
            (magnitude, denominator << (-shift) as usize)
        };
        let (quotient, remainder) = top.div_rem(bottom);
        let near = IBig::from(quotient);
        let far = if remainder.is_zero() {
            near.clone()
        } else {
            &near + IBig::ONE
        };
        if numerator.is_negative() {
            Self {
                lower: -far,
                upper: -near,
                exponent: -shift,
            }
        } else {
            Self {
                lower: near,
                upper: far,
                exponent: -shift,
            }
        }
    }

    /// The single number `value`·2^`exponent`.
    pub fn point(value: IBig, exponent: i64) -> Self {
        Self {
            lower: value.clone(),
            upper: value,
            exponent,
        }
    }

    /// Ends cut back to about `bits` bits, outward.
    pub fn trimmed(self, bits: usize) -> Self {
        let size = self.lower.bit_len().max(self.upper.bit_len());
        if size <= bits {
            return self;
        }
        let drop = size - bits;
        Self {
            lower: shift_down(&self.lower, drop),
            upper: shift_up(&self.upper, drop),
            exponent: self.exponent + drop as i64,
        }
    }

    /// Whether the interval holds zero.
    pub fn holds_zero(&self) -> bool {
        self.lower <= IBig::ZERO && self.upper >= IBig::ZERO
    }

    /// Whether every number of the interval is below zero.
    pub fn is_negative(&self) -> bool {
        self.upper < IBig::ZERO
    }

    /// Lower end as a ratio.
    pub fn lower_ratio(&self) -> RBig {
        ratio(&self.lower, self.exponent)
    }

    /// Upper end as a ratio.
    pub fn upper_ratio(&self) -> RBig {
        ratio(&self.upper, self.exponent)
    }

    /// Whether the width is at most 2^−`bits` of the least magnitude held.
    pub fn is_narrow(&self, bits: usize) -> bool {
        if self.lower == self.upper {
            return true;
        }
        if self.holds_zero() {
            return false;
        }
        let width = (&self.upper - &self.lower).unsigned_abs_ref();
        let least = self
            .lower
            .unsigned_abs_ref()
            .min(self.upper.unsigned_abs_ref());
        (width << bits) <= least
    }

    /// −x.
    pub fn negated(&self) -> Self {
        Self {
            lower: -self.upper.clone(),
            upper: -self.lower.clone(),
            exponent: self.exponent,
        }
    }

    /// Sum.
    pub fn add(&self, other: &Self, bits: usize) -> Self {
        let exponent = self.exponent.min(other.exponent);
        let up = |x: &IBig, e: i64| x << (e - exponent) as usize;
        Self {
            lower: up(&self.lower, self.exponent) + up(&other.lower, other.exponent),
            upper: up(&self.upper, self.exponent) + up(&other.upper, other.exponent),
            exponent,
        }
        .trimmed(bits)
    }

    /// Product.
    pub fn mul(&self, other: &Self, bits: usize) -> Self {
        let products = [
            &self.lower * &other.lower,
            &self.lower * &other.upper,
            &self.upper * &other.lower,
            &self.upper * &other.upper,
        ];
        let [first, rest @ ..] = products;
        let mut lower = first.clone();
        let mut upper = first;
        for p in rest {
            if p < lower {
                lower = p;
            } else if p > upper {
                upper = p;
            }
        }
        Self {
            lower,
            upper,
            exponent: self.exponent + other.exponent,
        }
        .trimmed(bits)
    }

    /// 1/x; `None` when the interval holds zero.
    pub fn reciprocal(&self, bits: usize) -> Option<Self> {
        if self.holds_zero() {
            return None;
        }
        let size = self.lower.bit_len().max(self.upper.bit_len());
        let shift = size + bits;
        let one = UBig::ONE << shift;
        // 1/[a, b] = [1/b, 1/a] for either sign.
        let from_upper = quotient_down(&one, &self.upper);
        let from_lower = -quotient_down(&one, &-&self.lower);
        Some(
            Self {
                lower: from_upper,
                upper: from_lower,
                exponent: -self.exponent - shift as i64,
            }
            .trimmed(bits),
        )
    }

    /// √x; `None` when the interval reaches below zero.
    pub fn root(&self, bits: usize) -> Option<Self> {
        if self.lower.is_negative() {
            return None;
        }
        let mut shift = (2 * bits).saturating_sub(self.upper.bit_len());
        if (self.exponent - shift as i64) % 2 != 0 {
            shift += 1;
        }
        let lower = self.lower.unsigned_abs_ref() << shift;
        let upper = self.upper.unsigned_abs_ref() << shift;
        let high = upper.sqrt();
        let high = if &high * &high == upper {
            high
        } else {
            high + UBig::ONE
        };
        Some(
            Self {
                lower: IBig::from(lower.sqrt()),
                upper: IBig::from(high),
                exponent: (self.exponent - shift as i64) / 2,
            }
            .trimmed(bits),
        )
    }
}

/// ⌊one / divisor⌋.
fn quotient_down(one: &UBig, divisor: &IBig) -> IBig {
    let (quotient, remainder) = one.div_rem(&divisor.unsigned_abs_ref());
    if divisor.is_negative() {
        let floor = -IBig::from(quotient);
        if remainder.is_zero() {
            floor
        } else {
            floor - IBig::ONE
        }
    } else {
        IBig::from(quotient)
    }
}

/// value·2^exponent as a ratio.
fn ratio(value: &IBig, exponent: i64) -> RBig {
    if exponent >= 0 {
        RBig::from(value << exponent as usize)
    } else {
        RBig::from_parts(value.clone(), UBig::ONE << (-exponent) as usize)
    }
}

/// π to about `bits` bits.
///
/// Machin 1706: π/4 = 4·arctan(1/5) − arctan(1/239), each arctangent by its
/// alternating series in fixed point. A truncated quotient is off by less than
/// one unit, and the first term left out bounds the rest, so the error of each
/// sum is below (terms + 1) units.
pub fn pi(bits: usize) -> DyadicInterval {
    // The guard covers the error count, which is far below 2^32.
    let guard = 40;
    let fixed = bits + guard;
    let (a, error_a) = arctan_of_inverse(5, fixed);
    let (b, error_b) = arctan_of_inverse(239, fixed);
    let middle = a * IBig::from(16) - b * IBig::from(4);
    let error = IBig::from(16 * error_a + 4 * error_b);
    DyadicInterval {
        lower: &middle - &error,
        upper: middle + error,
        exponent: -(fixed as i64),
    }
    .trimmed(bits + 2)
}

/// arctan(1/m)·2^fixed and the number of units it may be off by.
fn arctan_of_inverse(m: u64, fixed: usize) -> (IBig, u64) {
    let square = UBig::from(m * m);
    let mut power = (UBig::ONE << fixed) / UBig::from(m);
    let mut sum = IBig::ZERO;
    let mut k = 0u64;
    while !power.is_zero() {
        let term = IBig::from(&power / UBig::from(2 * k + 1));
        if k.is_multiple_of(2) {
            sum += term
        } else {
            sum -= term
        }
        power /= &square;
        k += 1;
    }
    // Each power carries less than 1/(1 − 1/m²) < 2 units of truncation and
    // each term one more; the tail is below one unit.
    (sum, 3 * k + 2)
}
