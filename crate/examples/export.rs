//! Writes the data files that the page offers, for other programs to read:
//! `cargo run -p eigenledger --example export -- FOLDER < problem.json`
//!
//! Standard input: a problem document (see `schema/problem-1.schema.json`).
//! Every file of the eigenpairs is written into FOLDER, which must exist; their
//! names are printed, one a line.

use std::io::Read;
use std::path::PathBuf;

use eigenledger::control::Unattended;
use eigenledger::document;
use eigenledger::ledger::Ledger;
use eigenledger::prove::{prove, Level};
use eigenledger::report::export::{of_run, ExportKind};
use eigenledger::report::run::{Heading, Run};
use eigenledger::solve::solve;

const KINDS: [ExportKind; 7] = [
    ExportKind::ValuesCsv,
    ExportKind::VectorsCsv,
    ExportKind::TridiagonalCsv,
    ExportKind::Json,
    ExportKind::ValuesMatrixMarket,
    ExportKind::VectorsMatrixMarket,
    ExportKind::TridiagonalMatrixMarket,
];

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let folder = PathBuf::from(std::env::args().nth(1).ok_or("FOLDER is missing")?);
    let mut text = String::new();
    std::io::stdin().read_to_string(&mut text)?;
    let problem = document::problem(&document::read(&text)?)?.problem;
    let rounded = problem.rounded();
    let mut ledger = Ledger::new();
    let outcome = solve(&rounded, &mut ledger, &mut Unattended);
    let proof = outcome.as_ref().ok().map(|solution| {
        let approximation = &solution.approximation;
        prove(&problem, approximation, Level::Tight, &mut Unattended)
    });
    let mut run = Run::new(Heading::default(), problem, rounded, ledger, outcome);
    run.proof = proof;
    for kind in KINDS {
        let file = of_run(&run, kind).ok_or("there is no result to write")?;
        std::fs::write(folder.join(&file.name), &file.text)?;
        println!("{}", file.name);
    }
    Ok(())
}
