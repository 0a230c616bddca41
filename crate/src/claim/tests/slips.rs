//! Slips planted in reductions, and the causes named for them.

use super::*;
use crate::claim::{judge_all, split, Freedom};

/// Burden and Faires, Numerical Analysis, section on Householder's method
/// (from memory): every state is rational, since ‖x‖ = 3 and then 5/3.
fn textbook() -> Problem {
    real(&[
        &[4, 1, -2, 2],
        &[1, 2, 0, 1],
        &[-2, 0, 3, -2],
        &[2, 1, -2, -1],
    ])
}

const FIRST: &str = "matrix 1: 4 -3 0 0; -3 10/3 1 4/3; 0 1 5/3 -4/3; 0 4/3 -4/3 -1";
const SECOND: &str = "matrix 2: 4 -3 0 0; -3 10/3 -5/3 0; 0 -5/3 -33/25 68/75; 0 0 68/75 149/75";

#[test]
fn states_in_fractions_are_confirmed_exactly() {
    let problem = textbook();
    let verdict = expect(&problem, FIRST, Word::Confirmed);
    assert!(verdict.freedoms.contains(&Freedom::ReflectorSign));
    expect(&problem, SECOND, Word::Confirmed);
    expect(&problem, "reflector 1: 0 4 -2 2", Word::Confirmed);
    expect(&problem, "reflector 1: 4 -2 2", Word::Confirmed);
    expect(&problem, "reflector 1: 0 2 2 -2", Word::Confirmed);
    expect(&problem, "reflector 1: 0 4 -2 3", Word::Refuted);
    expect(
        &problem,
        "reflector 1 scalar 1/12: 0 4 -2 2",
        Word::Undecided,
    );
    expect(
        &problem,
        "reflector 1 scalar 0.08333: 0 4.0 -2.0 2.0",
        Word::Confirmed,
    );
    let matrix = "reflector 1: 1 0 0 0; 0 -0.333 0.667 -0.667; 0 0.667 0.667 0.333; \
                  0 -0.667 0.333 0.667";
    expect(&problem, matrix, Word::Confirmed);
    let trailing = "reflector 1: -0.333 0.667 -0.667; 0.667 0.667 0.333; -0.667 0.333 0.667";
    expect(&problem, trailing, Word::Confirmed);
}

#[test]
fn states_in_decimals() {
    let problem = textbook();
    let right = "matrix 1: 4 -3 0 0; -3 3.333 1 1.333; 0 1 1.667 -1.333; 0 1.333 -1.333 -1";
    expect(&problem, right, Word::Confirmed);
    let wrong = right.replace("1.667", "1.677");
    expect(&problem, &wrong, Word::Refuted);
    expect_cause(&problem, &wrong, "a slip in one entry");
}

#[test]
fn the_other_reflector_is_granted() {
    // κ = +3, v ∝ (1, 1, −1), by hand:
    let problem = textbook();
    // B = [[2, 0, 1], [0, 3, −2], [1, −2, −1]], v = (1, 1, −1), τ = 2/3:
    // Bv = (1, 5, 0), vᵀBv = 6, q = (2/3)(Bv − 2v) = (−2, 6, 4)/3;
    // B − vqᵀ − qvᵀ = [[10/3, −4/3, −1], [−4/3, −1, −4/3], [−1, −4/3, 5/3]].
    let text = "matrix 1: 4 3 0 0; 3 10/3 -4/3 -1; 0 -4/3 -1 -4/3; 0 -1 -4/3 5/3";
    expect(&problem, text, Word::Confirmed);
}

#[test]
fn left_only_is_named() {
    // H·A: row 1 stays (4, 1, −2, 2); the column below becomes (−3, 0, 0).
    // With v = (4, −2, 2), τ = 1/12: vᵀB = (10, −10, 6), H·B = B − v(vᵀB)/12.
    let text = "matrix 1, exact: 4 1 -2 2; -3 -4/3 10/3 -1; 0 5/3 4/3 -1; 0 -2/3 -1/3 -2";
    let decimals = "matrix 1: 4.000 1.000 -2.000 2.000; -3.000 -1.333 3.333 -1.000; \
                    0.000 1.667 1.333 -1.000; 0.000 -0.667 -0.333 -2.000";
    expect(&textbook(), text, Word::Refuted);
    expect_cause(
        &textbook(),
        decimals,
        "from the left but not from the right",
    );
}

#[test]
fn sign_against_the_reflector_is_named() {
    let text = "matrix 1: 4.000 3.000 0 0; 3.000 3.333 1.000 1.333; 0 1.000 1.667 -1.333; \
                0 1.333 -1.333 -1.000";
    expect_cause(&textbook(), text, "the sign of the reflector");
}

#[test]
fn swapped_entries_are_named() {
    let text = "matrix 1: 4.000 -3.000 0 0; -3.000 1.667 1.000 1.333; 0 1.000 3.333 -1.333; \
                0 1.333 -1.333 -1.000";
    expect_cause(&textbook(), text, "two values are swapped");
}

