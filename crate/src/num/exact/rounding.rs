//! From exact numbers to doubles: rounding to nearest, and the error left.
//!
//! Notation: u = 2^−53; x the exact number, s the scale, y = x·2^−s.
//!
//! The inline road for short decimals is Clinger's fast case (Clinger 1990,
//! "How to read floating point numbers accurately"): digits up to 2^53 and a
//! power of ten up to 10^22 are both exact doubles, so one division or
//! multiplication rounds once. Its remainder is itself a double, which gives
//! the second word of the expansion without big integers.

use super::wide::{self, round_binary};
use super::{DyadicInterval, ExactReal};
use dashu_base::{Abs, BitTest, DivRem, Signed, UnsignedAbs};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// y = hi + lo + δ with |δ| ≤ bound; hi is y to nearest, lo the rest to
/// nearest. `bound` is exactly zero when hi + lo is exactly y, and otherwise
/// at most about 2^−105·|y| + 2^−1074.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Expansion {
    /// The double nearest to y.
    pub hi: f64,
    /// The double nearest to y − hi.
    pub lo: f64,
    /// What |y − hi − lo| cannot exceed.
    pub bound: f64,
}

impl Expansion {
    const ZERO: Self = Self {
        hi: 0.0,
        lo: 0.0,
        bound: 0.0,
    };

    /// All three parts times 2^−scale, if that is exact for each.
    fn scaled_exactly(self, scale: i32) -> Option<Self> {
        let part = |x: f64| {
            if x == 0.0 {
                Some(0.0)
            } else {
                scaled_exactly(x, scale)
            }
        };
        Some(Self {
            hi: part(self.hi)?,
            lo: part(self.lo)?,
            bound: part(self.bound)?,
        })
    }
}

/// Powers of ten that are exact doubles.
const EXACT_POWERS: [f64; 23] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16,
    1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
];

impl ExactReal {
    /// The double nearest to x·2^−`scale`, ties to even; subnormal results and
    /// overflow to infinity as in IEEE 754-2019, 4.3.1.
    ///
    /// For an expression of nested surds that agrees with a midpoint of two
    /// doubles to the greatest precision tried, either neighbour may come
    /// back; [`ExactReal::expansion`] bounds the error in that case too.
    pub fn nearest(&self, scale: i32) -> f64 {
        if let Self::Decimal { digits, exponent } = self {
            if *digits == 0 {
                return 0.0;
            }
            let near = clinger(*digits, *exponent).or_else(|| wide::nearest(*digits, *exponent));
            if let Some(y) = near.and_then(|near| scaled_exactly(near, scale)) {
                return y;
            }
        }
        match self {
            // A negative zero of a file is the number zero.
            Self::Binary(x) if scale == 0 => *x + 0.0,
            Self::Irrational(x) => nearest_by_enclosure(|bits| x.enclose(bits), scale),
            _ => Fraction::of(self).scaled(-i64::from(scale)).nearest(),
        }
    }

    /// x·2^−`scale` as an unevaluated sum of two doubles with the error left
    /// over. If y overflows, `hi` is infinite and `bound` is infinite.
    pub fn expansion(&self, scale: i32) -> Expansion {
        if let Self::Decimal { digits, exponent } = self {
            if *digits == 0 {
                return Expansion::ZERO;
            }
            let found = clinger_expansion(*digits, *exponent)
                .or_else(|| wide::expansion(*digits, *exponent));
            if let Some(found) = found.and_then(|found| found.scaled_exactly(scale)) {
                return found;
            }
        }
        let power = -i64::from(scale);
        match self {
            Self::Irrational(x) => {
                let around = x.enclose(200);
                let low = Fraction::dyadic(&around.lower, around.exponent + power);
                let high = Fraction::dyadic(&around.upper, around.exponent + power);
                expansion_of(self.nearest(scale), &low, &high)
            }
            _ => {
                let y = Fraction::of(self).scaled(power);
                expansion_of(y.nearest(), &y, &y)
            }
        }
    }
}

