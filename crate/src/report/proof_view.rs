//! The proof as the page and the sheet show it.

use serde::{Deserialize, Serialize};

use super::decimal::{typeset, typeset_sentence};
use super::run::Run;
use super::values::{closing_balance, Standing};
use crate::prove::{Condition, Level, Proof, Theorem, Verdict};

/// One condition with its number.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct ConditionView {
    /// The condition in symbols.
    pub symbol: String,
    /// Its bound, where it has one.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub bound: Option<String>,
    /// One sentence.
    pub sentence: String,
    /// Whether it is met.
    pub standing: Standing,
}

/// A theorem that was used.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct TheoremView {
    /// What it says.
    pub statement: String,
    /// Where it was published.
    pub source: String,
    /// For which eigenvalues it gave the bound.
    pub used: String,
}

/// The proof.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct ProofView {
    /// Tells one proof of a solution from the next.
    pub key: String,
    /// The level reached, as a sentence.
    pub words: String,
    /// The closing balance as it now stands.
    pub closing: String,
    /// The conditions.
    pub conditions: Vec<ConditionView>,
    /// The theorems.
    pub theorems: Vec<TheoremView>,
    /// What is not proven, as sentences.
    pub not_proven: Vec<String>,
}

/// The view of a run's proof; `None` before there is one.
pub fn view(run: &Run) -> Option<ProofView> {
    let proof = run.proof.as_ref()?;
    Some(ProofView {
        key: level_key(proof),
        words: words(proof),
        closing: closing_balance(run).figure,
        conditions: proof.conditions().iter().map(condition).collect(),
        theorems: theorems(proof),
        not_proven: not_proven(proof),
    })
}

fn level_key(proof: &Proof) -> String {
    match proof.level() {
        None => "nothing".to_owned(),
        Some(Level::Quick) => "quick".to_owned(),
        Some(Level::Tight) => "tight".to_owned(),
        Some(Level::Deep { digits }) => format!("deep {digits}"),
    }
}

fn words(proof: &Proof) -> String {
    let level = match proof.level() {
        None => return "Nothing is proven; the conditions say why.".to_owned(),
        Some(Level::Quick) => "Proven in double precision (quick).",
        Some(Level::Tight) => "Proven with error-free residuals (tight).",
        Some(Level::Deep { .. }) => "Proven in extended precision (deep).",
    };
    let apart = proof
        .clusters()
        .iter()
        .filter(|cluster| cluster.count() == 1)
        .count();
    let digits: Vec<i64> = proof
        .enclosures()
        .iter()
        .filter_map(|enclosure| enclosure.digits())
        .collect();
    let known = match (digits.iter().min(), digits.iter().max()) {
        (Some(least), Some(most)) => match (least, most) {
            (&i64::MAX, _) => " All values are known exactly.".to_owned(),
            (least, &i64::MAX) => {
                format!(" At least {least} significant digits each, some exactly.")
            }
            (least, most) if least == most => format!(" {least} significant digits each."),
            (least, most) => format!(" Between {least} and {most} significant digits."),
        },
        _ => String::new(),
    };
    let known = format!("{known}{}", at_zero(proof));
    format!(
        "{level} {apart} of {} eigenvalues stand apart from all others.{known}",
        proof.order()
    )
}

/// What is said of enclosures that hold zero, which has no significant digits.
fn at_zero(proof: &Proof) -> String {
    let Some((count, least)) = proof.held_at_zero() else {
        return String::new();
    };
    let (which, whose) = if count == 1 {
        ("One enclosure holds zero".to_owned(), "its width is")
    } else {
        (format!("{count} enclosures hold zero"), "their widths are")
    };
    match least {
        Some(least) if least > 0 => typeset_sentence(&format!(
            " {which}; {whose} at most 1e-{least} of the largest eigenvalue."
        )),
        _ => format!(" {which}."),
    }
}

fn condition(condition: &Condition) -> ConditionView {
    ConditionView {
        symbol: condition.kind().symbol().to_owned(),
        bound: condition.bound_text().map(|bound| typeset(&bound)),
        sentence: typeset_sentence(condition.sentence()),
        standing: match condition.verdict() {
            Verdict::Proved => Standing::Proven,
            Verdict::Refuted => Standing::Refuted,
            Verdict::Undecided => Standing::Undecided,
        },
    }
}

fn theorems(proof: &Proof) -> Vec<TheoremView> {
    let mut used: Vec<(Theorem, Vec<usize>)> = Vec::new();
    for enclosure in proof.enclosures() {
        let theorem = enclosure.theorem();
        match used.iter_mut().find(|(known, _)| *known == theorem) {
            Some((_, indices)) => indices.push(enclosure.index() + 1),
            None => used.push((theorem, vec![enclosure.index() + 1])),
        }
    }
    used.into_iter()
        .map(|(theorem, indices)| TheoremView {
            statement: theorem.statement().to_owned(),
            source: theorem.source().to_owned(),
            used: ranges(&indices),
        })
        .collect()
}

/// 1, 2, 3, 7 as `λ1–λ3, λ7`.
fn ranges(indices: &[usize]) -> String {
    let mut text = String::new();
    let mut at = 0;
    while at < indices.len() {
        let mut end = at;
        while end + 1 < indices.len() && indices[end + 1] == indices[end] + 1 {
            end += 1;
        }
        if !text.is_empty() {
            text.push_str(", ");
        }
        text.push_str(&format!("λ{}", indices[at]));
        if end > at {
            text.push_str(&format!("–λ{}", indices[end]));
        }
        at = end + 1;
    }
    text
}

fn not_proven(proof: &Proof) -> Vec<String> {
    let mut sentences = Vec::new();
    for cluster in proof
        .clusters()
        .iter()
        .filter(|cluster| cluster.count() > 1)
    {
        sentences.push(format!(
            "That eigenvalues {} to {} differ, or that they are equal.",
            cluster.first() + 1,
            cluster.last() + 1
        ));
    }
    sentences.push(
        "That the processor and the browser follow IEEE 754 double precision with rounding to nearest."
            .to_owned(),
    );
    sentences.push("Anything about the model that the matrix came from.".to_owned());
    sentences
}

#[cfg(test)]
mod tests {
    use super::ranges;

    #[test]
    fn indices_are_gathered_into_ranges() {
        assert_eq!(ranges(&[1, 2, 3, 7]), "λ1–λ3, λ7");
        assert_eq!(ranges(&[4]), "λ4");
        assert_eq!(ranges(&[]), "");
    }
}
