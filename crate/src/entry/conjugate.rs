//! The text of the complex conjugate of a cell.

use super::cell::{CellValue, Parameters};
use super::settings::DecimalMark;
use super::value;

/// The conjugate of a cell as text, in the writing of the cell where that can
/// be kept: `3 - 4i` becomes `3 + 4i`, and `k·i` becomes `k·(-i)`. A text that
/// cannot be read is given back as it is.
pub(crate) fn text(cell: &str, parameters: &Parameters, mark: DecimalMark) -> String {
    let Ok(value) = value::read(cell, parameters, mark) else {
        return cell.to_owned();
    };
    if value.is_real() {
        return cell.to_owned();
    }
    let wanted = value.conj();
    for candidate in [with_signs_turned(cell), with_units_turned(cell)]
        .into_iter()
        .flatten()
    {
        let read = value::read(&candidate, parameters, mark);
        if read.is_ok_and(|read| same(&read, &wanted)) {
            return candidate;
        }
    }
    let text = wanted.to_string();
    if mark == DecimalMark::Comma {
        text.replace('.', ",")
    } else {
        text
    }
}

/// Whether two values are certainly equal.
fn same(a: &CellValue, b: &CellValue) -> bool {
    let tolerance = match (&a.tolerance, &b.tolerance) {
        (Some(a), Some(b)) => a.equals(b) == Some(true),
        (None, None) => true,
        _ => false,
    };
    tolerance && a.re.equals(&b.re) == Some(true) && a.im.equals(&b.im) == Some(true)
}

/// Whether an imaginary unit stands at byte `at`, and not inside a name.
fn is_unit(text: &str, at: usize) -> bool {
    let in_name = |c: char| c.is_alphabetic() || c == '_';
    matches!(text.as_bytes().get(at), Some(b'i' | b'j'))
        && !text[..at].ends_with(in_name)
        && !text[at + 1..].starts_with(|c: char| in_name(c) || c.is_ascii_digit())
}

/// Turns the sign before each term that ends with a unit; the caller checks
/// that this is the conjugate.
fn with_signs_turned(text: &str) -> Option<String> {
    let trimmed = text.trim();
    let mut out = String::with_capacity(trimmed.len() + 1);
    let mut term_start = 0;
    let mut depth = 0usize;
    let mut previous = ' ';
    for (at, c) in trimmed.char_indices() {
        match c {
            '(' => depth += 1,
            ')' => depth = depth.checked_sub(1)?,
            _ => {}
        }
        let sign = matches!(c, '+' | '-' | '\u{2212}' | '±');
        // A sign after a digit's e is that of an exponent.
        let exponent = matches!(previous, 'e' | 'E' | '^' | '*' | '/' | '·' | '×');
        if sign && depth == 0 && !exponent && at > 0 {
            turn(&trimmed[term_start..at], term_start == 0, &mut out);
            term_start = at;
        }
        if !c.is_whitespace() {
            previous = c;
        }
    }
    turn(&trimmed[term_start..], term_start == 0, &mut out);
    Some(out)
}

/// Writes one term, its sign turned when it ends with a unit.
fn turn(term: &str, first: bool, out: &mut String) {
    let body = term.trim_end();
    if !body.ends_with(['i', 'j']) || !is_unit(body, body.len() - 1) {
        out.push_str(term);
    } else if let Some(rest) = term.strip_prefix('+') {
        out.push('-');
        out.push_str(rest);
    } else if let Some(rest) = term.strip_prefix(['-', '\u{2212}']) {
        if !first {
            out.push('+');
        }
        out.push_str(rest);
    } else {
        out.push('-');
        out.push_str(term);
    }
}

/// Writes `(-i)` for every unit: all that cells may do with real numbers
/// commutes with conjugation.
fn with_units_turned(text: &str) -> Option<String> {
    let mut out = String::with_capacity(text.len() + 8);
    let mut done = 0;
    for at in (0..text.len()).filter(|&at| is_unit_at(text, at)) {
        out.push_str(&text[done..at]);
        out.push_str("(-i)");
        done = at + 1;
    }
    out.push_str(&text[done..]);
    (done > 0).then_some(out)
}

fn is_unit_at(text: &str, at: usize) -> bool {
    text.is_char_boundary(at) && is_unit(text, at)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn conjugates_keep_the_writing() {
        let given = [("k".to_owned(), "3/7".to_owned())];
        let (parameters, _) = Parameters::read(&given, super::super::cell::CellOptions::default());
        for (cell, wanted) in [
            ("3 - 4i", "3 + 4i"),
            ("3 + 4i", "3 - 4i"),
            ("-i", "i"),
            ("2.50", "2.50"),
            ("i", "-i"),
            ("1e-3-2e-3i", "1e-3+2e-3i"),
            ("1+2i ± 0.1", "1-2i ± 0.1"),
            ("k*i", "-k*i"),
            ("k*(1+i)", "k*(1+(-i))"),
            ("1/i", "-1/i"),
            ("i^3", "(-i)^3"),
            ("oops", "oops"),
        ] {
            assert_eq!(
                text(cell, &parameters, DecimalMark::Point),
                wanted,
                "{cell}"
            );
        }
        assert_eq!(
            text("1,5+2,5i", &parameters, DecimalMark::Comma),
            "1,5-2,5i"
        );
    }
}
