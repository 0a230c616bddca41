//! Cell text to exact complex numbers.

use super::clean;
use super::plain::SIGNS;
use super::settings::DecimalMark;
use crate::num::ExactReal;

/// The exact value of one cell.
#[derive(Clone, Debug)]
pub struct Value {
    /// Real part.
    pub re: ExactReal,
    /// Imaginary part.
    pub im: ExactReal,
}

impl Value {
    /// Exact zero.
    pub const ZERO: Self = Self {
        re: ExactReal::ZERO,
        im: ExactReal::ZERO,
    };

    /// The complex conjugate.
    pub fn conjugate(&self) -> Self {
        Self {
            re: self.re.clone(),
            im: self.im.neg(),
        }
    }
}

/// Why a cell cannot be read.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Refusal {
    Blank,
    Thousands { plain: String },
    DecimalComma { plain: String },
    NotFinite,
    Unreadable,
}

/// Reads one cell.
pub(crate) fn read(text: &str, decimal: DecimalMark) -> Result<Value, Refusal> {
    let normal = clean::normal(text);
    let text = normal.trim();
    if text.is_empty() {
        return Err(Refusal::Blank);
    }
    let replaced;
    let text = match decimal {
        DecimalMark::Comma if text.contains(',') => {
            if text.contains('.') {
                return Err(thousands(text).unwrap_or(Refusal::Unreadable));
            }
            replaced = text.replace(',', ".");
            &replaced
        }
        DecimalMark::PointWithGroups if text.contains(',') => {
            replaced = text.replace(',', "");
            &replaced
        }
        _ => text,
    };
    number(text).ok_or_else(|| refusal(text))
}

/// A decimal, or real and imaginary decimals.
fn number(text: &str) -> Option<Value> {
    if let Some(re) = decimal_number(text) {
        return Some(Value {
            re,
            im: ExactReal::ZERO,
        });
    }
    let compact: String = text
        .chars()
        .filter(|c| !c.is_whitespace() && !matches!(c, '*' | '(' | ')'))
        .collect();
    let compact = compact.replace("+-", "-").replace("--", "+");
    let body = compact.strip_suffix(['i', 'j'])?;
    let split = body
        .char_indices()
        .rev()
        .find(|&(at, c)| SIGNS.contains(&c) && !body[..at].ends_with(['e', 'E']))
        .map_or(0, |(at, _)| at);
    let (re, im) = body.split_at(split);
    let re = if re.is_empty() {
        ExactReal::ZERO
    } else {
        decimal_number(re)?
    };
    let unit = im.strip_prefix(SIGNS).unwrap_or(im).is_empty();
    let im = decimal_number(&if unit {
        format!("{im}1")
    } else {
        im.to_owned()
    })?;
    Some(Value { re, im })
}

/// A signed decimal with an optional exponent.
fn decimal_number(text: &str) -> Option<ExactReal> {
    let mut rest = text;
    let mut negative = false;
    if let Some(after) = rest.strip_prefix(SIGNS) {
        negative = !rest.starts_with('+');
        rest = after;
    }
    let (mantissa, exponent) = match rest.find(['e', 'E']) {
        Some(at) => (&rest[..at], rest[at + 1..].parse::<i16>().ok()?),
        None => (rest, 0),
    };
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    if whole.is_empty() && fraction.is_empty() {
        return None;
    }
    let mut digits: i64 = 0;
    for digit in whole.bytes().chain(fraction.bytes()) {
        if !digit.is_ascii_digit() {
            return None;
        }
        digits = digits
            .checked_mul(10)?
            .checked_add(i64::from(digit - b'0'))?;
    }
    let exponent = exponent.checked_sub(i16::try_from(fraction.len()).ok()?)?;
    Some(ExactReal::Decimal {
        digits: if negative { -digits } else { digits },
        exponent,
    })
}

/// Names the reason in the order that helps most.
fn refusal(text: &str) -> Refusal {
    let lower = text.to_ascii_lowercase();
    let bare = lower.trim_start_matches(SIGNS);
    if matches!(
        bare,
        "nan" | "inf" | "infinity" | "∞" | "#n/a" | "#div/0!" | "#num!" | "#value!"
    ) {
        return Refusal::NotFinite;
    }
    if let Some(refusal) = thousands(text) {
        return refusal;
    }
    if text.contains(',') {
        let plain = text.replace(',', ".");
        if number(&plain).is_some() {
            return Refusal::DecimalComma { plain };
        }
    }
    Refusal::Unreadable
}

/// Recognises groups of thousands: `1,234.5`, `1.234,5`, `1'234`, `1 234,5`.
pub(crate) fn thousands(text: &str) -> Option<Refusal> {
    let unsigned = text.trim_start_matches(SIGNS);
    let sign = &text[..text.len() - unsigned.len()];
    for (group, mark) in [
        (',', '.'),
        ('.', ','),
        ('\'', '.'),
        ('’', '.'),
        (' ', '.'),
        (' ', ','),
        ('_', '.'),
    ] {
        let (whole, fraction) = match unsigned.split_once(mark) {
            Some((whole, fraction)) => (whole, Some(fraction)),
            None => (unsigned, None),
        };
        // A comma or a point alone may be either mark; only the other one
        // beside it, or a second group, decides.
        let groups: Vec<&str> = whole.split(group).collect();
        let decided = fraction.is_some() || groups.len() > 2 || !matches!(group, ',' | '.');
        let grouped = groups.len() > 1
            && (1..=3).contains(&groups[0].len())
            && groups[1..].iter().all(|digits| digits.len() == 3)
            && groups
                .iter()
                .all(|digits| digits.bytes().all(|digit| digit.is_ascii_digit()));
        let tail = fraction.is_none_or(|digits| digits.bytes().all(|digit| digit.is_ascii_digit()));
        if decided && grouped && tail {
            let mut plain = format!("{sign}{}", groups.concat());
            if let Some(fraction) = fraction {
                plain.push('.');
                plain.push_str(fraction);
            }
            return Some(Refusal::Thousands { plain });
        }
    }
    None
}
