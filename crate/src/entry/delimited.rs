//! Cells apart by one delimiter, quoted where need be (RFC 4180), through the
//! state machine of the `csv` crate family, which unlike its friendlier sister
//! tells where each field ends.

use super::clean;
use super::plain::is_comment;
use super::raw::{RawCell, RawTable};
use csv_core::{ReadFieldResult, Reader, ReaderBuilder};

/// Reads `source` with cells apart by `delimiter`.
pub(crate) fn read(source: &str, delimiter: u8, mut table: RawTable) -> RawTable {
    let mut reader = ReaderBuilder::new().delimiter(delimiter).build();
    let mut buffer = vec![0u8; 256];
    let mut at = 0;
    let mut new_row = true;
    loop {
        if new_row {
            at = skip_comments(source, at);
        }
        let start = at;
        let Some((end, length, row_ended)) = field(&mut reader, source, &mut at, &mut buffer)
        else {
            break;
        };
        let raw = &source[start..end];
        let (from, to) = clean::trim(raw);
        let trimmed = &raw[from..to];
        let decoded = String::from_utf8_lossy(&buffer[..length]);
        let (keep_from, keep_to) = clean::trim(&decoded);
        let decoded = &decoded[keep_from..keep_to];
        table.push(if trimmed == decoded {
            RawCell::plain(start + from, start + to)
        } else {
            RawCell::rewritten(start + from, start + to, decoded.to_owned())
        });
        if row_ended {
            table.end_row();
        }
        new_row = row_ended;
    }
    table.end_row();
    table
}

/// One field: the end of its text, the bytes decoded into `buffer`, whether it
/// ends a row. `None` at the end of the source.
fn field(
    reader: &mut Reader,
    source: &str,
    at: &mut usize,
    buffer: &mut Vec<u8>,
) -> Option<(usize, usize, bool)> {
    let mut written = 0;
    loop {
        let input = &source.as_bytes()[*at..];
        let (result, consumed, produced) = reader.read_field(input, &mut buffer[written..]);
        *at += consumed;
        written += produced;
        match result {
            // The next call, with no input left, flushes the last field.
            ReadFieldResult::InputEmpty => {}
            ReadFieldResult::OutputFull => buffer.resize(buffer.len() * 2, 0),
            ReadFieldResult::Field { record_end } => {
                let mut end = *at;
                // The delimiter or line break that ended it was consumed too.
                if !input.is_empty() && consumed > 0 {
                    end -= 1;
                }
                return Some((end, written, record_end));
            }
            ReadFieldResult::End => return None,
        }
    }
}

/// Passes over blank lines and comment lines.
fn skip_comments(source: &str, mut at: usize) -> usize {
    loop {
        let line = source[at..].split(['\n', '\r']).next().unwrap_or("");
        let visible = line.trim_start_matches(clean::is_blank_char);
        let rest = &source[at + line.len()..];
        let skip = is_comment(visible) || (line.is_empty() && !rest.is_empty());
        if !skip {
            return at;
        }
        at += line.len() + usize::from(!rest.is_empty());
        if at >= source.len() {
            return at;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn cells(text: &str, delimiter: u8) -> Vec<Vec<(String, String)>> {
        let table = read(text, delimiter, RawTable::new(20));
        (0..table.rows())
            .map(|row| {
                table
                    .row(row)
                    .iter()
                    .map(|cell| (cell.text(text).to_owned(), cell.span.of(text).to_owned()))
                    .collect()
            })
            .collect()
    }

    fn texts(text: &str, delimiter: u8) -> Vec<Vec<String>> {
        cells(text, delimiter)
            .into_iter()
            .map(|row| row.into_iter().map(|cell| cell.0).collect())
            .collect()
    }

    #[test]
    fn fields_quotes_and_blanks() {
        for (text, wanted) in [
            ("1,2\n3,4", vec![vec!["1", "2"], vec!["3", "4"]]),
            ("1,2\r\n3,4\r\n", vec![vec!["1", "2"], vec!["3", "4"]]),
            ("1,,3\n,,", vec![vec!["1", "", "3"], vec!["", "", ""]]),
            ("\"1,5\",\"a \"\"b\"\"\"\n", vec![vec!["1,5", "a \"b\""]]),
            (
                " 1 , 2 \n\n# note\n 3 ,4",
                vec![vec!["1", "2"], vec!["3", "4"]],
            ),
            ("1\r2", vec![vec!["1"], vec!["2"]]),
        ] {
            assert_eq!(texts(text, b','), wanted, "{text:?}");
        }
    }

    #[test]
    fn spans_cover_each_field_as_it_stands() {
        let text = "1,\"2,5\"\r\n 30 ,4";
        let spans: Vec<_> = cells(text, b',')
            .concat()
            .into_iter()
            .map(|cell| cell.1)
            .collect();
        assert_eq!(spans, ["1", "\"2,5\"", "30", "4"], "{text:?}");
    }

    #[test]
    fn a_field_longer_than_the_buffer_arrives_whole() {
        let long = "7".repeat(3000);
        let text = format!("1;{long};2");
        assert_eq!(texts(&text, b';'), [["1", &long, "2"]]);
    }

    #[test]
    fn an_open_quote_ends_with_the_text() {
        assert_eq!(texts("\"1,2\n3", b','), [["1,2\n3"]]);
    }
}
