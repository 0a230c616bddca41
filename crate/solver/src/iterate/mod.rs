//! Implicit shifted QR iteration with deflation on a real tridiagonal matrix.
//!
//! Notation: T the matrix, d its diagonal, e its off-diagonals, u = 2⁻⁵³.
//!
//! An off-diagonal counts as zero when |eₖ| ≤ max(u·√(|dₖ||dₖ₊₁|), u²·‖T‖): the
//! first is below what rounding already does to the two diagonal entries, so
//! small eigenvalues of graded matrices keep their digits; the second settles
//! blocks whose eigenvalues are themselves rounding residue.

mod error;
mod sweep;
mod tally;

#[cfg(test)]
mod tests;

pub use error::IterateError;
pub(crate) use sweep::{sweep, Rotation};
pub use sweep::{Direction, SweepStep};

use crate::control::{Control, Flow, Stage};
use crate::ledger::{Event, Listening, Recorder};
use crate::reduce::Tridiagonal;
use tally::Tally;

/// An off-diagonal entry set to zero.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Deflation {
    /// k of eₖ, from 0: between rows k and k + 1.
    pub index: usize,
    /// |eₖ| as it was.
    pub size: f64,
    /// What it was tested against; size ≤ threshold.
    pub threshold: f64,
}

/// The finished iteration.
#[derive(Clone, Debug, PartialEq)]
pub struct Iteration {
    /// Eigenvalues of T in the order the iteration left them.
    pub values: Vec<f64>,
    /// The sweeps, in order.
    pub sweeps: Vec<SweepStep>,
    /// The deflations, with the number of sweeps before each.
    pub deflations: Vec<(usize, Deflation)>,
}

/// How long the iteration may go on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Limits {
    /// Sweeps allowed in all, as a multiple of the order.
    pub sweeps_per_row: usize,
}

impl Default for Limits {
    /// About 1.7 are needed (common practice, no source); 40 is far beyond.
    fn default() -> Self {
        Self { sweeps_per_row: 40 }
    }
}

/// Eigenvalues of T, every sweep, shift and deflation recorded.
///
/// # Errors
/// [`IterateError`]. Cost: O(n) a sweep, about 1.7·n sweeps; O(n²) in all.
/// Values are right to a few u·‖T‖ in practice; nothing is guaranteed here.
pub fn iterate(
    tridiagonal: &Tridiagonal,
    limits: Limits,
    recorder: &mut dyn Recorder,
    control: &mut dyn Control,
) -> Result<Iteration, IterateError> {
    iterate_turning(tridiagonal, limits, recorder, control, &mut |_, _| {})
}

/// [`iterate`], which hands every rotation with its first column to `rotate` at
/// once, in order of application.
#[inline]
pub(crate) fn iterate_turning(
    tridiagonal: &Tridiagonal,
    limits: Limits,
    recorder: &mut dyn Recorder,
    control: &mut dyn Control,
    rotate: &mut impl FnMut(usize, Rotation),
) -> Result<Iteration, IterateError> {
    let finite = |row: &usize| {
        let off = tridiagonal.off_diagonal.get(*row).copied().unwrap_or(0.0);
        !(tridiagonal.diagonal[*row].is_finite() && off.is_finite())
    };
    if let Some(row) = (0..tridiagonal.order()).find(finite) {
        return Err(IterateError::NotFinite { row });
    }
    let order = tridiagonal.order();
    let mut work = Work {
        floor: UNIT * UNIT * tridiagonal.row_sum_norm(),
        start: 0,
        sweeps: Vec::with_capacity(2 * order),
        deflations: Vec::with_capacity(order),
        tally: Tally::new(tridiagonal, recorder.listening()),
        state: tridiagonal.clone(),
    };
    let cap = limits.sweeps_per_row.saturating_mul(order);
    let mut block = Block {
        first: 0,
        last: order.saturating_sub(1),
        direction: Direction::Down,
    };
    let mut known = None;
    while block.last > 0 {
        block.first = work.block_start(block.last, recorder);
        if block.first == block.last {
            block.last -= 1;
            work.leave(block.last);
            continue;
        }
        let (first, last) = (block.first, block.last);
        if known != Some((first, last)) {
            block.direction = work.direction(first, last);
            known = Some((first, last));
            let done = 1.0 - (last as f64 / order as f64).powi(2);
            if control.progress(Stage::Iterate, done) == Flow::Cancel {
                return Err(IterateError::Cancelled {
                    sweeps: work.sweeps.len(),
                });
            }
        }
        if work.sweeps.len() >= cap {
            return Err(IterateError::NotConverged {
                first,
                last,
                sweeps: work.sweeps.len(),
            });
        }
        work.sweep(block, recorder, rotate);
    }
    Ok(Iteration {
        values: work.state.diagonal,
        sweeps: work.sweeps,
        deflations: work.deflations,
    })
}

