//! One entry in full.

use super::rows::{direction, magnitude, row, sweeps_before};
use super::state::state;
use super::{EntryView, Fact, OffDiagonalChange};
use crate::ledger::{Act, Span};
use crate::report::run::Run;
use crate::report::vector::complex_figure;

/// Significant digits of a scalar, a shift or an off-diagonal.
const DIGITS: u32 = 12;
/// Decimal places of a reflector's components; its first one is 1.
const PLACES: u32 = 10;

/// The entry at `place` (from 0), with the state after it; `None` past the end.
pub fn entry(run: &Run, place: usize) -> Option<EntryView> {
    let entries = run.ledger.entries();
    let found = entries.get(place)?;
    let sweeps = sweeps_before(entries, place + 1);
    Some(EntryView {
        row: row(run, place, sweeps),
        facts: facts(run, &found.act),
        vector: vector(run, &found.act),
        off_diagonals: off_diagonals(run, &found.act),
        trace: run.figure(found.totals.trace, DIGITS),
        norm: run.figure(found.totals.frobenius, DIGITS),
        state: state(run, place),
    })
}

fn fact(name: &str, figure: String) -> Fact {
    Fact {
        name: name.to_owned(),
        figure,
    }
}

fn facts(run: &Run, act: &Act) -> Vec<Fact> {
    match act {
        Act::Adjustment { count, .. } => vec![fact("cells concerned", count.to_string())],
        Act::Scaling { .. } | Act::Metric { .. } | Act::Phases { .. } => Vec::new(),
        Act::Reflector {
            column,
            scalar,
            image_re,
            image_im,
            ..
        } => {
            let image = if *image_im == 0.0 {
                run.figure(*image_re, DIGITS)
            } else {
                let (re, im) = (
                    run.figure(*image_re, DIGITS),
                    run.figure(image_im.abs(), DIGITS),
                );
                format!("{re} {} {im}i", if *image_im < 0.0 { '−' } else { '+' })
            };
            vec![
                fact("column", (column + 1).to_string()),
                fact(
                    "scalar τ of I − τ v vᴴ",
                    crate::report::run::figure_of(*scalar, 0, DIGITS),
                ),
                fact("off-diagonal it leaves", image),
            ]
        }
        Act::Sweep { step, .. } => vec![
            fact(
                "block, rows",
                format!("{} to {}", step.first + 1, step.last + 1),
            ),
            fact("direction", direction(step.direction).to_owned()),
            fact("shift σ", run.figure(step.shift, DIGITS)),
        ],
        Act::Deflation(deflation) => vec![
            fact(
                "between rows",
                format!("{} and {}", deflation.index + 1, deflation.index + 2),
            ),
            fact("size", magnitude(run, deflation.size)),
            fact("threshold", magnitude(run, deflation.threshold)),
        ],
    }
}

fn vector(run: &Run, act: &Act) -> Vec<Fact> {
    let numbers = |span: &Span| run.ledger.numbers(*span);
    match act {
        Act::Reflector {
            column,
            vector_re,
            vector_im,
            ..
        } => {
            let (re, im) = (numbers(vector_re), numbers(vector_im));
            components(re, im, |k| format!("row {}", run.label(column + 1 + k)))
        }
        Act::Phases { re, im } => components(numbers(re), numbers(im), |k| {
            format!("row {}", run.label(k))
        }),
        _ => Vec::new(),
    }
}

fn components(re: &[f64], im: &[f64], name: impl Fn(usize) -> String) -> Vec<Fact> {
    re.iter()
        .enumerate()
        .map(|(k, re)| {
            let figure = match im.get(k) {
                Some(im) => complex_figure(*re, *im, PLACES),
                None => crate::report::vector::figure(*re, PLACES),
            };
            Fact {
                name: name(k),
                figure,
            }
        })
        .collect()
}

fn off_diagonals(run: &Run, act: &Act) -> Vec<OffDiagonalChange> {
    let Act::Sweep {
        step,
        before,
        after,
    } = act
    else {
        return Vec::new();
    };
    let (before, after) = (run.ledger.numbers(*before), run.ledger.numbers(*after));
    before
        .iter()
        .zip(after)
        .enumerate()
        .map(|(k, (before, after))| OffDiagonalChange {
            place: (step.first + k) as u32 + 1,
            before: run.figure(*before, 8),
            after: run.figure(*after, 8),
        })
        .collect()
}
