//! Matrix products.
//!
//! Notation: C ← C ± op(A) B, m × n with inner length k; op is the identity or
//! the conjugate transpose. All storage is column-major, in planes.
//!
//! The inner loop works on tiles of 4 × 4 held in registers; operands are
//! packed so that it reads memory in order. Each entry of a plane of C is
//! summed over the inner index in ascending order (for complex operands first
//! the products of the left real parts, then those of the left imaginary
//! parts), in slices of [`DEPTH`] inner indices; slices are then added to C in
//! order. The order of summation depends on the shape alone. Every term is a
//! plain product (no three-multiplication trick), so the usual bound holds entry
//! by entry: |fl(C) − C| ≤ γ |A||B| + underflow, γ = γ_{k+⌈k/DEPTH⌉} for real
//! operands and γ_{2k+⌈k/DEPTH⌉} for complex ones, |·| there the sum of the
//! parts' moduli (Higham, "Accuracy and Stability of Numerical Algorithms",
//! 2nd ed., §3). Nothing is scaled: products that overflow or underflow do so.

use super::packing::{pack, Strips};
use super::tile::{add_tile, tile_products, Place, TILE};
use super::Dense;
use nalgebra::DMatrix;

/// Inner indices summed in registers before they are added to C.
pub const DEPTH: usize = 256;

/// Rows packed at a time: a block of DEPTH × ROWS doubles stays in the second-level cache.
const ROWS: usize = 64;

/// How an operand enters the product.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Orientation {
    /// As it stands.
    AsStored,
    /// Transposed, and conjugated if complex.
    Transposed,
}

/// What happens to the target.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Update {
    /// The product is added to it.
    Add,
    /// The product is subtracted from it.
    Subtract,
}

/// An operand: entry (i, j) as stored is `re[i + j·stride]`; `im` is empty for
/// a real one.
#[derive(Clone, Copy)]
pub(crate) struct Operand<'a> {
    pub re: &'a [f64],
    pub im: &'a [f64],
    pub stride: usize,
}

/// The target of both planes; `im` is empty when both operands are real.
pub(crate) struct SplitTarget<'a> {
    pub re: &'a mut [f64],
    pub im: &'a mut [f64],
    pub stride: usize,
}

/// One plane of an operand, for products of planes.
#[derive(Clone, Copy)]
pub struct Plane<'a> {
    /// Entry (i, j) as stored is `data[i + j·stride]`.
    pub data: &'a [f64],
    /// From a column to the next; at least the rows.
    pub stride: usize,
    /// How it enters.
    pub orientation: Orientation,
}

/// One plane of a target.
pub struct Target<'a> {
    /// Entry (i, j) is `data[i + j·stride]`.
    pub data: &'a mut [f64],
    /// From a column to the next; at least the rows.
    pub stride: usize,
}

/// Shape of a product: op(A) is `rows` × `inner`, B is `inner` × `cols`.
#[derive(Clone, Copy)]
pub struct Shape {
    /// Rows of op(A) and of the target.
    pub rows: usize,
    /// Columns of op(B) and of the target.
    pub cols: usize,
    /// Columns of op(A), rows of op(B).
    pub inner: usize,
}

/// Room for packed operands, kept between products.
#[derive(Default)]
pub struct Packing {
    left: [Vec<f64>; 2],
    right: [Vec<f64>; 2],
}

/// C ← C ± op(A) op(B) on one plane each. Cost: 2·rows·cols·inner operations.
///
/// # Panics
/// If a slice is shorter than its shape and stride say.
pub fn accumulate(
    shape: Shape,
    update: Update,
    left: Plane<'_>,
    right: Plane<'_>,
    target: &mut Target<'_>,
    packing: &mut Packing,
) {
    let operand = |plane: Plane<'_>| (plane.orientation, plane.stride);
    let ((left_orientation, left_stride), (right_orientation, right_stride)) =
        (operand(left), operand(right));
    let left = Operand {
        re: left.data,
        im: &[],
        stride: left_stride,
    };
    let right = Operand {
        re: right.data,
        im: &[],
        stride: right_stride,
    };
    let right_strips = match right_orientation {
        Orientation::AsStored => Strips::OfColumns,
        Orientation::Transposed => Strips::OfRows,
    };
    let target = &mut SplitTarget {
        re: target.data,
        im: &mut [],
        stride: target.stride,
    };
    run(
        shape,
        update,
        (left, left_orientation),
        (right, right_strips),
        target,
        packing,
    );
}

