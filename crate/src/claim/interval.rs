//! Real and complex intervals at one working precision.
//!
//! Everything here contains the exact result; nothing else is promised.

use dashu_int::IBig;
use dashu_ratio::RBig;

use crate::num::exact::DyadicInterval;

/// A real interval.
pub(super) type Real = DyadicInterval;

/// A complex rectangle.
#[derive(Clone, Debug)]
pub(super) struct Complex {
    pub(super) re: Real,
    pub(super) im: Real,
}

/// Working precision of interval operations, in bits.
#[derive(Clone, Copy, Debug)]
pub(super) struct Precision(pub(super) usize);

/// The point zero.
pub(super) fn zero() -> Real {
    Real::point(IBig::ZERO, 0)
}

/// The point one.
pub(super) fn one() -> Real {
    Real::point(IBig::ONE, 0)
}

/// −x.
pub(super) fn neg(x: &Real) -> Real {
    Real {
        lower: -x.upper.clone(),
        upper: -x.lower.clone(),
        exponent: x.exponent,
    }
}

/// The interval's ends.
pub(super) fn ends(x: &Real) -> (RBig, RBig) {
    (x.lower_ratio(), x.upper_ratio())
}

/// Midpoint, exactly.
pub(super) fn middle(x: &Real) -> RBig {
    (x.lower_ratio() + x.upper_ratio()) / RBig::from(2)
}

/// The double nearest to the midpoint; for searches, never for bounds.
pub(super) fn approx(x: &Real) -> f64 {
    middle(x).to_f64().value()
}

impl Precision {
    pub(super) fn of(self, x: &RBig) -> Real {
        Real::of_ratio(x, self.0)
    }

    /// The hull of two rational ends.
    pub(super) fn between(self, low: &RBig, high: &RBig) -> Real {
        let (a, b) = (self.of(low), self.of(high));
        let exponent = a.exponent.min(b.exponent);
        let lift = |x: &IBig, e: i64| x << usize::try_from(e - exponent).unwrap_or(0);
        Real {
            lower: lift(&a.lower, a.exponent),
            upper: lift(&b.upper, b.exponent),
            exponent,
        }
    }

    pub(super) fn add(self, x: &Real, y: &Real) -> Real {
        x.add(y, self.0)
    }

    pub(super) fn sub(self, x: &Real, y: &Real) -> Real {
        x.add(&neg(y), self.0)
    }

    pub(super) fn mul(self, x: &Real, y: &Real) -> Real {
        x.mul(y, self.0)
    }

    /// x², never below zero.
    pub(super) fn square(self, x: &Real) -> Real {
        let mut square = x.mul(x, self.0);
        if x.holds_zero() {
            square.lower = IBig::ZERO;
        }
        square
    }

    /// x/y; `None` when y may be zero.
    pub(super) fn div(self, x: &Real, y: &Real) -> Option<Real> {
        Some(x.mul(&y.reciprocal(self.0)?, self.0))
    }

    /// √x of a number known not to be negative.
    pub(super) fn sqrt(self, x: &Real) -> Option<Real> {
        let mut clipped = x.clone();
        if clipped.lower < IBig::ZERO {
            clipped.lower = IBig::ZERO;
        }
        if clipped.upper < IBig::ZERO {
            return None;
        }
        clipped.root(self.0)
    }

    pub(super) fn cadd(self, x: &Complex, y: &Complex) -> Complex {
        Complex {
            re: self.add(&x.re, &y.re),
            im: self.add(&x.im, &y.im),
        }
    }

    pub(super) fn csub(self, x: &Complex, y: &Complex) -> Complex {
        Complex {
            re: self.sub(&x.re, &y.re),
            im: self.sub(&x.im, &y.im),
        }
    }

    pub(super) fn cmul(self, x: &Complex, y: &Complex) -> Complex {
        Complex {
            re: self.sub(&self.mul(&x.re, &y.re), &self.mul(&x.im, &y.im)),
            im: self.add(&self.mul(&x.re, &y.im), &self.mul(&x.im, &y.re)),
        }
    }

    pub(super) fn scale(self, x: &Complex, k: &Real) -> Complex {
        Complex {
            re: self.mul(&x.re, k),
            im: self.mul(&x.im, k),
        }
    }

    /// |x|².
    pub(super) fn norm_squared(self, x: &Complex) -> Real {
        self.add(&self.square(&x.re), &self.square(&x.im))
    }
}

impl Complex {
    pub(super) fn zero() -> Self {
        Self {
            re: zero(),
            im: zero(),
        }
    }

    pub(super) fn conj(&self) -> Self {
        Self {
            re: self.re.clone(),
            im: neg(&self.im),
        }
    }
}
