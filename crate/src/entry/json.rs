//! Nested JSON arrays. Numbers are kept as the literal text, so no digit is
//! lost to a double; a cell may be a number, a string in any cell notation, a
//! pair `[re, im]` or an object `{"re": …, "im": …}`.

use super::diagnostic::{Finding, Findings, Kind};
use super::raw::{RawCell, RawTable};
use super::span::Bytes;
use serde::Deserialize;
use serde_json::value::RawValue;

/// Whether the text begins as a JSON array (or object) does.
pub(crate) fn looks_like(text: &str) -> bool {
    text.starts_with(['[', '{'])
}

/// Whether the whole text is one JSON value.
pub(crate) fn is_json(body: &str) -> bool {
    serde_json::from_str::<&RawValue>(body).is_ok()
}

/// Reads nested arrays; `None` when the text is not JSON, with the finding that
/// says where.
pub(crate) fn read(source: &str, mut table: RawTable, findings: &mut Findings) -> Option<RawTable> {
    let start = source.len() - source.trim_start_matches(super::clean::is_blank_char).len();
    let body = source[start..].trim_end_matches(super::clean::is_blank_char);
    let reader = Json { source };
    if body.starts_with('{') {
        findings.push(match serde_json::from_str::<&RawValue>(body) {
            Ok(_) => Finding::error(
                Kind::Unsupported,
                "This is a JSON object, not a matrix. If it is a problem document, open it as a file.",
            )
            .span(Bytes::new(start, start + body.len()))
            .expected("an array of rows, as in [[2, 1], [1, 2]]"),
            Err(error) => syntax(source, body, start, &error),
        });
        return None;
    }
    let rows: Vec<&RawValue> = match serde_json::from_str(body) {
        Ok(rows) => rows,
        Err(error) => {
            findings.push(syntax(source, body, start, &error));
            return None;
        }
    };
    let flat = !rows.is_empty() && rows.iter().all(|row| !row.get().starts_with('['));
    for (index, row) in rows.iter().enumerate() {
        if flat {
            table.push(reader.cell(row, 0, index, findings));
        } else if let Ok(cells) = serde_json::from_str::<Vec<&RawValue>>(row.get()) {
            for (col, cell) in cells.iter().enumerate() {
                table.push(reader.cell(cell, index, col, findings));
            }
            table.end_row();
        } else {
            findings.push(
                Finding::error(
                    Kind::Malformed,
                    format!("Row {} is not an array of cells.", index + 1),
                )
                .at_row(index)
                .span(reader.bytes(row))
                .text(row.get())
                .expected("an array, as in [1, 2]"),
            );
        }
    }
    table.end_row();
    Some(table)
}

/// A complex cell written as an object.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Parts<'a> {
    #[serde(borrow)]
    re: &'a RawValue,
    #[serde(borrow)]
    im: Option<&'a RawValue>,
}

struct Json<'a> {
    source: &'a str,
}

impl Json<'_> {
    /// Where a value borrowed from the source stands in it.
    fn bytes(&self, value: &RawValue) -> Bytes {
        let start = (value.get().as_ptr() as usize).saturating_sub(self.source.as_ptr() as usize);
        Bytes::new(start, start + value.get().len())
    }

    fn cell(&self, value: &RawValue, row: usize, col: usize, findings: &mut Findings) -> RawCell {
        let Bytes { start, end } = self.bytes(value);
        let (start, end) = (start as usize, end as usize);
        let literal = value.get();
        let text = match literal.as_bytes().first() {
            Some(b'[') => match serde_json::from_str::<Vec<&RawValue>>(literal).as_deref() {
                Ok([re, im]) => self.complex(re, Some(im)),
                _ => None,
            },
            Some(b'{') => serde_json::from_str::<Parts>(literal)
                .ok()
                .and_then(|parts| self.complex(parts.re, parts.im)),
            Some(b'n') => Some(String::new()),
            _ => match scalar(literal) {
                Some(text) if text == literal => return RawCell::plain(start, end),
                text => text,
            },
        };
        let text = text.unwrap_or_else(|| {
            findings.push(
                Finding::error(
                    Kind::UnreadableCell,
                    format!(
                        "The cell in row {}, column {} is not a number.",
                        row + 1,
                        col + 1
                    ),
                )
                .at(row, col)
                .span(Bytes::new(start, end))
                .text(literal)
                .expected(
                    "a number, a string such as \"1/3\", a pair [re, im] or {\"re\": 1, \"im\": 2}",
                ),
            );
            "0".to_owned()
        });
        RawCell::rewritten(start, end, text)
    }

    fn complex(&self, re: &RawValue, im: Option<&RawValue>) -> Option<String> {
        let re = scalar(re.get())?;
        match im {
            None => Some(re),
            Some(im) => Some(format!("({re})+({})*i", scalar(im.get())?)),
        }
    }
}

