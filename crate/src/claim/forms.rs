//! Claims about the tridiagonal form.
//!
//! Notation: αₖ the diagonal, βₖ² the squared off-diagonals. By the implicit Q
//! theorem they do not depend on any sign taken on the way, so each stated
//! figure is compared with one true number.

use dashu_base::Signed;
use dashu_ratio::RBig;

use super::compare::{fit_ends, Fit};
use super::evidence::Evidence;
use super::figure::{size, Figure, Span};
use super::interval::{zero, Precision};
use super::print;
use super::reduction::{Sign, State};
use super::standard::standard;
use super::statement::Table;
use super::states::PRECISIONS;
use super::verdict::{Finding, FindingKind, Freedom, Item, Verdict, Word};
use crate::problem::Problem;

/// What is stated of the form.
pub(super) struct StatedForm<'a> {
    pub(super) diagonal: &'a [Figure],
    pub(super) off_diagonal: &'a [Figure],
    pub(super) outside: &'a [(usize, usize, Figure)],
    pub(super) basis: Option<&'a Table>,
}

/// The true form with rational ends.
struct TrueForm {
    diagonal: Vec<(RBig, RBig)>,
    squares: Vec<(RBig, RBig)>,
    /// Rows of the first unreduced block; beyond it the form is one of many.
    unique: usize,
}

/// Judges a stated tridiagonal form.
pub(super) fn judge(
    stated: &StatedForm<'_>,
    problem: &Problem,
    evidence: &Evidence<'_>,
) -> Verdict {
    let order = problem.matrix.order();
    if stated.diagonal.len() != order {
        return Verdict::new(
            Word::Refuted,
            format!(
                "the form has {} rows, and the order is {order}",
                stated.diagonal.len()
            ),
        );
    }
    let mut last = None;
    for bits in PRECISIONS {
        let Some(truth) = true_form(problem, evidence, Precision(bits)) else {
            continue;
        };
        let attempt = compare(stated, &truth);
        let decided = attempt.0 != Fit::Unclear;
        last = Some((attempt.0, attempt.1, truth));
        if decided || evidence.exact.is_some() {
            break;
        }
    }
    let Some((word, wrong, truth)) = last else {
        return Verdict::new(Word::Undecided, "the true form could not be enclosed");
    };
    let mut verdict = conclude(word, &wrong, stated, &truth);
    if truth.unique < order {
        verdict = split(verdict, &wrong, truth.unique);
    }
    if let (Some(basis), Word::Confirmed) = (stated.basis, verdict.word) {
        let of_basis = super::basis::judge(basis, stated, problem, evidence);
        verdict.word = of_basis.word;
        verdict.sentence = of_basis.sentence;
        verdict.findings.extend(of_basis.findings);
    }
    verdict.granting(Freedom::OffDiagonalSigns)
}

fn true_form(problem: &Problem, evidence: &Evidence<'_>, p: Precision) -> Option<TrueForm> {
    if let Some(spectrum) = &evidence.exact {
        let form = &spectrum.tridiagonal;
        let both = |x: &RBig| (x.clone(), x.clone());
        return Some(TrueForm {
            diagonal: form.diagonal.iter().map(both).collect(),
            squares: form.squares.iter().map(both).collect(),
            unique: form.blocks.get(1).copied().unwrap_or(form.order()),
        });
    }
    let order = problem.matrix.order();
    let mut state = State {
        order,
        cells: standard(problem, p)?,
    };
    let mut form = TrueForm {
        diagonal: Vec::new(),
        squares: Vec::new(),
        unique: order,
    };
    for col in 0..order {
        form.diagonal
            .push(super::interval::ends(&state.at(col, col).re));
        if col + 1 == order {
            break;
        }
        if col + 2 < order && !state.is_done(col) {
            // The sign away from x₁ keeps v clear of zero.
            let first = super::interval::approx(&state.at(col + 1, col).re);
            let sign = if first >= 0.0 {
                Sign::Minus
            } else {
                Sign::Plus
            };
            let target = state.target(col, sign, p)?;
            let mirror = state.mirror(col, target, p)?;
            state = state.stepped(col, &mirror, p);
        }
        let square = p.norm_squared(state.at(col + 1, col));
        form.squares.push(super::interval::ends(&square));
    }
    Some(form)
}

/// The interval of |x|² of a stated figure.
fn squared(figure: &Figure) -> (RBig, RBig) {
    let of = |span: &Span| {
        let (low, high) = (&span.low * &span.low, &span.high * &span.high);
        let least = if span.low.is_negative() != span.high.is_negative() {
            RBig::ZERO
        } else {
            low.clone().min(high.clone())
        };
        (least, low.max(high))
    };
    let (re, im) = (of(&figure.re), of(&figure.im));
    (re.0 + im.0, re.1 + im.1)
}

