//! Progress and cancellation of long work.

/// What a caller answers when long work reports its progress.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Flow {
    /// Go on.
    Continue,
    /// Stop at the next safe point; the stage returns its cancelled error
    /// with whatever it can hand over.
    Cancel,
}

/// The stage that reports.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Stage {
    /// Reading text.
    Entry,
    /// Reduction to tridiagonal form.
    Reduce,
    /// QR iteration on the tridiagonal form.
    Iterate,
    /// Eigenvectors, back-transformation and order.
    Pairs,
    /// Proof.
    Prove,
    /// Rational arithmetic.
    Exact,
    /// Claims.
    Claim,
}

/// A caller's hold on long work.
pub trait Control {
    /// `done` runs from 0 to 1 within the stage. Called often enough that a
    /// cancel is heard within a fraction of a second at order 1,000.
    fn progress(&mut self, stage: Stage, done: f64) -> Flow;
}

/// Runs to the end and tells no one.
#[derive(Clone, Copy, Debug, Default)]
pub struct Unattended;

impl Control for Unattended {
    fn progress(&mut self, _stage: Stage, _done: f64) -> Flow {
        Flow::Continue
    }
}
