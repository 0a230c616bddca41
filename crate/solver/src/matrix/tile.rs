//! The register tile of a product: 4 × 4 entries of one plane of the target.

use super::counted::count;
use super::kernels::{Orientation, Update};
use super::lanes::Lanes;

/// Side of the tile.
pub(super) const TILE: usize = 4;

/// Columns of the 4 × 4 tile, rows in two register pairs.
pub(super) type Tile = [[Lanes; 2]; TILE];

/// The real and, where there is one, the imaginary tile of one product.
#[inline(always)]
pub(super) fn tile_products(
    left: [&[f64]; 2],
    orientation: Orientation,
    right: [&[f64]; 2],
) -> (Tile, Option<Tile>) {
    let zero = [[Lanes::splat(0.0); 2]; TILE];
    let re = add_products(zero, left[0], right[0]);
    if left[1].is_empty() && right[1].is_empty() {
        return (re, None);
    }
    // The conjugate changes the sign of the left imaginary part only.
    match orientation {
        Orientation::AsStored => {
            let im = add_products(zero, left[0], right[1]);
            (
                subtract_products(re, left[1], right[1]),
                Some(add_products(im, left[1], right[0])),
            )
        }
        Orientation::Transposed => {
            let im = add_products(zero, left[0], right[1]);
            (
                add_products(re, left[1], right[1]),
                Some(subtract_products(im, left[1], right[0])),
            )
        }
    }
}

#[inline(always)]
fn add_products(tile: Tile, left: &[f64], right: &[f64]) -> Tile {
    each_product(tile, left, right, |sum, product| sum + product)
}

#[inline(always)]
fn subtract_products(tile: Tile, left: &[f64], right: &[f64]) -> Tile {
    each_product(tile, left, right, |sum, product| sum - product)
}

/// The innermost loop: 16 multiplications and 16 sums a step, on two registers
/// of the left strip and four broadcast values of the right one.
#[inline(always)]
fn each_product(
    mut tile: Tile,
    left: &[f64],
    right: &[f64],
    join: impl Fn(Lanes, Lanes) -> Lanes,
) -> Tile {
    count(2 * TILE * left.len());
    let left = left.as_chunks::<2>().0.as_chunks::<2>().0;
    for ([upper, lower], values) in left.iter().zip(right.as_chunks::<TILE>().0) {
        let (upper, lower) = (Lanes::load(upper), Lanes::load(lower));
        for (column, value) in tile.iter_mut().zip(values) {
            let value = Lanes::splat(*value);
            column[0] = join(column[0], upper * value);
            column[1] = join(column[1], lower * value);
        }
    }
    tile
}

/// Where a tile belongs in the target.
#[derive(Clone, Copy)]
pub(super) struct Place {
    pub row: usize,
    pub rows: usize,
    pub col: usize,
    pub cols: usize,
    pub stride: usize,
}

#[inline(always)]
pub(super) fn add_tile(tile: Tile, update: Update, target: &mut [f64], place: Place) {
    let Place {
        row,
        rows,
        col,
        cols,
        stride,
    } = place;
    let height = TILE.min(rows - row);
    for (j, [upper, lower]) in tile.into_iter().enumerate().take(cols - col) {
        let at = row + (col + j) * stride;
        let destination = &mut target[at..at + height];
        if let ([first, second], []) = destination.as_chunks_mut::<2>() {
            let (above, below) = (Lanes::load(first), Lanes::load(second));
            let (above, below) = match update {
                Update::Add => (above + upper, below + lower),
                Update::Subtract => (above - upper, below - lower),
            };
            above.store(first);
            below.store(second);
            continue;
        }
        let ([a, b], [c, d]) = (upper.to_array(), lower.to_array());
        for (entry, value) in destination.iter_mut().zip([a, b, c, d]) {
            match update {
                Update::Add => *entry += value,
                Update::Subtract => *entry -= value,
            }
        }
    }
}
