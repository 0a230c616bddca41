//! Error-free transformations of sums and products of doubles.
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

#[cfg(test)]
mod tests {
    use super::super::dyadic::Dyadic;
    use super::*;
    use proptest::prelude::*;

    fn exact(x: f64) -> Dyadic {
        Dyadic::from_f64(x).expect("finite")
    }

    proptest! {
        #[test]
        fn sums_and_products_are_exact(
            a in -1e100f64..1e100,
            b in proptest::num::f64::NORMAL.prop_map(|b| b.clamp(-1e100, 1e100)),
            shift in -60i32..60,
        ) {
            let b = b * 2f64.powi(shift);
            let (x, y) = two_sum(a, b);
            prop_assert_eq!(&exact(x) + &exact(y), &exact(a) + &exact(b), "{:e} + {:e}", a, b);
            let (big, small) = if a.abs() >= b.abs() { (a, b) } else { (b, a) };
            let (x, y) = fast_two_sum(big, small);
            prop_assert_eq!(&exact(x) + &exact(y), &exact(a) + &exact(b), "{:e} + {:e}", a, b);
            if (a * b).abs() > 1e-280 {
                let (x, y) = two_product(a, b);
                prop_assert_eq!(&exact(x) + &exact(y), &exact(a) * &exact(b), "{:e} · {:e}", a, b);
            }
        }
    }
}
