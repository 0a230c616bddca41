//! Decimal text of exact numbers: one rounding rule for every figure.
//!
//! Notation: x the exact number, p the *place* of a digit (the digit counts
//! multiples of 10^p), so the place of the units is 0 and of the tenths −1.

use dashu_base::{Abs, BitTest, Sign};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// Where the discarded part of a number goes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Rounding {
    /// To the nearest, ties to the even digit: for figures that claim nothing.
    Nearest,
    /// Toward −∞: for lower bounds.
    Down,
    /// Toward +∞: for upper bounds.
    Up,
}

/// Plain notation is kept for leading digits from 10^−5 to 10^14; beyond,
/// a power of ten is easier to read than a row of zeros.
const PLAIN_PLACES: std::ops::RangeInclusive<i32> = -5..=14;

/// value · 2^scale as an exact ratio; `None` if `value` is not finite.
pub fn exact(value: f64, scale: i32) -> Option<RBig> {
    let significand = RBig::try_from(value).ok()?;
    let power = UBig::ONE << (scale.unsigned_abs() as usize);
    Some(if scale >= 0 {
        significand * RBig::from(power)
    } else {
        significand / RBig::from(power)
    })
}

/// The integer N for which N·10^place is x rounded.
pub fn multiple(x: &RBig, place: i32, rounding: Rounding) -> IBig {
    let power = UBig::from(10u8).pow(place.unsigned_abs() as usize);
    let scaled = if place >= 0 {
        x / RBig::from(power)
    } else {
        x * RBig::from(power)
    };
    match rounding {
        Rounding::Down => scaled.floor(),
        Rounding::Up => scaled.ceil(),
        Rounding::Nearest => nearest_even(&scaled),
    }
}

fn nearest_even(x: &RBig) -> IBig {
    let below = x.floor();
    let twice_rest = (x - RBig::from(below.clone())) * RBig::from(2);
    let above = &below + IBig::ONE;
    match twice_rest.cmp(&RBig::ONE) {
        std::cmp::Ordering::Less => below,
        std::cmp::Ordering::Greater => above,
        std::cmp::Ordering::Equal if (&below & IBig::ONE) == IBig::ZERO => below,
        std::cmp::Ordering::Equal => above,
    }
}

/// Place of the leading digit of x, ⌊log₁₀|x|⌋; `None` for zero.
pub fn leading_place(x: &RBig) -> Option<i32> {
    if x.is_zero() {
        return None;
    }
    let magnitude = x.clone().abs();
    // ⌊log₁₀⌋ from the lengths in bits, within one of the truth: 1233/4096
    // lies just under log₁₀2. The loops below settle the last step exactly.
    let bits = magnitude.numerator().bit_len() as i64 - magnitude.denominator().bit_len() as i64;
    let mut place = i32::try_from((bits * 1233).div_euclid(4096)).ok()?;
    while ten_to(place) > magnitude {
        place -= 1;
    }
    while ten_to(place + 1) <= magnitude {
        place += 1;
    }
    Some(place)
}

/// 10^place, exactly.
pub fn ten_to(place: i32) -> RBig {
    let power = RBig::from(UBig::from(10u8).pow(place.unsigned_abs() as usize));
    if place >= 0 {
        power
    } else {
        RBig::ONE / power
    }
}

/// x with its last digit in `place`. Zeros that stand for known digits are
/// kept, none is added.
pub fn to_place(x: &RBig, place: i32, rounding: Rounding) -> String {
    written(&multiple(x, place, rounding), place)
}

/// x with `digits` significant digits (at least one).
pub fn significant(x: &RBig, digits: u32, rounding: Rounding) -> String {
    let Some(leading) = leading_place(x) else {
        return "0".to_owned();
    };
    let place = leading + 1 - digits.max(1) as i32;
    let n = multiple(x, place, rounding);
    // Rounding may carry into a further digit (9.96 to 10.0): drop the last.
    if n.clone().abs() == IBig::from(10u8).pow(digits.max(1) as usize) {
        return written(&(n / IBig::from(10u8)), place + 1);
    }
    written(&n, place)
}

