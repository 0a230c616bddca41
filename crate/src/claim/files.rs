//! An outside solver's output files as a claim.
//!
//! One file may hold values, vectors as columns, or a row of values with the
//! vectors below it; a file of vectors needs one of values beside it. CSV,
//! .npy, Matrix Market and JSON arrays are read as the entry stage reads them;
//! a JSON object by the usual names of its fields, and our own files by theirs.

use serde_json::Value;

use super::figure::raw;
use crate::entry::{self, Entry, Input, Origin, ReadOptions, Settings, Wanted};

/// A file that was handed over.
#[derive(Clone, Copy, Debug)]
pub struct OutputFile<'a> {
    /// Its name, for the sentences.
    pub name: &'a str,
    /// Its content.
    pub bytes: &'a [u8],
}

/// Largest order whose vectors are taken: beyond it they are not checked.
const LARGEST_WITH_VECTORS: usize = 150;

/// What was found in the files so far.
#[derive(Default)]
struct Found {
    values: Option<Vec<String>>,
    /// Row-major: row i holds component i of every vector.
    vectors: Option<Vec<Vec<String>>>,
}

impl Found {
    fn fits(&self, order: usize) -> bool {
        self.values
            .as_ref()
            .is_none_or(|values| values.len() == order)
            && self
                .vectors
                .as_ref()
                .is_none_or(|rows| is_square(rows, order))
    }
}

