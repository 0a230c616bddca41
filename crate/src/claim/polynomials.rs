//! Claims about the characteristic polynomial.

use dashu_ratio::RBig;

use super::compare::{fit_ends, Fit};
use super::evidence::Evidence;
use super::figure::{size, Figure, Span};
use super::interval::{ends, one, zero, Precision, Real};
use super::print;
use super::verdict::{Finding, FindingKind, Freedom, Item, Verdict, Word};

/// Judges coefficients, highest power first.
pub(super) fn judge(stated: &[Figure], evidence: &mut Evidence<'_>) -> Verdict {
    let order = evidence.order();
    if stated.len() != order + 1 {
        return Verdict::new(
            Word::Refuted,
            format!(
                "{} coefficients are stated; a polynomial of degree {order} has {}",
                stated.len(),
                order + 1
            ),
        );
    }
    loop {
        let truth = coefficients(evidence);
        // The sign convention is read off the leading coefficient.
        let negative = stated[0].re.stated < RBig::ZERO;
        let fits: Vec<Fit> = stated
            .iter()
            .zip(&truth)
            .map(|(figure, (low, high))| {
                let (low, high) = if negative {
                    (-high.clone(), -low.clone())
                } else {
                    (low.clone(), high.clone())
                };
                fit_ends(&figure.re, &low, &high)
            })
            .collect();
        let worst = fits.iter().fold(Fit::Inside, |worst, fit| worst.and(*fit));
        if worst == Fit::Unclear && evidence.narrow() {
            continue;
        }
        return conclude(stated, &truth, &fits, worst, negative).granting(Freedom::PolynomialSign);
    }
}

/// Coefficients of det(λI − A) (for a pair det(λM − A)/det M), highest power
/// first, with rational ends.
fn coefficients(evidence: &Evidence<'_>) -> Vec<(RBig, RBig)> {
    if let Some(spectrum) = &evidence.exact {
        let descending = spectrum.characteristic.iter().rev();
        return descending.map(|c| (c.clone(), c.clone())).collect();
    }
    let p: Precision = evidence.precision();
    let mut product: Vec<Real> = vec![one()];
    for value in evidence.values() {
        let root = p.between(&value.lower, &value.upper);
        for _ in 0..value.count {
            let mut next = product.clone();
            next.push(zero());
            for (place, coefficient) in product.iter().enumerate() {
                next[place + 1] = p.sub(&next[place + 1], &p.mul(coefficient, &root));
            }
            product = next;
        }
    }
    product.iter().map(ends).collect()
}

fn conclude(
    stated: &[Figure],
    truth: &[(RBig, RBig)],
    fits: &[Fit],
    worst: Fit,
    negative: bool,
) -> Verdict {
    let degree = stated.len() - 1;
    let mut verdict = match worst {
        Fit::Inside => Verdict::new(
            Word::Confirmed,
            format!(
                "all {} coefficients are right to their stated digits",
                degree + 1
            ),
        ),
        Fit::Unclear => Verdict::new(
            Word::Undecided,
            "a coefficient could not be told from its true value",
        ),
        Fit::Outside => {
            let first = fits
                .iter()
                .position(|fit| *fit == Fit::Outside)
                .unwrap_or(0);
            Verdict::new(
                Word::Refuted,
                format!("the coefficient of λ^{} is wrong", degree - first),
            )
        }
    };
    let mut wrong = Vec::new();
    for (place, (figure, (low, high))) in stated.iter().zip(truth).enumerate() {
        let (low, high) = if negative {
            (-high.clone(), -low.clone())
        } else {
            (low.clone(), high.clone())
        };
        let told = print::enclosed(&low, &high, 14);
        let off = size(&((low + high) / RBig::from(2) - &figure.re.stated));
        if fits[place] == Fit::Outside {
            wrong.push(place);
            if wrong.len() == 1 {
                verdict.findings.push(Finding::new(
                    FindingKind::Departure,
                    format!(
                        "λ^{}: {} is stated and {told} is true, off by {}",
                        degree - place,
                        figure.text,
                        print::at_least(&off)
                    ),
                ));
                verdict = verdict.resting_on("first departure", print::at_least(&off));
            }
        }
        verdict.items.push(Item {
            label: format!("λ^{}", degree - place),
            claimed: figure.text.clone(),
            truth: told,
            word: match fits[place] {
                Fit::Inside => Word::Confirmed,
                Fit::Outside => Word::Refuted,
                Fit::Unclear => Word::Undecided,
            },
            off_by: (fits[place] == Fit::Outside).then(|| print::at_least(&off)),
            drawn: None,
        });
    }
    if wrong.is_empty() {
        verdict = verdict.resting_on("coefficients right", (degree + 1).to_string());
    }
    let signs_explain = wrong.iter().all(|&place| {
        let (low, high) = &truth[place];
        let flipped = Span {
            stated: -stated[place].re.stated.clone(),
            low: -stated[place].re.high.clone(),
            high: -stated[place].re.low.clone(),
        };
        let (low, high) = if negative {
            (-high.clone(), -low.clone())
        } else {
            (low.clone(), high.clone())
        };
        fit_ends(&flipped, &low, &high) == Fit::Inside
    });
    if !wrong.is_empty() && signs_explain {
        let powers: Vec<String> = wrong
            .iter()
            .map(|place| format!("λ^{}", degree - place))
            .collect();
        verdict.findings.push(Finding::new(
            FindingKind::Cause,
            format!(
                "the sign is wrong, the size is right, at {}",
                powers.join(", ")
            ),
        ));
    }
    let trace_or_det = wrong.iter().any(|&place| place == 1 || place == degree);
    if !wrong.is_empty() {
        verdict.findings.push(Finding::new(
            FindingKind::Invariant,
            if trace_or_det {
                "trace or determinant could have told: they are the coefficients next to the \
                 highest and the last"
            } else {
                "neither trace nor determinant could have told"
            },
        ));
    }
    verdict
}
