//! HTML tables, as browsers and spreadsheets copy them: the text of the cells
//! and nothing else. The tokenizer is our own: all that is wanted of HTML are
//! the few tags of a table, with the place of every cell in the source, and a
//! full parser would outweigh the rest of this stage in the module.

use super::clean;
use super::diagnostic::{Finding, Findings, Kind};
use super::entities;
use super::raw::{RawCell, RawTable};
use super::span::Bytes;

/// Whether the text holds an HTML table. It must see the same tags as [`read`]:
/// else an edit of what that takes for a cell may change what the text is.
pub(crate) fn looks_like(body: &str) -> bool {
    let mut at = 0;
    while let Some(mark) = next_mark(body, at) {
        let table = |name: &str| {
            ["table", "tr"]
                .iter()
                .any(|tag| name.eq_ignore_ascii_case(tag))
        };
        if mark.name.is_some_and(table) {
            return true;
        }
        at = mark.end;
    }
    false
}

/// What a `<` begins: a tag of this name, or, without one, a comment or a bare
/// sign as in 1 < 2.
struct Mark<'a> {
    start: usize,
    end: usize,
    name: Option<&'a str>,
    is_text: bool,
}

/// The next `<` from `at` on, with what it begins.
fn next_mark(source: &str, at: usize) -> Option<Mark<'_>> {
    let start = at + source[at..].find('<')?;
    let rest = &source[start..];
    let name = tag_name(rest);
    let (end, name, is_text) = if rest.starts_with("<!--") {
        let length = rest.find("-->").map_or(rest.len(), |end| end + 3);
        (start + length, None, false)
    } else if name.is_empty() || name == "/" {
        (start + 1, None, true)
    } else {
        (tag_end(source, start), Some(name), false)
    };
    Some(Mark {
        start,
        end,
        name,
        is_text,
    })
}

/// The name in a tag that begins here, with the slash of a closing tag.
fn tag_name(tag: &str) -> &str {
    let name = tag.strip_prefix('<').unwrap_or(tag);
    let end = name
        .char_indices()
        .find(|&(at, c)| !(c.is_ascii_alphanumeric() || (at == 0 && c == '/')))
        .map_or(name.len(), |(at, _)| at);
    &name[..end]
}

/// Reads the first table of the text.
pub(crate) fn read(source: &str, table: RawTable, findings: &mut Findings) -> RawTable {
    let mut reader = Html {
        source,
        table,
        cell: None,
        heads: 0,
        cells: 0,
        finished: false,
    };
    let mut at = 0;
    while let Some(mark) = next_mark(source, at) {
        reader.take_text(at, mark.start);
        if mark.is_text {
            reader.take_text(mark.start, mark.end);
        }
        if let Some(name) = mark.name {
            reader.take_tag(name, mark.start, mark.end, findings);
        }
        at = mark.end;
        if reader.finished {
            break;
        }
    }
    if !reader.finished {
        reader.take_text(at, source.len());
    }
    reader.end_row();
    if reader.finished && looks_like(&source[at..]) {
        findings.push(Finding::note(
            Kind::Ignored,
            "There is more than one table; the first was read.",
        ));
    }
    reader.table
}

/// One past the `>` that closes the tag at `open`, quoted attributes respected.
fn tag_end(source: &str, open: usize) -> usize {
    let mut quote = None;
    for (offset, byte) in source.as_bytes()[open..].iter().enumerate() {
        match (quote, byte) {
            (None, b'>') => return open + offset + 1,
            (None, b'"' | b'\'') => quote = Some(*byte),
            (Some(mark), byte) if mark == *byte => quote = None,
            _ => {}
        }
    }
    source.len()
}

struct OpenCell {
    start: usize,
    end: usize,
    text: String,
}

struct Html<'a> {
    source: &'a str,
    table: RawTable,
    cell: Option<OpenCell>,
    /// Header cells and cells in the row so far.
    heads: usize,
    cells: usize,
    finished: bool,
}

