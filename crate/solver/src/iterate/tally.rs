//! Balance and control totals of an iteration in progress.

use crate::ledger::{Basis, Listening, Totals};
use crate::matrix::norms::{length, norm2};
use crate::reduce::Tridiagonal;

/// Balance and control totals of the iteration. Sums are kept in stretches of
/// [`STRETCH`] rows; an act on a block takes only its stretches anew, and every
/// total is the sum over the stretches of the state itself.
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

impl Tally {
    pub fn new(tridiagonal: &Tridiagonal, listening: Listening) -> Self {
        let count = match listening {
            Listening::Yes => tridiagonal.order().div_ceil(STRETCH),
            Listening::No => 0,
        };
        let mut tally = Self {
            listening,
            stretches: vec![Sums::default(); count],
        };
        if count > 0 {
            tally.refresh(tridiagonal, 0, tridiagonal.order() - 1);
        }
        tally
    }

    fn refresh(&mut self, state: &Tridiagonal, first: usize, last: usize) {
        for stretch in first / STRETCH..=last / STRETCH {
            let start = stretch * STRETCH;
            let end = state.order().min(start + STRETCH);
            let diagonal = &state.diagonal[start..end];
            let off = &state.off_diagonal[start..end.min(state.off_diagonal.len())];
            self.stretches[stretch] = Sums {
                trace: diagonal.iter().sum(),
                diagonal: sum_of_squares(diagonal),
                off: sum_of_squares(off),
            };
        }
    }

    pub fn after(&mut self, state: &Tridiagonal, first: usize, last: usize) -> Totals {
        self.refresh(state, first, last);
        let sums = self
            .stretches
            .iter()
            .fold(Sums::default(), |sum, part| Sums {
                trace: sum.trace + part.trace,
                diagonal: sum.diagonal + part.diagonal,
                off: sum.off + part.off,
            });
        // Squares of very small off-diagonals vanish: only then take the scaled norm.
        let off = if sums.off > SMALLEST_PLAIN {
            sums.off.sqrt()
        } else {
            norm2(state.off_diagonal.iter())
        };
        let balance = off * std::f64::consts::SQRT_2;
        let diagonal = if sums.diagonal > SMALLEST_PLAIN {
            sums.diagonal.sqrt()
        } else {
            norm2(state.diagonal.iter())
        };
        Totals {
            trace: sums.trace,
            frobenius: length(diagonal, balance),
            balance,
            basis: Basis::Measured,
        }
    }
}

/// Below this a sum of squares may have lost terms to underflow (2⁻⁹⁰⁰).
const SMALLEST_PLAIN: f64 = crate::matrix::norms::power_of_two(-900);

fn sum_of_squares(values: &[f64]) -> f64 {
    let (fours, rest) = values.as_chunks::<4>();
    let mut sums = [0.0; 4];
    for four in fours {
        for lane in 0..4 {
            sums[lane] += four[lane] * four[lane];
        }
    }
    rest.iter()
        .fold((sums[0] + sums[1]) + (sums[2] + sums[3]), |sum, x| {
            sum + x * x
        })
}