#[test]
fn scalar_of_one_is_named() {
    let problem = textbook();
    expect_cause(
        &problem,
        "reflector 1 scalar 1: 0 4.0 -2.0 2.0",
        "a scalar of 1",
    );
    // I − vvᵀ with v = (4, −2, 2) from both sides, by hand: r = vᵀx = 12 for
    // x = (1, −2, 2), so the column becomes x − 12v = (−47, 22, −22);
    // B: Bv = (10, −10, 6), vᵀBv = 72; B − v(Bv)ᵀ − (Bv)vᵀ + 72vvᵀ.
    let text = "matrix 1, ± 0.01: 4 -47 22 -22; -47 1074 -516 533; 22 -516 251 -258; \
                -22 533 -258 263";
    expect_cause(&problem, text, "a scalar of 1 instead of 2/‖v‖²");
}

#[test]
fn missing_conjugate_is_named() {
    // x = (3i, 4)ᵀ: ‖x‖ = 5, κ = −5i, v = (8i, 4), τ = 1/40. With vvᵀ in place
    // of vvᴴ: H' = I − vvᵀ/40 = [[13/5, −4i/5], [−4i/5, 3/5]].
    let problem = hermitian(&[
        &[(1, 0), (0, -3), (4, 0)],
        &[(0, 3), (2, 0), (0, 0)],
        &[(4, 0), (0, 0), (7, 0)],
    ]);
    let right = "matrix 1: 1 5.000i 0; -5.000i 5.200 -2.400i; 0 2.400i 3.800";
    expect(&problem, right, Word::Confirmed);
    expect(&problem, "reflector 1: 8.000i 4.000", Word::Confirmed);
    expect(&problem, "reflector 1: -4.000 2.000i", Word::Confirmed);
    expect(&problem, "reflector 1: 8.000i -4.000", Word::Refuted);
    expect(
        &problem,
        "tridiagonal: 1 5.200 3.800; 5.000 2.400",
        Word::Confirmed,
    );
    let unconjugated = unconjugated_state();
    expect_cause(&problem, &unconjugated, "a conjugate is missing");
}

/// The state with H' = I − vvᵀ/40 from the left and from the right, in exact
/// integers over 25, so that the test owns its own arithmetic.
fn unconjugated_state() -> String {
    type Z = (i64, i64);
    let times = |a: Z, b: Z| (a.0 * b.0 - a.1 * b.1, a.0 * b.1 + a.1 * b.0);
    let h: [[Z; 3]; 3] = [
        [(5, 0), (0, 0), (0, 0)],
        [(0, 0), (13, 0), (0, -4)],
        [(0, 0), (0, -4), (3, 0)],
    ];
    let a: [[Z; 3]; 3] = [
        [(1, 0), (0, -3), (4, 0)],
        [(0, 3), (2, 0), (0, 0)],
        [(4, 0), (0, 0), (7, 0)],
    ];
    let product = |x: &[[Z; 3]; 3], y: &[[Z; 3]; 3]| {
        let mut result = [[(0, 0); 3]; 3];
        for (i, row) in result.iter_mut().enumerate() {
            for (j, cell) in row.iter_mut().enumerate() {
                for k in 0..3 {
                    let t = times(x[i][k], y[k][j]);
                    *cell = (cell.0 + t.0, cell.1 + t.1);
                }
            }
        }
        result
    };
    let state = product(&product(&h, &a), &h);
    let rows: Vec<String> = state
        .iter()
        .map(|row| {
            row.iter()
                .map(|(re, im)| {
                    format!(
                        "{}/25{}{}/25i",
                        re,
                        if *im < 0 { "-" } else { "+" },
                        im.abs()
                    )
                })
                .map(|text| decimal(&text))
                .collect::<Vec<_>>()
                .join(" ")
        })
        .collect();
    format!("matrix 1: {}", rows.join("; "))
}

/// `a/25+b/25i` as decimals, which are exact in hundredths.
fn decimal(text: &str) -> String {
    let hundredths = |part: &str| part.parse::<i64>().expect("an integer") * 4;
    let (re, rest) = text.split_once("/25").expect("a real part");
    let im = rest.strip_suffix("/25i").expect("an imaginary part");
    let written = |n: i64| {
        format!(
            "{}{}.{:02}",
            if n < 0 { "-" } else { "" },
            n.abs() / 100,
            n.abs() % 100
        )
    };
    let im = hundredths(im);
    format!(
        "{}{}{}i",
        written(hundredths(re)),
        if im < 0 { "" } else { "+" },
        written(im)
    )
}

