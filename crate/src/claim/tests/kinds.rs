//! Each kind of claim, right and wrong, by hand.

use super::*;
use crate::claim::{ClaimError, Freedom};

/// [[2, 1], [1, 3]]: λ = (5 ± √5)/2 = 1.381966…, 3.618033….
fn golden() -> Problem {
    real(&[&[2, 1], &[1, 3]])
}

#[test]
fn stated_digits_decide() {
    let problem = golden();
    expect(&problem, "eigenvalues: 1.382, 3.618", Word::Confirmed);
    expect(&problem, "eigenvalues: 3.618 1.382", Word::Confirmed);
    expect(
        &problem,
        "eigenvalues, truncated: 1.381, 3.618",
        Word::Confirmed,
    );
    expect(&problem, "eigenvalues: 1.381, 3.618", Word::Refuted);
    expect(
        &problem,
        "eigenvalues, truncated: 1.382, 3.618",
        Word::Refuted,
    );
    expect(
        &problem,
        "eigenvalues: 1.4 ± 0.02, 3.6 ± 0.02",
        Word::Confirmed,
    );
    expect(
        &problem,
        "eigenvalues: 1.4 ± 0.01, 3.6 ± 0.02",
        Word::Refuted,
    );
    expect(
        &problem,
        "eigenvalues, 2 figures: 1.40, 3.60",
        Word::Confirmed,
    );
    expect(
        &problem,
        "eigenvalues: 1.38197(1), 3.61803(1)",
        Word::Confirmed,
    );
    expect(&problem, "eigenvalues, exact: 1.382, 3.618", Word::Refuted);
    expect(
        &problem,
        "eigenvalue: 3.6180339887498948482045868343656381",
        Word::Confirmed,
    );
    expect(
        &problem,
        "eigenvalue: 3.6180339887498948482045868343656382",
        Word::Refuted,
    );
}

#[test]
fn places_and_extent() {
    let problem = golden();
    expect(&problem, "eigenvalue 2: 3.618", Word::Confirmed);
    expect(&problem, "eigenvalue 1: 3.618", Word::Refuted);
    expect(&problem, "eigenvalue 3: 3.618", Word::Refuted);
    expect(&problem, "eigenvalues: 3.618", Word::Refuted);
    expect(&problem, "some eigenvalues: 3.618", Word::Confirmed);
    expect(&problem, "eigenvalues: 1.382, 1.382, 3.618", Word::Refuted);
}

#[test]
fn multiplicities_count() {
    // The ring of five: 2, (−1 + √5)/2 twice, (−1 − √5)/2 twice.
    let problem = real(&[
        &[0, 1, 0, 0, 1],
        &[1, 0, 1, 0, 0],
        &[0, 1, 0, 1, 0],
        &[0, 0, 1, 0, 1],
        &[1, 0, 0, 1, 0],
    ]);
    expect(
        &problem,
        "eigenvalues: 2, 0.618 ×2, -1.618 ×2",
        Word::Confirmed,
    );
    expect(&problem, "eigenvalues: 2, 0.618 ×3, -1.618", Word::Refuted);
    let verdict = expect(&problem, "eigenvalues: 2, 0.618, -1.618", Word::Refuted);
    let missing = verdict
        .findings
        .iter()
        .filter(|f| f.kind == FindingKind::Missing)
        .count();
    assert_eq!(missing, 2, "{verdict:#?}");
}

#[test]
fn invariants_tell_or_do_not() {
    // Sum kept, product not.
    let verdict = expect(&golden(), "eigenvalues: 1.400, 3.600", Word::Refuted);
    let texts: Vec<&str> = verdict
        .findings
        .iter()
        .filter(|f| f.kind == FindingKind::Invariant)
        .map(|f| f.text.as_str())
        .collect();
    assert!(
        texts[0].starts_with("The trace could not have told"),
        "{texts:?}"
    );
    assert!(
        texts[1].starts_with("The determinant could have told"),
        "{texts:?}"
    );
}

