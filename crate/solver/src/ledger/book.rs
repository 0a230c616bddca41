//! The ledger's storage.
//!
//! Numbers of all entries lie in one pool; an entry holds spans of it. Memory:
//! the reflectors' n²/2 numbers (n² complex), checkpoints of the reduction
//! (about 1.5·n²), one block of off-diagonals a sweep, and a tridiagonal
//! matrix every [`SWEEPS_A_CHECKPOINT`] sweeps.

use super::{Event, Listening, Recorder, Totals};
use crate::iterate::{Deflation, SweepStep};
use crate::matrix::short;
use crate::reduce::{Checkpoint, ReductionRun, Tridiagonal};

/// A run of numbers in the ledger's pool; see [`Ledger::numbers`].
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Span {
    start: usize,
    length: usize,
}

impl Span {
    /// How many numbers.
    pub fn len(&self) -> usize {
        self.length
    }

    /// Whether there are none.
    pub fn is_empty(&self) -> bool {
        self.length == 0
    }
}

/// What was done.
#[derive(Clone, Debug, PartialEq)]
pub enum Act {
    /// A repair of the input: `count` entries (pairs, for a symmetry) changed.
    Adjustment {
        /// A sentence saying what was adjusted and how.
        text: String,
        /// How many cells it concerned.
        count: usize,
    },
    /// Powers of two taken out.
    Scaling {
        /// Exponent for the matrix.
        matrix: i32,
        /// Exponent for the metric.
        metric: Option<i32>,
    },
    /// Cholesky factor of the metric, and C = L⁻¹ A L⁻ᴴ.
    Metric {
        /// Real parts of L's lower triangle, column by column from the diagonal.
        factor_re: Span,
        /// Imaginary parts; empty for a real factor.
        factor_im: Span,
    },
    /// A reflector from both sides.
    Reflector {
        /// The column it acts on, from 0.
        column: usize,
        /// Real parts of v, from row column + 1 on; the first entry is 1.
        vector_re: Span,
        /// Imaginary parts; empty for a real matrix.
        vector_im: Span,
        /// τ.
        scalar: f64,
        /// Real part of the off-diagonal entry it leaves.
        image_re: f64,
        /// Imaginary part of it.
        image_im: f64,
        /// First row (from 0) of the entries it zeroes in the column; they run
        /// to the last row. Equal to the order when there are none.
        zeroed_from: usize,
    },
    /// The phases that make the off-diagonals real; both empty for a real
    /// matrix, where the entry only marks that the form is reached.
    Phases {
        /// Real parts.
        re: Span,
        /// Imaginary parts.
        im: Span,
    },
    /// A QR sweep.
    Sweep {
        /// Block, shift, direction.
        step: SweepStep,
        /// The block's off-diagonals before.
        before: Span,
        /// The block's off-diagonals after.
        after: Span,
    },
    /// A deflation.
    Deflation(Deflation),
}

/// One line of the ledger.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// What was done.
    pub act: Act,
    /// Balance and control totals of the state after it.
    pub totals: Totals,
}

/// Sweeps between two stored tridiagonal matrices.
pub(super) const SWEEPS_A_CHECKPOINT: usize = 16;
/// Shares into which the columns are divided by stored states of the reduction.
const REDUCTION_CHECKPOINTS: usize = 6;
/// Orders below this replay the whole reduction at once.
const SMALLEST_CHECKPOINTED: usize = 96;

/// A state from which the ledger replays.
#[derive(Clone, Debug)]
pub(super) enum Stored {
    /// Of the reduction.
    Reduction(Checkpoint),
    /// Of the iteration: diagonal, then off-diagonal.
    Iteration(Span),
}

/// The record of one run.
#[derive(Clone, Debug, Default)]
pub struct Ledger {
    entries: Vec<Entry>,
    pool: Vec<f64>,
    /// Stored states in order, each with the number of entries before it.
    pub(super) states: Vec<(usize, Stored)>,
    /// Where in the pool each off-diagonal's present value is.
    off_diagonal_at: Vec<usize>,
    sweeps: usize,
    order: usize,
}

impl Ledger {
    /// An empty ledger.
    pub fn new() -> Self {
        Self::default()
    }

    /// All entries, in order.
    pub fn entries(&self) -> &[Entry] {
        &self.entries
    }

    /// The numbers of a span of this ledger.
    pub fn numbers(&self, span: Span) -> &[f64] {
        &self.pool[span.start..span.start + span.length]
    }

    /// Rows of the matrix; 0 before the reduction has begun.
    pub fn order(&self) -> usize {
        self.order
    }

    /// Sweeps recorded so far.
    pub fn sweeps(&self) -> usize {
        self.sweeps
    }

    /// Enters an adjustment made to the input before the run.
    pub fn enter_adjustment(&mut self, text: String, count: usize) {
        self.entries.push(Entry {
            act: Act::Adjustment { text, count },
            totals: Totals::default(),
        });
    }

    /// Drift of the trace and of the Frobenius norm at `entry` against the
    /// start of the run they belong to (for a pair, C), in units in the last
    /// place of the Frobenius norm there. `None` for entries before it.
    pub fn drift(&self, entry: usize) -> Option<Drift> {
        let (start, _) = self.states.first()?;
        let present = self.entries.get(entry)?.totals;
        if entry + 1 < *start {
            return None;
        }
        let origin = self.entries.get(start.checked_sub(1)?)?.totals;
        let ulp = unit_in_last_place(origin.frobenius);
        Some(Drift {
            trace: (present.trace - origin.trace) / ulp,
            frobenius: (present.frobenius - origin.frobenius) / ulp,
        })
    }

    /// Bytes held, for the memory figures.
    pub fn approx_bytes(&self) -> usize {
        8 * self.pool.capacity() + self.entries.capacity() * size_of::<Entry>()
    }

