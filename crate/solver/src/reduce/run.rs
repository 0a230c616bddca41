//! A reduction in progress: a matrix that is tridiagonal up to a column and
//! full beyond it, and the step that moves the boundary on by one column.
//!
//! Notation: A the matrix, S its trailing part, H = I − τ v vᴴ the reflector of
//! a column, w = τ S v − (τ²/2)(vᴴ S v) v, so that H S H = S − v wᴴ − w vᴴ.

use super::pass::{self, updated, updated_complex, Planes, Split};
use super::pending::Pending;
use super::reflector::{self, Formed};
use crate::matrix::lanes::Lanes;
use crate::matrix::norms::{norm2, power_of_two};
use crate::matrix::{short, Dense};
use nalgebra::DMatrix;

/// A reduction between two reflectors.
///
/// Storage: lower triangle, column-major, an even number of rows a column. The
/// eliminated columns hold the reflectors' vectors below their first entry,
/// which is 1. The rank-two update by the last reflector is *pending*: it is
/// carried out together with the product for the next one. [`Self::matrix`]
/// applies it by the same formula, so the state it returns is bit for bit the
/// one the next step works on.
#[derive(Clone, Debug)]
pub struct ReductionRun {
    pub(super) order: usize,
    pub(super) stride: usize,
    pub(super) re: Vec<f64>,
    pub(super) im: Vec<f64>,
    pub(super) done: usize,
    pub(super) pending: Pending,
    pub(super) diagonal: Vec<f64>,
    pub(super) off_re: Vec<f64>,
    /// Empty for a real matrix.
    pub(super) off_im: Vec<f64>,
    pub(super) scalars: Vec<f64>,
    /// Trace and squares of the band over the columns done.
    pub(super) settled_trace: f64,
    pub(super) settled_squares: f64,
}

/// The parts of a finished reduction.
pub(crate) struct Finished {
    pub stride: usize,
    pub re: Vec<f64>,
    pub im: Vec<f64>,
    pub diagonal: Vec<f64>,
    pub off_re: Vec<f64>,
    pub off_im: Vec<f64>,
    pub scalars: Vec<f64>,
}

impl ReductionRun {
    /// Starts on the lower triangle of a square Hermitian matrix.
    pub(crate) fn new(matrix: &Dense) -> Self {
        let order = matrix.rows();
        let stride = order + order % 2;
        let padded = |plane: &DMatrix<f64>| {
            let mut copy = vec![0.0; stride * stride];
            for (col, source) in plane.as_slice().chunks_exact(order.max(1)).enumerate() {
                let target = &mut copy[col * stride + col..col * stride + order];
                short::copy(target, &source[col..]);
            }
            copy
        };
        let complex = matrix.is_complex();
        Self {
            order,
            stride,
            re: padded(&matrix.re),
            im: matrix.im.as_ref().map(padded).unwrap_or_default(),
            done: 0,
            pending: Pending::none(stride, complex),
            diagonal: Vec::with_capacity(order),
            off_re: Vec::with_capacity(order),
            off_im: Vec::with_capacity(if complex { order } else { 0 }),
            scalars: Vec::with_capacity(order),
            settled_trace: 0.0,
            settled_squares: 0.0,
        }
    }

    /// Takes column `col`, just done, into the sums over the settled band.
    pub(super) fn settle(&mut self, col: usize) {
        let diagonal = self.diagonal[col];
        self.settled_trace += diagonal;
        self.settled_squares += diagonal * diagonal;
        if col < self.off_re.len() {
            let (re, im) = self.off_diagonal(col);
            self.settled_squares += 2.0 * (re * re + im * im);
        }
    }

    /// The off-diagonal entry below the diagonal of a column done.
    fn off_diagonal(&self, col: usize) -> (f64, f64) {
        let im = self.off_im.get(col).copied().unwrap_or(0.0);
        (self.off_re[col], im)
    }

    pub(super) fn is_complex(&self) -> bool {
        !self.im.is_empty()
    }

    /// Planes of numbers: 1 real, 2 complex.
    pub(crate) fn planes(&self) -> usize {
        if self.is_complex() {
            2
        } else {
            1
        }
    }

    /// Number of rows.
    pub fn order(&self) -> usize {
        self.order
    }

    /// Columns already in tridiagonal form.
    pub fn columns_done(&self) -> usize {
        self.done
    }

    /// Brings the next column into tridiagonal form. Cost: 4·m² operations
    /// for a trailing matrix of order m, four times that when complex.
    pub(crate) fn step(&mut self) {
        let (col, order) = (self.done, self.order);
        self.update_column(col);
        self.diagonal.push(self.re[col * self.stride + col]);
        self.done += 1;
        if self.done == order {
            self.settle(col);
            return;
        }
        let start = col * self.stride + col + 1;
        let end = col * self.stride + order;
        let im = if self.is_complex() {
            &mut self.im[start..end]
        } else {
            &mut []
        };
        let formed = reflector::form(&mut self.re[start..end], im);
        self.off_re.push(formed.image_re);
        if self.is_complex() {
            self.off_im.push(formed.image_im);
        }
        self.scalars.push(formed.scalar);
        self.settle(col);
        if self.done + 1 < order {
            self.pass(col + 1, formed);
        }
    }

