//! Worked examples from the literature, each as a sequence of claims with its
//! printed digits, and the same with a slip planted. All values are from
//! memory of the sources named.

use super::*;
use crate::claim::judge_all;
use crate::matrix::published::ROSSER;

/// Judges a calculation; expects every line confirmed.
fn all_right(problem: &Problem, text: &str) {
    let mut evidence = evidence(problem);
    let judgement = judge_all(&[text.to_owned()], problem, &mut evidence, &mut Unattended);
    assert!(!judgement.lines.is_empty(), "{text}");
    for line in &judgement.lines {
        let word = line.verdict.as_ref().map(|verdict| verdict.word);
        assert_eq!(word, Some(Word::Confirmed), "{line:#?}");
    }
}

/// Plants a slip: exactly the lines that hold `right` must change from
/// confirmed to refuted.
fn slip_is_found(problem: &Problem, text: &str, right: &str, wrong: &str) {
    assert!(text.contains(right), "{right} is not in {text}");
    let planted = text.replacen(right, wrong, 1);
    let mut evidence = evidence(problem);
    let judgement = judge_all(
        std::slice::from_ref(&planted),
        problem,
        &mut evidence,
        &mut Unattended,
    );
    let before = crate::claim::split(text);
    let mut refuted = 0;
    for (line, before) in judgement.lines.iter().zip(before) {
        let word = line.verdict.as_ref().map(|verdict| verdict.word);
        let expected = if line.text == before {
            Word::Confirmed
        } else {
            Word::Refuted
        };
        assert_eq!(word, Some(expected), "{right} → {wrong}: {line:#?}");
        refuted += usize::from(expected == Word::Refuted);
    }
    assert_eq!(refuted, 1, "{right} → {wrong} in {planted}");
}

fn checked(problem: &Problem, text: &str, slips: &[(&str, &str)]) {
    all_right(problem, text);
    for (right, wrong) in slips {
        slip_is_found(problem, text, right, wrong);
    }
}

/// Burden and Faires, Numerical Analysis, "Householder's method", example.
#[test]
fn burden_faires_householder() {
    let problem = real(&[
        &[4, 1, -2, 2],
        &[1, 2, 0, 1],
        &[-2, 0, 3, -2],
        &[2, 1, -2, -1],
    ]);
    let text = "reflector 1: 1 0 0 0; 0 -0.3333 0.6667 -0.6667; 0 0.6667 0.6667 0.3333; \
                0 -0.6667 0.3333 0.6667\n\
                matrix 1: 4 -3 0 0; -3 10/3 1 4/3; 0 1 5/3 -4/3; 0 4/3 -4/3 -1\n\
                matrix 2: 4 -3 0 0; -3 10/3 -5/3 0; 0 -5/3 -33/25 68/75; 0 0 68/75 149/75\n\
                tridiagonal: 4 10/3 -33/25 149/75; -3 -5/3 68/75\n\
                trace: 8";
    checked(
        &problem,
        text,
        &[
            ("0.6667 0.6667 0.3333", "0.6667 0.6667 -0.3333"),
            ("trace: 8", "trace: 6"),
        ],
    );
    expect(
        &problem,
        "matrix 1: 4 -3 0 0; -3 3.333 1 1.333; 0 1 1.667 1.333; 0 1.333 -1.333 -1",
        Word::Refuted,
    );
    expect(
        &problem,
        "tridiagonal: 4 10/3 -33/25 149/75; -3 -5/3 67/75",
        Word::Refuted,
    );
}

/// Gregory and Karney, A Collection of Matrices for Testing Computational
/// Algorithms (1969), chapter 4: eigenvalues 1, 2, 5, 10.
#[test]
fn gregory_karney() {
    let problem = real(&[&[5, 4, 1, 1], &[4, 5, 1, 1], &[1, 1, 4, 2], &[1, 1, 2, 4]]);
    let text = "eigenvalues: 10, 5, 2, 1\n\
                vector for 10: 2 2 1 1\n\
                vector for 5: -1 -1 2 2\n\
                vector for 2: 0 0 -1 1\n\
                vector for 1: -1 1 0 0\n\
                determinant: 100\n\
                trace: 18\n\
                condition: 10\n\
                polynomial: 1 -18 97 -180 100";
    checked(
        &problem,
        text,
        &[
            ("10, 5, 2, 1", "10, 5, 3, 1"),
            ("2 2 1 1", "2 2 1 -1"),
            ("determinant: 100", "determinant: 101"),
            ("-180", "180"),
        ],
    );
}

/// T. S. Wilson's matrix (Morris, Philosophical Magazine 1946): determinant
/// 1, eigenvalues 0.01015, 0.8431, 3.8581, 30.2887, condition 2984.
#[test]
fn wilson() {
    let problem = real(&[
        &[10, 7, 8, 7],
        &[7, 5, 6, 5],
        &[8, 6, 10, 9],
        &[7, 5, 9, 10],
    ]);
    let text = "determinant: 1\n\
                eigenvalues: 0.01015, 0.8431, 3.8581, 30.2887\n\
                condition: 2984.09\n\
                positive: 4";
    checked(
        &problem,
        text,
        &[
            ("0.8431", "0.8341"),
            ("2984.09", "2948.09"),
            ("positive: 4", "positive: 3"),
        ],
    );
}

