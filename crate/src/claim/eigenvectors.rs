//! Enclosures of eigenvectors from the exact tridiagonal form.
//!
//! Notation: vₖ the integer basis vectors, uₖ = vₖ/‖vₖ‖; in the basis uₖ the
//! matrix is T with off-diagonals βₖ > 0. An eigenvector of a block is
//! x = Σ yₖuₖ with y₁ = 1, y_{k+1} = ((λ − αₖ)yₖ − β_{k−1}y_{k−1})/βₖ, all in
//! intervals, so x is enclosed as narrowly as λ is refined.

use dashu_base::Signed;
use dashu_int::IBig;
use dashu_ratio::RBig;

use super::evidence::Evidence;
use super::interval::{one, zero, Complex, Precision, Real};
use crate::exact::{ExactEigenvalue, ExactSpectrum, Polynomial};

/// A space that stated vectors are held against.
pub(super) struct Space {
    /// Vectors in intervals that span it.
    pub(super) basis: Vec<Vec<Complex>>,
    /// Whether it is the eigenspace; otherwise it only holds it.
    pub(super) is_eigenspace: bool,
}

/// The eigenspace of the eigenvalue at `place` of the evidence; `None` when
/// there is no exact spectrum or the precision does not suffice.
pub(super) fn eigenspace(evidence: &Evidence<'_>, place: usize) -> Option<Space> {
    let spectrum = evidence.exact.as_ref()?;
    let eigenvalue = spectrum.eigenvalues.get(place)?;
    let precision = evidence.precision();
    let mut space = Vec::with_capacity(eigenvalue.multiplicity);
    for rows in spectrum.tridiagonal.block_ranges() {
        if is_root(
            eigenvalue,
            &spectrum.tridiagonal.block_polynomial(rows.clone()),
        ) {
            space.push(of_block(spectrum, rows, eigenvalue, precision)?);
        }
    }
    (space.len() == eigenvalue.multiplicity).then_some(Space {
        basis: space,
        is_eigenspace: true,
    })
}

/// Whether the eigenvalue is a root of a block's polynomial.
fn is_root(eigenvalue: &ExactEigenvalue, block: &Polynomial) -> bool {
    if let Some(value) = eigenvalue.root.exact() {
        return block.value(value).is_zero();
    }
    // The shared factor is square-free and has no other root in the interval.
    let shared = block.gcd(eigenvalue.root.polynomial());
    let (low, high) = (eigenvalue.root.lower(), eigenvalue.root.upper());
    shared.degree() > 0 && shared.value(&low).is_negative() != shared.value(&high).is_negative()
}

fn of_block(
    spectrum: &ExactSpectrum,
    rows: core::ops::Range<usize>,
    eigenvalue: &ExactEigenvalue,
    p: Precision,
) -> Option<Vec<Complex>> {
    let form = &spectrum.tridiagonal;
    let lambda = p.between(&eigenvalue.root.lower(), &eigenvalue.root.upper());
    let mut vector = vec![Complex::zero(); form.order()];
    let mut before: (Real, Real) = (zero(), zero());
    let mut y = one();
    for k in rows.clone() {
        let norm = p.sqrt(&p.of(&RBig::from(form.norms[k].clone())))?;
        let weight = p.div(&y, &norm)?;
        for (x, v) in vector.iter_mut().zip(&form.basis[k]) {
            let v = Complex {
                re: whole(&v.re, p),
                im: whole(&v.im, p),
            };
            *x = p.cadd(x, &p.scale(&v, &weight));
        }
        if k + 1 < rows.end {
            let beta = p.sqrt(&p.of(&form.squares[k]))?;
            let shifted = p.mul(&p.sub(&lambda, &p.of(&form.diagonal[k])), &y);
            let next = p.sub(&shifted, &p.mul(&before.0, &before.1));
            let next = p.div(&next, &beta)?;
            before = (beta, y);
            y = next;
        }
    }
    Some(vector)
}

fn whole(value: &IBig, p: Precision) -> Real {
    p.of(&RBig::from(value.clone()))
}
