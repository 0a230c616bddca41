//! Claims held against a run: exact where the exact road is open, else against
//! the proof, which is taken further until each verdict is decided or a cap is
//! reached.

use super::run::Run;
use crate::claim::{judge_all, Evidence, Judgement};
use crate::control::Control;
use crate::exact::Limits;

/// Judges `texts`, each of which may hold several claims. Cost: see
/// [`crate::claim::judge`]; a deeper proof where the exact road is closed.
pub fn judge(run: &Run, texts: &[String], control: &mut dyn Control) -> Judgement {
    let mut evidence = evidence(run, control);
    judge_all(texts, &run.problem, &mut evidence, control)
}

fn evidence<'a>(run: &'a Run, control: &mut dyn Control) -> Evidence<'a> {
    if let Some(spectrum) = &run.exact {
        return Evidence::from_exact(spectrum.clone());
    }
    let limits = Limits::default();
    match (&run.outcome, &run.proof) {
        (Ok(solution), Some(proof)) => Evidence::best(
            &run.problem,
            &solution.approximation,
            proof.clone(),
            &limits,
            control,
        ),
        _ => Evidence::exact(&run.problem, &limits, control)
            .unwrap_or_else(|_| Evidence::enclosed(Vec::new(), None)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::claim::Word;
    use crate::control::Unattended;
    use crate::prove::{prove, Level};
    use crate::report::working::tests::run_of_order;

    #[test]
    fn a_right_a_wrong_and_an_unreadable_claim_each_get_their_line() {
        let run = run_of_order(3);
        let trace: i64 = (0..3i64).map(|i| (i * i + 6 * i) % 11 - 5).sum();
        let texts = [
            format!("trace: {trace}"),
            format!("trace: {}", trace + 1),
            "moonlight: 3".to_owned(),
        ];
        let sheet = judge(&run, &texts, &mut Unattended);
        let word = |at: usize| sheet.lines[at].verdict.as_ref().map(|verdict| verdict.word);
        assert_eq!(word(0), Some(Word::Confirmed), "{sheet:?}");
        assert_eq!(word(1), Some(Word::Refuted), "{sheet:?}");
        assert!(sheet.lines[2].error.is_some(), "{sheet:?}");
        assert_eq!(sheet.first_wrong, Some(1));
    }

    #[test]
    fn beyond_the_exact_road_enclosures_are_deepened() {
        let mut run = run_of_order(14);
        let solution = run.outcome.as_ref().expect("converges");
        let proof = prove(
            &run.problem,
            &solution.approximation,
            Level::Quick,
            &mut Unattended,
        );
        run.proof = Some(proof);
        let trace: i64 = (0..14i64).map(|i| (i * i + 6 * i) % 11 - 5).sum();
        let texts = [format!("trace: {trace}"), "eigenvalue 1: 1000".to_owned()];
        let sheet = judge(&run, &texts, &mut Unattended);
        let word = |at: usize| sheet.lines[at].verdict.as_ref().map(|verdict| verdict.word);
        assert_eq!(word(0), Some(Word::Confirmed), "{sheet:?}");
        assert_eq!(word(1), Some(Word::Refuted), "{sheet:?}");
    }
}
