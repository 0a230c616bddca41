//! Whether trace and determinant could have told that a list is wrong, and
//! which single value would repair them.

use dashu_ratio::RBig;

use super::evidence::Evidence;
use super::print;
use super::statement::Values;
use super::verdict::{Finding, FindingKind};

/// Trace and determinant of the problem (of M⁻¹A for a pair), where they are
/// known exactly.
pub(super) fn known(evidence: &Evidence<'_>) -> Option<(RBig, RBig)> {
    let coefficients = &evidence.exact.as_ref()?.characteristic;
    let order = coefficients.len() - 1;
    if order == 0 {
        return None;
    }
    let trace = -coefficients[order - 1].clone();
    let determinant = if order % 2 == 0 {
        coefficients[0].clone()
    } else {
        -coefficients[0].clone()
    };
    Some((trace, determinant))
}

/// What the sum and the product of a complete list say.
pub(super) fn of_list(claim: &Values, evidence: &Evidence<'_>) -> Vec<Finding> {
    let Some((trace, determinant)) = known(evidence) else {
        return Vec::new();
    };
    let stated: usize = claim.figures.iter().map(|(_, many)| many).sum();
    if stated != evidence.order() {
        return Vec::new();
    }
    let mut sum = (RBig::ZERO, RBig::ZERO);
    let mut product = (RBig::ONE, RBig::ONE);
    for (figure, many) in &claim.figures {
        for _ in 0..*many {
            sum = (sum.0 + &figure.re.low, sum.1 + &figure.re.high);
            let mut corners = [
                &product.0 * &figure.re.low,
                &product.0 * &figure.re.high,
                &product.1 * &figure.re.low,
                &product.1 * &figure.re.high,
            ];
            corners.sort();
            let [low, _, _, high] = corners;
            product = (low, high);
        }
    }
    vec![
        sentence("sum", "trace", sum, &trace),
        sentence("product", "determinant", product, &determinant),
    ]
}

fn sentence(what: &str, invariant: &str, stated: (RBig, RBig), truth: &RBig) -> Finding {
    let told = stated.1 < *truth || *truth < stated.0;
    let stated = if stated.0 == stated.1 {
        print::exact(&stated.0, 8)
    } else {
        format!(
            "between {} and {}",
            print::exact(&stated.0, 8),
            print::exact(&stated.1, 8)
        )
    };
    let truth = print::exact(truth, 8);
    let text = if told {
        format!(
            "the {invariant} could have told: the {what} of the stated values is {stated}, \
             the {invariant} is {truth}"
        )
    } else {
        format!(
            "the {invariant} could not have told: the {what} of the stated values is {stated}, \
             which agrees with {truth}"
        )
    };
    Finding::new(FindingKind::Invariant, text)
}
