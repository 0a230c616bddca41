//! Whatever is claimed of whatever problem: a verdict or an error, never a panic
//! or a contradiction.

use super::*;

/// Claims of every kind and several shapes against problems of every small
/// order: a verdict or an error, never a panic.
#[test]
fn any_claim_meets_any_problem() {
    let heads = [
        "eigenvalue",
        "eigenvalue 2",
        "eigenvalues",
        "some eigenvalues",
        "frequency",
        "frequencies",
        "angular frequencies",
        "vector",
        "vector 2",
        "vector for 1.0",
        "vectors",
        "vectors, orthonormal",
        "decomposition",
        "tridiagonal",
        "tridiagonal with Q",
        "reflector 1",
        "reflector 2",
        "reflector 1 scalar 1",
        "matrix 1",
        "matrix 2",
        "cholesky",
        "polynomial",
        "determinant",
        "trace",
        "positive",
        "negative",
        "zero",
        "condition",
        "radius",
        "output",
        "eigenvalues, truncated",
        "eigenvalues, 3 figures",
    ];
    let bodies = [
        "0",
        "1.5",
        "1 2",
        "0 0 0",
        "1.0i 2",
        "1 2; 3 4",
        "1 2; 0 1; 1 0",
        "0 0; 0 0",
        "1 2 3; 4 5 6; 7 8 9",
        "1 2 3; 1 2",
        "1 1 1; 0.1 0.2 0.3; 0 0 1; 1 0 0",
        "1e300 -1e-300",
    ];
    let problems = [
        real(&[&[3]]),
        real(&[&[0]]),
        real(&[&[1, 2], &[2, -1]]),
        real(&[&[0, 0], &[0, 0]]),
        pair(&[&[2, -1], &[-1, 1]], &[&[2, 1], &[1, 3]]),
        real(&[&[4, 1, 2], &[1, 3, 0], &[2, 0, 1]]),
        real(&[&[1, 0, 0], &[0, 1, 0], &[0, 0, 1]]),
        hermitian(&[
            &[(1, 0), (0, -3), (4, 0)],
            &[(0, 3), (2, 0), (0, 0)],
            &[(4, 0), (0, 0), (7, 0)],
        ]),
    ];
    let mut judged = 0;
    for problem in &problems {
        let mut exact = evidence(problem);
        let mut nothing = Evidence::enclosed(Vec::new(), None);
        for head in heads {
            for body in bodies {
                let Ok(claim) = read(&format!("{head}: {body}")) else {
                    continue;
                };
                let verdict = judge(&claim, problem, &mut exact);
                assert!(!verdict.sentence.is_empty(), "{head}: {body}");
                let blind = judge(&claim, problem, &mut nothing);
                // Without evidence nothing may contradict what exact evidence says.
                let contradicts = matches!(
                    (verdict.word, blind.word),
                    (Word::Confirmed, Word::Refuted) | (Word::Refuted, Word::Confirmed)
                );
                assert!(!contradicts, "{head}: {body}\n{verdict:#?}\n{blind:#?}");
                judged += 1;
            }
        }
    }
    assert!(judged > 800, "only {judged} claims were judged");
}

proptest::proptest! {
    #[test]
    fn reading_never_panics(text in "\\PC{0,80}", head in "[a-z]{1,12}( [0-9]{1,3})?(, [a-z ]{1,9})?") {
        for part in crate::claim::split(&text) {
            proptest::prop_assert!(!part.is_empty());
        }
        for claim in [text.clone(), format!("{head}: {text}"), format!("eigenvalues: {text}")] {
            if let Err(error) = read(&claim) {
                proptest::prop_assert!(!error.to_string().is_empty());
            }
        }
    }
}
