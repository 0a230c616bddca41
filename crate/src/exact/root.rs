//! Isolating intervals of real roots, refined at will.
//!
//! Notation: an interval is [m, m+1]·2^−k; a root found exactly is a point.

use std::sync::Arc;

use dashu_base::{Abs, BitTest, Signed};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::polynomial::Polynomial;

/// One real root of a square-free polynomial with an interval that holds it
/// and no other root of that polynomial.
#[derive(Clone, Debug)]
pub struct Isolated {
    polynomial: Arc<Polynomial>,
    place: Place,
    /// log₂ of the parts the next refinement tries.
    stride: usize,
}

#[derive(Clone, Debug)]
enum Place {
    /// The root itself.
    Point(RBig),
    /// [m, m+1]·2^−k with a change of sign between the ends.
    Between { m: IBig, k: i64 },
}

impl Isolated {
    /// A root known exactly.
    pub(super) fn point(polynomial: Arc<Polynomial>, value: RBig) -> Self {
        Self {
            polynomial,
            place: Place::Point(value),
            stride: 1,
        }
    }

    /// The square-free integer polynomial this is a root of.
    pub fn polynomial(&self) -> &Polynomial {
        &self.polynomial
    }

    /// Names a polynomial of lower degree with the same root.
    pub(super) fn set_polynomial(&mut self, polynomial: Arc<Polynomial>) {
        self.polynomial = polynomial;
    }

    /// Greatest known number not above the root.
    pub fn lower(&self) -> RBig {
        match &self.place {
            Place::Point(value) => value.clone(),
            Place::Between { m, k } => dyadic(m, *k),
        }
    }

    /// Least known number not below the root.
    pub fn upper(&self) -> RBig {
        match &self.place {
            Place::Point(value) => value.clone(),
            Place::Between { m, k } => dyadic(&(m + IBig::ONE), *k),
        }
    }

    /// The root itself where it is known exactly.
    pub fn exact(&self) -> Option<&RBig> {
        match &self.place {
            Place::Point(value) => Some(value),
            Place::Between { .. } => None,
        }
    }

    /// Narrows the interval to a width of at most 2^−bits.
    pub fn refine(&mut self, bits: i64) {
        while let Place::Between { m, k } = &self.place {
            if *k >= bits {
                return;
            }
            let wanted = usize::try_from(bits - k).unwrap_or(usize::MAX);
            let stride = self.stride.min(wanted).max(1);
            let (place, hit) = narrowed(&self.polynomial, m, *k, stride);
            self.place = place;
            self.stride = if hit { stride * 2 } else { (stride / 2).max(1) };
        }
    }

    /// Narrows the interval until its width is at most 2^−bits of its
    /// magnitude. An irrational root is never zero, so this ends.
    pub fn refine_relative(&mut self, bits: i64) {
        loop {
            let Place::Between { m, k } = &self.place else {
                return;
            };
            let size = i64::try_from(m.bit_len()).unwrap_or(i64::MAX);
            // |root| ≥ 2^(size−2)·2^−k once the interval is clear of zero.
            if size >= 2 && size - 2 >= bits {
                return;
            }
            let target = *k + (bits + 2 - size).max(1);
            self.refine(target);
        }
    }
}

/// m·2^−k.
fn dyadic(m: &IBig, k: i64) -> RBig {
    let shift = usize::try_from(k.unsigned_abs()).unwrap_or(usize::MAX);
    if k >= 0 {
        RBig::from_parts(m.clone(), UBig::ONE << shift)
    } else {
        RBig::from(m << shift)
    }
}

/// Sign of the polynomial at m·2^−k, as a number of the value's sign that is
/// comparable between points of equal k.
fn value_at(polynomial: &Polynomial, m: &IBig, k: i64) -> IBig {
    let shift = usize::try_from(k.unsigned_abs()).unwrap_or(usize::MAX);
    if k >= 0 {
        polynomial.dyadic_value(m, shift)
    } else {
        polynomial.dyadic_value(&(m << shift), 0)
    }
}

/// Number of roots above m·2^−k.
fn above(polynomial: &Polynomial, m: &IBig, k: i64) -> usize {
    let shift = usize::try_from(k.unsigned_abs()).unwrap_or(usize::MAX);
    if k >= 0 {
        polynomial.roots_above(m, shift)
    } else {
        polynomial.roots_above(&(m << shift), 0)
    }
}

