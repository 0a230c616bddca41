//! Plain text: rows at line breaks (or semicolons), cells apart by a separator.
//!
//! Where cells are apart by tabs, commas or semicolons a cell may hold spaces
//! (`1 + 2i`). Where they are apart by spaces the words of a line are cells,
//! except that
//! - white space inside brackets does not part cells (`sqrt( 2 )`);
//! - a word that ends with an operator takes the next word (`1+ 2i`), and a
//!   lone operator, or a word that starts with one that cannot be a sign
//!   (`* / ^ ±`), belongs to the word before it (`1 + 2i`, `12.5 ± 0.1`);
//! - a word that starts with a sign is a cell of its own (`1 -2 3` is three
//!   cells). `1 +2i` is therefore two cells, unless [`SignedWords::Joined`] is
//!   chosen, or is the only reading that gives what is wanted.

use super::clean;
use super::raw::{RawCell, RawTable};
use super::settings::{Layout, SignedWords};

/// Reads the text in one of the plain layouts.
pub(crate) fn read(
    source: &str,
    layout: Layout,
    signed: SignedWords,
    mut table: RawTable,
) -> RawTable {
    match layout {
        Layout::Tabs => super::delimited::read(source, b'\t', table),
        Layout::Commas => super::delimited::read(source, b',', table),
        Layout::Semicolons => super::delimited::read(source, b';', table),
        _ => {
            let rows = Words {
                source,
                commas: matches!(
                    layout,
                    Layout::CommasAndSpaces | Layout::CommasRowsAtSemicolons
                ),
                spaces: layout != Layout::CommasRowsAtSemicolons,
                signed,
            };
            for (start, end) in lines(source) {
                if matches!(
                    layout,
                    Layout::RowsAtSemicolons | Layout::CommasRowsAtSemicolons
                ) {
                    for (from, to) in split_at(source, start, end, ';') {
                        rows.read_row(from, to, &mut table);
                    }
                } else {
                    rows.read_row(start, end, &mut table);
                }
            }
            table
        }
    }
}

/// The lines that hold something, without comments, as byte ranges.
///
/// A line that starts with `#`, `%` or `//` is a comment (common practice, no
/// source).
pub(crate) fn lines(source: &str) -> impl Iterator<Item = (usize, usize)> + '_ {
    let mut start = 0;
    source
        .split(clean::is_line_break)
        .map(move |line| {
            let from = start;
            // Every line break but these two is one byte.
            let width = source[from + line.len()..]
                .chars()
                .next()
                .map_or(0, char::len_utf8);
            start = from + line.len() + width;
            (from, from + line.len())
        })
        .filter(|&(from, to)| {
            let line = source[from..to].trim_start_matches(clean::is_blank_char);
            !line.is_empty() && !is_comment(line)
        })
}

/// Whether a line (without leading blanks) is a comment.
pub(crate) fn is_comment(line: &str) -> bool {
    line.starts_with(['#', '%']) || line.starts_with("//")
}

/// The stretches between occurrences of `mark`.
fn split_at(
    source: &str,
    start: usize,
    end: usize,
    mark: char,
) -> impl Iterator<Item = (usize, usize)> + '_ {
    let mut from = start;
    source[start..end].split(mark).map(move |part| {
        let stretch = (from, from + part.len());
        from += part.len() + mark.len_utf8();
        stretch
    })
}

/// Splits rows into words and joins the words that make one cell.
pub(crate) struct Words<'a> {
    pub source: &'a str,
    pub commas: bool,
    pub spaces: bool,
    pub signed: SignedWords,
}

