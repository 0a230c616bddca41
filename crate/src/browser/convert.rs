//! From what the entry stage understood to what the page is told.

use nalgebra::DMatrix;

use super::reading::{
    Answer, Cell, Diagnostic, DisagreeingPair, Question, Repair, Severity, TextReading,
    ToleranceCell,
};
use crate::entry::{self, CellValue, Entry, Kind, Origin, Settings};
use crate::matrix::Dense;
use crate::num::ExactReal;
use crate::problem::Disagreement;
use crate::report::map::{self, MagnitudePicture};

/// Largest order whose cells are handed to the grid one by one.
const LARGEST_GRID: usize = 40;

/// What the page is told of one text, apart from what needs the problem.
pub(super) fn text_reading(text: &str, entry: &Entry, settings: &Settings) -> TextReading {
    TextReading {
        layout: layout_in_words(entry),
        rows: entry.rows as u32,
        cols: entry.cols as u32,
        complex: is_complex(entry),
        diagnostics: entry
            .diagnostics
            .iter()
            // The question itself is asked in its own place.
            .filter(|found| found.kind != Kind::Ambiguous)
            .map(diagnostic)
            .collect(),
        question: entry
            .question
            .as_ref()
            .map(|asked| question(asked, settings)),
        answered: *settings != Settings::default(),
        disagreements: None,
        adjusted: None,
        row_labels: entry.row_labels.clone(),
        col_labels: entry.col_labels.clone(),
        tolerances: tolerances(text, entry),
        cells: cells(text, entry),
        map: picture(entry),
    }
}

fn layout_in_words(entry: &Entry) -> String {
    let Some(settings) = entry.settings else {
        return String::new();
    };
    let layout = settings.layout.map_or("", entry::Layout::name);
    match settings.shape {
        Some(entry::Shape::Full) | None => layout.to_owned(),
        Some(shape) => format!("{layout}, {}", shape.name()),
    }
}

fn is_complex(entry: &Entry) -> bool {
    entry
        .cells
        .iter()
        .filter_map(|cell| cell.value.as_ref())
        .any(|value| !value.im.is_zero())
}

fn tolerances(text: &str, entry: &Entry) -> Vec<ToleranceCell> {
    let written = entry.cells.iter().enumerate().filter(|(_, cell)| {
        cell.origin == Origin::Given
            && cell
                .value
                .as_ref()
                .is_some_and(|value| value.tolerance.is_some())
    });
    written
        .map(|(at, cell)| ToleranceCell {
            row: (at / entry.cols + 1) as u32,
            col: (at % entry.cols + 1) as u32,
            text: cell_text(text, cell),
        })
        .collect()
}

/// The picture of a square of cells; a cell that could not be read is blank.
fn picture(entry: &Entry) -> Option<MagnitudePicture> {
    if entry.rows != entry.cols || entry.rows == 0 {
        return None;
    }
    let part = |row: usize, col: usize, of: fn(&CellValue) -> &ExactReal| {
        let value = entry.cell(row, col).and_then(|cell| cell.value.as_ref());
        value.map_or(0.0, |value| of(value).nearest(0))
    };
    let plane = |of: fn(&CellValue) -> &ExactReal| {
        DMatrix::from_fn(entry.rows, entry.cols, |row, col| part(row, col, of))
    };
    let re = plane(|value| &value.re);
    let dense = if is_complex(entry) {
        Dense::complex(re, plane(|value| &value.im))
    } else {
        Dense::real(re)
    };
    Some(map::picture(&dense, 0))
}

/// One pair of mirrored cells that disagree.
pub(super) fn pair(found: &Disagreement) -> DisagreeingPair {
    DisagreeingPair {
        row: found.row as u32 + 1,
        col: found.col as u32 + 1,
        lower: found.lower.clone(),
        upper: found.upper.clone(),
        difference: found.difference.clone(),
    }
}

fn diagnostic(found: &entry::Diagnostic) -> Diagnostic {
    let span = found.span.unwrap_or_default();
    Diagnostic {
        severity: match found.severity {
            entry::Severity::Note => Severity::Note,
            entry::Severity::Warning => Severity::Warning,
            entry::Severity::Error => Severity::Error,
        },
        row: found.row,
        col: found.col,
        from: span.utf16_start,
        to: span.utf16_end,
        message: found.sentence.clone(),
        expected: found.expected.clone(),
        repairs: found.repairs.iter().filter_map(repair).collect(),
    }
}

fn repair(offered: &entry::Repair) -> Option<Repair> {
    Some(Repair {
        key: serde_json::to_string(offered).ok()?,
        label: offered.label.clone(),
    })
}

fn question(asked: &entry::Question, settings: &Settings) -> Question {
    let answers = asked.choices.iter().enumerate().filter_map(|(at, choice)| {
        Some(Answer {
            key: serde_json::to_string(&choice.settings).ok()?,
            label: choice.label.clone(),
            shape: choice.preview.shape.clone(),
            corner: choice.preview.corner.clone(),
            chosen: choice.settings == *settings || asked.preferred == Some(at),
        })
    });
    Question {
        text: asked.sentence.clone(),
        answers: answers.collect(),
    }
}

fn cells(text: &str, entry: &Entry) -> Option<Vec<Vec<Cell>>> {
    if entry.cols == 0 || entry.rows > LARGEST_GRID || entry.cols > LARGEST_GRID {
        return None;
    }
    let cell = |cell: &entry::Cell| Cell {
        text: cell_text(text, cell),
        from: cell.span.utf16_start,
        to: cell.span.utf16_end,
    };
    Some(
        entry
            .cells
            .chunks(entry.cols)
            .map(|row| row.iter().map(cell).collect())
            .collect(),
    )
}

/// The text of a cell; empty for one that the layout implies.
fn cell_text(text: &str, cell: &entry::Cell) -> String {
    let (start, end) = (cell.span.start as usize, cell.span.end as usize);
    text.get(start..end).unwrap_or_default().trim().to_owned()
}
