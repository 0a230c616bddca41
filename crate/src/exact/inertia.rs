//! Exact inertia of A − σM by fraction-free elimination, at any order.
//!
//! Notation: Dₖ the leading determinants met; the k-th pivot of LDLᴴ is
//! Dₖ/Dₖ₋₁, and by Sylvester's law of inertia the signs of the pivots are the
//! signs of the eigenvalues of A − σM, hence (M positive definite) count the
//! eigenvalues of the pair below, at and above σ.

use dashu_base::Signed;
use dashu_int::IBig;
use dashu_ratio::RBig;

use super::gauss::Gauss;
use super::integers::integers;
use super::limits::{ExactError, Limits, Meter};
use crate::control::Control;
use crate::problem::Problem;

/// Signs of the eigenvalues of a Hermitian matrix.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Inertia {
    /// Negative eigenvalues.
    pub negative: usize,
    /// Zero eigenvalues.
    pub zero: usize,
    /// Positive eigenvalues.
    pub positive: usize,
}

/// Inertia of A − σM: how many eigenvalues of the problem lie below, at and
/// above σ. For a pair M is proven positive definite on the way.
///
/// Cost: about n³/6 updates (two products and an exact division each) of
/// integers of up to about n·(b + log₂n) bits; `limits.order` does not apply.
///
/// # Errors
/// [`ExactError`] except for the order.
pub fn inertia(
    problem: &Problem,
    sigma: &RBig,
    limits: &Limits,
    control: &mut dyn Control,
) -> Result<Inertia, ExactError> {
    let mut meter = Meter::new(limits, control);
    let pair = integers(problem, &mut meter)?;
    let order = pair.order;
    if let Some(metric) = &pair.metric {
        positive_definite(metric, order, &mut meter)?;
    }
    // σ = μ·unit, and Ã − μM̃ is multiplied by μ's denominator.
    let mu = sigma / &pair.unit;
    let denominator = IBig::from(mu.denominator().clone());
    let mut cells: Vec<Gauss> = pair.matrix.iter().map(|a| a.scaled(&denominator)).collect();
    for row in 0..order {
        match &pair.metric {
            Some(metric) => {
                for col in 0..order {
                    let place = row * order + col;
                    cells[place] = cells[place].minus(&metric[place].scaled(mu.numerator()));
                }
            }
            None => cells[row * order + row].re -= mu.numerator(),
        }
    }
    let mut elimination = Elimination {
        order,
        cells,
        previous: IBig::ONE,
    };
    elimination.signs(&mut meter)
}

/// A proof that (low, high] holds exactly so many eigenvalues, with
/// multiplicity.
///
/// # Errors
/// As [`inertia`].
pub fn count_between(
    problem: &Problem,
    low: &RBig,
    high: &RBig,
    limits: &Limits,
    control: &mut dyn Control,
) -> Result<usize, ExactError> {
    let at_low = inertia(problem, low, limits, control)?;
    let at_high = inertia(problem, high, limits, control)?;
    let up_to_low = at_low.negative + at_low.zero;
    Ok((at_high.negative + at_high.zero).saturating_sub(up_to_low))
}

/// Every leading determinant of `metric` is positive (Sylvester's criterion).
fn positive_definite(
    metric: &[Gauss],
    order: usize,
    meter: &mut Meter<'_>,
) -> Result<(), ExactError> {
    let mut elimination = Elimination {
        order,
        cells: metric.to_vec(),
        previous: IBig::ONE,
    };
    for k in 0..order {
        if elimination.cells[k * order + k].re <= IBig::ZERO {
            return Err(ExactError::MetricNotPositive { leading: k + 1 });
        }
        elimination.eliminate(k, meter)?;
    }
    Ok(())
}

/// Fraction-free elimination of a Hermitian matrix (Bareiss 1968); only the
/// lower triangle is read and written.
struct Elimination {
    order: usize,
    cells: Vec<Gauss>,
    /// Dₖ₋₁.
    previous: IBig,
}

impl Elimination {
    /// Entry (row, col) of the remaining block, from either triangle.
    fn entry(&self, row: usize, col: usize) -> Gauss {
        if row >= col {
            self.cells[row * self.order + col].clone()
        } else {
            self.cells[col * self.order + row].conj()
        }
    }

