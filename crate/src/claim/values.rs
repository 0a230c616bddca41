//! Claims about eigenvalues and readings of them.
//!
//! A stated interval is carried over to λ (ω ↦ ω², f ↦ (2πf)²) and compared
//! with enclosures there. A list is decided by matching: confirmed when a
//! matching by proven containment is complete, refuted when not even the pairs
//! that cannot be told apart suffice.

use dashu_ratio::RBig;

use super::evidence::{EnclosedValue, Evidence};
use super::figure::Figure;
use super::interval::{ends, Precision};
use super::matching::matching;
use super::misprint::misprint;
use super::print;
use super::statement::{Extent, Quantity, Values};
use super::verdict::{Drawn, Finding, FindingKind, Freedom, Item, Verdict, Word};
use crate::num::ExactReal;

/// A stated interval in terms of λ, as two intervals between which the true
/// one lies.
#[derive(Clone, Debug)]
pub(super) struct Band {
    /// What is surely claimed.
    inner: (RBig, RBig),
    /// What may be claimed.
    outer: (RBig, RBig),
}

/// How a stated interval and a proven one stand.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Fit {
    Inside,
    Outside,
    Unclear,
}

impl Band {
    pub(super) fn new(figure: &Figure, quantity: Quantity, precision: Precision) -> Self {
        let (low, high) = (figure.re.low.clone(), figure.re.high.clone());
        if quantity == Quantity::Eigenvalue {
            return Self {
                inner: (low.clone(), high.clone()),
                outer: (low, high),
            };
        }
        // A frequency is never negative; a band wholly below zero holds none.
        let low = if low < RBig::ZERO && high >= RBig::ZERO {
            RBig::ZERO
        } else {
            low
        };
        let (low, high) = if high < RBig::ZERO {
            (RBig::from(-1), RBig::from(-2))
        } else {
            (&low * &low, &high * &high)
        };
        if quantity == Quantity::AngularFrequency {
            return Self {
                inner: (low.clone(), high.clone()),
                outer: (low, high),
            };
        }
        let (pi_low, pi_high) = ends(&ExactReal::pi().enclose(precision.0));
        let least = &pi_low * &pi_low * RBig::from(4);
        let most = &pi_high * &pi_high * RBig::from(4);
        Self {
            inner: (&low * &most, &high * &least),
            outer: (low * least, high * most),
        }
    }

    pub(super) fn fit(&self, value: &EnclosedValue) -> Fit {
        if self.inner.0 <= value.lower && value.upper <= self.inner.1 {
            Fit::Inside
        } else if value.upper < self.outer.0 || self.outer.1 < value.lower {
            Fit::Outside
        } else {
            Fit::Unclear
        }
    }
}

/// Judges stated eigenvalues or frequencies.
pub(super) fn judge(claim: &Values, evidence: &mut Evidence<'_>) -> Verdict {
    let stated: usize = claim.figures.iter().map(|(_, many)| many).sum();
    let order = evidence.order();
    if let Some(place) = claim.place {
        if place > order {
            return Verdict::new(
                Word::Refuted,
                format!("there are only {order} eigenvalues, so none is number {place}"),
            );
        }
    }
    if stated > order {
        return Verdict::new(
            Word::Refuted,
            format!("{stated} values are stated, and a problem of order {order} has {order}"),
        );
    }
    loop {
        let attempt = Attempt::new(claim, evidence);
        if attempt.word != Word::Undecided || !evidence.narrow() {
            return attempt.verdict(claim, evidence);
        }
    }
}

/// One copy of a stated figure.
struct Stated<'a> {
    figure: &'a Figure,
    band: Band,
}

/// The matching at the present width of the enclosures.
struct Attempt<'a> {
    stated: Vec<Stated<'a>>,
    /// Place in the evidence's list of each copy of an eigenvalue.
    copies: Vec<usize>,
    /// Copy matched to each stated figure.
    matched: Vec<Option<usize>>,
    word: Word,
}

impl<'a> Attempt<'a> {
    fn new(claim: &'a Values, evidence: &Evidence<'_>) -> Self {
        let precision = evidence.precision();
        let mut stated = Vec::new();
        for (figure, many) in &claim.figures {
            let band = Band::new(figure, claim.quantity, precision);
            for _ in 0..*many {
                stated.push(Stated {
                    figure,
                    band: band.clone(),
                });
            }
        }
        let mut copies = Vec::new();
        for (place, value) in evidence.values().iter().enumerate() {
            for copy in 0..value.count {
                if claim
                    .place
                    .is_none_or(|wanted| wanted == value.first + copy + 1)
                {
                    copies.push(place);
                }
            }
        }
        let fit = |s: usize, c: usize| stated[s].band.fit(&evidence.values()[copies[c]]);
        let sure = matching(stated.len(), copies.len(), |s, c| fit(s, c) == Fit::Inside);
        let all_needed = claim.extent == Extent::All;
        let complete = |matched: &[Option<usize>]| {
            matched.iter().all(Option::is_some) && (!all_needed || matched.len() == copies.len())
        };
        if complete(&sure) {
            return Self {
                stated,
                copies,
                matched: sure,
                word: Word::Confirmed,
            };
        }
        let hopeful = matching(stated.len(), copies.len(), |s, c| fit(s, c) != Fit::Outside);
        let word = if complete(&hopeful) {
            Word::Undecided
        } else {
            Word::Refuted
        };
        Self {
            stated,
            copies,
            matched: hopeful,
            word,
        }
    }

