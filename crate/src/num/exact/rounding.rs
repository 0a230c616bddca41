//! From exact numbers to doubles: rounding to nearest, and the error left.
//!
//! Notation: u = 2^−53; x the exact number, s the scale, y = x·2^−s.
//!
//! The inline road for short decimals is Clinger's fast case (Clinger 1990,
//! "How to read floating point numbers accurately"): digits up to 2^53 and a
//! power of ten up to 10^22 are both exact doubles, so one division or
//! multiplication rounds once. Its remainder is itself a double, which gives
//! the second word of the expansion without big integers.

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
            if let Some(hi) = clinger(*digits, *exponent) {
                if let Some(y) = scaled_exactly(hi, scale) {
                    return y;
                }
            }
        }
        match self {
            Self::Binary(x) if scale == 0 => *x,
            Self::Irrational(x) => nearest_by_enclosure(|bits| x.enclose(bits), scale),
            _ => {
                let r = self.rational().unwrap_or(RBig::ZERO);
                nearest_ratio(r.numerator(), r.denominator(), scale)
            }
        }
    }

    /// x·2^−`scale` as an unevaluated sum of two doubles with the error left
    /// over. If y overflows, `hi` is infinite and `bound` is infinite.
    pub fn expansion(&self, scale: i32) -> Expansion {
        if let Self::Decimal { digits, exponent } = self {
            if *digits == 0 {
                return Expansion::ZERO;
            }
            if let Some(found) = clinger_expansion(*digits, *exponent, scale) {
                return found;
            }
        }
        match self {
            Self::Irrational(x) => {
                let around = x.enclose(200);
                let hi = self.nearest(scale);
                expansion_of(hi, &around.lower_ratio(), &around.upper_ratio(), scale)
            }
            _ => {
                let r = self.rational().unwrap_or(RBig::ZERO);
                let hi = nearest_ratio(r.numerator(), r.denominator(), scale);
                expansion_of(hi, &r, &r, scale)
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
fn clinger_expansion(digits: i64, exponent: i16, scale: i32) -> Option<Expansion> {
    let hi = clinger(digits, exponent)?;
    let d = digits as f64;
    if exponent == 0 {
        return Some(Expansion {
            hi: scaled_exactly(hi, scale)?,
            lo: 0.0,
            bound: 0.0,
        });
    }
    let power = EXACT_POWERS[usize::from(exponent.unsigned_abs())];
    let (lo, bound) = if exponent > 0 {
        (product_error(d, power, hi), 0.0)
    } else {
        // d − hi·10^k, exactly: the product's head cancels against d, and its
        // tail is what is left.
        let head = hi * power;
        let remainder = (d - head) - product_error(hi, power, head);
        // |lo − y| ≤ u|lo|: half a unit in the last place of lo.
        let lo = remainder / power;
        (
            lo,
            if remainder == 0.0 {
                0.0
            } else {
                lo.abs() * (f64::EPSILON / 2.0)
            },
        )
    };
    let scaled_or_zero = |x: f64| {
        if x == 0.0 {
            Some(0.0)
        } else {
            scaled_exactly(x, scale)
        }
    };
    Some(Expansion {
        hi: scaled_exactly(hi, scale)?,
        lo: scaled_or_zero(lo)?,
        bound: scaled_or_zero(bound)?,
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
fn decode(x: f64) -> (i64, i32) {
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

/// The double nearest to (numerator/denominator)·2^−scale.
///
/// Forms a quotient of at least 65 bits whose last bit also stands for
/// everything below it, and rounds that once.
fn nearest_ratio(numerator: &IBig, denominator: &UBig, scale: i32) -> f64 {
    let magnitude = numerator.clone().unsigned_abs();
    if magnitude.is_zero() {
        return 0.0;
    }
    let shift = 66 + denominator.bit_len() as i64 - magnitude.bit_len() as i64;
    let (quotient, remainder) = if shift >= 0 {
        (magnitude << shift as usize).div_rem(denominator.clone())
    } else {
        magnitude.div_rem(denominator.clone() << (-shift) as usize)
    };
    let sticky = u128::from(!remainder.is_zero());
    // 65 to 67 bits by the choice of the shift.
    let quotient = u128::try_from(quotient).unwrap_or(u128::MAX) | sticky;
    let x = round_binary(quotient, -shift - i64::from(scale));
    if numerator.is_negative() {
        -x
    } else {
        x
    }
}

/// q·2^power to nearest, ties to even; the lowest bit of q may be sticky as
/// long as q has 65 bits or more.
fn round_binary(q: u128, power: i64) -> f64 {
    let length = i64::from(128 - q.leading_zeros());
    let top = power + length - 1;
    if top > 1023 {
        return f64::INFINITY;
    }
    let keep = if top < -1022 { top + 1075 } else { 53 };
    if keep < 0 {
        return 0.0;
    }
    let drop = (length - keep) as u32;
    let kept = if drop > 127 { 0 } else { q >> drop };
    let rest = q - (kept << drop.min(127));
    let half = 1u128 << (drop - 1);
    let up = rest > half || (rest == half && kept % 2 == 1);
    let mantissa = kept as u64 + u64::from(up);
    if top < -1022 {
        // A carry into bit 52 is the least normal number, as it should be.
        return f64::from_bits(mantissa);
    }
    // The hidden bit adds one to the exponent field, and so does a carry.
    let field = ((top + 1022) as u64) << 52;
    let bits = field + mantissa;
    f64::from_bits(bits)
}

/// Rounds by enclosures of rising precision until both ends agree.
fn nearest_by_enclosure(enclose: impl Fn(usize) -> DyadicInterval, scale: i32) -> f64 {
    let mut bits = 80;
    loop {
        let around = enclose(bits);
        let end = |x: &IBig| {
            if around.exponent >= 0 {
                nearest_ratio(&(x << around.exponent as usize), &UBig::ONE, scale)
            } else {
                nearest_ratio(x, &(UBig::ONE << (-around.exponent) as usize), scale)
            }
        };
        let (low, high) = (end(&around.lower), end(&around.upper));
        // An irrational number is never a midpoint, so this ends; the bound is
        // for numbers that are rational in disguise.
        if low == high || bits > 4000 {
            return low;
        }
        bits *= 2;
    }
}

/// Second word and bound for y in [low, high]·2^−scale, given the first word.
fn expansion_of(hi: f64, low: &RBig, high: &RBig, scale: i32) -> Expansion {
    if !hi.is_finite() {
        return Expansion {
            hi,
            lo: 0.0,
            bound: f64::INFINITY,
        };
    }
    let head = ratio_of_double(hi);
    let rest_low = times_power_of_two(low.clone(), -scale) - &head;
    let rest_high = times_power_of_two(high.clone(), -scale) - &head;
    let lo = nearest_ratio(rest_low.numerator(), rest_low.denominator(), 0);
    let tail = ratio_of_double(lo);
    let left = (rest_low - &tail).abs().max((rest_high - tail).abs());
    let near = nearest_ratio(left.numerator(), left.denominator(), 0);
    let bound = if ratio_of_double(near) >= left {
        near
    } else {
        near.next_up()
    };
    Expansion { hi, lo, bound }
}
