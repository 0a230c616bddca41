//! Eigenvalues in closed form: rational numbers and quadratic surds.
//!
//! Notation: an integer polynomial g of leading coefficient c. If p/q is a
//! rational root, q divides c, so c·(p/q) is an integer; if ax² + bx + e is a
//! factor, a divides c, so c times the sum and c times the product of its
//! roots are integers (Gauss's lemma). Intervals narrow enough to hold one
//! integer each therefore leave one candidate, which division then decides:
//! every rational root and every quadratic factor is found.

use core::fmt;
use std::sync::Arc;

use dashu_base::{BitTest, Gcd, Signed, SquareRootRem};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::gauss::magnitude;
use super::polynomial::Polynomial;
use super::root::Isolated;

/// A number in closed form. Its `Display` writes `3/2`, `(3 + √5)/2`, `−√2`,
/// `510 + 100√26`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ClosedForm {
    /// A ratio of integers.
    Rational(RBig),
    /// (rational + factor·√radicand)/divisor, irrational.
    Surd {
        /// Rational part p of (p + q√d)/r.
        rational: IBig,
        /// Factor q of the root, not zero.
        factor: IBig,
        /// Radicand d ≥ 2, not a square; square factors of primes below 10,000
        /// are taken out.
        radicand: UBig,
        /// Divisor r > 0; p, q and r have no common factor.
        divisor: UBig,
    },
}

impl ClosedForm {
    /// A root of ax² + bx + e with a > 0 and a positive discriminant: the
    /// greater one when `greater`.
    fn of_quadratic(a: &IBig, b: &IBig, e: &IBig, greater: bool) -> Self {
        let discriminant = magnitude(&(b * b - IBig::from(4) * a * e));
        let (outside, radicand) = square_part(discriminant);
        let mut factor = IBig::from(outside);
        if !greater {
            factor = -factor;
        }
        let rational = -b.clone();
        let divisor = magnitude(a) * UBig::from(2u8);
        if radicand.is_one() {
            return Self::Rational(RBig::from_parts(rational + factor, divisor));
        }
        let mut shared = (&divisor).gcd(magnitude(&factor));
        if !rational.is_zero() {
            shared = shared.gcd(magnitude(&rational));
        }
        let whole = IBig::from(shared.clone());
        Self::Surd {
            rational: rational / &whole,
            factor: factor / whole,
            radicand,
            divisor: divisor / shared,
        }
    }
}

/// (s, d) with s²·d = value, the square factors of small primes taken out.
fn square_part(value: UBig) -> (UBig, UBig) {
    let (root, rest) = value.sqrt_rem();
    if rest.is_zero() {
        return (root, UBig::ONE);
    }
    let mut outside = UBig::ONE;
    let mut inside = value;
    for prime in 2u32..10_000 {
        let square = UBig::from(prime * prime);
        if square > inside {
            break;
        }
        while (&inside % &square).is_zero() {
            inside /= &square;
            outside *= UBig::from(prime);
        }
    }
    let (root, rest) = inside.sqrt_rem();
    if rest.is_zero() {
        (outside * root, UBig::ONE)
    } else {
        (outside, inside)
    }
}

impl fmt::Display for ClosedForm {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Rational(value) => {
                let minus = if value.numerator().is_negative() {
                    "−"
                } else {
                    ""
                };
                let size = magnitude(value.numerator());
                if value.denominator().is_one() {
                    write!(f, "{minus}{size}")
                } else {
                    write!(f, "{minus}{size}/{}", value.denominator())
                }
            }
            Self::Surd {
                rational,
                factor,
                radicand,
                divisor,
            } => {
                let size = magnitude(factor);
                let many = if size.is_one() {
                    String::new()
                } else {
                    size.to_string()
                };
                let negative = factor.is_negative();
                let numerator = if rational.is_zero() {
                    format!("{}{many}√{radicand}", if negative { "−" } else { "" })
                } else {
                    format!(
                        "{}{} {} {many}√{radicand}",
                        if rational.is_negative() { "−" } else { "" },
                        magnitude(rational),
                        if negative { "−" } else { "+" },
                    )
                };
                match (divisor.is_one(), rational.is_zero()) {
                    (true, _) => write!(f, "{numerator}"),
                    (false, true) => write!(f, "{numerator}/{divisor}"),
                    (false, false) => write!(f, "({numerator})/{divisor}"),
                }
            }
        }
    }
}

