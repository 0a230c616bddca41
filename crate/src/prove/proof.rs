//! The proof of a problem: enclosures, clusters, and the conditions they rest on.

use dashu_ratio::RBig;

use crate::num::figure;
use crate::num::{Dyadic, Toward};

use super::enclosure::{Cluster, Enclosure};

/// How far to go.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Level {
    /// Plain double precision with a-priori rounding bounds: about 1.5 n³
    /// multiplications and additions (2.5 n³ for a pair).
    Quick,
    /// Residuals by error-free splitting and quadratic bounds: about 28 digits
    /// of a well separated eigenvalue.
    Tight,
    /// Refinement and certificate in extended precision until every eigenvalue
    /// has this many proven significant digits, or a cap is reached.
    Deep {
        /// Significant decimal digits asked for.
        digits: u32,
    },
}

/// A statement is proved, refuted, or neither.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Verdict {
    /// It holds.
    Proved,
    /// It does not hold.
    Refuted,
    /// Neither is proven.
    Undecided,
}

/// What a condition is about.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ConditionKind {
    /// Problem and approximation fit together and have finite values.
    Usable,
    /// ‖XᴴMX − I‖ ≤ φ < 1: the metric is positive definite, X nonsingular.
    Nonsingular,
    /// All eigenvalues lie within ε of their approximations.
    Radius,
    /// Rounding the typed entries to doubles moves no eigenvalue by more.
    InputRounding,
    /// Eigenvalues proven apart from their neighbours.
    Separation,
    /// The digits asked for were reached.
    Digits,
    /// The work was run to its end, not cancelled.
    Finished,
}

impl ConditionKind {
    /// The condition in symbols.
    pub fn symbol(self) -> &'static str {
        match self {
            Self::Usable => "A, M, X, Λ finite",
            Self::Nonsingular => "‖XᴴMX − I‖ < 1",
            Self::Radius => "|λₖ − λ̃ₖ| ≤ ε",
            Self::InputRounding => "‖A − fl(A)‖",
            Self::Separation => "λₖ < λₖ₊₁",
            Self::Digits => "digits",
            Self::Finished => "finished",
        }
    }
}

/// One condition of the proof, with its number.
#[derive(Clone, Debug)]
pub struct Condition {
    kind: ConditionKind,
    verdict: Verdict,
    bound: Option<Dyadic>,
    sentence: String,
}

impl Condition {
    pub(super) fn new(
        kind: ConditionKind,
        verdict: Verdict,
        bound: Option<Dyadic>,
        sentence: String,
    ) -> Self {
        Self {
            kind,
            verdict,
            bound,
            sentence,
        }
    }

    /// What it is about.
    pub fn kind(&self) -> ConditionKind {
        self.kind
    }

    /// Whether it is met.
    pub fn verdict(&self) -> Verdict {
        self.verdict
    }

    /// The proven bound that decides it, if there is one.
    pub fn bound(&self) -> Option<&Dyadic> {
        self.bound.as_ref()
    }

    /// The bound in print, three digits: rounded up, but a gap that is proven at
    /// least so wide is rounded down.
    pub fn bound_text(&self) -> Option<String> {
        let print = match self.kind {
            ConditionKind::Separation => figure::at_least,
            _ => figure::at_most,
        };
        self.bound.as_ref().map(print)
    }

    /// One sentence for the reader.
    pub fn sentence(&self) -> &str {
        &self.sentence
    }
}

/// A count between two proven numbers.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Count {
    /// Not fewer.
    pub at_least: usize,
    /// Not more.
    pub at_most: usize,
}

impl Count {
    /// The count, when it is decided.
    pub fn exactly(self) -> Option<usize> {
        (self.at_least == self.at_most).then_some(self.at_least)
    }
}

/// What is proven of a problem's eigenvalues.
#[derive(Clone, Debug)]
pub struct Proof {
    level: Option<Level>,
    order: usize,
    enclosures: Vec<Enclosure>,
    clusters: Vec<Cluster>,
    conditions: Vec<Condition>,
}

impl Proof {
    /// Nothing is proven; the conditions say why.
    pub(super) fn nothing(order: usize, conditions: Vec<Condition>) -> Self {
        Self {
            level: None,
            order,
            enclosures: Vec::new(),
            clusters: Vec::new(),
            conditions,
        }
    }

    /// Replaces the bounds by those of a higher level.
    pub(super) fn replace(
        &mut self,
        level: Level,
        (enclosures, clusters): (Vec<Enclosure>, Vec<Cluster>),
    ) {
        self.level = Some(level);
        self.enclosures = enclosures;
        self.clusters = clusters;
    }

    pub(super) fn push(&mut self, condition: Condition) {
        self.conditions.push(condition);
    }

    /// The level whose certificate the bounds come from; `None` when nothing is
    /// proven.
    pub fn level(&self) -> Option<Level> {
        self.level
    }

    /// Order of the problem.
    pub fn order(&self) -> usize {
        self.order
    }

    /// One enclosure an eigenvalue, ascending, counted with multiplicity; empty
    /// when nothing is proven.
    pub fn enclosures(&self) -> &[Enclosure] {
        &self.enclosures
    }

    /// Clusters in ascending order; together they hold every index once.
    pub fn clusters(&self) -> &[Cluster] {
        &self.clusters
    }

    /// The cluster that holds index k.
    pub fn cluster_of(&self, k: usize) -> Option<&Cluster> {
        self.clusters
            .iter()
            .find(|cluster| (cluster.first()..=cluster.last()).contains(&k))
    }

