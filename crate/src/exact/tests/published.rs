//! Matrices whose spectra are published.

use dashu_base::Sign;

use super::*;
use crate::matrix::published::ROSSER;

/// Rosser 1951 (Rosser, Lanczos, Hestenes, Karush, J. Res. NBS 47, 291; from
/// memory): eigenvalues 10√10405, 1020, 510 ± 100√26, 1000 twice, 0, −10√10405.
#[test]
fn rosser() {
    let problem = real(&ROSSER);
    let result = spectrum_of(&problem);
    expect_forms(
        &result,
        &[
            ("−10√10405", 1),
            ("0", 1),
            ("510 − 100√26", 1),
            ("1000", 2),
            ("510 + 100√26", 1),
            ("1020", 1),
            ("10√10405", 1),
        ],
    );
}

/// Clement's (Kac's) matrix, off-diagonals √(k(n−k)): eigenvalues n−1, n−3, …,
/// −(n−1) (Clement 1959). Its similar unsymmetric form is integral; here the
/// exact road gets it as a pair: M = diag of binomials makes it symmetric.
#[test]
fn clement() {
    for order in [2usize, 5, 8, 12] {
        // B has k+1 above and n−1−k below the diagonal; D·B is symmetric for
        // D = diag(C(n−1, k)), and (DB, D) has B's eigenvalues.
        let last = order as i64 - 1;
        let mut weights = vec![1i64];
        for k in 0..last {
            weights.push(weights[k as usize] * (last - k) / (k + 1));
        }
        let mut rows = vec![vec![RBig::ZERO; order]; order];
        let mut metric = rows.clone();
        for k in 0..order {
            metric[k][k] = ratio(weights[k], 1);
            if k + 1 < order {
                let coupling = ratio(weights[k] * (last - k as i64), 1);
                rows[k][k + 1] = coupling.clone();
                rows[k + 1][k] = coupling;
            }
        }
        let problem = Problem {
            matrix: matrix(&rows),
            metric: Some(matrix(&metric)),
        };
        let result = spectrum_of(&problem);
        for (k, square) in result.tridiagonal.squares.iter().enumerate() {
            let k = k as i64 + 1;
            assert_eq!(
                *square,
                ratio(k * (order as i64 - k), 1),
                "order {order}, row {k}"
            );
        }
        let values: Vec<_> = result
            .eigenvalues
            .iter()
            .map(|e| e.root.exact().cloned())
            .collect();
        let expected: Vec<_> = (0..order as i64)
            .map(|k| Some(ratio(2 * k - last, 1)))
            .collect();
        assert_eq!(values, expected, "order {order}");
    }
}

/// Hilbert matrices: det of order 4 is 1/6048000, of order 5
/// 1/266716800000 (Todd 1954; from memory), all eigenvalues positive.
#[test]
fn hilbert() {
    for (order, reciprocal) in [(4usize, 6_048_000u64), (5, 266_716_800_000)] {
        let rows: Vec<Vec<RBig>> = (0..order)
            .map(|i| (0..order).map(|j| ratio(1, (i + j + 1) as u64)).collect())
            .collect();
        let result = spectrum_of(&Problem {
            matrix: matrix(&rows),
            metric: None,
        });
        let sign = if order % 2 == 0 {
            ratio(1, 1)
        } else {
            ratio(-1, 1)
        };
        assert_eq!(
            &result.characteristic[0] * sign,
            ratio(1, reciprocal),
            "order {order}"
        );
        assert!(
            result.eigenvalues[0].root.lower() >= RBig::ZERO,
            "order {order}"
        );
    }
}

/// The symmetric Pascal matrix has determinant 1, and its eigenvalues come in
/// reciprocal pairs (Brawer and Pirovino 1992), so its characteristic
/// polynomial is a palindrome; order 3 has 4 ± √15 and 1.
#[test]
fn pascal() {
    for order in [3usize, 6, 9] {
        let mut rows = vec![vec![RBig::ONE; order]; order];
        for i in 1..order {
            for j in 1..order {
                rows[i][j] = &rows[i - 1][j] + &rows[i][j - 1];
            }
        }
        let result = spectrum_of(&Problem {
            matrix: matrix(&rows),
            metric: None,
        });
        let coefficients = &result.characteristic;
        for power in 0..=order {
            let (a, b) = (&coefficients[power], &coefficients[order - power]);
            let same = if order % 2 == 0 {
                a == b
            } else {
                *a == -b.clone()
            };
            assert!(same, "order {order}, power {power}: {a} and {b}");
        }
        if order == 3 {
            expect_forms(&result, &[("4 − √15", 1), ("1", 1), ("4 + √15", 1)]);
        }
    }
}

