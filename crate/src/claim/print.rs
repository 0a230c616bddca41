//! Numbers in sentences, by the project's one rounding rule.

use dashu_ratio::RBig;

use super::figure::size;
use crate::report::decimal::{leading_place, multiple, significant, written, Rounding};

/// At most `digits` significant digits of a number between two ends: as many
/// as both ends agree on, one unit in the last at most.
pub(super) fn enclosed(low: &RBig, high: &RBig, digits: u32) -> String {
    if low == high {
        return exact(low, digits);
    }
    let middle = (low + high) / RBig::from(2);
    let Some(leading) = leading_place(&middle) else {
        return "0".to_owned();
    };
    let width = high - low;
    let wanted = leading + 1 - i32::try_from(digits).unwrap_or(i32::MAX);
    let known = leading_place(&width).map_or(wanted, |place| place + 1);
    if known > leading {
        return format!(
            "between {} and {}",
            significant(low, 3, Rounding::Down),
            significant(high, 3, Rounding::Up)
        );
    }
    let place = wanted.max(known);
    written(&multiple(&middle, place, Rounding::Nearest), place)
}

/// A number in full where that takes at most `digits` digits, else rounded to
/// so many.
pub(super) fn exact(value: &RBig, digits: u32) -> String {
    if value.denominator().is_one() && value.numerator().to_string().len() <= digits as usize + 1 {
        return value.numerator().to_string();
    }
    trimmed(significant(value, digits, Rounding::Nearest))
}

/// Zeros behind the point that only fill up are left out.
fn trimmed(text: String) -> String {
    if text.contains('.') && !text.contains('e') {
        return text.trim_end_matches('0').trim_end_matches('.').to_owned();
    }
    text
}

/// A distance that is at least so large, two figures.
pub(super) fn at_least(distance: &RBig) -> String {
    significant(&size(distance), 2, Rounding::Down)
}

/// `λ` with a subscript, counted from 1.
pub(super) fn lambda(index: usize) -> String {
    let digits = (index + 1).to_string();
    let subscript = digits
        .bytes()
        .filter_map(|b| char::from_u32(0x2080 + u32::from(b - b'0')));
    core::iter::once('λ').chain(subscript).collect()
}
