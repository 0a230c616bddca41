//! Claims: stated numbers held against exact arithmetic and enclosures.
//!
//! A claim ([`read()`]) is a kind in plain words and figures. It is judged
//! ([`judge`]) against the exact road where the input allows it, else against
//! proven enclosures, deepened until the verdict is decided or a cap is
//! reached. A verdict is `confirmed`, `refuted` or `undecided`; the first two
//! are proven: rational arithmetic and outward-rounded intervals throughout,
//! doubles only to search for what is then verified.
//!
//! What is granted, and named in the verdict: scale and phase of a vector, any
//! basis within a repeated eigenvalue's space, signs of off-diagonals, order,
//! the sign of a polynomial, the other sign of a reflector.
//!
//! What a verdict does not say: that the matrix is the right one.

mod basis;
mod body;
mod causes;
mod compare;
mod eigenvectors;
pub mod evidence;
mod exactly;
mod factors;
pub mod figure;
mod forms;
mod gram;
mod interval;
mod invariants;
mod matching;
mod misprint;
mod polynomials;
mod print;
mod read;
mod reduction;
mod reflectors;
mod scalars;
mod space;
mod standard;
pub mod statement;
mod states;
mod surds;
mod values;
mod vectors;
pub mod verdict;

pub use evidence::{EnclosedValue, Evidence};
pub use read::{read, split};
pub use statement::{Claim, ClaimError, Kind};
pub use verdict::{Finding, FindingKind, Freedom, Item, Verdict, Word};

use crate::control::{Control, Flow, Stage};
use crate::problem::Problem;

/// Judges one claim about `problem`.
///
/// Deepens `evidence` as far as the claim needs. Cost: for a list of values a
/// matching in O(n³) at worst; for a state after k reflectors O(k·n³) interval
/// operations of a few hundred bits; for vectors O(n²) a vector and precision.
pub fn judge(claim: &Claim, problem: &Problem, evidence: &mut Evidence<'_>) -> Verdict {
    match &claim.kind {
        Kind::Values(values) => values::judge(values, evidence),
        Kind::Vector {
            value,
            place,
            vector,
        } => vectors::judge(value.as_ref(), *place, vector, problem, evidence),
        Kind::Vectors {
            columns,
            values,
            length,
        } => vectors::judge_all(columns, values.as_deref(), *length, problem, evidence),
        Kind::Tridiagonal {
            diagonal,
            off_diagonal,
            outside,
            basis,
        } => {
            let basis = basis.as_ref();
            let stated = forms::StatedForm {
                diagonal,
                off_diagonal,
                outside,
                basis,
            };
            forms::judge(&stated, problem, evidence)
        }
        Kind::Reflector { column, stated } => reflectors::judge(*column, stated, problem),
        Kind::State { step, matrix } => states::judge(*step, matrix, problem),
        Kind::Cholesky(factor) => factors::judge(factor, problem),
        Kind::Polynomial(coefficients) => polynomials::judge(coefficients, evidence),
        Kind::Scalar(which, figure) => scalars::judge(*which, figure, problem, evidence),
    }
}

/// The verdicts on a worked calculation, line by line.
#[derive(Clone, Debug)]
pub struct Judgement {
    /// One for each claim, in order; a claim that cannot be read has its error.
    pub lines: Vec<Result<Verdict, ClaimError>>,
    /// The first line that is refuted, from 0.
    pub first_wrong: Option<usize>,
}

/// Judges claims in order, as they are typed, one text each. Stops when
/// cancelled, with the lines judged so far.
pub fn judge_all(
    texts: &[String],
    problem: &Problem,
    evidence: &mut Evidence<'_>,
    control: &mut dyn Control,
) -> Judgement {
    let mut judgement = Judgement {
        lines: Vec::with_capacity(texts.len()),
        first_wrong: None,
    };
    for (place, text) in texts.iter().enumerate() {
        let done = place as f64 / texts.len() as f64;
        if control.progress(Stage::Claim, done) == Flow::Cancel {
            break;
        }
        let line = read(text).map(|claim| judge(&claim, problem, evidence));
        let refuted = matches!(&line, Ok(verdict) if verdict.word == Word::Refuted);
        if refuted && judgement.first_wrong.is_none() {
            judgement.first_wrong = Some(place);
        }
        judgement.lines.push(line);
    }
    judgement
}

#[cfg(test)]
mod tests;