/// Finds the closed forms among the roots of one square-free polynomial.
/// `roots` are all its roots; where a root gets a form, its polynomial becomes
/// the factor of degree 1 or 2, and the others' what is left.
pub(super) fn close(
    roots: &mut [Isolated],
    polynomial: &Arc<Polynomial>,
) -> Vec<Option<ClosedForm>> {
    let mut forms = vec![None; roots.len()];
    let mut rest = (**polynomial).clone();
    close_rational(roots, &mut rest, &mut forms);
    close_quadratic(roots, &mut rest, &mut forms);
    let rest = Arc::new(rest);
    for (root, form) in roots.iter_mut().zip(&forms) {
        if form.is_none() {
            root.set_polynomial(Arc::clone(&rest));
        }
    }
    forms
}

fn close_rational(roots: &mut [Isolated], rest: &mut Polynomial, forms: &mut [Option<ClosedForm>]) {
    let lead = rest.leading();
    let scale = RBig::from(lead.clone());
    for (root, form) in roots.iter_mut().zip(forms) {
        root.refine(signed_bits(&lead) + 2);
        let candidate = match root.exact() {
            Some(value) => value.clone(),
            None => {
                let whole = (root.lower() * &scale).ceil();
                if RBig::from(whole.clone()) > root.upper() * &scale {
                    continue;
                }
                RBig::from(whole) / &scale
            }
        };
        let linear = Polynomial::new(vec![
            -candidate.numerator().clone(),
            IBig::from(candidate.denominator().clone()),
        ]);
        if let Some(quotient) = rest.quotient(&linear) {
            *rest = quotient;
            *root = Isolated::point(Arc::new(linear), candidate.clone());
            *form = Some(ClosedForm::Rational(candidate));
        }
    }
}

fn close_quadratic(
    roots: &mut [Isolated],
    rest: &mut Polynomial,
    forms: &mut [Option<ClosedForm>],
) {
    let lead = rest.leading();
    let scale = RBig::from(lead.clone());
    let mut largest = 0;
    for root in roots.iter() {
        for end in [root.lower(), root.upper()] {
            largest = largest.max(signed_bits(&end.ceil()));
        }
    }
    // lead · |root| · width < 1/8 for products, lead · width < 1/8 for sums.
    let bits = signed_bits(&lead) + largest + 4;
    for (root, form) in roots.iter_mut().zip(forms.iter()) {
        if form.is_none() {
            root.refine(bits);
        }
    }
    for first in 0..roots.len() {
        for second in first + 1..roots.len() {
            if forms[first].is_some() || forms[second].is_some() {
                continue;
            }
            let Some(factor) = quadratic(&roots[first], &roots[second], &lead, &scale) else {
                continue;
            };
            let Some(quotient) = rest.quotient(&factor) else {
                continue;
            };
            *rest = quotient;
            let [e, b, a] = factor.coefficients() else {
                continue;
            };
            forms[first] = Some(ClosedForm::of_quadratic(a, b, e, false));
            forms[second] = Some(ClosedForm::of_quadratic(a, b, e, true));
            let factor = Arc::new(factor);
            roots[first].set_polynomial(Arc::clone(&factor));
            roots[second].set_polynomial(factor);
        }
    }
}

/// The only quadratic that can have both roots, if there is one.
fn quadratic(low: &Isolated, high: &Isolated, lead: &IBig, scale: &RBig) -> Option<Polynomial> {
    let sum = whole_between(
        (low.lower() + high.lower()) * scale,
        (low.upper() + high.upper()) * scale,
    )?;
    let corners = [
        low.lower() * high.lower(),
        low.lower() * high.upper(),
        low.upper() * high.lower(),
        low.upper() * high.upper(),
    ];
    let least = corners.iter().min()?.clone() * scale;
    let greatest = corners.iter().max()?.clone() * scale;
    let product = whole_between(least, greatest)?;
    Some(Polynomial::new(vec![product, -sum, lead.clone()]))
}

/// The integer in [low, high], when there is one; intervals are shorter than 1.
fn whole_between(low: RBig, high: RBig) -> Option<IBig> {
    let whole = low.ceil();
    (RBig::from(whole.clone()) <= high).then_some(whole)
}

fn signed_bits(value: &IBig) -> i64 {
    i64::try_from(value.bit_len()).unwrap_or(i64::MAX)
}
