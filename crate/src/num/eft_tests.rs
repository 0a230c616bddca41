//! The solver's error-free transformations against exact arithmetic.

use super::dyadic::Dyadic;
use super::eft::{fast_two_sum, two_product, two_sum};
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
