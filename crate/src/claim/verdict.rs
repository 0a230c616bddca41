//! What a judgement says.

use serde::{Deserialize, Serialize};

/// The word of a verdict.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "lowercase")]
pub enum Word {
    /// Proven right, to the digits stated.
    Confirmed,
    /// Proven wrong.
    Refuted,
    /// Neither could be proven.
    Undecided,
}

impl Word {
    /// The word of two claims that must both hold.
    pub fn and(self, other: Self) -> Self {
        match (self, other) {
            (Self::Refuted, _) | (_, Self::Refuted) => Self::Refuted,
            (Self::Undecided, _) | (_, Self::Undecided) => Self::Undecided,
            _ => Self::Confirmed,
        }
    }
}

/// The verdict on one claim.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct Verdict {
    /// The word.
    pub word: Word,
    /// One sentence with the reason.
    pub sentence: String,
    /// The number it rests on, as text with its name, where there is one.
    pub number: Option<RestingNumber>,
    /// Freedom that the mathematics leaves and the judgement granted.
    pub freedoms: Vec<Freedom>,
    /// Where it goes wrong, and what else was found.
    pub findings: Vec<Finding>,
    /// One line for each stated figure that has a counterpart to show.
    pub items: Vec<Item>,
}

/// A number a verdict rests on.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct RestingNumber {
    /// What it is.
    pub name: String,
    /// Its value, rounded outward where it is a bound.
    pub value: String,
}

/// Freedom granted to a claim.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub enum Freedom {
    /// A vector times any number.
    Scale,
    /// A unit vector times any number of modulus one (a sign, when real).
    Phase,
    /// Any basis of a repeated eigenvalue's space.
    Basis,
    /// Signs (phases) of the off-diagonals.
    OffDiagonalSigns,
    /// Order of the values.
    Order,
    /// det(λI − A) or det(A − λI).
    PolynomialSign,
    /// The other sign of a reflector.
    ReflectorSign,
    /// Signs of the columns of a factor.
    ColumnSigns,
    /// The vector a split form is restarted from.
    Restart,
}

/// What kind of thing a finding is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub enum FindingKind {
    /// A true value that was not stated.
    Missing,
    /// A stated value that is none.
    Extra,
    /// A stated value near a true one but outside its tolerance.
    OutsideTolerance,
    /// The first entry that departs from the true one.
    Departure,
    /// A tested cause that explains the stated numbers.
    Cause,
    /// Whether trace or determinant could have told.
    Invariant,
    /// Worth knowing.
    Note,
}

/// One finding.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Finding {
    /// Its kind.
    pub kind: FindingKind,
    /// One sentence.
    pub text: String,
    /// Row from 1, where it has one.
    pub row: Option<u32>,
    /// Column from 1, where it has one.
    pub col: Option<u32>,
}

impl Finding {
    /// A finding without a place.
    pub(super) fn new(kind: FindingKind, text: impl Into<String>) -> Self {
        Self {
            kind,
            text: text.into(),
            row: None,
            col: None,
        }
    }

    /// A finding at a cell, counted from 0.
    pub(super) fn at(kind: FindingKind, row: usize, col: usize, text: impl Into<String>) -> Self {
        let counted = |index: usize| u32::try_from(index + 1).ok();
        Self {
            kind,
            text: text.into(),
            row: counted(row),
            col: counted(col),
        }
    }
}

/// A stated figure beside the truth.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct Item {
    /// What is stated: `λ₂`, `row 3, column 2`.
    pub label: String,
    /// The figure as typed; empty for a value that was not stated.
    pub claimed: String,
    /// The truth as text: closed form, or digits that are proven.
    pub truth: String,
    /// Its own word.
    pub word: Word,
    /// How far the figure is from the truth at least, as text; for figures
    /// that are wrong.
    pub off_by: Option<String>,
    /// Ends of what the figure states and of what is proven, for pictures
    /// only; never printed.
    pub drawn: Option<Drawn>,
}

/// Places on a line, for pictures only.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct Drawn {
    /// Lower end of the stated interval; absent for what was not stated.
    pub claimed_low: Option<f64>,
    /// Its upper end.
    pub claimed_high: Option<f64>,
    /// Lower end of the proven interval.
    pub proven_low: f64,
    /// Its upper end.
    pub proven_high: f64,
}

/// The text as a sentence: a capital to begin with and a full stop.
pub(super) fn sentence(text: &str) -> String {
    let mut characters = text.chars();
    let mut whole = String::with_capacity(text.len() + 1);
    if let Some(first) = characters.next() {
        whole.push(first.to_ascii_uppercase());
    }
    whole.push_str(characters.as_str());
    if !whole.is_empty() && !whole.ends_with(['.', '!', '?']) {
        whole.push('.');
    }
    whole
}

impl Verdict {
    /// The verdict with all its texts as sentences.
    pub(super) fn spoken(mut self) -> Self {
        self.sentence = sentence(&self.sentence);
        for finding in &mut self.findings {
            finding.text = sentence(&finding.text);
        }
        self
    }

    /// A verdict with nothing but its word and sentence.
    pub(super) fn new(word: Word, sentence: impl Into<String>) -> Self {
        Self {
            word,
            sentence: sentence.into(),
            number: None,
            freedoms: Vec::new(),
            findings: Vec::new(),
            items: Vec::new(),
        }
    }

    /// The verdict with the number it rests on.
    pub(super) fn resting_on(mut self, name: impl Into<String>, value: impl Into<String>) -> Self {
        self.number = Some(RestingNumber {
            name: name.into(),
            value: value.into(),
        });
        self
    }

    /// The verdict with one freedom granted.
    pub(super) fn granting(mut self, freedom: Freedom) -> Self {
        if !self.freedoms.contains(&freedom) {
            self.freedoms.push(freedom);
        }
        self
    }
}