/// The double nearest to digits·10^exponent in Clinger's fast case.
fn clinger(digits: i64, exponent: i16) -> Option<f64> {
    if digits.unsigned_abs() > 1 << 53 || exponent.unsigned_abs() > 22 {
        return None;
    }
    let d = digits as f64;
    let power = EXACT_POWERS[usize::from(exponent.unsigned_abs())];
    Some(if exponent < 0 { d / power } else { d * power })
}

/// x·2^−scale when both are normal, so that the scaling is exact and commutes
/// with the rounding that gave x.
fn scaled_exactly(x: f64, scale: i32) -> Option<f64> {
    if scale == 0 {
        return Some(x);
    }
    let exponent = ((x.to_bits() >> 52) & 0x7ff) as i32;
    let moved = exponent - scale.clamp(-5000, 5000);
    if exponent == 0 || exponent == 0x7ff || !(1..0x7ff).contains(&moved) {
        return None;
    }
    let rest = x.to_bits() & !(0x7ff << 52);
    Some(f64::from_bits(rest | ((moved as u64) << 52)))
}

/// The expansion in Clinger's fast case: the remainder of a correctly rounded
/// product or quotient is a double when nothing underflows.
fn clinger_expansion(digits: i64, exponent: i16) -> Option<Expansion> {
    let hi = clinger(digits, exponent)?;
    let d = digits as f64;
    if exponent == 0 {
        return Some(Expansion {
            hi,
            ..Expansion::ZERO
        });
    }
    let power = EXACT_POWERS[usize::from(exponent.unsigned_abs())];
    if exponent > 0 {
        let lo = product_error(d, power, hi);
        return Some(Expansion { hi, lo, bound: 0.0 });
    }
    // d − hi·10^k, exactly: the product's head cancels against d, and its tail
    // is what is left.
    let head = hi * power;
    let remainder = (d - head) - product_error(hi, power, head);
    // |lo − y| ≤ u|lo|: half a unit in the last place of lo.
    let lo = remainder / power;
    Some(Expansion {
        hi,
        lo,
        bound: lo.abs() * (f64::EPSILON / 2.0),
    })
}

/// a·b − head for head = fl(a·b), exactly (Dekker 1971, Veltkamp's splitting).
/// Exact here because |a| ≤ 2^53·10^22 and |b| ≤ 10^22 keep every part far
/// from overflow and underflow.
fn product_error(a: f64, b: f64, head: f64) -> f64 {
    let split = |x: f64| {
        let c = 134_217_729.0 * x;
        let high = c - (c - x);
        (high, x - high)
    };
    let (ah, al) = split(a);
    let (bh, bl) = split(b);
    ((ah * bh - head) + ah * bl + al * bh) + al * bl
}

/// Mantissa and power of two of a finite double.
pub(super) fn decode(x: f64) -> (i64, i32) {
    let bits = x.to_bits();
    let raw = ((bits >> 52) & 0x7ff) as i32;
    let fraction = (bits & ((1 << 52) - 1)) as i64;
    let (mantissa, exponent) = if raw == 0 {
        (fraction, -1074)
    } else {
        (fraction | (1 << 52), raw - 1075)
    };
    (if bits >> 63 == 1 { -mantissa } else { mantissa }, exponent)
}

/// A finite double as a ratio; zero for one that is not finite.
pub(super) fn ratio_of_double(x: f64) -> RBig {
    if !x.is_finite() {
        return RBig::ZERO;
    }
    let (mantissa, exponent) = decode(x);
    times_power_of_two(RBig::from(IBig::from(mantissa)), exponent)
}

/// r·2^power.
fn times_power_of_two(r: RBig, power: i32) -> RBig {
    let two = RBig::from(UBig::ONE << power.unsigned_abs() as usize);
    if power >= 0 {
        r * two
    } else {
        r / two
    }
}

/// top/bottom, not reduced: a common divisor costs more to find than to carry.
struct Fraction {
    top: IBig,
    bottom: UBig,
}

