//! An outside solver's output: digits right of each value, and how good the
//! set is as a whole.
//!
//! Notation: X, Λ the stated vectors and values, taken exactly as they stand;
//! u = 2⁻⁵³. Backward error ‖A − XΛXᴴ‖_F/‖A‖_F (a pair: ‖AX − MXΛ‖_F over
//! ‖A‖_F‖X‖_F), orthogonality ‖XᴴMX − I‖_F, both in units of n·u. A set is
//! called good below 30 of these units, the threshold LAPACK's own tests use
//! (LAPACK Working Note 41, from memory).

use dashu_ratio::RBig;

use super::evidence::{entries, Evidence};
use super::figure::{size, Figure};
use super::interval::{ends, zero, Complex, Precision, Real};
use super::print;
use super::statement::Table;
use super::verdict::{Drawn, Finding, FindingKind, Freedom, Item, Verdict, Word};
use crate::problem::Problem;
use crate::report::decimal::{leading_place, significant, Rounding};

/// Units of n·u a good set stays below.
const GOOD: i64 = 30;
/// Largest order whose products are formed: n³ interval operations.
const MAX_ORDER: usize = 150;

/// Judges an outside solver's values and vectors.
pub(super) fn judge(
    values: &[Figure],
    columns: Option<&Table>,
    problem: &Problem,
    evidence: &mut Evidence<'_>,
) -> Verdict {
    let order = problem.matrix.order();
    if values.len() != order || columns.is_some_and(|columns| columns.rows != order) {
        return Verdict::new(
            Word::Refuted,
            format!(
                "{} values are stated, and the order is {order}",
                values.len()
            ),
        );
    }
    let mut verdict = Verdict::new(Word::Confirmed, String::new()).granting(Freedom::Order);
    let digits = digits_right(values, evidence, &mut verdict);
    let Some(columns) = columns else {
        return values_only(verdict, values, digits, problem, evidence);
    };
    if order > MAX_ORDER {
        verdict.word = Word::Undecided;
        verdict.sentence =
            format!("beyond order {MAX_ORDER} the vectors of an output are not checked");
        return verdict;
    }
    let p = Precision(128);
    let (backward, orthogonality) = quality(values, columns, problem, p);
    for (name, measure) in [
        ("backward error", &backward),
        ("orthogonality", &orthogonality),
    ] {
        let text = format!("{name}: {} n·u", in_units(measure));
        verdict.findings.push(Finding::new(FindingKind::Note, text));
        verdict.word = verdict.word.and(below(measure, GOOD));
    }
    verdict.sentence = match verdict.word {
        Word::Confirmed => format!(
            "as good as a stable solver's: backward error {} and orthogonality {}, in units of n·u",
            in_units(&backward),
            in_units(&orthogonality)
        ),
        _ => format!(
            "not as good as a stable solver's: backward error {} and orthogonality {}, in units of \
             n·u, where {GOOD} is the limit",
            in_units(&backward),
            in_units(&orthogonality)
        ),
    };
    verdict.resting_on("backward error in units of n·u", in_units(&backward))
}

/// Items with the digits right of each value; returns the fewest.
fn digits_right(
    values: &[Figure],
    evidence: &mut Evidence<'_>,
    verdict: &mut Verdict,
) -> Option<i32> {
    let mut ascending: Vec<usize> = (0..values.len()).collect();
    ascending.sort_by(|&a, &b| values[a].re.stated.cmp(&values[b].re.stated));
    // Enclosures clear of the stated digits: solvers state 17 at most.
    while evidence.values().iter().any(|value| {
        let width = &value.upper - &value.lower;
        !width.is_zero() && width * RBig::from(10u64.pow(19)) > size(&value.upper)
    }) {
        if !evidence.narrow() {
            break;
        }
    }
    let mut fewest: Option<i32> = None;
    let mut copies = Vec::with_capacity(values.len());
    for (place, value) in evidence.values().iter().enumerate() {
        copies.extend(std::iter::repeat_n(place, value.count));
    }
    for (index, (&stated, &place)) in ascending.iter().zip(&copies).enumerate() {
        let figure = &values[stated];
        let value = &evidence.values()[place];
        let off = size(&(&figure.re.stated - &value.lower))
            .max(size(&(&figure.re.stated - &value.upper)));
        let right = right_digits(&off, &size(&value.lower).min(size(&value.upper)));
        fewest = match (fewest, right) {
            (Some(fewest), Some(right)) => Some(fewest.min(right)),
            (fewest, right) => fewest.or(right),
        };
        verdict.items.push(Item {
            label: print::lambda(index),
            claimed: shown(figure),
            truth: evidence.told(place),
            word: Word::Confirmed,
            off_by: Some(match right {
                Some(digits) => format!("{digits} digits right"),
                None if off.is_zero() => "exact".to_owned(),
                None => format!("off by at most {}", significant(&off, 2, Rounding::Up)),
            }),
            drawn: Some(Drawn {
                claimed_low: Some(figure.re.low.to_f64().value()),
                claimed_high: Some(figure.re.high.to_f64().value()),
                proven_low: value.lower.to_f64().value(),
                proven_high: value.upper.to_f64().value(),
            }),
        });
    }
    fewest
}

/// The figure as typed; the hexadecimal notation of a binary file in decimals
/// that a double reads back.
fn shown(figure: &Figure) -> String {
    if figure.text.contains("0x") {
        significant(&figure.re.stated, 17, Rounding::Nearest)
    } else {
        figure.text.clone()
    }
}

