//! From exact numbers to doubles: one power of two for the whole matrix.
//!
//! Entries in the safe middle range are left alone, so that in the common case
//! the doubles are those of the typed numbers: the scale is zero whenever
//! every part that is not zero lies between 2^−300 and 2^300, where no square
//! or sum of squares of a thousand rows comes near overflow or underflow.
//! Otherwise the scale brings the largest part into [1/2, 1).

use super::{Problem, Rounded};
use crate::matrix::{Dense, ExactMatrix};
use crate::num::ExactReal;
use nalgebra::DMatrix;

/// Parts between 2^−SAFE and 2^SAFE need no scaling.
const SAFE: i32 = 300;

impl Problem {
    /// Order n.
    pub fn order(&self) -> usize {
        self.matrix.order()
    }

    /// Whether A or M has an imaginary plane.
    pub fn is_complex(&self) -> bool {
        self.matrix.is_complex() || self.metric.as_ref().is_some_and(ExactMatrix::is_complex)
    }

    /// The problem in doubles, each entry rounded once, to nearest. Cost: n².
    pub fn rounded(&self) -> Rounded {
        let (matrix, matrix_scale) = rounded(&self.matrix);
        let (metric, metric_scale) = match self.metric.as_ref().map(rounded) {
            Some((metric, scale)) => (Some(metric), scale),
            None => (None, 0),
        };
        Rounded {
            matrix,
            matrix_scale,
            metric,
            metric_scale,
        }
    }
}

/// x·2^power, rounded once where the result is subnormal.
pub(super) fn times_power_of_two(x: f64, power: i32) -> f64 {
    ExactReal::Binary(x).nearest(-power)
}

/// The two words of each entry of 2^−scale · A and the error left over.
#[derive(Clone, Debug)]
pub struct MatrixExpansion {
    /// First words, n × n.
    pub hi: Dense,
    /// Second words; `None` when all are zero.
    pub lo: Option<Dense>,
    /// Bounds of what is left, part by part; `None` when nothing is.
    pub bound: Option<Dense>,
}

impl ExactMatrix {
    /// Exponent s with every part below 2^s in size, and the least such; zero
    /// when all parts that are not zero lie between 2^−300 and 2^300.
    pub fn scale(&self) -> i32 {
        let mut top = i32::MIN;
        let mut bottom = i32::MAX;
        for x in self.parts() {
            let near = x.nearest(0);
            if near != 0.0 && near.is_finite() {
                let e = exponent(near);
                top = top.max(e);
                bottom = bottom.min(e);
            }
        }
        if top == i32::MIN || (top <= SAFE && bottom > -SAFE) {
            0
        } else {
            top
        }
    }

    /// Every real and imaginary part.
    fn parts(&self) -> impl Iterator<Item = &ExactReal> {
        let n = self.order();
        let complex = self.is_complex();
        (0..n * n).flat_map(move |k| {
            let (row, col) = (k / n, k % n);
            std::iter::once(self.re(row, col)).chain(complex.then(|| self.im(row, col)))
        })
    }

    /// 2^−`scale` · A as two words an entry with a rigorous bound on the rest
    /// (see [`ExactReal::expansion`]). Cost: n².
    pub fn expansion(&self, scale: i32) -> MatrixExpansion {
        let n = self.order();
        let plane = |part: &dyn Fn(usize, usize) -> ExactReal| {
            let mut hi = DMatrix::zeros(n, n);
            let mut lo = DMatrix::zeros(n, n);
            let mut bound = DMatrix::zeros(n, n);
            for col in 0..n {
                for row in 0..n {
                    let e = part(row, col).expansion(scale);
                    hi[(row, col)] = e.hi;
                    lo[(row, col)] = e.lo;
                    bound[(row, col)] = e.bound;
                }
            }
            [hi, lo, bound]
        };
        let re = plane(&|row, col| self.re(row, col).clone());
        let im = self
            .is_complex()
            .then(|| plane(&|row, col| self.im(row, col).clone()));
        let [hi_re, lo_re, bound_re] = re;
        let (hi, lo, bound) = match im {
            Some([hi_im, lo_im, bound_im]) => (
                Dense::complex(hi_re, hi_im),
                Dense::complex(lo_re, lo_im),
                Dense::complex(bound_re, bound_im),
            ),
            None => (
                Dense::real(hi_re),
                Dense::real(lo_re),
                Dense::real(bound_re),
            ),
        };
        MatrixExpansion {
            hi,
            lo: not_zero(lo),
            bound: not_zero(bound),
        }
    }
}

fn not_zero(matrix: Dense) -> Option<Dense> {
    let is_zero = |plane: &DMatrix<f64>| plane.iter().all(|x| *x == 0.0);
    let all_zero = is_zero(&matrix.re) && matrix.im.as_ref().is_none_or(is_zero);
    if all_zero {
        None
    } else {
        Some(matrix)
    }
}

fn rounded(exact: &ExactMatrix) -> (Dense, i32) {
    let scale = exact.scale();
    (rounded_at(exact, scale), scale)
}

/// 2^−`scale` · A in doubles.
pub(super) fn rounded_at(exact: &ExactMatrix, scale: i32) -> Dense {
    let n = exact.order();
    let re = DMatrix::from_fn(n, n, |row, col| exact.re(row, col).nearest(scale));
    if exact.is_complex() {
        Dense::complex(
            re,
            DMatrix::from_fn(n, n, |row, col| exact.im(row, col).nearest(scale)),
        )
    } else {
        Dense::real(re)
    }
}

/// e with 2^(e−1) ≤ |x| < 2^e, for x finite and not zero.
fn exponent(x: f64) -> i32 {
    let bits = x.abs().to_bits();
    match (bits >> 52) as i32 {
        // Subnormal: the leading bit of the fraction counts from 2^−1074.
        0 => 64 - bits.leading_zeros() as i32 - 1074,
        biased => biased - 1022,
    }
}
