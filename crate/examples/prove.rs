//! Proven eigenvalues of a problem document, as JSON.
//!
//! ```text
//! cargo run --release -p eigenledger --example prove -- [--digits N] [--level quick|tight|deep] [--certificate] < problem.json
//! ```
//!
//! Reads a problem document (see `schema/problem-1.schema.json`: `format`
//! "eigenledger problem", `version` 1, and `matrix`, with `metric` for a pair, as
//! text or as nested arrays of decimal strings with complex cells `[re, im]`),
//! solves it, proves it, and prints one JSON object:
//!
//! - `level`: the certificate reached, `quick`, `tight` or `deep`; null if
//!   nothing is proven;
//! - `eigenvalues`, ascending and counted with multiplicity, each with
//!   `index` (from 1), `value` (3.414213562373(1): within one unit of the last
//!   digit), `lower` and `upper` (decimal strings rounded outward), `first` and
//!   `last` (the indices not proven apart from it), `multiplicity` (1 if proven
//!   simple, else null) and `count` of that cluster, `digits` proven, `sine`
//!   (bound on the angle of the approximate vectors' space), `exact`,
//!   `theorem` and `source`;
//! - `conditions`: `condition`, `verdict` (`proved`, `refuted`, `undecided`),
//!   `bound`, `sentence`;
//! - `notProved`: sentences.
//!
//! Without `--level` the quick certificate is followed by the tight one up to
//! order 200. `--digits N` asks for N proven significant digits of every
//! eigenvalue and goes as deep as that takes; the condition `digits` says
//! whether they were reached. `--certificate` adds the problem and the
//! approximation, for an independent check. Exit code 0, or 2 with a sentence
//! on standard error if the document is no problem.

use std::io::Read;
use std::process::ExitCode;

use eigenledger::control::Unattended;
use eigenledger::document;
use eigenledger::ledger::Silent;
use eigenledger::matrix::Dense;
use eigenledger::pairs::Approximation;
use eigenledger::problem::Problem;
use eigenledger::prove::{certificate, prove, statement, Level, Proof};
use eigenledger::solve::solve;
use nalgebra::DMatrix;

/// Orders up to which the tight certificate follows by itself.
const TIGHT_BY_ITSELF: usize = 200;

struct Wish {
    digits: Option<u32>,
    level: Option<Level>,
    certificate: bool,
}

fn main() -> ExitCode {
    match run() {
        Ok(text) => {
            println!("{text}");
            ExitCode::SUCCESS
        }
        Err(sentence) => {
            eprintln!("{sentence}");
            ExitCode::from(2)
        }
    }
}

fn run() -> Result<String, String> {
    let wish = wish(std::env::args().skip(1))?;
    let mut text = String::new();
    std::io::stdin()
        .read_to_string(&mut text)
        .map_err(|error| format!("The document cannot be read: {error}."))?;
    let problem = problem_of(&text)?;
    // Without an approximation the proof starts from the matrix alone.
    let approximation = match solve(&problem.rounded(), &mut Silent, &mut Unattended) {
        Ok(solution) => solution.approximation,
        Err(error) => {
            eprintln!("{error} The proof starts from the matrix alone.");
            Approximation {
                values: Vec::new(),
                vectors: Dense::real(DMatrix::zeros(0, 0)),
                scale: 0,
            }
        }
    };
    let proof = climb(&problem, &approximation, &wish);
    let report = if wish.certificate {
        certificate(&problem, &approximation, &proof)
    } else {
        statement(&proof)
    };
    serde_json::to_string_pretty(&report).map_err(|error| error.to_string())
}

fn climb(problem: &Problem, approximation: &Approximation, wish: &Wish) -> Proof {
    let order = problem.matrix.order();
    let level = match (wish.level, wish.digits) {
        (Some(level), _) => level,
        (None, Some(digits)) => Level::Deep { digits },
        (None, None) if order <= TIGHT_BY_ITSELF => Level::Tight,
        (None, None) => Level::Quick,
    };
    prove(problem, approximation, level, &mut Unattended)
}

fn wish(mut arguments: impl Iterator<Item = String>) -> Result<Wish, String> {
    let mut wish = Wish {
        digits: None,
        level: None,
        certificate: false,
    };
    let mut name = None;
    while let Some(argument) = arguments.next() {
        match argument.as_str() {
            "--digits" => {
                let digits = arguments.next().and_then(|digits| digits.parse().ok());
                wish.digits = Some(
                    digits
                        .filter(|&digits| (1..=10_000).contains(&digits))
                        .ok_or("--digits wants a number from 1 to 10000.")?,
                );
            }
            "--level" => name = arguments.next(),
            "--certificate" => wish.certificate = true,
            other => {
                return Err(format!(
                    "{other} is not understood; there are --digits, --level and --certificate."
                ))
            }
        }
    }
    wish.level = match name.as_deref() {
        None => None,
        Some("quick") => Some(Level::Quick),
        Some("tight") => Some(Level::Tight),
        Some("deep") => Some(Level::Deep {
            digits: wish.digits.unwrap_or(50),
        }),
        Some(other) => {
            return Err(format!(
                "{other} is no level; there are quick, tight and deep."
            ))
        }
    };
    Ok(wish)
}

fn problem_of(text: &str) -> Result<Problem, String> {
    let document = document::read(text).map_err(|error| error.to_string())?;
    let assembly = document::problem(&document).map_err(|error| error.to_string())?;
    Ok(assembly.problem)
}
