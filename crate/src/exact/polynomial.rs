//! Polynomials with integer coefficients: division, greatest common divisors
//! and square-free factors.

use dashu_base::{Gcd, Signed};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::gauss::magnitude;

/// A primitive polynomial with integer coefficients and a positive leading
/// one; the zero polynomial has no coefficients.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Polynomial {
    /// Ascending powers.
    coefficients: Vec<IBig>,
}

impl Polynomial {
    /// The primitive polynomial with the roots of `coefficients` (ascending).
    pub fn new(coefficients: Vec<IBig>) -> Self {
        let mut polynomial = Self { coefficients };
        polynomial.normalise();
        polynomial
    }

    /// The same from rational coefficients (ascending).
    pub fn from_rationals(coefficients: &[RBig]) -> Self {
        let mut common = UBig::ONE;
        for coefficient in coefficients {
            let shared = (&common).gcd(coefficient.denominator());
            common *= coefficient.denominator() / shared;
        }
        let scaled = coefficients
            .iter()
            .map(|c| c.numerator() * IBig::from(&common / c.denominator()))
            .collect();
        Self::new(scaled)
    }

    fn normalise(&mut self) {
        while self.coefficients.last().is_some_and(IBig::is_zero) {
            self.coefficients.pop();
        }
        let mut content = UBig::ZERO;
        for coefficient in &self.coefficients {
            let size = magnitude(coefficient);
            content = match (content.is_zero(), size.is_zero()) {
                (true, _) => size,
                (_, true) => content,
                _ => content.gcd(size),
            };
        }
        let mut divisor = IBig::from(content);
        if self
            .coefficients
            .last()
            .is_some_and(|lead| lead.is_negative())
        {
            divisor = -divisor;
        }
        if !divisor.is_zero() && !divisor.is_one() {
            for coefficient in &mut self.coefficients {
                *coefficient = &*coefficient / &divisor;
            }
        }
    }

    /// Coefficients in ascending powers.
    pub fn coefficients(&self) -> &[IBig] {
        &self.coefficients
    }

    /// Degree; 0 for constants and for the zero polynomial.
    pub fn degree(&self) -> usize {
        self.coefficients.len().saturating_sub(1)
    }

    /// Whether every coefficient is zero.
    pub fn is_zero(&self) -> bool {
        self.coefficients.is_empty()
    }

    /// Leading coefficient, positive (1 for the zero polynomial).
    pub fn leading(&self) -> IBig {
        self.coefficients.last().cloned().unwrap_or(IBig::ONE)
    }

    /// Derivative, made primitive.
    pub fn derivative(&self) -> Self {
        Self::new(derived(&self.coefficients))
    }

    /// Value at a rational point.
    pub fn value(&self, x: &RBig) -> RBig {
        let mut sum = RBig::ZERO;
        for coefficient in self.coefficients.iter().rev() {
            sum = sum * x + RBig::from(coefficient.clone());
        }
        sum
    }

    /// 2^(k·degree) times the value at m/2ᵏ: an integer with the value's sign.
    pub fn dyadic_value(&self, m: &IBig, k: usize) -> IBig {
        let degree = self.degree();
        let mut sum = IBig::ZERO;
        for (power, coefficient) in self.coefficients.iter().enumerate().rev() {
            sum = sum * m + (coefficient << (k * (degree - power)));
        }
        sum
    }

    /// Number of roots above m/2ᵏ, with multiplicity, of a polynomial *all of
    /// whose roots are real*: Descartes' rule is then exact, so the sign
    /// changes after the shift t ↦ t + m/2ᵏ count them.
    pub fn roots_above(&self, m: &IBig, k: usize) -> usize {
        let degree = self.degree();
        let mut shifted: Vec<IBig> = self
            .coefficients
            .iter()
            .enumerate()
            .map(|(power, coefficient)| coefficient << (k * (degree - power)))
            .collect();
        for first in 0..degree {
            for power in (first..degree).rev() {
                let carried = &shifted[power + 1] * m;
                shifted[power] += carried;
            }
        }
        let mut changes = 0;
        let mut last: Option<bool> = None;
        for coefficient in shifted.iter().filter(|c| !c.is_zero()) {
            let negative = coefficient.is_negative();
            if last.is_some_and(|sign| sign != negative) {
                changes += 1;
            }
            last = Some(negative);
        }
        changes
    }

