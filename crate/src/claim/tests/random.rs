//! True claims are never refuted and false ones never confirmed: random
//! problems, with an eigensolver of another house and plain doubles as the
//! source of the figures.

use nalgebra::{DMatrix, SymmetricEigen};

use super::*;
use crate::matrix::Dense;
use crate::pairs::Approximation;
use crate::prove::{prove, Level};

/// A linear congruential stream (Knuth's MMIX constants), so that a failure is
/// repeated by its seed alone.
struct Stream(u64);

impl Stream {
    fn below(&mut self, bound: i64) -> i64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) as i64) % bound
    }
}

/// A random symmetric integer matrix.
fn symmetric(stream: &mut Stream, order: usize) -> Vec<Vec<i64>> {
    let mut rows = vec![vec![0; order]; order];
    for i in 0..order {
        for j in 0..=i {
            let a = stream.below(19) - 9;
            rows[i][j] = a;
            rows[j][i] = a;
        }
    }
    rows
}

fn problem(rows: &[Vec<i64>]) -> Problem {
    let rows: Vec<&[i64]> = rows.iter().map(Vec::as_slice).collect();
    real(&rows)
}

fn dense(rows: &[Vec<i64>]) -> DMatrix<f64> {
    DMatrix::from_fn(rows.len(), rows.len(), |i, j| rows[i][j] as f64)
}

/// x to `places` decimals, or `None` when x is so near a tie that the double
/// may be rounded otherwise than the true number.
fn rounded(x: f64, places: usize) -> Option<String> {
    let text = format!("{x:.places$}");
    let back: f64 = text.parse().ok()?;
    let unit: f64 = format!("1e-{places}").parse().ok()?;
    // Doubles here are right to about 1e-13; a tie is half a unit away.
    let to_tie = (0.5 * unit - (x - back).abs()).abs();
    (to_tie > 1e-11).then_some(text)
}

/// The figure with its last place moved by `units`.
fn moved(text: &str, units: i64) -> String {
    let places = text
        .split_once('.')
        .map_or(0, |(_, fraction)| fraction.len());
    let digits: i64 = text.replace('.', "").parse().expect("digits");
    let changed = digits + units;
    let sign = if changed < 0 { "-" } else { "" };
    let size = format!("{:0width$}", changed.abs(), width = places + 1);
    let (whole, fraction) = size.split_at(size.len() - places);
    format!("{sign}{whole}.{fraction}")
}

/// Claims about one problem with the word each must not get.
struct Trial<'a> {
    problem: &'a Problem,
    seed: u64,
    judged: usize,
}

impl Trial<'_> {
    fn check(&mut self, evidence: &mut Evidence<'_>, text: &str, truth: Word, decided: bool) {
        let claim = read(text).unwrap_or_else(|error| panic!("{text}: {error}"));
        let verdict = judge(&claim, self.problem, evidence);
        let allowed = verdict.word == truth || (!decided && verdict.word == Word::Undecided);
        assert!(
            allowed,
            "seed {}: {text}\n{:?}\n{verdict:#?}",
            self.seed, self.problem.matrix
        );
        self.judged += 1;
    }
}

/// One Householder step in plain doubles, κ = ±‖x‖.
fn step(a: &DMatrix<f64>, positive: bool) -> Option<DMatrix<f64>> {
    let n = a.nrows();
    let square: f64 = (1..n).map(|i| a[(i, 0)] * a[(i, 0)]).sum();
    let kappa = if positive {
        square.sqrt()
    } else {
        -square.sqrt()
    };
    let mut v = DMatrix::zeros(n, 1);
    for i in 1..n {
        v[(i, 0)] = a[(i, 0)];
    }
    v[(1, 0)] -= kappa;
    let length = (v.transpose() * &v)[(0, 0)];
    // Cancellation would cost the digits the claim shows.
    if length < 1e-2 {
        return None;
    }
    let h = DMatrix::identity(n, n) - &v * v.transpose() * (2.0 / length);
    Some(&h * a * &h)
}

fn table(a: &DMatrix<f64>, places: usize) -> Option<Vec<Vec<String>>> {
    (0..a.nrows())
        .map(|i| (0..a.ncols()).map(|j| rounded(a[(i, j)], places)).collect())
        .collect()
}

fn written(table: &[Vec<String>]) -> String {
    table
        .iter()
        .map(|row| row.join(" "))
        .collect::<Vec<_>>()
        .join("; ")
}

fn about_values(
    trial: &mut Trial<'_>,
    evidence: &mut Evidence<'_>,
    values: &[f64],
    places: usize,
    stream: &mut Stream,
    decided: bool,
) {
    let Some(mut figures) = values
        .iter()
        .map(|&x| rounded(x, places))
        .collect::<Option<Vec<_>>>()
    else {
        return;
    };
    trial.check(
        evidence,
        &format!("eigenvalues: {}", figures.join(" ")),
        Word::Confirmed,
        decided,
    );
    let place = stream.below(values.len() as i64) as usize;
    // Two units are beyond half a unit either way, whatever was rounded off.
    let units = if stream.below(2) == 0 { 2 } else { -2 };
    figures[place] = moved(&figures[place], units);
    trial.check(
        evidence,
        &format!("eigenvalues: {}", figures.join(" ")),
        Word::Refuted,
        decided,
    );
}

