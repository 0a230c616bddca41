//! Quadratic bounds for the eigenvalues of a cluster.
//!
//! Notation: K the cluster's indices, J the others, c a number near the
//! cluster, Â = XᴴAX = (I + F)Λ + G, M̂ = I + F; h the hull of the cluster.
//!
//! For λ in the hull put P(λ) = Â − λM̂. By Sylvester's law of inertia (E. V.
//! Haynsworth's additivity, Linear Algebra Appl. 1, 1968) the number of
//! eigenvalues below λ is that of negative eigenvalues of P_JJ plus that of
//! S = P_KK − P_KJ P_JJ⁻¹ P_JK. P_JJ = (I + F_JJ)(Λ_J − λ) + G_JJ has smallest
//! singular value at least d = (1 − φ)·dist(Λ_J, h) − ‖G‖, and stays so when F
//! and G shrink to zero; so its inertia is that of Λ_J − λ. P_JK = G_JK +
//! F_JK(Λ_K − λ) is at most ‖G_JK‖ + φw, w the farthest from Λ_K in the hull.
//! Hence ‖S − P_KK‖ ≤ τ = (‖G_JK‖ + φw)²/d, and the k-th eigenvalue of the cluster
//! is within τ/(1 − φ) of the k-th of the small pencil (Â_KK, M̂_KK): Mathias
//! (SIAM J. Matrix Anal. Appl. 19, 1998) has such bounds for M = I.
//!
//! The small pencil, about c: H = Â_KK − cM̂_KK = G_KK + (I + F_KK)(Λ_K − c), and
//! (H, I + F_KK) has the eigenvalues of (I + F)^{−½}H(I + F)^{−½}
//! = H − (FH + HF)/2 + Z with ‖Z‖ ≤ 2φ²‖H‖ for φ ≤ 0.1 (binomial series).

use std::ops::RangeInclusive;

use nalgebra::DMatrix;

use crate::control::Unattended;
use crate::matrix::kernels::product;
use crate::matrix::Dense;
use crate::num::upper::UNIT;
use crate::num::{Dyadic, Toward, Upper};

use super::accurate::root_sum_square;
use super::enclosure::Theorem;
use super::frame::{times_power, Frame};
use super::jacobi;
use super::norms::{modulus_up, Norms, Rounding};
use super::products::Watch;
use super::residual;
use super::spectrum::Spectrum;
use super::tight::{Certificate, QUOTIENT_BITS};

/// Clusters up to this size get entries of G and F by accurate dot products.
const ACCURATE_SIZE: usize = 40;

/// Tightens every interval of a cluster of two or more.
pub(super) fn tighten(
    certificate: &Certificate<'_>,
    group: &RangeInclusive<usize>,
    spectrum: &mut Spectrum,
) {
    let Some(small) = SmallPencil::of(certificate, group) else {
        return;
    };
    let Some(outside) = coupling_bound(certificate, group, spectrum) else {
        return;
    };
    let Some(inside) = small.radius.exact() else {
        return;
    };
    let radius = &inside + &outside;
    let center = Dyadic::from_f64(small.center).unwrap_or(Dyadic::ZERO);
    for (k, value) in group.clone().zip(&small.values) {
        let middle = &center + value;
        spectrum.tighten(
            k,
            &middle - &radius,
            &middle + &radius,
            Theorem::BlockQuadratic,
        );
    }
}

/// τ/(1 − φ), rounded up; `None` if the gap is not proven large enough.
fn coupling_bound(
    certificate: &Certificate<'_>,
    group: &RangeInclusive<usize>,
    spectrum: &Spectrum,
) -> Option<Dyadic> {
    let (first, last) = (*group.start(), *group.end());
    if last - first + 1 == spectrum.len() {
        return Some(Dyadic::ZERO);
    }
    let (low, high) = (spectrum.lower(first), spectrum.upper(last));
    let values = &spectrum.values;
    let below = (first > 0).then(|| low - &values[first - 1]);
    let above = (last + 1 < values.len()).then(|| &values[last + 1] - high);
    let distance = match (below, above) {
        (Some(below), Some(above)) => below.min(above),
        (below, above) => below.or(above)?,
    };
    let floor = Dyadic::from_f64(certificate.floor())?;
    let gap = &(&distance * &floor) - &certificate.coupling_norm.exact()?;
    let width = (&values[last] - low)
        .abs()
        .max((high - &values[first]).abs());
    let mut squares = Vec::new();
    for k in group.clone() {
        let entries = (0..values.len()).filter(|j| !group.contains(j)).map(|j| {
            let im = certificate
                .coupling
                .im
                .as_ref()
                .map_or(0.0, |im| im[(j, k)]);
            Upper::of(modulus_up(certificate.coupling.re[(j, k)], im))
        });
        squares.push(root_sum_square(entries).plus(certificate.coupling_loss[k]));
    }
    let defect = certificate
        .gram
        .defect
        .times(Upper::of(width.to_f64(Toward::Up)));
    let coupling = root_sum_square(squares.into_iter()).plus(defect);
    let tau = coupling
        .times(coupling)
        .exact()?
        .divided(&gap, QUOTIENT_BITS, Toward::Up)?;
    tau.divided(&floor, QUOTIENT_BITS, Toward::Up)
}

