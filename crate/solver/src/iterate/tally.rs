//! Balance and control totals of an iteration in progress.

use crate::ledger::{Basis, Listening, Totals};
use crate::matrix::lanes::Lanes;
use crate::matrix::norms::{length, norm2};
use crate::reduce::Tridiagonal;

/// Balance and control totals of the iteration. Sums are kept in stretches of
/// [`STRETCH`] rows; an act on a block takes only its stretches anew, and every
/// total is the sum over the stretches of the state itself. A single stretch is
/// taken anew each time, so its sums are not kept.
pub(super) struct Tally {
    pub listening: Listening,
    stretches: Vec<Sums>,
}

#[derive(Clone, Copy, Default)]
struct Sums {
    trace: f64,
    diagonal: f64,
    off: f64,
}

const STRETCH: usize = 32;

impl Sums {
    /// Over the stretch at position `stretch`, every sum in two lanes. The
    /// three sums do not wait for each other.
    fn of(state: &Tridiagonal, stretch: usize) -> Self {
        let start = stretch * STRETCH;
        let end = state.order().min(start + STRETCH);
        let (diagonal, last) = state.diagonal[start..end].as_chunks::<2>();
        let off = &state.off_diagonal[start..end.min(state.off_diagonal.len())];
        let (off, last_off) = off.as_chunks::<2>();
        let zero = Lanes::splat(0.0);
        let (mut trace, mut squares, mut off_squares) = (zero, zero, zero);
        let mut add = |x: &[f64; 2]| {
            let x = Lanes::load(x);
            trace = trace + x;
            squares = squares + x * x;
        };
        let (beside, alone) = diagonal.split_at(off.len());
        for (x, y) in beside.iter().zip(off) {
            add(x);
            let y = Lanes::load(y);
            off_squares = off_squares + y * y;
        }
        // The off-diagonals of the last stretch are one fewer.
        alone.iter().for_each(add);
        let last = last.first().copied().unwrap_or(0.0);
        let last_off = last_off.first().copied().unwrap_or(0.0);
        Self {
            trace: trace.sum() + last,
            diagonal: squares.sum() + last * last,
            off: off_squares.sum() + last_off * last_off,
        }
    }
}

impl Tally {
    pub fn new(tridiagonal: &Tridiagonal, listening: Listening) -> Self {
        let order = tridiagonal.order();
        let mut stretches = Vec::new();
        if listening == Listening::Yes && order > STRETCH {
            stretches.extend((0..order.div_ceil(STRETCH)).map(|at| Sums::of(tridiagonal, at)));
        }
        Self {
            listening,
            stretches,
        }
    }

    fn sums_after(&mut self, state: &Tridiagonal, first: usize, last: usize) -> Sums {
        if self.stretches.is_empty() {
            return Sums::of(state, 0);
        }
        let (from, to) = (first / STRETCH, last / STRETCH);
        for (at, sums) in self.stretches[from..=to].iter_mut().enumerate() {
            *sums = Sums::of(state, from + at);
        }
        self.stretches
            .iter()
            .fold(Sums::default(), |sum, part| Sums {
                trace: sum.trace + part.trace,
                diagonal: sum.diagonal + part.diagonal,
                off: sum.off + part.off,
            })
    }

    /// Totals after an act on the rows from `first` to `last`.
    pub fn after(&mut self, state: &Tridiagonal, first: usize, last: usize) -> Totals {
        let sums = self.sums_after(state, first, last);
        // Squares of very small entries vanish: only then take the scaled norms.
        let (balance, frobenius) = if sums.off > SMALLEST_PLAIN && sums.diagonal > SMALLEST_PLAIN {
            let off = 2.0 * sums.off;
            (off.sqrt(), (sums.diagonal + off).sqrt())
        } else {
            let balance = norm2(state.off_diagonal.iter()) * std::f64::consts::SQRT_2;
            (balance, length(norm2(state.diagonal.iter()), balance))
        };
        Totals {
            trace: sums.trace,
            frobenius,
            balance,
            basis: Basis::Measured,
        }
    }
}

/// Below this a sum of squares may have lost terms to underflow (2⁻⁹⁰⁰).
const SMALLEST_PLAIN: f64 = crate::matrix::norms::power_of_two(-900);
