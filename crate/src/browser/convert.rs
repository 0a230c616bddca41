//! From what the entry stage understood to what the page is told.

use super::reading::{Answer, Cell, Diagnostic, Question, Repair, Severity, TextReading};
use crate::entry::{self, Entry, Settings};

/// Largest order whose cells are handed to the grid one by one.
const LARGEST_GRID: usize = 40;

/// What the page is told of one text, apart from what needs the problem.
pub(super) fn text_reading(text: &str, entry: &Entry, settings: &Settings) -> TextReading {
    TextReading {
        layout: layout_in_words(entry),
        rows: entry.rows as u32,
        cols: entry.cols as u32,
        complex: is_complex(entry),
        diagnostics: entry.diagnostics.iter().map(diagnostic).collect(),
        question: entry
            .question
            .as_ref()
            .map(|asked| question(asked, settings)),
        answered: *settings != Settings::default(),
        disagreements: None,
        row_labels: entry.row_labels.clone(),
        col_labels: entry.col_labels.clone(),
        tolerances: Vec::new(),
        cells: cells(text, entry),
        map: None,
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
        text: text
            .get(cell.span.start as usize..cell.span.end as usize)
            .unwrap_or_default()
            .trim()
            .to_owned(),
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
