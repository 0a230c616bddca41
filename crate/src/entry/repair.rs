//! Repairs: what puts a text right in one action.

use super::grid::{self, CellEdit, Mirror};
use super::reading;
use super::settings::{Layout, Limits, Settings};
use super::value;
use super::write;
use super::{read, Input, ReadOptions, Span};
use serde::{Deserialize, Serialize};

/// One repair, ready to be applied to the text that it was offered for.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "camelCase")]
pub struct Repair {
    /// What it does, to stand on a button.
    pub label: String,
    /// What it does, for [`apply`].
    pub action: Action,
    /// How the text was read when the repair was offered.
    pub settings: Settings,
}

/// What a repair does. Rows and columns are those of the matrix, from 0.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case", tag = "do")]
#[non_exhaustive]
pub enum Action {
    /// Writes `text` in place of the bytes `start..end`.
    Replace {
        /// First byte.
        start: u32,
        /// One past the last byte.
        end: u32,
        /// The new text.
        text: String,
    },
    /// Writes a point for the decimal comma in every cell.
    PointsForCommas,
    /// Writes a comma for the decimal point in every cell.
    CommasForPoints,
    /// Takes the thousands separators out of every cell where they are certain.
    StripThousands,
    /// Writes 0 into every blank cell.
    FillBlanks,
    /// Leaves a row out.
    DropRow {
        /// Which.
        row: usize,
    },
    /// Leaves a column out.
    DropColumn {
        /// Which.
        col: usize,
    },
    /// Writes rows as columns.
    Transpose,
    /// Writes the conjugates of the cells below the diagonal above it.
    MirrorLower,
    /// Writes the conjugates of the cells above the diagonal below it.
    MirrorUpper,
}

impl Repair {
    pub(crate) fn new(label: impl Into<String>, action: Action, settings: Settings) -> Self {
        Self {
            label: label.into(),
            action,
            settings,
        }
    }
}

/// The text with the repair done. A repair offered for another text leaves the
/// text as it is where it does not fit.
pub fn apply(text: &str, repair: &Repair) -> String {
    let labels = repair.settings.labels.unwrap_or_default();
    match &repair.action {
        Action::Replace {
            start,
            end,
            text: new,
        } => {
            let (start, end) = (*start as usize, *end as usize);
            match (text.get(..start), text.get(end..)) {
                (Some(before), Some(after)) if start <= end => [before, new, after].concat(),
                _ => text.to_owned(),
            }
        }
        Action::PointsForCommas => each_cell(text, &repair.settings, |cell| {
            cell.contains(',').then(|| cell.replace(',', "."))
        }),
        Action::CommasForPoints => each_cell(text, &repair.settings, |cell| {
            cell.contains('.').then(|| cell.replace('.', ","))
        }),
        Action::StripThousands => each_cell(text, &repair.settings, value::without_groups),
        Action::FillBlanks => rewrite(text, &repair.settings, |rows| {
            for cell in rows
                .iter_mut()
                .flatten()
                .filter(|cell| super::clean::is_blank(cell))
            {
                "0".clone_into(cell);
            }
        }),
        Action::DropRow { row } => rewrite(text, &repair.settings, |rows| {
            let row = row + usize::from(labels.first_row());
            if row < rows.len() {
                rows.remove(row);
            }
        }),
        Action::DropColumn { col } => rewrite(text, &repair.settings, |rows| {
            let col = col + usize::from(labels.first_col());
            for cells in rows.iter_mut().filter(|cells| col < cells.len()) {
                cells.remove(col);
            }
        }),
        Action::Transpose => rewrite(text, &repair.settings, |rows| {
            let widest = rows.iter().map(Vec::len).max().unwrap_or(0);
            *rows = (0..widest)
                .map(|col| {
                    rows.iter()
                        .filter_map(|row| row.get(col).cloned())
                        .collect()
                })
                .collect();
        }),
        Action::MirrorLower => mirror(text, &repair.settings, |row, col| row > col),
        Action::MirrorUpper => mirror(text, &repair.settings, |row, col| row < col),
    }
}

/// Writes the conjugates of the cells for which `keep(row, col)` holds across
/// the diagonal.
fn mirror(text: &str, settings: &Settings, keep: impl Fn(usize, usize) -> bool) -> String {
    let options = ReadOptions {
        settings: *settings,
        ..ReadOptions::default()
    };
    let entry = read(Input::Text(text), &options);
    let written = |span: Span| {
        text.get(span.start as usize..span.end as usize)
            .unwrap_or("0")
            .to_owned()
    };
    let edits: Vec<CellEdit> = (0..entry.rows)
        .flat_map(|row| (0..entry.cols).map(move |col| (row, col)))
        .filter(|&(row, col)| keep(row, col))
        .filter_map(|(row, col)| {
            let cell = entry.cell(row, col)?;
            Some(CellEdit {
                row,
                col,
                text: written(cell.span),
            })
        })
        .collect();
    grid::set_cells(text, &entry, &edits, Mirror::Conjugate, &options).text
}

/// Rewrites the cells for which `change` gives a new text, in place.
fn each_cell(text: &str, settings: &Settings, change: impl Fn(&str) -> Option<String>) -> String {
    let table = reading::raw_table(text, settings, &Limits::default());
    let mut out = String::with_capacity(text.len());
    let mut done = 0;
    for cell in table.iter() {
        let (start, end) = (cell.span.start as usize, cell.span.end as usize);
        if let Some(new) = change(cell.text(text)) {
            out.push_str(&text[done..start]);
            out.push_str(&new);
            done = end;
        }
    }
    out.push_str(&text[done..]);
    out
}

/// Rewrites the whole table, in its own layout where that can be written.
fn rewrite(text: &str, settings: &Settings, change: impl FnOnce(&mut Vec<Vec<String>>)) -> String {
    let table = reading::raw_table(text, settings, &Limits::default());
    let mut rows: Vec<Vec<String>> = (0..table.rows())
        .map(|row| {
            table
                .row(row)
                .iter()
                .map(|cell| cell.text(text).to_owned())
                .collect()
        })
        .collect();
    change(&mut rows);
    write::rows(&rows, settings.layout.unwrap_or(Layout::Spaces))
}
