//! Text and files to exact numbers, with diagnostics that carry a position.
//!
//! One verb: [`read`]. It never panics and always gives back what it could
//! understand, with what it could not. Rows and columns are counted from 1 in
//! what is said to people, and from 0 in the data.

mod binary;
mod brackets;
pub mod cell;
mod cell_error;
mod cells;
mod clean;
pub mod complex;
mod conjugate;
mod decimal;
mod delimited;
pub mod diagnostic;
mod entities;
mod expression;
mod expression_lexer;
mod file;
pub mod grid;
mod html;
mod json;
mod labels;
mod latex;
mod latex_cell;
mod markdown;
mod matrix_market;
mod misfit;
mod npy;
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
mod triangle;
mod value;
mod write;

pub use cell::{CellValue, Parameters};
pub use diagnostic::{Diagnostic, Kind, Severity};
pub use question::Question;
pub use repair::Repair;
pub use settings::{DecimalMark, Labels, Layout, Limits, Settings, Shape, SignedWords, Wanted};
pub use span::Span;

use diagnostic::{Finding, Findings, Refused};
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
    /// The names that cells may use, with their values.
    pub parameters: Option<&'a Parameters>,
    /// Where reading stops.
    pub limits: Limits,
}

impl Default for ReadOptions<'_> {
    fn default() -> Self {
        Self {
            wanted: Wanted::Square,
            settings: Settings::default(),
            parameters: None,
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
    pub value: Option<CellValue>,
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
    /// The text of a file, to go on with as if it had been pasted; its offsets
    /// are the ones meant.
    pub text: Option<String>,
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
            text: None,
        }
    }
}

/// Reads a text or file.
///
/// Cost: linear in the input, a small constant number of passes.
pub fn read(input: Input, options: &ReadOptions) -> Entry {
    let mut findings = Findings::new(options.limits.diagnostics);
    match input {
        Input::Text(text) => read_text(text, options, findings),
        Input::File { bytes, name } => {
            let decoded = match check_size(bytes.len(), &options.limits) {
                Ok(()) => file::decode(bytes, name, options.limits.order),
                Err(finding) => Err(finding),
            };
            match decoded {
                Ok(decoded) => {
                    if let Some(remark) = decoded.remark {
                        findings.push(remark);
                    }
                    let mut entry = read_text(&decoded.text, options, findings);
                    entry.text = Some(decoded.text);
                    entry
                }
                Err(finding) => {
                    findings.push(*finding);
                    let mut entry = Entry::nothing();
                    entry.diagnostics = findings.into_diagnostics(&Offsets::new(""));
                    entry
                }
            }
        }
    }
}

fn check_size(bytes: usize, limits: &Limits) -> Result<(), Refused> {
    if bytes <= limits.bytes {
        return Ok(());
    }
    let sentence = format!(
        "There are {} bytes here; at most {} are read.",
        diagnostic::grouped(bytes),
        diagnostic::grouped(limits.bytes)
    );
    Err(Box::new(Finding::error(Kind::TooLarge, sentence)))
}

fn read_text(text: &str, options: &ReadOptions, mut findings: Findings) -> Entry {
    let mut entry = Entry::nothing();
    if let Err(finding) = check_size(text.len(), &options.limits) {
        findings.push(*finding);
        entry.diagnostics = findings.into_diagnostics(&Offsets::new(""));
        return entry;
    }
    let offsets = Offsets::new(text);
    understand(&mut entry, text, options, &offsets, &mut findings);
    entry.diagnostics = findings.into_diagnostics(&offsets);
    entry
}

fn understand(
    entry: &mut Entry,
    text: &str,
    options: &ReadOptions,
    offsets: &Offsets,
    findings: &mut Findings,
) {
    if clean::is_blank(text) {
        findings.push(
            Finding::error(Kind::Empty, "There is nothing here yet.").expected("rows of numbers"),
        );
        return;
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
    if let Some(reading) = outcome.reading {
        let none = Parameters::none();
        let parameters = options.parameters.unwrap_or(&none);
        fill(entry, text, &reading, parameters, offsets, findings);
    }
    if let Some(question) = &outcome.question {
        if question.preferred.is_none() {
            findings.push(diagnostic::asks(question));
        }
    }
    entry.question = outcome.question;
}

/// Reads the numbers and lays them out.
fn fill(
    entry: &mut Entry,
    text: &str,
    reading: &Reading,
    parameters: &Parameters,
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
    let mut given = Vec::with_capacity(table.rows());
    let reader = cells::CellReader {
        text,
        settings: &reading.settings,
        parameters,
    };
    for row in 0..table.rows() {
        let read_cell = |(col, cell): (usize, &raw::RawCell)| Cell {
            value: reader.read(cell, row, col, findings),
            span: offsets.span(cell.span),
            origin: cell.origin(),
        };
        given.push(
            table
                .row(row)
                .iter()
                .enumerate()
                .map(read_cell)
                .collect::<Vec<Cell>>(),
        );
    }
    if reading.shape == Shape::Full && widths.iter().all(|&width| width == cols) {
        entry.cells = given.into_iter().flatten().collect();
    } else {
        entry.cells.reserve(rows * cols);
        for row in 0..rows {
            for col in 0..cols {
                let source = shape::source(reading.shape, &widths, row, col);
                entry.cells.push(cells::lay(source, &given));
            }
        }
    }
    triangle::check(entry, findings);
}

#[cfg(test)]
mod cell_tests;
#[cfg(test)]
mod layout_properties;
#[cfg(test)]
mod parameters_tests;
#[cfg(test)]
mod tests;
