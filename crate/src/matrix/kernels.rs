//! Matrix products.
//!
//! Notation: C ← C ± op(A) op(B), m × n with inner length k; op is the identity
//! or the conjugate transpose. All storage is column-major.
//!
//! The inner loop works on tiles of 4 × 4 held in registers; operands are
//! packed so that it reads memory in order. Within a tile each entry of C is
//! summed over the inner index in ascending order, in slices of [`DEPTH`]
//! terms; slices are then added to C in order. The order of summation depends
//! on the shape alone. Every term is a plain product (no three-multiplication
//! trick), so the usual bound holds entry by entry:
//! |fl(C) − C| ≤ γ |A||B| + underflow, γ = γ_{k+⌈k/DEPTH⌉} for real operands and
//! γ_{2k+2⌈k/DEPTH⌉} with |·| the sum of the parts' moduli for complex ones
//! (Higham, "Accuracy and Stability of Numerical Algorithms", 2nd ed., §3).
//! Nothing is scaled: entries whose products overflow or underflow do so.

use super::lanes::Lanes;
use super::Dense;
use nalgebra::DMatrix;

/// Terms summed in registers before they are added to C.
pub const DEPTH: usize = 256;

/// Rows packed at a time: a block of DEPTH × ROWS doubles stays in the second-level cache.
const ROWS: usize = 64;

/// Side of the register tile.
const TILE: usize = 4;

/// How an operand enters the product.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Orientation {
    AsStored,
    Transposed,
}

/// What happens to the target.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Update {
    Add,
    Subtract,
}

/// One plane of an operand: entry (i, j) as stored is `data[i + j·stride]`.
#[derive(Clone, Copy)]
pub(crate) struct Plane<'a> {
    pub data: &'a [f64],
    pub stride: usize,
    pub orientation: Orientation,
}

/// The target's plane.
pub(crate) struct Target<'a> {
    pub data: &'a mut [f64],
    pub stride: usize,
}

/// Shape of a product: op(A) is `rows` × `inner`, op(B) is `inner` × `cols`.
#[derive(Clone, Copy)]
pub(crate) struct Shape {
    pub rows: usize,
    pub cols: usize,
    pub inner: usize,
}

/// Room for packed operands, kept between products.
#[derive(Default)]
pub(crate) struct Packing {
    left: Vec<f64>,
    right: Vec<f64>,
}

/// C ← C ± op(A) op(B) on one plane each.
///
/// Cost: 2·rows·cols·inner operations.
pub(crate) fn accumulate(
    shape: Shape,
    update: Update,
    left: Plane<'_>,
    right: Plane<'_>,
    target: &mut Target<'_>,
    packing: &mut Packing,
) {
    let Shape { rows, cols, inner } = shape;
    for depth_start in (0..inner).step_by(DEPTH) {
        let depth = DEPTH.min(inner - depth_start);
        let right_strips = cols.div_ceil(TILE);
        packing.right.resize(right_strips * TILE * depth, 0.0);
        for (strip, packed) in packing.right.chunks_exact_mut(TILE * depth).enumerate() {
            // op(B)ᵀ's rows are op(B)'s columns.
            pack_strip(
                packed,
                flipped(right),
                strip * TILE,
                cols,
                depth_start,
                depth,
            );
        }
        for row_start in (0..rows).step_by(ROWS) {
            let row_end = rows.min(row_start + ROWS);
            let left_strips = (row_end - row_start).div_ceil(TILE);
            packing.left.resize(left_strips * TILE * depth, 0.0);
            for (strip, packed) in packing.left.chunks_exact_mut(TILE * depth).enumerate() {
                pack_strip(
                    packed,
                    left,
                    row_start + strip * TILE,
                    rows,
                    depth_start,
                    depth,
                );
            }
            for (strip, right_strip) in packing.right.chunks_exact(TILE * depth).enumerate() {
                let col = strip * TILE;
                for (strip, left_strip) in packing.left.chunks_exact(TILE * depth).enumerate() {
                    let row = row_start + strip * TILE;
                    let tile = tile_product(left_strip, right_strip);
                    add_tile(tile, update, target, row, rows, col, cols);
                }
            }
        }
    }
}

