//! Exact binary fractions of any size.
//!
//! Bounds are kept as dyadic rationals m · 2^e: sums, differences and products
//! are exact, so an enclosure loses nothing on its way from the proof to print.
//!
//! Notation: m the significand (an integer), e the exponent.

use std::cmp::Ordering;
use std::ops::{Add, Mul, Neg, Sub};

use dashu_base::{BitTest, Sign, SquareRoot};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// The number m · 2^e, exactly.
#[derive(Clone, Debug)]
pub struct Dyadic {
    significand: IBig,
    exponent: i64,
}

/// Which way a number that does not fit is moved.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Toward {
    /// To the largest number that fits and is not above.
    Down,
    /// To the smallest number that fits and is not below.
    Up,
}

impl Dyadic {
    /// Zero.
    pub const ZERO: Self = Self {
        significand: IBig::ZERO,
        exponent: 0,
    };

    /// significand · 2^exponent.
    pub fn new(significand: IBig, exponent: i64) -> Self {
        Self {
            significand,
            exponent,
        }
    }

    /// The number one.
    pub fn one() -> Self {
        Self::new(IBig::ONE, 0)
    }

    /// A finite double, exactly; `None` for NaN and the infinities.
    pub fn from_f64(x: f64) -> Option<Self> {
        if !x.is_finite() {
            return None;
        }
        let bits = x.to_bits();
        let biased = ((bits >> 52) & 0x7ff) as i64;
        let fraction = (bits & ((1 << 52) - 1)) as i64;
        let (magnitude, exponent) = if biased == 0 {
            (fraction, -1074)
        } else {
            (fraction | (1 << 52), biased - 1075)
        };
        if magnitude == 0 {
            return Some(Self::ZERO);
        }
        // Short significands keep later sums inside one or two words.
        let spare = magnitude.trailing_zeros();
        let magnitude = magnitude >> spare;
        let signed = if x.is_sign_negative() {
            -magnitude
        } else {
            magnitude
        };
        Some(Self::new(IBig::from(signed), exponent + i64::from(spare)))
    }

    /// The significand m of m · 2^e.
    pub fn significand(&self) -> &IBig {
        &self.significand
    }

    /// The exponent e of m · 2^e.
    pub fn exponent(&self) -> i64 {
        self.exponent
    }

    /// Whether the number is zero.
    pub fn is_zero(&self) -> bool {
        self.significand.is_zero()
    }

    /// −1, 0 or 1.
    pub fn signum(&self) -> i32 {
        match (self.is_zero(), self.significand.sign()) {
            (true, _) => 0,
            (false, Sign::Positive) => 1,
            (false, Sign::Negative) => -1,
        }
    }

    /// |self|.
    pub fn abs(&self) -> Self {
        if self.signum() < 0 {
            -self
        } else {
            self.clone()
        }
    }

    /// self · 2^power, exactly.
    pub fn scaled(&self, power: i64) -> Self {
        Self::new(self.significand.clone(), self.exponent + power)
    }

    /// The larger of two.
    pub fn max(self, other: Self) -> Self {
        if self < other {
            other
        } else {
            self
        }
    }

    /// The smaller of two.
    pub fn min(self, other: Self) -> Self {
        if other < self {
            other
        } else {
            self
        }
    }

    /// e with 2^(e−1) ≤ |self| < 2^e; `None` for zero.
    pub fn magnitude(&self) -> Option<i64> {
        if self.is_zero() {
            return None;
        }
        Some(self.significand.bit_len() as i64 + self.exponent)
    }

    /// The nearest number on the grid of 2^`grid` in the stated direction.
    pub fn on_grid(&self, grid: i64, toward: Toward) -> Self {
        if self.exponent >= grid {
            return self.clone();
        }
        let dropped = (grid - self.exponent) as usize;
        let significand = match toward {
            Toward::Down => &self.significand >> dropped,
            Toward::Up => -(-&self.significand >> dropped),
        };
        Self::new(significand, grid)
    }

    /// The nearest whole number in the stated direction.
    pub fn to_integer(&self, toward: Toward) -> IBig {
        let whole = self.on_grid(0, toward);
        whole.significand << whole.exponent as usize
    }

    /// At most `bits` significant bits (one more after a carry), moved in the
    /// stated direction.
    pub fn rounded(&self, bits: u32, toward: Toward) -> Self {
        match self.magnitude() {
            None => Self::ZERO,
            Some(magnitude) => self.on_grid(magnitude - i64::from(bits), toward),
        }
    }