impl Fraction {
    /// A number that is known as a ratio.
    fn of(x: &ExactReal) -> Self {
        match x {
            ExactReal::Decimal { digits, exponent } => {
                let power = UBig::from(10u8).pow(usize::from(exponent.unsigned_abs()));
                let digits = IBig::from(*digits);
                if *exponent >= 0 {
                    Self {
                        top: digits * IBig::from(power),
                        bottom: UBig::ONE,
                    }
                } else {
                    Self {
                        top: digits,
                        bottom: power,
                    }
                }
            }
            ExactReal::Binary(x) if x.is_finite() => {
                let (mantissa, exponent) = decode(*x);
                Self::dyadic(&IBig::from(mantissa), i64::from(exponent))
            }
            ExactReal::Rational(r) => Self {
                top: r.numerator().clone(),
                bottom: r.denominator().clone(),
            },
            ExactReal::Binary(_) | ExactReal::Irrational(_) => Self {
                top: IBig::ZERO,
                bottom: UBig::ONE,
            },
        }
    }

    /// value·2^exponent.
    fn dyadic(value: &IBig, exponent: i64) -> Self {
        Self {
            top: value.clone(),
            bottom: UBig::ONE,
        }
        .scaled(exponent)
    }

    /// Times 2^power.
    fn scaled(self, power: i64) -> Self {
        let steps = power.unsigned_abs() as usize;
        if power >= 0 {
            Self {
                top: self.top << steps,
                bottom: self.bottom,
            }
        } else {
            Self {
                top: self.top,
                bottom: self.bottom << steps,
            }
        }
    }

    /// The rest after taking away a finite double.
    fn minus(&self, x: f64) -> Self {
        let (mantissa, exponent) = decode(x);
        let taken = IBig::from(self.bottom.clone()) * IBig::from(mantissa);
        let steps = exponent.unsigned_abs() as usize;
        if exponent >= 0 {
            Self {
                top: &self.top - (taken << steps),
                bottom: self.bottom.clone(),
            }
        } else {
            Self {
                top: (&self.top << steps) - taken,
                bottom: &self.bottom << steps,
            }
        }
    }

    /// The nearest double: a quotient of at least 65 bits, whose last bit also
    /// stands for everything below it, is rounded once.
    fn nearest(&self) -> f64 {
        let magnitude = self.top.clone().unsigned_abs();
        if magnitude.is_zero() {
            return 0.0;
        }
        let shift = 66 + self.bottom.bit_len() as i64 - magnitude.bit_len() as i64;
        let (quotient, remainder) = if shift >= 0 {
            (magnitude << shift as usize).div_rem(&self.bottom)
        } else {
            magnitude.div_rem(&self.bottom << (-shift) as usize)
        };
        let sticky = u128::from(!remainder.is_zero());
        // 65 to 67 bits by the choice of the shift.
        let quotient = u128::try_from(quotient).unwrap_or(u128::MAX) | sticky;
        let x = round_binary(quotient, -shift);
        if self.top.is_negative() {
            -x
        } else {
            x
        }
    }

    /// The least double that is not below the size of the fraction.
    fn size_rounded_up(&self) -> f64 {
        let near = self.nearest().abs();
        let size = Self {
            top: self.top.clone().abs(),
            bottom: self.bottom.clone(),
        };
        if near.is_finite() && size.minus(near).top > IBig::ZERO {
            near.next_up()
        } else {
            near
        }
    }
}

/// Rounds by enclosures of rising precision until both ends agree.
fn nearest_by_enclosure(enclose: impl Fn(usize) -> DyadicInterval, scale: i32) -> f64 {
    let mut bits = 80;
    loop {
        let around = enclose(bits);
        let exponent = around.exponent - i64::from(scale);
        let low = Fraction::dyadic(&around.lower, exponent).nearest();
        let high = Fraction::dyadic(&around.upper, exponent).nearest();
        // An irrational number is never a midpoint, so this ends; the bound is
        // for numbers that are rational in disguise.
        if low == high || bits > 4000 {
            return low;
        }
        bits *= 2;
    }
}

/// Second word and bound for y in [low, high], given the first word.
fn expansion_of(hi: f64, low: &Fraction, high: &Fraction) -> Expansion {
    if !hi.is_finite() {
        return Expansion {
            hi,
            lo: 0.0,
            bound: f64::INFINITY,
        };
    }
    let rest = low.minus(hi);
    let lo = rest.nearest();
    let below = rest.minus(lo).size_rounded_up();
    let above = high.minus(hi).minus(lo).size_rounded_up();
    Expansion {
        hi,
        lo,
        bound: below.max(above),
    }
}
