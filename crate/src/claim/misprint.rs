//! Slips of the pen in a single figure.

use super::evidence::Evidence;
use super::figure::{raw, spanned, Digits, Figure};
use super::statement::Quantity;
use super::values::{Band, Fit};
use super::verdict::{Finding, FindingKind};

/// Slips of the pen that explain a wrong figure: a lost sign, or two
/// neighbouring digits exchanged. Named only if the repaired figure is right.
pub(super) fn misprint(
    figure: &Figure,
    copies: &[usize],
    quantity: Quantity,
    evidence: &Evidence<'_>,
) -> Vec<Finding> {
    let fits = |text: &str| {
        let Some(raw) = raw(text) else {
            return false;
        };
        let Some(mut repaired) = spanned(vec![raw], &Digits::Rounded).pop() else {
            return false;
        };
        // The repaired figure claims what the typed one did, about its number.
        let shift = &repaired.re.stated - &figure.re.stated;
        repaired.re.low = &figure.re.low + &shift;
        repaired.re.high = &figure.re.high + shift;
        let band = Band::new(&repaired, quantity, evidence.precision());
        copies
            .iter()
            .any(|&place| band.fit(&evidence.values()[place]) == Fit::Inside)
    };
    let negated = match figure.text.strip_prefix(['-', '−']) {
        Some(rest) => rest.to_owned(),
        None => format!("-{}", figure.text),
    };
    if !figure.re.stated.is_zero() && fits(&negated) {
        return vec![Finding::new(
            FindingKind::Cause,
            format!("with the other sign, {negated} would be right"),
        )];
    }
    let characters: Vec<char> = figure.text.chars().collect();
    for place in 1..characters.len() {
        let pair = (characters[place - 1], characters[place]);
        if pair.0 == pair.1 || !pair.0.is_ascii_digit() || !pair.1.is_ascii_digit() {
            continue;
        }
        let mut exchanged = characters.clone();
        exchanged.swap(place - 1, place);
        let exchanged: String = exchanged.into_iter().collect();
        if fits(&exchanged) {
            return vec![Finding::new(
                FindingKind::Cause,
                format!(
                    "with the digits {} and {} exchanged, {exchanged} would be right",
                    pair.0, pair.1
                ),
            )];
        }
    }
    Vec::new()
}
