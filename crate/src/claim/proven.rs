//! Evidence from the proof stage: enclosures, and spaces from approximate
//! vectors with a proven angle.
//!
//! Notation: x̃ an approximate vector, s a proven bound on the sine of its
//! angle to the invariant space. Its projection onto that space is an exact
//! vector of the space and differs from x̃ by at most s·‖x̃‖, in the inner
//! product of the metric for a pair. There |eᵢ| ≤ √((M⁻¹)ᵢᵢ)·‖e‖_M.

use dashu_ratio::RBig;

use super::eigenvectors::Space;
use super::evidence::{entries, EnclosedValue};
use super::interval::{one, zero, Complex, Precision, Real};
use super::standard::cholesky;
use crate::control::Unattended;
use crate::pairs::Approximation;
use crate::problem::Problem;
use crate::prove::{prove, Level, Proof};

/// A proof that can be taken further.
pub(super) struct Proven<'a> {
    problem: &'a Problem,
    approximation: &'a Approximation,
    proof: Proof,
}

/// Beyond this order the deep level and a pair's vectors take too long to be
/// run unasked (measured; no other source).
const DEEP_ORDER: usize = 50;
/// Digits at which deepening stops.
const DEEP_DIGITS: u32 = 160;

impl<'a> Proven<'a> {
    pub(super) fn new(
        problem: &'a Problem,
        approximation: &'a Approximation,
        proof: Proof,
    ) -> Self {
        Self {
            problem,
            approximation,
            proof,
        }
    }

    /// One interval for each eigenvalue.
    pub(super) fn values(&self) -> Vec<EnclosedValue> {
        let enclosures = self.proof.enclosures().iter();
        enclosures
            .map(|enclosure| EnclosedValue {
                lower: enclosure.lower().to_rational(),
                upper: enclosure.upper().to_rational(),
                first: enclosure.index(),
                count: 1,
            })
            .collect()
    }

    /// Runs the next level; false when there is none.
    pub(super) fn narrow(&mut self) -> bool {
        let deep_allowed = self.problem.matrix.order() <= DEEP_ORDER;
        let next = match self.proof.level() {
            None => return false,
            Some(Level::Quick) => Level::Tight,
            Some(Level::Tight) if deep_allowed => Level::Deep { digits: 40 },
            Some(Level::Deep { digits }) if digits < DEEP_DIGITS => Level::Deep {
                digits: digits.saturating_mul(2),
            },
            Some(_) => return false,
        };
        let proof = prove(self.problem, self.approximation, next, &mut Unattended);
        if proof.level().is_none() || proof.level() == self.proof.level() {
            return false;
        }
        self.proof = proof;
        true
    }

    /// The space of the cluster that holds eigenvalue `index`.
    pub(super) fn space(&self, index: usize, p: Precision) -> Option<Space> {
        let cluster = self.proof.cluster_of(index)?;
        let sine = cluster.sine()?.to_rational();
        if sine >= RBig::ONE {
            return None;
        }
        let weights = Weights::new(self.problem, p)?;
        let mut basis = Vec::with_capacity(cluster.count());
        for k in cluster.first()..=cluster.last() {
            basis.push(self.enclosed(k, &sine, &weights, p)?);
        }
        Some(Space {
            basis,
            is_eigenspace: cluster.count() == 1,
        })
    }

    /// Approximate vector `k` widened to hold its projection.
    fn enclosed(
        &self,
        k: usize,
        sine: &RBig,
        weights: &Weights,
        p: Precision,
    ) -> Option<Vec<Complex>> {
        let vectors = &self.approximation.vectors;
        let order = vectors.rows();
        let exact = |x: f64| RBig::try_from(x).ok().map(|x| p.of(&x));
        let mut vector = Vec::with_capacity(order);
        for row in 0..order {
            let im = match &vectors.im {
                Some(im) => exact(im[(row, k)])?,
                None => zero(),
            };
            vector.push(Complex {
                re: exact(vectors.re[(row, k)])?,
                im,
            });
        }
        let length = weights.length(&vector, p)?;
        let radius = p.mul(&length, &p.of(sine));
        let complex = vectors.is_complex();
        for (row, x) in vector.iter_mut().enumerate() {
            let radius = p.mul(&radius, &weights.components[row]).upper_ratio();
            let spread = p.between(&-radius.clone(), &radius);
            x.re = p.add(&x.re, &spread);
            if complex {
                x.im = p.add(&x.im, &spread);
            }
        }
        Some(vector)
    }
}

/// How the metric weighs a vector and its components.
struct Weights {
    metric: Option<Vec<Complex>>,
    /// √((M⁻¹)ᵢᵢ), or 1 without a metric.
    components: Vec<Real>,
}

impl Weights {
    fn new(problem: &Problem, p: Precision) -> Option<Self> {
        let order = problem.matrix.order();
        let Some(metric) = &problem.metric else {
            return Some(Self {
                metric: None,
                components: vec![one(); order],
            });
        };
        if order > DEEP_ORDER {
            return None;
        }
        let factor = cholesky(metric, p).ok()?;
        let mut components = Vec::with_capacity(order);
        for unit in 0..order {
            // (M⁻¹)ᵢᵢ = ‖L⁻¹eᵢ‖².
            let mut solved: Vec<Complex> = vec![Complex::zero(); order];
            let mut square = zero();
            for row in unit..order {
                let mut value = Complex::zero();
                if row == unit {
                    value.re = one();
                }
                for k in unit..row {
                    value = p.csub(&value, &p.cmul(&factor[row * order + k], &solved[k]));
                }
                let inverse = p.div(&one(), &factor[row * order + row].re)?;
                solved[row] = p.scale(&value, &inverse);
                square = p.add(&square, &p.norm_squared(&solved[row]));
            }
            components.push(p.sqrt(&square)?);
        }
        Some(Self {
            metric: Some(entries(metric, p)),
            components,
        })
    }

    /// ‖x‖ in the metric.
    fn length(&self, x: &[Complex], p: Precision) -> Option<Real> {
        let Some(metric) = &self.metric else {
            let square = x
                .iter()
                .fold(zero(), |sum, x| p.add(&sum, &p.norm_squared(x)));
            return p.sqrt(&square);
        };
        let order = x.len();
        let mut square = zero();
        for row in 0..order {
            for col in 0..order {
                let moved = p.cmul(&metric[row * order + col], &x[col]);
                square = p.add(&square, &p.cmul(&x[row].conj(), &moved).re);
            }
        }
        p.sqrt(&square)
    }
}
