//! Upper bounds in double precision, without rounding modes.
//!
//! IEEE 754 rounds to nearest: a computed sum, product, quotient or root of
//! non-negative doubles is at most one step of the grid below the true one, so
//! the next double up is a bound. Sums of many terms use one factor instead of
//! a step each.
//!
//! Notation: u = 2^−53, γₖ = k·u/(1 − k·u) (Higham, *Accuracy and Stability of
//! Numerical Algorithms*, 2nd ed. 2002, section 3.1).

use super::dyadic::Dyadic;

/// The unit roundoff, 2^−53.
pub const UNIT: f64 = f64::EPSILON / 2.0;

/// A non-negative double that is not below the quantity it bounds; +∞ says
/// that nothing is known.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Upper(f64);

impl Upper {
    /// The bound of an exact zero.
    pub const ZERO: Self = Self(0.0);

    /// No knowledge.
    pub const UNKNOWN: Self = Self(f64::INFINITY);

    /// A bound that is known to hold: |x|. NaN becomes +∞.
    pub fn of(x: f64) -> Self {
        if x.is_nan() {
            Self::UNKNOWN
        } else {
            Self(x.abs())
        }
    }

    /// The bound itself.
    pub fn get(self) -> f64 {
        self.0
    }

    /// Whether the bound is finite.
    pub fn is_known(self) -> bool {
        self.0 < f64::INFINITY
    }

    /// A bound on self + other.
    pub fn plus(self, other: Self) -> Self {
        if other.0 == 0.0 {
            return self;
        }
        if self.0 == 0.0 {
            return other;
        }
        Self::of((self.0 + other.0).next_up())
    }

    /// A bound on self · other.
    pub fn times(self, other: Self) -> Self {
        // 0 · ∞: a zero bound is an exact zero.
        if self.0 == 0.0 || other.0 == 0.0 {
            return Self::ZERO;
        }
        Self::of((self.0 * other.0).next_up())
    }

    /// A bound on self / divisor, where `divisor` does not exceed the true
    /// divisor; no knowledge when it is not positive.
    pub fn over(self, divisor: f64) -> Self {
        if divisor > 0.0 {
            if self.0 == 0.0 {
                return Self::ZERO;
            }
            Self::of((self.0 / divisor).next_up())
        } else {
            Self::UNKNOWN
        }
    }

    /// A bound on √self.
    pub fn sqrt(self) -> Self {
        if self.0 == 0.0 {
            return Self::ZERO;
        }
        Self::of(self.0.sqrt().next_up())
    }

    /// The smaller of two bounds on the same quantity.
    pub fn least(self, other: Self) -> Self {
        if other.0 < self.0 {
            other
        } else {
            self
        }
    }

    /// A bound on the larger of two quantities.
    pub fn most(self, other: Self) -> Self {
        if other.0 > self.0 {
            other
        } else {
            self
        }
    }

    /// A double not above 1 − self; may be negative.
    pub fn one_minus(self) -> f64 {
        (1.0 - self.0).next_down()
    }

    /// The bound as an exact number; `None` when nothing is known.
    pub fn exact(self) -> Option<Dyadic> {
        Dyadic::from_f64(self.0)
    }
}

/// γₖ, rounded up; no knowledge once k·u reaches a half.
pub fn gamma(k: usize) -> Upper {
    // k < 2^52 is exact in double, and the product with 2^−53 as well.
    let product = k as f64 * UNIT;
    if product < 0.5 {
        Upper::of(product).over((1.0 - product).next_down())
    } else {
        Upper::UNKNOWN
    }
}

/// A bound on Σ xₖ².
///
/// k squares and their sum: factor 1 + γₖ, and each square below the normal
/// range may lose up to 2^−1074.
pub fn square_sum_up(terms: impl Iterator<Item = f64>) -> Upper {
    let mut count = 0usize;
    let mut sum = 0.0f64;
    let mut seen = false;
    for x in terms {
        sum += x * x;
        seen |= x != 0.0;
        count += 1;
    }
    bound_square_sum(sum, count, !seen)
}

/// A bound on an exact sum of `count` squares from its computed value, as
/// [`square_sum_up`] has it; `is_zero` says that every square is of a zero.
pub fn bound_square_sum(computed: f64, count: usize, is_zero: bool) -> Upper {
    let lost = if is_zero {
        Upper::ZERO
    } else {
        Upper::of(count as f64).times(Upper::of(f64::from_bits(1)))
    };
    stretched(Upper::of(computed), count).plus(lost)
}

/// sum / (1 − k·u), for a computed sum that passed through k roundings.
///
/// Plain summation of k terms in any order errs by at most γₖ₋₁ times the sum
/// (Higham 2002, section 4.2), and sums do not underflow.
pub fn stretched(sum: Upper, roundings: usize) -> Upper {
    sum.over((1.0 - roundings as f64 * UNIT).next_down())
}

#[cfg(test)]
mod tests {
    use super::super::dyadic::Dyadic;
    use super::*;
    use proptest::prelude::*;

    fn exact(x: f64) -> Dyadic {
        Dyadic::from_f64(x).expect("finite")
    }

    #[test]
    fn nothing_known_stays_unknown() {
        assert!(!Upper::of(f64::NAN).is_known());
        assert!(!Upper::of(1.0).over(0.0).is_known());
        assert!(!Upper::UNKNOWN.plus(Upper::of(1.0)).is_known());
        assert_eq!(Upper::ZERO.times(Upper::UNKNOWN), Upper::ZERO);
        #[cfg(target_pointer_width = "64")]
        assert!(!gamma(1 << 52).is_known());
    }

    proptest! {
        #[test]
        fn bounds_are_not_below_the_exact_result(
            a in 0.0f64..1e10,
            b in 1e-12f64..1e10,
            terms in proptest::collection::vec(-1e8f64..1e8, 0..60),
        ) {
            let (ua, ub) = (Upper::of(a), Upper::of(b));
            prop_assert!(exact(ua.plus(ub).get()) >= &exact(a) + &exact(b), "{a:e} + {b:e}");
            prop_assert!(exact(ua.times(ub).get()) >= &exact(a) * &exact(b), "{a:e} · {b:e}");
            prop_assert!(&exact(ua.over(b).get()) * &exact(b) >= exact(a), "{a:e} / {b:e}");
            let root = exact(ua.sqrt().get());
            prop_assert!(&root * &root >= exact(a), "√{a:e}");
            let mut sum = Dyadic::ZERO;
            let mut squares = Dyadic::ZERO;
            for &x in &terms {
                sum = &sum + &exact(x.abs());
                squares = &squares + &(&exact(x) * &exact(x));
            }
            prop_assert!(exact(stretched(Upper::of(terms.iter().map(|x| x.abs()).sum()), terms.len()).get()) >= sum, "{terms:?}");
            prop_assert!(exact(square_sum_up(terms.iter().copied()).get()) >= squares, "{terms:?}");
        }

        #[test]
        fn squares_that_underflow_are_counted(terms in proptest::collection::vec(-1e-160f64..1e-160, 1..20)) {
            let mut squares = Dyadic::ZERO;
            for &x in &terms {
                squares = &squares + &(&exact(x) * &exact(x));
            }
            prop_assert!(exact(square_sum_up(terms.iter().copied()).get()) >= squares, "{terms:?}");
        }
    }
}
