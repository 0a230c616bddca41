//! Comma-separated files (RFC 4180), with a header row.

use super::Data;
use crate::report::decimal::round_trip;

/// `index,approximate,residual_bound` and, with a proof,
/// `lower,upper,first,last`.
pub(super) fn values(data: &Data<'_>) -> String {
    let proven = !data.enclosures.is_empty();
    let mut text = String::from("index,approximate,residual_bound");
    text.push_str(if proven {
        ",lower,upper,first,last\r\n"
    } else {
        "\r\n"
    });
    for (place, value) in data.approximation.values.iter().enumerate() {
        let number = (place + 1).to_string();
        let approximate = round_trip(*value, data.approximation.scale);
        let bound = data.residual_bounds.get(place).map_or("", String::as_str);
        let mut cells = vec![number.as_str(), approximate.as_str(), bound];
        let (first, last);
        if let Some(ends) = data.enclosures.get(place) {
            (first, last) = (ends.first.to_string(), ends.last.to_string());
            cells.extend([
                ends.lower.as_str(),
                ends.upper.as_str(),
                first.as_str(),
                last.as_str(),
            ]);
        }
        row(&mut text, &cells);
    }
    text
}

/// A column a vector (two for complex ones), a row a component.
pub(super) fn vectors(data: &Data<'_>) -> String {
    let vectors = &data.approximation.vectors;
    let mut text = String::new();
    let mut header = vec!["row".to_owned()];
    for k in 1..=vectors.cols() {
        if vectors.is_complex() {
            header.push(format!("v{k}_re"));
            header.push(format!("v{k}_im"));
        } else {
            header.push(format!("v{k}"));
        }
    }
    row(&mut text, &header);
    for i in 0..vectors.rows() {
        let mut cells = vec![label(data.labels, i)];
        for k in 0..vectors.cols() {
            cells.push(round_trip(vectors.re[(i, k)], 0));
            if let Some(im) = &vectors.im {
                cells.push(round_trip(im[(i, k)], 0));
            }
        }
        row(&mut text, &cells);
    }
    text
}

/// `row,diagonal,off_diagonal`; the last row has no off-diagonal.
pub(super) fn tridiagonal(data: &Data<'_>) -> String {
    let mut text = String::from("row,diagonal,off_diagonal\r\n");
    if let Some((diagonal, off)) = data.tridiagonal {
        for (k, alpha) in diagonal.iter().enumerate() {
            let beta = off.get(k).map_or(String::new(), |beta| {
                round_trip(*beta, data.tridiagonal_scale)
            });
            row(
                &mut text,
                &[
                    (k + 1).to_string(),
                    round_trip(*alpha, data.tridiagonal_scale),
                    beta,
                ],
            );
        }
    }
    text
}

fn label(labels: &[String], row: usize) -> String {
    labels
        .get(row)
        .cloned()
        .unwrap_or_else(|| (row + 1).to_string())
}

fn row<T: AsRef<str>>(text: &mut String, cells: &[T]) {
    for (place, cell) in cells.iter().enumerate() {
        if place > 0 {
            text.push(',');
        }
        let cell = cell.as_ref();
        if cell.contains(['"', ',', '\r', '\n']) {
            text.push('"');
            text.push_str(&cell.replace('"', "\"\""));
            text.push('"');
        } else {
            text.push_str(cell);
        }
    }
    text.push_str("\r\n");
}