/// Wilkinson's W21+ (The Algebraic Eigenvalue Problem, chapter 5, from
/// memory): the largest two are 10.746194182903…, agreeing to 15 figures, yet
/// distinct; 21 simple eigenvalues.
#[test]
fn wilkinson_twenty_one() {
    let order = 21usize;
    let mut rows = vec![vec![RBig::ZERO; order]; order];
    for k in 0..order {
        rows[k][k] = ratio((k as i64 - 10).abs(), 1);
        if k + 1 < order {
            rows[k][k + 1] = RBig::ONE;
            rows[k + 1][k] = RBig::ONE;
        }
    }
    let mut result = spectrum_of(&Problem {
        matrix: matrix(&rows),
        metric: None,
    });
    assert!(result.eigenvalues.iter().all(|e| e.multiplicity == 1));
    assert_eq!(result.eigenvalues.len(), order);
    result.refine(80);
    let pair = &result.eigenvalues[19..];
    let printed = RBig::from_parts(IBig::from(10_746_194_182_903i64), UBig::from(10u8).pow(12));
    for eigenvalue in pair {
        let (low, high) = (eigenvalue.root.lower(), eigenvalue.root.upper());
        assert!(printed < low && high < &printed + ratio(1, 1_000_000_000_000));
    }
    let gap = pair[1].root.lower() - pair[0].root.upper();
    assert!(
        gap > RBig::ZERO && gap < ratio(1, 10_000_000_000_000),
        "gap {gap}"
    );
}

/// Hückel's annulenes: the ring of n has eigenvalues 2cos(2πk/n) (Hückel
/// 1931), twice each but for ±2.
#[test]
fn annulenes() {
    let cases: [(usize, &[(&str, usize)]); 5] = [
        (4, &[("−2", 1), ("0", 2), ("2", 1)]),
        (5, &[("(−1 − √5)/2", 2), ("(−1 + √5)/2", 2), ("2", 1)]),
        (6, &[("−2", 1), ("−1", 2), ("1", 2), ("2", 1)]),
        (8, &[("−2", 1), ("−√2", 2), ("0", 2), ("√2", 2), ("2", 1)]),
        (
            12,
            &[
                ("−2", 1),
                ("−√3", 2),
                ("−1", 2),
                ("0", 2),
                ("1", 2),
                ("√3", 2),
                ("2", 1),
            ],
        ),
    ];
    for (order, expected) in cases {
        let mut rows = vec![vec![RBig::ZERO; order]; order];
        for k in 0..order {
            rows[k][(k + 1) % order] = RBig::ONE;
            rows[(k + 1) % order][k] = RBig::ONE;
        }
        expect_forms(
            &spectrum_of(&Problem {
                matrix: matrix(&rows),
                metric: None,
            }),
            expected,
        );
    }
}

/// Ring of seven: 2cos(2π/7) is a root of x³ + x² − 2x − 1 and has no
/// quadratic form; the cubic is named.
#[test]
fn cubic_is_named_where_there_is_no_closed_form() {
    let order = 7usize;
    let mut rows = vec![vec![RBig::ZERO; order]; order];
    for k in 0..order {
        rows[k][(k + 1) % order] = RBig::ONE;
        rows[(k + 1) % order][k] = RBig::ONE;
    }
    let result = spectrum_of(&Problem {
        matrix: matrix(&rows),
        metric: None,
    });
    expect_forms(&result, &[("none", 2), ("none", 2), ("none", 2), ("2", 1)]);
    let cubic: Vec<IBig> = [-1, -2, 1, 1].iter().map(|&c| IBig::from(c)).collect();
    for eigenvalue in &result.eigenvalues[..3] {
        assert_eq!(eigenvalue.root.polynomial().coefficients(), cubic);
    }
    assert_eq!(
        result.eigenvalues[0].root.upper().numerator().sign(),
        Sign::Negative
    );
}
