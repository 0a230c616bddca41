//! Data files: CSV, JSON and Matrix Market.
//!
//! Doubles are written with the digits that read back to the same double.
//! They are approximations and named so; what is proven stands beside them as
//! decimal text rounded outward.

mod csv;
mod json;
mod matrix_market;

use serde::{Deserialize, Serialize};

use crate::pairs::Approximation;
use crate::prove;
use crate::report::run::Run;
use crate::report::values;

/// What an export draws on.
#[derive(Clone, Copy, Debug)]
pub struct Data<'a> {
    /// Title of the problem; may be empty.
    pub title: &'a str,
    /// Row labels; empty, or one a row.
    pub labels: &'a [String],
    /// Values and vectors.
    pub approximation: &'a Approximation,
    /// Bounds on the residual norms, in the order of the values.
    pub residual_bounds: &'a [String],
    /// Diagonal and off-diagonals of the tridiagonal form, scaled.
    pub tridiagonal: Option<(&'a [f64], &'a [f64])>,
    /// Power of two taken out of the tridiagonal form.
    pub tridiagonal_scale: i32,
    /// Proven ends, an entry for each index; empty without a proof.
    pub enclosures: &'a [ProvenEnds],
    /// The fingerprint of the run.
    pub fingerprint: &'a str,
}

/// The proven place of one eigenvalue, as it is written.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ProvenEnds {
    /// Decimal text, rounded down.
    pub lower: String,
    /// Decimal text, rounded up.
    pub upper: String,
    /// Index of the first eigenvalue not proven apart from this one, from 1;
    /// its own where it is proven apart from all others.
    pub first: u32,
    /// Index of the last one.
    pub last: u32,
}

/// What to write.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "kebab-case")]
pub enum ExportKind {
    /// Values with residual bounds and, if proven, their ends: CSV.
    ValuesCsv,
    /// Vectors as columns: CSV.
    VectorsCsv,
    /// Diagonal and off-diagonals of the tridiagonal form: CSV.
    TridiagonalCsv,
    /// All of it: JSON.
    Json,
    /// Values as a column: Matrix Market.
    ValuesMatrixMarket,
    /// Vectors as columns: Matrix Market.
    VectorsMatrixMarket,
    /// The tridiagonal form: Matrix Market, coordinate, symmetric.
    TridiagonalMatrixMarket,
}

/// A file to download.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct FileText {
    /// A name for it, made from the title.
    pub name: String,
    /// Its media type.
    pub media_type: String,
    /// What is in it.
    pub text: String,
}

/// Writes one file of a run; `None` when the run has no result.
pub fn of_run(run: &Run, kind: ExportKind) -> Option<FileText> {
    let solution = run.outcome.as_ref().ok()?;
    let form = &solution.reduction.tridiagonal;
    let bounds: Vec<String> = (0..run.order())
        .filter_map(|k| run.residual_text(k))
        .collect();
    let data = Data {
        title: run.heading.title.trim(),
        labels: &run.heading.labels,
        approximation: &solution.approximation,
        residual_bounds: &bounds,
        tridiagonal: Some((&form.diagonal, &form.off_diagonal)),
        tridiagonal_scale: run.scale(),
        enclosures: &values::proven_ends(run),
        fingerprint: &run.fingerprint,
    };
    Some(export(&data, kind))
}

/// The certificate of the proof as a file; `None` when nothing is proven.
pub fn certificate(run: &Run) -> Option<FileText> {
    let solution = run.outcome.as_ref().ok()?;
    let proof = run.proven()?;
    Some(FileText {
        name: file_name(run.heading.title.trim(), "certificate.json"),
        media_type: "application/json".to_owned(),
        text: prove::certificate(&run.problem, &solution.approximation, proof).to_string(),
    })
}

/// Writes one file.
///
/// Cost: O(n²) text for the vectors, O(n) otherwise.
pub fn export(data: &Data<'_>, kind: ExportKind) -> FileText {
    let (what, media_type, text) = match kind {
        ExportKind::ValuesCsv => ("eigenvalues.csv", "text/csv", csv::values(data)),
        ExportKind::VectorsCsv => ("eigenvectors.csv", "text/csv", csv::vectors(data)),
        ExportKind::TridiagonalCsv => ("tridiagonal.csv", "text/csv", csv::tridiagonal(data)),
        ExportKind::Json => ("eigenpairs.json", "application/json", json::all(data)),
        ExportKind::ValuesMatrixMarket => {
            ("eigenvalues.mtx", "text/plain", matrix_market::values(data))
        }
        ExportKind::VectorsMatrixMarket => (
            "eigenvectors.mtx",
            "text/plain",
            matrix_market::vectors(data),
        ),
        ExportKind::TridiagonalMatrixMarket => (
            "tridiagonal.mtx",
            "text/plain",
            matrix_market::tridiagonal(data),
        ),
    };
    FileText {
        name: file_name(data.title, what),
        media_type: media_type.to_owned(),
        text,
    }
}

/// `title` made safe for a file name, with `what` behind it.
pub fn file_name(title: &str, what: &str) -> String {
    let mut name = String::new();
    for character in title.chars().take(60) {
        if character.is_alphanumeric() {
            name.extend(character.to_lowercase());
        } else if !name.is_empty() && !name.ends_with('-') {
            name.push('-');
        }
    }
    let name = name.trim_end_matches('-');
    if name.is_empty() {
        what.to_owned()
    } else {
        format!("{name}-{what}")
    }
}

#[cfg(test)]
mod tests;
