//! A worked calculation: claims judged line by line.

use serde::{Deserialize, Serialize};

use super::verdict::{sentence, Verdict, Word};
use super::{judge, read, split, Evidence};
use crate::control::{Control, Flow, Stage};
use crate::problem::Problem;

/// One line of a calculation.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Line {
    /// The claim as typed.
    pub text: String,
    /// Which of the texts it comes from, from 0.
    pub source: u32,
    /// The verdict, where the claim could be read.
    pub verdict: Option<Verdict>,
    /// Why it could not be read, as a sentence.
    pub error: Option<String>,
}

/// The verdicts on a worked calculation, line by line.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct Judgement {
    /// One for each claim, in order.
    pub lines: Vec<Line>,
    /// The first line that is refuted, from 0.
    pub first_wrong: Option<u32>,
}

/// Judges claims in order, as they are typed; a text may hold several. Stops
/// when cancelled, with the lines judged so far.
pub fn judge_all(
    texts: &[String],
    problem: &Problem,
    evidence: &mut Evidence<'_>,
    control: &mut dyn Control,
) -> Judgement {
    let mut judgement = Judgement {
        lines: Vec::new(),
        first_wrong: None,
    };
    for (source, text) in (0u32..).zip(texts) {
        for claim in split(text) {
            let done = f64::from(source) / texts.len() as f64;
            if control.progress(Stage::Claim, done) == Flow::Cancel {
                return judgement;
            }
            let (verdict, error) = match read(claim) {
                Ok(claim) => (Some(judge(&claim, problem, evidence)), None),
                Err(error) => (None, Some(sentence(&error.to_string()))),
            };
            let wrong = verdict.as_ref().is_some_and(|v| v.word == Word::Refuted);
            if wrong && judgement.first_wrong.is_none() {
                judgement.first_wrong = u32::try_from(judgement.lines.len()).ok();
            }
            judgement.lines.push(Line {
                text: claim.to_owned(),
                source,
                verdict,
                error,
            });
        }
    }
    judgement
}
