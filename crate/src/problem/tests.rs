//! The Hermitian test, the repairs, the scaling and the metric.

use super::*;
use crate::entry::cell::{parse_cell, CellOptions, CellValue, Parameters};
use crate::num::ExactReal;

fn cells(rows: &[&[&str]]) -> Cells {
    let values: Vec<CellValue> = rows
        .iter()
        .flat_map(|row| row.iter())
        .map(|text| {
            parse_cell(text, &Parameters::none(), CellOptions::default())
                .unwrap_or_else(|e| panic!("“{text}”: {e:?}"))
        })
        .collect();
    Cells {
        rows: rows.len(),
        cols: rows.first().map_or(0, |r| r.len()),
        values,
    }
}

fn built(rows: &[&[&str]]) -> Result<Assembly, ProblemError> {
    assemble(cells(rows), None, &Choices::default())
}

fn refused(rows: &[&[&str]]) -> Asymmetry {
    match built(rows) {
        Err(ProblemError::NotHermitian(found)) => found,
        other => panic!("{rows:?}: {other:?}"),
    }
}

fn exact(rows: &[&[&str]]) -> crate::matrix::ExactMatrix {
    built(rows)
        .unwrap_or_else(|e| panic!("{rows:?}: {e}"))
        .problem
        .matrix
}

#[test]
fn exact_values_decide_what_is_hermitian() {
    // Equal numbers in different spelling agree; equal doubles need not.
    assert!(built(&[&["1", "0.50"], &["1/2", "2"]]).is_ok());
    assert!(built(&[&["1", "√8"], &["2√2", "2"]]).is_ok());
    assert!(built(&[&["1", "1+2i"], &["1-2i", "2"]]).is_ok());
    let found = refused(&[
        &["1", "0.1"],
        &["0.1000000000000000055511151231257827", "2"],
    ]);
    assert_eq!(
        (found.count, found.size),
        (1, AsymmetrySize::Rounding),
        "{found:?}"
    );
}

#[test]
fn every_disagreeing_pair_is_listed() {
    let found = refused(&[&["1+i", "2", "3"], &["2", "5", "6"], &["4", "7", "9"]]);
    let places: Vec<_> = found.pairs.iter().map(|p| (p.row, p.col)).collect();
    assert_eq!(places, [(0, 0), (2, 0), (2, 1)]);
    assert_eq!((found.count, found.diagonal, found.largest), (3, 1, 2.0));
    assert_eq!(found.size, AsymmetrySize::Real);
    assert_eq!(
        (found.pairs[1].lower.as_str(), found.pairs[1].upper.as_str()),
        ("4", "3")
    );
    let symmetric_but_complex = refused(&[&["1", "2i"], &["2i", "3"]]);
    assert_eq!(symmetric_but_complex.largest, 4.0);
}

#[test]
fn repairs_are_exact_and_recorded() {
    let rows: &[&[&str]] = &[&["1", "0.1"], &["0.2", "3+i"]];
    for (mirror, expected) in [
        (Mirror::Lower, "0.2"),
        (Mirror::Upper, "0.1"),
        (Mirror::Mean, "3/20"),
    ] {
        let choices = Choices {
            matrix: Some(mirror),
            metric: None,
        };
        let assembly = assemble(cells(rows), None, &choices).unwrap_or_else(|e| panic!("{e}"));
        let a = &assembly.problem.matrix;
        let wanted = cells(&[&[expected]]).values[0].re.clone();
        assert_eq!(
            a.re(1, 0).equals(&wanted),
            Some(true),
            "{mirror:?}: {}",
            a.re(1, 0)
        );
        assert_eq!(a.re(0, 1).equals(&wanted), Some(true), "{mirror:?}");
        assert!(a.im(1, 1).is_zero());
        assert_eq!(assembly.adjustments.len(), 1);
        assert_eq!(assembly.adjustments[0].found.count, 2);
    }
    let choices = Choices {
        matrix: Some(Mirror::Mean),
        metric: None,
    };
    let clean = assemble(cells(&[&["1", "2"], &["2", "1"]]), None, &choices);
    assert!(clean.is_ok_and(|a| a.adjustments.is_empty()));
}

#[test]
fn a_triangle_of_a_complex_matrix_is_conjugated() {
    let rows: &[&[&str]] = &[&["1", "9"], &["2+3i", "1"]];
    let choices = Choices {
        matrix: Some(Mirror::Lower),
        metric: None,
    };
    let a = assemble(cells(rows), None, &choices)
        .unwrap_or_else(|e| panic!("{e}"))
        .problem
        .matrix;
    assert_eq!(a.im(1, 0).nearest(0), 3.0);
    assert_eq!(a.im(0, 1).nearest(0), -3.0);
}

#[test]
fn shapes_are_checked() {
    assert_eq!(
        built(&[&["1", "2"]]).err(),
        Some(ProblemError::NotSquare {
            part: Part::Matrix,
            rows: 1,
            cols: 2
        })
    );
    assert_eq!(built(&[]).err(), Some(ProblemError::Empty(Part::Matrix)));
    let a: &[&[&str]] = &[&["1", "0"], &["0", "1"]];
    let pair = |m: &[&[&str]]| assemble(cells(a), Some(cells(m)), &Choices::default());
    let diagonal = pair(&[&["2", "3"]]).unwrap_or_else(|e| panic!("{e}"));
    let m = diagonal
        .problem
        .metric
        .unwrap_or_else(|| panic!("a metric was given"));
    assert_eq!(
        (
            m.re(0, 0).nearest(0),
            m.re(1, 1).nearest(0),
            m.re(0, 1).nearest(0)
        ),
        (2.0, 3.0, 0.0)
    );
    assert_eq!(
        pair(&[&["1"]]).err(),
        Some(ProblemError::OrderDiffers {
            matrix: 2,
            metric: 1
        })
    );
    assert!(matches!(
        pair(&[&["1", "2"], &["3", "1"]]).err(),
        Some(ProblemError::NotHermitian(Asymmetry {
            part: Part::Metric,
            ..
        }))
    ));
}

