//! Refinement of eigenpairs in fixed point. Nothing here is trusted: what comes
//! out is certified afresh.
//!
//! One stage at p bits: X is made M-orthonormal by Newton's iteration for the
//! inverse square root of XᴴMX, then S = XᴴAX, nearly diagonal, is diagonalised
//! by cyclic Jacobi rotations, which X follows. Rotations converge quadratically
//! and need no decision about clusters, exact repetitions included. Stages double
//! the precision. (T. Ogita and K. Aishima, Japan J. Indust. Appl. Math. 35, 2018
//! refine by the same two matrices; their first-order step in place of the
//! rotations divides by gaps.)
//!
//! Notation: p the bits after the point, F = XᴴMX − I.

use dashu_base::{Abs, SquareRoot, UnsignedAbs};
use dashu_int::IBig;

use crate::control::{Control, Flow, Stage};

use super::fixed::{largest_bits, Fixed};

/// Off-diagonals of this many units times n² or fewer are left alone: a sweep
/// adds some n units of rounding to each, which rotating would chase for ever.
const NEGLIGIBLE: usize = 64;

/// Most sweeps in a stage; from a useful start two or three are needed.
const SWEEPS: usize = 40;

/// Most Newton steps in a stage.
const NEWTON_STEPS: usize = 12;

/// Why a stage ended without a refined X.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum RefineError {
    /// The caller cancelled.
    Cancelled,
    /// X cannot be made M-orthonormal at this precision.
    NotOrthonormal,
}

/// What the stage reports against.
pub(super) struct Span {
    pub from: f64,
    pub to: f64,
}

/// X (any start near M-orthonormal) and the diagonal of XᴴAX, ascending with X.
pub(super) fn refine(
    matrix: &Fixed,
    metric: Option<&Fixed>,
    vectors: Fixed,
    span: &Span,
    control: &mut dyn Control,
) -> Result<(Fixed, Vec<IBig>), RefineError> {
    let mut x = orthonormal(metric, vectors, span, control)?;
    let turned = Fixed::adjoint_product(matrix, &x);
    let mut s = Fixed::hermitian_product(&x, &turned);
    for sweep in 0..SWEEPS {
        let mut rotated = false;
        for q in 1..x.order {
            for p in 0..q {
                if let Some(rotation) = Rotation::of(&s, p, q) {
                    rotation.apply(&mut s, &mut x, p, q);
                    rotated = true;
                }
            }
            let done = 1.0 - 0.5f64.powi(sweep as i32) * (1.0 - 0.5 * q as f64 / x.order as f64);
            report(span, done, control)?;
        }
        if !rotated {
            break;
        }
    }
    Ok(ascending(&s, x))
}

fn report(span: &Span, done: f64, control: &mut dyn Control) -> Result<(), RefineError> {
    match control.progress(Stage::Prove, span.from + (span.to - span.from) * done) {
        Flow::Continue => Ok(()),
        Flow::Cancel => Err(RefineError::Cancelled),
    }
}

/// X ← X(I − F/2) until F is a few units: F ← −(3F² − F³)/4, quadratic.
fn orthonormal(
    metric: Option<&Fixed>,
    mut x: Fixed,
    span: &Span,
    control: &mut dyn Control,
) -> Result<Fixed, RefineError> {
    let order = x.order;
    let mut last = usize::MAX;
    for _ in 0..NEWTON_STEPS {
        report(span, 0.0, control)?;
        let mut defect = match metric {
            Some(metric) => {
                let weighted = Fixed::adjoint_product(metric, &x);
                Fixed::hermitian_product(&x, &weighted)
            }
            None => Fixed::hermitian_product(&x, &x),
        };
        for k in 0..order {
            defect.re[k * order + k] -= IBig::ONE << x.bits;
        }
        let size = defect
            .im
            .as_ref()
            .map_or(0, |im| largest_bits(im))
            .max(largest_bits(&defect.re));
        if size > x.bits {
            return Err(RefineError::NotOrthonormal);
        }
        // At the floor of the rounding, F no longer shrinks.
        if size <= 4 || size >= last {
            return Ok(x);
        }
        last = size;
        let correction = Fixed::adjoint_product(&x.adjoint(), &defect);
        let subtract = |plane: &mut Vec<IBig>, by: &[IBig]| {
            for (x, by) in plane.iter_mut().zip(by) {
                *x -= by >> 1;
            }
        };
        subtract(&mut x.re, &correction.re);
        if let (Some(im), Some(by)) = (&mut x.im, &correction.im) {
            subtract(im, by);
        }
    }
    Ok(x)
}

/// A plane rotation with a phase: cosine, and sine·e^{iφ}, in units of 2^−p.
struct Rotation {
    cos: IBig,
    sin_re: IBig,
    sin_im: IBig,
}