fn flipped(plane: Plane<'_>) -> Plane<'_> {
    let orientation = match plane.orientation {
        Orientation::AsStored => Orientation::Transposed,
        Orientation::Transposed => Orientation::AsStored,
    };
    Plane {
        orientation,
        ..plane
    }
}

/// Packs rows `row..row+4` of op(A), columns `start..start+depth`, four values
/// a column; rows past `rows` are zero.
fn pack_strip(
    packed: &mut [f64],
    plane: Plane<'_>,
    row: usize,
    rows: usize,
    start: usize,
    depth: usize,
) {
    let present = TILE.min(rows - row);
    match plane.orientation {
        Orientation::AsStored => {
            for (k, four) in packed.as_chunks_mut::<TILE>().0.iter_mut().enumerate() {
                let at = row + (start + k) * plane.stride;
                if present == TILE {
                    four.copy_from_slice(&plane.data[at..at + TILE]);
                } else {
                    *four = [0.0; TILE];
                    four[..present].copy_from_slice(&plane.data[at..at + present]);
                }
            }
        }
        Orientation::Transposed => {
            if present < TILE {
                packed.fill(0.0);
            }
            for r in 0..present {
                let at = start + (row + r) * plane.stride;
                let source = &plane.data[at..at + depth];
                for (four, value) in packed.as_chunks_mut::<TILE>().0.iter_mut().zip(source) {
                    four[r] = *value;
                }
            }
        }
    }
}

/// Columns of the 4 × 4 tile, rows in two register pairs.
type Tile = [[Lanes; 2]; TILE];

#[inline(always)]
fn tile_product(left: &[f64], right: &[f64]) -> Tile {
    let mut tile = [[Lanes::splat(0.0); 2]; TILE];
    for (a, b) in left
        .as_chunks::<TILE>()
        .0
        .iter()
        .zip(right.as_chunks::<TILE>().0)
    {
        let upper = Lanes::load(&[a[0], a[1]]);
        let lower = Lanes::load(&[a[2], a[3]]);
        for (column, value) in tile.iter_mut().zip(b) {
            let value = Lanes::splat(*value);
            column[0] = column[0] + upper * value;
            column[1] = column[1] + lower * value;
        }
    }
    tile
}

#[inline(always)]
fn add_tile(
    tile: Tile,
    update: Update,
    target: &mut Target<'_>,
    row: usize,
    rows: usize,
    col: usize,
    cols: usize,
) {
    let height = TILE.min(rows - row);
    for (j, column) in tile.iter().enumerate().take(cols - col) {
        let at = row + (col + j) * target.stride;
        let [a, b] = column[0].to_array();
        let [c, d] = column[1].to_array();
        let destination = &mut target.data[at..at + height];
        for (entry, value) in destination.iter_mut().zip([a, b, c, d]) {
            match update {
                Update::Add => *entry += value,
                Update::Subtract => *entry -= value,
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
    dense_product(shape, a, Orientation::AsStored, b)
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
    dense_product(shape, a, Orientation::Transposed, b)
}

fn dense_product(shape: Shape, a: &Dense, orientation: Orientation, b: &Dense) -> Dense {
    let mut packing = Packing::default();
    let mut plane = |terms: &[(&DMatrix<f64>, &DMatrix<f64>, Update)]| {
        let mut result = DMatrix::zeros(shape.rows, shape.cols);
        for (left, right, update) in terms {
            let left = Plane {
                data: left.as_slice(),
                stride: left.nrows(),
                orientation,
            };
            let right = Plane {
                data: right.as_slice(),
                stride: right.nrows(),
                orientation: Orientation::AsStored,
            };
            let mut target = Target {
                data: result.as_mut_slice(),
                stride: shape.rows,
            };
            accumulate(shape, *update, left, right, &mut target, &mut packing);
        }
        result
    };
    use Update::{Add, Subtract};
    // The conjugate changes the sign of A's imaginary part only.
    let (with, against) = match orientation {
        Orientation::AsStored => (Add, Subtract),
        Orientation::Transposed => (Subtract, Add),
    };
    match (&a.im, &b.im) {
        (None, None) => Dense::real(plane(&[(&a.re, &b.re, Add)])),
        (None, Some(b_im)) => {
            Dense::complex(plane(&[(&a.re, &b.re, Add)]), plane(&[(&a.re, b_im, Add)]))
        }
        (Some(a_im), None) => {
            Dense::complex(plane(&[(&a.re, &b.re, Add)]), plane(&[(a_im, &b.re, with)]))
        }
        (Some(a_im), Some(b_im)) => Dense::complex(
            plane(&[(&a.re, &b.re, Add), (a_im, b_im, against)]),
            plane(&[(&a.re, b_im, Add), (a_im, &b.re, with)]),
        ),
    }
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