#[test]
fn wide_boxes_are_matched_as_well_as_can_be() {
    // 1 and 3 against boxes [0, 4] and [0.5, 1.5]: only one matching works.
    let problem = real(&[&[2, 1], &[1, 2]]);
    expect(&problem, "eigenvalues: 2 ± 2, 1 ± 0.5", Word::Confirmed);
    expect(&problem, "eigenvalues: 1 ± 0.5, 2 ± 2", Word::Confirmed);
    expect(&problem, "eigenvalues: 1 ± 0.5, 0.9 ± 0.5", Word::Refuted);
}

#[test]
fn frequencies_are_readings_of_eigenvalues() {
    // λ = 4 and 9: ω = 2, 3; f = 0.318309886…, 0.477464829….
    let problem = real(&[&[4, 0], &[0, 9]]);
    expect(&problem, "angular frequencies: 2, 3", Word::Confirmed);
    expect(&problem, "angular frequency 1: 2.1", Word::Refuted);
    expect(&problem, "frequencies: 0.31831, 0.47746", Word::Confirmed);
    expect(&problem, "frequency 2: 0.47747", Word::Refuted);
    expect(&problem, "frequency 2: 0.477464829275686", Word::Confirmed);
    let negative = real(&[&[-4, 0], &[0, 9]]);
    expect(&negative, "frequency 1: 0.318", Word::Refuted);
}

#[test]
fn vectors_of_any_scale() {
    let problem = golden();
    // (1, (1 + √5)/2)
    expect(&problem, "vector for 3.618: 1.000 1.618", Word::Confirmed);
    let verdict = expect(&problem, "vector: -0.526 -0.851", Word::Confirmed);
    assert!(verdict.freedoms.contains(&Freedom::Scale));
    expect(&problem, "vector: 1.00 1.64", Word::Refuted);
    expect(&problem, "vector for 1.382: 1.000 1.618", Word::Refuted);
    expect(&problem, "vector 1: 1.618 -1.000", Word::Confirmed);
    expect(&problem, "vector: 0 0", Word::Refuted);
    expect(&problem, "vector: 1 2 3", Word::Refuted);
    expect(&problem, "vector: 1 2", Word::Refuted);
}

#[test]
fn exact_vectors_are_decided_exactly() {
    let problem = real(&[&[2, 1, 0], &[1, 2, 0], &[0, 0, 3]]);
    expect(&problem, "vector for 3: 1 1 0", Word::Confirmed);
    // 3 is double: any combination will do.
    expect(&problem, "vector for 3: 5 5 -7", Word::Confirmed);
    expect(&problem, "vector for 1: 1 1 0", Word::Refuted);
    expect(&problem, "vector: 1 1 1/1000000", Word::Confirmed);
    expect(&problem, "vector: 1000001/1000000 1 0", Word::Refuted);
}

#[test]
fn any_basis_of_a_repeated_space() {
    let problem = real(&[&[2, 1, 0], &[1, 2, 0], &[0, 0, 3]]);
    let verdict = expect(
        &problem,
        "vector for 3.000: 0.42 0.42 0.80",
        Word::Confirmed,
    );
    assert!(verdict.freedoms.contains(&Freedom::Basis), "{verdict:#?}");
    expect(&problem, "vector for 3.000: 0.42 0.44 0.80", Word::Refuted);
    let vectors = "vectors, orthonormal: 0.7071 0.5000 0.5000; -0.7071 0.5000 0.5000; \
                   0.0000 0.7071 -0.7071";
    expect(&problem, vectors, Word::Confirmed);
    let skew = "vectors, orthonormal: 0.7071 0.7071 0.5000; -0.7071 0.7071 0.5000; \
                0.0000 0.0000 -0.7071";
    expect(&problem, skew, Word::Refuted);
    expect(&problem, "vectors: 1 1 1; -1 1 1; 0 0 5", Word::Confirmed);
    expect(&problem, "vectors: 1 1 2; -1 1 2; 0 0 0", Word::Refuted);
    expect(
        &problem,
        "vectors: 1.00 1.00 0; -1.00 -1.02 0; 0 0 1.00",
        Word::Refuted,
    );
}