/// Rosser, Lanczos, Hestenes and Karush 1951.
#[test]
fn rosser() {
    let problem = real(&ROSSER);
    let text = "eigenvalues: 1020.049018430, 1020.000000000, 1019.901951359, \
                1000.000000000 ×2, 0.098048640722, 0.000000000000, -1020.049018430\n\
                zero: 1\n\
                negative: 1\n\
                trace: 4040\n\
                radius: 1020.0490184";
    checked(
        &problem,
        text,
        &[
            ("1000.000000000 ×2", "1000.000000000, 1000.000000001"),
            ("zero: 1", "zero: 0"),
        ],
    );
}

/// Hilbert's matrix of order 3 and 4: condition 524.0568 and 15513.7387
/// (Todd 1954), determinant 1/2160.
#[test]
fn hilbert() {
    let hilbert = |order: usize| {
        let cells = (0..order * order)
            .map(|k| {
                let denominator = (k / order + k % order + 1) as u64;
                ExactReal::from(RBig::from_parts(1.into(), denominator.into()))
            })
            .collect();
        Problem {
            matrix: ExactMatrix::new(order, cells, None),
            metric: None,
        }
    };
    let text = "determinant: 1/2160\n\
                eigenvalues: 1.4083189271, 0.1223270659, 0.0026873404\n\
                condition: 524.0568\n\
                cholesky: 1 0 0; 0.5 0.28868 0; 0.33333 0.28868 0.07454";
    checked(
        &hilbert(3),
        text,
        &[
            ("0.1223270659", "0.1232270659"),
            ("0.07454", "0.07545"),
            ("524.0568", "524.0658"),
        ],
    );
    all_right(&hilbert(4), "condition: 15513.7387");
}

/// Hückel's theory of butadiene and benzene (Streitwieser, Molecular Orbital
/// Theory): ±1.618, ±0.618 with coefficients 0.3717 and 0.6015; 2, 1, 1, −1,
/// −1, −2.
#[test]
fn hueckel() {
    let butadiene = real(&[&[0, 1, 0, 0], &[1, 0, 1, 0], &[0, 1, 0, 1], &[0, 0, 1, 0]]);
    let text = "eigenvalues: 1.618, 0.618, -0.618, -1.618\n\
                vector for 1.618: 0.3717 0.6015 0.6015 0.3717\n\
                vector for 0.618: 0.6015 0.3717 -0.3717 -0.6015\n\
                polynomial: 1 0 -3 0 1";
    checked(
        &butadiene,
        text,
        &[
            ("0.618, -0.618", "0.816, -0.618"),
            ("0.3717 0.6015 0.6015", "0.3171 0.6015 0.6015"),
            ("1 0 -3 0 1", "1 0 -3 0 -1"),
        ],
    );
    let mut rows = vec![vec![0i64; 6]; 6];
    for k in 0..6 {
        rows[k][(k + 1) % 6] = 1;
        rows[(k + 1) % 6][k] = 1;
    }
    let rows: Vec<&[i64]> = rows.iter().map(Vec::as_slice).collect();
    let text = "eigenvalues: 2, 1 ×2, -1 ×2, -2\n\
                vector for 2: 0.408 0.408 0.408 0.408 0.408 0.408\n\
                vector for 1: 0.577 0.289 -0.289 -0.577 -0.289 0.289";
    checked(
        &real(&rows),
        text,
        &[
            ("1 ×2, -1 ×2", "1 ×2, -1, 0"),
            ("0.577 0.289 -0.289", "0.577 0.298 -0.289"),
        ],
    );
}

/// Chopra, Dynamics of Structures, the two-storey shear frame with masses 2m,
/// m and stiffnesses 2k, k (m = k = 1): ω² = 1/2 and 2, modes (1/2, 1) and
/// (−1, 1).
#[test]
fn chopra_two_storeys() {
    let problem = pair(&[&[3, -1], &[-1, 1]], &[&[2, 0], &[0, 1]]);
    let text = "eigenvalues: 1/2, 2\n\
                angular frequencies: 0.7071, 1.4142\n\
                frequencies: 0.1125, 0.2251\n\
                vector 1: 1/2 1\n\
                vector 2: -1 1\n\
                vectors, orthonormal: 0.4082 -0.5774; 0.8165 0.5774";
    checked(
        &problem,
        text,
        &[
            ("0.7071, 1.4142", "0.7071, 1.4242"),
            ("vector 1: 1/2 1", "vector 1: 1/2 -1"),
            ("0.8165 0.5774", "0.8615 0.5774"),
            ("0.1125", "0.1152"),
        ],
    );
}