    /// Applies the pending update to one column of the trailing matrix.
    fn update_column(&mut self, col: usize) {
        if !self.pending.any() {
            return;
        }
        let (v, w) = self.pending.pair();
        let rows = col..self.order;
        let column = col * self.stride + col..col * self.stride + self.order;
        if self.im.is_empty() {
            let (v, w) = (&v.re[rows.clone()], &w.re[rows]);
            for ((entry, v_row), w_row) in self.re[column].iter_mut().zip(v).zip(w) {
                *entry = updated(*entry, *v_row, *w_row, v[0], w[0]);
            }
            return;
        }
        let (re, im) = (&mut self.re[column.clone()], &mut self.im[column]);
        for (k, row) in rows.enumerate() {
            let entry = (re[k], im[k]);
            (re[k], im[k]) = updated_complex(entry, v.at(row), w.at(row), v.at(col), w.at(col));
        }
        im[0] = 0.0;
    }

    /// Updates the trailing matrix from `first` on, multiplies it by the
    /// reflector in the column before, and leaves the next pair pending.
    fn pass(&mut self, first: usize, formed: Formed) {
        if formed.scalar == 0.0 && !self.pending.any() {
            return;
        }
        let ((v, w), (x, mut y)) = self.pending.pair_and_next();
        let source =
            (first - 1) * self.stride + first..first * self.stride - self.stride + self.order;
        let target = first..self.order;
        let tau = formed.scalar;
        short::copy(&mut x.re[target.clone()], &self.re[source.clone()]);
        if self.im.is_empty() {
            pass::real(&mut self.re, self.stride, first, v.re, w.re, x.re, y.re);
            let inner = dot(&x.re[first..], &y.re[first..]);
            let share = 0.5 * tau * tau * inner;
            scale_and_subtract(tau, &mut y.re[first..], share, &x.re[first..]);
        } else {
            short::copy(&mut x.im[target], &self.im[source]);
            let planes = Planes {
                re: &mut self.re,
                im: &mut self.im,
            };
            let x = Split { re: x.re, im: x.im };
            pass::complex(planes, self.stride, first, v, w, x, &mut y);
            // vᴴ S v is real for Hermitian S.
            let inner = dot(&x.re[first..], &y.re[first..]) + dot(&x.im[first..], &y.im[first..]);
            let share = 0.5 * tau * tau * inner;
            scale_and_subtract(tau, &mut y.re[first..], share, &x.re[first..]);
            scale_and_subtract(tau, &mut y.im[first..], share, &x.im[first..]);
        }
        if tau != 0.0 {
            self.pending.advance();
        } else {
            self.pending.clear();
        }
    }

