//! The exact spectrum: multiplicities, closed forms and isolating intervals.

use std::sync::Arc;

use dashu_ratio::RBig;

use super::closed::{close, ClosedForm};
use super::limits::{ExactError, Limits, Meter};
use super::polynomial::Polynomial;
use super::root::{isolate, Isolated};
use super::tridiagonal::{tridiagonal, ExactTridiagonal};
use crate::control::Control;
use crate::problem::Problem;

/// One exact eigenvalue.
#[derive(Clone, Debug)]
pub struct ExactEigenvalue {
    /// Index of its first copy in ascending order, from 0.
    pub first_index: usize,
    /// Exact multiplicity.
    pub multiplicity: usize,
    /// Closed form, where it is rational or a quadratic surd. `None` says that
    /// it is neither.
    pub form: Option<ClosedForm>,
    /// Interval that holds this eigenvalue and no other; refine it at will.
    pub root: Isolated,
}

/// All eigenvalues with exact multiplicities.
#[derive(Clone, Debug)]
pub struct ExactSpectrum {
    /// The tridiagonal form the spectrum comes from.
    pub tridiagonal: ExactTridiagonal,
    /// Monic characteristic polynomial, ascending powers.
    pub characteristic: Vec<RBig>,
    /// Distinct eigenvalues, ascending; their intervals are disjoint.
    pub eigenvalues: Vec<ExactEigenvalue>,
}

/// The exact spectrum of `problem`.
///
/// Cost: that of [`tridiagonal`], and about n² refinements of roots.
///
/// # Errors
/// As [`tridiagonal`].
pub fn spectrum(
    problem: &Problem,
    limits: &Limits,
    control: &mut dyn Control,
) -> Result<ExactSpectrum, ExactError> {
    let mut form = tridiagonal(problem, limits, control)?;
    let mut meter = Meter::new(limits, control);
    let characteristic = form.characteristic();
    let polynomial = Polynomial::from_rationals(&characteristic);
    for coefficient in polynomial.coefficients() {
        meter.see(coefficient)?;
    }
    let mut eigenvalues = Vec::new();
    let factors = polynomial.square_free();
    for (place, (multiplicity, factor)) in factors.iter().enumerate() {
        meter.progress(place as f64 / factors.len() as f64)?;
        let factor = Arc::new(factor.clone());
        let mut roots = isolate(&factor);
        let forms = close(&mut roots, &factor);
        for (root, form) in roots.into_iter().zip(forms) {
            eigenvalues.push(ExactEigenvalue {
                first_index: 0,
                multiplicity: *multiplicity,
                form,
                root,
            });
        }
    }
    separate(&mut eigenvalues, &mut meter)?;
    let mut index = 0;
    for eigenvalue in &mut eigenvalues {
        eigenvalue.first_index = index;
        index += eigenvalue.multiplicity;
    }
    form.largest_bits = form.largest_bits.max(meter.largest_bits);
    Ok(ExactSpectrum {
        tridiagonal: form,
        characteristic,
        eigenvalues,
    })
}

/// Sorts ascending and refines until no two intervals touch. The eigenvalues
/// are distinct numbers, so this ends.
fn separate(eigenvalues: &mut [ExactEigenvalue], meter: &mut Meter<'_>) -> Result<(), ExactError> {
    let mut bits = 8;
    loop {
        eigenvalues.sort_by_cached_key(|eigenvalue| eigenvalue.root.lower());
        let mut touching = false;
        for place in 1..eigenvalues.len() {
            if eigenvalues[place - 1].root.upper() >= eigenvalues[place].root.lower() {
                touching = true;
                eigenvalues[place - 1].root.refine(bits);
                eigenvalues[place].root.refine(bits);
            }
        }
        if !touching {
            return Ok(());
        }
        meter.progress(1.0)?;
        bits *= 2;
    }
}

impl ExactSpectrum {
    /// Bits of the largest integer met on the way.
    pub fn largest_bits(&self) -> usize {
        self.tridiagonal.largest_bits
    }

    /// The eigenvalue that holds position `index` of the ascending order.
    pub fn at(&self, index: usize) -> Option<&ExactEigenvalue> {
        self.eigenvalues
            .iter()
            .find(|e| e.first_index <= index && index < e.first_index + e.multiplicity)
    }

    /// Refines every interval to a width of at most 2^−bits.
    pub fn refine(&mut self, bits: i64) {
        for eigenvalue in &mut self.eigenvalues {
            eigenvalue.root.refine(bits);
        }
    }
}