    /// A double not below (`Up`) or not above (`Down`) the number.
    pub fn to_f64(&self, toward: Toward) -> f64 {
        let Some(magnitude) = self.magnitude() else {
            return 0.0;
        };
        if magnitude > 1024 {
            return match (self.signum() > 0, toward) {
                (true, Toward::Up) => f64::INFINITY,
                (true, Toward::Down) => f64::MAX,
                (false, Toward::Up) => -f64::MAX,
                (false, Toward::Down) => f64::NEG_INFINITY,
            };
        }
        let grid = (magnitude - 53).max(-1074);
        let fitted = self.on_grid(grid, toward);
        // At most 54 bits, the 54th only as a power of two: exact in i64 and f64.
        let whole = i64::try_from(fitted.significand).unwrap_or(i64::MAX) as f64;
        // Two exact factors reach every double, subnormal ones included.
        let half = fitted.exponent / 2;
        whole * power_of_two(half) * power_of_two(fitted.exponent - half)
    }

    /// self / divisor with about `bits` significant bits, moved in the stated
    /// direction. The divisor must be positive; a zero or negative one gives
    /// `None`.
    pub fn divided(&self, divisor: &Self, bits: u32, toward: Toward) -> Option<Self> {
        if divisor.signum() <= 0 {
            return None;
        }
        let Some(magnitude) = self.magnitude() else {
            return Some(Self::ZERO);
        };
        let widen =
            (i64::from(bits) + divisor.magnitude().unwrap_or(0) - divisor.exponent - magnitude
                + self.exponent
                + 1)
            .max(0);
        let numerator = &self.significand << widen as usize;
        let divisor_m = &divisor.significand;
        let mut quotient = &numerator / divisor_m;
        // Integer division truncates toward zero.
        let exact = &quotient * divisor_m == numerator;
        if !exact {
            match (toward, self.signum() > 0) {
                (Toward::Up, true) => quotient += IBig::ONE,
                (Toward::Down, false) => quotient -= IBig::ONE,
                (Toward::Up, false) | (Toward::Down, true) => {}
            }
        }
        Some(Self::new(
            quotient,
            self.exponent - divisor.exponent - widen,
        ))
    }

    /// An upper bound on √self, good to about `bits` bits; zero for negatives.
    pub fn sqrt_up(&self, bits: u32) -> Self {
        if self.signum() <= 0 {
            return Self::ZERO;
        }
        let len = self.significand.bit_len() as i64;
        let mut widen = (2 * i64::from(bits) - len).max(0);
        if (self.exponent - widen) % 2 != 0 {
            widen += 1;
        }
        let radicand: UBig = (&self.significand << widen as usize).into_parts().1;
        let root = radicand.sqrt();
        let root = if &root * &root == radicand {
            root
        } else {
            root + UBig::ONE
        };
        Self::new(IBig::from(root), (self.exponent - widen) / 2)
    }

    /// The number as a ratio of integers.
    pub fn to_rational(&self) -> RBig {
        let power = UBig::ONE << self.exponent.unsigned_abs() as usize;
        if self.exponent >= 0 {
            RBig::from(&self.significand * IBig::from(power))
        } else {
            RBig::from_parts(self.significand.clone(), power)
        }
    }

    /// The nearest dyadic on the grid of 2^`grid` to a ratio, in the stated
    /// direction.
    pub fn from_rational(ratio: &RBig, grid: i64, toward: Toward) -> Self {
        let numerator = Self::new(ratio.numerator().clone(), 0);
        let denominator = IBig::from(ratio.denominator().clone());
        let shifted = if grid <= 0 {
            numerator.significand << grid.unsigned_abs() as usize
        } else {
            return Self::from_rational(ratio, 0, toward).on_grid(grid, toward);
        };
        let truncated = &shifted / &denominator;
        let rest = shifted - &truncated * &denominator;
        let significand = match (toward, rest.is_zero(), rest.sign()) {
            (Toward::Up, false, Sign::Positive) => truncated + IBig::ONE,
            (Toward::Down, false, Sign::Negative) => truncated - IBig::ONE,
            _ => truncated,
        };
        Self::new(significand, grid)
    }
}

/// 2^power for a power within the doubles' normal and subnormal range.
fn power_of_two(power: i64) -> f64 {
    if power >= -1022 {
        f64::from_bits(((power + 1023) as u64) << 52)
    } else {
        f64::from_bits(1u64 << (power + 1074))
    }
}

/// Both significands on the smaller of the two exponents.
fn aligned(a: &Dyadic, b: &Dyadic) -> (IBig, IBig, i64) {
    let exponent = a.exponent.min(b.exponent);
    (
        &a.significand << (a.exponent - exponent) as usize,
        &b.significand << (b.exponent - exponent) as usize,
        exponent,
    )
}

impl Add for &Dyadic {
    type Output = Dyadic;
    fn add(self, other: Self) -> Dyadic {
        if self.is_zero() {
            return other.clone();
        }
        if other.is_zero() {
            return self.clone();
        }
        let (a, b, exponent) = aligned(self, other);
        Dyadic::new(a + b, exponent)
    }
}

