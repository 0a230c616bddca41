//! From radii to intervals, and from intervals to clusters.
//!
//! Notation: λ̃ₖ the approximate values ascending, ε a radius that holds for all
//! k, ηₖ the radius of one column (Krylov, Weinstein). Everything exact.

use std::ops::RangeInclusive;

use crate::num::{Dyadic, Toward};

use super::enclosure::{Cluster, Enclosure, Theorem};

/// Bits kept in bounds whose last bits carry no information.
const BOUND_BITS: u32 = 64;

/// Proven intervals in ascending order, in some scale.
#[derive(Clone, Debug)]
pub(super) struct Spectrum {
    /// λ̃, ascending.
    pub values: Vec<Dyadic>,
    /// ηₖ; `None` where nothing is known.
    pub radii: Vec<Option<Dyadic>>,
    lower: Vec<Dyadic>,
    upper: Vec<Dyadic>,
    theorems: Vec<Theorem>,
}

impl Spectrum {
    /// |λₖ − λ̃ₖ| ≤ `radius` for all k, and then ηₖ where λₖ is isolated.
    pub fn linear(values: Vec<Dyadic>, radius: &Dyadic, radii: Vec<Option<Dyadic>>) -> Self {
        let lower = values.iter().map(|value| value - radius).collect();
        let upper = values.iter().map(|value| value + radius).collect();
        let theorems = vec![Theorem::AllResiduals; values.len()];
        let mut spectrum = Self {
            values,
            radii,
            lower,
            upper,
            theorems,
        };
        spectrum.isolate();
        spectrum
    }

    /// An eigenvalue lies within ηₖ of λ̃ₖ. If that interval meets no other
    /// eigenvalue's, it can only be λₖ.
    fn isolate(&mut self) {
        let isolated: Vec<usize> = (0..self.values.len())
            .filter(|&k| self.cluster_at(k) == (k..=k))
            .collect();
        for k in isolated {
            let Some(radius) = self.radii[k].clone() else {
                continue;
            };
            let (low, high) = (&self.values[k] - &radius, &self.values[k] + &radius);
            let clear_below = k == 0 || self.upper[k - 1] < low;
            let clear_above = self.upper.len() == k + 1 || high < self.lower[k + 1];
            if clear_below && clear_above {
                self.tighten(k, low, high, Theorem::OneResidual);
            }
        }
    }

    /// Intersects the interval of λₖ with another proven one.
    pub fn tighten(&mut self, k: usize, lower: Dyadic, upper: Dyadic, theorem: Theorem) {
        if self.lower[k] < lower {
            self.lower[k] = lower;
            self.theorems[k] = theorem;
        }
        if upper < self.upper[k] {
            self.upper[k] = upper;
            self.theorems[k] = theorem;
        }
    }

    /// λₖ ≤ λₖ₊₁, so bounds may be made monotone.
    pub fn ascend(&mut self) {
        for k in 1..self.lower.len() {
            if self.lower[k] < self.lower[k - 1] {
                self.lower[k] = self.lower[k - 1].clone();
            }
        }
        for k in (1..self.upper.len()).rev() {
            if self.upper[k] < self.upper[k - 1] {
                self.upper[k - 1] = self.upper[k].clone();
            }
        }
    }

    /// Proven lower bound of λₖ.
    pub fn lower(&self, k: usize) -> &Dyadic {
        &self.lower[k]
    }

    /// Proven upper bound of λₖ.
    pub fn upper(&self, k: usize) -> &Dyadic {
        &self.upper[k]
    }

    /// Proven lower bound of λₖ₊₁, if there is one.
    pub fn above(&self, k: usize) -> Option<&Dyadic> {
        self.lower.get(k + 1)
    }

    /// Proven upper bound of λₖ₋₁, if there is one.
    pub fn below(&self, k: usize) -> Option<&Dyadic> {
        k.checked_sub(1).map(|k| &self.upper[k])
    }

    /// Order of the problem.
    pub fn len(&self) -> usize {
        self.values.len()
    }

    fn apart(&self, k: usize) -> bool {
        self.upper[k] < self.lower[k + 1]
    }

    fn cluster_at(&self, k: usize) -> RangeInclusive<usize> {
        let mut first = k;
        while first > 0 && !self.apart(first - 1) {
            first -= 1;
        }
        let mut last = k;
        while last + 1 < self.len() && !self.apart(last) {
            last += 1;
        }
        first..=last
    }

    /// Maximal runs of indices whose neighbours are not proven apart. Bounds
    /// must be monotone ([`Spectrum::ascend`]).
    pub fn groups(&self) -> Vec<RangeInclusive<usize>> {
        let mut groups = Vec::new();
        let mut first = 0;
        for k in 0..self.len() {
            if k + 1 == self.len() || self.apart(k) {
                groups.push(first..=k);
                first = k + 1;
            }
        }
        groups
    }

    /// Distance from [`low`, `high`] to the eigenvalues outside the group: at
    /// least this; `None` when there are none. Not positive if not proven.
    pub fn distance(
        &self,
        group: &RangeInclusive<usize>,
        low: &Dyadic,
        high: &Dyadic,
    ) -> Option<Dyadic> {
        let below = (*group.start() > 0).then(|| low - &self.upper[group.start() - 1]);
        let above = (group.end() + 1 < self.len()).then(|| &self.lower[group.end() + 1] - high);
        match (below, above) {
            (Some(below), Some(above)) => Some(below.min(above)),
            (below, above) => below.or(above),
        }
    }

    /// sin Θ ≤ ‖L⁻¹R_K‖/(σ_min·δ), δ from [λ̃_first, λ̃_last] to the eigenvalues
    /// outside the group (Davis and Kahan 1970, the sin Θ theorem).
    fn sine(&self, group: &RangeInclusive<usize>) -> Option<Dyadic> {
        let (low, high) = (&self.values[*group.start()], &self.values[*group.end()]);
        let Some(distance) = self.distance(group, low, high) else {
            // The space is the whole space.
            return Some(Dyadic::ZERO);
        };
        let mut squares = Dyadic::ZERO;
        for k in group.clone() {
            let radius = self.radii[k].as_ref()?.rounded(BOUND_BITS, Toward::Up);
            squares = (&squares + &(&radius * &radius)).rounded(BOUND_BITS, Toward::Up);
        }
        let sine = squares
            .sqrt_up(BOUND_BITS)
            .divided(&distance, BOUND_BITS, Toward::Up)?;
        (sine < Dyadic::one()).then_some(sine)
    }

    /// Enclosures and clusters in the typed scale: values · 2^`scale`.
    pub fn finish(&self, scale: i64) -> (Vec<Enclosure>, Vec<Cluster>) {
        let enclosures = (0..self.len())
            .map(|k| {
                Enclosure::new(
                    k,
                    self.lower[k].scaled(scale),
                    self.upper[k].scaled(scale),
                    self.theorems[k],
                )
            })
            .collect();
        let clusters = self
            .groups()
            .into_iter()
            .map(|group| {
                let (lower, upper) = (&self.lower[*group.start()], &self.upper[*group.end()]);
                let gap = self.distance(&group, lower, upper);
                Cluster::new(
                    (*group.start(), *group.end()),
                    (lower.scaled(scale), upper.scaled(scale)),
                    gap.map(|gap| gap.scaled(scale)),
                    self.sine(&group),
                )
            })
            .collect();
        (enclosures, clusters)
    }
}