/// The claim that the files make about a problem of this order.
///
/// Cost: linear in the size of the files.
///
/// # Errors
/// A sentence saying what is missing or cannot be read.
pub fn claim_of(files: &[OutputFile<'_>], order: usize) -> Result<String, String> {
    let mut found = Found::default();
    for file in files {
        let read = match object(file.bytes) {
            Some(object) => from_object(&object),
            None => from_table(file, order),
        };
        let part = read.map_err(|reason| format!("{}: {reason}", file.name))?;
        let twice = (part.values.is_some() && found.values.is_some())
            || (part.vectors.is_some() && found.vectors.is_some());
        if twice {
            return Err(format!(
                "{} holds what another of the files held already; give one file of values and one \
                 of vectors.",
                file.name
            ));
        }
        found.values = found.values.or(part.values);
        found.vectors = found.vectors.or(part.vectors);
    }
    let Some(values) = found.values else {
        return Err(
            "There are vectors but no values; give the file of values together with them."
                .to_owned(),
        );
    };
    if values.len() != order {
        return Err(format!(
            "{} values are stated, and the order is {order}.",
            values.len()
        ));
    }
    let vectors = found.vectors.filter(|_| order <= LARGEST_WITH_VECTORS);
    if vectors.as_ref().is_some_and(|rows| !is_square(rows, order)) {
        return Err(format!(
            "The vectors do not stand as the columns of {order} rows of {order} figures."
        ));
    }
    let mut text = String::from("output:");
    for row in std::iter::once(&values).chain(vectors.iter().flatten()) {
        text.push('\n');
        text.push_str(&row.join(" "));
    }
    Ok(text)
}

fn is_square(rows: &[Vec<String>], order: usize) -> bool {
    rows.len() == order && rows.iter().all(|row| row.len() == order)
}

fn object(bytes: &[u8]) -> Option<serde_json::Map<String, Value>> {
    let text = std::str::from_utf8(bytes).ok()?;
    let text = text.trim_start_matches('\u{feff}').trim_start();
    if !text.starts_with('{') {
        return None;
    }
    serde_json::from_str(text).ok()
}

/// Names under which programs commonly write values and vectors (common
/// practice, no source).
const VALUES: [&str; 4] = ["values", "eigenvalues", "w", "lambda"];
const VECTORS: [&str; 3] = ["vectors", "eigenvectors", "v"];

fn from_object(object: &serde_json::Map<String, Value>) -> Result<Found, String> {
    let field = |names: &[&str]| names.iter().find_map(|name| object.get(*name));
    let list = |value: &Value| {
        value
            .as_array()?
            .iter()
            .map(number)
            .collect::<Option<Vec<_>>>()
    };
    let values = match field(&VALUES) {
        None => None,
        Some(value) => Some(list(value).ok_or("its values are not a list of numbers.")?),
    };
    let vectors = match field(&VECTORS) {
        None => None,
        Some(value) => {
            let rows = value
                .as_array()
                .and_then(|rows| rows.iter().map(list).collect::<Option<Vec<_>>>());
            Some(rows.ok_or("its vectors are not lists of numbers.")?)
        }
    };
    if values.is_none() && vectors.is_none() {
        return Err("it has no field named values or vectors.".to_owned());
    }
    // Our own files list vector by vector; others hold an array's rows.
    let own = object.get("format").and_then(Value::as_str) == Some("eigenledger eigenpairs");
    Ok(Found {
        values,
        vectors: vectors.map(|rows| if own { transposed(&rows) } else { rows }),
    })
}

/// A number, decimal text, [re, im], or the entry of a list of ours.
fn number(value: &Value) -> Option<String> {
    match value {
        Value::Number(number) => Some(number.to_string()),
        Value::String(text) => raw(text).map(|_| text.split_whitespace().collect()),
        Value::Array(parts) => match parts.as_slice() {
            [re, im] => Some(complex(&number(re)?, &number(im)?)),
            _ => None,
        },
        Value::Object(entry) => number(entry.get("approximate")?),
        _ => None,
    }
}

fn complex(re: &str, im: &str) -> String {
    let sign = if im.starts_with(['-', '+']) { "" } else { "+" };
    format!("{re}{sign}{im}i")
}

fn transposed(rows: &[Vec<String>]) -> Vec<Vec<String>> {
    let width = rows.iter().map(Vec::len).min().unwrap_or(0);
    (0..width)
        .map(|col| rows.iter().map(|row| row[col].clone()).collect())
        .collect()
}

/// A table; of several ways to read it the one that fits the order, if it is
/// the only one.
fn from_table(file: &OutputFile<'_>, order: usize) -> Result<Found, String> {
    let entry = read_with(file, Settings::default());
    let Some(question) = &entry.question else {
        return of_entry(&entry);
    };
    let mut fitting: Vec<Found> = question
        .choices
        .iter()
        .filter_map(|choice| of_entry(&read_with(file, choice.settings)).ok())
        .filter(|found| found.fits(order))
        .collect();
    match (fitting.pop(), fitting.is_empty()) {
        (Some(found), true) => Ok(found),
        _ => Err(
            "it can be read in more ways than one; put decimal points in it, and blanks \
                  between its figures."
                .to_owned(),
        ),
    }
}

fn read_with(file: &OutputFile<'_>, settings: Settings) -> Entry {
    let options = ReadOptions {
        wanted: Wanted::Any,
        settings,
        ..ReadOptions::default()
    };
    let input = Input::File {
        bytes: file.bytes,
        name: file.name,
    };
    entry::read(input, &options)
}

fn of_entry(entry: &Entry) -> Result<Found, String> {
    if !entry.is_usable() {
        let first = entry.diagnostics.first();
        return Err(
            first.map_or("nothing in it can be read.".to_owned(), |said| {
                said.sentence.clone()
            }),
        );
    }
    let rows = rows_of(entry).ok_or("not every cell of it is a number.")?;
    shaped(by_header(entry, rows))
}

fn rows_of(entry: &Entry) -> Option<Vec<Vec<String>>> {
    let text = entry.text.as_deref().unwrap_or_default();
    let cell = |row: usize, col: usize| {
        let cell = entry.cell(row, col)?;
        let value = cell.value.as_ref()?;
        let written = text.get(cell.span.start as usize..cell.span.end as usize);
        let plain =
            written.filter(|written| cell.origin == Origin::Given && raw(written).is_some());
        let shown = plain.map_or_else(|| value.to_string(), str::to_owned);
        Some(shown.split_whitespace().collect())
    };
    (0..entry.rows)
        .map(|row| (0..entry.cols).map(|col| cell(row, col)).collect())
        .collect()
}

/// Of a table with a header only the columns that hold values or vectors.
fn by_header(entry: &Entry, rows: Vec<Vec<String>>) -> Vec<Vec<String>> {
    let labels: Vec<String> = entry
        .col_labels
        .iter()
        .map(|label| label.to_lowercase())
        .collect();
    // A label over the first column stays with it where the rows have no labels.
    let columns = labels.len().min(rows.first().map_or(0, Vec::len));
    let labels = &labels[labels.len() - columns..];
    let values = |label: &String| {
        VALUES.contains(&label.as_str()) || label == "approximate" || label == "value"
    };
    if let Some(at) = labels.iter().position(values) {
        return rows
            .into_iter()
            .map(|mut row| vec![row.swap_remove(at)])
            .collect();
    }
    let numbered = matches!(labels.first().map(String::as_str), Some("row" | "index"));
    let paired = labels.iter().any(|label| label.ends_with("_im"));
    rows.into_iter()
        .map(|row| {
            let row = &row[usize::from(numbered)..];
            if paired {
                row.chunks(2)
                    .map(|pair| complex(&pair[0], pair.get(1).map_or("0", String::as_str)))
                    .collect()
            } else {
                row.to_vec()
            }
        })
        .collect()
}

/// Values, vectors, or a row of values with the vectors below it.
fn shaped(mut rows: Vec<Vec<String>>) -> Result<Found, String> {
    let (height, width) = (rows.len(), rows.first().map_or(0, Vec::len));
    let mut found = Found::default();
    if height == 1 || width == 1 {
        found.values = Some(rows.into_iter().flatten().collect());
    } else if height == width {
        found.vectors = Some(rows);
    } else if height == width + 1 {
        found.values = Some(rows.remove(0));
        found.vectors = Some(rows);
    } else {
        return Err(format!(
            "it holds {height} rows of {width} figures; expected a list of values, n rows of n \
             figures with the vectors as columns, or a row of values above them."
        ));
    }
    Ok(found)
}

#[cfg(test)]
mod tests;