impl Html<'_> {
    fn take_text(&mut self, start: usize, end: usize) {
        if let Some(cell) = &mut self.cell {
            let text = &self.source[start..end];
            let (from, to) = clean::trim(text);
            if from < to {
                if clean::is_blank(&cell.text) {
                    cell.start = start + from;
                }
                cell.end = start + to;
            }
            entities::decode_into(text, &mut cell.text);
        }
    }

    fn take_tag(&mut self, name: &str, open: usize, close: usize, findings: &mut Findings) {
        let name = name.to_ascii_lowercase();
        match name.as_str() {
            "tr" => self.end_row(),
            "/tr" => self.end_row(),
            "/table" => {
                self.end_row();
                self.finished = self.table.rows_seen > 0;
            }
            "td" | "th" => {
                self.end_cell();
                self.heads += usize::from(name == "th");
                self.cells += 1;
                self.cell = Some(OpenCell {
                    start: close,
                    end: close,
                    text: String::new(),
                });
                self.refuse_spans(open, close, findings);
            }
            "/td" | "/th" => self.end_cell(),
            "br" | "p" | "/p" | "div" | "/div" => self.write(" ", open, close),
            "sup" => self.write("^(", open, close),
            "/sup" => self.write(")", open, close),
            "sub" => self.write("_", open, close),
            _ => {}
        }
    }

    /// Writes what a tag prints; the cell then covers the tag as well.
    fn write(&mut self, text: &str, open: usize, close: usize) {
        if let Some(cell) = &mut self.cell {
            if !clean::is_blank(text) {
                if clean::is_blank(&cell.text) {
                    cell.start = open;
                }
                cell.end = close;
            }
            cell.text.push_str(text);
        }
    }

    /// A cell that spans several has no one place in a matrix.
    fn refuse_spans(&self, open: usize, close: usize, findings: &mut Findings) {
        let tag = self.source[open..close].to_ascii_lowercase();
        for attribute in ["colspan", "rowspan"] {
            let Some((_, rest)) = tag.split_once(attribute) else {
                continue;
            };
            let number: String = rest
                .trim_start_matches(|c: char| {
                    c == '=' || c == '"' || c == '\'' || c.is_whitespace()
                })
                .chars()
                .take_while(char::is_ascii_digit)
                .collect();
            if !matches!(number.as_str(), "" | "0" | "1") {
                findings.push(
                    Finding::warning(
                        Kind::Malformed,
                        format!("A table cell has {attribute} {number}; it was read as one cell."),
                    )
                    .span(Bytes::new(open, close))
                    .text(&tag)
                    .expected("cells that stand for one place each"),
                );
            }
        }
    }

    fn end_cell(&mut self) {
        let Some(cell) = self.cell.take() else { return };
        let (from, to) = clean::trim(&cell.text);
        let text = &cell.text[from..to];
        let same = self.source.get(cell.start..cell.end) == Some(text);
        self.table.push(if same {
            RawCell::plain(cell.start, cell.end)
        } else {
            RawCell::rewritten(cell.start, cell.end, text.to_owned())
        });
    }

    fn end_row(&mut self) {
        self.end_cell();
        if self.table.rows_seen == 0 && self.cells > 1 && self.heads == self.cells {
            self.table.marked_head = true;
        }
        self.heads = 0;
        self.cells = 0;
        self.table.end_row();
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(source: &str) -> Vec<Vec<String>> {
        let mut findings = Findings::new(10);
        let table = read(source, RawTable::new(20), &mut findings);
        table.texts(source)
    }

    #[test]
    fn cells_of_tables() {
        for (source, wanted) in [
            ("<table><tr><td>1<td>2<tr><td>3<td>4</table>", vec![vec!["1", "2"], vec!["3", "4"]]),
            (
                "<meta charset='utf-8'><TABLE class=\"a>b\"><tbody><TR><TD> 1 </TD><td>&minus;2&nbsp;</td></TR>\n<tr><td><b>3</b></td><td></td></tr></tbody></TABLE>tail <table>",
                vec![vec!["1", "−2"], vec!["3", ""]],
            ),
            ("<tr><td>10<sup>-3</sup></td><td>k<sub>1</sub></td></tr>", vec![vec!["10^(-3)", "k_1"]]),
            ("<tr><td>&#49;&#x32;<!-- <td> --></td><td>1 &lt; 2</td></tr>", vec![vec!["12", "1 < 2"]]),
            ("<tr><td>a < b</td></tr>", vec![vec!["a < b"]]),
        ] {
            assert!(looks_like(source), "{source:?}");
            assert_eq!(texts(source), wanted, "{source:?}");
        }
    }

    #[test]
    fn spans_cover_the_text_of_the_cell() {
        let source = "<tr><td> <b>12</b> </td><td>&minus;3</td><td>10<sup>2</sup></td></tr>";
        let table = read(source, RawTable::new(20), &mut Findings::new(1));
        let spans: Vec<_> = table.iter().map(|cell| cell.span.of(source)).collect();
        assert_eq!(spans, ["12", "&minus;3", "10<sup>2</sup>"]);
    }

    #[test]
    fn unclosed_markup_ends_with_the_text() {
        for source in [
            "<table><tr><td>1",
            "<table><tr><td>1<",
            "<table><tr><td>1</td",
            "<tr><td a=\"1>2",
            "<tr><!-- ",
        ] {
            let table = read(source, RawTable::new(20), &mut Findings::new(1));
            assert!(table.rows() <= 1, "{source:?}");
        }
    }
}
