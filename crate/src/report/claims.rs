//! Claims held against a run: exact where the exact road is open, else against
//! enclosures that are deepened until each verdict is decided or a cap is
//! reached.

use serde::{Deserialize, Serialize};

use super::run::Run;
use crate::claim::{self, EnclosedValue, Evidence, Verdict, Word};
use crate::control::{Control, Unattended};
use crate::exact::Limits;
use crate::prove::{prove, Level, Proof};

/// One claim with its verdict, or with why it cannot be read.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct ClaimLine {
    /// As typed.
    pub text: String,
    /// The verdict; absent when the claim cannot be read.
    pub verdict: Option<Verdict>,
    /// What is wrong with its text, as a sentence.
    pub error: Option<String>,
}

/// All claims.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct ClaimSheet {
    /// In order.
    pub lines: Vec<ClaimLine>,
    /// Place of the first that is refuted, from 0.
    pub first_wrong: Option<u32>,
    /// How many are settled, as a sentence.
    pub words: String,
}

/// Digits asked of a deeper proof, one step after the other.
const STEPS: [u32; 4] = [40, 80, 160, 320];
/// Deepening takes seconds beyond this order.
const LARGEST_DEEPENED: usize = 50;

/// Judges `texts`. Cost: see [`claim::judge`]; a deeper proof where the exact
/// road is closed.
pub fn judge(run: &Run, texts: &[String], control: &mut dyn Control) -> ClaimSheet {
    let mut evidence = evidence(run, control);
    let judgement = claim::judge_all(texts, &run.problem, &mut evidence, control);
    let lines: Vec<ClaimLine> = texts
        .iter()
        .zip(judgement.lines)
        .map(|(text, line)| {
            let (verdict, error) = match line {
                Ok(verdict) => (Some(verdict), None),
                Err(error) => (None, Some(error.to_string())),
            };
            ClaimLine { text: text.clone(), verdict, error }
        })
        .collect();
    ClaimSheet { words: words(&lines), first_wrong: judgement.first_wrong.map(|place| place as u32), lines }
}

fn evidence<'a>(run: &'a Run, control: &mut dyn Control) -> Evidence<'a> {
    if let Some(spectrum) = &run.exact {
        return Evidence::from_exact(spectrum.clone());
    }
    if let Ok(evidence) = Evidence::exact(&run.problem, &Limits::default(), control) {
        return evidence;
    }
    let known = run.proven().map(enclosed).unwrap_or_default();
    let mut steps = STEPS.iter();
    Evidence::enclosed(
        known,
        Some(Box::new(move || {
            let solution = run.outcome.as_ref().ok()?;
            if run.order() > LARGEST_DEEPENED {
                return None;
            }
            let digits = *steps.next()?;
            let proof = prove(&run.problem, &solution.approximation, Level::Deep { digits }, &mut Unattended);
            proof.level().map(|_| enclosed(&proof))
        })),
    )
}

fn enclosed(proof: &Proof) -> Vec<EnclosedValue> {
    proof
        .clusters()
        .iter()
        .map(|cluster| EnclosedValue {
            lower: cluster.lower().to_rational(),
            upper: cluster.upper().to_rational(),
            first: cluster.first(),
            count: cluster.count(),
        })
        .collect()
}

fn words(lines: &[ClaimLine]) -> String {
    let count = |word: Word| {
        lines.iter().filter(|line| line.verdict.as_ref().is_some_and(|verdict| verdict.word == word)).count()
    };
    let unread = lines.iter().filter(|line| line.error.is_some()).count();
    let mut text = format!(
        "{} confirmed, {} refuted, {} undecided",
        count(Word::Confirmed),
        count(Word::Refuted),
        count(Word::Undecided)
    );
    if unread > 0 {
        text.push_str(&format!(", {unread} not understood"));
    }
    text.push('.');
    text
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::working::tests::run_of_order;

    #[test]
    fn a_right_a_wrong_and_an_unreadable_claim_each_get_their_line() {
        let run = run_of_order(3);
        let trace: i64 = (0..3i64).map(|i| (i * i + 6 * i) % 11 - 5).sum();
        let texts = [format!("trace: {trace}"), format!("trace: {}", trace + 1), "moonlight: 3".to_owned()];
        let sheet = judge(&run, &texts, &mut Unattended);
        let word = |at: usize| sheet.lines[at].verdict.as_ref().map(|verdict| verdict.word);
        assert_eq!(word(0), Some(Word::Confirmed), "{sheet:?}");
        assert_eq!(word(1), Some(Word::Refuted), "{sheet:?}");
        assert!(sheet.lines[2].error.is_some(), "{sheet:?}");
        assert_eq!(sheet.first_wrong, Some(1));
        assert_eq!(sheet.words, "1 confirmed, 1 refuted, 0 undecided, 1 not understood.");
    }

    #[test]
    fn beyond_the_exact_road_enclosures_are_deepened() {
        let run = run_of_order(14);
        let trace: i64 = (0..14i64).map(|i| (i * i + 6 * i) % 11 - 5).sum();
        let texts = [format!("trace: {trace}"), "eigenvalue 1: 1000".to_owned()];
        let sheet = judge(&run, &texts, &mut Unattended);
        let word = |at: usize| sheet.lines[at].verdict.as_ref().map(|verdict| verdict.word);
        assert_eq!(word(0), Some(Word::Confirmed), "{sheet:?}");
        assert_eq!(word(1), Some(Word::Refuted), "{sheet:?}");
    }
}
