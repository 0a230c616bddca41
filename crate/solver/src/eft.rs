//! Error-free transformations of sums and products of doubles. (Their tests
//! stand in `eigenledger`, which has the exact arithmetic to hold them to.)
//!
//! Exact barring overflow, and for products barring underflow of the error
//! term: callers scale by powers of two beforehand so that neither occurs.
//!
//! Notation: x the rounded result, y its error; a ∘ b = x + y exactly.

/// a + b = x + y exactly (6 operations; D. E. Knuth, *The Art of Computer
/// Programming*, vol. 2, section 4.2.2).
#[inline]
pub fn two_sum(a: f64, b: f64) -> (f64, f64) {
    let x = a + b;
    let virtual_b = x - a;
    let y = (a - (x - virtual_b)) + (b - virtual_b);
    (x, y)
}

/// a + b = x + y exactly, provided |a| ≥ |b| or a = 0 (3 operations; T. J.
/// Dekker, Numer. Math. 18, 1971).
#[inline]
pub fn fast_two_sum(a: f64, b: f64) -> (f64, f64) {
    let x = a + b;
    (x, b - (x - a))
}

/// a = high + low, each of at most 26 significant bits (G. W. Veltkamp;
/// Dekker 1971). |a| below 2^996 so that the factor does not overflow.
#[inline]
pub fn split(a: f64) -> (f64, f64) {
    const FACTOR: f64 = 134_217_729.0; // 2^27 + 1
    let c = FACTOR * a;
    let high = c - (c - a);
    (high, a - high)
}

/// a · b = x + y exactly (17 operations; Dekker 1971), barring overflow and
/// barring underflow: |a·b| at least 2^−969 or zero.
#[inline]
pub fn two_product(a: f64, b: f64) -> (f64, f64) {
    let x = a * b;
    let (ah, al) = split(a);
    let (bh, bl) = split(b);
    let y = al * bl - (((x - ah * bh) - al * bh) - ah * bl);
    (x, y)
}
