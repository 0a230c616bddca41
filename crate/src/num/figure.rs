//! The one rule by which proven figures are printed.
//!
//! A figure is printed m(1) with its last digit of weight 10^p: the number lies
//! within one unit of the last printed digit. p is the smallest for which that
//! is true of the whole interval, so nothing proven to better than a digit is
//! left out and nothing unproven is printed. An exactly known number is printed
//! without parentheses. The notation with the uncertainty of the last digit in
//! parentheses is the metrologists' (JCGM 100:2008, section 7.2.2); here it
//! states a bound, not a standard deviation.
//!
//! Notation: l ≤ u the ends of the interval, p the decimal place of a digit.

use dashu_base::UnsignedAbs;
use dashu_int::{IBig, UBig};

use super::dyadic::{Dyadic, Toward};

/// Longest exact number printed in full, in significant digits.
const EXACT_DIGITS: usize = 40;

/// Decimal places printed in positional notation run from 10^−6 to 10^17;
/// outside, and where trailing zeros would not be digits, powers of ten.
const POSITIONAL: std::ops::RangeInclusive<i64> = -6..=17;

/// A whole number of units of 10^place.
struct Units {
    count: IBig,
    place: i64,
}

/// floor or ceiling of x / 10^place.
fn units(x: &Dyadic, place: i64, toward: Toward) -> IBig {
    let ten = IBig::from(UBig::from(10u8).pow(place.unsigned_abs() as usize));
    if place <= 0 {
        (&Dyadic::new(ten, 0) * x).to_integer(toward)
    } else {
        // x = m·2^e: one division of integers, then outward.
        let (numerator, denominator) = if x.exponent() >= 0 {
            (x.significand() << x.exponent() as usize, ten)
        } else {
            (
                x.significand().clone(),
                ten << x.exponent().unsigned_abs() as usize,
            )
        };
        floor_div(&numerator, &denominator, toward)
    }
}

fn floor_div(numerator: &IBig, denominator: &IBig, toward: Toward) -> IBig {
    let quotient = numerator / denominator;
    let rest = numerator - &quotient * denominator;
    let negative = rest < IBig::ZERO;
    match toward {
        Toward::Down if negative => quotient - IBig::ONE,
        Toward::Up if !negative && !rest.is_zero() => quotient + IBig::ONE,
        _ => quotient,
    }
}

/// p with 10^p ≤ |x| < 10^(p+1); `None` for zero.
pub fn decimal_exponent(x: &Dyadic) -> Option<i64> {
    let bits = x.magnitude()?;
    // log₁₀2 lies between these two ratios; the guess is at most one too low.
    let guess = if bits > 0 {
        (bits - 1) * 30_102 / 100_000
    } else {
        ((bits - 1) * 30_103).div_euclid(100_000)
    };
    let size = x.abs();
    let mut place = guess - 1;
    while units(&size, place + 1, Toward::Down) >= IBig::ONE {
        place += 1;
    }
    Some(place)
}

/// The largest N with u − l ≤ 10^−N · min(|l|, |u|); `None` if zero is inside,
/// `i64::MAX` if l = u.
pub fn proven_digits(lower: &Dyadic, upper: &Dyadic) -> Option<i64> {
    if lower.signum() * upper.signum() <= 0 {
        return (lower == upper).then_some(i64::MAX);
    }
    digits_against(&(upper - lower), &lower.abs().min(upper.abs()))
}

/// The largest N with width ≤ 10^−N · size; `None` if the size is zero and the
/// width is not, `i64::MAX` if the width is zero.
pub fn digits_against(width: &Dyadic, size: &Dyadic) -> Option<i64> {
    if width.is_zero() {
        return Some(i64::MAX);
    }
    let mut digits = decimal_exponent(size)? - decimal_exponent(width)? + 1;
    let fits = |digits: i64| {
        let power = Dyadic::new(
            IBig::from(UBig::from(10u8).pow(digits.unsigned_abs() as usize)),
            0,
        );
        if digits >= 0 {
            &(width * &power) <= size
        } else {
            width <= &(size * &power)
        }
    };
    while !fits(digits) {
        digits -= 1;
    }
    Some(digits)
}

