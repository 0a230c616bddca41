//! Solves matrices given as JSON, for comparison with other programs:
//! `cargo run -p eigenledger --example solve < problems.json`
//!
//! Standard input: a list of `{"matrix": M, "metric": M?}`, where M is
//! `{"re": rows, "im": rows?}` with plain numbers. Standard output: a list in
//! the same order of `{"values": [λ…], "scale": s, "vectors": M}`, λ·2^s the
//! eigenvalues and the vectors as columns, or `{"error": sentence}`.

use eigenledger::control::Unattended;
use eigenledger::ledger::Silent;
use eigenledger::matrix::Dense;
use eigenledger::problem::Rounded;
use eigenledger::solve::solve;
use nalgebra::DMatrix;
use serde::{Deserialize, Serialize};

#[derive(Deserialize)]
struct Given {
    matrix: Planes,
    metric: Option<Planes>,
}

#[derive(Deserialize, Serialize)]
struct Planes {
    re: Vec<Vec<f64>>,
    #[serde(skip_serializing_if = "Option::is_none")]
    im: Option<Vec<Vec<f64>>>,
}

#[derive(Serialize)]
#[serde(untagged)]
enum Answer {
    Solved {
        values: Vec<f64>,
        scale: i32,
        vectors: Planes,
    },
    Failed {
        error: String,
    },
}

fn dense(planes: &Planes) -> Result<Dense, String> {
    let plane = |rows: &Vec<Vec<f64>>| {
        let order = rows.len();
        if rows.iter().any(|row| row.len() != order) {
            return Err("the rows do not make a square".to_owned());
        }
        Ok(DMatrix::from_fn(order, order, |row, col| rows[row][col]))
    };
    let re = plane(&planes.re)?;
    match &planes.im {
        None => Ok(Dense::real(re)),
        Some(im) if im.len() == planes.re.len() => Ok(Dense::complex(re, plane(im)?)),
        Some(_) => Err("the two planes differ in order".to_owned()),
    }
}

fn planes(matrix: &Dense) -> Planes {
    let rows = |plane: &DMatrix<f64>| {
        plane
            .row_iter()
            .map(|row| row.iter().copied().collect())
            .collect()
    };
    Planes {
        re: rows(&matrix.re),
        im: matrix.im.as_ref().map(rows),
    }
}

fn answer(given: &Given) -> Result<Answer, String> {
    let metric = given.metric.as_ref().map(dense).transpose()?;
    let rounded = Rounded::from_doubles(dense(&given.matrix)?, metric);
    let solution =
        solve(&rounded, &mut Silent, &mut Unattended).map_err(|error| error.to_string())?;
    let approximation = solution.approximation;
    Ok(Answer::Solved {
        vectors: planes(&approximation.vectors),
        values: approximation.values,
        scale: approximation.scale,
    })
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let given: Vec<Given> = serde_json::from_reader(std::io::stdin().lock())?;
    let answers: Vec<Answer> = given
        .iter()
        .map(|one| answer(one).unwrap_or_else(|error| Answer::Failed { error }))
        .collect();
    serde_json::to_writer(std::io::stdout().lock(), &answers)?;
    Ok(())
}
