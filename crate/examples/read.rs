//! Reads matrices from files and prints, as one line of JSON a file, what was
//! understood: `cargo run -p eigenledger --example read -- FILE…`
//!
//! Cells are exact: `[re, im]` as fractions in lowest terms, `null` where a
//! cell could not be read or is irrational. With `--plain` in front, each
//! matrix is written in full as plain text instead.

use eigenledger::entry::{self, grid, Cell, Entry, Input, ReadOptions, Wanted};
use serde_json::{json, Value};

fn main() -> std::io::Result<()> {
    let mut arguments: Vec<String> = std::env::args().skip(1).collect();
    let plain = arguments.first().is_some_and(|first| first == "--plain");
    if plain {
        arguments.remove(0);
    }
    for name in arguments {
        let bytes = std::fs::read(&name)?;
        let options = ReadOptions {
            wanted: Wanted::Any,
            ..ReadOptions::default()
        };
        let entry = entry::read(
            Input::File {
                bytes: &bytes,
                name: &name,
            },
            &options,
        );
        if plain {
            let text = entry.text.clone().unwrap_or_default();
            print!("{}", grid::write_in_full(&text, &entry, &options).text);
        } else {
            println!("{}", described(&name, &entry));
        }
    }
    Ok(())
}

fn described(name: &str, entry: &Entry) -> Value {
    json!({
        "file": name,
        "usable": entry.is_usable(),
        "settings": entry.settings,
        "rows": entry.rows,
        "cols": entry.cols,
        "cells": entry.cells.iter().map(fractions).collect::<Vec<_>>(),
        "rowLabels": entry.row_labels,
        "colLabels": entry.col_labels,
        "diagnostics": entry.diagnostics,
        "question": entry.question,
    })
}

fn fractions(cell: &Cell) -> Value {
    let parts = cell.value.as_ref().and_then(|value| {
        Some([
            value.re.rational()?.to_string(),
            value.im.rational()?.to_string(),
        ])
    });
    json!(parts)
}
