//! Matrix Market files, as NIST's description of the exchange format has them
//! (Boisvert, Pozo and Remington, The Matrix Market Exchange Formats, NISTIR
//! 5935): indices from 1, dense arrays by columns.

use core::fmt::Write;

use super::Data;
use crate::report::decimal::round_trip;

/// n × 1, array, real.
pub(super) fn values(data: &Data<'_>) -> String {
    let values = &data.approximation.values;
    let mut text = head("array real general", data, "eigenvalues, ascending");
    line(&mut text, format_args!("{} 1", values.len()));
    for value in values {
        line(
            &mut text,
            format_args!("{}", round_trip(*value, data.approximation.scale)),
        );
    }
    text
}

/// n × n, array, real or complex; columns in the order of the values.
pub(super) fn vectors(data: &Data<'_>) -> String {
    let vectors = &data.approximation.vectors;
    let field = if vectors.is_complex() {
        "array complex general"
    } else {
        "array real general"
    };
    let mut text = head(
        field,
        data,
        "eigenvectors as columns, in ascending order of the eigenvalues",
    );
    line(
        &mut text,
        format_args!("{} {}", vectors.rows(), vectors.cols()),
    );
    for k in 0..vectors.cols() {
        for i in 0..vectors.rows() {
            let re = round_trip(vectors.re[(i, k)], 0);
            match &vectors.im {
                Some(im) => line(
                    &mut text,
                    format_args!("{re} {}", round_trip(im[(i, k)], 0)),
                ),
                None => line(&mut text, format_args!("{re}")),
            }
        }
    }
    text
}

/// n × n, coordinate, real symmetric: diagonal and lower off-diagonal.
pub(super) fn tridiagonal(data: &Data<'_>) -> String {
    let mut text = head("coordinate real symmetric", data, "tridiagonal form");
    let (diagonal, off) = data.tridiagonal.unwrap_or((&[], &[]));
    let n = diagonal.len();
    line(&mut text, format_args!("{n} {n} {}", n + off.len()));
    for (k, alpha) in diagonal.iter().enumerate() {
        line(
            &mut text,
            format_args!(
                "{0} {0} {1}",
                k + 1,
                round_trip(*alpha, data.tridiagonal_scale)
            ),
        );
        if let Some(beta) = off.get(k) {
            line(
                &mut text,
                format_args!(
                    "{} {} {}",
                    k + 2,
                    k + 1,
                    round_trip(*beta, data.tridiagonal_scale)
                ),
            );
        }
    }
    text
}

fn head(kind: &str, data: &Data<'_>, what: &str) -> String {
    let mut text = format!("%%MatrixMarket matrix {kind}\n% {what}\n");
    let title: String = data
        .title
        .chars()
        .map(|c| if c.is_control() { ' ' } else { c })
        .collect();
    if !title.is_empty() {
        line(&mut text, format_args!("% {title}"));
    }
    line(
        &mut text,
        format_args!("% fingerprint {}", data.fingerprint),
    );
    text
}

fn line(text: &mut String, content: core::fmt::Arguments<'_>) {
    // Writing to a string cannot fail.
    let _ = writeln!(text, "{content}");
}