/// l and u as decimal strings, rounded outward by at most about a hundredth of
/// the width; an exact end is printed exactly while that takes no more than 40
/// digits.
pub fn outward(lower: &Dyadic, upper: &Dyadic) -> (String, String) {
    let width = upper - lower;
    let place = decimal_exponent(&width).map(|p| p - 2);
    (
        end(lower, place, Toward::Down),
        end(upper, place, Toward::Up),
    )
}

fn end(x: &Dyadic, place: Option<i64>, toward: Toward) -> String {
    if let Some(exact) = exactly(x) {
        let short = place.is_none_or(|place| exact.place >= place);
        if short {
            return written(&exact, "");
        }
    }
    let fallback = decimal_exponent(x).unwrap_or(0) - EXACT_DIGITS as i64;
    let place = place.unwrap_or(fallback);
    let rounded = Units {
        count: units(x, place, toward),
        place,
    };
    written(&trimmed(rounded), "")
}

/// The metrologist's form of the interval, with at most `digits` significant
/// digits when that is given: 3.414213562373(1). Zero inside the interval is
/// printed 0(1)e-15; an exactly known number without parentheses.
pub fn bounded(lower: &Dyadic, upper: &Dyadic, digits: Option<usize>) -> String {
    if lower == upper {
        if let Some(exact) = exactly(lower) {
            let limit = digits.unwrap_or(EXACT_DIGITS).min(EXACT_DIGITS);
            if exact.count.clone().unsigned_abs().to_string().len() <= limit {
                return written(&exact, "");
            }
        }
    }
    let largest = lower.abs().max(upper.abs());
    let Some(leading) = decimal_exponent(&largest) else {
        return "0".to_string();
    };
    // An exact but long number still prints (1) at the cap.
    let cap = leading - digits.unwrap_or(usize::MAX).clamp(1, 100_000) as i64 + 1;
    let width = upper - lower;
    let mut place = match decimal_exponent(&width) {
        Some(place) => (place - 1).max(cap),
        None => (leading - EXACT_DIGITS as i64 + 1).max(cap),
    };
    loop {
        if let Some(count) = within_one_unit(lower, upper, place) {
            return written(&Units { count, place }, "(1)");
        }
        place += 1;
    }
}

/// The integer m nearest the middle with m − 1 ≤ l/10^p and u/10^p ≤ m + 1.
fn within_one_unit(lower: &Dyadic, upper: &Dyadic, place: i64) -> Option<IBig> {
    let below = units(lower, place, Toward::Down);
    let above = units(upper, place, Toward::Up);
    // Twice the middle, rounded: any m in [above − 1, below + 1] will do.
    let (least, most) = (&above - IBig::ONE, &below + IBig::ONE);
    if least > most {
        return None;
    }
    let middle = (lower + upper).scaled(-1);
    let twice = units(&middle.scaled(1), place, Toward::Down);
    let nearest = floor_div(&(twice + IBig::ONE), &IBig::from(2), Toward::Down);
    Some(nearest.clamp(least, most))
}

/// A finite decimal expansion, if it is short enough to print in full.
fn exactly(x: &Dyadic) -> Option<Units> {
    if x.is_zero() {
        return Some(Units {
            count: IBig::ZERO,
            place: 0,
        });
    }
    if x.exponent() >= 0 {
        // 10^40 < 2^133.
        if x.magnitude()? > 133 {
            return None;
        }
        return Some(trimmed(Units {
            count: x.significand() << x.exponent() as usize,
            place: 0,
        }));
    }
    let odd_shift = x.significand().trailing_zeros().unwrap_or(0) as i64;
    let places = (-(x.exponent() + odd_shift)).max(0);
    if places > 4 * EXACT_DIGITS as i64 {
        return None;
    }
    let count = units(x, -places, Toward::Down);
    let exact = trimmed(Units {
        count,
        place: -places,
    });
    let length = exact.count.clone().unsigned_abs().to_string().len();
    (length <= EXACT_DIGITS).then_some(exact)
}