impl Sub for &Dyadic {
    type Output = Dyadic;
    fn sub(self, other: Self) -> Dyadic {
        self + &-other
    }
}

impl Mul for &Dyadic {
    type Output = Dyadic;
    fn mul(self, other: Self) -> Dyadic {
        if self.is_zero() || other.is_zero() {
            return Dyadic::ZERO;
        }
        Dyadic::new(
            &self.significand * &other.significand,
            self.exponent + other.exponent,
        )
    }
}

impl Neg for &Dyadic {
    type Output = Dyadic;
    fn neg(self) -> Dyadic {
        Dyadic::new(-&self.significand, self.exponent)
    }
}

impl PartialEq for Dyadic {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Dyadic {}

impl PartialOrd for Dyadic {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Dyadic {
    fn cmp(&self, other: &Self) -> Ordering {
        match self.signum().cmp(&other.signum()) {
            Ordering::Equal => {}
            unequal => return unequal,
        }
        // Numbers of different size need no alignment (exponents may be far apart).
        if let (Some(a), Some(b)) = (self.magnitude(), other.magnitude()) {
            if a != b {
                return if self.signum() > 0 {
                    a.cmp(&b)
                } else {
                    b.cmp(&a)
                };
            }
        }
        let (a, b, _) = aligned(self, other);
        a.cmp(&b)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn exact(x: f64) -> Dyadic {
        Dyadic::from_f64(x).expect("finite")
    }

    #[test]
    fn doubles_survive_the_round_trip() {
        for x in [
            0.0,
            1.0,
            -3.25,
            f64::MAX,
            f64::MIN_POSITIVE,
            5e-324,
            -5e-324,
            1e300,
            2.0f64.powi(-1060),
        ] {
            assert_eq!(exact(x).to_f64(Toward::Up), x, "{x:e} up");
            assert_eq!(exact(x).to_f64(Toward::Down), x, "{x:e} down");
        }
        assert!(Dyadic::from_f64(f64::NAN).is_none());
        assert!(Dyadic::from_f64(f64::INFINITY).is_none());
    }

    #[test]
    fn negative_numbers_are_moved_the_right_way() {
        let x = Dyadic::new(IBig::from(-5), -1);
        assert_eq!(x.on_grid(0, Toward::Down), exact(-3.0));
        assert_eq!(x.on_grid(0, Toward::Up), exact(-2.0));
        let huge = Dyadic::new(IBig::from(-1), 5000);
        assert_eq!(huge.to_f64(Toward::Up), -f64::MAX);
        assert_eq!(huge.to_f64(Toward::Down), f64::NEG_INFINITY);
        let tiny = Dyadic::new(IBig::from(1), -5000);
        assert_eq!(tiny.to_f64(Toward::Up), 5e-324);
        assert_eq!(tiny.to_f64(Toward::Down), 0.0);
    }

    proptest! {
        #[test]
        fn quotients_and_roots_lie_on_the_stated_side(a in -1e18f64..1e18, b in 1e-9f64..1e9) {
            let (x, y) = (exact(a), exact(b));
            let up = x.divided(&y, 40, Toward::Up).expect("positive divisor");
            let down = x.divided(&y, 40, Toward::Down).expect("positive divisor");
            prop_assert!(&up * &y >= x && &down * &y <= x, "{a:e} / {b:e}");
            let width = &up - &down;
            prop_assert!(width <= up.abs().max(down.abs()).scaled(-37), "{a:e} / {b:e} is too wide");
            let root = y.sqrt_up(40);
            prop_assert!(&root * &root >= y, "√{b:e}");
            prop_assert!(root.to_f64(Toward::Down) <= b.sqrt() * (1.0 + 1e-11), "√{b:e} is too large");
        }

        #[test]
        fn rounding_encloses(a in proptest::num::f64::NORMAL, b in proptest::num::f64::NORMAL) {
            let sum = &exact(a) + &exact(b);
            prop_assert!(exact_or_max(sum.to_f64(Toward::Down)) <= sum, "{a:e} + {b:e}");
            prop_assert!(exact(a).rounded(10, Toward::Down) <= exact(a));
            prop_assert!(exact(a).rounded(10, Toward::Up) >= exact(a));
            let ratio = exact(a).to_rational();
            prop_assert!(Dyadic::from_rational(&ratio, -1200, Toward::Up) == exact(a), "{a:e}");
            prop_assert!(Dyadic::from_rational(&ratio, 3, Toward::Up) >= exact(a), "{a:e}");
            prop_assert!(Dyadic::from_rational(&ratio, 3, Toward::Down) <= exact(a), "{a:e}");
        }
    }

    fn exact_or_max(x: f64) -> Dyadic {
        Dyadic::from_f64(x.max(-f64::MAX)).expect("not NaN")
    }
}
