//! Claims about the Q of a tridiagonal form A = QTQᴴ.

use dashu_ratio::RBig;

use super::evidence::{entries, Evidence};
use super::figure::{Figure, Span};
use super::forms::StatedForm;
use super::interval::{Complex, Precision, Real};
use super::space::{meets, Meeting};
use super::statement::Table;
use super::verdict::{Finding, FindingKind, Verdict, Word};
use crate::exact::Gauss;
use crate::problem::Problem;

/// Checks the columns of Q: each a unit multiple of its basis vector, and the
/// off-diagonals those that go with them.
pub(super) fn judge(
    basis: &Table,
    stated: &StatedForm<'_>,
    problem: &Problem,
    evidence: &Evidence<'_>,
) -> Verdict {
    let order = problem.matrix.order();
    let p = Precision(256);
    let Some(spectrum) = &evidence.exact else {
        return Verdict::new(
            Word::Undecided,
            "the form is right; its Q is checked only where the exact road is open",
        );
    };
    if problem.metric.is_some() {
        return Verdict::new(
            Word::Undecided,
            "the form is right; a pair's Q is not checked",
        );
    }
    let mut verdict = Verdict::new(
        Word::Confirmed,
        "the form and every column of Q are right to their stated digits",
    );
    for col in 0..order {
        let figures: Vec<Figure> = (0..order).map(|row| basis.at(row, col).clone()).collect();
        let truth: Vec<Complex> = spectrum.tridiagonal.basis[col]
            .iter()
            .map(|g| of_gauss(g, p))
            .collect();
        let complex = problem.matrix.is_complex() || figures.iter().any(Figure::is_complex);
        let (word, text) = match meets(&[truth], &figures, complex, p) {
            Meeting::Yes => continue,
            Meeting::No(_) => (Word::Refuted, format!("column {} of Q is wrong", col + 1)),
            Meeting::Unclear => (
                Word::Undecided,
                format!("column {} of Q could not be decided", col + 1),
            ),
        };
        verdict.word = verdict.word.and(word);
        verdict.sentence.clone_from(&text);
        let mut finding = Finding::new(FindingKind::Departure, text);
        finding.col = u32::try_from(col + 1).ok();
        verdict.findings.push(finding);
        if word == Word::Refuted {
            return verdict;
        }
    }
    let unit = super::gram::products(basis, problem, p);
    if unit.word == Word::Refuted {
        return unit;
    }
    match disagreeing_sign(basis, stated, problem, p) {
        Some(k) => {
            let text = format!(
                "the columns of Q are right, but off-diagonal {} does not go with columns {} and {}",
                k + 1,
                k + 1,
                k + 2
            );
            let mut refuted = Verdict::new(Word::Refuted, text.clone());
            refuted
                .findings
                .push(Finding::at(FindingKind::Departure, k + 1, k, text));
            refuted
        }
        None => verdict,
    }
}

/// The first off-diagonal that cannot be q_{k+1}ᴴAqₖ of the stated columns.
fn disagreeing_sign(
    basis: &Table,
    stated: &StatedForm<'_>,
    problem: &Problem,
    p: Precision,
) -> Option<usize> {
    let order = basis.rows;
    let cells = entries(&problem.matrix, p);
    let column = |col: usize| -> Vec<Complex> {
        (0..order)
            .map(|row| {
                let figure = basis.at(row, col);
                Complex {
                    re: p.between(&figure.re.low, &figure.re.high),
                    im: p.between(&figure.im.low, &figure.im.high),
                }
            })
            .collect()
    };
    (0..order - 1).find(|&k| {
        let (x, y) = (column(k), column(k + 1));
        let mut product = Complex::zero();
        for row in 0..order {
            for col in 0..order {
                let moved = p.cmul(&cells[row * order + col], &x[col]);
                product = p.cadd(&product, &p.cmul(&y[row].conj(), &moved));
            }
        }
        let figure = &stated.off_diagonal[k];
        let apart = |span: &Span, truth: &Real| {
            span.high < truth.lower_ratio() || truth.upper_ratio() < span.low
        };
        apart(&figure.re, &product.re) || apart(&figure.im, &product.im)
    })
}

fn of_gauss(value: &Gauss, p: Precision) -> Complex {
    Complex {
        re: p.of(&RBig::from(value.re.clone())),
        im: p.of(&RBig::from(value.im.clone())),
    }
}
