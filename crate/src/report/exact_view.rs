//! What the exact road found, as text: √(45/14) and (3 + √5)/2 style.

use dashu_base::{Sign, Signed, SquareRootRem};
use dashu_ratio::RBig;
use serde::{Deserialize, Serialize};

use super::decimal::typeset;
use crate::exact::{ExactError, ExactSpectrum};

/// The exact results.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct ExactView {
    /// Diagonal of the tridiagonal form.
    pub diagonal: Vec<String>,
    /// Its off-diagonals, taken positive.
    pub off_diagonal: Vec<String>,
    /// First row (from 1) of each block after the first, where the form splits.
    pub splits: Vec<u32>,
    /// The characteristic polynomial, leading term first.
    pub polynomial: Vec<PolynomialTerm>,
    /// The distinct eigenvalues, ascending.
    pub eigenvalues: Vec<ExactEigenvalueView>,
    /// How large the numbers became on the way.
    pub growth: String,
}

/// What came of taking the exact road.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(
    tag = "outcome",
    rename_all = "camelCase",
    rename_all_fields = "camelCase"
)]
pub enum ExactAnswer {
    /// It was open.
    Found {
        /// The exact results.
        view: ExactView,
    },
    /// It was closed.
    Closed {
        /// Why, as a sentence.
        reason: String,
        /// Whether asking again beyond the default order would open it.
        may_be_raised: bool,
    },
}

/// The answer for a spectrum or the error that stood in its place.
pub fn answer(outcome: Result<&ExactSpectrum, &ExactError>) -> ExactAnswer {
    match outcome {
        Ok(spectrum) => ExactAnswer::Found {
            view: view(spectrum),
        },
        Err(error) => ExactAnswer::Closed {
            reason: sentence(&error.to_string()),
            may_be_raised: matches!(error, ExactError::OrderTooLarge { .. }),
        },
    }
}

/// With a capital and a full stop.
fn sentence(text: &str) -> String {
    let mut characters = text.chars();
    match characters.next() {
        Some(first) => format!(
            "{}{}.",
            first.to_uppercase(),
            characters.as_str().trim_end_matches('.')
        ),
        None => String::new(),
    }
}

/// One term of the characteristic polynomial.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct PolynomialTerm {
    /// `+` or `−`; empty before a leading term that is positive.
    pub sign: String,
    /// Size of the coefficient; empty where it is 1 and there is a power.
    pub coefficient: String,
    /// Power of λ.
    pub power: u32,
}

/// One exact eigenvalue.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct ExactEigenvalueView {
    /// Index of its first copy, from 1.
    pub first: u32,
    /// Exact multiplicity.
    pub multiplicity: u32,
    /// Closed form; absent where it is neither rational nor a quadratic surd.
    pub form: Option<String>,
}

/// The view of `spectrum`.
pub fn view(spectrum: &ExactSpectrum) -> ExactView {
    let form = &spectrum.tridiagonal;
    ExactView {
        diagonal: form.diagonal.iter().map(ratio).collect(),
        off_diagonal: form.squares.iter().map(square_root).collect(),
        splits: form
            .blocks
            .iter()
            .skip(1)
            .map(|row| *row as u32 + 1)
            .collect(),
        polynomial: polynomial(&spectrum.characteristic),
        eigenvalues: spectrum
            .eigenvalues
            .iter()
            .map(|eigenvalue| ExactEigenvalueView {
                first: eigenvalue.first_index as u32 + 1,
                multiplicity: eigenvalue.multiplicity as u32,
                form: eigenvalue.form.as_ref().map(ToString::to_string),
            })
            .collect(),
        growth: format!(
            "The largest integer on the way has {} bits.",
            spectrum.largest_bits()
        ),
    }
}

fn ratio(x: &RBig) -> String {
    typeset(&x.to_string())
}

/// √x for x ≥ 0, with squares taken out: 3, 3/2, √2, √(45/14).
fn square_root(x: &RBig) -> String {
    let (n, above) = x.numerator().clone().into_parts().1.sqrt_rem();
    let (d, below) = x.denominator().sqrt_rem();
    if above.is_zero() && below.is_zero() {
        return ratio(&RBig::from_parts(n.into(), d));
    }
    if x.denominator().is_one() {
        format!("√{x}")
    } else {
        format!("√({x})")
    }
}

fn polynomial(ascending: &[RBig]) -> Vec<PolynomialTerm> {
    let degree = ascending.len().saturating_sub(1);
    let terms = ascending
        .iter()
        .enumerate()
        .rev()
        .filter(|(_, c)| !c.is_zero());
    terms
        .map(|(power, coefficient)| {
            let sign = match (coefficient.sign(), power == degree) {
                (Sign::Negative, _) => "−",
                (Sign::Positive, true) => "",
                (Sign::Positive, false) => "+",
            };
            let size = if coefficient.is_negative() {
                -coefficient
            } else {
                coefficient.clone()
            };
            PolynomialTerm {
                sign: sign.to_owned(),
                coefficient: if size.is_one() && power > 0 {
                    String::new()
                } else {
                    size.to_string()
                },
                power: power as u32,
            }
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::control::Unattended;
    use crate::exact::{spectrum, Limits};
    use crate::matrix::ExactMatrix;
    use crate::num::ExactReal;
    use crate::problem::Problem;

    fn problem(order: usize, cells: &[i64]) -> Problem {
        let plane = cells
            .iter()
            .map(|d| ExactReal::Decimal {
                digits: *d,
                exponent: 0,
            })
            .collect();
        Problem {
            matrix: ExactMatrix::new(order, plane, None),
            metric: None,
        }
    }

    #[test]
    fn a_hand_calculation_reads_as_it_is_written_by_hand() {
        let problem = problem(3, &[2, 1, 2, 1, 0, 3, 2, 3, -1]);
        let found =
            view(&spectrum(&problem, &Limits::default(), &mut Unattended).expect("rational"));
        assert_eq!(found.off_diagonal[0], "√5");
        assert_eq!(found.diagonal[0], "2");
        // det(λ − A): trace 1; sum of principal minors −1 − 6 − 9 = −16;
        // determinant 2(0 − 9) − 1(−1 − 6) + 2(3 − 0) = −5.
        let text: Vec<String> = found
            .polynomial
            .iter()
            .map(|t| format!("{}{}^{}", t.sign, t.coefficient, t.power))
            .collect();
        assert_eq!(text, ["^3", "−^2", "−16^1", "+5^0"]);
    }

    #[test]
    fn repeated_values_and_splits_are_named() {
        let problem = problem(3, &[2, 0, 0, 0, 2, 0, 0, 0, 5]);
        let found =
            view(&spectrum(&problem, &Limits::default(), &mut Unattended).expect("rational"));
        assert_eq!(found.off_diagonal[0], "0");
        assert_eq!(found.eigenvalues[0].multiplicity, 2);
        assert_eq!(found.eigenvalues[0].form.as_deref(), Some("2"));
        assert_eq!(found.eigenvalues[1].first, 3);
        assert!(!found.splits.is_empty(), "{found:?}");
    }

    #[test]
    fn roots_of_squares_lose_their_sign() {
        let root = |n: i64, d: u64| square_root(&RBig::from_parts(n.into(), d.into()));
        assert_eq!(
            (root(9, 4), root(45, 14), root(2, 1)),
            ("3/2".into(), "√(45/14)".into(), "√2".into())
        );
    }
}
