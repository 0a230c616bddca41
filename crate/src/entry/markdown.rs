//! Markdown tables: cells apart by bars, the header set off by a row of dashes.

use super::clean;
use super::plain;
use super::raw::{RawCell, RawTable};

/// Whether the text is a table of this kind: a row of dashes under a header, or
/// at least two lines that begin and end with a bar.
pub(crate) fn looks_like(source: &str) -> bool {
    let mut barred = 0;
    let mut lines = 0;
    for (start, end) in plain::lines(source).take(3) {
        let line = source[start..end].trim_matches(clean::is_blank_char);
        if is_rule(line) {
            return lines > 0;
        }
        lines += 1;
        barred += usize::from(line.len() > 1 && line.starts_with('|') && line.ends_with('|'));
    }
    barred > 1 && barred == lines
}

/// Whether a line is the row of dashes between header and body.
fn is_rule(line: &str) -> bool {
    line.contains('|')
        && line.contains('-')
        && line
            .chars()
            .all(|c| matches!(c, '|' | '-' | ':') || clean::is_blank_char(c))
}

/// Reads the table.
pub(crate) fn read(source: &str, mut table: RawTable) -> RawTable {
    for (start, end) in plain::lines(source) {
        let (from, to) = clean::trim(&source[start..end]);
        let line = &source[start + from..start + to];
        if is_rule(line) {
            table.marked_head = table.marked_head || table.rows_seen == 1;
            continue;
        }
        read_row(source, start + from, start + to, &mut table);
        table.end_row();
    }
    table
}

fn read_row(source: &str, start: usize, end: usize, table: &mut RawTable) {
    let line = &source[start..end];
    let body = line.strip_prefix('|').unwrap_or(line);
    let mut from = end - body.len();
    let mut escaped = false;
    for (offset, c) in body.char_indices() {
        let at = end - body.len() + offset;
        if c == '|' && !escaped {
            table.push(cell(source, from, at));
            from = at + 1;
        }
        escaped = c == '\\' && !escaped;
    }
    if from < end {
        table.push(cell(source, from, end));
    }
}

/// The cell without its emphasis, code marks and escapes.
fn cell(source: &str, start: usize, end: usize) -> RawCell {
    let (from, to) = clean::trim(&source[start..end]);
    let (start, end) = (start + from, start + to);
    let text = &source[start..end];
    let mut bare = text;
    for mark in ["**", "__", "`", "$"] {
        if let Some(inner) = bare
            .strip_prefix(mark)
            .and_then(|rest| rest.strip_suffix(mark))
        {
            bare = inner;
        }
    }
    if bare == text && !text.contains('\\') {
        return RawCell::plain(start, end);
    }
    RawCell::rewritten(start, end, bare.replace('\\', ""))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(source: &str) -> Vec<Vec<String>> {
        let table = read(source, RawTable::new(20));
        table.texts(source)
    }

    #[test]
    fn cells_between_bars() {
        for (source, wanted) in [
            (
                "| a | b |\n|---|:-:|\n| 1 | **2** |",
                vec![vec!["a", "b"], vec!["1", "2"]],
            ),
            (
                "a | b\n--|--\n1 | 2\n",
                vec![vec!["a", "b"], vec!["1", "2"]],
            ),
            (
                "| 1 | |\n| `2` | \\-3 |",
                vec![vec!["1", ""], vec!["2", "-3"]],
            ),
        ] {
            assert!(looks_like(source), "{source:?}");
            assert_eq!(texts(source), wanted, "{source:?}");
        }
    }

    #[test]
    fn other_texts_are_not_taken_for_tables() {
        for source in ["1 2\n3 4", "|1|", "1 - 2\n| 3", "---|---\n1|2"] {
            assert!(!looks_like(source), "{source:?}");
        }
    }
}
