//! Editing the matrix cell by cell, in step with its text.
//!
//! Every function gives the whole new text. A cell that stands in the text is
//! changed there and all else is kept; a change that the layout cannot hold
//! (a cell that only the shape implies, a fraction in a Matrix Market file, one
//! more row) rewrites the matrix in full as plain text, its labels kept.

mod full;

use super::cell::Parameters;
use super::conjugate;
use super::reading;
use super::settings::{DecimalMark, Layout};
use super::write;
use super::{Entry, Origin, ReadOptions, Settings};
use full::Full;

/// Whether an edit is carried over the diagonal.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mirror {
    /// The cell across the diagonal gets the complex conjugate.
    Conjugate,
    /// Only the cell itself changes.
    Off,
}

/// One cell's new text; row and column from 0.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CellEdit {
    /// The row.
    pub row: usize,
    /// The column.
    pub col: usize,
    /// The new text.
    pub text: String,
}

/// What an edit gives.
#[derive(Clone, Debug, PartialEq)]
pub struct Edited {
    /// The new text.
    pub text: String,
    /// The settings to read it with.
    pub settings: Settings,
}

/// Writes `new` into one cell of the text that `entry` was read from.
///
/// Cost: linear in the text.
pub fn set_cell(
    text: &str,
    entry: &Entry,
    edit: &CellEdit,
    mirror: Mirror,
    options: &ReadOptions,
) -> Edited {
    set_cells(text, entry, std::slice::from_ref(edit), mirror, options)
}

/// Writes several cells. Cells beyond the matrix make it larger, with zeros
/// between; it stays square where it was.
pub fn set_cells(
    text: &str,
    entry: &Entry,
    edits: &[CellEdit],
    mirror: Mirror,
    options: &ReadOptions,
) -> Edited {
    let none = Parameters::none();
    let settings = entry.settings.unwrap_or_default();
    let scribe = Scribe {
        settings,
        parameters: options.parameters.unwrap_or(&none),
    };
    if let Some(replacements) = scribe.in_place(entry, edits, mirror) {
        return Edited {
            text: replaced(text, replacements),
            settings,
        };
    }
    let mut full = Full::of(text, entry, &scribe);
    full.grow(edits, options.limits.order);
    for edit in edits {
        full.set(edit.row, edit.col, &edit.text);
        if mirror == Mirror::Conjugate && edit.row != edit.col {
            full.set(edit.col, edit.row, &scribe.conjugate(&edit.text));
        }
    }
    full.written(&settings)
}

/// Pastes a block of cells with its first cell at (`row`, `col`).
pub fn paste(
    text: &str,
    entry: &Entry,
    (row, col): (usize, usize),
    block: &str,
    mirror: Mirror,
    options: &ReadOptions,
) -> Edited {
    let candidates = super::recognise::candidates(block, &Settings::default());
    let layout = candidates.first().copied().unwrap_or_default();
    let table = reading::raw_table(block, &layout, &options.limits);
    let mut edits = Vec::new();
    for r in 0..table.rows() {
        for (c, cell) in table.row(r).iter().enumerate() {
            edits.push(CellEdit {
                row: row + r,
                col: col + c,
                text: cell.text(block).to_owned(),
            });
        }
    }
    set_cells(text, entry, &edits, mirror, options)
}

/// Puts a row and a column of zeros in front of index `at`.
pub fn insert(text: &str, entry: &Entry, at: usize, options: &ReadOptions) -> Edited {
    resized(text, entry, options, |full| {
        full.insert(at, options.limits.order)
    })
}

/// Takes row and column `at` out.
pub fn remove(text: &str, entry: &Entry, at: usize, options: &ReadOptions) -> Edited {
    resized(text, entry, options, |full| full.remove(at))
}

/// Writes the matrix in full: every cell in its place, as plain text.
pub fn write_in_full(text: &str, entry: &Entry, options: &ReadOptions) -> Edited {
    resized(text, entry, options, |_| {})
}

fn resized(
    text: &str,
    entry: &Entry,
    options: &ReadOptions,
    change: impl FnOnce(&mut Full),
) -> Edited {
    let none = Parameters::none();
    let settings = entry.settings.unwrap_or_default();
    let scribe = Scribe {
        settings,
        parameters: options.parameters.unwrap_or(&none),
    };
    let mut full = Full::of(text, entry, &scribe);
    change(&mut full);
    full.written(&settings)
}

