//! Writes the hard cases of the stages' own tests as problem documents, for
//! programs that read such files:
//! `cargo run -p eigenledger --example hard_cases -- FOLDER`

use std::path::Path;

use eigenledger::document::{self, ProblemDocument};
use eigenledger::matrix::Dense;

// The cases name the solver's modules as they stand inside it.
use eigenledger::matrix;
#[path = "../solver/src/solve/cases.rs"]
mod cases;

/// Every entry with the digits that read back as the same double.
fn text(matrix: &Dense) -> String {
    let cell = |row, col| {
        let re = format!("{:?}", matrix.re[(row, col)]);
        match matrix.im.as_ref().map(|im| im[(row, col)]) {
            None => re,
            Some(im) => format!("{re}{im:+?}i"),
        }
    };
    let rows = (0..matrix.rows()).map(|row| {
        let cells: Vec<String> = (0..matrix.cols()).map(|col| cell(row, col)).collect();
        cells.join(" ")
    });
    rows.collect::<Vec<String>>().join("\n")
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let folder = std::env::args().nth(1).ok_or("name a folder to write to")?;
    for (place, (title, matrix)) in cases::hard().into_iter().enumerate() {
        let document = ProblemDocument {
            title,
            matrix: text(&matrix),
            ..ProblemDocument::default()
        };
        let file = Path::new(&folder).join(format!("hard-{:02}.json", place + 1));
        std::fs::write(file, document::write(&document))?;
    }
    Ok(())
}
