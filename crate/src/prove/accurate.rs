//! Matrices and scalars as unevaluated pairs of doubles, with bounds on what
//! they miss.
//!
//! Notation: h + l an unevaluated pair, γₖ as in [`crate::num::upper`].

use nalgebra::DMatrix;

use crate::matrix::passes::{self, column, column_mut};
use crate::matrix::Dense;
use crate::num::eft::{two_product, two_sum};
use crate::num::upper::{gamma, square_sum_up};
use crate::num::Upper;

use super::products::zeros_like;

/// A product as high + low, and a bound on the 2-norm of each column's error.
pub(super) struct Accurate {
    pub high: Dense,
    pub low: Dense,
    pub loss: Vec<Upper>,
}

/// Applies an entrywise operation, plane by plane.
pub(super) fn zip_planes(a: &mut Dense, b: &mut Dense, operation: fn(&mut [f64], &mut [f64])) {
    operation(a.re.as_mut_slice(), b.re.as_mut_slice());
    if let (Some(a), Some(b)) = (&mut a.im, &mut b.im) {
        operation(a.as_mut_slice(), b.as_mut_slice());
    }
}

/// high + low ← high + low + term; `spills` grows by the norms of what goes to
/// the low part.
pub(super) fn absorb(high: &mut Dense, low: &mut Dense, term: &Dense, spills: &mut [Upper]) {
    let mut squares = vec![Upper::ZERO; spills.len()];
    let mut planes = |high: &mut DMatrix<f64>, low: &mut DMatrix<f64>, term: &DMatrix<f64>| {
        for (k, square) in squares.iter_mut().enumerate() {
            let errors = passes::absorb(column_mut(high, k), column_mut(low, k), column(term, k));
            *square = square.plus(stretched_squares(errors, term.nrows()));
        }
    };
    planes(&mut high.re, &mut low.re, &term.re);
    if let (Some(high), Some(low), Some(term)) = (&mut high.im, &mut low.im, &term.im) {
        planes(high, low, term);
    }
    for (spill, square) in spills.iter_mut().zip(squares) {
        *spill = spill.plus(square.sqrt());
    }
}

/// A bound on an exact sum of `count` squares from its computed value.
fn stretched_squares(computed: f64, count: usize) -> Upper {
    let slack = Upper::of(1.0).plus(gamma(count + 1));
    // γ once more for the division left out: 1/(1 − x) ≤ 1 + 2x for x ≤ 1/2.
    Upper::of(computed)
        .times(slack)
        .times(slack)
        .plus(Upper::of(count as f64 * f64::from_bits(1)))
}

/// product ← product − λₖ·(base_high + base_low)ₖ, column by column; the losses
/// grow by |λₖ| times the base's and by the rounding of low parts.
pub(super) fn subtract_scaled(product: &mut Accurate, base: &Accurate, values: &[f64]) {
    for (k, &value) in values.iter().enumerate() {
        let mut spill = Upper::ZERO;
        let mut plane = |high: &mut DMatrix<f64>,
                         low: &mut DMatrix<f64>,
                         base: &DMatrix<f64>,
                         base_low: &DMatrix<f64>| {
            let sizes = passes::subtract_scaled(
                (column_mut(high, k), column_mut(low, k)),
                (column(base, k), column(base_low, k)),
                value,
            );
            spill = spill.plus(stretched_squares(sizes, 4 * high.nrows()).sqrt());
        };
        plane(
            &mut product.high.re,
            &mut product.low.re,
            &base.high.re,
            &base.low.re,
        );
        if let (Some(high), Some(low), Some(base), Some(base_low)) = (
            &mut product.high.im,
            &mut product.low.im,
            &base.high.im,
            &base.low.im,
        ) {
            plane(high, low, base, base_low);
        }
        let rows = product.high.rows() as f64;
        product.loss[k] = product.loss[k]
            .plus(base.loss[k].times(Upper::of(value)))
            .plus(gamma(6).times(spill))
            // TwoProduct below the normal range: some ten subnormal steps an entry.
            .plus(Upper::of(64.0 * rows * f64::from_bits(1)));
    }
}

impl Accurate {
    /// A matrix of doubles, exactly.
    pub fn exactly(matrix: &Dense) -> Self {
        Self {
            high: matrix.clone(),
            low: zeros_like(matrix),
            loss: vec![Upper::ZERO; matrix.cols()],
        }
    }

    /// Makes high the double nearest to high + low, entry by entry.
    pub fn renormalise(&mut self) {
        zip_planes(&mut self.high, &mut self.low, passes::renormalise);
    }
}