fn fit_square(figure: &Figure, truth: &(RBig, RBig)) -> Fit {
    let (low, high) = squared(figure);
    fit_ends(
        &Span {
            stated: low.clone(),
            low,
            high,
        },
        &truth.0,
        &truth.1,
    )
}

fn fit_diagonal(figure: &Figure, truth: &(RBig, RBig)) -> Fit {
    fit_ends(&figure.re, &truth.0, &truth.1).and(fit_ends(&figure.im, &RBig::ZERO, &RBig::ZERO))
}

/// The worst fit, and the entries that depart, by row.
fn compare(stated: &StatedForm<'_>, truth: &TrueForm) -> (Fit, Vec<(usize, usize)>) {
    let order = stated.diagonal.len();
    let mut worst = Fit::Inside;
    let mut wrong = Vec::new();
    let mut see = |fit: Fit, row: usize, col: usize| {
        worst = worst.and(fit);
        if fit == Fit::Outside {
            wrong.push((row, col));
        }
    };
    for row in 0..order {
        if row > 0 {
            see(
                fit_square(&stated.off_diagonal[row - 1], &truth.squares[row - 1]),
                row,
                row - 1,
            );
        }
        see(
            fit_diagonal(&stated.diagonal[row], &truth.diagonal[row]),
            row,
            row,
        );
    }
    for (row, col, figure) in stated.outside {
        if *col == row + 1 {
            see(fit_square(figure, &truth.squares[*row]), *row, *col);
        } else {
            let nothing = (RBig::ZERO, RBig::ZERO);
            see(fit_square(figure, &nothing), *row, *col);
        }
    }
    wrong.sort_unstable();
    (worst, wrong)
}

/// A true entry in words: αₖ, or βₖ with its square where that is exact.
fn told(row: usize, col: usize, truth: &TrueForm) -> String {
    if row == col {
        let (low, high) = &truth.diagonal[row];
        let digits = print::enclosed(low, high, 10);
        let plain = low.denominator().is_one();
        return if low == high && !plain {
            format!("{low} = {digits}")
        } else {
            digits
        };
    }
    if row.abs_diff(col) > 1 {
        return "0".to_owned();
    }
    let (low, high) = &truth.squares[row.min(col)];
    let p = Precision(128);
    let root = p
        .sqrt(&p.between(low, high))
        .map(|root| super::interval::ends(&root));
    let digits = match root {
        Some((low, high)) => print::enclosed(&low, &high, 10),
        None => "unknown".to_owned(),
    };
    if low == high {
        format!("±√({low}) = ±{digits}")
    } else {
        format!("±{digits}")
    }
}

fn conclude(
    word: Fit,
    wrong: &[(usize, usize)],
    stated: &StatedForm<'_>,
    truth: &TrueForm,
) -> Verdict {
    let order = stated.diagonal.len();
    let mut verdict = match word {
        Fit::Inside => Verdict::new(
            Word::Confirmed,
            format!(
                "all {} figures of the form are right to their stated digits",
                2 * order - 1
            ),
        ),
        Fit::Unclear => Verdict::new(
            Word::Undecided,
            "a figure could not be told from its true value at the greatest precision tried",
        ),
        Fit::Outside => {
            let (row, col) = wrong[0];
            Verdict::new(
                Word::Refuted,
                format!(
                    "{} of the stated figures depart; the first is in row {}, column {}",
                    wrong.len(),
                    row + 1,
                    col + 1
                ),
            )
        }
    };
    for row in 0..order {
        let mut line = |col: usize, figure: &Figure, fit: Fit| {
            verdict.items.push(Item {
                label: if col == row {
                    format!("α{}", row + 1)
                } else {
                    format!("β{row}")
                },
                claimed: figure.text.clone(),
                truth: told(row, col, truth),
                word: match fit {
                    Fit::Inside => Word::Confirmed,
                    Fit::Outside => Word::Refuted,
                    Fit::Unclear => Word::Undecided,
                },
                off_by: (fit == Fit::Outside).then(|| off(row, col, figure, truth)),
                drawn: None,
            });
        };
        if row > 0 {
            let figure = &stated.off_diagonal[row - 1];
            line(row - 1, figure, fit_square(figure, &truth.squares[row - 1]));
        }
        let figure = &stated.diagonal[row];
        line(row, figure, fit_diagonal(figure, &truth.diagonal[row]));
    }
    if let Some(&(row, col)) = wrong.first() {
        let figure = figure_at(row, col, stated);
        let text = format!(
            "row {}, column {}: {} is stated and {} is true, off by {}",
            row + 1,
            col + 1,
            figure.text,
            told(row, col, truth),
            off(row, col, figure, truth)
        );
        verdict
            .findings
            .push(Finding::at(FindingKind::Departure, row, col, text));
        verdict.findings.extend(causes(wrong, stated, truth));
        verdict = verdict.resting_on("first departure", off(row, col, figure, truth));
    } else {
        verdict = verdict.resting_on("figures right", (2 * order - 1).to_string());
    }
    verdict
}