    pub(super) fn pool(&self) -> &[f64] {
        &self.pool
    }

    fn keep(&mut self, numbers: impl Iterator<Item = f64>) -> Span {
        let start = self.pool.len();
        self.pool.extend(numbers);
        Span {
            start,
            length: self.pool.len() - start,
        }
    }

    fn copy(&mut self, numbers: &[f64]) -> Span {
        let start = self.pool.len();
        short::append(&mut self.pool, numbers);
        Span {
            start,
            length: numbers.len(),
        }
    }

    /// Room for a run of this order, so that nothing is moved while it goes on:
    /// n²/2 numbers a plane for the reflectors, the states of the reduction, n²
    /// for the sweeps, of which there are about 2·n over blocks of n/2 rows, and
    /// the states between them.
    fn begin(&mut self, run: &ReductionRun) {
        let (order, planes) = (run.order(), run.planes());
        self.order = order;
        self.entries.reserve(4 * order);
        let shares = if order < SMALLEST_CHECKPOINTED {
            1
        } else {
            REDUCTION_CHECKPOINTS
        };
        let states = Checkpoint::numbers_of_all(order, planes, shares);
        let bands = 2 * order * (1 + 2 * order / SWEEPS_A_CHECKPOINT);
        self.pool
            .reserve((planes + 2) * order * (order + 1) / 2 + states + bands);
    }

    fn checkpoint_reduction(&mut self, run: &ReductionRun) {
        let checkpoint = run.checkpoint(&mut self.pool);
        self.states
            .push((self.entries.len(), Stored::Reduction(checkpoint)));
    }

    fn checkpoint_iteration(&mut self, tridiagonal: &Tridiagonal) {
        let mut stored = self.copy(&tridiagonal.diagonal);
        stored.length += self.copy(&tridiagonal.off_diagonal).length;
        self.states
            .push((self.entries.len(), Stored::Iteration(stored)));
    }

    fn sweep(&mut self, step: SweepStep, tridiagonal: &Tridiagonal) -> Act {
        let block = step.first..step.last;
        let before = Span {
            start: self.off_diagonal_at[step.first],
            length: step.last - step.first,
        };
        let after = self.copy(&tridiagonal.off_diagonal[block.clone()]);
        for (at, place) in self.off_diagonal_at[block].iter_mut().enumerate() {
            *place = after.start + at;
        }
        self.sweeps += 1;
        Act::Sweep {
            step,
            before,
            after,
        }
    }
}

/// See [`Ledger::drift`].
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Drift {
    /// Of the trace.
    pub trace: f64,
    /// Of the Frobenius norm.
    pub frobenius: f64,
}

/// Distance from |x| to the next double above.
fn unit_in_last_place(x: f64) -> f64 {
    let x = x.abs();
    x.next_up() - x
}

impl Recorder for Ledger {
    fn listening(&self) -> Listening {
        Listening::Yes
    }

    fn record(&mut self, event: Event<'_>, totals: Totals) {
        let act = match event {
            Event::Scaling { matrix, metric } => Act::Scaling { matrix, metric },
            Event::Start { run } => {
                self.begin(run);
                self.checkpoint_reduction(run);
                return;
            }
            Event::Metric { factor, run } => {
                self.begin(run);
                let order = factor.rows();
                let lower = move |plane: &nalgebra::DMatrix<f64>| -> Vec<f64> {
                    (0..order)
                        .flat_map(|col| (col..order).map(move |row| (row, col)))
                        .map(|at| plane[at])
                        .collect()
                };
                let factor_re = self.keep(lower(&factor.re).into_iter());
                let factor_im = self.keep(
                    factor
                        .im
                        .as_ref()
                        .map(lower)
                        .unwrap_or_default()
                        .into_iter(),
                );
                self.entries.push(Entry {
                    act: Act::Metric {
                        factor_re,
                        factor_im,
                    },
                    totals,
                });
                self.checkpoint_reduction(run);
                return;
            }
            Event::Reflector {
                column,
                vector_re,
                vector_im,
                scalar,
                image,
                run,
            } => {
                let vector_re = self.copy(vector_re);
                let vector_im = self.copy(vector_im);
                let order = self.order;
                let zeroed_from = if scalar == 0.0 { order } else { column + 2 };
                let act = Act::Reflector {
                    column,
                    vector_re,
                    vector_im,
                    scalar,
                    image_re: image.0,
                    image_im: image.1,
                    zeroed_from,
                };
                self.entries.push(Entry { act, totals });
                let share = (order / REDUCTION_CHECKPOINTS).max(1);
                if order >= SMALLEST_CHECKPOINTED && (column + 1) % share == 0 {
                    self.checkpoint_reduction(run);
                }
                return;
            }
            Event::Phases {
                phases,
                tridiagonal,
            } => {
                let re = self.keep(phases.iter().map(|phase| phase.0));
                let im = self.keep(phases.iter().map(|phase| phase.1));
                let off = self.copy(&tridiagonal.off_diagonal);
                self.off_diagonal_at = (off.start..off.start + off.length).collect();
                self.entries.push(Entry {
                    act: Act::Phases { re, im },
                    totals,
                });
                self.checkpoint_iteration(tridiagonal);
                return;
            }
            Event::Sweep { step, tridiagonal } => {
                let act = self.sweep(step, tridiagonal);
                self.entries.push(Entry { act, totals });
                if self.sweeps.is_multiple_of(SWEEPS_A_CHECKPOINT) {
                    self.checkpoint_iteration(tridiagonal);
                }
                return;
            }
            Event::Deflation { deflation, .. } => Act::Deflation(deflation),
        };
        self.entries.push(Entry { act, totals });
    }
}
