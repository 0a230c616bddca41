//! Text and files to exact numbers, with diagnostics that carry a position.
//!
//! One verb: [`read`]. It never panics and always gives back what it could
//! understand, with what it could not. Rows and columns are counted from 1 in
//! what is said to people, and from 0 in the data.

pub mod cell;
mod cell_error;
mod cells;
mod clean;
pub mod complex;
mod decimal;
mod delimited;
pub mod diagnostic;
mod expression;
mod expression_lexer;
mod json;
mod labels;
mod misfit;
mod number;
pub mod parameters;
mod plain;
pub mod question;
mod raw;
mod reading;
mod recognise;
pub mod repair;
pub mod settings;
mod shape;
pub mod span;
mod value;
mod write;

pub use diagnostic::{Diagnostic, Kind, Severity};
pub use question::Question;
pub use repair::Repair;
pub use settings::{DecimalMark, Labels, Layout, Limits, Settings, Shape, SignedWords, Wanted};
pub use span::Span;
pub use value::Value;

use diagnostic::{Finding, Findings};
use reading::Reading;
use span::Offsets;

/// What arrived.
#[derive(Clone, Copy, Debug)]
pub enum Input<'a> {
    /// Text, typed or pasted.
    Text(&'a str),
    /// A file's bytes and its name.
    File {
        /// The content.
        bytes: &'a [u8],
        /// The name, for the sentences.
        name: &'a str,
    },
}

/// How to read.
pub struct ReadOptions<'a> {
    /// What is wanted of the text.
    pub wanted: Wanted,
    /// Choices already made.
    pub settings: Settings,
    /// Tells the names that stand for parameters.
    pub is_name: &'a dyn Fn(&str) -> bool,
    /// Where reading stops.
    pub limits: Limits,
}

impl Default for ReadOptions<'_> {
    fn default() -> Self {
        Self {
            wanted: Wanted::Square,
            settings: Settings::default(),
            is_name: &|_| false,
            limits: Limits::default(),
        }
    }
}

/// How a cell came to its value.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    /// It stands in the text.
    Given,
    /// The conjugate of the cell across the diagonal, whose span it bears.
    Mirrored,
    /// Zero by the layout or shape; its span is empty.
    Implied,
}

/// One cell of the matrix.
#[derive(Clone, Debug)]
pub struct Cell {
    /// Its exact value; `None` when it could not be read.
    pub value: Option<Value>,
    /// Where it stands in the text.
    pub span: Span,
    /// How it came to its value.
    pub origin: Origin,
}

/// What was understood of a text.
#[derive(Clone, Debug)]
pub struct Entry {
    /// How it was read; `None` when nothing could be.
    pub settings: Option<Settings>,
    /// Rows of the matrix.
    pub rows: usize,
    /// Columns of the matrix.
    pub cols: usize,
    /// The cells, row by row: `rows` × `cols`.
    pub cells: Vec<Cell>,
    /// Labels of the rows; empty when there are none.
    pub row_labels: Vec<String>,
    /// Labels of the columns; empty when there are none.
    pub col_labels: Vec<String>,
    /// What is to be said, errors first.
    pub diagnostics: Vec<Diagnostic>,
    /// What has to be asked.
    pub question: Option<Question>,
}

impl Entry {
    /// The cell in `row` and `col`, from 0.
    pub fn cell(&self, row: usize, col: usize) -> Option<&Cell> {
        if col < self.cols {
            self.cells.get(row * self.cols + col)
        } else {
            None
        }
    }

    /// Whether every cell has a value, nothing is to be asked and no error
    /// stands.
    pub fn is_usable(&self) -> bool {
        !self.cells.is_empty()
            && self
                .diagnostics
                .iter()
                .all(|diagnostic| diagnostic.severity != Severity::Error)
    }

    fn nothing() -> Self {
        Self {
            settings: None,
            rows: 0,
            cols: 0,
            cells: Vec::new(),
            row_labels: Vec::new(),
            col_labels: Vec::new(),
            diagnostics: Vec::new(),
            question: None,
        }
    }
}

/// Reads a text or file.
///
/// Cost: linear in the input, a small constant number of passes.
pub fn read(input: Input, options: &ReadOptions) -> Entry {
    let mut findings = Findings::new(options.limits.diagnostics);
    let text = match input {
        Input::Text(text) => std::borrow::Cow::Borrowed(text),
        Input::File { bytes, .. } => String::from_utf8_lossy(bytes),
    };
    let offsets = Offsets::new(&text);
    let mut entry = read_text(&text, options, &offsets, &mut findings);
    entry.diagnostics = findings.into_diagnostics(&offsets);
    entry
}

fn read_text(
    text: &str,
    options: &ReadOptions,
    offsets: &Offsets,
    findings: &mut Findings,
) -> Entry {
    if text.len() > options.limits.bytes {
        findings.push(Finding::error(
            Kind::TooLarge,
            format!(
                "The text has {} bytes; at most {} are read.",
                text.len(),
                options.limits.bytes
            ),
        ));
        return Entry::nothing();
    }
    if clean::is_blank(text) {
        findings.push(
            Finding::error(Kind::Empty, "There is nothing here yet.").expected("rows of numbers"),
        );
        return Entry::nothing();
    }
    let invisible = clean::invisible_count(text);
    if invisible > 0 {
        findings.push(Finding::note(
            Kind::Ignored,
            format!(
                "{} passed over.",
                diagnostic::count(invisible, "invisible character")
            ),
        ));
    }
    let outcome = reading::choose(text, options, findings);
    let mut entry = Entry::nothing();
    if let Some(reading) = outcome.reading {
        fill(&mut entry, text, &reading, offsets, findings);
    }
    if let Some(question) = &outcome.question {
        if question.preferred.is_none() {
            findings.push(diagnostic::asks(question));
        }
    }
    entry.question = outcome.question;
    entry
}

/// Reads the numbers and lays them out.
fn fill(
    entry: &mut Entry,
    text: &str,
    reading: &Reading,
    offsets: &Offsets,
    findings: &mut Findings,
) {
    let table = &reading.stripped.table;
    let widths = table.widths();
    let (rows, cols) = shape::size(reading.shape, &widths);
    entry.settings = Some(reading.settings);
    entry.rows = rows;
    entry.cols = cols;
    entry.row_labels.clone_from(&reading.stripped.rows);
    entry.col_labels.clone_from(&reading.stripped.cols);
    entry.cells = Vec::with_capacity(rows * cols);
    let mut given = Vec::with_capacity(table.rows());
    let reader = cells::CellReader {
        text,
        settings: &reading.settings,
    };
    for row in 0..table.rows() {
        let values: Vec<Cell> = table
            .row(row)
            .iter()
            .enumerate()
            .map(|(col, cell)| Cell {
                value: reader.read(cell, row, col, findings),
                span: offsets.span(cell.span),
                origin: Origin::Given,
            })
            .collect();
        given.push(values);
    }
    for row in 0..rows {
        for col in 0..cols {
            entry.cells.push(cells::lay(
                shape::source(reading.shape, &widths, row, col),
                &given,
            ));
        }
    }
}

#[cfg(test)]
mod cell_tests;
#[cfg(test)]
mod parameters_tests;
#[cfg(test)]
mod tests;
