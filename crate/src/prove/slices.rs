//! Matrix products to about 2^−105 by error-free splitting.
//!
//! A matrix is cut into slices of β bits on a grid fixed for each row (left
//! factor) or column (right factor), 2β + ⌈log₂ terms⌉ ≤ 53: products of slices
//! are then sums of integers below 2^53 times one power of two, exact in plain
//! double in any order, so they run through the ordinary product kernel (K.
//! Ozaki, T. Ogita, S. Oishi and S. M. Rump, Numer. Algorithms 59, 2012). With
//! A = A₁+A₂+A₃+A₄ and X = X₁+X₂+X₃+r₃, r₁ = X − X₁, r₂ = r₁ − X₂,
//!     AX = A₁X₁ + A₁X₂ + A₂X₁ + A₁X₃ + A₂X₂ + A₃X₁      (exact, six products)
//!        + A₁r₃ + A₂r₂ + A₃r₁ + A₄X                     (about 2^−66 of AX).
//! The exact ones are summed as unevaluated pairs, the others in plain double
//! with their a-priori bound.
//!
//! Notation: β bits a slice, u = 2^−53, h + l an unevaluated pair.

use nalgebra::DMatrix;

use crate::matrix::kernels::{accumulate, Orientation, Packing, Plane, Shape, Target, Update};
use crate::matrix::Dense;
use crate::num::eft::{two_product, two_sum};
use crate::num::upper::{gamma, square_sum_up, UNIT};
use crate::num::Upper;

use super::norms::{Norms, Rounding};

/// Along which lines a grid is fixed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Lines {
    Rows,
    Columns,
}

/// The left factor: the first two slices, the third and what is left.
pub(super) struct Left {
    slices: [Dense; 3],
    rest: Dense,
    /// ≥ ‖typed matrix − (slices + rest)‖₂.
    missing: Upper,
}

/// The right factor with its remainders.
pub(super) struct Right<'a> {
    whole: &'a Dense,
    slices: [Dense; 3],
    remainders: [Dense; 3],
}

/// A product as high + low, and a bound on the 2-norm of each column's error.
pub(super) struct Accurate {
    pub high: Dense,
    pub low: Dense,
    pub loss: Vec<Upper>,
}

/// Bits a slice may have when products have `terms` terms.
fn slice_bits(terms: usize) -> i32 {
    let guard = usize::BITS as i32 - terms.max(1).saturating_sub(1).leading_zeros() as i32;
    (53 - guard) / 2
}

/// e with |x| ≤ 2^e for the largest entry of each line; `None` for zero lines.
fn line_sizes(matrix: &Dense, lines: Lines) -> Vec<Option<i32>> {
    let count = if lines == Lines::Rows {
        matrix.rows()
    } else {
        matrix.cols()
    };
    let mut most = vec![0.0f64; count];
    for plane in std::iter::once(&matrix.re).chain(matrix.im.as_ref()) {
        for j in 0..plane.ncols() {
            for (i, x) in plane.column(j).iter().enumerate() {
                let line = if lines == Lines::Rows { i } else { j };
                most[line] = most[line].max(x.abs());
            }
        }
    }
    most.into_iter()
        .map(|x| (x > 0.0).then(|| ((x.to_bits() >> 52) & 0x7ff) as i32 - 1022))
        .collect()
}

/// The part of x on the grid of 2^(size − bits), |x| ≤ 2^size: adding and
/// subtracting a constant whose last place is that grid rounds x to it.
fn on_grid(x: f64, size: i32, bits: i32) -> f64 {
    let constant = 1.5 * power(size + 52 - bits);
    (x + constant) - constant
}

/// 2^exponent, for exponents of normal doubles (smaller ones give the least).
fn power(exponent: i32) -> f64 {
    f64::from_bits(((exponent.clamp(-1022, 1023) + 1023) as u64) << 52)
}