fn figure_at<'a>(row: usize, col: usize, stated: &'a StatedForm<'_>) -> &'a Figure {
    if row == col {
        return &stated.diagonal[row];
    }
    if row == col + 1 {
        return &stated.off_diagonal[col];
    }
    let outside = stated
        .outside
        .iter()
        .find(|(r, c, _)| (*r, *c) == (row, col));
    outside.map_or(&stated.diagonal[row], |(_, _, figure)| figure)
}

/// How far a figure is off, as text.
fn off(row: usize, col: usize, figure: &Figure, truth: &TrueForm) -> String {
    let p = Precision(128);
    let truth = if row == col {
        let (low, high) = &truth.diagonal[row];
        p.between(low, high)
    } else if row.abs_diff(col) == 1 {
        let (low, high) = &truth.squares[row.min(col)];
        p.sqrt(&p.between(low, high)).unwrap_or_else(zero)
    } else {
        zero()
    };
    let middle = super::interval::middle(&truth);
    let stated = if row == col {
        figure.re.stated.clone()
    } else {
        size(&figure.re.stated)
    };
    print::at_least(&(stated - middle))
}

/// Causes that the stated figures bear out.
fn causes(wrong: &[(usize, usize)], stated: &StatedForm<'_>, truth: &TrueForm) -> Vec<Finding> {
    let band: Vec<(usize, usize)> = wrong
        .iter()
        .copied()
        .filter(|(row, col)| row == col || *row == col + 1)
        .collect();
    let off: Vec<usize> = band
        .iter()
        .filter(|(r, c)| r != c)
        .map(|(_, c)| *c)
        .collect();
    let squares_stated = !off.is_empty()
        && off.len() == band.len()
        && off.iter().all(|&k| {
            let (low, high) = &truth.squares[k];
            fit_ends(&stated.off_diagonal[k].re, low, high) == Fit::Inside
        });
    if squares_stated {
        return vec![Finding::new(
            FindingKind::Cause,
            "the squares of the off-diagonals are stated where their roots belong",
        )];
    }
    match band.as_slice() {
        [(a, b), (c, d)] if a == b && c == d => {
            let crosses = fit_diagonal(&stated.diagonal[*a], &truth.diagonal[*c]) == Fit::Inside
                && fit_diagonal(&stated.diagonal[*c], &truth.diagonal[*a]) == Fit::Inside;
            swapped(
                crosses,
                format!("the diagonal figures of rows {} and {}", a + 1, c + 1),
            )
        }
        [(a, b), (c, d)] if a != b && c != d => {
            let crosses = fit_square(&stated.off_diagonal[*b], &truth.squares[*d]) == Fit::Inside
                && fit_square(&stated.off_diagonal[*d], &truth.squares[*b]) == Fit::Inside;
            swapped(
                crosses,
                format!("the off-diagonal figures {} and {}", b + 1, d + 1),
            )
        }
        [(row, col)] => {
            let shown = if row == col {
                "the trace shows it"
            } else {
                "the trace does not show it, the Frobenius norm does"
            };
            vec![Finding::at(
                FindingKind::Cause,
                *row,
                *col,
                format!("a slip in one figure: every other figure is right; {shown}"),
            )]
        }
        _ => Vec::new(),
    }
}

fn swapped(crosses: bool, what: String) -> Vec<Finding> {
    if !crosses {
        return Vec::new();
    }
    vec![Finding::new(
        FindingKind::Cause,
        format!("two values are swapped: {what}"),
    )]
}

/// A form that splits is unique only in its first block.
fn split(mut verdict: Verdict, wrong: &[(usize, usize)], unique: usize) -> Verdict {
    verdict.findings.push(Finding::new(
        FindingKind::Note,
        format!(
            "the form splits after row {unique}: from there on it depends on the vector the \
             reduction goes on with"
        ),
    ));
    let only_later = wrong.iter().all(|(row, col)| *row.min(col) >= unique);
    if verdict.word == Word::Refuted && only_later {
        verdict.word = Word::Undecided;
        verdict.sentence = format!(
            "rows 1 to {unique} are right; the rest differs from the form restarted from the first \
             free unit vector, and another restart may give it"
        );
    }
    verdict.granting(Freedom::Restart)
}
