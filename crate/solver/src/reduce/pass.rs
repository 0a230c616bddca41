//! The pass over the trailing matrix: update it by the last reflector and
//! multiply it by the next one, reading and writing each entry once.
//!
//! Notation: S the trailing matrix, lower triangle in columns `first..`, of an
//! array with `stride` rows a column (even; a row and column of padding is
//! zero when the order is odd). v, w the pending pair, x the next reflector:
//!     S ← S − v wᴴ − w vᴴ,   y ← S x.
//!
//! Both halves of the work of a reduction (4/3·n³ operations real, four times
//! that complex) run in this one loop at the processor's arithmetic rate as
//! long as the triangle fits the second-level cache (order 700 real), which a
//! panel-by-panel scheme reaches only for the half it turns into products; and
//! the matrix after every single reflector exists, for the ledger to replay.
//! The fused update and product follow the idea of Howell, Demmel, Fulton,
//! Hammarling and Marmol, "Cache efficient bidiagonalization using BLAS 2.5
//! operators" (2008).

use crate::matrix::counted::count;
use crate::matrix::lanes::Lanes;

/// The planes of a vector; `im` is empty for real data.
#[derive(Clone, Copy)]
pub(super) struct Split<'a> {
    pub re: &'a [f64],
    pub im: &'a [f64],
}

impl Split<'_> {
    /// Entry i of a complex vector.
    #[inline(always)]
    pub fn at(&self, i: usize) -> (f64, f64) {
        (self.re[i], self.im[i])
    }
}

/// Entry of S − v wᴴ − w vᴴ, real; the one formula for it.
#[inline(always)]
pub(super) fn updated(entry: f64, v: f64, w: f64, v_col: f64, w_col: f64) -> f64 {
    entry - (v * w_col + w * v_col)
}

#[inline(always)]
fn updated_lanes(entry: Lanes, v: Lanes, w: Lanes, v_col: Lanes, w_col: Lanes) -> Lanes {
    entry - (v * w_col + w * v_col)
}

/// Complex counterpart of [`updated`]: entry − v·conj(w_col) − w·conj(v_col).
#[inline(always)]
pub(super) fn updated_complex(
    entry: (f64, f64),
    v: (f64, f64),
    w: (f64, f64),
    v_col: (f64, f64),
    w_col: (f64, f64),
) -> (f64, f64) {
    let re = (v.0 * w_col.0 + v.1 * w_col.1) + (w.0 * v_col.0 + w.1 * v_col.1);
    let im = (v.1 * w_col.0 - v.0 * w_col.1) + (w.1 * v_col.0 - w.0 * v_col.1);
    (entry.0 - re, entry.1 - im)
}

#[inline(always)]
fn updated_complex_lanes(
    entry: (Lanes, Lanes),
    v: (Lanes, Lanes),
    w: (Lanes, Lanes),
    v_col: (Lanes, Lanes),
    w_col: (Lanes, Lanes),
) -> (Lanes, Lanes) {
    let re = (v.0 * w_col.0 + v.1 * w_col.1) + (w.0 * v_col.0 + w.1 * v_col.1);
    let im = (v.1 * w_col.0 - v.0 * w_col.1) + (w.1 * v_col.0 - w.0 * v_col.1);
    (entry.0 - re, entry.1 - im)
}

/// The real pass; see the module. Cost: 8 operations an entry of the triangle.
pub(super) fn real(
    a: &mut [f64],
    stride: usize,
    first: usize,
    v: &[f64],
    w: &[f64],
    x: &[f64],
    y: &mut [f64],
) {
    y[first..].fill(0.0);
    let mut col = first;
    if col % 2 == 1 {
        let column = &mut a[col * stride..(col + 1) * stride];
        real_column(column, col, v, w, x, y);
        col += 1;
    }
    while col < stride {
        let (left, right) = a[col * stride..(col + 2) * stride].split_at_mut(stride);
        real_columns(left, right, col, v, w, x, y);
        col += 2;
    }
}

/// One odd column: its diagonal entry, then whole pairs of rows.
fn real_column(column: &mut [f64], col: usize, v: &[f64], w: &[f64], x: &[f64], y: &mut [f64]) {
    count(8 * (column.len() - col));
    let (v_col, w_col, x_col) = (v[col], w[col], x[col]);
    column[col] = updated(column[col], v_col, w_col, v_col, w_col);
    let mut dot = column[col] * x_col;
    for row in col + 1..column.len() {
        column[row] = updated(column[row], v[row], w[row], v_col, w_col);
        y[row] += column[row] * x_col;
        dot += column[row] * x[row];
    }
    y[col] += dot;
}

