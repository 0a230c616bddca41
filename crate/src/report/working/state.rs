//! The matrix after an entry.

use nalgebra::DMatrix;

use super::{CellRole, StateCell, StateView};
use crate::ledger::{Act, ReplayError, State};
use crate::matrix::Dense;
use crate::reduce::Tridiagonal;
use crate::report::map::picture;
use crate::report::run::Run;

/// Up to this order a state is shown in numbers.
const LARGEST_IN_NUMBERS: usize = 12;
/// Significant digits of a cell.
const DIGITS: u32 = 6;

/// The state after the entry at `place`. Cost: that of a replay, and O(n²).
pub(super) fn state(run: &Run, place: usize) -> StateView {
    match run.ledger.replay(place) {
        Ok(State::Matrix(matrix)) => shown(
            run,
            place,
            &matrix,
            run.scale(),
            "The matrix after this entry".to_owned(),
        ),
        Ok(State::Tridiagonal(tridiagonal)) => shown(
            run,
            place,
            &full(&tridiagonal),
            run.scale(),
            "The tridiagonal form after this entry".to_owned(),
        ),
        Err(ReplayError::BeforeReduction { .. }) => shown(
            run,
            place,
            &run.rounded.matrix,
            run.rounded.matrix_scale,
            "The matrix as it enters".to_owned(),
        ),
        Err(error @ ReplayError::NoSuchEntry { .. }) => StateView {
            caption: error.to_string(),
            cells: Vec::new(),
            picture: None,
        },
    }
}

/// A tridiagonal matrix with all its zeros.
fn full(tridiagonal: &Tridiagonal) -> Dense {
    let order = tridiagonal.order();
    let mut re = DMatrix::zeros(order, order);
    for (k, alpha) in tridiagonal.diagonal.iter().enumerate() {
        re[(k, k)] = *alpha;
    }
    for (k, beta) in tridiagonal.off_diagonal.iter().enumerate() {
        re[(k + 1, k)] = *beta;
        re[(k, k + 1)] = *beta;
    }
    Dense::real(re)
}

fn shown(run: &Run, place: usize, matrix: &Dense, scale: i32, caption: String) -> StateView {
    let order = matrix.rows();
    if order > LARGEST_IN_NUMBERS {
        return StateView {
            caption,
            cells: Vec::new(),
            picture: Some(picture(matrix, scale)),
        };
    }
    let act = run.ledger.entries().get(place).map(|entry| &entry.act);
    let cell = |row: usize, col: usize| {
        let re = matrix.re[(row, col)];
        let im = matrix.im.as_ref().map_or(0.0, |im| im[(row, col)]);
        StateCell {
            figure: figure(re, im, scale),
            role: act.map_or(CellRole::Plain, |act| {
                role(act, row, col, re == 0.0 && im == 0.0)
            }),
        }
    };
    StateView {
        caption,
        cells: (0..order)
            .map(|row| (0..order).map(|col| cell(row, col)).collect())
            .collect(),
        picture: None,
    }
}

fn figure(re: f64, im: f64, scale: i32) -> String {
    use crate::report::run::figure_of;
    if re == 0.0 && im == 0.0 {
        return "0".to_owned();
    }
    if im == 0.0 {
        return figure_of(re, scale, DIGITS);
    }
    let sign = if im < 0.0 { '−' } else { '+' };
    format!(
        "{} {sign} {}i",
        figure_of(re, scale, 4),
        figure_of(im.abs(), scale, 4)
    )
}

/// What an act did to the cell at (row, col).
fn role(act: &Act, row: usize, col: usize, zero: bool) -> CellRole {
    let (low, high) = (row.min(col), row.max(col));
    let untouched = if zero {
        CellRole::Blank
    } else {
        CellRole::Plain
    };
    match act {
        Act::Reflector {
            column,
            scalar,
            zeroed_from,
            ..
        } if *scalar != 0.0 => {
            if low == *column && high >= *zeroed_from {
                CellRole::Zeroed
            } else if low > *column || (low == *column && high == column + 1) {
                CellRole::Changed
            } else {
                untouched
            }
        }
        Act::Sweep { step, .. } if step.first <= low && high <= step.last && high - low <= 1 => {
            CellRole::Changed
        }
        Act::Deflation(deflation) if low == deflation.index && high == deflation.index + 1 => {
            CellRole::Zeroed
        }
        Act::Phases { re, .. } if !re.is_empty() && high == low + 1 => CellRole::Changed,
        _ => untouched,
    }
}
