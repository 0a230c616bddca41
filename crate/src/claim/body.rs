//! Rows of figures after a claim's head.
//!
//! Rows end at line breaks, semicolons, `],` or `\\`; cells are apart by
//! commas, tabs, bars or ampersands where there are any, else by blanks. Other
//! forms (LaTeX, HTML, Matrix Market, …) go through the entry stage. A comma
//! between two digits may be a decimal mark: see [`commas`](super::commas).

use super::commas::{self, Commas, Wanted as Form};
use super::figure::{of_cell, raw, Raw};
use crate::entry::{self, Input, Origin, ReadOptions, Wanted};

/// One cell with the multiplicity written behind it (`3 ×2`).
#[derive(Clone, Debug)]
pub(super) struct Cell {
    pub(super) raw: Raw,
    pub(super) many: usize,
}

/// One row.
#[derive(Clone, Debug)]
pub(super) struct Row {
    pub(super) cells: Vec<Cell>,
}

/// Why there are no rows of figures.
pub(super) enum BodyError {
    /// This may be one figure with a decimal comma or two figures.
    Comma { text: String },
    /// A cell that is not a figure.
    Figure {
        line: usize,
        place: usize,
        text: String,
    },
}

/// Reads the rows of `text`; `first_line` is the line its first one stands on.
/// What is not plain rows is left to the entry stage, which knows every other
/// form a matrix comes in.
pub(super) fn rows(
    text: &str,
    first_line: usize,
    wanted: Form,
    marks: Commas,
) -> Result<Vec<Row>, BodyError> {
    let decimal = match marks {
        Commas::Decimal => true,
        Commas::Separating => false,
        Commas::ByEvidence => {
            commas::are_decimal(text, wanted).map_err(|text| BodyError::Comma { text })?
        }
    };
    if decimal {
        return comma_rows(text, first_line);
    }
    plain_rows(text, first_line).or_else(|error| entry_rows(text).ok_or(error))
}

/// Rows at line breaks, cells apart by semicolons, tabs and blanks; commas are
/// decimal marks.
fn comma_rows(text: &str, first_line: usize) -> Result<Vec<Row>, BodyError> {
    let mut rows = Vec::new();
    for (offset, line) in text.lines().enumerate() {
        let texts: Vec<String> = line.split([';', '\t']).flat_map(words).collect();
        let mut cells = Vec::with_capacity(texts.len());
        for (place, text) in texts.iter().enumerate() {
            let (number, many) = multiplicity(text);
            let Some(raw) = raw(&number.replace(',', ".")) else {
                return Err(BodyError::Figure {
                    line: first_line + offset,
                    place: place + 1,
                    text: text.clone(),
                });
            };
            cells.push(Cell {
                raw: raw.typed_as(number),
                many,
            });
        }
        if !cells.is_empty() {
            rows.push(Row { cells });
        }
    }
    Ok(rows)
}

/// The rows the entry stage reads, each given cell as it is written.
fn entry_rows(text: &str) -> Option<Vec<Row>> {
    let options = ReadOptions {
        wanted: Wanted::Any,
        ..ReadOptions::default()
    };
    let entry = entry::read(Input::Text(text), &options);
    if !entry.is_usable() || entry.question.is_some() {
        return None;
    }
    let mut rows = Vec::with_capacity(entry.rows);
    for row in 0..entry.rows {
        let mut cells = Vec::with_capacity(entry.cols);
        for col in 0..entry.cols {
            let cell = entry.cell(row, col)?;
            let value = cell.value.as_ref()?;
            let written = text.get(cell.span.start as usize..cell.span.end as usize);
            let raw = match (cell.origin, written) {
                (Origin::Given, Some(written)) => {
                    raw(written).unwrap_or_else(|| of_cell(written, value))
                }
                _ => of_cell(&value.to_string(), value),
            };
            cells.push(Cell { raw, many: 1 });
        }
        rows.push(Row { cells });
    }
    Some(rows)
}

fn plain_rows(text: &str, first_line: usize) -> Result<Vec<Row>, BodyError> {
    let text = text.replace("],", "];").replace("\\\\", ";");
    let mut rows = Vec::new();
    for (offset, line) in text.split('\n').enumerate() {
        for row in line.split(';') {
            let bare: String = row
                .chars()
                .filter(|c| !matches!(c, '[' | ']' | '{' | '}' | '\r' | '"'))
                .collect();
            let cells = cells(&bare, first_line + offset)?;
            if !cells.is_empty() {
                rows.push(Row { cells });
            }
        }
    }
    Ok(rows)
}

fn cells(row: &str, line: usize) -> Result<Vec<Cell>, BodyError> {
    const SEPARATORS: [char; 4] = [',', '\t', '|', '&'];
    let row = row.trim();
    if row.is_empty() {
        return Ok(Vec::new());
    }
    let texts: Vec<String> = if row.contains(SEPARATORS) {
        let trimmed = row.trim_matches(|c: char| SEPARATORS.contains(&c) || c.is_whitespace());
        trimmed
            .split(SEPARATORS)
            .map(|cell| cell.trim().to_owned())
            .collect()
    } else {
        words(row)
    };
    let mut cells = Vec::with_capacity(texts.len());
    for (place, text) in texts.iter().enumerate() {
        let (number, many) = multiplicity(text);
        let Some(raw) = raw(number) else {
            return Err(BodyError::Figure {
                line,
                place: place + 1,
                text: text.clone(),
            });
        };
        cells.push(Cell { raw, many });
    }
    Ok(cells)
}

/// Words apart by blanks, with `± t` and `×m` kept to the figure before them.
fn words(row: &str) -> Vec<String> {
    let mut words: Vec<String> = Vec::new();
    let mut join = false;
    for word in row.split_whitespace() {
        let tied = word.starts_with(['±', '×']) || word.starts_with("+/-");
        match words.last_mut() {
            Some(last) if tied || join => {
                last.push(' ');
                last.push_str(word);
            }
            _ => words.push(word.to_owned()),
        }
        join = word == "±" || word == "×" || word == "+/-";
    }
    words
}

/// `3 ×2` as figure and multiplicity.
fn multiplicity(text: &str) -> (&str, usize) {
    let split = text.rsplit_once('×').or_else(|| text.rsplit_once('x'));
    match split.map(|(number, many)| (number.trim(), many.trim().parse::<usize>())) {
        Some((number, Ok(many))) if (1..=100_000).contains(&many) => (number, many),
        _ => (text, 1),
    }
}
