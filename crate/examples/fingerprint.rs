//! Solves problem documents and prints each one's fingerprint, to be held
//! against a browser's: `cargo run -p eigenledger --example fingerprint -- FILE…`

use eigenledger::control::Unattended;
use eigenledger::document;
use eigenledger::ledger::Ledger;
use eigenledger::report::run::{Heading, Run};
use eigenledger::solve::solve;

fn fingerprint(path: &str) -> Result<String, Box<dyn std::error::Error>> {
    let document = document::read(&std::fs::read_to_string(path)?)?;
    let problem = document::problem(&document)?.problem;
    let rounded = problem.rounded();
    let mut ledger = Ledger::new();
    let outcome = solve(&rounded, &mut ledger, &mut Unattended);
    let run = Run::new(Heading::default(), problem, rounded, ledger, outcome);
    Ok(run.fingerprint)
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    for path in std::env::args().skip(1) {
        println!("{path}\t{}", fingerprint(&path)?);
    }
    Ok(())
}
