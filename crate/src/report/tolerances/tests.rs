use super::*;
use crate::control::Unattended;
use crate::document::{understand, ProblemDocument};
use crate::ledger::Ledger;
use crate::prove::Level;
use crate::report::run::Heading;
use dashu_ratio::RBig;

pub(crate) fn run_of(matrix: &str, metric: Option<&str>) -> Run {
    let document = ProblemDocument {
        matrix: matrix.to_owned(),
        metric: metric.map(str::to_owned),
        ..ProblemDocument::default()
    };
    let assembly = understand(&document).assembly.expect("a problem");
    let problem = assembly.problem;
    let rounded = problem.rounded();
    let mut ledger = Ledger::new();
    let outcome = crate::solve::solve(&rounded, &mut ledger, &mut Unattended);
    let mut run = Run::new(Heading::default(), problem, rounded, ledger, outcome)
        .with_tolerances(assembly.tolerances, assembly.metric_tolerances);
    run.prove(Level::Quick, &mut Unattended);
    run
}

fn number(text: &str) -> RBig {
    let plain = text.replace('−', "-");
    let (digits, places) = plain.split_once('.').unwrap_or((&plain, ""));
    let count: dashu_int::IBig = format!("{digits}{places}").parse().expect("digits");
    RBig::from(count) * super::super::decimal::ten_to(-(places.len() as i32))
}

#[test]
fn printed_ranges_hold_what_the_corners_give() {
    // Diagonal: eigenvalue k is entry k, so its range is known exactly.
    let run = run_of("1 ± 0.25, 0, 0\n0, 4 ± 0.5, 0\n0, 0, 9", None);
    let view = view(&run, 1).expect("tolerances");
    assert_eq!(view.standing, Standing::Proven);
    let corners = [("0.75", "1.25"), ("3.5", "4.5"), ("9", "9")];
    assert_eq!(view.ranges.len(), 3, "{view:?}");
    for (range, (low, high)) in view.ranges.iter().zip(corners) {
        assert!(
            number(&range.lower) <= number(low) && number(high) <= number(&range.upper),
            "{range:?} does not hold {low} and {high}"
        );
    }
}

#[test]
fn entries_are_ranked_by_what_they_do_to_the_chosen_eigenvalue() {
    let run = run_of("1 ± 0.25, 0, 0\n0, 4 ± 0.5, 0\n0, 0, 9", None);
    let second = view(&run, 1).expect("tolerances");
    assert_eq!(second.index, 2);
    assert_eq!(second.influences.len(), 1, "{second:?}");
    let first = &second.influences[0];
    assert_eq!(
        (
            first.entry.as_str(),
            first.tolerance.as_str(),
            first.effect.as_str(),
            first.share
        ),
        ("2, 2", "±0.5", "±0.5", 1.0)
    );
    assert_eq!(second.ranges[1].most, "2, 2 (±0.5)");
    let third = view(&run, 2).expect("tolerances");
    assert!(
        third.influences.is_empty() && third.words.contains("no entry"),
        "{third:?}"
    );
}

#[test]
fn a_metric_with_tolerances_is_ranked_and_ranged_too() {
    let run = run_of("2, 0\n0, 12", Some("1 ± 0.1, 2"));
    let view = view(&run, 0).expect("tolerances");
    assert_eq!(view.influences[0].entry, "metric 1, 1", "{view:?}");
    // λ₁ = 2/m with m between 0.9 and 1.1.
    let range = &view.ranges[0];
    assert!(
        number(&range.lower) <= RBig::from(2) / number("1.1"),
        "{range:?}"
    );
    assert!(
        number(&range.upper) >= RBig::from(2) / number("0.9"),
        "{range:?}"
    );
}

#[test]
fn where_eigenvalues_are_not_apart_no_entry_is_named() {
    let run = run_of("1 ± 0.1, 0\n0, 1", None);
    let view = view(&run, 0).expect("tolerances");
    assert!(view.words.contains("not proven apart"), "{view:?}");
    assert!(view.influences.is_empty(), "{view:?}");
    assert!(
        view.ranges.iter().all(|range| range.most.is_empty()),
        "{view:?}"
    );
}

#[test]
fn without_tolerances_there_is_no_view() {
    assert_eq!(view(&run_of("1, 2\n2, 5", None), 0), None);
}