impl Rotation {
    /// The rotation that makes entry (p, q) of S zero.
    fn of(s: &Fixed, p: usize, q: usize) -> Option<Self> {
        let n = s.order;
        let at = q * n + p;
        let re = s.re[at].clone();
        let im = s.im.as_ref().map_or(IBig::ZERO, |im| im[at].clone());
        let threshold = IBig::from(NEGLIGIBLE * n * n);
        if re.clone().abs() <= threshold && im.clone().abs() <= threshold {
            return None;
        }
        let bits = s.bits;
        let size = if im.is_zero() {
            re.clone().abs()
        } else {
            IBig::from((&re * &re + &im * &im).unsigned_abs().sqrt())
        };
        let difference = &s.re[q * n + q] - &s.re[p * n + p];
        let root = (&difference * &difference + ((&size * &size) << 2usize))
            .unsigned_abs()
            .sqrt();
        let negative = difference < IBig::ZERO;
        let tangent = (&size << (bits + 1)) / (difference.abs() + IBig::from(root));
        let one = IBig::ONE << (2 * bits);
        let hypotenuse = IBig::from((&one + &tangent * &tangent).unsigned_abs().sqrt());
        let cos = one / hypotenuse;
        let sin = (&tangent * &cos) >> bits;
        let sin = if negative { -sin } else { sin };
        let (sin_re, sin_im) = (&sin * re / &size, &sin * im / &size);
        Some(Self {
            cos,
            sin_re,
            sin_im,
        })
    }

    /// Rotates columns p and q of X, and of S from both sides.
    fn apply(&self, s: &mut Fixed, x: &mut Fixed, p: usize, q: usize) {
        self.columns(x, p, q);
        self.columns(s, p, q);
        // Rows follow by symmetry, except in the 2 × 2 block itself.
        let n = s.order;
        self.block(s, p, q);
        for k in (0..n).filter(|&k| k != p && k != q) {
            for line in [p, q] {
                s.re[k * n + line] = s.re[line * n + k].clone();
                if let Some(im) = &mut s.im {
                    im[k * n + line] = -&im[line * n + k];
                }
            }
        }
    }

    /// (xp, xq) ← (cos·xp − conj(sin)·xq, sin·xp + cos·xq).
    fn columns(&self, m: &mut Fixed, p: usize, q: usize) {
        let (n, bits) = (m.order, m.bits);
        for k in 0..n {
            let (a, b) = (p * n + k, q * n + k);
            match &mut m.im {
                None => {
                    let new_p = (&self.cos * &m.re[a] - &self.sin_re * &m.re[b]) >> bits;
                    let new_q = (&self.sin_re * &m.re[a] + &self.cos * &m.re[b]) >> bits;
                    m.re[a] = new_p;
                    m.re[b] = new_q;
                }
                Some(im) => {
                    let (c, sr, si) = (&self.cos, &self.sin_re, &self.sin_im);
                    let (ar, ai, br, bi) = (&m.re[a], &im[a], &m.re[b], &im[b]);
                    let p_re = (c * ar - (sr * br + si * bi)) >> bits;
                    let p_im = (c * ai - (sr * bi - si * br)) >> bits;
                    let q_re = (sr * ar - si * ai + c * br) >> bits;
                    let q_im = (sr * ai + si * ar + c * bi) >> bits;
                    m.re[a] = p_re;
                    im[a] = p_im;
                    m.re[b] = q_re;
                    im[b] = q_im;
                }
            }
        }
    }

    /// The rows of the 2 × 2 block after its columns; its off-diagonal is zero.
    fn block(&self, s: &mut Fixed, p: usize, q: usize) {
        let (n, bits) = (s.order, s.bits);
        let part = |plane: &Option<Vec<IBig>>, at: usize| {
            plane.as_ref().map_or(IBig::ZERO, |im| im[at].clone())
        };
        let (pp, qp, pq, qq) = (p * n + p, p * n + q, q * n + p, q * n + q);
        // Row p ← cos·row p − sin·row q; row q ← conj(sin)·row p + cos·row q.
        let new_pp = (&self.cos * &s.re[pp]
            - (&self.sin_re * &s.re[qp] - &self.sin_im * part(&s.im, qp)))
            >> bits;
        let new_qq =
            (&self.sin_re * &s.re[pq] + &self.sin_im * part(&s.im, pq) + &self.cos * &s.re[qq])
                >> bits;
        s.re[pp] = new_pp;
        s.re[qq] = new_qq;
        s.re[qp] = IBig::ZERO;
        s.re[pq] = IBig::ZERO;
        if let Some(im) = &mut s.im {
            for at in [pp, qp, pq, qq] {
                im[at] = IBig::ZERO;
            }
        }
    }
}

/// Columns of X and the diagonal of S in ascending order of the latter.
fn ascending(s: &Fixed, x: Fixed) -> (Fixed, Vec<IBig>) {
    let n = s.order;
    let mut places: Vec<usize> = (0..n).collect();
    places.sort_by(|&i, &j| s.re[i * n + i].cmp(&s.re[j * n + j]));
    let values = places.iter().map(|&k| s.re[k * n + k].clone()).collect();
    let plane = |plane: &Vec<IBig>| {
        places
            .iter()
            .flat_map(|&k| Fixed::column(plane, n, k).iter().cloned())
            .collect::<Vec<_>>()
    };
    let ordered = Fixed {
        order: n,
        bits: x.bits,
        re: plane(&x.re),
        im: x.im.as_ref().map(plane),
    };
    (ordered, values)
}
