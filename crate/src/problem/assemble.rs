//! From cells to a problem.

use super::hermitian::{asymmetry, mend, Adjustment, Mirror};
use super::{Part, Problem, ProblemError, Tolerances};
use crate::entry::cell::CellValue;
use crate::matrix::ExactMatrix;
use crate::num::ExactReal;

/// Greatest order worked on.
pub const MAX_ORDER: usize = 1_000;

/// A rectangle of cells, row-major.
#[derive(Clone, Debug)]
pub struct Cells {
    /// Number of rows.
    pub rows: usize,
    /// Number of columns.
    pub cols: usize,
    /// rows · cols values, row by row.
    pub values: Vec<CellValue>,
}

impl Cells {
    /// The cell in `row` and `col`, from 0.
    pub fn at(&self, row: usize, col: usize) -> &CellValue {
        &self.values[row * self.cols + col]
    }
}

/// Repairs a person has chosen.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Choices {
    /// What to take where mirrored cells of the matrix disagree.
    pub matrix: Option<Mirror>,
    /// The same for the metric.
    pub metric: Option<Mirror>,
}

/// A problem with what belongs to it but not to the computation.
#[derive(Clone, Debug)]
pub struct Assembly {
    /// The problem, exactly Hermitian.
    pub problem: Problem,
    /// Tolerances of the matrix, if any were written.
    pub tolerances: Option<Tolerances>,
    /// Tolerances of the metric, if any were written.
    pub metric_tolerances: Option<Tolerances>,
    /// What was done to make the matrices Hermitian, in order.
    pub adjustments: Vec<Adjustment>,
}

/// Builds a problem. A metric of one row and n cells is the diagonal of one.
///
/// Mirrored cells that disagree are refused unless a repair was chosen; a
/// chosen repair leaves an [`Adjustment`] only where something disagreed.
/// Definiteness of the metric is not tested here: see
/// [`super::metric_check`]. Cost: n².
///
/// # Errors
/// [`ProblemError`]; never [`ProblemError::MetricNotPositive`].
pub fn assemble(
    matrix: Cells,
    metric: Option<Cells>,
    choices: &Choices,
) -> Result<Assembly, ProblemError> {
    let mut adjustments = Vec::new();
    let order = matrix.rows;
    let (matrix, tolerances) = settle(matrix, Part::Matrix, choices.matrix, &mut adjustments)?;
    let mut metric_tolerances = None;
    let metric = match metric {
        None => None,
        Some(cells) => {
            let cells = spread(cells, order);
            if cells.rows == cells.cols && cells.rows != order {
                return Err(ProblemError::OrderDiffers {
                    matrix: order,
                    metric: cells.rows,
                });
            }
            let (metric, found) = settle(cells, Part::Metric, choices.metric, &mut adjustments)?;
            metric_tolerances = found;
            Some(metric)
        }
    };
    Ok(Assembly {
        problem: Problem { matrix, metric },
        tolerances,
        metric_tolerances,
        adjustments,
    })
}

/// One row (or one column) of n cells becomes a diagonal matrix.
fn spread(cells: Cells, order: usize) -> Cells {
    let is_list = cells.rows == 1 || cells.cols == 1;
    if !is_list || cells.values.len() != order || order == 1 {
        return cells;
    }
    let mut values = vec![CellValue::ZERO; order * order];
    for (i, value) in cells.values.into_iter().enumerate() {
        values[i * order + i] = value;
    }
    Cells {
        rows: order,
        cols: order,
        values,
    }
}

fn settle(
    mut cells: Cells,
    part: Part,
    mirror: Option<Mirror>,
    adjustments: &mut Vec<Adjustment>,
) -> Result<(ExactMatrix, Option<Tolerances>), ProblemError> {
    let (rows, cols) = (cells.rows, cells.cols);
    if rows == 0 || cols == 0 || cells.values.len() != rows * cols {
        return Err(ProblemError::Empty(part));
    }
    if rows != cols {
        return Err(ProblemError::NotSquare { part, rows, cols });
    }
    if rows > MAX_ORDER {
        return Err(ProblemError::TooLarge { part, order: rows });
    }
    if let Some(found) = asymmetry(&cells, part) {
        let Some(mirror) = mirror else {
            return Err(ProblemError::NotHermitian(found));
        };
        mend(&mut cells, mirror);
        adjustments.push(Adjustment { mirror, found });
    }
    Ok(planes(cells))
}

fn planes(cells: Cells) -> (ExactMatrix, Option<Tolerances>) {
    let order = cells.rows;
    let complex = cells.values.iter().any(|cell| !cell.im.is_zero());
    let tolerant = cells.values.iter().any(|cell| cell.tolerance.is_some());
    let mut re = Vec::with_capacity(order * order);
    let mut im = Vec::with_capacity(if complex { order * order } else { 0 });
    let mut radii = Vec::with_capacity(if tolerant { order * order } else { 0 });
    for cell in cells.values {
        re.push(cell.re);
        if complex {
            im.push(cell.im);
        }
        if tolerant {
            radii.push(cell.tolerance.unwrap_or(ExactReal::ZERO));
        }
    }
    (
        ExactMatrix::new(order, re, complex.then_some(im)),
        tolerant.then(|| Tolerances::new(order, radii)),
    )
}