/// Two columns from an even one on: the 2 × 2 diagonal block, then pairs of rows.
#[inline(always)]
fn real_columns(
    left: &mut [f64],
    right: &mut [f64],
    col: usize,
    v: &[f64],
    w: &[f64],
    x: &[f64],
    y: &mut [f64],
) {
    count(16 * (left.len() - col));
    let next = col + 1;
    left[col] = updated(left[col], v[col], w[col], v[col], w[col]);
    left[next] = updated(left[next], v[next], w[next], v[col], w[col]);
    right[next] = updated(right[next], v[next], w[next], v[next], w[next]);
    let top = left[col] * x[col] + left[next] * x[next];
    let bottom = left[next] * x[col] + right[next] * x[next];

    let below = col + 2;
    let left = left[below..].as_chunks_mut::<2>().0;
    let pairs = left.len();
    let right = &mut right[below..].as_chunks_mut::<2>().0[..pairs];
    let [v_left, v_right] = [Lanes::splat(v[col]), Lanes::splat(v[next])];
    let [w_left, w_right] = [Lanes::splat(w[col]), Lanes::splat(w[next])];
    let [x_left, x_right] = [Lanes::splat(x[col]), Lanes::splat(x[next])];
    let v = &v[below..].as_chunks::<2>().0[..pairs];
    let w = &w[below..].as_chunks::<2>().0[..pairs];
    let x = &x[below..].as_chunks::<2>().0[..pairs];
    let (y_head, y_tail) = y.split_at_mut(below);
    let y = &mut y_tail.as_chunks_mut::<2>().0[..pairs];
    let mut dot_left = Lanes::splat(0.0);
    let mut dot_right = Lanes::splat(0.0);
    for k in 0..pairs {
        let (v_k, w_k, x_k) = (Lanes::load(&v[k]), Lanes::load(&w[k]), Lanes::load(&x[k]));
        let a = updated_lanes(Lanes::load(&left[k]), v_k, w_k, v_left, w_left);
        let b = updated_lanes(Lanes::load(&right[k]), v_k, w_k, v_right, w_right);
        a.store(&mut left[k]);
        b.store(&mut right[k]);
        dot_left = dot_left + a * x_k;
        dot_right = dot_right + b * x_k;
        (Lanes::load(&y[k]) + (a * x_left + b * x_right)).store(&mut y[k]);
    }
    y_head[col] += top + dot_left.sum();
    y_head[next] += bottom + dot_right.sum();
}

/// The planes of a matrix or vector, to be written; `im` is empty for real data.
pub(super) struct Planes<'a> {
    pub re: &'a mut [f64],
    pub im: &'a mut [f64],
}

/// The complex pass; see the module. Cost: 32 operations an entry.
pub(super) fn complex(
    a: Planes<'_>,
    stride: usize,
    first: usize,
    v: Split<'_>,
    w: Split<'_>,
    x: Split<'_>,
    y: &mut Planes<'_>,
) {
    y.re[first..].fill(0.0);
    y.im[first..].fill(0.0);
    for col in first..stride {
        let column = Planes {
            re: &mut a.re[col * stride..(col + 1) * stride],
            im: &mut a.im[col * stride..(col + 1) * stride],
        };
        complex_column(column, col, v, w, x, y);
    }
}