/// One step of quadratic interval refinement (Abbott 2006): the interval is
/// cut into 2^stride parts and the part the secant points at is tried. Returns
/// the new place and whether the guess held.
fn narrowed(polynomial: &Polynomial, m: &IBig, k: i64, stride: usize) -> (Place, bool) {
    let parts = IBig::ONE << stride;
    let left = value_at(polynomial, m, k);
    let right = value_at(polynomial, &(m + IBig::ONE), k);
    let (left_size, right_size) = (left.clone().abs(), right.clone().abs());
    let mut part = (&left_size * &parts) / (&left_size + &right_size);
    if part >= parts {
        part = &parts - IBig::ONE;
    }
    let fine = k + i64::try_from(stride).unwrap_or(i64::MAX);
    let first = m * &parts + &part;
    let at_first = if part.is_zero() {
        None
    } else {
        Some(value_at(polynomial, &first, fine))
    };
    if at_first.as_ref().is_some_and(IBig::is_zero) {
        return (Place::Point(dyadic(&first, fine)), true);
    }
    let first_left = at_first.is_none_or(|value| value.is_negative() == left.is_negative());
    if !first_left {
        return (bisected(polynomial, m, k, left.is_negative()), false);
    }
    let second = &first + IBig::ONE;
    if second == (m + IBig::ONE) * &parts {
        return (Place::Between { m: first, k: fine }, true);
    }
    let at_second = value_at(polynomial, &second, fine);
    if at_second.is_zero() {
        return (Place::Point(dyadic(&second, fine)), true);
    }
    if at_second.is_negative() == left.is_negative() {
        return (bisected(polynomial, m, k, left.is_negative()), false);
    }
    (Place::Between { m: first, k: fine }, true)
}

/// One step of plain bisection.
fn bisected(polynomial: &Polynomial, m: &IBig, k: i64, left_negative: bool) -> Place {
    let middle = (m << 1) + IBig::ONE;
    let value = value_at(polynomial, &middle, k + 1);
    if value.is_zero() {
        Place::Point(dyadic(&middle, k + 1))
    } else if value.is_negative() == left_negative {
        Place::Between {
            m: middle,
            k: k + 1,
        }
    } else {
        Place::Between {
            m: m << 1,
            k: k + 1,
        }
    }
}

/// Isolates every root of a square-free polynomial all of whose roots are
/// real, ascending. A polynomial with complex roots would be counted wrongly;
/// those of Hermitian problems have none.
pub(super) fn isolate(polynomial: &Arc<Polynomial>) -> Vec<Isolated> {
    let mut roots = Vec::new();
    if polynomial.degree() == 0 {
        return roots;
    }
    let reach = -root_bound_bits(polynomial);
    let zero = above(polynomial, &IBig::ZERO, reach);
    // (m, k, roots above the left end, roots above the right end)
    let mut open = vec![
        (IBig::ZERO, reach, zero, 0),
        (IBig::NEG_ONE, reach, polynomial.degree(), zero),
    ];
    while let Some((m, k, above_left, above_right)) = open.pop() {
        let inside = above_left - above_right;
        if inside == 0 {
            continue;
        }
        if inside == 1 {
            let right = &m + IBig::ONE;
            if value_at(polynomial, &right, k).is_zero() {
                roots.push(Isolated::point(Arc::clone(polynomial), dyadic(&right, k)));
                continue;
            }
            if !value_at(polynomial, &m, k).is_zero() {
                let place = Place::Between { m, k };
                roots.push(Isolated {
                    polynomial: Arc::clone(polynomial),
                    place,
                    stride: 1,
                });
                continue;
            }
        }
        let middle = (&m << 1) + IBig::ONE;
        let above_middle = above(polynomial, &middle, k + 1);
        open.push((middle, k + 1, above_middle, above_right));
        open.push((m << 1, k + 1, above_left, above_middle));
    }
    roots
}

/// b with every root of absolute value below 2ᵇ: Fujiwara's bound
/// 2·max |c_{n−i}/cₙ|^{1/i} in whole bits.
fn root_bound_bits(polynomial: &Polynomial) -> i64 {
    let coefficients = polynomial.coefficients();
    let degree = polynomial.degree();
    let bits = |value: &IBig| i64::try_from(value.bit_len()).unwrap_or(i64::MAX);
    let lead = bits(&coefficients[degree]);
    let mut bound = i64::MIN;
    for back in 1..=degree {
        let coefficient = &coefficients[degree - back];
        if coefficient.is_zero() {
            continue;
        }
        // |c| < 2^bits(c) and cₙ ≥ 2^(lead−1).
        let exponent = bits(coefficient) - lead + 1;
        let step = i64::try_from(back).unwrap_or(i64::MAX);
        bound = bound.max(exponent.div_euclid(step) + 1);
    }
    // All other coefficients zero: the only root is 0 and any bound serves.
    if bound == i64::MIN {
        1
    } else {
        bound + 1
    }
}