/// Three equal masses and springs, one end fixed (Thomson, Theory of
/// Vibration): ω = 0.445, 1.247, 1.802.
#[test]
fn three_masses() {
    let problem = real(&[&[2, -1, 0], &[-1, 2, -1], &[0, -1, 1]]);
    let text = "angular frequencies: 0.445, 1.247, 1.802\n\
                eigenvalues: 0.198, 1.555, 3.247\n\
                vector 1: 0.328 0.591 0.737\n\
                vector 2: -0.737 -0.328 0.591\n\
                vector 3: 0.591 -0.737 0.328\n\
                polynomial: 1 -5 6 -1\n\
                cholesky: 1.4142 0 0; -0.7071 1.2247 0; 0 -0.8165 0.5774";
    checked(
        &problem,
        text,
        &[
            ("0.445, 1.247", "0.454, 1.247"),
            ("0.328 0.591 0.737", "0.328 0.519 0.737"),
            ("1.2247", "1.2274"),
            ("1 -5 6 -1", "1 -5 6 1"),
        ],
    );
}

/// Mase, Continuum Mechanics, principal stresses of [[3, 1, 1], [1, 0, 2],
/// [1, 2, 0]]: 4, 1, −2.
#[test]
fn principal_stresses() {
    let problem = real(&[&[3, 1, 1], &[1, 0, 2], &[1, 2, 0]]);
    let text = "eigenvalues: 4, 1, -2\n\
                vector for 4: 2 1 1\n\
                vector for 1: 1 -1 -1\n\
                vector for -2: 0 1 -1\n\
                decomposition: 4 1 -2; 0.8165 0.5774 0; 0.4082 -0.5774 0.7071; 0.4082 -0.5774 -0.7071\n\
                tridiagonal: 3 2 -2; 1.4142 0\n\
                polynomial: -1 3 6 -8";
    checked(
        &problem,
        text,
        &[
            ("4, 1, -2", "4, -1, -2"),
            ("vector for 1: 1 -1 -1", "vector for 1: 1 -1 1"),
            ("0.4082 -0.5774 0.7071", "0.4082 0.5774 0.7071"),
            ("3 6 -8", "3 -6 -8"),
        ],
    );
}

/// The second-difference matrix of order 3 (Strang, Introduction to Linear
/// Algebra): 2 − √2, 2, 2 + √2, determinant 4.
#[test]
fn second_differences() {
    let problem = real(&[&[2, -1, 0], &[-1, 2, -1], &[0, -1, 2]]);
    let text = "eigenvalues, truncated: 0.585, 2.000, 3.414\n\
                vectors, orthonormal: 0.5000 0.7071 0.5000; 0.7071 0 -0.7071; 0.5000 -0.7071 0.5000\n\
                determinant: 4\n\
                condition: 5.828";
    checked(
        &problem,
        text,
        &[
            ("0.585, 2.000", "0.586, 2.000"),
            ("0.7071 0 -0.7071", "0.7071 0 0.7071"),
            ("5.828", "5.282"),
        ],
    );
}

/// Spin 1 (Sakurai, Modern Quantum Mechanics): √2·S_y = [[0, −i, 0], [i, 0,
/// −i], [0, i, 0]] has eigenvalues ±√2 and 0; vectors (1, ±i√2, −1).
#[test]
fn spin_one() {
    let problem = hermitian(&[
        &[(0, 0), (0, -1), (0, 0)],
        &[(0, 1), (0, 0), (0, -1)],
        &[(0, 0), (0, 1), (0, 0)],
    ]);
    let text = "eigenvalues: -1.41421, 0, 1.41421\n\
                vector for 1.41421: 0.500 0.707i -0.500\n\
                vector for -1.41421: 0.500 -0.707i -0.500\n\
                vector for 0: 1 0 1\n\
                determinant: 0\n\
                tridiagonal: 0 0 0; 1 1";
    checked(
        &problem,
        text,
        &[
            ("-1.41421, 0", "-1.41412, 0"),
            ("0.500 0.707i", "0.500 -0.707i"),
            ("vector for 0: 1 0 1", "vector for 0: 1 0 -1"),
            ("0 0 0; 1 1", "0 0 0; 1 2"),
        ],
    );
}

/// A covariance's Cholesky factor in integers: [[4, 12, −16], [12, 37, −43],
/// [−16, −43, 98]] = LLᵀ with L = [[2, 0, 0], [6, 1, 0], [−8, 5, 3]] (a
/// classroom example, no single source).
#[test]
fn integer_factor() {
    let problem = real(&[&[4, 12, -16], &[12, 37, -43], &[-16, -43, 98]]);
    let text = "cholesky: 2 0 0; 6 1 0; -8 5 3\ndeterminant: 36\ntrace: 139";
    checked(
        &problem,
        text,
        &[("-8 5 3", "-8 3 5"), ("36", "63"), ("139", "193")],
    );
}