/// C ← C ± op(A) B on both planes.
///
/// Cost: 2·rows·cols·inner operations for real operands, twice that when one
/// is complex, four times when both are.
pub(crate) fn accumulate_split(
    shape: Shape,
    update: Update,
    left: (Operand<'_>, Orientation),
    right: Operand<'_>,
    target: &mut SplitTarget<'_>,
    packing: &mut Packing,
) {
    run(
        shape,
        update,
        left,
        (right, Strips::OfColumns),
        target,
        packing,
    );
}

fn run(
    shape: Shape,
    update: Update,
    (left, orientation): (Operand<'_>, Orientation),
    (right, right_strips): (Operand<'_>, Strips),
    target: &mut SplitTarget<'_>,
    packing: &mut Packing,
) {
    let Shape { rows, cols, inner } = shape;
    for start in (0..inner).step_by(DEPTH) {
        let depth = DEPTH.min(inner - start);
        for (packed, source) in packing.right.iter_mut().zip([right.re, right.im]) {
            pack(
                packed,
                source,
                right.stride,
                right_strips,
                0..cols,
                start..start + depth,
            );
        }
        let strips = match orientation {
            Orientation::AsStored => Strips::OfRows,
            Orientation::Transposed => Strips::OfColumns,
        };
        for top in (0..rows).step_by(ROWS) {
            let bottom = rows.min(top + ROWS);
            for (packed, source) in packing.left.iter_mut().zip([left.re, left.im]) {
                pack(
                    packed,
                    source,
                    left.stride,
                    strips,
                    top..bottom,
                    start..start + depth,
                );
            }
            let strip = TILE * depth;
            let strip_of = |packed: &Vec<f64>, k: usize| {
                if packed.is_empty() {
                    0..0
                } else {
                    k * strip..(k + 1) * strip
                }
            };
            for col in (0..cols).step_by(TILE) {
                let [r_re, r_im] = &packing.right;
                let at = col / TILE;
                let right = [&r_re[strip_of(r_re, at)], &r_im[strip_of(r_im, at)]];
                for row in (top..bottom).step_by(TILE) {
                    let [l_re, l_im] = &packing.left;
                    let at = (row - top) / TILE;
                    let left = [&l_re[strip_of(l_re, at)], &l_im[strip_of(l_im, at)]];
                    let place = Place {
                        row,
                        rows,
                        col,
                        cols,
                        stride: target.stride,
                    };
                    let (re, im) = tile_products(left, orientation, right);
                    add_tile(re, update, target.re, place);
                    if let Some(im) = im {
                        add_tile(im, update, target.im, place);
                    }
                }
            }
        }
    }
}

/// A · B. Shapes m × k and k × n.
///
/// # Panics
/// If the inner lengths differ.
pub fn product(a: &Dense, b: &Dense) -> Dense {
    assert_eq!(a.cols(), b.rows(), "inner lengths of a product");
    let shape = Shape {
        rows: a.rows(),
        cols: b.cols(),
        inner: a.cols(),
    };
    dense_product(shape, (a, Orientation::AsStored), b)
}

/// Aᴴ · B. Shapes k × m and k × n.
///
/// # Panics
/// If the inner lengths differ.
pub fn adjoint_product(a: &Dense, b: &Dense) -> Dense {
    assert_eq!(a.rows(), b.rows(), "inner lengths of a product");
    let shape = Shape {
        rows: a.cols(),
        cols: b.cols(),
        inner: a.rows(),
    };
    dense_product(shape, (a, Orientation::Transposed), b)
}

fn operand(x: &Dense) -> Operand<'_> {
    let im = x.im.as_ref().map_or(&[][..], |im| im.as_slice());
    Operand {
        re: x.re.as_slice(),
        im,
        stride: x.rows(),
    }
}

fn dense_product(shape: Shape, (a, orientation): (&Dense, Orientation), b: &Dense) -> Dense {
    let mut re = DMatrix::zeros(shape.rows, shape.cols);
    let complex = a.is_complex() || b.is_complex();
    let mut im = complex.then(|| DMatrix::zeros(shape.rows, shape.cols));
    let mut target = SplitTarget {
        re: re.as_mut_slice(),
        im: im.as_mut().map_or(&mut [], |im| im.as_mut_slice()),
        stride: shape.rows,
    };
    let packing = &mut Packing::default();
    accumulate_split(
        shape,
        Update::Add,
        (operand(a), orientation),
        operand(b),
        &mut target,
        packing,
    );
    Dense { re, im }
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::{Complex, DMatrix};

    /// Small integers: every product and sum is exact, so equality is exact.
    fn integers(rows: usize, cols: usize, seed: usize) -> DMatrix<f64> {
        DMatrix::from_fn(rows, cols, |i, j| {
            ((i * 7 + j * 13 + seed * 5) % 19) as f64 - 9.0
        })
    }

    fn joined(x: &Dense) -> DMatrix<Complex<f64>> {
        DMatrix::from_fn(x.rows(), x.cols(), |i, j| {
            Complex::new(x.re[(i, j)], x.im.as_ref().map_or(0.0, |im| im[(i, j)]))
        })
    }

    fn dense(rows: usize, cols: usize, seed: usize, complex: bool) -> Dense {
        let re = integers(rows, cols, seed);
        if complex {
            Dense::complex(re, integers(rows, cols, seed + 3))
        } else {
            Dense::real(re)
        }
    }

    #[test]
    fn products_of_integers_are_exact_for_every_shape_and_kind() {
        for (m, k, n) in [
            (1, 1, 1),
            (2, 3, 4),
            (5, 7, 3),
            (9, 0, 2),
            (70, 300, 6),
            (4, 513, 5),
        ] {
            for (left, right) in [(false, false), (false, true), (true, false), (true, true)] {
                let a = dense(m, k, 1, left);
                let b = dense(k, n, 2, right);
                assert_eq!(
                    joined(&product(&a, &b)),
                    joined(&a) * joined(&b),
                    "{m} {k} {n} {left} {right}"
                );
                let a = dense(k, m, 1, left);
                assert_eq!(
                    joined(&adjoint_product(&a, &b)),
                    joined(&a).adjoint() * joined(&b),
                    "adjoint {m} {k} {n} {left} {right}"
                );
            }
        }
    }
}