/// The cell text of a number or string literal.
fn scalar(literal: &str) -> Option<String> {
    match literal.as_bytes().first()? {
        b'"' => serde_json::from_str(literal).ok(),
        b'-' | b'0'..=b'9' => Some(literal.to_owned()),
        _ => None,
    }
}

/// Where and why the text stops being JSON.
fn syntax(source: &str, body: &str, start: usize, error: &serde_json::Error) -> Finding {
    let line_start: usize = body
        .split_inclusive('\n')
        .take(error.line().saturating_sub(1))
        .map(str::len)
        .sum();
    let mut at = (start + line_start + error.column().saturating_sub(1)).min(source.len());
    while !source.is_char_boundary(at) {
        at -= 1;
    }
    let end = at + source[at..].chars().next().map_or(0, char::len_utf8);
    let sentence = if error.is_eof() {
        "The JSON text ends before its arrays are closed.".to_owned()
    } else {
        format!(
            "The JSON text breaks off in line {}, character {}.",
            error.line(),
            error.column()
        )
    };
    Finding::error(Kind::Malformed, sentence)
        .span(Bytes::new(at, end))
        .text(&source[at..end])
        .expected("nested arrays, as in [[2, 1], [1, 2]]")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(source: &str) -> Option<Vec<Vec<String>>> {
        let mut findings = Findings::new(10);
        let table = read(source, RawTable::new(20), &mut findings)?;
        assert!(!findings.has_errors(), "{source:?}");
        Some(table.texts(source))
    }

    #[test]
    fn every_cell_notation() {
        assert_eq!(
            texts(
                " [[1.10, \"1/3\"], [[1, -2], {\"re\": 3, \"im\": \"√2\"}], [{\"re\": 1e3}, null]]"
            ),
            Some(vec![
                vec!["1.10".into(), "1/3".into()],
                vec!["(1)+(-2)*i".into(), "(3)+(√2)*i".into()],
                vec!["1e3".into(), String::new()],
            ])
        );
        assert_eq!(texts("[1, 2]"), Some(vec![vec!["1".into(), "2".into()]]));
        assert_eq!(texts("\u{FEFF}[[7]]"), Some(vec![vec!["7".into()]]));
    }

    #[test]
    fn spans_are_those_of_the_literals() {
        let source = "[[1.10, \"é\"],\n [[1,2], 4]]";
        let table = read(source, RawTable::new(20), &mut Findings::new(1)).expect("valid");
        let spans: Vec<_> = table.iter().map(|cell| cell.span.of(source)).collect();
        assert_eq!(spans, ["1.10", "\"é\"", "[1,2]", "4"]);
    }

    #[test]
    fn broken_text_says_where() {
        for (source, at) in [
            ("[[1, 2],\n [3, x]]", "x"),
            ("[[1,é]]", "é"),
            ("[[1, 2]", ""),
        ] {
            let mut findings = Findings::new(10);
            assert!(
                read(source, RawTable::new(20), &mut findings).is_none(),
                "{source}"
            );
            let list = findings.into_diagnostics(&super::super::span::Offsets::new(source));
            assert_eq!(list[0].kind, Kind::Malformed, "{source}");
            let span = list[0].span.expect("a place");
            assert!(
                source[span.start as usize..].starts_with(at) || at.is_empty(),
                "{source}: {span:?}"
            );
        }
    }

    #[test]
    fn nesting_without_end_neither_overflows_nor_hangs() {
        let deep = "[".repeat(200_000);
        assert!(read(&deep, RawTable::new(20), &mut Findings::new(1)).is_none());
        let closed = format!("{deep}{}", "]".repeat(200_000));
        let mut findings = Findings::new(1);
        read(&closed, RawTable::new(20), &mut findings);
        assert!(findings.has_errors());
    }
}