/// Repeats a recorded sweep on a state, bit for bit.
pub(crate) fn repeat(state: &mut Tridiagonal, step: SweepStep) {
    sweep(state, step, |_, _| {});
}

/// u.
const UNIT: f64 = f64::EPSILON / 2.0;

#[derive(Clone, Copy)]
struct Block {
    first: usize,
    last: usize,
    direction: Direction,
}

struct Work {
    state: Tridiagonal,
    floor: f64,
    /// The row after the last deflation before the present block's last row.
    start: usize,
    sweeps: Vec<SweepStep>,
    deflations: Vec<(usize, Deflation)>,
    tally: Tally,
}

impl Work {
    /// First row of the unreduced block that ends in `last`; deflates at the
    /// boundary it finds.
    fn block_start(&mut self, last: usize, recorder: &mut dyn Recorder) -> usize {
        let mut next = self.state.diagonal[last].abs();
        for k in (self.start..last).rev() {
            let size = self.state.off_diagonal[k].abs();
            let d = self.state.diagonal[k].abs();
            // The cheap test lets a little more through than the exact one below.
            let likely = size * size <= 2.0 * UNIT * UNIT * d * next;
            if size <= self.floor || likely {
                let threshold = self.floor.max(UNIT * (d.sqrt() * next.sqrt()));
                if size <= threshold {
                    self.deflate(
                        Deflation {
                            index: k,
                            size,
                            threshold,
                        },
                        recorder,
                    );
                    return k + 1;
                }
            }
            next = d;
        }
        self.start
    }

    /// Goes on to the block that ends in `last`, the rows after it being done.
    fn leave(&mut self, last: usize) {
        // Deflations are found from the end, each beyond those still ahead, so
        // the latest one before `last` is the nearest. At most n² comparisons.
        let mut found = self.deflations.iter().rev();
        let nearest = found.find(|(_, deflation)| deflation.index < last);
        self.start = nearest.map_or(0, |(_, deflation)| deflation.index + 1);
    }

    fn deflate(&mut self, deflation: Deflation, recorder: &mut dyn Recorder) {
        let k = deflation.index;
        self.state.off_diagonal[k] = 0.0;
        self.start = k + 1;
        self.deflations.push((self.sweeps.len(), deflation));
        if self.tally.listening == Listening::Yes {
            let totals = self.tally.after(&self.state, k, k + 1);
            recorder.record(
                Event::Deflation {
                    deflation,
                    tridiagonal: &self.state,
                },
                totals,
            );
        }
    }

    /// Chasing towards the smaller end settles it first, and keeps the digits
    /// of graded matrices.
    fn direction(&self, first: usize, last: usize) -> Direction {
        if self.state.diagonal[last].abs() <= self.state.diagonal[first].abs() {
            Direction::Down
        } else {
            Direction::Up
        }
    }

    fn sweep(
        &mut self,
        block: Block,
        recorder: &mut dyn Recorder,
        rotate: &mut impl FnMut(usize, Rotation),
    ) {
        let Block {
            first,
            last,
            direction,
        } = block;
        let (d, e) = (&self.state.diagonal, &self.state.off_diagonal);
        let shift = match direction {
            Direction::Down => sweep::wilkinson_shift(d[last], d[last - 1], e[last - 1]),
            Direction::Up => sweep::wilkinson_shift(d[first], d[first + 1], e[first]),
        };
        let step = SweepStep {
            first,
            last,
            shift,
            direction,
        };
        sweep(&mut self.state, step, rotate);
        self.sweeps.push(step);
        if self.tally.listening == Listening::Yes {
            let totals = self.tally.after(&self.state, first, last);
            recorder.record(
                Event::Sweep {
                    step,
                    tridiagonal: &self.state,
                },
                totals,
            );
        }
    }
}
