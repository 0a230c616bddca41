//! Proof: enclosures of every eigenvalue of the typed problem.
//!
//! The stage takes any square X and any real Λ, and asks nothing of where they
//! came from: a poor approximation costs tightness, never truth. It imports
//! numbers, matrices, the problem, the plain approximation and the control,
//! and nothing of the reduction or the iteration.
//!
//! On what each statement rests (proofs, where short, stand in the file named):
//!
//! | statement | theorem | file |
//! |---|---|---|
//! | M positive definite, X nonsingular | ‖XᴴMX − I‖ < 1 and Sylvester's law of inertia | `residual` |
//! | every eigenvalue, with its multiplicity | Weyl 1912; Cao, Xie and Li 1996 on Kahan's conjecture | `residual` |
//! | an isolated eigenvalue | Krylov; Weinstein 1934 | `spectrum` |
//! | about 28 digits of it | Temple 1928; Kato 1949 | `tight` |
//! | the eigenvalues of a cluster | Haynsworth 1968; Mathias 1998 | `block` |
//! | directions of vectors and spaces | Davis and Kahan 1970 | `spectrum` |
//! | rounding in double precision | Higham 2002; Ogita, Rump and Oishi 2005; Ozaki and others 2012 | `norms`, `slices`, `accurate` |
//! | digits on demand | refinement after Ogita and Aishima 2018, then the first three again | `deep` |
//! | ranges over tolerances | Weyl; Temple; Collatz 1942 | `ranges` |
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
mod products;
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

use crate::control::Control;
use crate::num::figure;
use crate::num::{Dyadic, Upper};
use crate::pairs::Approximation;
use crate::problem::Problem;

use deep::{Outcome, Start};
use frame::{Frame, FrameError};
use products::{Cancelled, Watch};
use residual::{Gram, Residual};
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

/// Share of the work done before the tight certificate, and before the deep one.
const AFTER_QUICK: f64 = 0.05;
const AFTER_TIGHT: f64 = 0.2;

/// Runs the certificates in turn, each only if the level asks for it.
fn climb(
    problem: &Problem,
    frame: Frame,
    conditions: Vec<Condition>,
    level: Level,
    control: &mut dyn Control,
) -> Proof {
    let order = frame.order;
    let mut proof = Proof::nothing(order, conditions);
    let climbed = Climb {
        problem,
        level,
        control,
    }
    .run(frame, &mut proof);
    if climbed.is_err() {
        proof.push(cancelled());
    }
    if proof.level().is_some() {
        let condition = separation(&proof);
        proof.push(condition);
    }
    proof
}

struct Climb<'a> {
    problem: &'a Problem,
    level: Level,
    control: &'a mut dyn Control,
}

