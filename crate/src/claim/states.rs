//! Claims about the matrix after so many reflectors.

use dashu_ratio::RBig;

use super::causes;
use super::compare::{departure, distance, fit, Fit};
use super::interval::Precision;
use super::print;
use super::reduction::{Mirror, Sign, State};
use super::standard::standard;
use super::statement::Table;
use super::verdict::{Freedom, Verdict, Word};
use crate::problem::Problem;

/// Precisions tried in turn; the last is about 300 digits.
pub(super) const PRECISIONS: [usize; 4] = [128, 256, 512, 1024];

/// The reduction that goes with the signs a claim shows.
pub(super) struct Trail {
    /// State before the last reflector.
    pub(super) before: State,
    /// The last reflector, unless the column needed none.
    pub(super) mirror: Option<Mirror>,
    /// State after it.
    pub(super) after: State,
    /// Its sign.
    pub(super) sign: Sign,
}

/// Judges the matrix stated after `step` reflectors.
pub(super) fn judge(step: usize, stated: &Table, problem: &Problem) -> Verdict {
    let order = problem.matrix.order();
    if stated.rows != order {
        return Verdict::new(
            Word::Refuted,
            format!(
                "the stated matrix has {} rows, and the order is {order}",
                stated.rows
            ),
        );
    }
    if step == 0 || step + 2 > order {
        return Verdict::new(
            Word::Refuted,
            format!(
                "a reduction of order {order} has {} reflectors",
                order.saturating_sub(2)
            ),
        );
    }
    for bits in PRECISIONS {
        let p = Precision(bits);
        let Some(trail) = follow(step, stated, problem, p) else {
            continue;
        };
        let word = overall(&trail.after, stated);
        if word != Fit::Unclear {
            return conclude(word, step, stated, &trail, p);
        }
    }
    if super::surds::state_agrees(step, stated, problem) == Some(true) {
        return Verdict::new(
            Word::Confirmed,
            format!("every entry is right exactly after {step} reflectors, in exact surds"),
        )
        .resting_on("largest difference", "0 (exact)")
        .granting(Freedom::ReflectorSign);
    }
    Verdict::new(
        Word::Undecided,
        "an entry meant exactly could not be told from its true value; state decimals instead",
    )
}

/// Reduces with, at each column, the sign whose κ is nearer to the stated
/// entry below the diagonal.
fn follow(step: usize, stated: &Table, problem: &Problem, p: Precision) -> Option<Trail> {
    let order = problem.matrix.order();
    let mut state = State {
        order,
        cells: standard(problem, p)?,
    };
    let mut last = None;
    for col in 0..step {
        let figure = stated.at(col + 1, col);
        let plus = state.target(col, Sign::Plus, p)?;
        let minus = state.target(col, Sign::Minus, p)?;
        let (sign, target) = if distance(figure, &plus) <= distance(figure, &minus) {
            (Sign::Plus, plus)
        } else {
            (Sign::Minus, minus)
        };
        let keeps = state.is_done(col)
            && distance(figure, state.at(col + 1, col)) <= distance(figure, &target);
        let mirror = if keeps {
            None
        } else {
            Some(state.mirror(col, target, p)?)
        };
        let after = match &mirror {
            Some(mirror) => state.stepped(col, mirror, p),
            None => state.clone(),
        };
        last = Some(Trail {
            before: state,
            mirror,
            after: after.clone(),
            sign,
        });
        state = after;
    }
    last
}

/// The worst fit of all entries.
pub(super) fn overall(state: &State, stated: &Table) -> Fit {
    let mut worst = Fit::Inside;
    for row in 0..state.order {
        for col in 0..state.order {
            worst = worst.and(fit(stated.at(row, col), state.at(row, col)));
        }
    }
    worst
}

fn conclude(word: Fit, step: usize, stated: &Table, trail: &Trail, p: Precision) -> Verdict {
    let order = trail.after.order;
    let mut furthest = RBig::ZERO;
    let mut wrong = Vec::new();
    for row in 0..order {
        for col in 0..order {
            let (figure, truth) = (stated.at(row, col), trail.after.at(row, col));
            furthest = furthest.max(distance(figure, truth));
            if fit(figure, truth) == Fit::Outside {
                wrong.push((row, col));
            }
        }
    }
    if word == Fit::Inside {
        return Verdict::new(
            Word::Confirmed,
            format!("every entry is right to its stated digits after {step} reflectors"),
        )
        .resting_on("largest difference", print::at_least(&furthest))
        .granting(Freedom::ReflectorSign);
    }
    let (row, col) = wrong.first().copied().unwrap_or((0, 0));
    let mut verdict = Verdict::new(
        Word::Refuted,
        format!(
            "{} of {} entries depart from the true matrix after {step} reflectors; the first is in \
             row {}, column {}",
            wrong.len(),
            order * order,
            row + 1,
            col + 1
        ),
    )
    .resting_on("largest difference", print::at_least(&furthest))
    .granting(Freedom::ReflectorSign);
    verdict.findings.push(departure(
        row,
        col,
        stated.at(row, col),
        trail.after.at(row, col),
    ));
    verdict
        .findings
        .extend(causes::of_state(step - 1, stated, trail, &wrong, p));
    verdict
}
