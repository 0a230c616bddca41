//! Claims about one number of the whole matrix.

use dashu_ratio::RBig;

use super::compare::{fit_ends, Fit};
use super::evidence::{entries, Evidence};
use super::figure::{size, Figure};
use super::interval::{ends, zero, Precision};
use super::invariants::known;
use super::print;
use super::statement::Scalar;
use super::verdict::{Drawn, Item, Verdict, Word};
use crate::problem::Problem;

/// What is known of a number.
enum Known {
    Between(RBig, RBig),
    /// It does not exist, for this reason.
    Absent(&'static str),
    /// Not known at this precision.
    Open,
}

/// Judges one stated number.
pub(super) fn judge(
    which: Scalar,
    stated: &Figure,
    problem: &Problem,
    evidence: &mut Evidence<'_>,
) -> Verdict {
    loop {
        match truth(which, problem, evidence) {
            Known::Absent(reason) => return Verdict::new(Word::Refuted, reason),
            Known::Between(low, high) => {
                let fit = fit_ends(&stated.re, &low, &high);
                if fit != Fit::Unclear {
                    return conclude(which, stated, problem, (&low, &high), fit);
                }
            }
            Known::Open => {}
        }
        if !evidence.narrow() {
            return Verdict::new(
                Word::Undecided,
                format!(
                    "the {} could not be enclosed narrowly enough to tell",
                    name(which)
                ),
            );
        }
    }
}

fn name(which: Scalar) -> &'static str {
    match which {
        Scalar::Determinant => "determinant",
        Scalar::Trace => "trace",
        Scalar::Positive => "number of positive eigenvalues",
        Scalar::Negative => "number of negative eigenvalues",
        Scalar::Zero => "number of zero eigenvalues",
        Scalar::Condition => "condition number",
        Scalar::Radius => "spectral radius",
    }
}

fn conclude(
    which: Scalar,
    stated: &Figure,
    problem: &Problem,
    (low, high): (&RBig, &RBig),
    fit: Fit,
) -> Verdict {
    let told = print::enclosed(low, high, 12);
    let off = size(&((low + high) / RBig::from(2) - &stated.re.stated));
    let of_pair = if problem.metric.is_some() {
        " of the pair"
    } else {
        ""
    };
    let (word, sentence) = match fit {
        Fit::Inside => (
            Word::Confirmed,
            format!("the {}{of_pair} is {told}, as stated", name(which)),
        ),
        _ => (
            Word::Refuted,
            format!(
                "the {}{of_pair} is {told}, not {}",
                name(which),
                stated.text
            ),
        ),
    };
    let mut verdict = Verdict::new(word, sentence).resting_on(name(which), told.clone());
    verdict.items.push(Item {
        label: name(which).to_owned(),
        claimed: stated.text.clone(),
        truth: told,
        word,
        off_by: (word == Word::Refuted).then(|| print::at_least(&off)),
        drawn: Some(Drawn {
            claimed_low: Some(stated.re.low.to_f64().value()),
            claimed_high: Some(stated.re.high.to_f64().value()),
            proven_low: low.to_f64().value(),
            proven_high: high.to_f64().value(),
        }),
    });
    verdict
}

fn truth(which: Scalar, problem: &Problem, evidence: &Evidence<'_>) -> Known {
    let p = evidence.precision();
    match which {
        Scalar::Trace => match known(evidence) {
            Some((trace, _)) => Known::Between(trace.clone(), trace),
            None => trace(problem, evidence, p),
        },
        Scalar::Determinant => match known(evidence) {
            Some((_, determinant)) => Known::Between(determinant.clone(), determinant),
            None => {
                let product =
                    evidence
                        .values()
                        .iter()
                        .fold(super::interval::one(), |all, value| {
                            let one = p.between(&value.lower, &value.upper);
                            (0..value.count).fold(all, |all, _| p.mul(&all, &one))
                        });
                let (low, high) = ends(&product);
                Known::Between(low, high)
            }
        },
        Scalar::Positive | Scalar::Negative | Scalar::Zero => count(which, evidence),
        Scalar::Condition => condition(evidence),
        Scalar::Radius => {
            let sizes = evidence.values().iter().map(sizes);
            let all = sizes.fold(None, |most: Option<(RBig, RBig)>, (low, high)| match most {
                Some((l, h)) => Some((l.max(low), h.max(high))),
                None => Some((low, high)),
            });
            all.map_or(Known::Open, |(low, high)| Known::Between(low, high))
        }
    }
}

fn trace(problem: &Problem, evidence: &Evidence<'_>, p: Precision) -> Known {
    if problem.metric.is_some() {
        let sum = evidence.values().iter().fold(zero(), |sum, value| {
            let one = p.between(&value.lower, &value.upper);
            (0..value.count).fold(sum, |sum, _| p.add(&sum, &one))
        });
        let (low, high) = ends(&sum);
        return Known::Between(low, high);
    }
    let order = problem.matrix.order();
    let mut exact = Some(RBig::ZERO);
    for k in 0..order {
        exact = match (exact, problem.matrix.re(k, k).rational()) {
            (Some(sum), Some(entry)) => Some(sum + entry),
            _ => None,
        };
    }
    if let Some(trace) = exact {
        return Known::Between(trace.clone(), trace);
    }
    let cells = entries(&problem.matrix, p);
    let sum = (0..order).fold(zero(), |sum, k| p.add(&sum, &cells[k * order + k].re));
    let (low, high) = ends(&sum);
    Known::Between(low, high)
}

fn count(which: Scalar, evidence: &Evidence<'_>) -> Known {
    let mut least = 0;
    let mut open = 0;
    for value in evidence.values() {
        let surely = match which {
            Scalar::Positive => value.lower > RBig::ZERO,
            Scalar::Negative => value.upper < RBig::ZERO,
            _ => value.lower.is_zero() && value.upper.is_zero(),
        };
        let never = match which {
            Scalar::Positive => value.upper <= RBig::ZERO,
            Scalar::Negative => value.lower >= RBig::ZERO,
            _ => value.lower > RBig::ZERO || value.upper < RBig::ZERO,
        };
        if surely {
            least += value.count;
        } else if !never {
            open += value.count;
        }
    }
    Known::Between(RBig::from(least), RBig::from(least + open))
}

/// Interval of |λ|.
fn sizes(value: &super::evidence::EnclosedValue) -> (RBig, RBig) {
    let (low, high) = (size(&value.lower), size(&value.upper));
    if value.lower <= RBig::ZERO && value.upper >= RBig::ZERO {
        (RBig::ZERO, low.max(high))
    } else {
        (low.clone().min(high.clone()), low.max(high))
    }
}

fn condition(evidence: &Evidence<'_>) -> Known {
    let mut most: Option<(RBig, RBig)> = None;
    let mut least: Option<(RBig, RBig)> = None;
    for value in evidence.values() {
        let (low, high) = sizes(value);
        if high.is_zero() {
            return Known::Absent("the matrix is singular: it has no finite condition number");
        }
        most = Some(match most {
            Some((l, h)) => (l.max(low.clone()), h.max(high.clone())),
            None => (low.clone(), high.clone()),
        });
        least = Some(match least {
            Some((l, h)) => (l.min(low), h.min(high)),
            None => (low, high),
        });
    }
    match (most, least) {
        (Some(most), Some(least)) if least.0 > RBig::ZERO => {
            Known::Between(most.0 / least.1, most.1 / least.0)
        }
        _ => Known::Open,
    }
}