/// Takes the slice of `bits` bits off `matrix`, leaving the remainder there.
fn take_slice(matrix: &mut Dense, sizes: &[Option<i32>], lines: Lines, bits: i32) -> Dense {
    let cut = |plane: &mut DMatrix<f64>| {
        let mut slice = DMatrix::zeros(plane.nrows(), plane.ncols());
        for j in 0..plane.ncols() {
            let columns = plane.column_mut(j).into_iter().zip(slice.column_mut(j));
            for (i, (x, part)) in columns.enumerate() {
                let line = if lines == Lines::Rows { i } else { j };
                if let Some(size) = sizes[line] {
                    *part = on_grid(*x, size, bits);
                    *x -= *part;
                }
            }
        }
        slice
    };
    let re = cut(&mut matrix.re);
    let im = matrix.im.as_mut().map(cut);
    Dense { re, im }
}

fn lowered(sizes: &[Option<i32>], by: i32) -> Vec<Option<i32>> {
    sizes
        .iter()
        .map(|size| size.map(|size| size - by))
        .collect()
}

fn zip_planes(a: &mut Dense, b: &mut Dense, operation: impl Fn(&mut f64, &mut f64)) {
    for (x, y) in a.re.iter_mut().zip(b.re.iter_mut()) {
        operation(x, y);
    }
    if let (Some(a), Some(b)) = (&mut a.im, &mut b.im) {
        for (x, y) in a.iter_mut().zip(b.iter_mut()) {
            operation(x, y);
        }
    }
}

fn terms(matrix: &Dense) -> usize {
    if matrix.is_complex() {
        2 * matrix.cols()
    } else {
        matrix.cols()
    }
}

impl Left {
    /// Cuts high + low, |typed − (high + low)| bounded by `missing` in norm.
    /// Both have the same planes.
    pub fn new(high: &Dense, mut low: Dense, missing: Upper) -> Self {
        let bits = slice_bits(terms(high));
        let sizes = line_sizes(high, Lines::Rows);
        let mut remainder = high.clone();
        let first = take_slice(&mut remainder, &sizes, Lines::Rows, bits);
        let second = take_slice(
            &mut remainder,
            &lowered(&sizes, bits + 1),
            Lines::Rows,
            bits,
        );
        zip_planes(&mut remainder, &mut low, |x, y| (*x, *y) = two_sum(*x, *y));
        // The low part may have carried the remainder just past its bound: one bit more.
        let third = take_slice(
            &mut remainder,
            &lowered(&sizes, 2 * bits + 1),
            Lines::Rows,
            bits,
        );
        zip_planes(&mut remainder, &mut low, |x, y| *x += *y);
        let rounding = Upper::of(UNIT).times(Norms::of(&remainder).frobenius);
        Self {
            slices: [first, second, third],
            rest: remainder,
            missing: missing.plus(rounding),
        }
    }
}

impl<'a> Right<'a> {
    /// Cuts the columns of `whole`.
    pub fn new(whole: &'a Dense) -> Self {
        let bits = slice_bits(if whole.is_complex() {
            2 * whole.rows()
        } else {
            whole.rows()
        });
        let sizes = line_sizes(whole, Lines::Columns);
        let mut remainder = whole.clone();
        let first = take_slice(&mut remainder, &sizes, Lines::Columns, bits);
        let after_first = remainder.clone();
        let second = take_slice(
            &mut remainder,
            &lowered(&sizes, bits + 1),
            Lines::Columns,
            bits,
        );
        let after_second = remainder.clone();
        let third = take_slice(
            &mut remainder,
            &lowered(&sizes, 2 * bits + 2),
            Lines::Columns,
            bits,
        );
        Self {
            whole,
            slices: [first, second, third],
            remainders: [after_first, after_second, remainder],
        }
    }
}

fn is_zero(matrix: &Dense) -> bool {
    matrix.re.iter().all(|x| *x == 0.0)
        && matrix
            .im
            .as_ref()
            .is_none_or(|im| im.iter().all(|x| *x == 0.0))
}

/// target ← target + left · right.
fn add_product(target: &mut Dense, left: &Dense, right: &Dense, packing: &mut Packing) {
    let shape = Shape {
        rows: left.rows(),
        cols: right.cols(),
        inner: left.cols(),
    };
    let mut add =
        |target: &mut DMatrix<f64>, left: &DMatrix<f64>, right: &DMatrix<f64>, update: Update| {
            let left = Plane {
                data: left.as_slice(),
                stride: left.nrows(),
                orientation: Orientation::AsStored,
            };
            let right = Plane {
                data: right.as_slice(),
                stride: right.nrows(),
                orientation: Orientation::AsStored,
            };
            let stride = target.nrows();
            let mut target = Target {
                data: target.as_mut_slice(),
                stride,
            };
            accumulate(shape, update, left, right, &mut target, packing);
        };
    add(&mut target.re, &left.re, &right.re, Update::Add);
    if let (Some(im), Some(left_im), Some(right_im)) = (&mut target.im, &left.im, &right.im) {
        add(&mut target.re, left_im, right_im, Update::Subtract);
        add(im, &left.re, right_im, Update::Add);
        add(im, left_im, &right.re, Update::Add);
    }
}

