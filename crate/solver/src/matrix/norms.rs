//! Norms that neither overflow nor vanish.
//!
//! A plain sum of squares is right unless it leaves the comfortable range; only
//! then is it taken again on values scaled by a power of two, which is exact.

/// Squares smaller than this may have lost a part to underflow.
const SMALLEST_SAFE_SQUARE: f64 = f64::from_bits((1023 - 900) << 52);
/// Squares larger than this may overflow when summed further.
const LARGEST_SAFE_SQUARE: f64 = f64::from_bits((1023 + 900) << 52);

/// 2^`exponent` for −1022 ≤ exponent ≤ 1023.
pub(crate) const fn power_of_two(exponent: i32) -> f64 {
    f64::from_bits(((exponent + 1023) as u64) << 52)
}

/// Largest modulus; NaN counts as nothing. (`f64::max` would be a call into a
/// library on wasm, for its rules on NaN.)
pub(crate) fn largest<'a>(values: impl Iterator<Item = &'a f64>) -> f64 {
    values.fold(
        0.0,
        |largest, x| if x.abs() > largest { x.abs() } else { largest },
    )
}

/// √Σx² over all values given, summed in the order given. Relative error at
/// most (count/2 + 2)·u. Infinite or NaN input gives infinity or NaN.
pub fn norm2<'a>(values: impl Iterator<Item = &'a f64> + Clone) -> f64 {
    let squares: f64 = values.clone().fold(0.0, |sum, x| sum + x * x);
    if (SMALLEST_SAFE_SQUARE..=LARGEST_SAFE_SQUARE).contains(&squares) {
        return squares.sqrt();
    }
    let largest = largest(values.clone());
    if largest == 0.0 || !largest.is_finite() {
        return largest + squares;
    }
    let (down, up) = if largest < 1.0 {
        (power_of_two(600), power_of_two(-600))
    } else {
        (power_of_two(-600), power_of_two(600))
    };
    values
        .fold(0.0, |sum, x| sum + (x * down) * (x * down))
        .sqrt()
        * up
}

/// √(x² + y²), free of overflow and harmful underflow; zero only for (0, 0).
#[inline(always)]
pub(crate) fn length(x: f64, y: f64) -> f64 {
    let squares = x * x + y * y;
    if squares > SMALLEST_SAFE_SQUARE && squares < LARGEST_SAFE_SQUARE {
        squares.sqrt()
    } else {
        scaled_length(x, y)
    }
}

#[cold]
fn scaled_length(x: f64, y: f64) -> f64 {
    norm2([x, y].iter())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn norms_survive_the_ends_of_the_range() {
        for exponent in [1020, 1000, 0, -1000, -1022] {
            let unit = power_of_two(exponent);
            // 3-4-5 and 2-3-6-7 triangles: exact in every scale that has room for them.
            assert_eq!(length(3.0 * unit, -4.0 * unit), 5.0 * unit, "unit {unit:e}");
            assert_eq!(
                norm2([2.0 * unit, 3.0 * unit, -6.0 * unit].iter()),
                7.0 * unit,
                "unit {unit:e}"
            );
        }
        assert_eq!(norm2([3.0 * 5e-324, 4.0 * 5e-324].iter()), 5.0 * 5e-324);
        assert_eq!(norm2([].iter()), 0.0);
        assert!(norm2([1.0, f64::NAN].iter()).is_nan());
        assert_eq!(norm2([1.0, f64::INFINITY].iter()), f64::INFINITY);
    }
}
