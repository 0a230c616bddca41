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

use crate::matrix::passes::{self, column, column_mut};
use crate::matrix::Dense;
use crate::num::upper::{gamma, UNIT};
use crate::num::Upper;

use super::accurate::{absorb, zip_planes, Accurate};
use super::norms::{column_norms, Rounding};
use super::products::{add_product, zeros_like, Cancelled, Watch};

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
            match lines {
                Lines::Rows => passes::raise(&mut most, column(plane, j)),
                Lines::Columns => {
                    most[j] = column(plane, j).iter().fold(most[j], |most, x| {
                        if x.abs() > most {
                            x.abs()
                        } else {
                            most
                        }
                    });
                }
            }
        }
    }
    most.into_iter()
        .map(|x| (x > 0.0).then(|| ((x.to_bits() >> 52) & 0x7ff) as i32 - 1022))
        .collect()
}

/// Adding and subtracting this constant rounds |x| ≤ 2^size to the grid of
/// 2^(size − bits), its last place. A line of zeros needs none.
fn grid_constant(size: Option<i32>, bits: i32) -> f64 {
    size.map_or(0.0, |size| 1.5 * power(size + 52 - bits))
}

/// 2^exponent, for exponents of normal doubles (smaller ones give the least).
fn power(exponent: i32) -> f64 {
    f64::from_bits(((exponent.clamp(-1022, 1023) + 1023) as u64) << 52)
}

/// Takes the slice of `bits` bits off `matrix`, leaving the remainder there.
fn take_slice(matrix: &mut Dense, sizes: &[Option<i32>], lines: Lines, bits: i32) -> Dense {
    let constants: Vec<f64> = sizes
        .iter()
        .map(|&size| grid_constant(size, bits))
        .collect();
    let cut = |plane: &mut DMatrix<f64>| {
        let mut slice = DMatrix::zeros(plane.nrows(), plane.ncols());
        for j in 0..plane.ncols() {
            let (x, part) = (column_mut(plane, j), column_mut(&mut slice, j));
            match lines {
                Lines::Rows => passes::cut_rows(x, part, &constants),
                Lines::Columns => passes::cut(x, part, constants[j]),
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
        zip_planes(&mut remainder, &mut low, passes::renormalise);
        // The low part may have carried the remainder just past its bound: one bit more.
        let third = take_slice(
            &mut remainder,
            &lowered(&sizes, 2 * bits + 1),
            Lines::Rows,
            bits,
        );
        zip_planes(&mut remainder, &mut low, |x, y| passes::add(x, y));
        let rounding = Upper::of(UNIT).times(column_norms(&remainder).1);
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

/// The product of typed left and right factors, both complex or both real.
///
/// Cost: six exact products and four plain ones, less those of zero slices.
pub(super) fn accurate_product(
    left: &Left,
    right: &Right<'_>,
    watch: &mut Watch<'_>,
) -> Result<Accurate, Cancelled> {
    let order = right.whole.rows();
    let cols = right.whole.cols();
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
        add_product(&mut exact, a, x, watch)?;
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
        add_product(&mut rest, a, x, watch)?;
        let (_, norm) = column_norms(a);
        for (size, column) in sizes.iter_mut().zip(column_norms(x).0) {
            *size = size.plus(norm.times(column));
        }
    }
    absorb(&mut high, &mut low, &rest, &mut spills);
    let (whole, _) = column_norms(right.whole);
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
    Ok(Accurate { high, low, loss })
}

#[cfg(test)]
mod tests {
    use super::super::accurate::subtract_scaled;
    use super::super::norms::Norms;
    use super::super::tests::support::Stream;
    use super::*;
    use crate::control::Unattended;
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
            zip_planes(&mut low, &mut high.clone(), |low, high| {
                for (l, h) in low.iter_mut().zip(high) {
                    *l *= h.abs() * UNIT;
                }
            });
            let x = random(order, complex, &mut stream, false);
            let left = Left::new(&high, low.clone(), Upper::ZERO);
            let right = Right::new(&x);
            let mut watch = Watch {
                control: &mut Unattended,
                done: 0.0,
            };
            let mut product = accurate_product(&left, &right, &mut watch).expect("not cancelled");
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
}
