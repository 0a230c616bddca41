//! Claims judged on the proof alone, where the exact road is closed or long.

use nalgebra::{DMatrix, SymmetricEigen};

use super::*;
use crate::matrix::Dense;
use crate::pairs::Approximation;
use crate::prove::{prove, Level};

/// Plain approximations by an eigensolver of another house.
fn approximate(matrix: DMatrix<f64>) -> Approximation {
    let order = matrix.nrows();
    let solved = SymmetricEigen::new(matrix);
    let mut ascending: Vec<usize> = (0..order).collect();
    ascending.sort_by(|&i, &j| solved.eigenvalues[i].total_cmp(&solved.eigenvalues[j]));
    let values = ascending.iter().map(|&i| solved.eigenvalues[i]).collect();
    let vectors = DMatrix::from_fn(order, order, |i, j| solved.eigenvectors[(i, ascending[j])]);
    Approximation {
        values,
        vectors: Dense::real(vectors),
        scale: 0,
    }
}

fn words(problem: &Problem, approximation: &Approximation, texts: &[&str]) -> Vec<Word> {
    let proof = prove(problem, approximation, Level::Quick, &mut Unattended);
    let limits = Limits {
        order: 0,
        ..Limits::default()
    };
    let mut evidence = Evidence::best(problem, approximation, proof, &limits, &mut Unattended);
    texts
        .iter()
        .map(|text| judge(&read(text).expect("a claim"), problem, &mut evidence).word)
        .collect()
}

#[test]
fn irrational_entries() {
    // [[√2, 1], [1, 0]]: λ = (√2 ± √6)/2 = 1.9318516…, −0.5176380….
    let root = ExactReal::from(2).sqrt().expect("√2");
    let cells = vec![
        root,
        ExactReal::from(1),
        ExactReal::from(1),
        ExactReal::ZERO,
    ];
    let problem = Problem {
        matrix: ExactMatrix::new(2, cells, None),
        metric: None,
    };
    let doubles = DMatrix::from_row_slice(2, 2, &[2f64.sqrt(), 1.0, 1.0, 0.0]);
    let texts = [
        "eigenvalues: -0.517638, 1.931852",
        "eigenvalues: -0.517638, 1.931851",
        "eigenvalue: 1.93185165257813657349948639945779473526780967801681",
        "vector 2: 1.931852 1.000000",
        "vector 2: 1.931852 1.000010",
        "tridiagonal: 1.41421 0.00000; 1.00000",
        "tridiagonal: 1.41421 0.00000; 1.00010",
        "polynomial: 1 -1.41421 -1.00000",
        "trace: 1.41421",
        "trace: 1.41412",
        "condition: 3.73205",
        "negative: 1",
        "cholesky: 1 0; 0 1",
    ];
    let (yes, no) = (Word::Confirmed, Word::Refuted);
    let expected = [yes, no, yes, yes, no, yes, no, yes, yes, no, yes, yes, no];
    assert_eq!(
        words(&problem, &approximate(doubles), &texts),
        expected,
        "{texts:#?}"
    );
}

#[test]
fn order_thirty() {
    // Second differences: λₖ = 2 − 2cos(kπ/31), vectors sin(jkπ/31).
    let order = 30;
    let mut rows = vec![vec![0i64; order]; order];
    for k in 0..order {
        rows[k][k] = 2;
        if k + 1 < order {
            rows[k][k + 1] = -1;
            rows[k + 1][k] = -1;
        }
    }
    let borrowed: Vec<&[i64]> = rows.iter().map(Vec::as_slice).collect();
    let problem = real(&borrowed);
    let doubles = DMatrix::from_fn(order, order, |i, j| rows[i][j] as f64);
    let angle = |k: usize| k as f64 * std::f64::consts::PI / 31.0;
    let list: Vec<String> = (1..=order)
        .map(|k| format!("{:.10}", 2.0 - 2.0 * angle(k).cos()))
        .collect();
    let vector: Vec<String> = (1..=order)
        .map(|j| format!("{:.8}", angle(3 * j).sin()))
        .collect();
    let mut slipped = list.clone();
    slipped[17] = slipped[17].replacen('2', "3", 1);
    let mut bent = vector.clone();
    bent[4] = format!("{:.8}", angle(15).sin() + 1e-6);
    let texts = [
        format!("eigenvalues: {}", list.join(" ")),
        format!("eigenvalues: {}", slipped.join(" ")),
        format!("vector 3: {}", vector.join(" ")),
        format!("vector 3: {}", bent.join(" ")),
        "determinant: 31.0000".to_owned(),
        "positive: 30".to_owned(),
    ];
    assert_ne!(list, slipped);
    let texts: Vec<&str> = texts.iter().map(String::as_str).collect();
    let (yes, no) = (Word::Confirmed, Word::Refuted);
    assert_eq!(
        words(&problem, &approximate(doubles), &texts),
        [yes, no, yes, no, yes, yes]
    );
}

#[test]
fn pairs_by_proof() {
    // K = [[2, −1], [−1, 1]], M = diag(2, 1): λ = 1 ∓ √2/2, unit vectors in M
    // (1/2, ±√2/2).
    let problem = pair(&[&[2, -1], &[-1, 1]], &[&[2, 0], &[0, 1]]);
    let half = 0.5f64.sqrt();
    let approximation = Approximation {
        values: vec![1.0 - half, 1.0 + half],
        vectors: Dense::real(DMatrix::from_row_slice(2, 2, &[0.5, 0.5, half, -half])),
        scale: 0,
    };
    let texts = [
        "eigenvalues: 0.2929, 1.7071",
        "vector for 0.2929: 0.70711 1.00000",
        "vector for 0.2929: 0.70721 1.00000",
        "vectors, orthonormal: 0.5000 0.5000; 0.7071 -0.7071",
        "tridiagonal: 1.0000 1.0000; 0.7071",
        "frequencies: 0.08613, 0.20795",
    ];
    let (yes, no) = (Word::Confirmed, Word::Refuted);
    assert_eq!(
        words(&problem, &approximation, &texts),
        [yes, yes, no, yes, yes, yes]
    );
}

#[test]
fn unseparated_values_give_no_vectors() {
    let problem = real(&[&[2, 0, 0], &[0, 2, 0], &[0, 0, 5]]);
    let doubles = DMatrix::from_row_slice(3, 3, &[2.0, 0.0, 0.0, 0.0, 2.0, 0.0, 0.0, 0.0, 5.0]);
    let texts = [
        "vector for 2.000: 0.600 0.800 0.000",
        "vector for 2.000: 0.600 0.800 0.100",
        "vector for 5.000: 0.000 0.000 1.000",
    ];
    // The proof cannot tell the pair apart, so a vector within its space may
    // or may not be an eigenvector; one outside cannot.
    let found = words(&problem, &approximate(doubles), &texts);
    assert_ne!(found[0], Word::Refuted);
    assert_eq!(found[1..], [Word::Refuted, Word::Confirmed]);
}