fn zeros_like(matrix: &Dense) -> Dense {
    let zeros = |plane: &DMatrix<f64>| DMatrix::zeros(plane.nrows(), plane.ncols());
    Dense {
        re: zeros(&matrix.re),
        im: matrix.im.as_ref().map(zeros),
    }
}

/// The product of typed left and right factors, both complex or both real.
///
/// Cost: six exact products and four plain ones, less those of zero slices.
pub(super) fn accurate_product(left: &Left, right: &Right<'_>) -> Accurate {
    let order = right.whole.rows();
    let cols = right.whole.cols();
    let mut packing = Packing::default();
    let mut high = zeros_like(right.whole);
    let mut low = zeros_like(right.whole);
    let mut spills = vec![Upper::ZERO; cols];
    // Smallest products first would be as good; this order needs no other reason.
    for (i, j) in [(0, 0), (0, 1), (1, 0), (0, 2), (1, 1), (2, 0)] {
        let (a, x) = (&left.slices[i], &right.slices[j]);
        if is_zero(a) || is_zero(x) {
            continue;
        }
        let mut exact = zeros_like(right.whole);
        add_product(&mut exact, a, x, &mut packing);
        absorb(&mut high, &mut low, &exact, &mut spills);
    }
    let rounding = Rounding::new(4 * order, order, right.whole.is_complex());
    let mut rest = zeros_like(right.whole);
    let mut sizes = vec![Upper::ZERO; cols];
    let pairs = [
        (&left.slices[0], &right.remainders[2]),
        (&left.slices[1], &right.remainders[1]),
        (&left.slices[2], &right.remainders[0]),
        (&left.rest, right.whole),
    ];
    for (a, x) in pairs {
        if is_zero(a) || is_zero(x) {
            continue;
        }
        add_product(&mut rest, a, x, &mut packing);
        let norm = Norms::of(a).spectral;
        for (size, column) in sizes.iter_mut().zip(Norms::of(x).columns) {
            *size = size.plus(norm.times(column));
        }
    }
    absorb(&mut high, &mut low, &rest, &mut spills);
    let whole = Norms::of(right.whole).columns;
    let loss = (0..cols)
        .map(|k| {
            // Seven additions to the low part, and products below the normal range.
            gamma(8)
                .times(spills[k])
                .plus(rounding.factor.times(sizes[k]))
                .plus(rounding.underflow.times(Upper::of(4.0)))
                .plus(left.missing.times(whole[k]))
        })
        .collect();
    Accurate { high, low, loss }
}