/// Without trailing zeros in the count.
fn trimmed(mut value: Units) -> Units {
    if value.count.is_zero() {
        return Units {
            count: IBig::ZERO,
            place: 0,
        };
    }
    let ten = IBig::from(10);
    loop {
        let quotient = &value.count / &ten;
        if &quotient * &ten != value.count {
            return value;
        }
        value = Units {
            count: quotient,
            place: value.place + 1,
        };
    }
}

/// The digits, with `suffix` right after the last one.
fn written(value: &Units, suffix: &str) -> String {
    let sign = if value.count < IBig::ZERO { "-" } else { "" };
    let digits = value.count.clone().unsigned_abs().to_string();
    let leading = value.place + digits.len() as i64 - 1;
    let exact = suffix.is_empty();
    if value.count.is_zero() {
        return if exact || value.place == 0 {
            format!("0{suffix}")
        } else {
            format!("0{suffix}e{}", value.place)
        };
    }
    // Zeros before the point are digits only of an exact number.
    let positional = POSITIONAL.contains(&leading) && (value.place <= 0 || exact);
    if !positional {
        let (head, tail) = digits.split_at(1);
        let point = if tail.is_empty() { "" } else { "." };
        return format!("{sign}{head}{point}{tail}{suffix}e{leading}");
    }
    if value.place >= 0 {
        let zeros = "0".repeat(value.place as usize);
        return format!("{sign}{digits}{zeros}{suffix}");
    }
    let after = value.place.unsigned_abs() as usize;
    if digits.len() > after {
        let (whole, fraction) = digits.split_at(digits.len() - after);
        format!("{sign}{whole}.{fraction}{suffix}")
    } else {
        let zeros = "0".repeat(after - digits.len());
        format!("{sign}0.{zeros}{digits}{suffix}")
    }
}

/// A non-negative bound in print, rounded up to three significant digits.
pub fn at_most(bound: &Dyadic) -> String {
    three_digits(bound, Toward::Up)
}

/// A non-negative bound in print, rounded down to three significant digits.
pub fn at_least(bound: &Dyadic) -> String {
    three_digits(bound, Toward::Down)
}

fn three_digits(bound: &Dyadic, toward: Toward) -> String {
    let Some(leading) = decimal_exponent(bound) else {
        return "0".to_string();
    };
    let place = leading - 2;
    written(
        &trimmed(Units {
            count: units(bound, place, toward),
            place,
        }),
        "",
    )
}

