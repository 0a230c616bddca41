//! The ledger: what was done to the matrix, in order, with the numbers each
//! act was decided on, the balance and the control totals.
//!
//! The stages write through one narrow trait, [`Recorder`]. A run with
//! [`Silent`] does the same arithmetic as a run with a [`Ledger`]; a test holds
//! them to the same bits.

mod book;
mod replay;

#[cfg(test)]
mod tests;

pub use book::{Act, Drift, Entry, Ledger, Span};
pub use replay::{ReplayError, State};

use crate::iterate::{Deflation, SweepStep};
use crate::matrix::Dense;
use crate::reduce::{ReductionRun, Tridiagonal};

/// How a balance was obtained.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Basis {
    /// Summed over the entries of the state itself.
    #[default]
    Measured,
    /// √(F² − band²) from the last measured Frobenius norm F: good to about
    /// √(n·u)·F, no better.
    ByDifference,
}

/// Balance and control totals of a state, in the units of the scaled problem.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Totals {
    /// Sum of the diagonal.
    pub trace: f64,
    /// Frobenius norm; carried from the last measurement when `basis` is
    /// [`Basis::ByDifference`].
    pub frobenius: f64,
    /// Frobenius norm outside the tridiagonal band (reduction) or off the
    /// diagonal (iteration).
    pub balance: f64,
    /// How the balance was obtained.
    pub basis: Basis,
}

/// Whether a recorder wants the numbers beside the acts.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Listening {
    /// Stages compute totals and report every act.
    Yes,
    /// Stages may skip the reports.
    No,
}

/// One act on the matrix, as its stage reports it.
#[derive(Clone, Copy)]
pub enum Event<'a> {
    /// Powers of two taken out of A and M.
    Scaling {
        /// Exponent for A.
        matrix: i32,
        /// Exponent for M, when there is a metric.
        metric: Option<i32>,
    },
    /// The matrix the reduction starts from; not an entry of its own.
    Start {
        /// The run before its first reflector.
        run: &'a ReductionRun,
    },
    /// M = L Lᴴ, and the pair became C = L⁻¹ A L⁻ᴴ.
    Metric {
        /// L.
        factor: &'a Dense,
        /// The run on C before its first reflector.
        run: &'a ReductionRun,
    },
    /// A reflector H = I − τ v vᴴ from both sides.
    Reflector {
        /// Column (from 0) whose entries below the off-diagonal it zeroes.
        column: usize,
        /// v from row column + 1 on, its first entry 1.
        vector_re: &'a [f64],
        /// Imaginary parts of v; empty for a real matrix.
        vector_im: &'a [f64],
        /// τ; 0 when the column was zero already and H = I.
        scalar: f64,
        /// The off-diagonal entry left in the column.
        image: (f64, f64),
        /// The run with this reflector applied.
        run: &'a ReductionRun,
    },
    /// The reduction is complete; for a complex matrix the phases that made
    /// the off-diagonals real (empty for a real one).
    Phases {
        /// Unit numbers, one a row.
        phases: &'a [(f64, f64)],
        /// T.
        tridiagonal: &'a Tridiagonal,
    },
    /// A sweep of the shifted QR iteration.
    Sweep {
        /// Block, shift and direction.
        step: SweepStep,
        /// T after it.
        tridiagonal: &'a Tridiagonal,
    },
    /// An off-diagonal entry set to zero.
    Deflation {
        /// Which, how large, and against what it was tested.
        deflation: Deflation,
        /// T after it.
        tridiagonal: &'a Tridiagonal,
    },
}

/// Hears of every act.
pub trait Recorder {
    /// Whether totals are wanted and every act is to be reported.
    fn listening(&self) -> Listening;
    /// Takes one act and the totals after it.
    fn record(&mut self, event: Event<'_>, totals: Totals);
}

/// Records nothing.
#[derive(Clone, Copy, Debug, Default)]
pub struct Silent;

impl Recorder for Silent {
    fn listening(&self) -> Listening {
        Listening::No
    }

    fn record(&mut self, _event: Event<'_>, _totals: Totals) {}
}
