//! Solves and proves problem documents, and prints for each a line of three
//! fields with tabs between, to be held against a browser's: the file, the
//! fingerprint of the run, and SHA-256 over the certificate of the tight
//! proof, which holds the bounds.
//! `cargo run -p eigenledger --example fingerprint -- FILE…`

use eigenledger::control::Unattended;
use eigenledger::document;
use eigenledger::ledger::Ledger;
use eigenledger::prove::{prove, Level};
use eigenledger::report::export::certificate;
use eigenledger::report::run::{Heading, Run};
use eigenledger::solve::solve;
use sha2::{Digest, Sha256};

fn line(path: &str) -> Result<String, Box<dyn std::error::Error>> {
    let document = document::read(&std::fs::read_to_string(path)?)?;
    let problem = document::problem(&document)?.problem;
    let rounded = problem.rounded();
    let mut ledger = Ledger::new();
    let outcome = solve(&rounded, &mut ledger, &mut Unattended);
    let proof = match &outcome {
        Ok(solution) => prove(
            &problem,
            &solution.approximation,
            Level::Tight,
            &mut Unattended,
        ),
        Err(trouble) => return Err(trouble.to_string().into()),
    };
    let mut run = Run::new(Heading::default(), problem, rounded, ledger, outcome);
    run.proof = Some(proof);
    let certificate = certificate(&run).ok_or("nothing was proven")?;
    let digest: String = Sha256::digest(certificate.text)
        .iter()
        .map(|byte| format!("{byte:02x}"))
        .collect();
    Ok(format!("{path}\t{}\t{digest}", run.fingerprint))
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    for path in std::env::args().skip(1) {
        let line = line(&path).map_err(|error| format!("{path}: {error}"))?;
        println!("{line}");
    }
    Ok(())
}
