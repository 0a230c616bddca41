//! What the tolerances of the entries do to the eigenvalues: proven ranges, and
//! to first order which entry matters most.

use serde::{Deserialize, Serialize};

use super::decimal::typeset;
use super::run::Run;
use super::values::Standing;
use crate::num::figure;
use crate::problem::Part;
use crate::sensitivity::{sensitivities, Moves, Sensitivity};

/// Entries listed for one eigenvalue; the rest move it less.
const LISTED: usize = 10;
/// Entries named in a table of all eigenvalues.
const NAMED: usize = 2;
/// Largest order at which every eigenvalue's ranking is made for the table.
const LARGEST_NAMED: usize = 40;
/// Significant digits of a first-order figure.
const DIGITS: usize = 3;

/// The range of one eigenvalue.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct RangeRow {
    /// Index of the eigenvalue, from 1.
    pub index: u32,
    /// No matrix within the tolerances has a smaller one; rounded down.
    pub lower: String,
    /// No matrix within the tolerances has a larger one; rounded up.
    pub upper: String,
    /// The entries that move it most, to first order; empty where that says
    /// nothing, and at orders beyond 40.
    pub most: String,
}

/// One entry's part in the move of one eigenvalue.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Influence {
    /// The entry in words, with the labels of its row and column.
    pub entry: String,
    /// Its tolerance as ±r.
    pub tolerance: String,
    /// Move of the eigenvalue for a unit change of the entry and its mirror.
    pub derivative: String,
    /// Largest first-order move within the tolerance, as ±m.
    pub effect: String,
    /// That move over the largest one listed, 0 to 1: the length of a bar.
    pub share: f64,
}

/// What the tolerances do.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct TolerancesView {
    /// Whether ranges are proven.
    pub standing: Standing,
    /// What they say and rest on, or why there are none, as a sentence.
    pub reason: String,
    /// The ranges, ascending; empty when none is proven.
    pub ranges: Vec<RangeRow>,
    /// The eigenvalue the influences are about, from 1.
    pub index: u32,
    /// What the ranking says of it, as a sentence.
    pub words: String,
    /// The ranking, greatest effect first.
    pub influences: Vec<Influence>,
}

/// The view, with the ranking for the eigenvalue at `chosen` (from 0);
/// `None` when no entry has a tolerance or there is no result.
///
/// Cost: n² an eigenvalue named, and a sort.
pub fn view(run: &Run, chosen: usize) -> Option<TolerancesView> {
    if !run.has_tolerances() || run.outcome.is_err() {
        return None;
    }
    let chosen = chosen.min(run.order().saturating_sub(1));
    let ranked = if stands_apart(run, chosen) {
        ranking(run, chosen, usize::MAX)
    } else {
        Vec::new()
    };
    Some(TolerancesView {
        standing: match run.ranges {
            Some(_) => Standing::Proven,
            None => Standing::Undecided,
        },
        reason: reason(run).to_owned(),
        ranges: ranges(run),
        index: chosen as u32 + 1,
        words: words(run, chosen, &ranked),
        influences: influences(run, &ranked),
    })
}

/// What the ranges say and rest on, or why there are none.
pub fn reason(run: &Run) -> &'static str {
    if run.ranges.is_some() {
        "For every Hermitian problem whose entries lie within the tolerances, eigenvalue k, \
         counted from the lowest, lies in its range; the ends are rounded outward. It is not \
         claimed that they are reached. Rests on Weyl 1912, Collatz 1942 and Temple 1928."
    } else {
        "No range is proven: the vectors found are too far from orthonormal, or the metric's \
         tolerances might make it singular."
    }
}

/// The proven ranges, with the entries that matter most beside each.
pub fn ranges(run: &Run) -> Vec<RangeRow> {
    let proven = run.ranges.iter().flatten();
    proven
        .map(|range| {
            let (lower, upper) = range.decimals();
            let telling = run.order() <= LARGEST_NAMED && stands_apart(run, range.index());
            let most = if telling {
                named(run, &ranking(run, range.index(), NAMED))
            } else {
                String::new()
            };
            RangeRow {
                index: range.index() as u32 + 1,
                lower: typeset(&lower),
                upper: typeset(&upper),
                most,
            }
        })
        .collect()
}

fn ranking(run: &Run, index: usize, limit: usize) -> Vec<Sensitivity> {
    let Ok(solution) = &run.outcome else {
        return Vec::new();
    };
    let moves = Moves::Within {
        matrix: run.tolerances.as_ref(),
        metric: run.metric_tolerances.as_ref(),
    };
    let scale = run.rounded.metric_scale;
    sensitivities(&solution.approximation, scale, index, moves, limit)
}

/// A derivative means something only where the eigenvalue has a vector.
fn stands_apart(run: &Run, index: usize) -> bool {
    let cluster = run.proven().and_then(|proof| proof.cluster_of(index));
    cluster.is_none_or(|cluster| cluster.count() == 1)
}

fn named(run: &Run, ranked: &[Sensitivity]) -> String {
    let names: Vec<String> = ranked
        .iter()
        .map(|found| format!("{} ({})", entry(run, found), move_of(found.effect)))
        .collect();
    names.join(", ")
}

fn words(run: &Run, index: usize, ranked: &[Sensitivity]) -> String {
    let number = index + 1;
    if !stands_apart(run, index) {
        return format!(
            "Eigenvalue {number} is not proven apart from its neighbours, so first-order moves say nothing of it."
        );
    }
    if ranked.is_empty() {
        return format!("To first order no entry with a tolerance moves eigenvalue {number}.");
    }
    let all: f64 = ranked.iter().map(|found| found.effect).sum();
    let left_out = match ranked.len().saturating_sub(LISTED) {
        0 => String::new(),
        1 => " One more entry moves it less.".to_owned(),
        more => format!(" {more} more entries move it less."),
    };
    format!(
        "To first order all entries together move eigenvalue {number} by about {}; these are \
         derivatives at the vector found, not bounds.{left_out}",
        move_of(all)
    )
}

fn influences(run: &Run, ranked: &[Sensitivity]) -> Vec<Influence> {
    let largest = ranked.first().map_or(1.0, |found| found.effect);
    ranked
        .iter()
        .take(LISTED)
        .map(|found| Influence {
            entry: entry(run, found),
            tolerance: move_of(radius(run, found)),
            derivative: typeset(&figure::plain(found.derivative, DIGITS)),
            effect: move_of(found.effect),
            share: found.effect / largest,
        })
        .collect()
}

fn radius(run: &Run, found: &Sensitivity) -> f64 {
    let tolerances = match found.part {
        Part::Matrix => &run.tolerances,
        Part::Metric => &run.metric_tolerances,
    };
    tolerances
        .as_ref()
        .map_or(0.0, |t| t.radius(found.row, found.col).nearest(0))
}

fn entry(run: &Run, found: &Sensitivity) -> String {
    let place = format!("{}, {}", run.label(found.row), run.label(found.col));
    match found.part {
        Part::Matrix => place,
        Part::Metric => format!("metric {place}"),
    }
}

fn move_of(size: f64) -> String {
    format!("±{}", typeset(&figure::plain(size, DIGITS)))
}

#[cfg(test)]
pub(crate) mod tests;