    fn signs(&mut self, meter: &mut Meter<'_>) -> Result<Inertia, ExactError> {
        let mut result = Inertia {
            negative: 0,
            zero: 0,
            positive: 0,
        };
        for k in 0..self.order {
            if !self.bring_pivot(k) {
                result.zero += self.order - k;
                break;
            }
            let pivot = &self.cells[k * self.order + k].re;
            if pivot.is_negative() == self.previous.is_negative() {
                result.positive += 1;
            } else {
                result.negative += 1;
            }
            self.eliminate(k, meter)?;
        }
        Ok(result)
    }

    /// Makes the pivot of step k nonzero by a congruence with integer entries
    /// and determinant ±1 (so that all divisions stay exact); false when
    /// everything left is zero.
    fn bring_pivot(&mut self, k: usize) -> bool {
        let order = self.order;
        let diagonal = (k..order).find(|&i| !self.cells[i * order + i].re.is_zero());
        if let Some(i) = diagonal {
            if i != k {
                self.swap(k, i);
            }
            return true;
        }
        for col in k..order {
            for row in col + 1..order {
                let entry = self.cells[row * order + col].clone();
                if entry.is_zero() {
                    continue;
                }
                // Row col += c·row row (and columns alike) puts 2·Re(c·entry)
                // on the diagonal.
                let c = if entry.re.is_zero() {
                    Gauss {
                        re: IBig::ZERO,
                        im: IBig::NEG_ONE,
                    }
                } else {
                    Gauss::real(IBig::ONE)
                };
                self.add_row(col, row, &c);
                if col != k {
                    self.swap(k, col);
                }
                return true;
            }
        }
        false
    }

    /// Exchanges rows and columns i and j of the remaining block.
    fn swap(&mut self, i: usize, j: usize) {
        let first = i.min(j);
        let mut full = self.remaining(first);
        let size = self.order - first;
        let (a, b) = (i - first, j - first);
        for col in 0..size {
            full.swap(a * size + col, b * size + col);
        }
        for row in 0..size {
            full.swap(row * size + a, row * size + b);
        }
        self.store(first, &full);
    }

    /// Row `to` += c · row `from`, column `to` += c̄ · column `from`.
    fn add_row(&mut self, to: usize, from: usize, c: &Gauss) {
        let first = to.min(from);
        let size = self.order - first;
        let mut full = self.remaining(first);
        let (to, from) = (to - first, from - first);
        for col in 0..size {
            let added = c.times(&full[from * size + col]);
            full[to * size + col] = full[to * size + col].plus(&added);
        }
        for row in 0..size {
            let added = c.conj().times(&full[row * size + from]);
            full[row * size + to] = full[row * size + to].plus(&added);
        }
        self.store(first, &full);
    }

    /// The block from row `first` on, both triangles.
    fn remaining(&self, first: usize) -> Vec<Gauss> {
        let mut full = Vec::new();
        for row in first..self.order {
            for col in first..self.order {
                full.push(self.entry(row, col));
            }
        }
        full
    }

    fn store(&mut self, first: usize, full: &[Gauss]) {
        let size = self.order - first;
        for row in 0..size {
            for col in 0..=row {
                self.cells[(row + first) * self.order + col + first] =
                    full[row * size + col].clone();
            }
        }
    }

    fn eliminate(&mut self, k: usize, meter: &mut Meter<'_>) -> Result<(), ExactError> {
        let order = self.order;
        let pivot = self.cells[k * order + k].re.clone();
        meter.see(&pivot)?;
        for row in k + 1..order {
            for col in k + 1..=row {
                let outer = self.cells[row * order + k].times(&self.cells[col * order + k].conj());
                let place = row * order + col;
                self.cells[place] = self.cells[place]
                    .scaled(&pivot)
                    .minus(&outer)
                    .divided(&self.previous);
            }
            meter.see_gauss(&self.cells[row * order + row])?;
        }
        self.previous = pivot;
        meter.progress((k + 1) as f64 / order as f64)
    }
}
