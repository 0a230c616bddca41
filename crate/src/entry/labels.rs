//! Header rows and first columns of words, and blank margins.

use super::cell::Parameters;
use super::clean;
use super::raw::{RawCell, RawTable};
use super::settings::Labels;

/// The table without rows that are blank throughout and without blank columns
/// at either side, as spreadsheets copy them.
pub(crate) fn without_blank_margins(table: RawTable, source: &str) -> RawTable {
    let blank = |cell: &RawCell| clean::is_blank(cell.text(source));
    if !table.iter().any(blank) {
        return table;
    }
    let mut first = usize::MAX;
    let mut last = 0;
    let mut row_is_blank = Vec::with_capacity(table.rows());
    for row in 0..table.rows() {
        let cells = table.row(row);
        row_is_blank.push(cells.iter().all(blank));
        if let Some(start) = cells.iter().position(|cell| !blank(cell)) {
            first = first.min(start);
        }
        if let Some(end) = cells.iter().rposition(|cell| !blank(cell)) {
            last = last.max(end);
        }
    }
    table.filtered(|row, col| !row_is_blank[row] && col >= first && col <= last)
}

/// The table without the blank cells that a triangle leaves beside it.
pub(crate) fn without_blank_triangle(table: RawTable, source: &str) -> RawTable {
    let blank = |row: usize, col: usize| clean::is_blank(table.row(row)[col].text(source));
    let order = table.rows();
    let square = order > 1 && table.widths().iter().all(|&width| width == order);
    if !square {
        return table;
    }
    let matches = |given: fn(usize, usize) -> bool| {
        (0..order).all(|row| (0..order).all(|col| blank(row, col) != given(row, col)))
    };
    if matches(|row, col| col <= row) {
        return table.filtered(|row, col| col <= row);
    }
    if matches(|row, col| col >= row) {
        return table.filtered(|row, col| col >= row);
    }
    table
}

/// Whether the text is a word rather than a number or expression: it starts
/// with a letter, holds no operator, and is not a name that a cell may hold by
/// itself (`i`, `pi`, NaN, …).
fn is_word(text: &str, parameters: Option<&Parameters>) -> bool {
    let normal = clean::normal(text);
    let word = normal.trim();
    let lower = word.to_lowercase();
    word.starts_with(|c: char| c.is_alphabetic() && c != 'π')
        && !word.contains(['+', '*', '^', '±', '·', '×', '÷', '√'])
        && !matches!(
            lower.as_str(),
            "i" | "j" | "pi" | "nan" | "inf" | "infinity"
        )
        && !parameters.is_some_and(|parameters| parameters.has(word))
}

/// What the labels of a table may be, most natural first.
///
/// The names of parameters stand for numbers, and are no labels.
pub(crate) fn possible(
    table: &RawTable,
    source: &str,
    parameters: Option<&Parameters>,
) -> Vec<Labels> {
    let rows = table.rows();
    if rows < 2 {
        return vec![Labels::None];
    }
    let word = |cell: &RawCell| is_word(cell.text(source), parameters);
    let blank = |cell: &RawCell| clean::is_blank(cell.text(source));
    let corner = &table.row(0)[0];
    let short_head = (1..rows).all(|row| table.row(row).len() == table.row(0).len() + 1);
    let head = if short_head {
        table.row(0)
    } else {
        &table.row(0)[1..]
    };
    let side = || (1..rows).filter_map(|row| table.row(row).first());
    let head_words = !head.is_empty()
        && head.iter().all(|cell| word(cell) || blank(cell))
        && head.iter().any(word);
    let side_words = side().all(|cell| word(cell) || blank(cell)) && side().any(word);
    let mut labels = Vec::new();
    if short_head {
        if head_words && side_words {
            labels.push(Labels::Both);
        }
    } else if blank(corner) && rows > 2 && !head.is_empty() && !inner_blank(table, source) {
        // A blank corner is how a spreadsheet leaves room for two headers.
        labels.push(Labels::Both);
    } else if head_words && side_words && (word(corner) || blank(corner)) {
        labels.push(Labels::Both);
    }
    if head_words && !short_head && word(corner) {
        labels.push(Labels::Columns);
    }
    if side_words && (word(corner) || (blank(corner) && !head_words)) {
        labels.push(Labels::Rows);
    }
    if table.marked_head {
        let marked = if side_words {
            Labels::Both
        } else {
            Labels::Columns
        };
        labels.retain(|&other| other != marked && other != Labels::None);
        labels.splice(0..0, [marked, Labels::Columns]);
        labels.dedup();
        labels.push(Labels::None);
        return labels;
    }
    let inner_words = (1..rows).any(|row| table.row(row).iter().skip(1).any(word));
    if labels.is_empty() || inner_words {
        labels.insert(0, Labels::None);
    } else {
        labels.push(Labels::None);
    }
    labels
}

/// Whether cells besides the corner are blank, as in an upper triangle.
fn inner_blank(table: &RawTable, source: &str) -> bool {
    (1..table.rows()).any(|row| {
        table
            .row(row)
            .first()
            .is_some_and(|cell| clean::is_blank(cell.text(source)))
    })
}

/// The texts of labels, and the table without them.
#[derive(Clone)]
pub(crate) struct Stripped {
    pub table: RawTable,
    pub rows: Vec<String>,
    pub cols: Vec<String>,
}

/// Takes the labels off.
pub(crate) fn strip(table: &RawTable, source: &str, labels: Labels) -> Stripped {
    let skip_row = usize::from(labels.first_row() && table.rows() > 0);
    let skip_col = usize::from(labels.first_col());
    let text = |cell: &RawCell| clean::normal(cell.text(source)).trim().to_owned();
    let mut cols = Vec::new();
    if skip_row == 1 {
        let head = table.row(0);
        let widest = (1..table.rows())
            .map(|row| table.row(row).len())
            .max()
            .unwrap_or(0);
        let skip = if head.len() < widest { 0 } else { skip_col };
        cols = head.iter().skip(skip).map(text).collect();
    }
    let rows = if skip_col == 1 {
        (skip_row..table.rows())
            .filter_map(|row| table.row(row).first())
            .map(text)
            .collect()
    } else {
        Vec::new()
    };
    let table = if labels == Labels::None {
        table.clone()
    } else {
        table.filtered(|row, col| row >= skip_row && col >= skip_col)
    };
    Stripped { table, rows, cols }
}
