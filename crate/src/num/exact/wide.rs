//! Rounding in 128-bit integers: decimals of up to 19 digits and powers of ten
//! up to 10^27, which covers what programs print with 17 digits.
//!
//! Notation: |x| = s·10^e; 10^k = 5^k·2^k; hi = m·2^h; R the rest as an integer.

use super::rounding::{decode, Expansion};

/// Greatest power of ten on this road; 5^27 is below 2^63.
const MOST: usize = 27;

const FIVES: [u64; MOST + 1] = {
    let mut powers = [1u64; MOST + 1];
    let mut k = 1;
    while k <= MOST {
        powers[k] = powers[k - 1] * 5;
        k += 1;
    }
    powers
};

/// The double nearest to digits·10^exponent; `None` off this road.
pub(super) fn nearest(digits: i64, exponent: i16) -> Option<f64> {
    let five = *FIVES.get(usize::from(exponent.unsigned_abs()))?;
    let x = magnitude(digits.unsigned_abs(), exponent, five);
    Some(if digits < 0 { -x } else { x })
}

fn magnitude(size: u64, exponent: i16, five: u64) -> f64 {
    if exponent >= 0 {
        round_binary(u128::from(size) * u128::from(five), i64::from(exponent))
    } else {
        quotient(u128::from(size), five, i64::from(exponent)).0
    }
}

/// (r/five)·2^power to nearest, and whether that is exact. r is not zero and
/// below 2^127.
fn quotient(r: u128, five: u64, power: i64) -> (f64, bool) {
    let shift = r.leading_zeros() - 1;
    let top = r << shift;
    let (q, rest) = (top / u128::from(five), top % u128::from(five));
    let sticky = u128::from(rest != 0);
    let exact = rest == 0 && 128 - q.leading_zeros() - q.trailing_zeros() <= 53;
    // q has 64 bits or more, since top has 127 and five at most 63.
    (round_binary(q | sticky, power - i64::from(shift)), exact)
}

/// The expansion of digits·10^exponent, digits not zero; `None` off this road.
pub(super) fn expansion(digits: i64, exponent: i16) -> Option<Expansion> {
    let k = i64::from(exponent.unsigned_abs());
    let five = *FIVES.get(usize::from(exponent.unsigned_abs()))?;
    let size = digits.unsigned_abs();
    let hi = magnitude(size, exponent, five);
    let (m, h) = decode(hi);
    let (m, h) = (i128::from(m), i64::from(h));
    let (lo, exact) = if exponent >= 0 {
        let product = i128::from(size) * i128::from(five);
        if h < k {
            // The product has 53 bits or less: hi is exact.
            (0.0, true)
        } else {
            let rest = product - (m << (h - k));
            let lo = round_binary(rest.unsigned_abs(), k);
            (with_sign(lo, rest), rest.unsigned_abs() < 1 << 53)
        }
    } else {
        // x − hi = (s·2^a − m·5^k)·2^h/5^k with a = −h−k, or the same with the
        // power of two on the other side.
        let a = -h - k;
        let (rest, power) = if a >= 0 {
            ((i128::from(size) << a) - m * i128::from(five), h)
        } else {
            (i128::from(size) - ((m * i128::from(five)) << -a), -k)
        };
        if rest == 0 {
            (0.0, true)
        } else {
            let (lo, exact) = quotient(rest.unsigned_abs(), five, power);
            (with_sign(lo, rest), exact)
        }
    };
    // |lo − (x − hi)| ≤ u·|lo|: half a unit in the last place of lo.
    let bound = if exact {
        0.0
    } else {
        lo.abs() * (f64::EPSILON / 2.0)
    };
    let sign = if digits < 0 { -1.0 } else { 1.0 };
    Some(Expansion {
        hi: sign * hi,
        lo: sign * lo,
        bound,
    })
}

fn with_sign(x: f64, like: i128) -> f64 {
    if like < 0 {
        -x
    } else {
        x
    }
}

/// q·2^power to nearest, ties to even; the lowest bit of q may stand for all
/// below it as long as q has 55 bits or more.
pub(super) fn round_binary(q: u128, power: i64) -> f64 {
    if q == 0 {
        return 0.0;
    }
    let length = i64::from(128 - q.leading_zeros());
    let top = power + length - 1;
    if top > 1023 {
        return f64::INFINITY;
    }
    let keep = if top < -1022 { top + 1075 } else { 53 };
    if keep < 0 {
        return 0.0;
    }
    let mantissa = if length <= keep {
        (q << (keep - length)) as u64
    } else {
        let drop = (length - keep) as u32;
        let kept = if drop > 127 { 0 } else { q >> drop };
        let rest = if drop > 127 { q } else { q - (kept << drop) };
        let half = 1u128 << (drop - 1);
        let up = rest > half || (rest == half && kept % 2 == 1);
        kept as u64 + u64::from(up)
    };
    if top < -1022 {
        // A carry into bit 52 is the least normal number, as it should be.
        return f64::from_bits(mantissa);
    }
    // The hidden bit adds one to the exponent field, and so does a carry.
    f64::from_bits((((top + 1022) as u64) << 52) + mantissa)
}