/// The eigenvalues of the small pencil: center + values, each within radius.
struct SmallPencil {
    center: f64,
    values: Vec<Dyadic>,
    radius: Upper,
}

impl SmallPencil {
    fn of(certificate: &Certificate<'_>, group: &RangeInclusive<usize>) -> Option<Self> {
        let values = &certificate.frame.values[group.clone()];
        let size = values.len();
        // The value that leaves the smallest differences.
        let center = values[size / 2];
        let offsets: Vec<f64> = values.iter().map(|value| value - center).collect();
        let blocks = Blocks::of(certificate, group);
        let (pencil, error) = blocks.about(&offsets);
        let corrected = blocks.without_metric(pencil, certificate.gram.defect, error);
        let (matrix, error) = corrected?;
        let (values, radius) = enclosed(&matrix, certificate.frame.order)?;
        Some(Self {
            center,
            values,
            radius: radius.plus(error),
        })
    }
}

/// G_KK and F_KK in doubles, with bounds on the Frobenius norms of their errors.
struct Blocks {
    coupling: Dense,
    coupling_error: Upper,
    defect: Dense,
    defect_error: Upper,
}

impl Blocks {
    fn of(certificate: &Certificate<'_>, group: &RangeInclusive<usize>) -> Self {
        let size = group.clone().count();
        if size <= ACCURATE_SIZE {
            return Self::accurately(certificate, group);
        }
        let cut = |matrix: &Dense| {
            let plane = |plane: &DMatrix<f64>| {
                plane
                    .view((*group.start(), *group.start()), (size, size))
                    .into_owned()
            };
            Dense {
                re: plane(&matrix.re),
                im: matrix.im.as_ref().map(plane),
            }
        };
        Self {
            coupling: cut(&certificate.coupling),
            coupling_error: root_sum_square(group.clone().map(|k| certificate.coupling_loss[k])),
            defect: cut(&certificate.gram.defects),
            defect_error: certificate.gram.defects_error,
        }
    }

    fn accurately(certificate: &Certificate<'_>, group: &RangeInclusive<usize>) -> Self {
        let size = group.clone().count();
        let complex = certificate.frame.vectors.is_complex();
        let zeros = || DMatrix::<f64>::zeros(size, size);
        let (mut g_re, mut g_im, mut f_re, mut f_im) = (zeros(), zeros(), zeros(), zeros());
        let mut g_errors = Vec::new();
        let mut f_errors = Vec::new();
        let unit = Upper::of(UNIT);
        for (column, k) in group.clone().enumerate() {
            for (row, j) in group.clone().enumerate() {
                let (re, im) = certificate.accurate_coupling(j, k);
                for (plane, pair) in [(&mut g_re, re), (&mut g_im, im)] {
                    plane[(row, column)] = pair.high + pair.low;
                    g_errors.push(pair.error.plus(unit.times(Upper::of(pair.high + pair.low))));
                }
                let (re, im) = certificate.accurate_gram(j, k);
                let one = if j == k { 1.0 } else { 0.0 };
                for (plane, pair, one) in [(&mut f_re, re, one), (&mut f_im, im, 0.0)] {
                    // 1 is near the high part, if not nothing here is used.
                    let entry = (pair.high - one) + pair.low;
                    plane[(row, column)] = entry;
                    let rounding = unit.times(Upper::of(pair.high - one).plus(Upper::of(entry)));
                    f_errors.push(pair.error.plus(rounding));
                }
            }
        }
        Self {
            coupling: Dense {
                re: g_re,
                im: complex.then_some(g_im),
            },
            coupling_error: root_sum_square(g_errors.into_iter()),
            defect: Dense {
                re: f_re,
                im: complex.then_some(f_im),
            },
            defect_error: root_sum_square(f_errors.into_iter()),
        }
    }