/// high + low ← high + low + term; `spills` grows by the norms of what goes to
/// the low part.
fn absorb(high: &mut Dense, low: &mut Dense, term: &Dense, spills: &mut [Upper]) {
    let mut squares = vec![Upper::ZERO; spills.len()];
    let mut planes = |high: &mut DMatrix<f64>, low: &mut DMatrix<f64>, term: &DMatrix<f64>| {
        for (k, square) in squares.iter_mut().enumerate() {
            let mut errors = 0.0;
            let terms = term.column(k);
            let columns = high
                .column_mut(k)
                .into_iter()
                .zip(low.column_mut(k))
                .zip(terms.iter());
            for ((h, l), t) in columns {
                let (sum, error) = two_sum(*h, *t);
                *h = sum;
                *l += error;
                errors += error * error;
            }
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
            let mut sizes = 0.0f64;
            for i in 0..high.nrows() {
                let (p, e) = two_product(value, base[(i, k)]);
                let (sum, error) = two_sum(high[(i, k)], -p);
                let small = value * base_low[(i, k)];
                let before = low[(i, k)];
                high[(i, k)] = sum;
                low[(i, k)] = ((before + error) - e) - small;
                let size = before.abs() + error.abs() + e.abs() + small.abs();
                sizes += size * size;
            }
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
        zip_planes(&mut self.high, &mut self.low, |h, l| {
            (*h, *l) = two_sum(*h, *l)
        });
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
    use super::super::tests::Stream;
    use super::*;
    use crate::num::Dyadic;

    fn exact(x: f64) -> Dyadic {
        Dyadic::from_f64(x).expect("finite")
    }

    fn random(order: usize, complex: bool, stream: &mut Stream, spread: bool) -> Dense {
        let mut plane = || {
            DMatrix::from_fn(order, order, |_, _| {
                let x = stream.next();
                if spread {
                    x * 2f64.powi((stream.next() * 60.0) as i32)
                } else {
                    x
                }
            })
        };
        let re = plane();
        let im = complex.then(plane);
        Dense { re, im }
    }

    /// Exact entry (i, k) of A·X for A = high + low: real and imaginary part.
    fn entry(high: &Dense, low: &Dense, x: &Dense, i: usize, k: usize) -> (Dyadic, Dyadic) {
        let part = |plane: &Option<DMatrix<f64>>, i, j| {
            plane.as_ref().map_or(Dyadic::ZERO, |p| exact(p[(i, j)]))
        };
        let (mut re, mut im) = (Dyadic::ZERO, Dyadic::ZERO);
        for j in 0..x.rows() {
            let ar = &exact(high.re[(i, j)]) + &exact(low.re[(i, j)]);
            let ai = &part(&high.im, i, j) + &part(&low.im, i, j);
            let (xr, xi) = (exact(x.re[(j, k)]), part(&x.im, j, k));
            re = &(&re + &(&ar * &xr)) - &(&ai * &xi);
            im = &(&im + &(&ar * &xi)) + &(&ai * &xr);
        }
        (re, im)
    }

    #[test]
    fn accurate_products_and_residuals_hold_their_bound_and_are_accurate() {
        let mut stream = Stream(11);
        for (order, complex, spread) in [
            (1, false, false),
            (6, false, true),
            (17, false, false),
            (9, true, true),
        ] {
            let high = random(order, complex, &mut stream, spread);
            let mut low = random(order, complex, &mut stream, false);
            zip_planes(&mut low, &mut high.clone(), |l, h| *l *= h.abs() * UNIT);
            let x = random(order, complex, &mut stream, false);
            let left = Left::new(&high, low.clone(), Upper::ZERO);
            let right = Right::new(&x);
            let mut product = accurate_product(&left, &right);
            let values: Vec<f64> = (0..order).map(|_| stream.next()).collect();
            subtract_scaled(&mut product, &Accurate::exactly(&x), &values);
            let size = Norms::of(&high).frobenius.times(Norms::of(&x).frobenius);
            for k in 0..order {
                let mut squares = Dyadic::ZERO;
                for i in 0..order {
                    let (re, im) = entry(&high, &low, &x, i, k);
                    let value = exact(values[k]);
                    let planes = [
                        (
                            Some(&product.high.re),
                            Some(&product.low.re),
                            re,
                            Some(&x.re),
                        ),
                        (
                            product.high.im.as_ref(),
                            product.low.im.as_ref(),
                            im,
                            x.im.as_ref(),
                        ),
                    ];
                    for (high, low, truth, x) in planes {
                        let (Some(high), Some(low), Some(x)) = (high, low, x) else {
                            continue;
                        };
                        let truth = &truth - &(&value * &exact(x[(i, k)]));
                        let error = &(&exact(high[(i, k)]) + &exact(low[(i, k)])) - &truth;
                        squares = &squares + &(&error * &error);
                    }
                }
                let loss = exact(product.loss[k].get());
                assert!(
                    squares <= &loss * &loss,
                    "order {order}, column {k}: the bound fails"
                );
                let relative = product.loss[k].get() / size.get();
                assert!(
                    relative < 1e-29,
                    "order {order}, column {k}: loss {relative:e}"
                );
            }
        }
    }

    #[test]
    fn accurate_dots_hold_their_bound() {
        let mut stream = Stream(5);
        let x = random(20, true, &mut stream, true);
        let y = Accurate::exactly(&random(20, true, &mut stream, false));
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
