//! Proof: enclosures of every eigenvalue of the typed problem.
//!
//! The stage takes any square X and any real Λ, and asks nothing of where they
//! came from: a poor approximation costs tightness, never truth. It imports
//! numbers, matrices, the problem, the plain approximation and the control,
//! and nothing of the reduction or the iteration.
//!
//! The theorems are stated where they are used: [`Theorem`] lists them.
//!
//! What is *not* proved: the processor's and compiler's conformance to IEEE 754
//! binary64 with round to nearest; the model behind the matrix.

mod accurate;
mod block;
mod certificate;
mod deep;
mod diagonal;
mod enclosure;
mod frame;
mod jacobi;
mod norms;
mod proof;
mod ranges;
mod residual;
mod slices;
mod spectrum;
mod tight;

#[cfg(test)]
mod tests;

pub use certificate::{certificate, statement};
pub use enclosure::{Cluster, Enclosure, Theorem};
pub use proof::{Condition, ConditionKind, Count, Level, Proof, Verdict};
pub use ranges::{tolerance_ranges, Range};

use crate::control::{Control, Flow, Stage};
use crate::num::figure;
use crate::num::{Dyadic, Upper};
use crate::pairs::Approximation;
use crate::problem::Problem;

use deep::{Outcome, Start};
use frame::{Frame, FrameError};
use residual::Residual;
use spectrum::Spectrum;

/// Proves what it can of `problem` with the help of `approximation`.
///
/// Never fails: a condition that is not met is recorded in the proof, which
/// falls back to the best weaker statement. A cancelled run returns what was
/// proven before. Cost by level: see [`Level`].
pub fn prove(
    problem: &Problem,
    approximation: &Approximation,
    level: Level,
    control: &mut dyn Control,
) -> Proof {
    let order = problem.matrix.order();
    let mut conditions = Vec::new();
    let frame = match Frame::new(problem, approximation) {
        Err(FrameError::Shape) => {
            conditions.push(Condition::new(
                ConditionKind::Usable,
                Verdict::Refuted,
                None,
                format!("The approximation is not of order {order}; the proof starts from the matrix alone."),
            ));
            Frame::without_vectors(problem)
        }
        other => other,
    };
    let frame = match frame {
        Ok(frame) => frame,
        Err(reason) => {
            conditions.push(unusable(reason));
            return Proof::nothing(order, conditions);
        }
    };
    climb(problem, frame, conditions, level, control)
}

fn unusable(reason: FrameError) -> Condition {
    match reason {
        FrameError::MetricDiagonal(i) => Condition::new(
            ConditionKind::Nonsingular,
            Verdict::Refuted,
            None,
            format!("The metric is not positive definite: its diagonal entry in row {} is not positive.", i + 1),
        ),
        FrameError::Shape | FrameError::NotFinite => Condition::new(
            ConditionKind::Usable,
            Verdict::Undecided,
            None,
            "An entry has no finite value in double precision at the matrix's scale.".to_string(),
        ),
    }
}

/// Significant bits given to typed eigenvalues that are no binary fractions.
const TYPED_BITS: u32 = 120;

