//! Normal form of sums of rational multiples of √d·π^k.
//!
//! Notation: a term is c·√d·π^k with c rational and not zero, d ≥ 1 an
//! integer, k an integer. Two radicands are *akin* when their product is a
//! perfect square; then √d' = √(d·d')/d · √d. A sum keeps at most one term
//! for each kind of radicand and each k.
//!
//! Square roots of integers of different kinds are linearly independent over
//! the rationals (Besicovitch 1940), and π is transcendental (Lindemann
//! 1882), so such a sum is zero exactly when it has no terms. No integer has
//! to be factored for that.

use super::dyadic::{pi, DyadicInterval};
use super::{ArithmeticError, MAX_BITS};
use dashu_base::{BitTest, Signed, SquareRoot, UnsignedAbs};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// More terms than this are refused: products of sums multiply their number.
const MAX_TERMS: usize = 64;

/// Bits that the factors of a sum may have together. A product of two sums forms
/// thousands of them, and a greatest common divisor for each: at the bound of a
/// single one that would take seconds.
const MAX_SUM_BITS: usize = 2 * MAX_BITS;

/// One term c·√d·π^k.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Term {
    pub(super) factor: RBig,
    pub(super) radicand: UBig,
    pub(super) pi_power: i32,
}

/// A sum of terms; empty means zero.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Terms(pub(super) Vec<Term>);

/// Square root of a perfect square.
fn whole_root(x: &UBig) -> Option<UBig> {
    let root = x.sqrt();
    (&root * &root == *x).then_some(root)
}

/// Refuses a ratio that has grown too long.
pub(super) fn bounded(r: RBig) -> Result<RBig, ArithmeticError> {
    if r.numerator().bit_len().max(r.denominator().bit_len()) > MAX_BITS {
        Err(ArithmeticError::TooLarge)
    } else {
        Ok(r)
    }
}

impl Term {
    /// c·√d·π^k with the squares of small primes taken out of d.
    fn tidy(mut factor: RBig, mut radicand: UBig, pi_power: i32) -> Self {
        if let Some(root) = whole_root(&radicand) {
            factor *= RBig::from(root);
            return Self {
                factor,
                radicand: UBig::ONE,
                pi_power,
            };
        }
        for p in [2u32, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31] {
            let square = UBig::from(p * p);
            loop {
                let quotient = &radicand / &square;
                if &quotient * &square != radicand {
                    break;
                }
                radicand = quotient;
                factor *= RBig::from(UBig::from(p));
            }
        }
        Self {
            factor,
            radicand,
            pi_power,
        }
    }

    fn mul(&self, other: &Self) -> Result<Self, ArithmeticError> {
        let factor = bounded(&self.factor * &other.factor)?;
        let radicand = &self.radicand * &other.radicand;
        if radicand.bit_len() > MAX_BITS {
            return Err(ArithmeticError::TooLarge);
        }
        let pi_power = self
            .pi_power
            .checked_add(other.pi_power)
            .ok_or(ArithmeticError::TooLarge)?;
        Ok(Self::tidy(factor, radicand, pi_power))
    }

    /// 1/(c√d π^k) = √d/(c·d)·π^−k.
    fn reciprocal(&self) -> Result<Self, ArithmeticError> {
        let factor = bounded(RBig::ONE / (&self.factor * RBig::from(self.radicand.clone())))?;
        let pi_power = self
            .pi_power
            .checked_neg()
            .ok_or(ArithmeticError::TooLarge)?;
        Ok(Self {
            factor,
            radicand: self.radicand.clone(),
            pi_power,
        })
    }

    fn enclose(&self, bits: usize) -> DyadicInterval {
        let mut x = DyadicInterval::of_ratio(&self.factor, bits);
        if !self.radicand.is_one() {
            let d = DyadicInterval::point(IBig::from(self.radicand.clone()), 0);
            if let Some(root) = d.root(bits) {
                x = x.mul(&root, bits);
            }
        }
        if self.pi_power != 0 {
            let mut base = pi(bits);
            if self.pi_power < 0 {
                // π is never near zero, so its reciprocal always exists.
                base = base.reciprocal(bits).unwrap_or(base);
            }
            let mut left = self.pi_power.unsigned_abs();
            while left > 0 {
                if left % 2 == 1 {
                    x = x.mul(&base, bits);
                }
                base = base.mul(&base, bits);
                left /= 2;
            }
        }
        x
    }
}

impl Terms {
    pub(super) fn of_ratio(r: RBig) -> Self {
        if r.is_zero() {
            Self(Vec::new())
        } else {
            Self(vec![Term {
                factor: r,
                radicand: UBig::ONE,
                pi_power: 0,
            }])
        }
    }

    pub(super) fn pi() -> Self {
        Self(vec![Term {
            factor: RBig::ONE,
            radicand: UBig::ONE,
            pi_power: 1,
        }])
    }

