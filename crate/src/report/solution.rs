//! A run at a glance: what the page is told when the work is done.

use serde::{Deserialize, Serialize};

use super::run::Run;
use super::values;
use super::working::{self, LedgerSummary};

/// The outcome of a run.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct Solution {
    /// Rows of the matrix.
    pub order: u32,
    /// `real symmetric matrix`, `complex Hermitian pair` and the like.
    pub kind: String,
    /// Why there are no values, as a sentence; the ledger then ends early.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub trouble: Option<String>,
    /// Fingerprint of problem and result; empty without a result.
    pub fingerprint: String,
    /// What the last entry left outside the diagonal.
    pub closing_balance: String,
    /// The ledger at a glance.
    pub ledger: LedgerSummary,
}

/// The view of a run.
pub fn view(run: &Run) -> Solution {
    Solution {
        order: run.order() as u32,
        kind: kind(run),
        trouble: run.outcome.as_ref().err().map(ToString::to_string),
        fingerprint: run.fingerprint.clone(),
        closing_balance: values::closing_balance(run).figure,
        ledger: working::summary(run),
    }
}

/// The problem's kind in words.
pub fn kind(run: &Run) -> String {
    let complex = run.rounded.matrix.is_complex()
        || run.rounded.metric.as_ref().is_some_and(|m| m.is_complex());
    let field = if complex {
        "complex Hermitian"
    } else {
        "real symmetric"
    };
    let what = if run.problem.metric.is_some() {
        "pair"
    } else {
        "matrix"
    };
    format!("{field} {what}")
}