    fn verdict(&self, claim: &Values, evidence: &Evidence<'_>) -> Verdict {
        let values = evidence.values();
        let mut verdict = Verdict::new(self.word, String::new());
        let mut used = vec![false; self.copies.len()];
        for &copy in self.matched.iter().flatten() {
            used[copy] = true;
        }
        let mut free: Vec<usize> = (0..used.len()).filter(|&copy| !used[copy]).collect();
        let mut wrong = 0;
        let mut furthest: Option<RBig> = None;
        for (place, stated) in self.stated.iter().enumerate() {
            if let Some(copy) = self.matched[place] {
                let value = &values[self.copies[copy]];
                let word = match stated.band.fit(value) {
                    Fit::Inside => Word::Confirmed,
                    _ => Word::Undecided,
                };
                verdict.items.push(item(
                    stated.figure,
                    self.copies[copy],
                    word,
                    None,
                    claim,
                    evidence,
                ));
                continue;
            }
            wrong += 1;
            let target = nearest(&free, &self.copies, values, stated);
            let near = target.or_else(|| {
                nearest(
                    &(0..self.copies.len()).collect::<Vec<_>>(),
                    &self.copies,
                    values,
                    stated,
                )
            });
            if let Some(copy) = target {
                free.retain(|&other| other != copy);
            }
            let Some(near) = near else { continue };
            let off = distance(
                stated.figure,
                &values[self.copies[near]],
                claim.quantity,
                evidence,
            );
            let told = reading(self.copies[near], claim.quantity, evidence);
            let (kind, text) = match target {
                Some(_) => (
                    FindingKind::OutsideTolerance,
                    format!(
                        "{} is stated and {told} is true: off by at least {}",
                        stated.figure.text,
                        print::at_least(&off)
                    ),
                ),
                None => (
                    FindingKind::Extra,
                    format!(
                        "{} is stated once too often; the nearest true value is {told}",
                        stated.figure.text
                    ),
                ),
            };
            verdict.findings.push(Finding::new(kind, text));
            verdict.findings.extend(misprint(
                stated.figure,
                &self.copies,
                claim.quantity,
                evidence,
            ));
            let text = print::at_least(&off);
            let mut line = item(
                stated.figure,
                self.copies[near],
                Word::Refuted,
                Some(text),
                claim,
                evidence,
            );
            if target.is_none() {
                line.truth = format!("none; nearest {told}");
            }
            verdict.items.push(line);
            furthest = furthest.max(Some(off));
        }
        if claim.extent == Extent::All && self.word == Word::Refuted {
            for &copy in &free {
                wrong += 1;
                let told = reading(self.copies[copy], claim.quantity, evidence);
                verdict.findings.push(Finding::new(
                    FindingKind::Missing,
                    format!("{told} is an eigenvalue and is not stated (often enough)"),
                ));
                verdict
                    .items
                    .push(missing(self.copies[copy], claim, evidence));
            }
        }
        self.conclude(verdict, claim, wrong, furthest, evidence)
    }