/// A figure for the page: with the true minus sign, which is as wide as a
/// digit. Files keep the hyphen that other programs read.
pub fn typeset(figure: &str) -> String {
    figure.replace('-', "−")
}

/// The same for a sentence with figures in it: only a hyphen before an exponent
/// or a number is one of theirs.
pub fn typeset_sentence(sentence: &str) -> String {
    let characters: Vec<char> = sentence.chars().collect();
    let digit = |at: usize| characters.get(at).is_some_and(char::is_ascii_digit);
    (0..characters.len())
        .map(|at| {
            let before = at.checked_sub(1).map(|before| characters[before]);
            let exponent = before == Some('e') && at >= 2 && digit(at - 2);
            let leading = matches!(before, None | Some(' ' | '('));
            if characters[at] == '-' && digit(at + 1) && (exponent || leading) {
                '−'
            } else {
                characters[at]
            }
        })
        .collect()
}

/// A bound in two significant digits, never less than `bound`: `2.3e-15`.
pub fn bound(bound: f64) -> String {
    match exact(bound, 0) {
        Some(x) => significant(&x, 2, Rounding::Up),
        None => "unbounded".to_owned(),
    }
}

/// A magnitude in three significant digits, to nearest.
pub fn magnitude(value: f64) -> String {
    match exact(value, 0) {
        Some(x) => significant(&x, 3, Rounding::Nearest),
        None => "not a number".to_owned(),
    }
}

/// N·10^place as text.
pub fn written(n: &IBig, place: i32) -> String {
    let (sign, magnitude) = n.clone().into_parts();
    let digits = magnitude.to_string();
    let leading = place + digits.len() as i32 - 1;
    let mut text = String::with_capacity(digits.len() + 8);
    if sign == Sign::Negative {
        text.push('-');
    }
    let is_zero = digits == "0";
    let plain = place <= 0 && (PLAIN_PLACES.contains(&leading) || (is_zero && place >= -24));
    if !plain {
        text.push_str(&digits[..1]);
        if digits.len() > 1 {
            text.push('.');
            text.push_str(&digits[1..]);
        }
        text.push('e');
        text.push_str(&leading.to_string());
        return text;
    }
    let decimals = place.unsigned_abs() as usize;
    if decimals == 0 {
        text.push_str(&digits);
    } else if digits.len() > decimals {
        let (whole, fraction) = digits.split_at(digits.len() - decimals);
        text.push_str(whole);
        text.push('.');
        text.push_str(fraction);
    } else {
        text.push_str("0.");
        text.push_str(&"0".repeat(decimals - digits.len()));
        text.push_str(&digits);
    }
    text
}

/// The shortest decimal text that reads back to the same double, when
/// value · 2^scale is one exactly; else 17 significant digits of it.
pub fn round_trip(value: f64, scale: i32) -> String {
    match scaled_double(value, scale) {
        Some(0.0) => "0.0".to_owned(),
        Some(x) => format!("{x:?}"),
        None => match exact(value, scale) {
            Some(x) => significant(&x, 17, Rounding::Nearest),
            None => "nan".to_owned(),
        },
    }
}

/// value · 2^scale where that is a double exactly.
pub fn scaled_double(value: f64, scale: i32) -> Option<f64> {
    let there = times_power(value, scale);
    (there.is_finite() && times_power(there, -scale) == value).then_some(there)
}

