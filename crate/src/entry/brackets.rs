//! Rows in brackets of any kind: `[1 2; 3 4]`, `{{1, 2}, {3, 4}}`,
//! `((1, 2), (3, 4))`, `[[1. 2.] [3. 4.]]`, with or without a word in front.
//!
//! Brackets inside brackets are rows. Without inner brackets, rows end at
//! semicolons and line breaks. Cells are apart by commas where a row has any,
//! else by spaces.

use super::clean;
use super::plain::Words;
use super::raw::RawTable;
use super::settings::SignedWords;

/// The bytes inside the outermost brackets, when these enclose the whole text
/// and hold rows.
pub(crate) fn inside(source: &str) -> Option<(usize, usize)> {
    let (start, end) = clean::trim(source);
    let body = source[start..end].trim_end_matches([';', ',']).trim_end();
    let end = start + body.len();
    let open = body.find(['[', '{', '('])?;
    let word = &body[..open];
    if !word
        .trim_end()
        .chars()
        .all(|c| c.is_alphanumeric() || matches!(c, '_' | '.' | '=' | ' '))
    {
        return None;
    }
    let close = matching(source, start + open, end)?;
    if close + 1 != end {
        return None;
    }
    let (first, last) = clean::trim(&source[start + open + 1..close]);
    let (mut first, mut last) = (start + open + 1 + first, start + open + 1 + last);
    let inner = &source[first..last];
    let nested = inner.starts_with(['[', '{', '(']);
    if body[open..].starts_with('(') {
        // Parentheses enclose a cell as well; rows must be seen inside.
        if !nested
            || word.trim().is_empty()
                && inner.starts_with('(')
                && !rows_of_parentheses(source, first, last)
        {
            return None;
        }
        // A word with parentheses around the brackets, and what follows them.
        if !word.trim().is_empty() {
            let inner_close = matching(source, first, last)?;
            let (from, to) = clean::trim(&source[first + 1..inner_close]);
            (first, last) = (first + 1 + from, first + 1 + to);
        }
    }
    // Cells beside rows belong to none of them.
    let nested = source[first..last].starts_with(['[', '{']);
    let rows = !nested || are_groups(source, first, last, |_| true);
    rows.then_some((first, last))
}

/// Whether the text is groups in parentheses with nothing but separators
/// between, each with a comma inside.
fn rows_of_parentheses(source: &str, first: usize, last: usize) -> bool {
    are_groups(source, first, last, |group| {
        group.starts_with('(') && group.contains(',')
    })
}

/// Whether the text is groups in brackets, each of which is `fit`, with nothing
/// but separators between.
fn are_groups(source: &str, first: usize, last: usize, fit: impl Fn(&str) -> bool) -> bool {
    let mut at = first;
    while at < last {
        let begins = source[at..last].starts_with(['[', '{', '(']);
        let close = if begins {
            matching(source, at, last)
        } else {
            None
        };
        match close {
            Some(close) if fit(&source[at..close]) => at = skip_between(source, close + 1, last),
            _ => return false,
        }
    }
    true
}

/// Past white space and row separators.
fn skip_between(source: &str, at: usize, end: usize) -> usize {
    let rest = &source[at..end];
    end - rest
        .trim_start_matches(|c| matches!(c, ',' | ';') || clean::is_blank_char(c))
        .len()
}

/// The bracket that closes the one at `open`. Kinds are not told apart: text
/// that mixes them reads the same or not at all.
fn matching(source: &str, open: usize, end: usize) -> Option<usize> {
    let mut depth = 0usize;
    for (offset, byte) in source.as_bytes()[open..end].iter().enumerate() {
        match byte {
            b'[' | b'{' | b'(' => depth += 1,
            b']' | b'}' | b')' => {
                depth = depth.checked_sub(1)?;
                if depth == 0 {
                    return Some(open + offset);
                }
            }
            _ => {}
        }
    }
    None
}

/// Reads rows in brackets; a text without them gives an empty table.
pub(crate) fn read(source: &str, signed: SignedWords, mut table: RawTable) -> RawTable {
    let Some((start, end)) = inside(source) else {
        return table;
    };
    let mut at = start;
    if source[start..end].starts_with(['[', '{']) || rows_of_parentheses(source, start, end) {
        while at < end {
            let close = matching(source, at, end).unwrap_or(end);
            row(source, (at + 1).min(close), close, signed, &mut table);
            at = skip_between(source, (close + 1).min(end), end);
        }
        return table;
    }
    let ends_row = |c: char| c == ';' || clean::is_line_break(c);
    for part in source[start..end].split_inclusive(ends_row) {
        let text = part.trim_end_matches(ends_row);
        row(source, at, at + text.len(), signed, &mut table);
        at += part.len();
    }
    table
}

fn row(source: &str, start: usize, end: usize, signed: SignedWords, table: &mut RawTable) {
    let text = source[start..end].trim_end_matches(|c| c == ',' || clean::is_blank_char(c));
    let end = start + text.len();
    let commas = text.contains(',');
    Words {
        source,
        commas,
        spaces: !commas,
        signed,
    }
    .read_row(start, end, table);
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(source: &str) -> Vec<Vec<String>> {
        let table = read(source, SignedWords::Apart, RawTable::new(20));
        table.texts(source)
    }

    #[test]
    fn rows_in_every_kind_of_bracket() {
        let two = vec![vec!["1", "2"], vec!["3", "4"]];
        for source in [
            "[1 2; 3 4]",
            "[1, 2; 3, 4];",
            "[1 2\n 3 4]",
            "{{1, 2}, {3, 4}}",
            "((1, 2), (3, 4))",
            "[[1 2]\n [3 4]]",
            "[[1, 2,], [3, 4],]",
            "array([[1, 2],\n       [3, 4]], dtype=int8)",
            "A = [1 2; 3 4]",
            "[(1, 2), (3, 4)]",
        ] {
            assert_eq!(texts(source), two, "{source:?}");
        }
        assert_eq!(
            texts("[1 + 2i, sqrt(2); (3), 4]"),
            [["1 + 2i", "sqrt(2)"], ["(3)", "4"]]
        );
    }

    #[test]
    fn cells_in_parentheses_are_no_rows() {
        for source in [
            "(1+2i) (3)",
            "(1 + 2)",
            "sqrt(2)",
            "((1+2)*3)",
            "(1,2",
            "[1] [2]",
            "2*[1]",
        ] {
            assert_eq!(inside(source), None, "{source:?}");
        }
    }
}
