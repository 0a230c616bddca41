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
mod commas;
mod compare;
mod eigenvectors;
pub mod evidence;
mod exactly;
mod factors;
pub mod figure;
pub mod files;
mod forms;
mod gram;
mod interval;
mod invariants;
mod matching;
mod misprint;
mod output;
mod polynomials;
mod print;
mod proven;
mod read;
mod reduction;
mod reflectors;
mod scalars;
pub mod sequence;
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
pub use sequence::{judge_all, Judgement, Line};
pub use statement::{Claim, ClaimError, Kind};
pub use verdict::{Finding, FindingKind, Freedom, Item, Verdict, Word};

use crate::problem::Problem;

/// Judges one claim about `problem`.
///
/// Deepens `evidence` as far as the claim needs. Cost: for a list of values a
/// matching in O(n³) at worst; for a state after k reflectors O(k·n³) interval
/// operations of a few hundred bits; for vectors O(n²) a vector and precision.
pub fn judge(claim: &Claim, problem: &Problem, evidence: &mut Evidence<'_>) -> Verdict {
    let needs_values = !matches!(
        claim.kind,
        Kind::Tridiagonal { .. } | Kind::Reflector { .. } | Kind::State { .. } | Kind::Cholesky(_)
    );
    if needs_values && evidence.order() != problem.matrix.order() {
        return Verdict::new(
            Word::Undecided,
            "no enclosure of the eigenvalues is proven, so nothing can be told",
        )
        .spoken();
    }
    let verdict = match &claim.kind {
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
        Kind::Output { values, columns } => {
            output::judge(values, columns.as_ref(), problem, evidence)
        }
        Kind::Scalar(which, figure) => scalars::judge(*which, figure, problem, evidence),
    };
    verdict.spoken()
}

#[cfg(test)]
mod tests;
