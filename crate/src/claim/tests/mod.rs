//! Claims about problems whose answers are known.

mod kinds;
mod proven;
mod published;
mod random;
mod slips;
mod whatever;

use dashu_ratio::RBig;

use crate::claim::{judge, read, Evidence, FindingKind, Verdict, Word};
use crate::control::Unattended;
use crate::exact::Limits;
use crate::matrix::ExactMatrix;
use crate::num::ExactReal;
use crate::problem::Problem;

fn matrix(rows: &[&[i64]]) -> ExactMatrix {
    let cells = rows
        .iter()
        .flat_map(|row| row.iter().map(|&a| ExactReal::from(a)))
        .collect();
    ExactMatrix::new(rows.len(), cells, None)
}

fn real(rows: &[&[i64]]) -> Problem {
    Problem {
        matrix: matrix(rows),
        metric: None,
    }
}

fn pair(rows: &[&[i64]], metric: &[&[i64]]) -> Problem {
    Problem {
        matrix: matrix(rows),
        metric: Some(matrix(metric)),
    }
}

/// From full rows of (re, im).
fn hermitian(rows: &[&[(i64, i64)]]) -> Problem {
    let plane = |part: fn(&(i64, i64)) -> i64| {
        rows.iter()
            .flat_map(|row| row.iter().map(move |x| ExactReal::from(part(x))))
            .collect()
    };
    let im = Some(plane(|x| x.1));
    Problem {
        matrix: ExactMatrix::new(rows.len(), plane(|x| x.0), im),
        metric: None,
    }
}

fn evidence(problem: &Problem) -> Evidence<'static> {
    Evidence::exact(problem, &Limits::for_order(40), &mut Unattended).expect("exact evidence")
}

fn verdict(problem: &Problem, text: &str) -> Verdict {
    let claim = read(text).unwrap_or_else(|error| panic!("{text}: {error}"));
    judge(&claim, problem, &mut evidence(problem))
}

fn expect(problem: &Problem, text: &str, word: Word) -> Verdict {
    let verdict = verdict(problem, text);
    assert_eq!(verdict.word, word, "{text}\n{verdict:#?}");
    assert!(!verdict.sentence.is_empty(), "{text}");
    verdict
}

/// Expects a refutation that names a cause with `words` in it.
fn expect_cause(problem: &Problem, text: &str, words: &str) {
    let verdict = expect(problem, text, Word::Refuted);
    let named = verdict.findings.iter().any(|finding| {
        finding.kind == FindingKind::Cause
            && finding.text.to_lowercase().contains(&words.to_lowercase())
    });
    assert!(named, "no cause with “{words}”: {text}\n{verdict:#?}");
}
