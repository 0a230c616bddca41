//! Passes over columns: sums that bounds are made of, and the entrywise steps of
//! accurate products. They stand here, and not with the proof that uses them,
//! to be compiled for speed with the kernels.
//!
//! Sums are taken in four interleaved parts, combined pairwise at the end:
//! one fixed order, natively and as wasm. A sum of k ≥ 1 terms passes through
//! fewer than k additions.
//!
//! Notation: u = 2^−53; h + l an unevaluated pair.

use crate::eft::{two_product, two_sum};
use nalgebra::DMatrix;

/// Parts of an interleaved sum.
const LANES: usize = 4;

/// Column k of a plane.
pub fn column(plane: &DMatrix<f64>, k: usize) -> &[f64] {
    let rows = plane.nrows();
    &plane.as_slice()[k * rows..(k + 1) * rows]
}

/// Column k of a plane, to be written.
pub fn column_mut(plane: &mut DMatrix<f64>, k: usize) -> &mut [f64] {
    let rows = plane.nrows();
    &mut plane.as_mut_slice()[k * rows..(k + 1) * rows]
}

fn total(lanes: [f64; LANES]) -> f64 {
    (lanes[0] + lanes[1]) + (lanes[2] + lanes[3])
}

/// Sums over one column in plain double.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct ColumnSums {
    /// Σ re² + im².
    pub squares: f64,
    /// Σ √(re² + im²); each modulus is off by at most two roundings, and by
    /// 2^−537 where squares fall below the normal range.
    pub moduli: f64,
    /// Whether every part is a zero.
    pub is_zero: bool,
}

/// Sums over a real column; each modulus is added to its place in `rows` too.
pub fn column_sums(x: &[f64], rows: &mut [f64]) -> ColumnSums {
    let (mut squares, mut moduli, mut bits) = ([0.0; LANES], [0.0; LANES], [0u64; LANES]);
    for (x, rows) in x.chunks(LANES).zip(rows.chunks_mut(LANES)) {
        for (lane, (x, row)) in x.iter().zip(rows).enumerate() {
            let modulus = x.abs();
            *row += modulus;
            moduli[lane] += modulus;
            squares[lane] += x * x;
            bits[lane] |= modulus.to_bits();
        }
    }
    ColumnSums {
        squares: total(squares),
        moduli: total(moduli),
        is_zero: bits == [0; LANES],
    }
}

/// Sums over a complex column, likewise.
pub fn complex_column_sums(re: &[f64], im: &[f64], rows: &mut [f64]) -> ColumnSums {
    let (mut squares, mut moduli, mut bits) = ([0.0; LANES], [0.0; LANES], [0u64; LANES]);
    let parts = re.chunks(LANES).zip(im.chunks(LANES));
    for ((re, im), rows) in parts.zip(rows.chunks_mut(LANES)) {
        for (lane, ((re, im), row)) in re.iter().zip(im).zip(rows).enumerate() {
            let square = re * re + im * im;
            let modulus = square.sqrt();
            *row += modulus;
            moduli[lane] += modulus;
            squares[lane] += square;
            bits[lane] |= re.abs().to_bits() | im.abs().to_bits();
        }
    }
    ColumnSums {
        squares: total(squares),
        moduli: total(moduli),
        is_zero: bits == [0; LANES],
    }
}

/// Σx² in plain double, and whether every x is a zero.
pub fn square_sum(x: &[f64]) -> (f64, bool) {
    let (mut squares, mut bits) = ([0.0; LANES], [0u64; LANES]);
    for chunk in x.chunks(LANES) {
        for (lane, x) in chunk.iter().enumerate() {
            squares[lane] += x * x;
            bits[lane] |= x.abs().to_bits();
        }
    }
    (total(squares), bits == [0; LANES])
}

/// `most`ᵢ ← max(`most`ᵢ, |xᵢ|); NaN raises nothing.
pub fn raise(most: &mut [f64], x: &[f64]) {
    for (most, x) in most.iter_mut().zip(x) {
        // `f64::max` is a call into a library on wasm, for its rules on NaN.
        if x.abs() > *most {
            *most = x.abs();
        }
    }
}

/// target ← target − factor · source.
pub fn subtract_multiple(target: &mut [f64], factor: f64, source: &[f64]) {
    for (t, s) in target.iter_mut().zip(source) {
        *t -= factor * s;
    }
}

/// Moves to `part` what adding and subtracting `constant` rounds x to; x keeps
/// the remainder.
pub fn cut(x: &mut [f64], part: &mut [f64], constant: f64) {
    for (x, part) in x.iter_mut().zip(part) {
        *part = (*x + constant) - constant;
        *x -= *part;
    }
}

/// [`cut`] with a constant for each row.
pub fn cut_rows(x: &mut [f64], part: &mut [f64], constants: &[f64]) {
    for ((x, part), constant) in x.iter_mut().zip(part).zip(constants) {
        *part = (*x + constant) - constant;
        *x -= *part;
    }
}

/// (h, l) ← the double nearest to h + l, and what that leaves, exactly.
pub fn renormalise(high: &mut [f64], low: &mut [f64]) {
    for (h, l) in high.iter_mut().zip(low) {
        (*h, *l) = two_sum(*h, *l);
    }
}

/// target ← target + x.
pub fn add(target: &mut [f64], x: &[f64]) {
    for (t, x) in target.iter_mut().zip(x) {
        *t += x;
    }
}