    fn conclude(
        &self,
        mut verdict: Verdict,
        claim: &Values,
        wrong: usize,
        furthest: Option<RBig>,
        evidence: &Evidence<'_>,
    ) -> Verdict {
        let noun = match claim.quantity {
            Quantity::Eigenvalue => "eigenvalue",
            Quantity::AngularFrequency => "angular frequency",
            Quantity::Frequency => "natural frequency",
        };
        let many = self.stated.len();
        let widest = self
            .matched
            .iter()
            .flatten()
            .map(|&copy| {
                let value = &evidence.values()[self.copies[copy]];
                &value.upper - &value.lower
            })
            .max();
        verdict.sentence = match (self.word, many, claim.extent) {
            (Word::Confirmed, 1, Extent::Some) => {
                format!("the stated {noun} is right to every digit it shows")
            }
            (Word::Confirmed, _, Extent::Some) => {
                format!("all {many} stated values are right to every digit they show")
            }
            (Word::Confirmed, ..) => {
                format!("the list is complete, and all {many} values are right to every digit they show")
            }
            (Word::Refuted, 1, Extent::Some) => match claim.place {
                Some(place) => format!(
                    "{} is not {noun} number {place}",
                    self.stated[0].figure.text
                ),
                None => format!(
                    "no {noun} lies within what {} states",
                    self.stated[0].figure.text
                ),
            },
            (Word::Refuted, ..) => {
                let word = if wrong == 1 { "value is" } else { "values are" };
                format!("{wrong} {word} wrong, missing or stated too often")
            }
            (Word::Undecided, ..) => {
                "the enclosures could not be made narrow enough to tell".to_owned()
            }
        };
        match (self.word, furthest, widest) {
            (Word::Refuted, Some(off), _) => {
                verdict =
                    verdict.resting_on("largest distance from the truth", print::at_least(&off));
            }
            (_, _, Some(width)) if width.is_zero() => {
                verdict = verdict.resting_on("width of the enclosures", "0 (exact)");
            }
            (_, _, Some(width)) => {
                let text = crate::report::decimal::significant(
                    &width,
                    2,
                    crate::report::decimal::Rounding::Up,
                );
                verdict = verdict.resting_on("widest enclosure used", text);
            }
            _ => {}
        }
        if many > 1 {
            verdict = verdict.granting(Freedom::Order);
        }
        if self.word == Word::Refuted && claim.quantity == Quantity::Eigenvalue {
            verdict
                .findings
                .extend(super::invariants::of_list(claim, evidence));
        }
        verdict
    }
}

/// The nearest of `candidates` (copies) to a stated figure.
fn nearest(
    candidates: &[usize],
    copies: &[usize],
    values: &[EnclosedValue],
    stated: &Stated<'_>,
) -> Option<usize> {
    let centre = (&stated.band.outer.0 + &stated.band.outer.1) / RBig::from(2);
    candidates.iter().copied().min_by_key(|&copy| {
        let value = &values[copies[copy]];
        let middle = (&value.lower + &value.upper) / RBig::from(2);
        super::figure::size(&(middle - &centre))
    })
}

/// Ends of the quantity that belongs to an enclosure of λ; `None` below zero.
fn quantity_ends(
    value: &EnclosedValue,
    quantity: Quantity,
    precision: Precision,
) -> Option<(RBig, RBig)> {
    if quantity == Quantity::Eigenvalue {
        return Some((value.lower.clone(), value.upper.clone()));
    }
    let root = precision.sqrt(&precision.between(&value.lower, &value.upper))?;
    if quantity == Quantity::AngularFrequency {
        return Some(ends(&root));
    }
    let two_pi = precision.mul(
        &ExactReal::pi().enclose(precision.0),
        &precision.of(&RBig::from(2)),
    );
    precision.div(&root, &two_pi).map(|f| ends(&f))
}

/// The true quantity in words.
fn reading(place: usize, quantity: Quantity, evidence: &Evidence<'_>) -> String {
    let value = &evidence.values()[place];
    if quantity == Quantity::Eigenvalue {
        return format!("{} = {}", print::lambda(value.first), evidence.told(place));
    }
    match quantity_ends(value, quantity, evidence.precision()) {
        Some((low, high)) => print::enclosed(&low, &high, 12),
        None => format!(
            "no frequency: {} = {}",
            print::lambda(value.first),
            evidence.told(place)
        ),
    }
}

/// How far at least the stated number is from the truth.
fn distance(
    figure: &Figure,
    value: &EnclosedValue,
    quantity: Quantity,
    evidence: &Evidence<'_>,
) -> RBig {
    let Some((low, high)) = quantity_ends(value, quantity, evidence.precision()) else {
        return figure.re.stated.clone();
    };
    let stated = &figure.re.stated;
    if *stated < low {
        low - stated
    } else if *stated > high {
        stated - high
    } else {
        RBig::ZERO
    }
}

fn item(
    figure: &Figure,
    place: usize,
    word: Word,
    off_by: Option<String>,
    claim: &Values,
    evidence: &Evidence<'_>,
) -> Item {
    let mut line = missing(place, claim, evidence);
    line.claimed.clone_from(&figure.text);
    line.word = word;
    line.off_by = off_by;
    if let Some(drawn) = &mut line.drawn {
        drawn.claimed_low = Some(figure.re.low.to_f64().value());
        drawn.claimed_high = Some(figure.re.high.to_f64().value());
    }
    line
}

/// The line of a value that was not stated.
fn missing(place: usize, claim: &Values, evidence: &Evidence<'_>) -> Item {
    let value = &evidence.values()[place];
    let drawn = quantity_ends(value, claim.quantity, evidence.precision()).map(|(low, high)| {
        let (proven_low, proven_high) = (low.to_f64().value(), high.to_f64().value());
        Drawn {
            claimed_low: None,
            claimed_high: None,
            proven_low,
            proven_high,
        }
    });
    Item {
        label: print::lambda(value.first),
        claimed: String::new(),
        truth: reading(place, claim.quantity, evidence),
        word: Word::Refuted,
        off_by: None,
        drawn,
    }
}