    /// self / divisor when the division leaves nothing, up to a constant.
    pub fn quotient(&self, divisor: &Self) -> Option<Self> {
        let (quotient, remainder) = pseudo_division(&self.coefficients, &divisor.coefficients)?;
        remainder
            .iter()
            .all(IBig::is_zero)
            .then(|| Self::new(quotient))
    }

    /// Greatest common divisor, primitive, by the primitive remainder sequence
    /// (Knuth, The Art of Computer Programming 2, section 4.6.1, from memory).
    pub fn gcd(&self, other: &Self) -> Self {
        let (mut a, mut b) = (self.clone(), other.clone());
        if a.degree() < b.degree() {
            core::mem::swap(&mut a, &mut b);
        }
        while !b.is_zero() {
            let rest = match pseudo_division(&a.coefficients, &b.coefficients) {
                Some((_, remainder)) => Self::new(remainder),
                None => Self {
                    coefficients: Vec::new(),
                },
            };
            a = b;
            b = rest;
        }
        a
    }

    /// self · other.
    pub fn product(&self, other: &Self) -> Self {
        let mut product = vec![IBig::ZERO; self.coefficients.len() + other.coefficients.len()];
        for (i, a) in self.coefficients.iter().enumerate() {
            for (j, b) in other.coefficients.iter().enumerate() {
                product[i + j] += a * b;
            }
        }
        Self::new(product)
    }

    /// Square-free factors g₁, g₂, … with self ∝ ∏ gₘᵐ, as (multiplicity m,
    /// gₘ), constants left out (Yun 1976).
    pub fn square_free(&self) -> Vec<(usize, Self)> {
        let mut factors = Vec::new();
        if self.degree() == 0 {
            return factors;
        }
        let shared = self.gcd(&self.derivative());
        let mut rest = self.quotient(&shared).unwrap_or_else(|| self.clone());
        let mut repeated = shared;
        let mut multiplicity = 1;
        while rest.degree() > 0 {
            let again = rest.gcd(&repeated);
            let simple = rest.quotient(&again).unwrap_or_else(|| rest.clone());
            if simple.degree() > 0 {
                factors.push((multiplicity, simple));
            }
            repeated = repeated.quotient(&again).unwrap_or(repeated);
            rest = again;
            multiplicity += 1;
        }
        factors
    }
}

/// Coefficients of the derivative.
fn derived(coefficients: &[IBig]) -> Vec<IBig> {
    coefficients
        .iter()
        .enumerate()
        .skip(1)
        .map(|(power, coefficient)| coefficient * IBig::from(power))
        .collect()
}

/// Quotient and remainder of lead(b)^s · a by b; `None` for b = 0.
fn pseudo_division(a: &[IBig], b: &[IBig]) -> Option<(Vec<IBig>, Vec<IBig>)> {
    let lead = b.last()?;
    let mut remainder = a.to_vec();
    let steps = (a.len() + 1).saturating_sub(b.len());
    let mut quotient = vec![IBig::ZERO; steps];
    for place in (0..steps).rev() {
        let top = remainder[place + b.len() - 1].clone();
        for value in quotient.iter_mut().chain(remainder.iter_mut()) {
            *value *= lead;
        }
        for (power, coefficient) in b.iter().enumerate() {
            remainder[place + power] -= &top * coefficient;
        }
        quotient[place] = top;
    }
    remainder.truncate(b.len() - 1);
    Some((quotient, remainder))
}
