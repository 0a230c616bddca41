//! The matrix as the texts of all its cells, to be changed and written in full.

use super::super::labels;
use super::super::reading;
use super::super::settings::{Layout, Limits, Settings, Shape};
use super::super::shape::{self, Source};
use super::super::write;
use super::super::Entry;
use super::{CellEdit, Edited, Scribe};

/// The matrix as the texts of all its cells.
pub(super) struct Full {
    cells: Vec<Vec<String>>,
    row_labels: Vec<String>,
    col_labels: Vec<String>,
}

impl Full {
    /// Every cell of the entry, as its text or the conjugate's.
    pub fn of(text: &str, entry: &Entry, scribe: &Scribe) -> Self {
        let settings = scribe.settings;
        let table = reading::raw_table(text, &settings, &Limits::default());
        let table = labels::without_blank_margins(table, text);
        let stripped = labels::strip(&table, text, settings.labels.unwrap_or_default());
        let table = labels::without_blank_triangle(stripped.table, text);
        let widths = table.widths();
        let shape = settings.shape.unwrap_or(Shape::Full);
        let at = |row: usize, col: usize| {
            let known = row < table.rows();
            let cell = known.then(|| table.row(row).get(col)).flatten();
            cell.map_or("0", |cell| cell.text(text)).to_owned()
        };
        let cells = (0..entry.rows)
            .map(|row| {
                (0..entry.cols)
                    .map(|col| match shape::source(shape, &widths, row, col) {
                        Source::Given(r, c) => at(r, c),
                        Source::Mirrored(r, c) => scribe.conjugate(&at(r, c)),
                        Source::Zero => "0".to_owned(),
                    })
                    .collect()
            })
            .collect();
        Self {
            cells,
            row_labels: stripped.rows,
            col_labels: stripped.cols,
        }
    }

    /// Makes room for the edits, up to the largest order.
    pub fn grow(&mut self, edits: &[CellEdit], limit: usize) {
        let (rows, cols) = (self.cells.len(), self.cells.first().map_or(0, Vec::len));
        let last = |index: fn(&CellEdit) -> usize| {
            edits.iter().map(|edit| index(edit) + 1).max().unwrap_or(0)
        };
        let (mut wanted_rows, mut wanted_cols) = (
            last(|edit| edit.row).max(rows),
            last(|edit| edit.col).max(cols),
        );
        if rows == cols {
            wanted_rows = wanted_rows.max(wanted_cols);
            wanted_cols = wanted_rows;
        }
        self.cells.resize(wanted_rows.min(limit), Vec::new());
        for row in &mut self.cells {
            row.resize(wanted_cols.min(limit), "0".to_owned());
        }
    }

    /// Sets a cell; one beyond the largest order is left out.
    pub fn set(&mut self, row: usize, col: usize, text: &str) {
        if let Some(cell) = self.cells.get_mut(row).and_then(|cells| cells.get_mut(col)) {
            let text = text.trim();
            (if text.is_empty() { "0" } else { text }).clone_into(cell);
        }
    }

    pub fn insert(&mut self, at: usize, limit: usize) {
        if self.cells.len() >= limit {
            return;
        }
        let at = at.min(self.cells.len());
        for row in &mut self.cells {
            row.insert(at.min(row.len()), "0".to_owned());
        }
        let width = self.cells.first().map_or(1, Vec::len);
        self.cells.insert(at, vec!["0".to_owned(); width]);
        for labels in [&mut self.row_labels, &mut self.col_labels] {
            if at <= labels.len() && !labels.is_empty() {
                labels.insert(at, "new".to_owned());
            }
        }
    }

    pub fn remove(&mut self, at: usize) {
        if at < self.cells.len() {
            self.cells.remove(at);
        }
        for row in self.cells.iter_mut().filter(|row| at < row.len()) {
            row.remove(at);
        }
        for labels in [&mut self.row_labels, &mut self.col_labels] {
            if at < labels.len() {
                labels.remove(at);
            }
        }
    }

    /// As plain text in the layout it had, where that is one; else apart by
    /// spaces, or by tabs where there are labels.
    pub fn written(mut self, settings: &Settings) -> Edited {
        let order = self.cells.len();
        let labelled = !self.row_labels.is_empty() || !self.col_labels.is_empty();
        let layout = match settings.layout {
            Some(kept @ (Layout::Tabs | Layout::Commas | Layout::Semicolons)) => kept,
            Some(Layout::Json) if !labelled => Layout::Json,
            _ if labelled => Layout::Tabs,
            _ => Layout::Spaces,
        };
        let has_cols = !self.col_labels.is_empty();
        let has_rows = !self.row_labels.is_empty();
        if has_rows {
            self.row_labels.resize(order, "new".to_owned());
            for (row, label) in self.cells.iter_mut().zip(self.row_labels) {
                row.insert(0, label);
            }
        }
        if has_cols {
            let width = self.cells.first().map_or(0, Vec::len) - usize::from(has_rows);
            self.col_labels.resize(width, "new".to_owned());
            if has_rows {
                self.col_labels.insert(0, String::new());
            }
            self.cells.insert(0, self.col_labels);
        }
        // Expressions rewritten from other layouts have decimal points.
        let decimal = settings.decimal.filter(|_| settings.layout.is_some());
        Edited {
            text: write::rows(&self.cells, layout),
            settings: Settings {
                layout: Some(layout),
                decimal,
                shape: Some(Shape::Full),
                ..*settings
            },
        }
    }
}