#[test]
fn forms_and_their_slips() {
    // Diagonal 5, 2, 34/45, 146/45; squares 14, 45/14, ….
    let problem = real(&[&[5, 1, 2, 3], &[1, 6, 0, 0], &[2, 0, -2, 1], &[3, 0, 1, 2]]);
    let right = "tridiagonal: 5 2 0.7556 3.2444; 3.7417 1.7928 3.4982";
    let verdict = expect(&problem, right, Word::Confirmed);
    assert!(
        verdict
            .items
            .iter()
            .any(|item| item.truth.contains("√(45/14)")),
        "{verdict:#?}"
    );
    expect(
        &problem,
        "tridiagonal: 5 2 0.7556 3.2444; -3.7417 1.7928 -3.4982",
        Word::Confirmed,
    );
    let full = "tridiagonal:\n5 3.742 0 0\n3.742 2 1.793 0\n0 1.793 0.756 3.498\n0 0 3.498 3.244";
    expect(&problem, full, Word::Confirmed);
    expect(
        &problem,
        &full.replace("1.793 0\n", "1.793 0.01\n"),
        Word::Refuted,
    );
    expect_cause(
        &problem,
        "tridiagonal: 5 2 3.2444 0.7556; 3.7417 1.7928 3.4982",
        "swapped",
    );
    expect_cause(
        &problem,
        "tridiagonal: 5 2 0.7556 3.2444; 1.7928 3.7417 3.4982",
        "swapped",
    );
    expect_cause(
        &problem,
        "tridiagonal: 5 2 0.7556 3.2444; 14.0000 3.2143 12.2371",
        "squares",
    );
    let slip = expect(
        &problem,
        "tridiagonal: 5 2 0.7556 3.2444; 3.7417 1.7982 3.4982",
        Word::Refuted,
    );
    let departure = slip
        .findings
        .iter()
        .find(|f| f.kind == FindingKind::Departure);
    assert_eq!(
        departure.map(|f| (f.row, f.col)),
        Some((Some(3), Some(2))),
        "{slip:#?}"
    );
}

#[test]
fn forms_with_their_basis() {
    // p₂ = (0, 1, 2)/√5, p₃ = (0, 2, −1)/√5.
    let problem = real(&[&[4, 1, 2], &[1, 3, 0], &[2, 0, 1]]);
    let right =
        "tridiagonal with Q:\n4 1.4 2.6\n2.2361 0.8\n1 0 0\n0 0.4472 0.8944\n0 0.8944 -0.4472";
    expect(&problem, right, Word::Confirmed);
    let signs =
        "tridiagonal with Q:\n4 1.4 2.6\n-2.2361 -0.8\n1 0 0\n0 -0.4472 0.8944\n0 -0.8944 -0.4472";
    expect(&problem, signs, Word::Confirmed);
    let crossed =
        "tridiagonal with Q:\n4 1.4 2.6\n-2.2361 0.8\n1 0 0\n0 0.4472 0.8944\n0 0.8944 -0.4472";
    expect(&problem, crossed, Word::Refuted);
    let wrong =
        "tridiagonal with Q:\n4 1.4 2.6\n2.2361 0.8\n1 0 0\n0 0.4472 0.9844\n0 0.8944 -0.4472";
    expect(&problem, wrong, Word::Refuted);
}

#[test]
fn split_forms_grant_the_restart() {
    let problem = real(&[&[1, 0, 0], &[0, 2, 1], &[0, 1, 2]]);
    expect(&problem, "tridiagonal: 1 2 2; 0 1", Word::Confirmed);
    // Restarted from (0, 1, 1)/√2 the rest is diag(3, 1).
    let other = expect(&problem, "tridiagonal: 1 3 1; 0 0", Word::Undecided);
    assert!(other.freedoms.contains(&Freedom::Restart), "{other:#?}");
    expect(&problem, "tridiagonal: 2 3 1; 0 0", Word::Refuted);
}

#[test]
fn slips_in_values_are_named() {
    let problem = real(&[&[2, 1], &[1, 3]]);
    expect_cause(&problem, "eigenvalues: 1.382, 3.681", "exchanged");
    expect_cause(
        &problem,
        "eigenvalues: -1.382, 3.618",
        "with the other sign",
    );
}

#[test]
fn a_worked_calculation_marks_its_first_wrong_line() {
    let text = "Worked on Tuesday\n\
                reflector 1: 0 4 -2 2\n\
                matrix 1: 4 -3 0 0; -3 10/3 1 4/3; 0 1 5/3 -4/3; 0 4/3 -4/3 -1\n\
                matrix 2:\n4 -3 0 0\n-3 3.3333 -1.6667 0\n0 -1.6667 -1.3200 0.9607\n0 0 0.9607 1.9867\n\
                eigenvalues: -2.1975, 1.0844, 2.2685, 6.8446\n\
                trace: 8\n";
    assert_eq!(split(text).len(), 5, "{:?}", split(text));
    let problem = textbook();
    let mut evidence = evidence(&problem);
    let judgement = judge_all(&[text.to_owned()], &problem, &mut evidence, &mut Unattended);
    // 68/75 = 0.9067: two digits were exchanged in the third line.
    assert_eq!(judgement.first_wrong, Some(2), "{judgement:#?}");
    let words: Vec<Option<Word>> = judgement
        .lines
        .iter()
        .map(|line| line.verdict.as_ref().map(|v| v.word))
        .collect();
    let right = Some(Word::Confirmed);
    let expected = [right, right, Some(Word::Refuted), right, right];
    assert_eq!(words, expected, "{judgement:#?}");
    let json = serde_json::to_string(&judgement).expect("JSON");
    let back: crate::claim::Judgement = serde_json::from_str(&json).expect("a judgement");
    assert_eq!(back, judgement);
}
