//! Matrix products in blocks of columns, so that a cancel is heard between.
//!
//! Notation: X the vectors, W = MX. The order of summation within an entry is
//! the kernel's: it does not depend on the blocks.

use std::ops::Range;

use nalgebra::DMatrix;

use crate::control::{Control, Flow, Stage};
use crate::matrix::kernels::{accumulate, Orientation, Packing, Plane, Shape, Target, Update};
use crate::matrix::Dense;

/// The caller cancelled.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Cancelled;

/// A caller's hold, and what is reported to it while products run.
pub(super) struct Watch<'a> {
    pub control: &'a mut dyn Control,
    /// Share of the stage that is done, 0 to 1.
    pub done: f64,
}

impl Watch<'_> {
    /// Reports; an error if the caller cancels.
    pub fn check(&mut self) -> Result<(), Cancelled> {
        match self.control.progress(Stage::Prove, self.done) {
            Flow::Continue => Ok(()),
            Flow::Cancel => Err(Cancelled),
        }
    }
}

/// Columns of a block of a full product: wide, since the kernel packs the left
/// factor once a block; at order 1,000 a block takes about a tenth of a second.
const WIDE: usize = 128;

/// Columns of a block of a half product: narrow, since a block is computed down
/// to its last diagonal entry.
const NARROW: usize = 32;

fn blocks(columns: usize, width: usize) -> impl Iterator<Item = Range<usize>> {
    (0..columns)
        .step_by(width)
        .map(move |start| start..columns.min(start + width))
}

/// One term of a plane of a product: left plane, right plane, sign.
type Term<'a> = (&'a DMatrix<f64>, &'a DMatrix<f64>, Update);

/// target columns ← target columns + Σ ± op(left) · right columns, for the
/// first `rows` rows.
fn add_terms(
    target: &mut DMatrix<f64>,
    terms: &[Term<'_>],
    orientation: Orientation,
    rows: usize,
    columns: &Range<usize>,
    packing: &mut Packing,
) {
    for (left, right, update) in terms {
        let inner = right.nrows();
        let shape = Shape {
            rows,
            cols: columns.len(),
            inner,
        };
        let left = Plane {
            data: left.as_slice(),
            stride: left.nrows(),
            orientation,
        };
        let right = Plane {
            data: &right.as_slice()[columns.start * inner..],
            stride: inner,
            orientation: Orientation::AsStored,
        };
        let stride = target.nrows();
        let mut target = Target {
            data: &mut target.as_mut_slice()[columns.start * stride..],
            stride,
        };
        accumulate(shape, *update, left, right, &mut target, packing);
    }
}

/// target ← target + left · right, all three real or all three complex.
pub(super) fn add_product(
    target: &mut Dense,
    left: &Dense,
    right: &Dense,
    watch: &mut Watch<'_>,
) -> Result<(), Cancelled> {
    use Update::{Add, Subtract};
    let mut packing = Packing::default();
    let rows = left.rows();
    let stored = Orientation::AsStored;
    for columns in blocks(right.cols(), WIDE) {
        watch.check()?;
        let mut add = |target: &mut DMatrix<f64>, terms: &[Term<'_>]| {
            add_terms(target, terms, stored, rows, &columns, &mut packing);
        };
        match (&mut target.im, &left.im, &right.im) {
            (Some(im), Some(left_im), Some(right_im)) => {
                add(
                    &mut target.re,
                    &[(&left.re, &right.re, Add), (left_im, right_im, Subtract)],
                );
                add(im, &[(&left.re, right_im, Add), (left_im, &right.re, Add)]);
            }
            _ => add(&mut target.re, &[(&left.re, &right.re, Add)]),
        }
    }
    Ok(())
}

/// left · right, both real or both complex.
pub(super) fn watched_product(
    left: &Dense,
    right: &Dense,
    watch: &mut Watch<'_>,
) -> Result<Dense, Cancelled> {
    let mut result = zeros_like(right);
    add_product(&mut result, left, right, watch)?;
    Ok(result)
}

/// XᴴW for W = MX, an exactly Hermitian matrix: the upper triangle is computed
/// and mirrored.
pub(super) fn hermitian_gram(
    vectors: &Dense,
    weighted: &Dense,
    watch: &mut Watch<'_>,
) -> Result<Dense, Cancelled> {
    use Update::{Add, Subtract};
    let mut result = zeros_like(vectors);
    let mut packing = Packing::default();
    for columns in blocks(vectors.cols(), NARROW) {
        watch.check()?;
        let mut add = |target: &mut DMatrix<f64>, terms: &[Term<'_>]| {
            add_terms(
                target,
                terms,
                Orientation::Transposed,
                columns.end,
                &columns,
                &mut packing,
            );
        };
        match (&mut result.im, &vectors.im, &weighted.im) {
            (Some(im), Some(x), Some(w)) => {
                add(
                    &mut result.re,
                    &[(&vectors.re, &weighted.re, Add), (x, w, Add)],
                );
                add(im, &[(&vectors.re, w, Add), (x, &weighted.re, Subtract)]);
            }
            _ => add(&mut result.re, &[(&vectors.re, &weighted.re, Add)]),
        }
    }
    mirror(&mut result.re, 1.0);
    if let Some(im) = &mut result.im {
        mirror(im, -1.0);
        im.fill_diagonal(0.0);
    }
    Ok(result)
}

/// Copies the upper triangle, times `sign`, to the lower one.
fn mirror(plane: &mut DMatrix<f64>, sign: f64) {
    for j in 0..plane.ncols() {
        for i in j + 1..plane.nrows() {
            plane[(i, j)] = sign * plane[(j, i)];
        }
    }
}

/// Zeros of the same shape and planes.
pub(super) fn zeros_like(matrix: &Dense) -> Dense {
    let zeros = |plane: &DMatrix<f64>| DMatrix::zeros(plane.nrows(), plane.ncols());
    Dense {
        re: zeros(&matrix.re),
        im: matrix.im.as_ref().map(zeros),
    }
}
