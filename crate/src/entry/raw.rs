//! What every layout reader produces: rows of cells that are still text.

use super::span::Bytes;

/// One cell before its number is read.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub(crate) struct RawCell {
    /// Where it stands in the source.
    pub span: Bytes,
    /// The text to read, where it is not simply the source at `span` (quotes
    /// undone, entities decoded, markup rewritten).
    pub text: Option<Box<str>>,
}

impl RawCell {
    pub fn plain(start: usize, end: usize) -> Self {
        Self {
            span: Bytes::new(start, end),
            text: None,
        }
    }

    pub fn rewritten(start: usize, end: usize, text: String) -> Self {
        Self {
            span: Bytes::new(start, end),
            text: Some(text.into_boxed_str()),
        }
    }

    /// The text to read.
    pub fn text<'a>(&'a self, source: &'a str) -> &'a str {
        match &self.text {
            Some(text) => text,
            None => self.span.of(source),
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
