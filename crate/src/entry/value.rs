//! Cell text to exact complex numbers, through the grammar of cells and the
//! hexadecimal notation of binary files.

use super::binary;
use super::cell::{parse_cell, CellError, CellErrorKind, CellOptions, CellValue, Parameters};
use super::plain::SIGNS;
use super::settings::DecimalMark;

/// Reads the cleaned text of one cell.
pub(crate) fn read(
    text: &str,
    parameters: &Parameters,
    decimal_mark: DecimalMark,
) -> Result<CellValue, CellError> {
    let read = parse_cell(text, parameters, CellOptions { decimal_mark });
    if read.is_err() && text.contains(['x', 'X']) {
        if let Some((re, im)) = binary::parse_complex(text.trim()) {
            return Ok(CellValue::complex(re, im));
        }
    }
    read
}

/// The number without its thousands separators, where these are certain:
/// `1,234.5`, `1.234,5`, `1'234`, `1 234,5`.
pub(crate) fn without_groups(text: &str) -> Option<String> {
    let text = text.trim();
    let unsigned = text.trim_start_matches(SIGNS);
    let sign = &text[..text.len() - unsigned.len()];
    let marks = [
        (',', '.'),
        ('.', ','),
        ('\'', '.'),
        ('’', '.'),
        (' ', '.'),
        (' ', ','),
        ('_', '.'),
    ];
    marks.into_iter().find_map(|(group, mark)| {
        let (whole, fraction) = match unsigned.split_once(mark) {
            Some((whole, fraction)) => (whole, Some(fraction)),
            None => (unsigned, None),
        };
        // A comma or a point alone may be either mark; only the other one
        // beside it, or a second group, decides.
        let groups: Vec<&str> = whole.split(group).collect();
        let decided = fraction.is_some() || groups.len() > 2 || !matches!(group, ',' | '.');
        let digits = |text: &str| text.bytes().all(|byte| byte.is_ascii_digit());
        let grouped = groups.len() > 1
            && (1..=3).contains(&groups[0].len())
            && groups[1..].iter().all(|group| group.len() == 3)
            && groups.iter().all(|group| digits(group));
        if !(decided && grouped && fraction.is_none_or(digits)) {
            return None;
        }
        let fraction = fraction
            .map(|digits| format!(".{digits}"))
            .unwrap_or_default();
        Some(format!("{sign}{}{fraction}", groups.concat()))
    })
}

/// Whether the error is a comma (or point) in the place of the other mark.
pub(crate) fn is_other_mark(kind: CellErrorKind) -> bool {
    matches!(
        kind,
        CellErrorKind::DecimalComma | CellErrorKind::DecimalPoint
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn groups_are_taken_out_only_where_they_are_certain() {
        for (text, wanted) in [
            ("1,234.5", Some("1234.5")),
            ("-1.234,5", Some("-1234.5")),
            ("1,234,567", Some("1234567")),
            ("1'234", Some("1234")),
            ("1 234,5", Some("1234.5")),
            ("1,234", None),
            ("1.234", None),
            ("1234,5", None),
            ("1,23.5", None),
            ("a,bcd.e", None),
        ] {
            assert_eq!(without_groups(text).as_deref(), wanted, "{text:?}");
        }
    }
}