#[test]
fn complex_vectors_have_a_phase() {
    // [[0, −i], [i, 0]]: (1, i) for 1, (1, −i) for −1.
    let problem = hermitian(&[&[(0, 0), (0, -1)], &[(0, 1), (0, 0)]]);
    expect(&problem, "vector for 1: 1 i", Word::Confirmed);
    expect(
        &problem,
        "vector for 1: 0.500+0.500i -0.500+0.500i",
        Word::Confirmed,
    );
    expect(
        &problem,
        "vector for 1: 0.500+0.500i 0.500-0.500i",
        Word::Refuted,
    );
    expect(&problem, "vector for -1: 1 -i", Word::Confirmed);
    expect(&problem, "vector for -1: 1 i", Word::Refuted);
}

#[test]
fn decompositions() {
    let right = "decomposition: 1.382 3.618; -0.8507 0.5257; 0.5257 0.8507";
    expect(&golden(), right, Word::Confirmed);
    let value = "decomposition: 1.382 3.628; -0.8507 0.5257; 0.5257 0.8507";
    expect(&golden(), value, Word::Refuted);
    let exchanged = "decomposition: 3.618 1.382; -0.8507 0.5257; 0.5257 0.8507";
    expect(&golden(), exchanged, Word::Refuted);
    let long = "decomposition: 1.382 3.618; -0.8507 1.000; 0.5257 1.618";
    expect(&golden(), long, Word::Refuted);
}

#[test]
fn pairs() {
    // Two storeys: 2λ² − 4λ + 1 = 0, λ = 1 ± √2/2 = 0.292893, 1.707107.
    let problem = pair(&[&[2, -1], &[-1, 1]], &[&[2, 0], &[0, 1]]);
    expect(&problem, "eigenvalues: 0.2929, 1.7071", Word::Confirmed);
    expect(
        &problem,
        "vector for 0.2929: 0.7071 1.0000",
        Word::Confirmed,
    );
    expect(&problem, "vector for 0.2929: 0.7071 1.0200", Word::Refuted);
    expect(&problem, "polynomial: 1 -2 1/2", Word::Confirmed);
    expect(
        &problem,
        "tridiagonal: 1.0000 1.0000; 0.7071",
        Word::Confirmed,
    );
    expect(&problem, "cholesky: 1.4142 0; 0 1", Word::Confirmed);
    // Lengths in the metric: 2·0.5² + 0.7071² = 1.
    let right = "vectors, orthonormal: 0.5000 0.5000; 0.7071 -0.7071";
    expect(&problem, right, Word::Confirmed);
    let plain = "vectors, orthonormal: 0.5774 0.5774; 0.8165 -0.8165";
    expect(&problem, plain, Word::Refuted);
}

#[test]
fn scalars() {
    let problem = golden();
    expect(&problem, "determinant: 5", Word::Confirmed);
    expect(&problem, "determinant: 6", Word::Refuted);
    expect(&problem, "trace: 5", Word::Confirmed);
    expect(&problem, "trace: -5", Word::Refuted);
    expect(&problem, "positive: 2", Word::Confirmed);
    expect(&problem, "negative: 1", Word::Refuted);
    expect(&problem, "zero: 0", Word::Confirmed);
    // (3 + √5)/2
    expect(&problem, "condition: 2.618", Word::Confirmed);
    expect(&problem, "condition: 2.628", Word::Refuted);
    expect(&problem, "radius: 3.618", Word::Confirmed);
    let singular = real(&[&[1, 1], &[1, 1]]);
    expect(&singular, "condition: 1000000.0", Word::Refuted);
    expect(&singular, "zero: 1", Word::Confirmed);
    expect(&real(&[&[-5, 0], &[0, 1]]), "radius: 5", Word::Confirmed);
}

#[test]
fn polynomials_in_either_sign() {
    let problem = real(&[&[4, 1, 2], &[1, 3, 0], &[2, 0, 1]]);
    // λ³ − 8λ² + 14λ + 1: minors 11 + 0 + 3 and determinant −1.
    let verdict = expect(&problem, "polynomial: 1 -8 14 1", Word::Confirmed);
    assert!(verdict.freedoms.contains(&Freedom::PolynomialSign));
    expect(&problem, "polynomial: -1 8 -14 -1", Word::Confirmed);
    expect(&problem, "polynomial: 1 -8 14 2", Word::Refuted);
    expect_cause(&problem, "polynomial: 1 -8 14 -1", "the sign is wrong");
    expect(&problem, "polynomial: 1 -8 14", Word::Refuted);
}