/// Runs the certificates in turn, each only if the level asks for it.
fn climb(
    problem: &Problem,
    mut frame: Frame,
    mut conditions: Vec<Condition>,
    level: Level,
    control: &mut dyn Control,
) -> Proof {
    let order = frame.order;
    let (mut gram, mut residual) = residual::measure(&mut frame);
    let mut start = Start::FromVectors;
    if residual.spectrum(&frame).is_none() {
        start = Start::FromNothing;
        conditions.push(nonsingular(
            &residual,
            "the proof starts from the matrix alone",
        ));
        if let Ok(mut bare) = Frame::without_vectors(problem) {
            (gram, residual) = residual::measure(&mut bare);
            frame = bare;
        }
    }
    let mut proof = match residual.spectrum(&frame) {
        None => {
            conditions.push(nonsingular(
                &residual,
                "nothing is proven in double precision",
            ));
            Proof::nothing(order, conditions)
        }
        Some(mut spectrum) => {
            spectrum.ascend();
            diagonal::tighten(problem, &mut spectrum, frame.scale(), TYPED_BITS);
            conditions.push(nonsingular(&residual, ""));
            conditions.extend(radii(&residual, &frame));
            Proof::new(Level::Quick, spectrum.finish(frame.scale()), conditions)
        }
    };
    let wants_more = level != Level::Quick;
    if wants_more && control.progress(Stage::Prove, 0.05) == Flow::Cancel {
        proof.push(cancelled());
        return closed(proof);
    }
    if wants_more && proof.level().is_some() {
        if let Some(mut spectrum) = tight::tight(problem, &frame, &gram) {
            diagonal::tighten(problem, &mut spectrum, frame.scale(), TYPED_BITS);
            proof.replace(Level::Tight, spectrum.finish(frame.scale()));
        }
    }
    let digits = match level {
        Level::Deep { digits } => Some(digits),
        // Where double precision proves nothing, a small problem is still worth it.
        Level::Tight if start == Start::FromNothing && order <= RESCUED_ORDER => {
            Some(RESCUE_DIGITS)
        }
        Level::Quick | Level::Tight => None,
    };
    if let Some(digits) = digits {
        if !reaches(&proof, digits) {
            deepen(problem, &frame, start, digits, &mut proof, control);
        }
        if matches!(level, Level::Deep { .. }) {
            proof.push(digits_reached(&proof, digits));
        }
    }
    closed(proof)
}

/// Largest order for which the tight level goes deep when X is of no use.
const RESCUED_ORDER: usize = 40;

/// Digits asked for then.
const RESCUE_DIGITS: u32 = 20;

fn closed(mut proof: Proof) -> Proof {
    if proof.level().is_some() {
        let condition = separation(&proof);
        proof.push(condition);
    }
    proof
}

fn reaches(proof: &Proof, digits: u32) -> bool {
    proof
        .digits()
        .is_some_and(|proven| proven >= i64::from(digits))
}

fn deepen(
    problem: &Problem,
    frame: &Frame,
    start: Start,
    digits: u32,
    proof: &mut Proof,
    control: &mut dyn Control,
) {
    match deep::deep(problem, frame, start, digits, control) {
        Outcome::Proven {
            mut spectrum,
            defect,
            radius,
        } => {
            let bits = digits.saturating_mul(4).max(TYPED_BITS);
            diagonal::tighten(problem, &mut spectrum, frame.scale(), bits);
            proof.replace(Level::Deep { digits }, spectrum.finish(frame.scale()));
            proof.push(Condition::new(
                ConditionKind::Nonsingular,
                Verdict::Proved,
                Some(defect.clone()),
                format!(
                    "After refinement ‖XᴴMX − I‖ ≤ {}: X is nonsingular and the metric positive definite.",
                    figure::at_most(&defect)
                ),
            ));
            let radius = radius.scaled(frame.scale());
            proof.push(Condition::new(
                ConditionKind::Radius,
                Verdict::Proved,
                Some(radius.clone()),
                format!(
                    "After refinement every eigenvalue lies within {} of its approximation.",
                    figure::at_most(&radius)
                ),
            ));
        }
        Outcome::MetricRefuted(block) => proof.push(Condition::new(
            ConditionKind::Nonsingular,
            Verdict::Refuted,
            None,
            format!(
                "The metric is not positive definite: its leading block of order {block} is not."
            ),
        )),
        Outcome::Nothing => proof.push(Condition::new(
            ConditionKind::Finished,
            Verdict::Undecided,
            None,
            "The refinement in extended precision did not lead to a proof.".to_string(),
        )),
        Outcome::Cancelled => proof.push(cancelled()),
    }
}

fn cancelled() -> Condition {
    Condition::new(
        ConditionKind::Finished,
        Verdict::Undecided,
        None,
        "The proof was cancelled; what was proven before it stands.".to_string(),
    )
}