    /// H = G_KK + (I + F_KK)D for D = diag(offsets), made exactly Hermitian, and
    /// a bound on the norm of its error.
    fn about(&self, offsets: &[f64]) -> (Dense, Upper) {
        let size = offsets.len();
        let mut matrix = self.coupling.clone();
        for (k, &offset) in offsets.iter().enumerate() {
            for j in 0..size {
                let one = if j == k { offset } else { 0.0 };
                matrix.re[(j, k)] += one + self.defect.re[(j, k)] * offset;
                if let (Some(im), Some(defect)) = (&mut matrix.im, &self.defect.im) {
                    im[(j, k)] += defect[(j, k)] * offset;
                }
            }
        }
        let widest = offsets
            .iter()
            .fold(Upper::ZERO, |most, offset| most.most(Upper::of(*offset)));
        // Four roundings at most an entry (the offset's own included), of terms
        // whose norms add up to this.
        let terms = Norms::of(&self.coupling)
            .frobenius
            .plus(widest.times(Upper::of(size as f64).sqrt()))
            .plus(widest.times(Norms::of(&self.defect).frobenius));
        let rounding = terms.times(Upper::of(8.0 * UNIT)).plus(Upper::of(1e-300));
        let error = self
            .coupling_error
            .plus(widest.times(self.defect_error))
            .plus(rounding);
        (hermitian_part(&matrix), error)
    }

    /// H − (FH + HF)/2, and a bound on its distance to (I+F)^{−½}H(I+F)^{−½}.
    fn without_metric(&self, pencil: Dense, defect: Upper, error: Upper) -> Option<(Dense, Upper)> {
        let size = pencil.rows();
        let turned = product(&self.defect, &pencil);
        let norms = Norms::of(&pencil);
        let mut corrected = pencil.clone();
        let symmetric = hermitian_part(&turned);
        corrected.re -= &symmetric.re;
        if let (Some(im), Some(by)) = (&mut corrected.im, &symmetric.im) {
            *im -= by;
        }
        let rounding = Rounding::new(size, size, pencil.is_complex()).factor;
        let f_norm = Norms::of(&self.defect).frobenius;
        // (1 − φ)^{−1} at most stretches the error of H by 1.2.
        let total = error
            .times(Upper::of(1.25))
            .plus(self.defect_error.times(norms.spectral))
            .plus(
                Upper::of(2.0)
                    .times(defect)
                    .times(defect)
                    .times(norms.spectral),
            )
            .plus(rounding.times(f_norm).times(norms.frobenius))
            .plus(Upper::of(4.0 * UNIT).times(norms.frobenius));
        total
            .is_known()
            .then_some((hermitian_part(&corrected), total))
    }
}

fn hermitian_part(matrix: &Dense) -> Dense {
    let re = (&matrix.re + matrix.re.transpose()) * 0.5;
    let im = matrix.im.as_ref().map(|im| (im - im.transpose()) * 0.5);
    Dense { re, im }
}

/// Eigenvalues of a small Hermitian matrix of doubles and one radius for all,
/// by Jacobi rotations and the linear bound on their result.
fn enclosed(matrix: &Dense, order: usize) -> Option<(Vec<Dyadic>, Upper)> {
    let size = matrix.rows();
    let largest = Norms::of(matrix).frobenius;
    if largest == Upper::ZERO {
        return Some((vec![Dyadic::ZERO; size], Upper::ZERO));
    }
    let power = largest.exact()?.magnitude()?;
    let scaled = |plane: &DMatrix<f64>| plane.map(|x| times_power(x, -power));
    let unit = Dense {
        re: scaled(&matrix.re),
        im: matrix.im.as_ref().map(scaled),
    };
    let budget = 6_000 + order * order * order / (8 * size);
    let (values, vectors) = jacobi::eigen(&unit, budget);
    let mut frame = Frame::of_doubles(unit, vectors, values);
    let mut watch = Watch {
        control: &mut Unattended,
        done: 0.0,
    };
    let (_, residual) = residual::measure(&mut frame, &mut watch).ok()?;
    let values = frame
        .values
        .iter()
        .map(|&value| Some(Dyadic::from_f64(value)?.scaled(power)))
        .collect::<Option<_>>()?;
    let radius = residual.radius.exact()?.scaled(power).to_f64(Toward::Up);
    Some((values, Upper::of(radius)))
}