fn about_vector(
    trial: &mut Trial<'_>,
    evidence: &mut Evidence<'_>,
    (place, vector): (usize, &[f64]),
    places: usize,
    stream: &mut Stream,
    decided: bool,
) {
    let Some(mut figures) = vector
        .iter()
        .map(|&x| rounded(x, places))
        .collect::<Option<Vec<_>>>()
    else {
        return;
    };
    let text = format!("vector {}: {}", place + 1, figures.join(" "));
    trial.check(evidence, &text, Word::Confirmed, decided);
    let largest = (0..vector.len())
        .reduce(|best, i| {
            if vector[i].abs() > vector[best].abs() {
                i
            } else {
                best
            }
        })
        .unwrap_or(0);
    let other = (largest + 1 + stream.below(vector.len() as i64 - 1) as usize) % vector.len();
    // The largest component fixes the scale to h/|x|, which moves any other by
    // at most h: ten units are beyond that and its own half unit.
    figures[other] = moved(&figures[other], 10);
    let text = format!("vector {}: {}", place + 1, figures.join(" "));
    trial.check(evidence, &text, Word::Refuted, decided);
}

fn about_state(
    trial: &mut Trial<'_>,
    evidence: &mut Evidence<'_>,
    a: &DMatrix<f64>,
    places: usize,
    stream: &mut Stream,
) {
    let Some(state) = step(a, stream.below(2) == 0) else {
        return;
    };
    let Some(mut figures) = table(&state, places) else {
        return;
    };
    trial.check(
        evidence,
        &format!("matrix 1: {}", written(&figures)),
        Word::Confirmed,
        false,
    );
    let n = a.nrows() as i64;
    let (i, j) = (stream.below(n) as usize, stream.below(n) as usize);
    figures[i][j] = moved(&figures[i][j], 3);
    trial.check(
        evidence,
        &format!("matrix 1: {}", written(&figures)),
        Word::Refuted,
        true,
    );
}

fn about_form(
    trial: &mut Trial<'_>,
    evidence: &mut Evidence<'_>,
    a: &DMatrix<f64>,
    places: usize,
    stream: &mut Stream,
) {
    // Order 3: one reflector ends the reduction.
    let Some(form) = step(a, stream.below(2) == 0) else {
        return;
    };
    let off: Vec<f64> = vec![form[(1, 0)], form[(2, 1)]];
    if off.iter().any(|x| x.abs() < 1e-6) {
        return;
    }
    let signs = [stream.below(2) == 0, stream.below(2) == 0];
    let signed: Vec<f64> = off
        .iter()
        .zip(signs)
        .map(|(x, flip)| if flip { -x } else { *x })
        .collect();
    let diagonal: Option<Vec<String>> = (0..3).map(|i| rounded(form[(i, i)], places)).collect();
    let signed: Option<Vec<String>> = signed.iter().map(|&x| rounded(x, places)).collect();
    let (Some(mut diagonal), Some(signed)) = (diagonal, signed) else {
        return;
    };
    let text = format!("tridiagonal: {}; {}", diagonal.join(" "), signed.join(" "));
    trial.check(evidence, &text, Word::Confirmed, true);
    let place = stream.below(3) as usize;
    diagonal[place] = moved(&diagonal[place], 2);
    let text = format!("tridiagonal: {}; {}", diagonal.join(" "), signed.join(" "));
    trial.check(evidence, &text, Word::Refuted, true);
}

fn run(seed: u64, proven: bool) -> usize {
    let mut stream = Stream(seed);
    let order = 2 + stream.below(3) as usize;
    let places = 2 + stream.below(6) as usize;
    let rows = symmetric(&mut stream, order);
    let problem = problem(&rows);
    let a = dense(&rows);
    let solved = SymmetricEigen::new(a.clone());
    let mut ascending: Vec<usize> = (0..order).collect();
    ascending.sort_by(|&i, &j| solved.eigenvalues[i].total_cmp(&solved.eigenvalues[j]));
    let values: Vec<f64> = ascending.iter().map(|&i| solved.eigenvalues[i]).collect();
    let vectors = DMatrix::from_fn(order, order, |i, j| solved.eigenvectors[(i, ascending[j])]);
    let approximation = Approximation {
        values: values.clone(),
        vectors: Dense::real(vectors.clone()),
        scale: 0,
    };
    let mut evidence = if proven {
        let proof = prove(&problem, &approximation, Level::Quick, &mut Unattended);
        Evidence::proven(&problem, &approximation, proof)
    } else {
        evidence(&problem)
    };
    let mut trial = Trial {
        problem: &problem,
        seed,
        judged: 0,
    };
    about_values(
        &mut trial,
        &mut evidence,
        &values,
        places,
        &mut stream,
        !proven,
    );
    for k in 0..order {
        let apart = |i: usize, j: usize| (values[i] - values[j]).abs() > 1e-2;
        // Vectors of close values are not right to the places shown.
        if (k > 0 && !apart(k, k - 1)) || (k + 1 < order && !apart(k, k + 1)) {
            continue;
        }
        let vector: Vec<f64> = (0..order).map(|i| vectors[(i, k)]).collect();
        about_vector(
            &mut trial,
            &mut evidence,
            (k, &vector),
            places,
            &mut stream,
            false,
        );
    }
    if order > 2 {
        about_state(&mut trial, &mut evidence, &a, places, &mut stream);
    }
    if order == 3 {
        about_form(&mut trial, &mut evidence, &a, places, &mut stream);
    }
    trial.judged
}

