//! Operands of a product in the order its innermost loop reads them.

use super::tile::TILE;

/// Which way the strips of four lie in the stored operand.
#[derive(Clone, Copy)]
pub(super) enum Strips {
    /// Four rows, along the columns.
    OfRows,
    /// Four columns, along the rows.
    OfColumns,
}

/// Packs strips of four, `across` them and `along` the inner index; a last
/// strip that is not full is filled with zeros.
pub(super) fn pack(
    packed: &mut Vec<f64>,
    source: &[f64],
    stride: usize,
    strips: Strips,
    across: std::ops::Range<usize>,
    along: std::ops::Range<usize>,
) {
    let depth = along.len();
    if source.is_empty() || depth == 0 {
        packed.clear();
        return;
    }
    let length = across.len().div_ceil(TILE) * TILE * depth;
    if packed.capacity() < length {
        // Every number is written below: what was there need not be copied.
        *packed = vec![0.0; length];
    }
    packed.resize(length, 0.0);
    for (strip, packed) in packed.chunks_exact_mut(TILE * depth).enumerate() {
        let first = across.start + strip * TILE;
        let present = TILE.min(across.end - first);
        let fours = packed.as_chunks_mut::<TILE>().0;
        if present < TILE {
            fours.fill([0.0; TILE]);
        }
        match strips {
            Strips::OfRows => {
                for (four, k) in fours.iter_mut().zip(along.clone()) {
                    let at = first + k * stride;
                    if present == TILE {
                        four.copy_from_slice(&source[at..at + TILE]);
                    } else {
                        four[..present].copy_from_slice(&source[at..at + present]);
                    }
                }
            }
            Strips::OfColumns if present == TILE => {
                let column = |k: usize| &source[(first + k) * stride..][along.clone()];
                let [a, b, c, d] = [column(0), column(1), column(2), column(3)];
                for (k, four) in fours.iter_mut().enumerate() {
                    *four = [a[k], b[k], c[k], d[k]];
                }
            }
            Strips::OfColumns => {
                for lane in 0..present {
                    let column = &source[(first + lane) * stride..][along.clone()];
                    for (four, value) in fours.iter_mut().zip(column) {
                        four[lane] = *value;
                    }
                }
            }
        }
    }
}
