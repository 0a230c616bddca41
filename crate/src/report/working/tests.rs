use super::*;
use crate::control::Unattended;
use crate::ledger::Ledger;
use crate::matrix::{Dense, ExactMatrix};
use crate::num::ExactReal;
use crate::problem::{Problem, Rounded};
use crate::report::run::{Heading, Run};
use nalgebra::DMatrix;

/// A run on a symmetric matrix of integers that no one would call special.
pub(crate) fn run_of_order(order: usize) -> Run {
    let entry = |i: usize, j: usize| ((i * j + 3 * i + 3 * j) % 11) as i64 - 5;
    let plane = (0..order * order)
        .map(|at| ExactReal::Decimal {
            digits: entry(at / order, at % order),
            exponent: 0,
        })
        .collect();
    let problem = Problem {
        matrix: ExactMatrix::new(order, plane, None),
        metric: None,
    };
    let rounded = Rounded::from_doubles(
        Dense::real(DMatrix::from_fn(order, order, |i, j| entry(i, j) as f64)),
        None,
    );
    let mut ledger = Ledger::new();
    let outcome = crate::solve::solve(&rounded, &mut ledger, &mut Unattended);
    Run::new(Heading::default(), problem, rounded, ledger, outcome)
}

#[test]
fn every_entry_has_a_row_and_a_view() {
    let run = run_of_order(7);
    let summary = summary(&run);
    let all = page(&run, 0, usize::MAX);
    assert_eq!(all.rows.len(), summary.entries as usize);
    for (place, row) in all.rows.iter().enumerate() {
        assert_eq!(row.number as usize, place + 1);
        assert!(!row.words.is_empty(), "{row:?}");
        let view = entry(&run, place).expect("an entry");
        assert_eq!(&view.row, row);
        assert_eq!(view.state.cells.len(), 7, "{:?}", view.state.caption);
    }
    assert!(entry(&run, all.rows.len()).is_none());
    // Six off-diagonals have to fall, and each fall is an entry.
    assert_eq!(summary.deflations.len(), 6, "{}", summary.words);
}

#[test]
fn a_page_is_the_same_rows_as_the_whole() {
    let run = run_of_order(9);
    let all = page(&run, 0, usize::MAX).rows;
    let some = page(&run, 11, 5);
    assert_eq!(some.first, 11);
    assert_eq!(some.rows, all[11..16]);
    assert!(page(&run, 100_000, 5).rows.is_empty());
}

#[test]
fn a_reflector_shows_its_zeros_where_they_are() {
    let run = run_of_order(6);
    let place = page(&run, 0, usize::MAX)
        .rows
        .iter()
        .position(|row| row.kind == EntryKind::Reflector)
        .expect("a reflector");
    let view = entry(&run, place).expect("an entry");
    for row in 2..6 {
        let cell = &view.state.cells[row][0];
        assert_eq!(
            (cell.role, cell.figure.as_str()),
            (CellRole::Zeroed, "0"),
            "row {row}"
        );
    }
    assert_eq!(view.state.cells[1][0].role, CellRole::Changed);
    assert_eq!(view.state.cells[0][0].role, CellRole::Plain);
    assert_eq!(view.vector.len(), 5);
    assert_eq!(view.vector[0].figure, "1.0000000000");
}

#[test]
fn large_states_are_maps() {
    let run = run_of_order(15);
    let view = entry(&run, 3).expect("an entry");
    assert!(view.state.cells.is_empty());
    assert_eq!(view.state.picture.expect("a map").side, 15);
}

#[test]
fn every_line_of_the_history_ends_at_its_deflation() {
    let run = run_of_order(12);
    let history = history(&run).expect("tridiagonal form reached");
    assert_eq!((history.lines.len(), history.deflations.len()), (11, 11));
    for line in &history.lines {
        let (sweep, at) = *line.points.last().expect("a point");
        assert!(
            history
                .deflations
                .iter()
                .any(|d| d.sweep == sweep && d.at == at),
            "off-diagonal {} ends at {sweep}, {at}: {:?}",
            line.place,
            history.deflations
        );
        assert!(
            line.points.windows(2).all(|pair| pair[0].0 < pair[1].0),
            "{line:?}"
        );
        assert!(
            line.points.iter().all(|(_, at)| (0.0..=1.0).contains(at)),
            "{line:?}"
        );
    }
    assert!(
        (2..=8).contains(&history.ticks.len()),
        "{:?}",
        history.ticks
    );
}

#[test]
fn long_histories_are_thinned() {
    let run = run_of_order(80);
    let history = history(&run).expect("tridiagonal form reached");
    assert_eq!(history.lines.len(), 24);
    assert_eq!(history.lines[0].place, 1);
    assert_eq!(history.lines[23].place, 79);
    assert_eq!(history.deflations.len(), 79);
}

#[test]
fn drifts_are_whole_units() {
    assert_eq!(rows::ulps(-0.3), "0");
    assert_eq!(rows::ulps(2.5), "+3");
    assert_eq!(rows::ulps(-12.0), "−12");
}

#[test]
fn residual_bounds_are_of_the_size_rounding_leaves() {
    let run = run_of_order(8);
    let norm = run.residuals.as_ref().expect("converges").matrix_norm;
    for k in 0..8 {
        let bound = run.residual_bound(k).expect("a bound");
        // The solver leaves a small multiple of n·u·‖A‖, the bound on the
        // measuring itself about as much.
        assert!(
            0.0 < bound && bound < 100.0 * 8.0 * f64::EPSILON * norm,
            "{k}: {bound} of {norm}"
        );
    }
    for fact in crate::report::values::checks(&run) {
        let figure: f64 = fact.figure.replace('−', "-").parse().expect("a number");
        assert!(figure < 10.0, "{fact:?}");
    }
}