#[inline(always)]
fn complex_column(
    a: Planes<'_>,
    col: usize,
    v: Split<'_>,
    w: Split<'_>,
    x: Split<'_>,
    y: &mut Planes<'_>,
) {
    count(32 * (a.re.len() - col));
    let (v_col, w_col, x_col) = (v.at(col), w.at(col), x.at(col));
    // The diagonal of a Hermitian matrix is real, and is kept so.
    a.re[col] = updated_complex((a.re[col], 0.0), v_col, w_col, v_col, w_col).0;
    let mut dot_re = a.re[col] * x_col.0;
    let mut dot_im = a.re[col] * x_col.1;
    let mut below = col + 1;
    if below % 2 == 1 {
        let entry = updated_complex(
            (a.re[below], a.im[below]),
            v.at(below),
            w.at(below),
            v_col,
            w_col,
        );
        (a.re[below], a.im[below]) = entry;
        y.re[below] += entry.0 * x_col.0 - entry.1 * x_col.1;
        y.im[below] += entry.0 * x_col.1 + entry.1 * x_col.0;
        let x_row = x.at(below);
        dot_re += entry.0 * x_row.0 + entry.1 * x_row.1;
        dot_im += entry.0 * x_row.1 - entry.1 * x_row.0;
        below += 1;
    }
    let a_re = a.re[below..].as_chunks_mut::<2>().0;
    let pairs = a_re.len();
    let a_im = &mut a.im[below..].as_chunks_mut::<2>().0[..pairs];
    let v_re = &v.re[below..].as_chunks::<2>().0[..pairs];
    let v_im = &v.im[below..].as_chunks::<2>().0[..pairs];
    let w_re = &w.re[below..].as_chunks::<2>().0[..pairs];
    let w_im = &w.im[below..].as_chunks::<2>().0[..pairs];
    let x_re = &x.re[below..].as_chunks::<2>().0[..pairs];
    let x_im = &x.im[below..].as_chunks::<2>().0[..pairs];
    let y_re = &mut y.re[below..].as_chunks_mut::<2>().0[..pairs];
    let y_im = &mut y.im[below..].as_chunks_mut::<2>().0[..pairs];
    let splat = |z: (f64, f64)| (Lanes::splat(z.0), Lanes::splat(z.1));
    let (v_col, w_col, x_col) = (splat(v_col), splat(w_col), splat(x_col));
    let mut sum_re = Lanes::splat(0.0);
    let mut sum_im = Lanes::splat(0.0);
    for k in 0..pairs {
        let v_k = (Lanes::load(&v_re[k]), Lanes::load(&v_im[k]));
        let w_k = (Lanes::load(&w_re[k]), Lanes::load(&w_im[k]));
        let entry = (Lanes::load(&a_re[k]), Lanes::load(&a_im[k]));
        let (re, im) = updated_complex_lanes(entry, v_k, w_k, v_col, w_col);
        re.store(&mut a_re[k]);
        im.store(&mut a_im[k]);
        (Lanes::load(&y_re[k]) + (re * x_col.0 - im * x_col.1)).store(&mut y_re[k]);
        (Lanes::load(&y_im[k]) + (re * x_col.1 + im * x_col.0)).store(&mut y_im[k]);
        let x_k = (Lanes::load(&x_re[k]), Lanes::load(&x_im[k]));
        sum_re = sum_re + (re * x_k.0 + im * x_k.1);
        sum_im = sum_im + (re * x_k.1 - im * x_k.0);
    }
    y.re[col] += dot_re + sum_re.sum();
    y.im[col] += dot_im + sum_im.sum();
}

/// Σ |entry|² over the entries of a column two and more below the diagonal, the
/// update by v and w applied on the fly.
pub(super) fn squares_below_band(
    re: &[f64],
    im: &[f64],
    stride: usize,
    col: usize,
    v: Split<'_>,
    w: Split<'_>,
) -> f64 {
    let base = col * stride;
    let mut below = col + 2;
    let mut sum = 0.0;
    if below % 2 == 1 && below < stride {
        let (entry_re, entry_im) = if im.is_empty() {
            (
                updated(
                    re[base + below],
                    v.re[below],
                    w.re[below],
                    v.re[col],
                    w.re[col],
                ),
                0.0,
            )
        } else {
            let entry = (re[base + below], im[base + below]);
            updated_complex(entry, v.at(below), w.at(below), v.at(col), w.at(col))
        };
        sum += entry_re * entry_re + entry_im * entry_im;
        below += 1;
    }
    if below >= stride {
        return sum;
    }
    let a_re = re[base + below..base + stride].as_chunks::<2>().0;
    let count = a_re.len();
    let v_re = &v.re[below..].as_chunks::<2>().0[..count];
    let w_re = &w.re[below..].as_chunks::<2>().0[..count];
    let (v_col, w_col) = (Lanes::splat(v.re[col]), Lanes::splat(w.re[col]));
    let mut squares = Lanes::splat(0.0);
    if im.is_empty() {
        for k in 0..count {
            let (v_k, w_k) = (Lanes::load(&v_re[k]), Lanes::load(&w_re[k]));
            let entry = updated_lanes(Lanes::load(&a_re[k]), v_k, w_k, v_col, w_col);
            squares = squares + entry * entry;
        }
        return sum + squares.sum();
    }
    let a_im = &im[base + below..base + stride].as_chunks::<2>().0[..count];
    let v_im = &v.im[below..].as_chunks::<2>().0[..count];
    let w_im = &w.im[below..].as_chunks::<2>().0[..count];
    let (v_col, w_col) = (
        (v_col, Lanes::splat(v.im[col])),
        (w_col, Lanes::splat(w.im[col])),
    );
    for k in 0..count {
        let entry = (Lanes::load(&a_re[k]), Lanes::load(&a_im[k]));
        let v_k = (Lanes::load(&v_re[k]), Lanes::load(&v_im[k]));
        let w_k = (Lanes::load(&w_re[k]), Lanes::load(&w_im[k]));
        let (re, im) = updated_complex_lanes(entry, v_k, w_k, v_col, w_col);
        squares = squares + (re * re + im * im);
    }
    sum + squares.sum()
}
