//! Householder's reduction in exact surds, for small real problems whose
//! stated entries are meant exactly.

use dashu_ratio::RBig;

use super::exactly::rational_cells;
use super::figure::Figure;
use super::statement::Table;
use crate::num::exact::ArithmeticError;
use crate::num::ExactReal;
use crate::problem::Problem;

/// Largest order tried: the numbers of terms double with each reflector.
const MAX_ORDER: usize = 6;

type Exact = Result<ExactReal, ArithmeticError>;

/// A real matrix in exact surds.
#[derive(Clone)]
pub(super) struct Surds {
    order: usize,
    cells: Vec<ExactReal>,
}

impl Surds {
    /// The matrix itself, when it is real, rational, small and has no metric.
    pub(super) fn new(problem: &Problem) -> Option<Self> {
        let order = problem.matrix.order();
        if order > MAX_ORDER || problem.metric.is_some() || problem.matrix.is_complex() {
            return None;
        }
        let cells = rational_cells(&problem.matrix)?;
        Some(Self {
            order,
            cells: cells
                .into_iter()
                .map(|(re, _)| ExactReal::from(re))
                .collect(),
        })
    }

    fn at(&self, row: usize, col: usize) -> &ExactReal {
        &self.cells[row * self.order + col]
    }

    /// v = x − κe₁ for the column `col`, with κ of the given sign, and κ.
    pub(super) fn vector(
        &self,
        col: usize,
        positive: bool,
    ) -> Result<(Vec<ExactReal>, ExactReal), ArithmeticError> {
        let mut square = ExactReal::ZERO;
        for row in col + 1..self.order {
            square = square.add(&self.at(row, col).mul(self.at(row, col))?)?;
        }
        let norm = square.sqrt()?;
        let target = if positive { norm } else { norm.neg() };
        let mut vector = vec![ExactReal::ZERO; self.order];
        for row in col + 1..self.order {
            vector[row] = self.at(row, col).clone();
        }
        vector[col + 1] = vector[col + 1].sub(&target)?;
        Ok((vector, target))
    }

    /// The matrix after the reflector with `vector`.
    pub(super) fn reflected(&self, vector: &[ExactReal]) -> Result<Self, ArithmeticError> {
        let square = dot(vector, vector)?;
        if square.is_zero() {
            return Ok(self.clone());
        }
        let tau = ExactReal::from(2).div(&square)?;
        // q = τ(Av − (τ/2)(vᵀAv)v); the result is A − vqᵀ − qvᵀ.
        let mut moved = Vec::with_capacity(self.order);
        for row in 0..self.order {
            let cells = &self.cells[row * self.order..(row + 1) * self.order];
            moved.push(dot(cells, vector)?);
        }
        let along = dot(vector, &moved)?.mul(&tau)?.half()?;
        let mut q = Vec::with_capacity(self.order);
        for (m, v) in moved.iter().zip(vector) {
            q.push(m.sub(&along.mul(v)?)?.mul(&tau)?);
        }
        let mut cells = Vec::with_capacity(self.cells.len());
        for row in 0..self.order {
            for col in 0..self.order {
                let outer = vector[row].mul(&q[col])?.add(&q[row].mul(&vector[col])?)?;
                cells.push(self.at(row, col).sub(&outer)?);
            }
        }
        Ok(Self {
            order: self.order,
            cells,
        })
    }
}

fn dot(x: &[ExactReal], y: &[ExactReal]) -> Exact {
    let mut sum = ExactReal::ZERO;
    for (a, b) in x.iter().zip(y) {
        sum = sum.add(&a.mul(b)?)?;
    }
    Ok(sum)
}

/// Whether the stated interval holds the number; `None` when undecided.
fn holds(figure: &Figure, truth: &ExactReal) -> Option<bool> {
    if figure.im.low > RBig::ZERO || figure.im.high < RBig::ZERO {
        return Some(false);
    }
    let low = ExactReal::from(figure.re.low.clone());
    let high = ExactReal::from(figure.re.high.clone());
    let above = truth.sub(&low).ok()?;
    let below = high.sub(truth).ok()?;
    Some(!above.is_negative() && !below.is_negative())
}

/// Whether a stated state is exactly right, with the signs it shows.
pub(super) fn state_agrees(step: usize, stated: &Table, problem: &Problem) -> Option<bool> {
    let mut state = Surds::new(problem)?;
    for col in 0..step {
        let positive = stated.at(col + 1, col).re.stated >= RBig::ZERO;
        let (vector, _) = state.vector(col, positive).ok()?;
        state = state.reflected(&vector).ok()?;
    }
    for row in 0..state.order {
        for col in 0..state.order {
            if !holds(stated.at(row, col), state.at(row, col))? {
                return Some(false);
            }
        }
    }
    Some(true)
}

/// Whether exactly stated figures are a multiple of `truth`; `None` when
/// undecided.
pub(super) fn parallel(stated: &[Figure], truth: &[ExactReal]) -> Option<bool> {
    if stated.iter().any(|figure| !figure.is_exact()) {
        return None;
    }
    let pivot = truth.iter().position(|t| !t.is_zero())?;
    let lead = ExactReal::from(stated[pivot].re.stated.clone());
    if lead.is_zero() {
        return Some(false);
    }
    for (figure, t) in stated.iter().zip(truth) {
        let figure = ExactReal::from(figure.re.stated.clone());
        let (left, right) = (figure.mul(&truth[pivot]).ok()?, t.mul(&lead).ok()?);
        if !left.equals(&right)? {
            return Some(false);
        }
    }
    Some(true)
}