/// The text with stretches replaced; they do not overlap.
fn replaced(text: &str, mut replacements: Vec<(usize, usize, String)>) -> String {
    // Of several edits of one cell the last one counts.
    replacements.reverse();
    replacements.sort_by_key(|replacement| replacement.0);
    replacements.dedup_by_key(|replacement| replacement.0);
    let mut out = String::with_capacity(text.len() + 16);
    let mut done = 0;
    for (start, end, new) in replacements {
        out.push_str(text.get(done..start).unwrap_or(""));
        out.push_str(&new);
        done = end;
    }
    out.push_str(text.get(done..).unwrap_or(""));
    out
}

/// Knows how cells are written in this text.
struct Scribe<'a> {
    settings: Settings,
    parameters: &'a Parameters,
}

impl Scribe<'_> {
    fn conjugate(&self, text: &str) -> String {
        conjugate::text(
            text,
            self.parameters,
            self.settings.decimal.unwrap_or_default(),
        )
    }

    /// The cell's text for this layout; `None` where the layout cannot hold it.
    fn cell(&self, text: &str) -> Option<String> {
        let text = text.trim();
        let text = if text.is_empty() { "0" } else { text };
        let comma = self.settings.decimal == Some(DecimalMark::Comma);
        let marked = if comma && !text.contains(',') {
            text.replace('.', ",")
        } else {
            text.to_owned()
        };
        let layout = self.settings.layout?;
        match layout {
            Layout::MatrixMarket => None,
            Layout::Html => Some(marked.replace('&', "&amp;").replace('<', "&lt;")),
            Layout::Markdown => Some(marked.replace('|', "\\|")),
            Layout::Latex if marked.contains(['&', '\\', '%', '*', '√']) => None,
            // One cell may stand among others whose row has no commas.
            Layout::Brackets => {
                Some(write::without_gaps(&marked)).filter(|cell| !cell.contains([',', ' ']))
            }
            _ => Some(write::cell(&marked, layout)),
        }
    }

    /// The stretches to replace; `None` when some edit cannot be made in place.
    fn in_place(
        &self,
        entry: &Entry,
        edits: &[CellEdit],
        mirror: Mirror,
    ) -> Option<Vec<(usize, usize, String)>> {
        let mut list = Vec::new();
        for edit in edits {
            let here = entry.cell(edit.row, edit.col)?;
            let span = |cell: &super::Cell| (cell.span.start as usize, cell.span.end as usize);
            let conjugate = || self.cell(&self.conjugate(&edit.text));
            let (start, end) = span(here);
            match here.origin {
                Origin::Given => list.push((start, end, self.cell(&edit.text)?)),
                Origin::Mirrored => list.push((start, end, conjugate()?)),
                Origin::Implied => return None,
            }
            if mirror == Mirror::Conjugate && edit.row != edit.col {
                let there = entry.cell(edit.col, edit.row)?;
                match (here.origin, there.origin) {
                    (Origin::Given, Origin::Given) => {
                        let (start, end) = span(there);
                        list.push((start, end, conjugate()?));
                    }
                    (_, Origin::Implied) => return None,
                    // The one text stands for both.
                    _ => {}
                }
            }
        }
        Some(list)
    }
}

/// The text of a zero matrix, to begin with.
pub fn zeros(order: usize) -> String {
    let row = vec!["0".to_owned(); order];
    write::rows(&vec![row; order], Layout::Spaces)
}

#[cfg(test)]
mod tests {
    use super::super::{read, Input};
    use super::*;

    fn edited(text: &str, edits: &[(usize, usize, &str)], mirror: Mirror) -> String {
        let options = ReadOptions::default();
        let entry = read(Input::Text(text), &options);
        let edits: Vec<CellEdit> = edits
            .iter()
            .map(|&(row, col, text)| CellEdit {
                row,
                col,
                text: text.to_owned(),
            })
            .collect();
        set_cells(text, &entry, &edits, mirror, &options).text
    }

