//! Sensitivities against differences of exactly known eigenvalues.

use super::*;
use crate::control::Unattended;
use crate::document::{problem, ProblemDocument};
use crate::ledger::Silent;
use crate::problem::Assembly;
use crate::solve::solve;

fn solved(matrix: &str, metric: Option<&str>) -> (Assembly, Approximation, i32) {
    let document = ProblemDocument {
        matrix: matrix.into(),
        metric: metric.map(Into::into),
        ..ProblemDocument::default()
    };
    let assembly = problem(&document).unwrap_or_else(|e| panic!("{matrix}: {e}"));
    let rounded = assembly.problem.rounded();
    let solution =
        solve(&rounded, &mut Silent, &mut Unattended).unwrap_or_else(|e| panic!("{matrix}: {e}"));
    (assembly, solution.approximation, rounded.metric_scale)
}

fn value(matrix: &str, metric: Option<&str>, index: usize) -> f64 {
    let (_, approximation, _) = solved(matrix, metric);
    crate::num::ExactReal::Binary(approximation.values[index]).nearest(-approximation.scale)
}

#[test]
fn derivatives_agree_with_differences() {
    // Steps of 2^-12 leave a second-order error of about 2^-24 over the gap.
    let (base, moved) = ("2 1 0; 1 5 3; 0 3 9", "2 1 0; 1 5 3+2^-12; 0 3+2^-12 9");
    for index in 0..3 {
        let (_, approximation, scale) = solved(base, None);
        let list = sensitivities(&approximation, scale, index, Moves::Unit, 100);
        let entry = list.iter().find(|s| (s.row, s.col) == (2, 1));
        let slope = (value(moved, None, index) - value(base, None, index)) * 4096.0;
        let derivative = entry.map_or(f64::NAN, |s| s.derivative);
        assert!(
            (derivative - slope).abs() < 1e-3,
            "{index}: {derivative} against {slope}"
        );
    }
}

#[test]
fn the_metric_counts_with_the_eigenvalue() {
    // Far from one, so that the scale taken out of the metric matters.
    let metric = "4e200 1e200; 1e200 3e200";
    let with = |extra: &str| format!("4e200{extra} 1e200; 1e200 3e200");
    let (assembly, approximation, scale) = solved(
        "2e200 1e200; 1e200 5e200",
        Some("4e200 ± 1e190 1e200; 1e200 3e200"),
    );
    for index in 0..2 {
        let moves = Moves::Within {
            matrix: None,
            metric: assembly.metric_tolerances.as_ref(),
        };
        let list = sensitivities(&approximation, scale, index, moves, 10);
        assert_eq!(list.len(), 1, "{list:?}");
        let step = 1e196;
        let slope = (value("2e200 1e200; 1e200 5e200", Some(&with("+1e196")), index)
            - value("2e200 1e200; 1e200 5e200", Some(metric), index))
            / step;
        let found = list[0].derivative;
        assert_eq!(list[0].part, Part::Metric);
        assert!(
            (found - slope).abs() < 1e-3 * slope.abs(),
            "{found:e} against {slope:e}"
        );
        assert!((list[0].effect - found.abs() * 1e190).abs() < 1e-12 * list[0].effect);
    }
}

#[test]
fn the_ranking_puts_the_greatest_effect_first() {
    let (assembly, approximation, scale) = solved(
        "1 ± 0.001, 0.1 ± 0.5, 0; 0.1, 4 ± 0.1, 0; 0, 0, 9 ± 5",
        None,
    );
    let moves = Moves::Within {
        matrix: assembly.tolerances.as_ref(),
        metric: None,
    };
    let list = sensitivities(&approximation, scale, 1, moves, 2);
    let places: Vec<_> = list.iter().map(|s| (s.row, s.col)).collect();
    assert_eq!(places, [(1, 1), (1, 0)], "{list:?}");
    assert!(sensitivities(&approximation, scale, 3, moves, 2).is_empty());
}

#[test]
fn a_complex_entry_may_move_in_any_direction() {
    let (assembly, approximation, scale) = solved("0, i ± 0.5; -i, 0", None);
    let moves = Moves::Within {
        matrix: assembly.tolerances.as_ref(),
        metric: None,
    };
    for index in 0..2 {
        let list = sensitivities(&approximation, scale, index, moves, 5);
        // λ = ±|a|, so a radius of 1/2 moves it by 1/2, and a real change not
        // at all to first order.
        assert!((list[0].effect - 0.5).abs() < 1e-15, "{list:?}");
        assert!(list[0].derivative.abs() < 1e-15, "{list:?}");
    }
}