impl Climb<'_> {
    /// Fills the proof as far as it comes.
    fn run(&mut self, frame: Frame, proof: &mut Proof) -> Result<(), Cancelled> {
        let (frame, gram, start) = self.quick(frame, proof)?;
        if self.level == Level::Quick {
            return Ok(());
        }
        self.watch(AFTER_QUICK).check()?;
        if proof.level().is_some() {
            let mut watch = Watch {
                control: &mut *self.control,
                done: AFTER_QUICK,
            };
            if let Some(mut spectrum) = tight::tight(self.problem, &frame, &gram, &mut watch)? {
                diagonal::tighten(self.problem, &mut spectrum, frame.scale(), TYPED_BITS);
                proof.replace(Level::Tight, spectrum.finish(frame.scale()));
            }
        }
        let digits = match self.level {
            Level::Deep { digits } => digits,
            // Where double precision proves nothing, a small problem is still worth it.
            Level::Tight if start == Start::FromNothing && frame.order <= RESCUED_ORDER => {
                RESCUE_DIGITS
            }
            Level::Quick | Level::Tight => return Ok(()),
        };
        if !reaches(proof, digits) {
            self.watch(AFTER_TIGHT).check()?;
            deepen(self.problem, &frame, start, digits, proof, self.control);
        }
        if matches!(self.level, Level::Deep { .. }) {
            let condition = digits_reached(proof, digits);
            proof.push(condition);
        }
        Ok(())
    }

    fn watch(&mut self, done: f64) -> Watch<'_> {
        Watch {
            control: &mut *self.control,
            done,
        }
    }

    /// The quick certificate, from the matrix alone if X is of no use.
    fn quick(
        &mut self,
        mut frame: Frame,
        proof: &mut Proof,
    ) -> Result<(Frame, Gram, Start), Cancelled> {
        let (mut gram, mut residual) = residual::measure(&mut frame, &mut self.watch(0.0))?;
        let mut start = Start::FromVectors;
        if residual.spectrum(&frame).is_none() {
            start = Start::FromNothing;
            proof.push(nonsingular(
                &residual,
                "the proof starts from the matrix alone",
            ));
            if let Ok(mut bare) = Frame::without_vectors(self.problem) {
                (gram, residual) = residual::measure(&mut bare, &mut self.watch(0.0))?;
                frame = bare;
            }
        }
        match residual.spectrum(&frame) {
            None => proof.push(nonsingular(
                &residual,
                "nothing is proven in double precision",
            )),
            Some(mut spectrum) => {
                spectrum.ascend();
                diagonal::tighten(self.problem, &mut spectrum, frame.scale(), TYPED_BITS);
                proof.push(nonsingular(&residual, ""));
                for condition in radii(&residual, &frame) {
                    proof.push(condition);
                }
                proof.replace(Level::Quick, spectrum.finish(frame.scale()));
            }
        }
        Ok((frame, gram, start))
    }
}

/// Largest order for which the tight level goes deep when X is of no use.
const RESCUED_ORDER: usize = 40;

/// Digits asked for then.
const RESCUE_DIGITS: u32 = 20;

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

/// Whether the digits asked for were reached. Where zero is inside an
/// enclosure, its width counts against the largest eigenvalue.
fn digits_reached(proof: &Proof, digits: u32) -> Condition {
    let asked = i64::from(digits);
    let short = proof
        .enclosures()
        .iter()
        .filter(|enclosure| enclosure.digits().is_some_and(|proven| proven < asked))
        .count();
    let order = proof.order();
    let (verdict, sentence) = match (proof.enclosures().is_empty(), short, proof.held_at_zero()) {
        (true, ..) => (
            Verdict::Undecided,
            "No eigenvalue is enclosed.".to_string(),
        ),
        (false, 0, None) => (
            Verdict::Proved,
            format!("Every eigenvalue has {digits} proven significant digits."),
        ),
        (false, 0, Some((count, Some(least)))) if least >= asked => (
            Verdict::Proved,
            format!(
                "Every eigenvalue has {digits} proven significant digits, but for {count} with zero \
                 inside the enclosure, whose width is at most 1e-{digits} of the largest eigenvalue."
            ),
        ),
        (false, short, at_zero) => {
            let zeros = match at_zero {
                None => String::new(),
                Some((1, _)) => " one enclosure holds zero".to_string(),
                Some((count, _)) => format!(" {count} enclosures hold zero"),
            };
            let few = match short {
                0 => String::new(),
                short => format!(
                    " {short} of {order} eigenvalues have fewer than {digits} proven significant digits"
                ),
            };
            let and = if few.is_empty() || zeros.is_empty() { "" } else { ";" };
            let said = format!("{few}{and}{zeros}.");
            (Verdict::Undecided, capitalised(said.trim_start()))
        }
    };
    Condition::new(ConditionKind::Digits, verdict, None, sentence)
}

fn capitalised(sentence: &str) -> String {
    let mut letters = sentence.chars();
    letters.next().map_or(String::new(), |first| {
        first.to_uppercase().chain(letters).collect()
    })
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