#[test]
fn cholesky_factors() {
    let problem = real(&[&[4, 2], &[2, 3]]);
    expect(&problem, "cholesky: 2 0; 1 1.4142", Word::Confirmed);
    expect(&problem, "cholesky: 2 1; 0 1.4142", Word::Confirmed);
    expect(&problem, "cholesky: -2 0; -1 1.4142", Word::Confirmed);
    expect(&problem, "cholesky: 2 0; -1 1.4142", Word::Refuted);
    expect(
        &real(&[&[1, 2], &[2, 1]]),
        "cholesky: 1 0; 2 1.7",
        Word::Refuted,
    );
    expect(
        &real(&[&[9, 3], &[3, 5]]),
        "cholesky: 3 0; 1 2",
        Word::Confirmed,
    );
}

#[test]
fn enclosures_serve_where_the_exact_road_is_closed() {
    use crate::claim::EnclosedValue;
    let problem = golden();
    let around = |digits: u32| {
        // √5 = 2.236067977…: both values within 10^−digits.
        let power = dashu_int::UBig::from(10u8).pow(digits as usize);
        let root = RBig::from_parts(
            dashu_base::SquareRoot::sqrt(&(dashu_int::UBig::from(5u8) * &power * &power)).into(),
            power.clone(),
        );
        let step = RBig::from_parts(1.into(), power);
        let value = |middle: RBig, first| EnclosedValue {
            lower: &middle - &step,
            upper: middle + &step,
            first,
            count: 1,
        };
        vec![
            value((RBig::from(5) - &root) / RBig::from(2), 0),
            value((RBig::from(5) + root) / RBig::from(2), 1),
        ]
    };
    let judged = |text: &str, cap: u32| {
        let mut digits = 2;
        let deepen = move || {
            digits += 4;
            (digits <= cap).then(|| around(digits))
        };
        let mut evidence = Evidence::enclosed(around(2), Some(Box::new(deepen)));
        judge(&read(text).expect("a claim"), &problem, &mut evidence).word
    };
    assert_eq!(judged("eigenvalues: 1.38, 3.62", 2), Word::Undecided);
    assert_eq!(judged("eigenvalues: 1.38, 3.62", 6), Word::Confirmed);
    assert_eq!(
        judged("eigenvalues: 1.381966, 3.618034", 10),
        Word::Confirmed
    );
    assert_eq!(judged("eigenvalues: 1.381967, 3.618034", 10), Word::Refuted);
    assert_eq!(judged("determinant: 5.00000 ± 0.001", 10), Word::Confirmed);
    assert_eq!(judged("polynomial: 1 -5.000 5.000", 10), Word::Confirmed);
    assert_eq!(judged("tridiagonal: 2.0 3.0; 1.0", 10), Word::Confirmed);
    assert_eq!(judged("positive: 2", 2), Word::Confirmed);
    // An exact value cannot be told from its enclosure.
    assert_eq!(judged("determinant: 5", 10), Word::Undecided);
}

#[test]
fn unreadable_claims_name_the_place() {
    let error = |text: &str| read(text).map(|_| ()).expect_err(text);
    assert_eq!(
        error("eigenvalues:"),
        ClaimError::NoFigures {
            head: "eigenvalues".into()
        }
    );
    assert_eq!(
        error("eigenvalues: 1.2, x"),
        ClaimError::Figure {
            line: 1,
            place: 2,
            text: "x".into()
        }
    );
    assert_eq!(
        error("matrix 1:\n1 2\n3 4?"),
        ClaimError::Figure {
            line: 3,
            place: 2,
            text: "4?".into()
        }
    );
    assert!(matches!(error("hello: 1"), ClaimError::UnknownKind { .. }));
    assert!(matches!(
        error("eigenvalues, about: 1"),
        ClaimError::UnknownOption { .. }
    ));
    assert!(matches!(
        error("matrix 1: 1 2; 3"),
        ClaimError::Shape { .. }
    ));
    assert!(matches!(error("trace: 1 2"), ClaimError::Shape { .. }));
    assert!(matches!(error(""), ClaimError::UnknownKind { .. }));
    for text in [
        "eigenvalue: 1e99999",
        "eigenvalue: 1/0",
        "eigenvalue: 1?",
        "vector for: 1 2",
    ] {
        assert!(read(text).is_err(), "{text}");
    }
}

