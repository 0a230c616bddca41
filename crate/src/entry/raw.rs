//! What every layout reader produces: rows of cells that are still text.

use super::span::Bytes;
use super::Origin;

/// The text of a raw cell.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub(crate) enum RawText {
    /// The source at the cell's span.
    #[default]
    Source,
    /// The source with quotes undone, entities decoded or markup rewritten.
    Rewritten(Box<str>),
    /// Zero, because the layout gives only what is not zero.
    ImpliedZero,
}

/// One cell before its number is read.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub(crate) struct RawCell {
    /// Where it stands in the source.
    pub span: Bytes,
    /// What is to be read.
    pub raw: RawText,
}

impl RawCell {
    pub fn plain(start: usize, end: usize) -> Self {
        Self {
            span: Bytes::new(start, end),
            raw: RawText::Source,
        }
    }

    pub fn rewritten(start: usize, end: usize, text: String) -> Self {
        Self {
            span: Bytes::new(start, end),
            raw: RawText::Rewritten(text.into_boxed_str()),
        }
    }

    pub fn implied_zero() -> Self {
        Self {
            span: Bytes::default(),
            raw: RawText::ImpliedZero,
        }
    }

    /// How the cell comes to its value.
    pub fn origin(&self) -> Origin {
        match self.raw {
            RawText::ImpliedZero => Origin::Implied,
            _ => Origin::Given,
        }
    }

    /// The text to read.
    pub fn text<'a>(&'a self, source: &'a str) -> &'a str {
        match &self.raw {
            RawText::Source => self.span.of(source),
            RawText::Rewritten(text) => text,
            RawText::ImpliedZero => "0",
        }
    }
}

/// Rows of raw cells, stored flat. Past the limits cells are counted, not kept,
/// so that a paste of a million rows costs one pass and little memory.
#[derive(Clone, Debug)]
pub(crate) struct RawTable {
    cells: Vec<RawCell>,
    row_ends: Vec<u32>,
    row_limit: usize,
    cell_limit: usize,
    /// Rows seen, kept or not.
    pub rows_seen: usize,
    /// Cells in the widest row seen, kept or not.
    pub widest_seen: usize,
    /// Whether the layout marks the first row as a header.
    pub marked_head: bool,
    /// Whether the layout says that the rows are the lower triangle of a
    /// Hermitian matrix.
    pub marked_lower: bool,
    in_row: usize,
}

impl RawTable {
    /// A table for matrices up to `order`, with room for a header row and
    /// column and a little more, so that slightly too big is still described.
    pub fn new(order: usize) -> Self {
        Self {
            cells: Vec::new(),
            row_ends: Vec::new(),
            row_limit: order + 2,
            cell_limit: (order + 2) * (order + 3),
            rows_seen: 0,
            widest_seen: 0,
            marked_head: false,
            marked_lower: false,
            in_row: 0,
        }
    }

    pub fn push(&mut self, cell: RawCell) {
        self.in_row += 1;
        if self.rows_seen < self.row_limit && self.cells.len() < self.cell_limit {
            self.cells.push(cell);
        }
    }

    /// Ends the row; a row without cells is not a row.
    pub fn end_row(&mut self) {
        if self.in_row == 0 {
            return;
        }
        self.widest_seen = self.widest_seen.max(self.in_row);
        self.in_row = 0;
        if self.rows_seen < self.row_limit {
            self.row_ends.push(self.cells.len() as u32);
        }
        self.rows_seen += 1;
    }

    /// Whether cells were left out because there were too many.
    pub fn overflowed(&self) -> bool {
        self.rows_seen > self.row_ends.len() || self.cells.len() >= self.cell_limit
    }

    /// Rows kept.
    pub fn rows(&self) -> usize {
        self.row_ends.len()
    }

    pub fn row(&self, row: usize) -> &[RawCell] {
        let start = if row == 0 {
            0
        } else {
            self.row_ends[row - 1] as usize
        };
        &self.cells[start..self.row_ends[row] as usize]
    }

    /// The cells as `source` has them, row by row.
    #[cfg(test)]
    pub fn texts(&self, source: &str) -> Vec<Vec<String>> {
        let text = |cell: &RawCell| cell.text(source).to_owned();
        (0..self.rows())
            .map(|row| self.row(row).iter().map(text).collect())
            .collect()
    }

    /// Number of cells in each row kept.
    pub fn widths(&self) -> Vec<usize> {
        (0..self.rows()).map(|row| self.row(row).len()).collect()
    }

    pub fn iter(&self) -> impl Iterator<Item = &RawCell> {
        self.cells.iter()
    }

    pub fn is_empty(&self) -> bool {
        self.cells.is_empty()
    }

    /// All cells in one row.
    pub fn in_one_row(mut self) -> Self {
        let cells = self.cells.len();
        self.row_ends = if cells > 0 {
            vec![cells as u32]
        } else {
            Vec::new()
        };
        self.rows_seen = self.row_ends.len();
        self.widest_seen = cells;
        self
    }

    /// The table with only the cells for which `keep(row, col)` holds.
    pub fn filtered(&self, keep: impl Fn(usize, usize) -> bool) -> Self {
        let mut kept = Self {
            cells: Vec::new(),
            row_ends: Vec::new(),
            rows_seen: 0,
            widest_seen: 0,
            in_row: 0,
            ..*self
        };
        for row in 0..self.rows() {
            for (col, cell) in self.row(row).iter().enumerate() {
                if keep(row, col) {
                    kept.push(cell.clone());
                }
            }
            kept.end_row();
        }
        kept
    }
}