impl Words<'_> {
    /// Reads source[start..end] as one row.
    pub fn read_row(&self, start: usize, end: usize, table: &mut RawTable) {
        let mut cell: Option<(usize, usize)> = None;
        let mut after_comma = false;
        let brackets = balanced(&self.source[start..end]);
        self.each_word(start, end, brackets, |word| match word {
            Word::Comma(at) => {
                match cell.take() {
                    Some((from, to)) => table.push(RawCell::plain(from, to)),
                    // Two commas in a row, or one in front: a blank cell.
                    None => table.push(RawCell::plain(at, at)),
                }
                after_comma = true;
            }
            Word::Text(from, to) => {
                cell = Some(match cell {
                    Some((first, last))
                        if self.joins(&self.source[first..last], &self.source[from..to]) =>
                    {
                        (first, to)
                    }
                    Some((first, last)) => {
                        table.push(RawCell::plain(first, last));
                        (from, to)
                    }
                    None => (from, to),
                });
                after_comma = false;
            }
        });
        match cell {
            Some((from, to)) => table.push(RawCell::plain(from, to)),
            None if after_comma && !self.spaces => table.push(RawCell::plain(end, end)),
            None => {}
        }
        table.end_row();
    }

    fn each_word(&self, start: usize, end: usize, brackets: Brackets, mut take: impl FnMut(Word)) {
        let mut from: Option<usize> = None;
        let mut last = start;
        let mut depth = 0usize;
        for (offset, c) in self.source[start..end].char_indices() {
            let at = start + offset;
            let blank = clean::is_blank_char(c);
            if brackets == Brackets::Balanced {
                match c {
                    '(' | '[' | '{' => depth += 1,
                    ')' | ']' | '}' => depth -= 1,
                    _ => {}
                }
            }
            let comma = self.commas && c == ',';
            if depth == 0 && (comma || (blank && self.spaces)) {
                if let Some(word) = from.take() {
                    take(Word::Text(word, last));
                }
                if comma {
                    take(Word::Comma(at));
                }
            } else if !blank {
                from.get_or_insert(at);
                last = at + c.len_utf8();
            }
        }
        if let Some(word) = from {
            take(Word::Text(word, last));
        }
    }

    /// Whether `next` continues the cell `so_far`.
    fn joins(&self, so_far: &str, next: &str) -> bool {
        continues(so_far, next)
            || (self.signed == SignedWords::Joined
                && is_signed_imaginary(next)
                && !is_imaginary(so_far))
    }
}

/// Whether a word can only be the rest of the cell that the words before it
/// began.
pub(crate) fn continues(so_far: &str, next: &str) -> bool {
    ends_open(so_far) || starts_inside(next)
}

/// Whether a word is a signed imaginary number without real part.
pub(crate) fn is_signed_imaginary(word: &str) -> bool {
    let Some(rest) = word.strip_prefix(SIGNS) else {
        return false;
    };
    let another_sign = |(at, _): (usize, &str)| !rest[..at].ends_with(['e', 'E', '(', '^']);
    is_imaginary(word) && !rest.match_indices(SIGNS).any(another_sign)
}

enum Word {
    Text(usize, usize),
    Comma(usize),
}

#[derive(Clone, Copy, PartialEq)]
enum Brackets {
    Balanced,
    /// Some bracket has no partner in the row, so none of them groups.
    Unbalanced,
}

fn balanced(row: &str) -> Brackets {
    let mut depth = 0i64;
    for c in row.bytes() {
        match c {
            b'(' | b'[' | b'{' => depth += 1,
            b')' | b']' | b'}' => depth -= 1,
            _ => {}
        }
        if depth < 0 {
            return Brackets::Unbalanced;
        }
    }
    if depth == 0 {
        Brackets::Balanced
    } else {
        Brackets::Unbalanced
    }
}

/// Plus and the minus signs of Unicode.
pub(crate) const SIGNS: [char; 9] = [
    '+', '-', '\u{2212}', '\u{2010}', '\u{2011}', '\u{2012}', '\u{2013}', '\u{FE63}', '\u{FF0D}',
];

const BETWEEN: [char; 8] = ['*', '/', '^', '±', '·', '×', '÷', '⋅'];