#[test]
fn figures_in_every_form() {
    let problem = golden();
    for text in [
        "eigenvalues: [1.382, 3.618]",
        "eigenvalues:\n1.382\n3.618\n",
        "eigenvalues: 1.382\t3.618",
        "EIGENVALUES: 1.382 | 3.618",
        "eigenvalues: 1.382 & 3.618 \\\\",
        "eigenvalues: 0.1382e1; 36.18e-1",
    ] {
        expect(&problem, text, Word::Confirmed);
    }
    expect(&real(&[&[-2]]), "eigenvalue: −2", Word::Confirmed);
    expect(&problem, "tridiagonal: [[2, 1], [1, 3]]", Word::Confirmed);
}

/// Doubles of a solver for [[2, 1], [1, 3]], and the same with one digit
/// altered.
#[test]
fn outside_output_is_measured() {
    let problem = golden();
    let right = "output: 1.381966011250105 3.618033988749895; \
                 -0.8506508083520399 0.5257311121191337; 0.5257311121191337 0.8506508083520399";
    let verdict = expect(&problem, right, Word::Confirmed);
    for item in &verdict.items {
        let digits = item
            .off_by
            .as_deref()
            .and_then(|text| text.split(' ').next());
        let digits: i32 = digits
            .and_then(|d| d.parse().ok())
            .expect("a count of digits");
        assert!((15..=17).contains(&digits), "{item:#?}");
    }
    let altered = right.replace("3.618033988749895", "3.618033988759895");
    let verdict = expect(&problem, &altered, Word::Refuted);
    assert_eq!(
        verdict.items[1].off_by.as_deref(),
        Some("11 digits right"),
        "{verdict:#?}"
    );
    let skew = right.replace("0.8506508083520399;", "0.8506508083530399;");
    expect(
        &problem,
        &skew.replacen("-0.8506508083520399", "-0.8506508083530399", 1),
        Word::Refuted,
    );
    expect(
        &problem,
        "output: 3.618033988749895 1.381966011250105",
        Word::Confirmed,
    );
    expect(
        &problem,
        "output: 3.618033988749895\n1.381966011250105",
        Word::Confirmed,
    );
    expect(
        &problem,
        "output: 3.618033988749895 1.381966011150105",
        Word::Refuted,
    );
    let storeys = pair(&[&[3, -1], &[-1, 1]], &[&[2, 0], &[0, 1]]);
    let right = "output: 0.5 2; 0.408248290463863 -0.5773502691896257; \
                 0.816496580927726 0.5773502691896257";
    expect(&storeys, right, Word::Confirmed);
    expect(
        &storeys,
        &right.replace("0.5 2;", "0.5 2.0000001;"),
        Word::Refuted,
    );
}

#[test]
fn closed_forms_and_every_form_of_entry() {
    let problem = golden();
    expect(
        &problem,
        "eigenvalues: (5 + √5)/2, (5 - √5)/2",
        Word::Confirmed,
    );
    expect(
        &problem,
        "eigenvalues: (5 + √5)/2, (5 - √6)/2",
        Word::Refuted,
    );
    let rows = real(&[&[2, 1, 0], &[1, 3, 0], &[0, 0, 4]]);
    for text in [
        "vectors: \\begin{pmatrix} 0.8507 & 0.5257 & 0 \\\\ -0.5257 & 0.8507 & 0 \\\\ 0 & 0 & 1 \\end{pmatrix}",
        "vectors: <table><tr><td>0.8507</td><td>0.5257</td><td>0</td></tr><tr><td>-0.5257</td>\
         <td>0.8507</td><td>0</td></tr><tr><td>0</td><td>0</td><td>1</td></tr></table>",
        "vectors:\n%%MatrixMarket matrix array real general\n3 3\n0.8507\n-0.5257\n0\n0.5257\n0.8507\n0\n0\n0\n1\n",
    ] {
        expect(&rows, text, Word::Confirmed);
        let wrong = text.replacen("0.8507", "0.8570", 1);
        assert_ne!(wrong, text);
        expect(&rows, &wrong, Word::Refuted);
    }
}
