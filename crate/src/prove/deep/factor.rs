//! A start from nothing: the Cholesky factor of the metric in fixed point, and
//! a proof that a metric is not positive definite.
//!
//! Notation: M = LLᴴ, K = L⁻¹, so that X = Kᴴ has XᴴMX = I.

use dashu_base::{SquareRoot, UnsignedAbs};
use dashu_int::IBig;

use crate::num::Dyadic;

use super::fixed::{Fixed, Typed};

/// A pivot of the factorisation that is not positive.
#[derive(Clone, Debug)]
pub(super) struct BadPivot {
    /// Order of the leading block it belongs to, from 1.
    pub block: usize,
    /// A proven upper bound on v*Mv/v*v for some v: at or below zero, the
    /// metric is proven not positive definite.
    pub quotient: Option<Dyadic>,
}

/// L⁻ᴴ of the metric, approximately; n³/2 multiplications.
pub(super) fn orthonormal_start(metric: &Typed) -> Result<Fixed, BadPivot> {
    let n = metric.matrix.order;
    let bits = metric.matrix.bits;
    // Columns of L⁻ᴴ by Gram–Schmidt in the metric's inner product: column k
    // starts as eₖ and loses its components along the earlier ones.
    let mut x = Fixed::identity(n, bits, metric.matrix.im.is_some());
    for k in 0..n {
        for j in 0..k {
            // ⟨xⱼ, M eₖ⟩: column k of M against xⱼ.
            let (re, im) = Fixed::dot(&x, j, &metric.matrix, k);
            let (re, im) = (re >> bits, im >> bits);
            subtract_column(&mut x, k, j, &re, &im);
        }
        let norm = quadratic_form(&metric.matrix, &x, k) >> bits;
        if norm <= IBig::ZERO {
            return Err(BadPivot {
                block: k + 1,
                quotient: negative_quotient(metric, &x, k),
            });
        }
        // xₖ / √norm.
        let root = IBig::from((norm << bits).unsigned_abs().sqrt());
        for plane in std::iter::once(&mut x.re).chain(x.im.as_mut()) {
            for entry in &mut plane[k * n..(k + 1) * n] {
                *entry = (&*entry << bits) / &root;
            }
        }
    }
    Ok(x)
}

/// x_k ← x_k − (re + i·im)·x_j.
fn subtract_column(x: &mut Fixed, k: usize, j: usize, re: &IBig, im: &IBig) {
    let (n, bits) = (x.order, x.bits);
    for i in 0..n {
        let (a, b) = (k * n + i, j * n + i);
        match &mut x.im {
            None => {
                let by = (re * &x.re[b]) >> bits;
                x.re[a] -= by;
            }
            Some(plane) => {
                let by_re = (re * &x.re[b] - im * &plane[b]) >> bits;
                let by_im = (re * &plane[b] + im * &x.re[b]) >> bits;
                x.re[a] -= by_re;
                plane[a] -= by_im;
            }
        }
    }
}

/// x_k* M x_k in units of 2^−2p, cut below.
fn quadratic_form(metric: &Fixed, x: &Fixed, k: usize) -> IBig {
    let weighted = weighted_column(metric, x, k);
    let mut sum = IBig::ZERO;
    for (i, (re, im)) in weighted.iter().enumerate() {
        sum += &x.re[k * x.order + i] * re;
        if let Some(plane) = &x.im {
            sum += &plane[k * x.order + i] * im;
        }
    }
    sum >> metric.bits
}

/// M x_k in units of 2^−2p, exactly.
fn weighted_column(metric: &Fixed, x: &Fixed, k: usize) -> Vec<(IBig, IBig)> {
    // M is Hermitian: row i is the conjugate of column i.
    (0..x.order).map(|i| Fixed::dot(metric, i, x, k)).collect()
}

/// An upper bound on x*Mx/x*x over the typed metric.
fn negative_quotient(metric: &Typed, x: &Fixed, k: usize) -> Option<Dyadic> {
    let bits = metric.matrix.bits as i64;
    // Cut to 2^−2p from below: one unit of that more is above.
    let form = Dyadic::new(quadratic_form(&metric.matrix, x, k) + IBig::ONE, -2 * bits);
    let mut one_norm = IBig::ZERO;
    let mut squares = IBig::ZERO;
    for plane in std::iter::once(&x.re).chain(x.im.as_ref()) {
        for entry in Fixed::column(plane, x.order, k) {
            one_norm += IBig::from(entry.clone().unsigned_abs());
            squares += entry * entry;
        }
    }
    // Each entry of M may be off by `error` in either part.
    let one_norm = Dyadic::new(one_norm, -bits);
    let slack = &(&one_norm * &one_norm) * &Dyadic::new(&metric.error * IBig::from(2), -bits);
    let above = &form + &slack;
    let length = Dyadic::new(squares, -2 * bits);
    above.divided(&length, 64, crate::num::Toward::Up)
}
