//! Entries in words and figures.

use super::{EntryKind, LedgerPage, LedgerRow, LedgerSummary};
use crate::iterate::Direction;
use crate::ledger::{Act, Entry};
use crate::report::decimal::typeset;
use crate::report::map::scaled_magnitude;
use crate::report::run::Run;

/// Figures of a shift or a balance in a row.
const ROW_DIGITS: u32 = 5;

/// At most `count` rows from `first` (from 0) on. Cost: O(first + count).
pub fn page(run: &Run, first: usize, count: usize) -> LedgerPage {
    let entries = run.ledger.entries();
    let first = first.min(entries.len());
    let end = first.saturating_add(count).min(entries.len());
    let mut sweeps = sweeps_before(entries, first);
    let rows = (first..end)
        .map(|place| {
            if matches!(entries[place].act, Act::Sweep { .. }) {
                sweeps += 1;
            }
            row(run, place, sweeps)
        })
        .collect();
    LedgerPage {
        first: first as u32,
        rows,
    }
}

/// Sweeps among the first `place` entries.
pub(super) fn sweeps_before(entries: &[Entry], place: usize) -> usize {
    entries[..place]
        .iter()
        .filter(|entry| matches!(entry.act, Act::Sweep { .. }))
        .count()
}

/// The row of the entry at `place`; `sweeps` counts those up to and with it.
pub(super) fn row(run: &Run, place: usize, sweeps: usize) -> LedgerRow {
    let entry = &run.ledger.entries()[place];
    let drift = run.ledger.drift(place);
    let totalled = drift.is_some();
    LedgerRow {
        number: place as u32 + 1,
        kind: kind(&entry.act),
        words: words(run, &entry.act, sweeps),
        balance: if totalled {
            typeset(&scaled_magnitude(entry.totals.balance, run.scale()))
        } else {
            String::new()
        },
        trace_drift: drift.map_or(String::new(), |drift| ulps(drift.trace)),
        norm_drift: drift.map_or(String::new(), |drift| ulps(drift.frobenius)),
    }
}

/// A drift to whole units in the last place, with its sign.
pub(super) fn ulps(drift: f64) -> String {
    let whole = drift.round();
    if whole == 0.0 {
        "0".to_owned()
    } else {
        typeset(&format!("{whole:+.0}"))
    }
}

fn kind(act: &Act) -> EntryKind {
    match act {
        Act::Adjustment { .. } => EntryKind::Adjustment,
        Act::Scaling { .. } | Act::Metric { .. } => EntryKind::Preparation,
        Act::Reflector { .. } => EntryKind::Reflector,
        Act::Phases { .. } => EntryKind::Phases,
        Act::Sweep { .. } => EntryKind::Sweep,
        Act::Deflation(_) => EntryKind::Deflation,
    }
}

fn words(run: &Run, act: &Act, sweeps: usize) -> String {
    let order = run.ledger.order();
    match act {
        Act::Adjustment { text, .. } => text.clone(),
        Act::Scaling { matrix, metric } => {
            let by = |exponent: i32| match exponent {
                0 => "as it is".to_owned(),
                exponent => format!("times 2^{}", typeset(&(-exponent).to_string())),
            };
            let metric = metric.map_or(String::new(), |exponent| {
                format!("; metric {}", by(exponent))
            });
            format!("into double precision: matrix {}{metric}", by(*matrix))
        }
        Act::Metric { .. } => {
            "Cholesky factor of the metric; the matrix becomes L⁻¹AL⁻ᴴ".to_owned()
        }
        Act::Reflector {
            column,
            scalar,
            zeroed_from,
            ..
        } => {
            let number = column + 1;
            if *scalar == 0.0 {
                format!("reflector {number}: column {number} needs none, the identity")
            } else if zeroed_from + 1 >= order {
                format!("reflector {number}: zeroes row {order} of column {number}")
            } else {
                format!(
                    "reflector {number}: zeroes rows {} to {order} of column {number}",
                    zeroed_from + 1
                )
            }
        }
        Act::Phases { re, .. } => {
            if re.is_empty() {
                "tridiagonal form reached".to_owned()
            } else {
                "phases make the off-diagonals real; tridiagonal form reached".to_owned()
            }
        }
        Act::Sweep { step, .. } => format!(
            "sweep {sweeps}: rows {} to {}, {}, shift {}",
            step.first + 1,
            step.last + 1,
            direction(step.direction),
            run.figure(step.shift, ROW_DIGITS)
        ),
        Act::Deflation(deflation) => format!(
            "deflation between rows {} and {}, size {}",
            deflation.index + 1,
            deflation.index + 2,
            run.figure(deflation.size, 2)
        ),
    }
}

pub(super) fn magnitude(run: &Run, value: f64) -> String {
    typeset(&scaled_magnitude(value, run.scale()))
}

pub(super) fn direction(direction: Direction) -> &'static str {
    match direction {
        Direction::Down => "downward",
        Direction::Up => "upward",
    }
}

/// The ledger at a glance. Cost: O(entries).
pub fn summary(run: &Run) -> LedgerSummary {
    let entries = run.ledger.entries();
    let (mut reflectors, mut sweeps) = (0, 0);
    let mut deflations = Vec::new();
    let (mut largest_trace, mut largest_norm) = (0.0f64, 0.0f64);
    for (place, entry) in entries.iter().enumerate() {
        match entry.act {
            Act::Reflector { .. } => reflectors += 1,
            Act::Sweep { .. } => sweeps += 1,
            Act::Deflation(_) => deflations.push(place as u32),
            _ => {}
        }
        if let Some(drift) = run.ledger.drift(place) {
            largest_trace = largest_trace.max(drift.trace.abs());
            largest_norm = largest_norm.max(drift.frobenius.abs());
        }
    }
    let origin = (0..entries.len()).find(|place| run.ledger.drift(*place).is_some());
    let totals = origin
        .map(|place| entries[place].totals)
        .unwrap_or_default();
    LedgerSummary {
        entries: entries.len() as u32,
        words: format!(
            "The ledger of this run has {} entries: {}, {} and {}.",
            entries.len(),
            counted(reflectors, "reflector"),
            counted(sweeps, "sweep"),
            counted(deflations.len(), "deflation")
        ),
        deflations,
        trace: run.figure(totals.trace, 12),
        norm: run.figure(totals.frobenius, 12),
        drift: format!(
            "trace at most {}, norm at most {} units in the last place of the norm, at any entry",
            ulps(largest_trace).trim_start_matches('+'),
            ulps(largest_norm).trim_start_matches('+')
        ),
    }
}

fn counted(count: usize, noun: &str) -> String {
    let plural = if count == 1 { "" } else { "s" };
    format!("{count} {noun}{plural}")
}