    /// The reflector of the column done last: planes of v (from its leading 1
    /// on), τ, and the image β. `None` before the first and after the last.
    pub(crate) fn last_reflector(&self) -> Option<LastReflector<'_>> {
        let col = self.done.checked_sub(1)?;
        let scalar = *self.scalars.get(col)?;
        let range = col * self.stride + col + 1..col * self.stride + self.order;
        Some(LastReflector {
            column: col,
            re: &self.re[range.clone()],
            im: if self.is_complex() {
                &self.im[range]
            } else {
                &[]
            },
            scalar,
            image: self.off_diagonal(col),
        })
    }

    /// Entry (row, col) with row ≥ col ≥ `done` of the trailing matrix, the
    /// pending update applied.
    fn trailing(&self, row: usize, col: usize) -> (f64, f64) {
        let at = col * self.stride + row;
        let (v, w) = self.pending.pair();
        if self.im.is_empty() {
            let new = updated(self.re[at], v.re[row], w.re[row], v.re[col], w.re[col]);
            return (new, 0.0);
        }
        let entry = (self.re[at], if row == col { 0.0 } else { self.im[at] });
        let (re, im) = updated_complex(entry, v.at(row), w.at(row), v.at(col), w.at(col));
        (re, if row == col { 0.0 } else { im })
    }

    /// The whole matrix as it stands, Hermitian, both triangles. Cost: O(n²).
    pub fn matrix(&self) -> Dense {
        let mut re = DMatrix::zeros(self.order, self.order);
        let mut im = re.clone();
        let mut put = |row: usize, col: usize, entry: (f64, f64)| {
            re[(row, col)] = entry.0;
            re[(col, row)] = entry.0;
            im[(row, col)] = entry.1;
            im[(col, row)] = if row == col { 0.0 } else { -entry.1 };
        };
        for (col, entry) in self.diagonal.iter().enumerate() {
            put(col, col, (*entry, 0.0));
        }
        for col in 0..self.off_re.len() {
            put(col + 1, col, self.off_diagonal(col));
        }
        for col in self.done..self.order {
            for row in col..self.order {
                put(row, col, self.trailing(row, col));
            }
        }
        if self.is_complex() {
            Dense::complex(re, im)
        } else {
            Dense::real(re)
        }
    }

    /// Trace, and √(Σ diagonal² + 2 Σ |off-diagonal|²) over the tridiagonal
    /// band, as they stand. Cost: O(n).
    pub(crate) fn band(&self) -> (f64, f64) {
        let (mut trace, mut squares) = (self.settled_trace, self.settled_squares);
        if self.im.is_empty() {
            let (v, w) = self.pending.pair();
            let (plane, v, w) = (&self.re[..], &v.re[..self.stride], &w.re[..self.stride]);
            for col in self.done..self.order {
                let at = col * self.stride + col;
                let diagonal = updated(plane[at], v[col], w[col], v[col], w[col]);
                // With an odd order the last row has a neighbour too: zero.
                let below = if col + 1 < self.stride {
                    updated(plane[at + 1], v[col + 1], w[col + 1], v[col], w[col])
                } else {
                    0.0
                };
                trace += diagonal;
                squares += diagonal * diagonal + 2.0 * (below * below);
            }
        } else {
            for col in self.done..self.order {
                let diagonal = self.trailing(col, col).0;
                let (re, im) = if col + 1 < self.order {
                    self.trailing(col + 1, col)
                } else {
                    (0.0, 0.0)
                };
                trace += diagonal;
                squares += diagonal * diagonal + 2.0 * (re * re + im * im);
            }
        }
        let norm = if squares > SMALLEST_PLAIN {
            squares.sqrt()
        } else {
            norm2(self.band_parts().iter())
        };
        (trace, norm)
    }

    /// The band's entries, each off-diagonal part twice.
    fn band_parts(&self) -> Vec<f64> {
        let mut parts = self.diagonal.clone();
        for col in 0..self.off_re.len() {
            let (re, im) = self.off_diagonal(col);
            parts.extend([re, re, im, im]);
        }
        for col in self.done..self.order {
            parts.push(self.trailing(col, col).0);
            if col + 1 < self.order {
                let (re, im) = self.trailing(col + 1, col);
                parts.extend([re, re, im, im]);
            }
        }
        parts
    }

    /// Frobenius norm outside the tridiagonal band, summed entry by entry.
    /// Cost: 6 operations an entry (18 complex) of the trailing triangle.
    pub(crate) fn norm_outside_band(&self) -> f64 {
        let (v, w) = self.pending.pair();
        let squares = (self.done..self.order)
            .map(|col| pass::squares_below_band(&self.re, &self.im, self.stride, col, v, w))
            .fold(0.0, |sum, square| sum + square);
        let norm = if squares > SMALLEST_PLAIN {
            squares.sqrt()
        } else {
            let parts: Vec<f64> = (self.done..self.order)
                .flat_map(|col| (col + 2..self.order).map(move |row| (row, col)))
                .map(|(row, col)| self.trailing(row, col))
                .flat_map(|(re, im)| [re, im])
                .collect();
            norm2(parts.iter())
        };
        norm * std::f64::consts::SQRT_2
    }

    pub(crate) fn finish(self) -> Finished {
        Finished {
            stride: self.stride,
            re: self.re,
            im: self.im,
            diagonal: self.diagonal,
            off_re: self.off_re,
            off_im: self.off_im,
            scalars: self.scalars,
        }
    }
}

/// Below this a sum of squares may have lost terms to underflow (2⁻⁹⁰⁰).
const SMALLEST_PLAIN: f64 = power_of_two(-900);

/// See [`ReductionRun::last_reflector`].
pub(crate) struct LastReflector<'a> {
    pub column: usize,
    pub re: &'a [f64],
    pub im: &'a [f64],
    pub scalar: f64,
    pub image: (f64, f64),
}

/// y ← τ y − share · x.
#[inline(always)]
fn scale_and_subtract(tau: f64, y: &mut [f64], share: f64, x: &[f64]) {
    for (y, x) in y.iter_mut().zip(x) {
        *y = tau * *y - share * x;
    }
}

/// Inner product in four interleaved sums, added in a fixed order.
pub(crate) fn dot(x: &[f64], y: &[f64]) -> f64 {
    let ((x_pairs, x_rest), (y_pairs, y_rest)) = (x.as_chunks::<2>(), y.as_chunks::<2>());
    let ((x_fours, x_two), (y_fours, y_two)) = (x_pairs.as_chunks::<2>(), y_pairs.as_chunks::<2>());
    let mut even = Lanes::splat(0.0);
    let mut odd = Lanes::splat(0.0);
    for (x, y) in x_fours.iter().zip(y_fours) {
        even = even + Lanes::load(&x[0]) * Lanes::load(&y[0]);
        odd = odd + Lanes::load(&x[1]) * Lanes::load(&y[1]);
    }
    if let ([x], [y]) = (x_two, y_two) {
        even = even + Lanes::load(x) * Lanes::load(y);
    }
    let rest = x_rest
        .iter()
        .zip(y_rest)
        .fold(0.0, |sum, (x, y)| sum + x * y);
    (even + odd).sum() + rest
}