    /// √r for r ≥ 0, as √(p·q)/q.
    pub(super) fn root_of_ratio(r: &RBig) -> Result<Self, ArithmeticError> {
        if r.is_negative() {
            return Err(ArithmeticError::NegativeRoot);
        }
        if r.is_zero() {
            return Ok(Self(Vec::new()));
        }
        let q = r.denominator().clone();
        let radicand = r.numerator().unsigned_abs() * &q;
        let factor = RBig::from_parts(IBig::ONE, q);
        Ok(Self(vec![Term::tidy(factor, radicand, 0)]))
    }

    /// The ratio this sum is, if it is one.
    pub(super) fn ratio(&self) -> Option<RBig> {
        match self.0.as_slice() {
            [] => Some(RBig::ZERO),
            [t] if t.radicand.is_one() && t.pi_power == 0 => Some(t.factor.clone()),
            _ => None,
        }
    }

    pub(super) fn is_one(&self) -> bool {
        self.ratio().is_some_and(|r| r.is_one())
    }

    fn push(&mut self, term: Term) -> Result<(), ArithmeticError> {
        for i in 0..self.0.len() {
            let mine = &self.0[i];
            if mine.pi_power != term.pi_power {
                continue;
            }
            let Some(root) = whole_root(&(&mine.radicand * &term.radicand)) else {
                continue;
            };
            let ratio = RBig::from_parts(IBig::from(root), mine.radicand.clone());
            let factor = bounded(&mine.factor + term.factor * ratio)?;
            if factor.is_zero() {
                self.0.remove(i);
            } else {
                self.0[i].factor = factor;
            }
            return self.limited();
        }
        if self.0.len() == MAX_TERMS {
            return Err(ArithmeticError::TooLarge);
        }
        self.0.push(term);
        self.limited()
    }

    fn limited(&self) -> Result<(), ArithmeticError> {
        let bits =
            |term: &Term| term.factor.numerator().bit_len() + term.factor.denominator().bit_len();
        if self.0.iter().map(bits).sum::<usize>() > MAX_SUM_BITS {
            return Err(ArithmeticError::TooLarge);
        }
        Ok(())
    }

    pub(super) fn add(&self, other: &Self) -> Result<Self, ArithmeticError> {
        let mut sum = self.clone();
        for term in &other.0 {
            sum.push(term.clone())?;
        }
        Ok(sum)
    }

    pub(super) fn mul(&self, other: &Self) -> Result<Self, ArithmeticError> {
        let mut product = Self(Vec::new());
        for a in &self.0 {
            for b in &other.0 {
                product.push(a.mul(b)?)?;
            }
        }
        Ok(product)
    }

    /// 1/x when x has one term, or two with the same power of π (by the
    /// conjugate: 1/(a + b) = (a − b)/(a² − b²)); `None` otherwise.
    pub(super) fn reciprocal(&self) -> Option<Result<Self, ArithmeticError>> {
        match self.0.as_slice() {
            [t] => Some(t.reciprocal().map(|t| Self(vec![t]))),
            [a, b] if a.pi_power == b.pi_power => Some(conjugate_quotient(a, b)),
            _ => None,
        }
    }

    /// √x when x is a single term q·π^2k; `None` when the root leaves the
    /// normal form. The caller has made sure x > 0.
    pub(super) fn root(&self) -> Option<Result<Self, ArithmeticError>> {
        match self.0.as_slice() {
            [t] if t.radicand.is_one() && t.pi_power % 2 == 0 => {
                Some(Self::root_of_ratio(&t.factor).map(|mut root| {
                    for term in &mut root.0 {
                        term.pi_power = t.pi_power / 2;
                    }
                    root
                }))
            }
            _ => None,
        }
    }

    pub(super) fn enclose(&self, bits: usize) -> DyadicInterval {
        let mut sum = DyadicInterval::point(IBig::ZERO, 0);
        for term in &self.0 {
            sum = sum.add(&term.enclose(bits), bits);
        }
        sum
    }
}

fn conjugate_quotient(a: &Term, b: &Term) -> Result<Terms, ArithmeticError> {
    let minus_b = Term {
        factor: -&b.factor,
        ..b.clone()
    };
    let square = |t: &Term| &t.factor * &t.factor * RBig::from(t.radicand.clone());
    // The kinds differ, so a² ≠ b². π^2k of the denominator against π^k above
    // leaves π^−k.
    let scale = bounded(RBig::ONE / (square(a) - square(b)))?;
    let shift = a
        .pi_power
        .checked_mul(-2)
        .ok_or(ArithmeticError::TooLarge)?;
    let by = Terms(vec![Term {
        factor: scale,
        radicand: UBig::ONE,
        pi_power: shift,
    }]);
    Terms(vec![a.clone(), minus_b]).mul(&by)
}
