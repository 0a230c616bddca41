//! The certificate: what another program needs to check a proof.
//!
//! A JSON object with the exact problem, the approximate vectors and values as
//! exact doubles, and the proven bounds. The vectors are only a help to the
//! checker (they make XᴴAX nearly diagonal); every claim is about the problem.
//!
//! Notation: X and Λ as in the proof; strings hold numbers so that no reader
//! rounds them.

use serde_json::{json, Map, Value};

use crate::matrix::{Dense, ExactMatrix};
use crate::num::figure;
use crate::num::{Dyadic, ExactReal};
use crate::pairs::Approximation;
use crate::problem::Problem;

use super::{Condition, Level, Proof, Verdict};

/// Name and version of the format, its first two fields.
const FORMAT: (&str, u32) = ("eigenledger certificate", 1);

/// The certificate of a proof, as JSON:
/// - `matrix`, `metric`: rows of cells, a cell the exact text of a real number
///   or a list of real and imaginary part;
/// - `values`, `vectors`: hexadecimal doubles, vectors as a list of columns;
///   eigenvalue = value · 2^`scale`;
/// - `eigenvalues`, `level`, `conditions`: see [`statement`].
pub fn certificate(problem: &Problem, approximation: &Approximation, proof: &Proof) -> Value {
    let mut object = Map::new();
    object.insert("format".into(), json!(FORMAT.0));
    object.insert("version".into(), json!(FORMAT.1));
    object.insert("matrix".into(), cells(&problem.matrix));
    if let Some(metric) = &problem.metric {
        object.insert("metric".into(), cells(metric));
    }
    let values: Vec<String> = approximation
        .values
        .iter()
        .map(|&value| hexadecimal(value))
        .collect();
    object.insert("values".into(), json!(values));
    object.insert("scale".into(), json!(approximation.scale));
    object.insert("vectors".into(), columns(&approximation.vectors));
    if let Value::Object(statement) = statement(proof) {
        object.extend(statement);
    }
    Value::Object(object)
}

/// What is proven, as JSON: `level`, `eigenvalues` (for each its `index` from 1,
/// the `value` in print, `lower` and `upper` as decimals rounded outward, the
/// range `first` to `last` of the cluster it belongs to, `multiplicity` 1 if it
/// is proven simple and else null, the cluster's `count`, a bound `sine` on the
/// angle of the approximate vectors' space, the number of proven `digits`, the
/// `theorem` and its `source`), `conditions` and `notProved`.
pub fn statement(proof: &Proof) -> Value {
    let eigenvalues: Vec<Value> = proof
        .enclosures()
        .iter()
        .map(|enclosure| {
            let (lower, upper) = enclosure.decimals();
            let cluster = proof.cluster_of(enclosure.index());
            let count = cluster.map_or(proof.order(), |cluster| cluster.count());
            json!({
                "index": enclosure.index() + 1,
                "value": enclosure.figure(),
                "lower": lower,
                "upper": upper,
                "first": cluster.map_or(1, |cluster| cluster.first() + 1),
                "last": cluster.map_or(proof.order(), |cluster| cluster.last() + 1),
                "multiplicity": if count == 1 { json!(1) } else { Value::Null },
                "count": count,
                "sine": cluster.and_then(|cluster| cluster.sine()).map(figure::at_most),
                "digits": enclosure.digits().filter(|&digits| digits != i64::MAX),
                "exact": enclosure.lower() == enclosure.upper(),
                "theorem": enclosure.theorem().statement(),
                "source": enclosure.theorem().source(),
            })
        })
        .collect();
    let conditions: Vec<Value> = proof.conditions().iter().map(condition).collect();
    json!({
        "level": proof.level().map(level),
        "eigenvalues": eigenvalues,
        "conditions": conditions,
        "notProved": proof.not_proved(),
    })
}

fn level(level: Level) -> &'static str {
    match level {
        Level::Quick => "quick",
        Level::Tight => "tight",
        Level::Deep { .. } => "deep",
    }
}

fn condition(condition: &Condition) -> Value {
    let verdict = match condition.verdict() {
        Verdict::Proved => "proved",
        Verdict::Refuted => "refuted",
        Verdict::Undecided => "undecided",
    };
    json!({
        "condition": condition.kind().symbol(),
        "verdict": verdict,
        "bound": condition.bound_text(),
        "sentence": condition.sentence(),
    })
}

fn cells(matrix: &ExactMatrix) -> Value {
    let order = matrix.order();
    let text = |x: &ExactReal| Value::String(x.to_string());
    let row = |i: usize| {
        (0..order)
            .map(|j| match matrix.im(i, j).is_zero() {
                true => text(matrix.re(i, j)),
                false => json!([text(matrix.re(i, j)), text(matrix.im(i, j))]),
            })
            .collect::<Vec<_>>()
    };
    json!((0..order).map(row).collect::<Vec<_>>())
}

fn columns(matrix: &Dense) -> Value {
    let column = |k: usize| {
        (0..matrix.rows())
            .map(|i| match &matrix.im {
                None => json!(hexadecimal(matrix.re[(i, k)])),
                Some(im) => json!([hexadecimal(matrix.re[(i, k)]), hexadecimal(im[(i, k)])]),
            })
            .collect::<Vec<_>>()
    };
    json!((0..matrix.cols()).map(column).collect::<Vec<_>>())
}

/// A double as C's hexadecimal notation has it: 0x1.8p+1 is 3; exact.
fn hexadecimal(x: f64) -> String {
    let Some(exact) = Dyadic::from_f64(x) else {
        return "nan".to_string();
    };
    let sign = if x.is_sign_negative() { "-" } else { "" };
    let magnitude = exact.abs();
    format!(
        "{sign}0x{:x}p{:+}",
        magnitude.significand(),
        magnitude.exponent()
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hexadecimal_doubles_are_exact() {
        assert_eq!(hexadecimal(3.0), "0x3p+0");
        assert_eq!(hexadecimal(-0.375), "-0x3p-3");
        assert_eq!(hexadecimal(0.0), "0x0p+0");
        assert_eq!(hexadecimal(5e-324), "0x1p-1074");
        assert_eq!(hexadecimal(f64::NAN), "nan");
    }
}