/// An unproven double with `digits` significant digits (1 to 17), by the same
/// layout as a proven figure.
pub fn plain(value: f64, digits: usize) -> String {
    if !value.is_finite() {
        return value.to_string();
    }
    let text = format!("{:.*e}", digits.clamp(1, 17) - 1, value);
    let (mantissa, exponent) = text.split_once('e').unwrap_or((&text, "0"));
    let leading: i64 = exponent.parse().unwrap_or(0);
    let count: String = mantissa.chars().filter(|c| *c != '.').collect();
    let place = leading - (count.trim_start_matches('-').len() as i64 - 1);
    match count.parse::<i64>() {
        Ok(count) => written(
            &trimmed(Units {
                count: IBig::from(count),
                place,
            }),
            "",
        ),
        Err(_) => text,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use dashu_ratio::RBig;
    use proptest::prelude::*;

    fn exact(x: f64) -> Dyadic {
        Dyadic::from_f64(x).expect("finite")
    }

    /// A printed figure read back: (lower, upper) as rationals.
    fn read(text: &str) -> (RBig, RBig) {
        let (digits, exponent) = text.split_once('e').unwrap_or((text, "0"));
        let bounded = digits.contains("(1)");
        let digits = digits.replace("(1)", "");
        let places = digits
            .split_once('.')
            .map_or(0, |(_, fraction)| fraction.len() as i64);
        let count: IBig = digits.replace('.', "").parse().expect("digits");
        let place = exponent.parse::<i64>().expect("exponent") - places;
        let power = UBig::from(10u8).pow(place.unsigned_abs() as usize);
        let unit = if place >= 0 {
            RBig::from(power)
        } else {
            RBig::from_parts(IBig::ONE, power)
        };
        let slack = IBig::from(i32::from(bounded));
        (
            RBig::from(&count - &slack) * &unit,
            RBig::from(&count + &slack) * &unit,
        )
    }

    #[test]
    fn figures_of_known_intervals() {
        let around = |x: f64, radius: f64| bounded(&exact(x - radius), &exact(x + radius), None);
        assert_eq!(around(3.414213562373095, 4e-13), "3.414213562373(1)");
        assert_eq!(around(-3.414213562373095, 4e-13), "-3.414213562373(1)");
        assert_eq!(bounded(&exact(2.0), &exact(2.0), None), "2");
        assert_eq!(bounded(&exact(-0.375), &exact(-0.375), None), "-0.375");
        assert_eq!(bounded(&exact(1200.0), &exact(1200.0), None), "1200");
        assert_eq!(bounded(&Dyadic::ZERO, &Dyadic::ZERO, None), "0");
        assert_eq!(around(0.0, 1e-17), "0(1)e-16");
        assert_eq!(around(12345.0, 30.0), "1.23(1)e4");
        let wide = Dyadic::new(IBig::from(3), 3000);
        assert_eq!(bounded(&wide, &wide, Some(5)), "3.6907(1)e903");
        assert_eq!(bounded(&exact(1.0 / 3.0), &exact(0.34), Some(2)), "0.34(1)");
    }

    #[test]
    fn outward_ends_are_short_and_exact_where_they_can_be() {
        assert_eq!(outward(&exact(2.0), &exact(2.0)), ("2".into(), "2".into()));
        let (low, high) = outward(&exact(0.1), &exact(0.2));
        assert_eq!((low.as_str(), high.as_str()), ("0.1", "0.201"));
    }

    #[test]
    fn plain_figures_use_the_same_layout() {
        assert_eq!(plain(3.25, 3), "3.25");
        assert_eq!(plain(-1e300, 4), "-1e300");
        assert_eq!(plain(1234567.0, 3), "1230000");
        assert_eq!(plain(0.0, 5), "0");
        assert_eq!(plain(f64::NAN, 5), "NaN");
    }

    proptest! {
        #[test]
        fn what_is_printed_holds_the_interval_and_little_more(
            middle in proptest::num::f64::NORMAL,
            relative in 1e-40f64..1.0,
            scale in -3000i64..3000,
        ) {
            let radius = exact(middle.abs()).scaled(0);
            let radius = (&radius * &exact(relative)).rounded(30, Toward::Up);
            let lower = (&exact(middle) - &radius).scaled(scale);
            let upper = (&exact(middle) + &radius).scaled(scale);
            let text = bounded(&lower, &upper, None);
            let (low, high) = read(&text);
            prop_assert!(low <= lower.to_rational() && upper.to_rational() <= high, "{text}");
            let width = upper.to_rational() - lower.to_rational();
            prop_assert!(&high - &low <= width * RBig::from(20), "{text} is too wide");
            let (low, high) = outward(&lower, &upper);
            let (low, high) = (read(&low).0, read(&high).0);
            prop_assert!(low <= lower.to_rational() && upper.to_rational() <= high, "{text}");
            let printed = high - low;
            let width = upper.to_rational() - lower.to_rational();
            prop_assert!(printed * RBig::from(50) <= width * RBig::from(52), "{text}");
            if let Some(digits) = proven_digits(&lower, &upper) {
                let width = upper.to_rational() - lower.to_rational();
                let size = lower.abs().min(upper.abs()).to_rational();
                let scaled = |digits: i64| {
                    let power = RBig::from(UBig::from(10u8).pow(digits.unsigned_abs() as usize));
                    if digits >= 0 { &width * power } else { &width / power }
                };
                prop_assert!(scaled(digits) <= size && scaled(digits + 1) > size, "{text}: {digits} digits");
            }
        }

        #[test]
        fn capped_figures_hold_the_interval(middle in -1e9f64..1e9, radius in 1e-30f64..1e-3, digits in 1usize..30) {
            let (lower, upper) = (&exact(middle) - &exact(radius), &exact(middle) + &exact(radius));
            let text = bounded(&lower, &upper, Some(digits));
            let (low, high) = read(&text);
            prop_assert!(low <= lower.to_rational() && upper.to_rational() <= high, "{text}");
        }
    }
}
