//! Claims about a Cholesky factor: LLᴴ = M of a pair, LLᴴ = A without a metric;
//! the upper form RᴴR is understood too.

use dashu_ratio::RBig;

use super::compare::{departure, fit, Fit};
use super::exactly::{none, plus, rational_cells, times, Ratio};
use super::figure::{Figure, Span};
use super::interval::{neg, Complex, Precision};
use super::print;
use super::standard::{cholesky, NoFactor};
use super::statement::Table;
use super::states::PRECISIONS;
use super::verdict::{Freedom, Verdict, Word};
use crate::matrix::ExactMatrix;
use crate::problem::Problem;

/// Judges a stated factor.
pub(super) fn judge(stated: &Table, problem: &Problem) -> Verdict {
    let (matrix, name) = match &problem.metric {
        Some(metric) => (metric, "metric"),
        None => (&problem.matrix, "matrix"),
    };
    let order = matrix.order();
    if stated.rows != order {
        return Verdict::new(
            Word::Refuted,
            format!(
                "the factor has {} rows, and the order is {order}",
                stated.rows
            ),
        );
    }
    let lower = lowered(stated);
    for bits in PRECISIONS {
        let p = Precision(bits);
        match cholesky(matrix, p) {
            Err(NoFactor::NotPositive(leading)) => {
                return Verdict::new(
                    Word::Refuted,
                    format!(
                        "the {name} has no Cholesky factor: its leading {leading} × {leading} block is \
                         not positive definite"
                    ),
                )
            }
            Err(NoFactor::Unclear) => {}
            Ok(truth) => {
                let truth = signed(truth, &lower);
                if let Some(verdict) = attempt(&lower, &truth, order) {
                    return verdict.granting(Freedom::ColumnSigns);
                }
            }
        }
    }
    match exactly(&lower, matrix) {
        Some(true) => Verdict::new(
            Word::Confirmed,
            format!("the stated factor times its adjoint is the {name} exactly"),
        )
        .resting_on("residual", "0 (exact)")
        .granting(Freedom::ColumnSigns),
        Some(false) => Verdict::new(
            Word::Refuted,
            format!("the stated factor, meant exactly, times its adjoint is not the {name}"),
        ),
        None => Verdict::new(
            Word::Undecided,
            "a figure meant exactly could not be told from its true value; state decimals instead",
        ),
    }
}

/// The stated factor as a lower triangle.
fn lowered(stated: &Table) -> Table {
    let order = stated.rows;
    let is_upper = (0..order).all(|row| {
        (0..row).all(|col| {
            let figure = stated.at(row, col);
            figure.re.stated.is_zero() && figure.im.stated.is_zero()
        })
    });
    if !is_upper {
        return stated.clone();
    }
    let mut cells: Vec<Figure> = Vec::with_capacity(order * order);
    for row in 0..order {
        for col in 0..order {
            let mut figure = stated.at(col, row).clone();
            figure.im = Span {
                stated: -figure.im.stated.clone(),
                low: -figure.im.high.clone(),
                high: -figure.im.low.clone(),
            };
            cells.push(figure);
        }
    }
    Table {
        rows: order,
        cols: order,
        cells,
    }
}

/// The true factor with the signs of the stated columns.
fn signed(mut truth: Vec<Complex>, stated: &Table) -> Vec<Complex> {
    let order = stated.rows;
    for col in 0..order {
        if stated.at(col, col).re.stated >= RBig::ZERO {
            continue;
        }
        for row in col..order {
            let cell = &mut truth[row * order + col];
            *cell = Complex {
                re: neg(&cell.re),
                im: neg(&cell.im),
            };
        }
    }
    truth
}

/// One try; `None` when it does not decide.
fn attempt(stated: &Table, truth: &[Complex], order: usize) -> Option<Verdict> {
    let mut worst = Fit::Inside;
    let mut wrong = Vec::new();
    for row in 0..order {
        for col in 0..order {
            let one = fit(stated.at(row, col), &truth[row * order + col]);
            worst = worst.and(one);
            if one == Fit::Outside {
                wrong.push((row, col));
            }
        }
    }
    if worst == Fit::Unclear {
        return None;
    }
    let Some(&(row, col)) = wrong.first() else {
        return Some(
            Verdict::new(
                Word::Confirmed,
                "every entry of the factor is right to its stated digits",
            )
            .resting_on("entries right", (order * (order + 1) / 2).to_string()),
        );
    };
    let (figure, cell) = (stated.at(row, col), &truth[row * order + col]);
    let mut verdict = Verdict::new(
        Word::Refuted,
        format!(
            "{} entries of the factor depart; the first is in row {}, column {}",
            wrong.len(),
            row + 1,
            col + 1
        ),
    )
    .resting_on(
        "first departure",
        print::at_least(&super::compare::distance(figure, cell)),
    );
    verdict.findings.push(departure(row, col, figure, cell));
    Some(verdict)
}

/// LLᴴ = matrix in exact arithmetic; `None` unless every figure is exact and
/// every entry rational.
fn exactly(stated: &Table, matrix: &ExactMatrix) -> Option<bool> {
    if !stated.cells.iter().all(Figure::is_exact) {
        return None;
    }
    let cells = rational_cells(matrix)?;
    let order = stated.rows;
    let at = |row: usize, col: usize| -> Ratio {
        let figure = stated.at(row, col);
        (figure.re.stated.clone(), figure.im.stated.clone())
    };
    for row in 0..order {
        for col in 0..order {
            let sum = (0..order).fold(none(), |sum, k| {
                plus(
                    &sum,
                    &times(&at(row, k), &super::exactly::conj(&at(col, k))),
                )
            });
            if sum != cells[row * order + col] || (col > row && at(row, col) != none()) {
                return Some(false);
            }
        }
    }
    Some(true)
}
