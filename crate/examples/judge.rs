//! Judges the claims of problem documents, as JSON:
//! `cargo run --release -p eigenledger --example judge < problems.json`
//!
//! Standard input: a list of problem documents (see
//! `schema/problem-1.schema.json`), each with its `claims`. Standard output: a
//! list in the same order of `{"lines": […], "firstWrong": k}`, a line for each
//! claim with its `verdict` (`word` is `confirmed`, `refuted` or `undecided`) or
//! the `error` why it could not be read; or `{"trouble": sentence}`.

use eigenledger::claim::{judge_all, Evidence, Judgement};
use eigenledger::control::Unattended;
use eigenledger::document;
use eigenledger::exact::Limits;
use eigenledger::ledger::Silent;
use eigenledger::prove::{prove, Level};
use eigenledger::solve::solve;
use serde::Serialize;
use serde_json::value::RawValue;

#[derive(Serialize)]
#[serde(untagged)]
enum Answer {
    Judged(Judgement),
    Trouble { trouble: String },
}

fn answer(text: &str) -> Result<Judgement, Box<dyn std::error::Error>> {
    let document = document::read(text)?;
    let problem = document::problem(&document)?.problem;
    let solution = solve(&problem.rounded(), &mut Silent, &mut Unattended)?;
    let approximation = solution.approximation;
    let proof = prove(&problem, &approximation, Level::Tight, &mut Unattended);
    let mut evidence = Evidence::best(
        &problem,
        &approximation,
        proof,
        &Limits::default(),
        &mut Unattended,
    );
    Ok(judge_all(
        &document.claims,
        &problem,
        &mut evidence,
        &mut Unattended,
    ))
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let given: Vec<Box<RawValue>> = serde_json::from_reader(std::io::stdin().lock())?;
    let answers: Vec<Answer> = given
        .iter()
        .map(|one| match answer(one.get()) {
            Ok(judgement) => Answer::Judged(judgement),
            Err(trouble) => Answer::Trouble {
                trouble: trouble.to_string(),
            },
        })
        .collect();
    serde_json::to_writer(std::io::stdout().lock(), &answers)?;
    Ok(())
}