fn digits_reached(proof: &Proof, digits: u32) -> Condition {
    let short = proof
        .enclosures()
        .iter()
        .filter(|enclosure| {
            enclosure
                .digits()
                .is_none_or(|proven| proven < i64::from(digits))
        })
        .count();
    let (verdict, sentence) = match (proof.enclosures().is_empty(), short) {
        (true, _) => (Verdict::Undecided, "No eigenvalue is enclosed.".to_string()),
        (false, 0) => (Verdict::Proved, format!("Every eigenvalue has {digits} proven significant digits.")),
        (false, short) => (
            Verdict::Undecided,
            format!("{short} of {} eigenvalues have fewer than {digits} proven significant digits; zero may be among them.", proof.order()),
        ),
    };
    Condition::new(ConditionKind::Digits, verdict, None, sentence)
}

impl Residual {
    /// The linear statements; `None` unless φ < 1 is proven.
    fn spectrum(&self, frame: &Frame) -> Option<Spectrum> {
        let radius = self.radius.exact()?;
        let values = frame
            .values
            .iter()
            .map(|&value| Dyadic::from_f64(value))
            .collect::<Option<_>>()?;
        let radii = self.columns.iter().map(|radius| radius.exact()).collect();
        Some(Spectrum::linear(values, &radius, radii))
    }
}

fn nonsingular(residual: &Residual, otherwise: &str) -> Condition {
    let defect = residual.defect.exact();
    let proved = residual.defect.one_minus() > 0.0;
    let (verdict, sentence) = match (&defect, proved) {
        (Some(defect), true) => (
            Verdict::Proved,
            format!(
                "‖XᴴMX − I‖ ≤ {}: X is nonsingular and the metric positive definite.",
                figure::at_most(defect)
            ),
        ),
        (Some(defect), false) => (
            Verdict::Undecided,
            format!(
                "‖XᴴMX − I‖ is only known to be at most {}; {otherwise}.",
                figure::at_most(defect)
            ),
        ),
        (None, _) => (
            Verdict::Undecided,
            format!("XᴴMX is not finite; {otherwise}."),
        ),
    };
    Condition::new(ConditionKind::Nonsingular, verdict, defect, sentence)
}

fn radii(residual: &Residual, frame: &Frame) -> Vec<Condition> {
    let bound = |bound: Upper| bound.exact().map(|bound| bound.scaled(frame.scale()));
    let radius = bound(residual.radius);
    let input = bound(residual.input_loss);
    let text = |bound: &Option<Dyadic>| {
        bound
            .as_ref()
            .map_or("nothing known".to_string(), figure::at_most)
    };
    vec![
        Condition::new(
            ConditionKind::Radius,
            Verdict::Proved,
            radius.clone(),
            format!("Every eigenvalue lies within {} of its approximation.", text(&radius)),
        ),
        Condition::new(
            ConditionKind::InputRounding,
            Verdict::Proved,
            input.clone(),
            format!(
                "Of that, {} allows for the typed entries being rounded to doubles: the typed matrix is meant.",
                text(&input)
            ),
        ),
    ]
}

fn separation(proof: &Proof) -> Condition {
    let clusters = proof.clusters();
    let gap = clusters
        .iter()
        .filter_map(|cluster| cluster.gap())
        .cloned()
        .reduce(Dyadic::min);
    let single = clusters
        .iter()
        .filter(|cluster| cluster.count() == 1)
        .count();
    let verdict = if single == proof.order() {
        Verdict::Proved
    } else {
        Verdict::Undecided
    };
    let sentence = match &gap {
        Some(gap) => format!(
            "{single} of {} eigenvalues are proven apart from their neighbours; no gap proven is below {}.",
            proof.order(),
            figure::at_least(gap)
        ),
        None => format!("{single} of {} eigenvalues are proven apart from their neighbours.", proof.order()),
    };
    Condition::new(ConditionKind::Separation, verdict, gap, sentence)
}