#[test]
fn tolerances_are_kept_and_mirrored() {
    let assembly =
        built(&[&["12.5 ± 0.1", "1"], &["1 ± 0.25", "2"]]).unwrap_or_else(|e| panic!("{e}"));
    let t = assembly
        .tolerances
        .unwrap_or_else(|| panic!("tolerances were written"));
    assert_eq!(t.radius(0, 0).nearest(0), 0.1);
    assert_eq!(
        (t.radius(0, 1).nearest(0), t.radius(1, 0).nearest(0)),
        (0.25, 0.25)
    );
    assert!(t.radius(1, 1).is_zero());
    assert!(built(&[&["1"]]).is_ok_and(|a| a.tolerances.is_none()));
}

#[test]
fn the_common_case_is_not_scaled() {
    let plain = built(&[&["2", "-1"], &["-1", "1e-60"]]).unwrap_or_else(|e| panic!("{e}"));
    assert_eq!(plain.problem.rounded().matrix_scale, 0);
    for (text, scale) in [
        ("1e300", 997),
        ("1e-300", -996),
        ("5e-324", -1073),
        ("1.7e308", 1024),
    ] {
        let rounded = exact(&[&[text]]);
        let rounded = Problem {
            matrix: rounded,
            metric: None,
        }
        .rounded();
        assert_eq!(rounded.matrix_scale, scale, "{text}");
        let x = rounded.matrix.re[(0, 0)];
        assert!((0.5..1.0).contains(&x), "{text} scaled to {x}");
    }
}

#[test]
fn expansions_of_a_matrix_leave_out_what_is_zero() {
    let whole = exact(&[&["1", "2"], &["2", "1/4"]]).expansion(0);
    assert!(whole.lo.is_none() && whole.bound.is_none());
    let tenths = exact(&[&["0.1"]]).expansion(0);
    let lo = tenths.lo.map(|lo| lo.re[(0, 0)]);
    assert_eq!(
        lo,
        Some(
            ExactReal::Decimal {
                digits: 1,
                exponent: -1
            }
            .expansion(0)
            .lo
        )
    );
    assert!(tenths.bound.is_some());
}

fn fault(rows: &[&[&str]]) -> MetricFault {
    match metric_check(&exact(rows)) {
        MetricVerdict::NotPositive(fault) => fault,
        positive => panic!("{rows:?}: {positive:?}"),
    }
}

#[test]
fn a_metric_that_fails_names_its_block() {
    let negative = fault(&[&["1", "2"], &["2", "1"]]);
    assert_eq!((negative.block, negative.pivot), (2, -3.0));
    assert_eq!(negative.certainty, metric::Certainty::Proven);
    let singular = fault(&[&["1", "i"], &["-i", "1"]]);
    assert_eq!((singular.block, singular.pivot), (2, 0.0));
    let first = fault(&[&["-4", "0"], &["0", "1"]]);
    assert_eq!((first.block, first.pivot), (1, -4.0));
    // Irrational entries take the road in doubles, with a witness.
    let irrational = fault(&[&["1", "√2"], &["√2", "1"]]);
    assert_eq!(
        (irrational.block, irrational.certainty),
        (2, metric::Certainty::Proven)
    );
}

#[test]
fn the_last_bit_decides_a_rational_metric() {
    let positive = exact(&[&["1", "1"], &["1", "1.000000000000000000000000000001"]]);
    match metric_check(&positive) {
        MetricVerdict::Positive {
            certainty,
            digits_lost,
        } => {
            assert_eq!((certainty, digits_lost), (metric::Certainty::Proven, 29));
            assert!(metric_check(&positive).warning().is_some());
        }
        other => panic!("{other:?}"),
    }
    let negative = fault(&[&["1", "1"], &["1", "0.999999999999999999999999999999"]]);
    assert_eq!(negative.block, 2);
}

#[test]
fn a_large_metric_fails_with_a_witness() {
    // Second differences are positive definite; the last diagonal entry is
    // then lowered so that the last pivot is −1/2.
    let n = 40usize;
    let build = |last: f64| {
        let re = (0..n * n)
            .map(|k| match (k / n, k % n) {
                (r, c) if r == c && r == n - 1 => ExactReal::Binary(last),
                (r, c) if r == c => ExactReal::from(2),
                (r, c) if r.abs_diff(c) == 1 => ExactReal::from(-1),
                _ => ExactReal::ZERO,
            })
            .collect();
        metric_check(&crate::matrix::ExactMatrix::new(n, re, None))
    };
    assert!(matches!(build(2.0), MetricVerdict::Positive { .. }));
    // The pivot before the last is n/(n−1), so the last is 0.475 − (n−1)/n.
    match build(0.475) {
        MetricVerdict::NotPositive(fault) => {
            assert_eq!(
                (fault.block, fault.certainty),
                (n, metric::Certainty::Proven)
            );
            assert!((fault.pivot + 0.5).abs() < 1e-12, "{fault:?}");
        }
        other => panic!("{other:?}"),
    }
}
