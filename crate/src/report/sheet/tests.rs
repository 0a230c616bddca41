use super::*;
use crate::prove::{prove, Level};
use crate::report::working::tests::run_of_order;

#[test]
fn what_people_typed_is_escaped() {
    let mut run = run_of_order(3);
    run.heading.title = "<script>alert(1)</script> & \"co\"".to_owned();
    run.heading.notes = "<img src=x onerror=y>\nsecond".to_owned();
    run.heading.matrix_text = "1 </pre><b>2".to_owned();
    run.heading
        .parameters
        .push(("<k>".to_owned(), "<v>".to_owned()));
    let file = report(&run);
    for tag in ["<script", "<img", "<b>", "<k>", "<v>"] {
        assert!(!file.text.contains(tag), "{tag} in {}", file.text);
    }
    assert!(
        file.text
            .contains("&lt;script&gt;alert(1)&lt;/script&gt; &amp; "),
        "{}",
        file.text
    );
    assert_eq!(file.name, "script-alert-1-script-co-sheet.html");
}

#[test]
fn the_sheet_carries_figures_bounds_fingerprint_and_caution() {
    let mut run = run_of_order(5);
    let before = report(&run).text;
    assert!(before.contains("not proven"), "{before}");
    let solution = run.outcome.as_ref().expect("converges");
    let proof = prove(
        &run.problem,
        &solution.approximation,
        Level::Tight,
        &mut Unattended,
    );
    run.proof = Some(proof);
    let text = report(&run).text;
    for row in values::table(&run, 0).rows {
        assert!(
            text.contains(&row.figure),
            "{} is missing from {text}",
            row.figure
        );
    }
    for ends in values::proven_ends(&run) {
        assert!(
            text.contains(&typeset(&ends.lower)),
            "{} is missing from {text}",
            ends.lower
        );
    }
    assert!(
        text.contains(&run.fingerprint) && text.contains("licensed practice"),
        "{text}"
    );
    assert!(
        !text.contains("http") && !text.contains("<script"),
        "{text}"
    );
}

#[test]
fn claims_stand_on_the_sheet_with_their_verdicts() {
    let mut run = run_of_order(3);
    run.heading.claims = vec!["trace: 1000000".to_owned(), "<i>moon</i>: 3".to_owned()];
    let text = report(&run).text;
    assert!(
        text.contains("refuted") && text.contains("first goes wrong"),
        "{text}"
    );
    assert!(
        text.contains("Not understood") && !text.contains("<i>"),
        "{text}"
    );
}

#[test]
fn long_text_is_cut_at_a_character() {
    let mut run = run_of_order(2);
    run.heading.matrix_text = "é".repeat(MOST_TYPED_BYTES);
    let text = report(&run).text;
    assert!(
        text.contains("The first 20000 of 40000 bytes"),
        "{}",
        text.len()
    );
}

#[test]
fn ranges_over_the_tolerances_stand_on_the_sheet() {
    let mut run = crate::report::tolerances::tests::run_of("1 ± 0.25, 0\n0, 4 ± 0.5", None);
    let text = report(&run).text;
    for range in tolerances::ranges(&run) {
        assert!(
            text.contains(&range.lower) && text.contains(&range.most),
            "{text}"
        );
    }
    run.ranges = None;
    assert!(report(&run).text.contains("No range is proven"));
}