#[test]
fn exact_evidence_never_errs() {
    let judged: usize = (0..500).map(|seed| run(seed * 7_919 + 1, false)).sum();
    assert!(judged > 2_500, "only {judged} claims were judged");
}

#[test]
fn proven_evidence_never_errs() {
    let judged: usize = (0..80).map(|seed| run(seed * 104_729 + 3, true)).sum();
    assert!(judged > 350, "only {judged} claims were judged");
}

#[test]
fn the_stream_moves_figures() {
    assert_eq!(moved("1.05", -10), "0.95");
    assert_eq!(moved("-0.02", 3), "0.01");
    assert_eq!(moved("9.99", 2), "10.01");
}

/// A random Hermitian matrix of order 3 with small Gaussian integers.
fn gaussian(stream: &mut Stream) -> Vec<Vec<(i64, i64)>> {
    let mut rows = vec![vec![(0, 0); 3]; 3];
    for i in 0..3 {
        for j in 0..=i {
            let (a, b) = (stream.below(11) - 5, stream.below(11) - 5);
            let b = if i == j { 0 } else { b };
            rows[i][j] = (a, b);
            rows[j][i] = (a, -b);
        }
    }
    rows
}

#[test]
fn complex_claims_never_err() {
    let mut judged = 0;
    for seed in 0..150 {
        let mut stream = Stream(seed * 15_485_863 + 11);
        let rows = gaussian(&mut stream);
        let borrowed: Vec<&[(i64, i64)]> = rows.iter().map(Vec::as_slice).collect();
        let problem = hermitian(&borrowed);
        let doubles = DMatrix::from_fn(3, 3, |i, j| {
            nalgebra::Complex::new(rows[i][j].0 as f64, rows[i][j].1 as f64)
        });
        let solved = SymmetricEigen::new(doubles);
        let mut ascending = [0usize, 1, 2];
        ascending.sort_by(|&i, &j| solved.eigenvalues[i].total_cmp(&solved.eigenvalues[j]));
        let values: Vec<f64> = ascending.iter().map(|&i| solved.eigenvalues[i]).collect();
        if values[1] - values[0] < 1e-2 || values[2] - values[1] < 1e-2 {
            continue;
        }
        let mut evidence = evidence(&problem);
        let mut trial = Trial {
            problem: &problem,
            seed,
            judged: 0,
        };
        about_values(&mut trial, &mut evidence, &values, 5, &mut stream, true);
        for (k, &column) in ascending.iter().enumerate() {
            let parts: Option<Vec<(String, String)>> = (0..3)
                .map(|row| {
                    let x = solved.eigenvectors[(row, column)];
                    Some((rounded(x.re, 5)?, rounded(x.im, 5)?))
                })
                .collect();
            let Some(mut parts) = parts else { continue };
            let written = |parts: &[(String, String)]| {
                let cells: Vec<String> = parts
                    .iter()
                    .map(|(re, im)| {
                        let plus = if im.starts_with('-') { "" } else { "+" };
                        format!("{re}{plus}{im}i")
                    })
                    .collect();
                format!("vector {}: {}", k + 1, cells.join(" "))
            };
            trial.check(&mut evidence, &written(&parts), Word::Confirmed, false);
            let largest = (0..3)
                .reduce(|best, row| {
                    let size = |row: usize| solved.eigenvectors[(row, column)].norm_sqr();
                    if size(row) > size(best) {
                        row
                    } else {
                        best
                    }
                })
                .unwrap_or(0);
            // Scale and phase are fixed to about 2h/|x|; 20 units are beyond.
            let other = (largest + 1) % 3;
            parts[other].0 = moved(&parts[other].0, 20);
            trial.check(&mut evidence, &written(&parts), Word::Refuted, true);
        }
        judged += trial.judged;
    }
    assert!(judged > 500, "only {judged} claims were judged");
}