/// h + l ← h + l + term; returns Σe² over what went from h to l.
pub fn absorb(high: &mut [f64], low: &mut [f64], term: &[f64]) -> f64 {
    let mut squares = [0.0; LANES];
    let columns = high.chunks_mut(LANES).zip(low.chunks_mut(LANES));
    for ((high, low), term) in columns.zip(term.chunks(LANES)) {
        for (lane, ((h, l), t)) in high.iter_mut().zip(low).zip(term).enumerate() {
            let (sum, error) = two_sum(*h, *t);
            *h = sum;
            *l += error;
            squares[lane] += error * error;
        }
    }
    total(squares)
}

/// h + l ← h + l − value · (`base_high` + `base_low`); returns Σs², s the sum of
/// the sizes of the four parts that make up each new l.
pub fn subtract_scaled(
    (high, low): (&mut [f64], &mut [f64]),
    (base_high, base_low): (&[f64], &[f64]),
    value: f64,
) -> f64 {
    let mut squares = [0.0; LANES];
    let targets = high.chunks_mut(LANES).zip(low.chunks_mut(LANES));
    let bases = base_high.chunks(LANES).zip(base_low.chunks(LANES));
    for ((high, low), (base_high, base_low)) in targets.zip(bases) {
        let targets = high.iter_mut().zip(low);
        let bases = base_high.iter().zip(base_low);
        for (lane, ((h, l), (b, b_low))) in targets.zip(bases).enumerate() {
            let (p, e) = two_product(value, *b);
            let (sum, error) = two_sum(*h, -p);
            let small = value * b_low;
            let before = *l;
            *h = sum;
            *l = ((before + error) - e) - small;
            let size = before.abs() + error.abs() + e.abs() + small.abs();
            squares[lane] += size * size;
        }
    }
    total(squares)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Of every length to 9, so that each lane is met full and empty. Small
    /// whole numbers: every sum is exact, in whatever order.
    fn lengths() -> impl Iterator<Item = Vec<f64>> {
        (0..10).map(|n| (0..n).map(|i| f64::from(3 * i - 7)).collect())
    }

    #[test]
    fn sums_are_those_of_the_terms() {
        for x in lengths() {
            let squares: f64 = x.iter().map(|x| x * x).sum();
            let moduli: f64 = x.iter().map(|x| x.abs()).sum();
            assert_eq!(
                square_sum(&x),
                (squares, x.iter().all(|x| *x == 0.0)),
                "{x:?}"
            );
            let mut rows = vec![0.5; x.len()];
            let sums = column_sums(&x, &mut rows);
            assert_eq!((sums.squares, sums.moduli), (squares, moduli), "{x:?}");
            for (row, x) in rows.iter().zip(&x) {
                assert_eq!(*row, x.abs() + 0.5);
            }
            // 3-4-5: the modulus of (3t, 4t) is 5|t|.
            let (re, im): (Vec<f64>, Vec<f64>) = x.iter().map(|t| (3.0 * t, -4.0 * t)).unzip();
            let sums = complex_column_sums(&re, &im, &mut vec![0.0; x.len()]);
            assert_eq!(
                (sums.squares, sums.moduli),
                (25.0 * squares, 5.0 * moduli),
                "{x:?}"
            );
        }
    }

    #[test]
    fn a_zero_column_is_known_from_one_that_underflows() {
        let zero = [0.0, -0.0, 0.0, 0.0, -0.0];
        assert!(square_sum(&zero).1 && column_sums(&zero, &mut [0.0; 5]).is_zero);
        assert!(complex_column_sums(&zero, &zero, &mut [0.0; 5]).is_zero);
        let tiny = [0.0, 0.0, 0.0, 0.0, 5e-324];
        assert_eq!(square_sum(&tiny), (0.0, false));
        assert!(!complex_column_sums(&zero, &tiny, &mut [0.0; 5]).is_zero);
        assert!(square_sum(&[1.0, f64::NAN]).0.is_nan());
    }

    #[test]
    fn pairs_keep_their_value() {
        for terms in lengths() {
            let n = terms.len();
            let mut high = vec![1e16; n];
            let mut low = vec![0.25; n];
            let errors = absorb(&mut high, &mut low, &terms);
            for i in 0..n {
                // h and t are whole, l a quarter more: both differences are exact.
                assert_eq!((high[i] - 1e16) + (low[i] - 0.25), terms[i], "{terms:?}");
            }
            let spilt: f64 = low.iter().map(|l| (l - 0.25) * (l - 0.25)).sum();
            assert_eq!(errors, spilt, "{terms:?}");
            let sizes = subtract_scaled((&mut high, &mut low), (&terms, &vec![0.5; n]), 1.0);
            for i in 0..n {
                assert_eq!((high[i] - 1e16) + low[i], -0.25, "{terms:?}");
            }
            assert!(n == 0 || sizes > 0.0);
            renormalise(&mut high, &mut low);
            assert!(high.iter().all(|h| *h == 1e16), "{high:?}");
        }
    }

    #[test]
    fn cutting_leaves_the_remainder() {
        for x in lengths() {
            let n = x.len();
            let whole: Vec<f64> = x.iter().map(|x| x + 0.375).collect();
            let constant = 1.5 * (1u64 << 52) as f64;
            let (mut rest, mut part) = (whole.clone(), vec![f64::NAN; n]);
            cut(&mut rest, &mut part, constant);
            let (mut other_rest, mut other) = (whole.clone(), vec![f64::NAN; n]);
            cut_rows(&mut other_rest, &mut other, &vec![constant; n]);
            assert_eq!((&rest, &part), (&other_rest, &other));
            for i in 0..n {
                assert_eq!(part[i] + rest[i], whole[i]);
                assert!(
                    part[i].fract() == 0.0 && rest[i].abs() <= 0.5,
                    "{part:?} {rest:?}"
                );
            }
        }
    }
}