    /// The conditions, met or not.
    pub fn conditions(&self) -> &[Condition] {
        &self.conditions
    }

    /// The verdict on one kind of condition: the last one recorded.
    pub fn verdict(&self, kind: ConditionKind) -> Verdict {
        self.conditions
            .iter()
            .rev()
            .find(|condition| condition.kind == kind)
            .map_or(Verdict::Undecided, Condition::verdict)
    }

    /// The closing balance: no eigenvalue is farther than this from the middle
    /// of its enclosure.
    pub fn closing_bound(&self) -> Option<Dyadic> {
        self.enclosures
            .iter()
            .map(Enclosure::radius)
            .reduce(Dyadic::max)
    }

    /// The number of eigenvalues below σ, as far as the enclosures decide it.
    pub fn count_below(&self, sigma: &RBig) -> Count {
        if self.level.is_none() {
            return Count {
                at_least: 0,
                at_most: self.order,
            };
        }
        let below = |bound: fn(&Enclosure) -> &Dyadic| {
            self.enclosures
                .iter()
                .filter(|enclosure| bound(enclosure).to_rational() < *sigma)
                .count()
        };
        Count {
            at_least: below(Enclosure::upper),
            at_most: below(Enclosure::lower),
        }
    }

    /// The number of eigenvalues above σ.
    pub fn count_above(&self, sigma: &RBig) -> Count {
        if self.level.is_none() {
            return Count {
                at_least: 0,
                at_most: self.order,
            };
        }
        let above = |bound: fn(&Enclosure) -> &Dyadic| {
            self.enclosures
                .iter()
                .filter(|enclosure| bound(enclosure).to_rational() > *sigma)
                .count()
        };
        Count {
            at_least: above(Enclosure::lower),
            at_most: above(Enclosure::upper),
        }
    }

    /// The smallest number of proven significant digits over all eigenvalues;
    /// `None` when an enclosure holds zero or nothing is proven.
    pub fn digits(&self) -> Option<i64> {
        self.enclosures
            .iter()
            .map(Enclosure::digits)
            .reduce(Option::min)
            .flatten()
    }

    /// No eigenvalue of largest modulus is smaller than this: the largest of all
    /// proven lower bounds on a modulus.
    fn largest_at_least(&self) -> Dyadic {
        self.enclosures
            .iter()
            .filter(|enclosure| enclosure.lower().signum() * enclosure.upper().signum() > 0)
            .map(|enclosure| enclosure.lower().abs().min(enclosure.upper().abs()))
            .fold(Dyadic::ZERO, Dyadic::max)
    }

    /// For the eigenvalues whose enclosure holds zero, which has no significant
    /// digits: how many there are, and the largest N with every width at most
    /// 10^−N of the largest eigenvalue (no N when none is proven to differ from
    /// zero). `None` when zero is in no enclosure; an exact zero is not counted.
    pub fn held_at_zero(&self) -> Option<(usize, Option<i64>)> {
        let size = self.largest_at_least();
        let against = |enclosure: &Enclosure| {
            figure::digits_against(&(enclosure.upper() - enclosure.lower()), &size)
        };
        let at_zero: Vec<Option<i64>> = self
            .enclosures
            .iter()
            .filter(|enclosure| enclosure.digits().is_none())
            .map(against)
            .collect();
        let least = at_zero.iter().copied().reduce(Option::min)?;
        Some((at_zero.len(), least))
    }

    /// What this proof does not say, one sentence each.
    pub fn not_proved(&self) -> Vec<String> {
        let mut sentences = vec![
            "That the engine follows IEEE 754 binary64 with round to nearest is assumed, not proved.".to_string(),
            "Nothing is said of the model behind the matrix.".to_string(),
        ];
        for cluster in &self.clusters {
            let (first, last) = (cluster.first() + 1, cluster.last() + 1);
            if cluster.count() > 1 {
                sentences.push(format!(
                    "Eigenvalues {first} to {last} are not proven distinct, nor equal; single vectors within their space are not proven."
                ));
            } else if cluster.sine().is_none() {
                sentences.push(format!(
                    "The direction of eigenvector {first} is not proven."
                ));
            }
        }
        sentences
    }

    /// The trace of the eigenvalues, Σλₖ, between two exact numbers.
    pub fn trace(&self) -> Option<(Dyadic, Dyadic)> {
        self.level?;
        let sum = |bound: fn(&Enclosure) -> &Dyadic| {
            self.enclosures
                .iter()
                .fold(Dyadic::ZERO, |sum, enclosure| &sum + bound(enclosure))
        };
        Some((sum(Enclosure::lower), sum(Enclosure::upper)))
    }

    /// Πλₖ between two numbers, outward to `bits` bits: the determinant of A, or
    /// det A / det M for a pair.
    pub fn determinant(&self, bits: u32) -> Option<(Dyadic, Dyadic)> {
        self.level?;
        let mut low = Dyadic::one();
        let mut high = Dyadic::one();
        for enclosure in &self.enclosures {
            let corners = [
                &low * enclosure.lower(),
                &low * enclosure.upper(),
                &high * enclosure.lower(),
                &high * enclosure.upper(),
            ];
            let [a, b, c, d] = corners;
            low = a
                .clone()
                .min(b.clone())
                .min(c.clone())
                .min(d.clone())
                .rounded(bits, Toward::Down);
            high = a.max(b).max(c).max(d).rounded(bits, Toward::Up);
        }
        Some((low, high))
    }
}
