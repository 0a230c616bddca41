//! What is wrong with rows that make no square matrix.

use super::diagnostic::{count, grouped, Finding, Findings, Kind};
use super::raw::RawTable;
use super::repair::{Action, Repair};
use super::settings::{Settings, Wanted};
use super::span::Bytes;
use super::{shape, ReadOptions};
use std::collections::BTreeMap;

/// Says which rows are ragged, that the rectangle is not square, or that the
/// matrix would be too large.
pub(crate) fn describe(
    table: &RawTable,
    settings: &Settings,
    options: &ReadOptions,
    findings: &mut Findings,
) {
    let widths = table.widths();
    let Some(&first) = widths.first() else { return };
    let order = options.limits.order;
    let rectangle = widths.iter().all(|&width| width == first);
    let square = matches!(options.wanted, Wanted::Square | Wanted::Metric);
    let shape_fits = !shape::possible(&widths, options.wanted).is_empty();
    if shape_fits || (rectangle && !square) {
        let size = count(widths.iter().sum(), "cell");
        findings.push(
            Finding::error(
                Kind::TooLarge,
                format!(
                    "{size} make a matrix of more than order {} here.",
                    grouped(order)
                ),
            )
            .expected(format!("at most {} rows and columns", grouped(order))),
        );
    } else if rectangle {
        not_square(table, settings, findings);
    } else {
        ragged(table, &widths, settings, options.wanted, findings);
    }
}

/// The repair for lists that were written as columns: what they give when
/// turned is a matrix.
fn transposition(widths: &[usize], settings: &Settings) -> Option<Repair> {
    let widest = widths.iter().copied().max().unwrap_or(0);
    let falling = widths.is_sorted_by(|a, b| a >= b);
    if !falling || !(2..=3).contains(&widest) {
        return None;
    }
    let turned: Vec<usize> = (0..widest)
        .map(|col| widths.iter().filter(|&&width| width > col).count())
        .collect();
    let fits = !shape::possible(&turned, Wanted::Square).is_empty();
    fits.then(|| Repair::new("Write the columns as rows", Action::Transpose, *settings))
}

fn ragged(
    table: &RawTable,
    widths: &[usize],
    settings: &Settings,
    wanted: Wanted,
    findings: &mut Findings,
) {
    let (expected_of, reason) = match wanted {
        Wanted::Square | Wanted::Metric => wanted_width(widths),
        Wanted::List | Wanted::Any => usual_width(widths),
    };
    let mut repair = transposition(widths, settings);
    for (row, &width) in widths.iter().enumerate() {
        let expected = expected_of(row);
        if width == expected {
            continue;
        }
        let finding = Finding::error(
            Kind::Ragged,
            format!(
                "Row {} has {}; {} expected, {reason}.",
                row + 1,
                count(width, "cell"),
                expected
            ),
        )
        .at_row(row)
        .span(row_bytes(table, row))
        .expected(count(expected, "cell"));
        findings.push(match repair.take() {
            Some(repair) => finding.repair(repair),
            None => finding,
        });
    }
}

/// The width wanted of each row, and why.
type WantedWidth = (Box<dyn Fn(usize) -> usize>, &'static str);

/// A triangle when most rows follow one, else the width most rows have.
fn wanted_width(widths: &[usize]) -> WantedWidth {
    let rows = widths.len();
    let matching = |wanted: &dyn Fn(usize) -> usize| {
        widths
            .iter()
            .enumerate()
            .filter(|&(row, &width)| width == wanted(row))
            .count()
    };
    let lower = matching(&|row| row + 1);
    let upper = matching(&|row| rows - row);
    let (_, often) = usual(widths);
    // A first row of one cell is how a lower triangle begins, and little else.
    if rows > 2 && widths[0] == 1 && lower >= often && lower >= upper {
        return (Box::new(|row| row + 1), "as the rows form a lower triangle");
    }
    if rows > 2 && upper > often {
        return (
            Box::new(move |row| rows - row),
            "as the rows form an upper triangle",
        );
    }
    usual_width(widths)
}

/// The width that most rows have, else that of the longest.
fn usual_width(widths: &[usize]) -> WantedWidth {
    let (usual, often) = usual(widths);
    if often > 1 {
        return (Box::new(move |_| usual), "as in most rows");
    }
    let widest = widths.iter().copied().max().unwrap_or(0);
    (Box::new(move |_| widest), "as in the longest row")
}

/// The commonest width and how often it occurs.
fn usual(widths: &[usize]) -> (usize, usize) {
    let mut tally: BTreeMap<usize, usize> = BTreeMap::new();
    for &width in widths {
        *tally.entry(width).or_default() += 1;
    }
    tally
        .into_iter()
        .max_by_key(|&(width, times)| (times, width))
        .unwrap_or((0, 0))
}

fn not_square(table: &RawTable, settings: &Settings, findings: &mut Findings) {
    let (rows, cols) = (table.rows(), table.row(0).len());
    let mut finding = Finding::error(
        Kind::NotSquare,
        format!(
            "{} of {} make no square matrix.",
            count(rows, "row"),
            count(cols, "cell")
        ),
    )
    .expected("as many rows as columns");
    let repair = |label: &str, action| Repair::new(label, action, *settings);
    if rows == cols + 1 {
        finding = finding
            .repair(repair("Drop the first row", Action::DropRow { row: 0 }))
            .repair(repair(
                "Drop the last row",
                Action::DropRow { row: rows - 1 },
            ));
    } else if cols == rows + 1 {
        finding = finding
            .repair(repair(
                "Drop the first column",
                Action::DropColumn { col: 0 },
            ))
            .repair(repair(
                "Drop the last column",
                Action::DropColumn { col: cols - 1 },
            ));
    }
    findings.push(finding);
}

/// The stretch of text from a row's first cell to its last.
fn row_bytes(table: &RawTable, row: usize) -> Bytes {
    let cells = table.row(row);
    match (cells.first(), cells.last()) {
        (Some(first), Some(last)) => Bytes {
            start: first.span.start,
            end: last.span.end,
        },
        _ => Bytes::default(),
    }
}