    #[test]
    fn an_edit_changes_the_cell_and_its_mirror_and_nothing_else() {
        for (text, edit, wanted) in [
            ("# k\n1  2\n2  3\n", (0, 0, "9"), "# k\n9  2\n2  3\n"),
            ("1  2\n2  3\n", (0, 1, "5+i"), "1  5+i\n5-i  3\n"),
            ("1  2\n2  3\n", (0, 1, "5 + i"), "1  5+i\n5-i  3\n"),
            ("1,5;2,5\n2,5;3\n", (0, 1, "7.25"), "1,5;7,25\n7,25;3\n"),
            (
                "\"a\",\"b\"\n1, 2\n2, 3",
                (1, 0, "1/3"),
                "\"a\",\"b\"\n1, 1/3\n1/3, 3",
            ),
            (
                "[[1, 2],\n [2, 3]]",
                (0, 1, "1/3"),
                "[[1, \"1/3\"],\n [\"1/3\", 3]]",
            ),
            ("1\n2 3\n", (0, 1, "2-i"), "1\n2+i 3\n"),
            ("1 2\n2 3\n", (1, 1, " "), "1 2\n2 0\n"),
            (
                "<tr><td>1<td>2<tr><td>2<td>3",
                (0, 1, "4"),
                "<tr><td>1<td>4<tr><td>4<td>3",
            ),
            ("| 1 | 2 |\n| 2 | 3 |", (0, 1, "4"), "| 1 | 4 |\n| 4 | 3 |"),
            (
                r"\begin{matrix} 1 & \frac12 \\ \frac12 & 3 \end{matrix}",
                (0, 1, "1/3"),
                r"\begin{matrix} 1 & 1/3 \\ 1/3 & 3 \end{matrix}",
            ),
        ] {
            assert_eq!(edited(text, &[edit], Mirror::Conjugate), wanted, "{text:?}");
        }
        assert_eq!(edited("1 2\n2 3", &[(0, 1, "5")], Mirror::Off), "1 5\n2 3");
    }

    #[test]
    fn what_the_layout_cannot_hold_is_written_in_full() {
        for (text, edit, wanted) in [
            (
                "1 2 3\n4+i 5",
                (2, 0, "7"),
                "1  4-i  7\n4+i  2  5\n7  5  3\n",
            ),
            (
                "%%MatrixMarket matrix coordinate real symmetric\n2 2 1\n1 1 5\n",
                (1, 0, "1/3"),
                "5  1/3\n1/3  0\n",
            ),
            ("1 2\n2 3", (2, 2, "4"), "1  2  0\n2  3  0\n0  0  4\n"),
        ] {
            assert_eq!(edited(text, &[edit], Mirror::Conjugate), wanted, "{text:?}");
        }
    }

    #[test]
    fn blocks_rows_and_columns() {
        let options = ReadOptions::default();
        let text = "\ta\tb\na\t1\t2\nb\t2\t3\n";
        let entry = read(Input::Text(text), &options);
        assert_eq!(
            insert(text, &entry, 1, &options).text,
            "\ta\tnew\tb\na\t1\t0\t2\nnew\t0\t0\t0\nb\t2\t0\t3\n"
        );
        assert_eq!(remove(text, &entry, 0, &options).text, "\tb\nb\t3\n");
        assert_eq!(
            paste(text, &entry, (0, 0), "7\t8\n8\t9", Mirror::Off, &options).text,
            "\ta\tb\na\t7\t8\nb\t8\t9\n"
        );
    }

    #[test]
    fn a_new_matrix_is_zero() {
        assert_eq!(zeros(2), "0  0\n0  0\n");
    }

    #[test]
    fn writing_in_full_keeps_every_value() {
        let options = ReadOptions::default();
        for text in [
            "1\n2+i 3",
            "1 2 3\n4+i 5",
            "1,5\n2,5+i\t3,25",
            r"\begin{matrix} 1 & \frac12 \\ \frac12 & \pi \end{matrix}",
        ] {
            let entry = read(Input::Text(text), &options);
            let full = write_in_full(text, &entry, &options);
            let again = read(
                Input::Text(&full.text),
                &ReadOptions {
                    settings: full.settings,
                    ..ReadOptions::default()
                },
            );
            assert!(
                entry.is_usable() && again.is_usable(),
                "{text:?} became {full:?}"
            );
            for (a, b) in entry.cells.iter().zip(&again.cells) {
                let values = a.value.as_ref().zip(b.value.as_ref());
                let same = values.is_some_and(|(a, b)| {
                    a.re.equals(&b.re) == Some(true) && a.im.equals(&b.im) == Some(true)
                });
                assert!(same, "{text:?} became {full:?}");
            }
        }
    }
}