/// value · 2^power, rounded once or more at the ends of the range.
pub fn times_power(value: f64, power: i32) -> f64 {
    let mut left = power.clamp(-4400, 4400);
    let mut product = value;
    while left != 0 {
        let step = left.clamp(-1000, 1000);
        product *= f64::from_bits(((1023 + step) as u64) << 52);
        left -= step;
    }
    product
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn ratio(n: i64, d: u64) -> RBig {
        RBig::from_parts(IBig::from(n), UBig::from(d))
    }

    #[test]
    fn rounds_ties_to_even_and_bounds_outward() {
        assert_eq!(to_place(&ratio(25, 10), 0, Rounding::Nearest), "2");
        assert_eq!(to_place(&ratio(35, 10), 0, Rounding::Nearest), "4");
        assert_eq!(to_place(&ratio(-25, 10), 0, Rounding::Nearest), "-2");
        assert_eq!(to_place(&ratio(1, 3), -4, Rounding::Up), "0.3334");
        assert_eq!(to_place(&ratio(-1, 3), -4, Rounding::Up), "-0.3333");
        assert_eq!(to_place(&ratio(-1, 3), -4, Rounding::Down), "-0.3334");
    }

    #[test]
    fn keeps_known_zeros_and_switches_notation() {
        assert_eq!(significant(&ratio(2, 1), 5, Rounding::Nearest), "2.0000");
        assert_eq!(
            significant(&ratio(1, 1_000_000), 2, Rounding::Nearest),
            "1.0e-6"
        );
        assert_eq!(
            significant(&ratio(1, 100_000), 2, Rounding::Nearest),
            "0.000010"
        );
        assert_eq!(
            significant(&(ten_to(20) * ratio(3, 2)), 2, Rounding::Nearest),
            "1.5e20"
        );
        assert_eq!(to_place(&ratio(1234, 1), 2, Rounding::Nearest), "1.2e3");
        assert_eq!(
            to_place(&ratio(1, 1_000_000), -3, Rounding::Nearest),
            "0.000"
        );
        assert_eq!(significant(&RBig::ZERO, 9, Rounding::Nearest), "0");
    }

    #[test]
    fn sentences_keep_their_hyphens() {
        assert_eq!(
            typeset_sentence("A re-run of -3.5 within 1.2e-15, double-checked"),
            "A re-run of −3.5 within 1.2e−15, double-checked"
        );
    }

    #[test]
    fn bounds_are_never_below_what_they_bound() {
        assert_eq!(bound(1.21e-15), "1.3e-15");
        assert_eq!(bound(9.95), "10");
        assert_eq!(bound(f64::NAN), "unbounded");
        assert_eq!(bound(0.0), "0");
    }

    #[test]
    fn scales_beyond_the_range_of_doubles_are_written_in_full() {
        assert_eq!(round_trip(0.75, 1030), "8.6289270473391164e309");
        assert_eq!(round_trip(0.75, 3), "6.0");
        assert_eq!(round_trip(1.0 / 3.0, -1074), "1.6468854861374884e-324");
    }

    proptest! {
        #[test]
        fn leading_place_brackets_the_number(x in proptest::num::f64::NORMAL, scale in -900i32..900) {
            let x = exact(x, scale).expect("finite").abs();
            let p = leading_place(&x).expect("not zero");
            prop_assert!(ten_to(p) <= x && x < ten_to(p + 1), "{x} is not led by place {p}");
        }

        #[test]
        fn rounded_text_brackets_the_number(x in proptest::num::f64::NORMAL, digits in 1u32..30) {
            let x = exact(x, 0).expect("finite");
            let place = leading_place(&x).expect("not zero") + 1 - digits as i32;
            let low = RBig::from(multiple(&x, place, Rounding::Down)) * ten_to(place);
            let high = RBig::from(multiple(&x, place, Rounding::Up)) * ten_to(place);
            prop_assert!(low <= x && x <= high, "{x} outside its rounded bounds");
            prop_assert!(&high - &low <= ten_to(place), "{x}: bounds further apart than one digit");
        }

        #[test]
        fn seventeen_digits_read_back(x in proptest::num::f64::NORMAL) {
            let text = significant(&exact(x, 0).expect("finite"), 17, Rounding::Nearest);
            prop_assert_eq!(text.parse::<f64>().expect("a number"), x, "through {}", text);
        }
    }
}
