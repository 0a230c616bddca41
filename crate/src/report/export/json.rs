//! One JSON file with values, vectors and the tridiagonal form.

use serde::Serialize;

use super::{Data, ProvenEnds};
use crate::report::decimal::round_trip;

/// Raised when a field changes its meaning.
const VERSION: u32 = 1;

#[derive(Serialize)]
struct File<'a> {
    format: &'static str,
    version: u32,
    title: &'a str,
    order: usize,
    fingerprint: &'a str,
    labels: &'a [String],
    eigenvalues: Vec<Eigenvalue<'a>>,
    /// One list a vector; complex components as [re, im].
    eigenvectors: Vec<Vec<Component>>,
    #[serde(skip_serializing_if = "Option::is_none")]
    tridiagonal: Option<Tridiagonal>,
}

/// Values are decimal text: they may lie beyond the range of doubles, and no
/// reader then rounds them in passing.
#[derive(Serialize)]
struct Eigenvalue<'a> {
    index: usize,
    approximate: String,
    #[serde(skip_serializing_if = "Option::is_none")]
    residual_bound: Option<&'a str>,
    #[serde(skip_serializing_if = "Option::is_none")]
    proven: Option<&'a ProvenEnds>,
}

#[derive(Serialize)]
#[serde(untagged)]
enum Component {
    Real(f64),
    Complex([f64; 2]),
}

#[derive(Serialize)]
struct Tridiagonal {
    diagonal: Vec<String>,
    off_diagonal: Vec<String>,
}

/// The file's text.
pub(super) fn all(data: &Data<'_>) -> String {
    let approximation = data.approximation;
    let vectors = &approximation.vectors;
    let component = |i: usize, k: usize| match &vectors.im {
        Some(im) => Component::Complex([vectors.re[(i, k)], im[(i, k)]]),
        None => Component::Real(vectors.re[(i, k)]),
    };
    let scaled = |plane: &[f64]| {
        plane
            .iter()
            .map(|x| round_trip(*x, data.tridiagonal_scale))
            .collect()
    };
    let file = File {
        format: "eigenledger eigenpairs",
        version: VERSION,
        title: data.title,
        order: approximation.values.len(),
        fingerprint: data.fingerprint,
        labels: data.labels,
        eigenvalues: approximation
            .values
            .iter()
            .enumerate()
            .map(|(place, value)| Eigenvalue {
                index: place + 1,
                approximate: round_trip(*value, approximation.scale),
                residual_bound: data.residual_bounds.get(place).map(String::as_str),
                proven: data.enclosures.get(place),
            })
            .collect(),
        eigenvectors: (0..vectors.cols())
            .map(|k| (0..vectors.rows()).map(|i| component(i, k)).collect())
            .collect(),
        tridiagonal: data.tridiagonal.map(|(diagonal, off)| Tridiagonal {
            diagonal: scaled(diagonal),
            off_diagonal: scaled(off),
        }),
    };
    // Strings and finite numbers only: there is nothing that could fail.
    serde_json::to_string(&file).unwrap_or_default()
}
