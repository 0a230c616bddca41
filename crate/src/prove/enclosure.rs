//! What a proof says: enclosures and clusters. Only this stage can build them.
//!
//! Notation: λₖ the k-th eigenvalue in ascending order (k from 0 in code).

use dashu_ratio::RBig;

use crate::num::figure;
use crate::num::{Dyadic, Toward};

/// The theorem a bound rests on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Theorem {
    /// All eigenvalues at once from one residual (Kahan's conjecture).
    AllResiduals,
    /// An isolated eigenvalue from its own residual.
    OneResidual,
    /// An isolated eigenvalue from its squared residual over the gap.
    TempleKato,
    /// The eigenvalues of a diagonal problem are typed.
    Diagonal,
    /// The eigenvalues of a cluster from the squared coupling over the gap.
    BlockQuadratic,
}

impl Theorem {
    /// What the theorem says, in one sentence.
    pub fn statement(self) -> &'static str {
        match self {
            Self::AllResiduals => {
                "with a nonsingular X every eigenvalue, in ascending order, lies within ‖AX − MXΛ‖/σ_min(X) of its approximation"
            }
            Self::OneResidual => "an eigenvalue lies within its residual norm of the approximation, and no other can be there",
            Self::TempleKato => "the Rayleigh quotient errs by at most the squared residual over the gap",
            Self::Diagonal => "the eigenvalues of a diagonal problem are its diagonal entries",
            Self::BlockQuadratic => {
                "the eigenvalues of a block err by at most the squared coupling to the rest over the gap"
            }
        }
    }

    /// The published source.
    pub fn source(self) -> &'static str {
        match self {
            Self::AllResiduals => {
                "Cao, Xie and Li, SIAM J. Matrix Anal. Appl. 17 (1996); Weyl 1912"
            }
            Self::OneResidual => "Krylov; Weinstein, Proc. Natl. Acad. Sci. 20 (1934)",
            Self::TempleKato => {
                "Temple, Proc. R. Soc. A 119 (1928); Kato, J. Phys. Soc. Japan 4 (1949)"
            }
            Self::Diagonal => "by definition",
            Self::BlockQuadratic => {
                "Mathias, SIAM J. Matrix Anal. Appl. 19 (1998); Sylvester's law of inertia"
            }
        }
    }
}

/// A proven interval for one eigenvalue of the typed problem, counted with
/// multiplicity.
#[derive(Clone, Debug)]
pub struct Enclosure {
    index: usize,
    lower: Dyadic,
    upper: Dyadic,
    theorem: Theorem,
}

impl Enclosure {
    pub(super) fn new(index: usize, lower: Dyadic, upper: Dyadic, theorem: Theorem) -> Self {
        Self {
            index,
            lower,
            upper,
            theorem,
        }
    }

    /// Position in ascending order, from 0.
    pub fn index(&self) -> usize {
        self.index
    }

    /// λₖ is not below this number.
    pub fn lower(&self) -> &Dyadic {
        &self.lower
    }

    /// λₖ is not above this number.
    pub fn upper(&self) -> &Dyadic {
        &self.upper
    }

    /// The middle of the interval: within [`Enclosure::radius`] of λₖ.
    pub fn middle(&self) -> Dyadic {
        (&self.lower + &self.upper).scaled(-1)
    }

    /// Half the width.
    pub fn radius(&self) -> Dyadic {
        (&self.upper - &self.lower).scaled(-1)
    }

    /// The theorem the bounds rest on.
    pub fn theorem(&self) -> Theorem {
        self.theorem
    }

    /// Whether the number lies in the closed interval.
    pub fn contains(&self, number: &RBig) -> bool {
        self.lower.to_rational() <= *number && *number <= self.upper.to_rational()
    }

    /// The largest N with width ≤ 10^−N · |λₖ|; `None` when zero is inside.
    /// An exactly known value has as many digits as asked for (`i64::MAX`).
    pub fn digits(&self) -> Option<i64> {
        figure::proven_digits(&self.lower, &self.upper)
    }

    /// The value in the metrologist's form: see [`figure::bounded`].
    pub fn figure(&self) -> String {
        figure::bounded(&self.lower, &self.upper, None)
    }

    /// Decimal lower and upper bound, rounded outward: see [`figure::outward`].
    pub fn decimals(&self) -> (String, String) {
        figure::outward(&self.lower, &self.upper)
    }
}

/// Neighbouring eigenvalues that are not proven apart, with the space their
/// vectors span; a single eigenvalue proven apart is a cluster of one.
#[derive(Clone, Debug)]
pub struct Cluster {
    first: usize,
    last: usize,
    lower: Dyadic,
    upper: Dyadic,
    gap: Option<Dyadic>,
    sine: Option<Dyadic>,
}

impl Cluster {
    pub(super) fn new(
        (first, last): (usize, usize),
        (lower, upper): (Dyadic, Dyadic),
        gap: Option<Dyadic>,
        sine: Option<Dyadic>,
    ) -> Self {
        Self {
            first,
            last,
            lower,
            upper,
            gap,
            sine,
        }
    }

    /// Index of the lowest eigenvalue in it, from 0.
    pub fn first(&self) -> usize {
        self.first
    }

    /// Index of the highest eigenvalue in it, from 0.
    pub fn last(&self) -> usize {
        self.last
    }

    /// Proven number of eigenvalues in it, with multiplicity.
    pub fn count(&self) -> usize {
        self.last - self.first + 1
    }

    /// No eigenvalue of the cluster is below this number.
    pub fn lower(&self) -> &Dyadic {
        &self.lower
    }

    /// No eigenvalue of the cluster is above this number.
    pub fn upper(&self) -> &Dyadic {
        &self.upper
    }

    /// Every eigenvalue outside the cluster is proven to be at least this far
    /// from it; `None` when the cluster holds all eigenvalues.
    pub fn gap(&self) -> Option<&Dyadic> {
        self.gap.as_ref()
    }

    /// Proven bound on the sine of the largest angle, in the inner product of
    /// the metric, between the space of the approximate vectors first..=last and
    /// the invariant space; `None` when nothing below 1 is proven (Davis and
    /// Kahan, SIAM J. Numer. Anal. 7, 1970).
    pub fn sine(&self) -> Option<&Dyadic> {
        self.sine.as_ref()
    }

    /// The same bound as a double, rounded up.
    pub fn sine_up(&self) -> Option<f64> {
        self.sine.as_ref().map(|sine| sine.to_f64(Toward::Up))
    }

    /// The common figure of the cluster: see [`figure::bounded`].
    pub fn figure(&self) -> String {
        figure::bounded(&self.lower, &self.upper, None)
    }

    /// Decimal bounds of the whole cluster, rounded outward.
    pub fn decimals(&self) -> (String, String) {
        figure::outward(&self.lower, &self.upper)
    }
}
