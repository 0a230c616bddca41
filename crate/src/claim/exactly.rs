//! Exact checks of what is stated exactly.

use dashu_ratio::RBig;

use super::figure::Figure;
use crate::matrix::ExactMatrix;
use crate::problem::Problem;

/// A complex rational number.
pub(super) type Ratio = (RBig, RBig);

/// Whether an exactly stated vector is an eigenvector.
pub(super) enum Exactness {
    /// It is, of this eigenvalue.
    Eigenvector(RBig),
    /// It is not.
    Not,
    /// The vector is not meant exactly, or an entry is irrational.
    NotApplicable,
}

pub(super) fn times(x: &Ratio, y: &Ratio) -> Ratio {
    (&x.0 * &y.0 - &x.1 * &y.1, &x.0 * &y.1 + &x.1 * &y.0)
}

pub(super) fn plus(x: &Ratio, y: &Ratio) -> Ratio {
    (&x.0 + &y.0, &x.1 + &y.1)
}

pub(super) fn conj(x: &Ratio) -> Ratio {
    (x.0.clone(), -x.1.clone())
}

pub(super) fn none() -> Ratio {
    (RBig::ZERO, RBig::ZERO)
}

/// All entries as complex ratios, row-major; `None` when one is irrational.
pub(super) fn rational_cells(matrix: &ExactMatrix) -> Option<Vec<Ratio>> {
    let order = matrix.order();
    let mut cells = Vec::with_capacity(order * order);
    for row in 0..order {
        for col in 0..order {
            cells.push((
                matrix.re(row, col).rational()?,
                matrix.im(row, col).rational()?,
            ));
        }
    }
    Some(cells)
}

/// Row-major square matrix times a vector.
pub(super) fn applied(cells: &[Ratio], x: &[Ratio]) -> Vec<Ratio> {
    let order = x.len();
    (0..order)
        .map(|row| {
            (0..order).fold(none(), |sum, col| {
                plus(&sum, &times(&cells[row * order + col], &x[col]))
            })
        })
        .collect()
}

/// x* y.
pub(super) fn inner(x: &[Ratio], y: &[Ratio]) -> Ratio {
    x.iter()
        .zip(y)
        .fold(none(), |sum, (a, b)| plus(&sum, &times(&conj(a), b)))
}

/// Decides A x = λ M x for an exactly stated x: λ must be its Rayleigh
/// quotient, so one residual settles it.
pub(super) fn eigenvalue_of(problem: &Problem, vector: &[Figure]) -> Exactness {
    if !vector.iter().all(Figure::is_exact) {
        return Exactness::NotApplicable;
    }
    let Some(cells) = rational_cells(&problem.matrix) else {
        return Exactness::NotApplicable;
    };
    let x: Vec<Ratio> = vector
        .iter()
        .map(|f| (f.re.stated.clone(), f.im.stated.clone()))
        .collect();
    let moved = applied(&cells, &x);
    let weighed = match &problem.metric {
        Some(metric) => match rational_cells(metric) {
            Some(cells) => applied(&cells, &x),
            None => return Exactness::NotApplicable,
        },
        None => x.clone(),
    };
    let length = inner(&x, &weighed).0;
    if length <= RBig::ZERO {
        return Exactness::Not;
    }
    let lambda = inner(&x, &moved).0 / length;
    let holds = moved
        .iter()
        .zip(&weighed)
        .all(|(a, m)| a.0 == &lambda * &m.0 && a.1 == &lambda * &m.1);
    if holds {
        Exactness::Eigenvector(lambda)
    } else {
        Exactness::Not
    }
}