/// A scalar as an unevaluated pair with a bound on its error.
#[derive(Clone, Copy, Debug)]
pub(super) struct Pair {
    pub high: f64,
    pub low: f64,
    pub error: Upper,
}

/// Re(x_jᴴ y_k) and Im(x_jᴴ y_k) in about twice the working precision (the
/// compensated dot product of T. Ogita, S. M. Rump and S. Oishi, SIAM J. Sci.
/// Comput. 26, 2005, with the low parts of y). `loss` bounds what y's column
/// itself misses times ‖x_j‖.
pub(super) fn accurate_dot(
    x: &Dense,
    j: usize,
    y: &Accurate,
    k: usize,
    loss: Upper,
) -> (Pair, Pair) {
    let mut re = Dot::default();
    let mut im = Dot::default();
    let n = x.rows();
    for i in 0..n {
        re.add(x.re[(i, j)], y.high.re[(i, k)], y.low.re[(i, k)]);
    }
    if let (Some(x_im), Some(high_im), Some(low_im)) = (&x.im, &y.high.im, &y.low.im) {
        for i in 0..n {
            re.add(x_im[(i, j)], high_im[(i, k)], low_im[(i, k)]);
            im.add(x.re[(i, j)], high_im[(i, k)], low_im[(i, k)]);
            im.add(-x_im[(i, j)], y.high.re[(i, k)], y.low.re[(i, k)]);
        }
    }
    (re.finish(loss), im.finish(loss))
}

#[derive(Default)]
struct Dot {
    high: f64,
    low: f64,
    sizes: f64,
    count: usize,
}

impl Dot {
    fn add(&mut self, x: f64, high: f64, low: f64) {
        let (p, e) = two_product(x, high);
        let (sum, t) = two_sum(self.high, p);
        let small = x * low;
        self.high = sum;
        self.low += (t + e) + small;
        self.sizes += (t.abs() + e.abs()) + small.abs();
        self.count += 1;
    }

    fn finish(self, loss: Upper) -> Pair {
        let slack = Upper::of(1.0)
            .plus(gamma(self.count + 3))
            .plus(gamma(self.count + 3));
        let error = gamma(self.count + 4)
            .times(Upper::of(self.sizes).times(slack))
            .plus(Upper::of(64.0 * self.count as f64 * f64::from_bits(1)))
            .plus(loss);
        Pair {
            high: self.high,
            low: self.low,
            error,
        }
    }
}

/// A bound on √Σ of the squares of bounds.
pub(super) fn root_sum_square(bounds: impl Iterator<Item = Upper>) -> Upper {
    square_sum_up(bounds.map(Upper::get)).sqrt()
}

#[cfg(test)]
mod tests {
    use super::super::tests::support::Stream;
    use super::*;
    use crate::num::Dyadic;

    fn exact(x: f64) -> Dyadic {
        Dyadic::from_f64(x).expect("finite")
    }

    fn random(order: usize, stream: &mut Stream) -> Dense {
        let mut plane = || DMatrix::from_fn(order, order, |_, _| stream.next());
        let re = plane();
        Dense::complex(re, plane())
    }

    #[test]
    fn accurate_dots_hold_their_bound() {
        let mut stream = Stream(5);
        let x = random(20, &mut stream);
        let y = Accurate::exactly(&random(20, &mut stream));
        let (re, im) = accurate_dot(&x, 3, &y, 4, Upper::ZERO);
        let (mut true_re, mut true_im) = (Dyadic::ZERO, Dyadic::ZERO);
        let (x_im, y_im) = (
            x.im.as_ref().expect("complex"),
            y.high.im.as_ref().expect("complex"),
        );
        for i in 0..20 {
            let (xr, xi) = (exact(x.re[(i, 3)]), exact(x_im[(i, 3)]));
            let (yr, yi) = (exact(y.high.re[(i, 4)]), exact(y_im[(i, 4)]));
            true_re = &(&true_re + &(&xr * &yr)) + &(&xi * &yi);
            true_im = &(&true_im + &(&xr * &yi)) - &(&xi * &yr);
        }
        for (pair, truth) in [(re, true_re), (im, true_im)] {
            let error = &(&exact(pair.high) + &exact(pair.low)) - &truth;
            assert!(error.abs() <= exact(pair.error.get()), "{pair:?}");
            assert!(pair.error.get() < 1e-10, "{pair:?}");
        }
    }
}
