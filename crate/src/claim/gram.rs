//! Lengths and inner products of stated columns.
//!
//! What is decided: whether the stated intervals *allow* orthonormal
//! (orthogonal) columns. A product that must be off is a refutation; one that
//! may be right agrees "to the digits stated". Columns of any length need only
//! be independent as they stand.

use dashu_ratio::RBig;

use super::evidence::entries;
use super::exactly::{conj, none, plus, times, Ratio};
use super::interval::{ends, one, zero, Complex, Precision, Real};
use super::print;
use super::statement::Table;
use super::verdict::{Finding, FindingKind, Verdict, Word};
use crate::problem::Problem;

/// Checks XᴴMX against the identity.
pub(super) fn products(columns: &Table, problem: &Problem, precision: Precision) -> Verdict {
    let order = columns.rows;
    let p = precision;
    let cell = |row: usize, col: usize| {
        let figure = columns.at(row, col);
        Complex {
            re: p.between(&figure.re.low, &figure.re.high),
            im: p.between(&figure.im.low, &figure.im.high),
        }
    };
    let metric = problem.metric.as_ref().map(|metric| entries(metric, p));
    let mut verdict = Verdict::new(
        Word::Confirmed,
        "lengths and inner products agree to the digits stated",
    );
    for first in 0..order {
        let x: Vec<Complex> = (0..order).map(|row| cell(row, first)).collect();
        let weighed: Vec<Complex> = match &metric {
            None => x.clone(),
            Some(metric) => (0..order)
                .map(|row| {
                    (0..order).fold(Complex::zero(), |sum, col| {
                        p.cadd(&sum, &p.cmul(&metric[row * order + col], &x[col]))
                    })
                })
                .collect(),
        };
        for second in first..order {
            let y: Vec<Complex> = (0..order).map(|row| cell(row, second)).collect();
            let (re, im) = if first == second && metric.is_none() {
                let sum = x
                    .iter()
                    .fold(zero(), |sum, x| p.add(&sum, &p.norm_squared(x)));
                (sum, zero())
            } else {
                let product = y.iter().zip(&weighed).fold(Complex::zero(), |sum, (y, w)| {
                    p.cadd(&sum, &p.cmul(&y.conj(), w))
                });
                (product.re, product.im)
            };
            let target = if first == second { one() } else { zero() };
            let off = p.sub(&re, &target);
            if off.holds_zero() && im.holds_zero() {
                continue;
            }
            refute(&mut verdict, first, second, &re, &im);
        }
    }
    verdict
}

fn refute(verdict: &mut Verdict, first: usize, second: usize, re: &Real, im: &Real) {
    let (low, high) = ends(re);
    let told = if low == high {
        print::exact(&low, 8)
    } else {
        format!(
            "between {} and {}",
            print::exact(&low, 8),
            print::exact(&high, 8)
        )
    };
    let text = if first == second {
        format!(
            "the squared length of column {} is {told}, not 1",
            first + 1
        )
    } else if im.holds_zero() {
        format!(
            "columns {} and {} are not orthogonal: their inner product is {told}",
            first + 1,
            second + 1
        )
    } else {
        let (low, high) = ends(im);
        let middle = (low + high) / RBig::from(2);
        format!(
            "columns {} and {} are not orthogonal: the imaginary part of their inner product is \
             about {}",
            first + 1,
            second + 1,
            print::exact(&middle, 3)
        )
    };
    if verdict.word == Word::Confirmed {
        verdict.word = Word::Refuted;
        verdict.sentence.clone_from(&text);
    }
    verdict
        .findings
        .push(Finding::at(FindingKind::Departure, first, second, text));
}

/// Whether the stated numbers, taken as they are, are linearly independent
/// columns: exact elimination over the complex rationals.
pub(super) fn independence(columns: &Table) -> Verdict {
    let order = columns.rows;
    let mut rows: Vec<Vec<Ratio>> = (0..order)
        .map(|row| {
            (0..order)
                .map(|col| {
                    let figure = columns.at(row, col);
                    (figure.re.stated.clone(), figure.im.stated.clone())
                })
                .collect()
        })
        .collect();
    for k in 0..order {
        let Some(pivot) = (k..order).find(|&row| rows[row][k] != none()) else {
            let text = format!("column {} depends on the columns before it", k + 1);
            let mut verdict = Verdict::new(Word::Refuted, text.clone());
            let mut finding = Finding::new(FindingKind::Departure, text);
            finding.col = u32::try_from(k + 1).ok();
            verdict.findings.push(finding);
            return verdict;
        };
        rows.swap(k, pivot);
        let lead = rows[k].clone();
        let size = &lead[k].0 * &lead[k].0 + &lead[k].1 * &lead[k].1;
        for row in rows.iter_mut().skip(k + 1) {
            // row − (row[k]·conj(lead[k]) / |lead[k]|²)·lead
            let factor = times(&row[k], &conj(&lead[k]));
            let factor = (-(factor.0 / &size), -(factor.1 / &size));
            for (cell, lead) in row.iter_mut().zip(&lead).skip(k) {
                *cell = plus(cell, &times(&factor, lead));
            }
        }
    }
    Verdict::new(Word::Confirmed, "the columns are linearly independent")
}
