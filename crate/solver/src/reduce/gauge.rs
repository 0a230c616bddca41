//! Balance and control totals of matrices and of reductions in progress.

use super::{ReductionRun, Tridiagonal};
use crate::ledger::{Basis, Listening, Totals};
use crate::matrix::norms::{length, norm2};
use crate::matrix::Dense;

/// Takes the balance and control totals of a reduction in progress.
///
/// Summing the trailing matrix entry by entry costs as much as half a step, so
/// it is done for every [`MEASURED_EVERY`]th reflector and for the last
/// [`MEASURED_TAIL`]; between, the Frobenius norm F last measured is carried and
/// the balance is √(F² − band²), which is good to about F·√(n·u). Each reading
/// says which it is.
pub(super) struct Gauge {
    listening: Listening,
    carried: f64,
    readings: usize,
}

const MEASURED_EVERY: usize = 16;
const MEASURED_TAIL: usize = 16;

impl Gauge {
    pub fn new(listening: Listening) -> Self {
        Self {
            listening,
            carried: 0.0,
            readings: 0,
        }
    }

    pub fn read(&mut self, run: &ReductionRun) -> Totals {
        if self.listening == Listening::No {
            return Totals::default();
        }
        let (trace, band) = run.band();
        let near_end = run.columns_done() + MEASURED_TAIL >= run.order();
        let measured = near_end || self.readings.is_multiple_of(MEASURED_EVERY);
        self.readings += 1;
        if measured {
            let balance = run.norm_outside_band();
            self.carried = length(band, balance);
            return Totals {
                trace,
                frobenius: self.carried,
                balance,
                basis: Basis::Measured,
            };
        }
        // (F − b)(F + b) instead of F² − b²: no overflow, less cancellation.
        let balance = ((self.carried - band).max(0.0) * (self.carried + band)).sqrt();
        Totals {
            trace,
            frobenius: self.carried,
            balance,
            basis: Basis::ByDifference,
        }
    }
}

impl Totals {
    /// Totals of a full Hermitian matrix, from its lower triangle.
    pub(crate) fn of_matrix(matrix: &Dense) -> Self {
        let run = ReductionRun::new(matrix);
        let balance = run.norm_outside_band();
        let (trace, band) = run.band();
        Self {
            trace,
            frobenius: length(band, balance),
            balance,
            basis: Basis::Measured,
        }
    }

    /// Totals of a tridiagonal matrix; the balance is the norm off the diagonal.
    pub(crate) fn of_tridiagonal(tridiagonal: &Tridiagonal) -> Self {
        let off = norm2(tridiagonal.off_diagonal.iter()) * std::f64::consts::SQRT_2;
        Self {
            trace: tridiagonal.diagonal.iter().sum(),
            frobenius: length(norm2(tridiagonal.diagonal.iter()), off),
            balance: off,
            basis: Basis::Measured,
        }
    }
}