/// Whether the text cannot be complete: it ends with an operator or is the
/// name of a function.
fn ends_open(text: &str) -> bool {
    text.ends_with(SIGNS)
        || text.ends_with(BETWEEN)
        || text.ends_with('√')
        || text.ends_with("sqrt")
}

/// Whether the text cannot begin a cell: it starts with an operator that is no
/// sign, or is a lone sign.
fn starts_inside(text: &str) -> bool {
    text.starts_with(BETWEEN)
        || text.starts_with("+/-")
        || text.strip_prefix(SIGNS).is_some_and(|rest| rest.is_empty())
}

/// Whether a word ends with the imaginary unit, as a number does.
pub(crate) fn is_imaginary(word: &str) -> bool {
    let word = word.trim_end_matches(clean::is_invisible);
    let Some(rest) = word.strip_suffix(['i', 'j']) else {
        return false;
    };
    rest.ends_with(|c: char| c.is_numeric() || c == '.' || c == ')' || c == '*' || c == '·')
        || rest.strip_suffix(SIGNS).is_some()
        || rest.is_empty()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn cells(text: &str, layout: Layout, signed: SignedWords) -> Vec<Vec<String>> {
        let table = read(text, layout, signed, RawTable::new(20));
        (0..table.rows())
            .map(|row| {
                table
                    .row(row)
                    .iter()
                    .map(|cell| cell.text(text).to_owned())
                    .collect()
            })
            .collect()
    }

    #[test]
    fn words_that_make_one_cell_are_joined() {
        for (line, wanted) in [
            ("1 + 2i 3", vec!["1 + 2i", "3"]),
            ("1+ 2i 3", vec!["1+ 2i", "3"]),
            ("1 -2 3", vec!["1", "-2", "3"]),
            ("sqrt( 2 ) 1", vec!["sqrt( 2 )", "1"]),
            ("sqrt (2) 1", vec!["sqrt (2)", "1"]),
            ("12.5 ± 0.1 4", vec!["12.5 ± 0.1", "4"]),
            ("12.5 +/- 0.1 4", vec!["12.5 +/- 0.1", "4"]),
            ("1 / 3 2", vec!["1 / 3", "2"]),
            ("1 \u{2212} 2i", vec!["1 \u{2212} 2i"]),
            ("(1 2", vec!["(1", "2"]),
            ("\u{FEFF}1\u{00A0}2", vec!["1", "2"]),
        ] {
            assert_eq!(
                cells(line, Layout::Spaces, SignedWords::Apart),
                [wanted],
                "{line:?}"
            );
        }
    }

    #[test]
    fn signed_imaginary_words_join_only_when_told() {
        let line = "1 +2i 3 -i 4";
        assert_eq!(
            cells(line, Layout::Spaces, SignedWords::Apart),
            [["1", "+2i", "3", "-i", "4"]]
        );
        assert_eq!(
            cells(line, Layout::Spaces, SignedWords::Joined),
            [["1 +2i", "3 -i", "4"]]
        );
    }

    #[test]
    fn semicolons_end_rows_where_they_are_row_marks() {
        assert_eq!(
            cells(
                "1 2; 3 4;\n5 6",
                Layout::RowsAtSemicolons,
                SignedWords::Apart
            ),
            [["1", "2"], ["3", "4"], ["5", "6"]]
        );
        assert_eq!(
            cells(
                "1, 2 + i; 3,, 4",
                Layout::CommasRowsAtSemicolons,
                SignedWords::Apart
            ),
            [vec!["1", "2 + i"], vec!["3", "", "4"]]
        );
    }

    #[test]
    fn comments_and_every_kind_of_line_break() {
        assert_eq!(
            cells(
                "# head\r\n1 2\r\n\n% x\r3 4\u{2028}5 6",
                Layout::Spaces,
                SignedWords::Apart
            ),
            [["1", "2"], ["3", "4"], ["5", "6"]]
        );
    }
}