/// Largest d ≥ 0 with off ≤ 10^−d·truth; `None` for an exact figure and for a
/// truth that is zero.
fn right_digits(off: &RBig, truth: &RBig) -> Option<i32> {
    if off.is_zero() || truth.is_zero() {
        return None;
    }
    let place = leading_place(&(off / truth))?;
    // 10^place ≤ off/truth < 10^(place+1).
    Some((-place - 1).max(0))
}

fn values_only(
    mut verdict: Verdict,
    values: &[Figure],
    digits: Option<i32>,
    problem: &Problem,
    evidence: &Evidence<'_>,
) -> Verdict {
    // Weyl: a stable solver's values are within a few n·u·max|λ|.
    let largest = evidence
        .values()
        .iter()
        .map(|value| size(&value.lower).max(size(&value.upper)))
        .max()
        .unwrap_or(RBig::ZERO);
    let mut ascending: Vec<&RBig> = values.iter().map(|figure| &figure.re.stated).collect();
    ascending.sort();
    let mut copies = evidence
        .values()
        .iter()
        .flat_map(|v| std::iter::repeat_n(v, v.count));
    let mut furthest = (RBig::ZERO, RBig::ZERO);
    for stated in ascending {
        let Some(value) = copies.next() else { break };
        let (low, high) = (
            size(&(stated - &value.lower)),
            size(&(stated - &value.upper)),
        );
        let least = if value.lower <= *stated && *stated <= value.upper {
            RBig::ZERO
        } else {
            low.clone().min(high.clone())
        };
        furthest = (furthest.0.max(least), furthest.1.max(low.max(high)));
    }
    if !largest.is_zero() {
        let unit = &largest * unit(problem.matrix.order());
        let measure = Precision(128).between(&(furthest.0 / &unit), &(furthest.1 / unit));
        verdict.word = below(&measure, GOOD);
        verdict = verdict.resting_on("largest error in units of n·u·max|λ|", in_units(&measure));
    }
    verdict.sentence = match (verdict.word, digits) {
        (Word::Confirmed, Some(digits)) => {
            format!("every value is right to at least {digits} digits")
        }
        (Word::Confirmed, None) => "every value is exact".to_owned(),
        (_, Some(digits)) => {
            format!("the worst value is right to {digits} digits only, fewer than a stable solver gives")
        }
        _ => "the values are not those a stable solver gives".to_owned(),
    };
    verdict
}

/// n·u.
fn unit(order: usize) -> RBig {
    let power = dashu_int::UBig::ONE << 53;
    RBig::from_parts(order.into(), power)
}

fn below(measure: &Real, limit: i64) -> Word {
    let (low, high) = ends(measure);
    if high <= RBig::from(limit) {
        Word::Confirmed
    } else if low > RBig::from(limit) {
        Word::Refuted
    } else {
        Word::Undecided
    }
}

fn in_units(measure: &Real) -> String {
    significant(&measure.upper_ratio(), 2, Rounding::Up)
}

/// Backward error and orthogonality in units of n·u.
fn quality(values: &[Figure], columns: &Table, problem: &Problem, p: Precision) -> (Real, Real) {
    let order = values.len();
    let matrix = entries(&problem.matrix, p);
    let stated = |figure: &Figure| Complex {
        re: p.of(&figure.re.stated),
        im: p.of(&figure.im.stated),
    };
    let x: Vec<Complex> = columns.cells.iter().map(stated).collect();
    let scaled: Vec<Complex> = x
        .iter()
        .enumerate()
        .map(|(place, x)| p.scale(x, &p.of(&values[place % order].re.stated)))
        .collect();
    let adjoint: Vec<Complex> = (0..order * order)
        .map(|k| x[(k % order) * order + k / order].conj())
        .collect();
    let metric = problem.metric.as_ref().map(|metric| entries(metric, p));
    let weighed = match &metric {
        Some(metric) => product(metric, &x, order, p),
        None => x.clone(),
    };
    let (residual, size_of) = match &metric {
        None => {
            let rebuilt = product(&scaled, &adjoint, order, p);
            (difference(&matrix, &rebuilt, p), norm(&matrix, p))
        }
        Some(metric) => {
            let left = product(&matrix, &x, order, p);
            let right = product(metric, &scaled, order, p);
            (
                difference(&left, &right, p),
                p.mul(&norm(&matrix, p), &norm(&x, p)),
            )
        }
    };
    let mut gram = product(&adjoint, &weighed, order, p);
    for k in 0..order {
        gram[k * order + k].re = p.sub(&gram[k * order + k].re, &super::interval::one());
    }
    let unit = p.of(&unit(order));
    let in_unit = |value: &Real| p.div(value, &unit).unwrap_or_else(zero);
    // A zero matrix has no relative error; its residual is compared as it is.
    let relative = p.div(&norm(&residual, p), &size_of);
    let backward = relative.unwrap_or_else(|| norm(&residual, p));
    (in_unit(&backward), in_unit(&norm(&gram, p)))
}

fn product(a: &[Complex], b: &[Complex], order: usize, p: Precision) -> Vec<Complex> {
    let mut cells = Vec::with_capacity(order * order);
    for row in 0..order {
        for col in 0..order {
            cells.push((0..order).fold(Complex::zero(), |sum, k| {
                p.cadd(&sum, &p.cmul(&a[row * order + k], &b[k * order + col]))
            }));
        }
    }
    cells
}

fn difference(a: &[Complex], b: &[Complex], p: Precision) -> Vec<Complex> {
    a.iter().zip(b).map(|(a, b)| p.csub(a, b)).collect()
}

/// Frobenius norm.
fn norm(cells: &[Complex], p: Precision) -> Real {
    let square = cells
        .iter()
        .fold(zero(), |sum, x| p.add(&sum, &p.norm_squared(x)));
    p.sqrt(&square).unwrap_or_else(zero)
}
