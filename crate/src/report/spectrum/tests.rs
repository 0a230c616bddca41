use super::*;
use crate::report::decimal;
use dashu_int::{IBig, UBig};

fn line(index: u32, value: RBig, half_width: Option<RBig>) -> Line {
    Line {
        first: index,
        last: index,
        enclosure: half_width.map(|w| (&value - &w, &value + &w)),
        range: None,
        approx: value,
        figure: String::new(),
    }
}

fn ratio(n: i64, d: u64) -> RBig {
    RBig::from_parts(IBig::from(n), UBig::from(d))
}

#[test]
fn the_whole_spectrum_is_inside_the_first_window() {
    let lines: Vec<Line> = (0..7)
        .map(|k| line(k + 1, ratio(i64::from(k) * 5 - 9, 3), None))
        .collect();
    let seen = view(&Window::all(&lines), &lines);
    assert_eq!(seen.marks.len(), 7, "{seen:?}");
    assert!(
        seen.marks.iter().all(|mark| mark.at.abs() < 0.95),
        "{seen:?}"
    );
    assert!((4..=10).contains(&seen.ticks.len()), "{:?}", seen.ticks);
}

#[test]
fn a_lens_shows_an_enclosure_of_five_hundred_digits() {
    let width = decimal::ten_to(-500);
    let lines = [
        line(1, ratio(1, 3), Some(width.clone())),
        line(2, ratio(2, 3), Some(width)),
    ];
    let window = Window::all(&lines).moved(&WindowMove::Lens { line: 1 }, &lines);
    let seen = view(&window, &lines);
    assert_eq!(
        (seen.left_of, seen.right_of, seen.marks.len()),
        (1, 0, 1),
        "{seen:?}"
    );
    let mark = &seen.marks[0];
    let (lower, upper) = (mark.lower.expect("proven"), mark.upper.expect("proven"));
    assert!(
        -0.6 < lower && lower < -0.4 && 0.4 < upper && upper < 0.6,
        "{lower} {upper}"
    );
    assert!(seen.prefix.starts_with("0.66666666"), "{}", seen.prefix);
    assert!(
        seen.ticks.iter().all(|tick| tick.label.len() >= 3),
        "{:?}",
        seen.ticks
    );
}

#[test]
fn zooming_keeps_the_point_under_the_pointer() {
    let lines = [
        line(1, ratio(-4, 1), None),
        line(2, ratio(1, 7), None),
        line(3, ratio(6, 1), None),
    ];
    let mut window = Window::all(&lines);
    let start = view(&window, &lines).marks[1].at;
    for _ in 0..200 {
        let about = window.position(&lines[1].approx);
        window = window.moved(&WindowMove::Zoom { factor: 0.8, about }, &lines);
    }
    let end = window.position(&lines[1].approx);
    // Each step rounds the centre to its unit, about 10^−6 half widths,
    // and an error made earlier is magnified by what follows until the
    // next step corrects for it.
    assert!((end - start).abs() < 1e-3, "{start} became {end}");
}

#[test]
fn a_window_survives_its_text_and_nonsense_does_not() {
    let lines = [line(1, ratio(1, 3), None)];
    let window = Window::all(&lines);
    assert_eq!(Window::parse(&window.text()), Some(window));
    for text in [
        "",
        "1:2",
        "1:1048576:999999",
        "x:1048576:0",
        "1:7:0",
        "1:1048576:0:0",
    ] {
        assert_eq!(Window::parse(text), None, "{text}");
    }
}

#[test]
fn equal_values_are_stacked() {
    let lines: Vec<Line> = (1..=3).map(|k| line(k, ratio(5, 2), None)).collect();
    let stacked: Vec<u32> = view(&Window::all(&lines), &lines)
        .marks
        .iter()
        .map(|m| m.stacked)
        .collect();
    assert_eq!(stacked, [0, 1, 2]);
}

#[test]
fn moves_with_nonsense_in_them_are_survived() {
    let lines = [line(1, ratio(1, 3), None), line(2, ratio(4, 3), None)];
    let window = Window::all(&lines);
    for by in [
        WindowMove::Pan { by: f64::NAN },
        WindowMove::Pan { by: f64::INFINITY },
        WindowMove::Zoom {
            factor: f64::NAN,
            about: f64::NAN,
        },
        WindowMove::Zoom {
            factor: 0.0,
            about: 9.0,
        },
        WindowMove::Lens { line: 99 },
    ] {
        let moved = window.clone().moved(&by, &lines);
        assert!(
            Window::parse(&moved.text()).is_some(),
            "{by:?} gave {moved:?}"
        );
    }
}

#[test]
fn an_eigenvalue_is_found_in_the_line_that_holds_it() {
    let mut lines: Vec<Line> = (0..3)
        .map(|k| line(2 * k + 1, ratio(i64::from(k), 1), Some(ratio(1, 1000))))
        .collect();
    for line in &mut lines {
        line.last = line.first + 1;
    }
    let all = Window::all(&lines);
    let lens = |place| all.clone().moved(&WindowMove::Lens { line: place }, &lines);
    for index in 0..6 {
        let found = all.clone().moved(&WindowMove::Eigenvalue { index }, &lines);
        assert_eq!(found, lens(index / 2), "eigenvalue {index}");
    }
    let beyond = all
        .clone()
        .moved(&WindowMove::Eigenvalue { index: 6 }, &lines);
    assert_eq!(beyond, all);
}

#[test]
fn ranges_are_inside_their_window_and_wider_than_enclosures() {
    let mut lines: Vec<Line> = (0..3)
        .map(|k| line(k + 1, ratio(i64::from(k), 1), Some(ratio(1, 1000))))
        .collect();
    for line in &mut lines {
        line.range = Some((&line.approx - ratio(7, 1), &line.approx + ratio(9, 1)));
    }
    let window = Window::all(&lines).moved(&WindowMove::Ranges, &lines);
    for mark in view(&window, &lines).marks {
        let (Some(low), Some(high)) = (mark.range_lower, mark.range_upper) else {
            panic!("no range in {mark:?}");
        };
        assert!(-1.0 < low && high < 1.0, "{mark:?}");
        assert!(
            mark.lower > Some(low) && mark.upper < Some(high),
            "{mark:?}"
        );
    }
}

#[test]
fn labels_that_share_no_beginning_are_told_from_the_roundest() {
    // 39.3 ± 1e-27: the labels would begin 39.2999… and 39.3000….
    let width = decimal::ten_to(-27);
    let lines = [line(1, ratio(393, 10), Some(width))];
    let window = Window::all(&lines).moved(&WindowMove::Lens { line: 0 }, &lines);
    let seen = view(&window, &lines);
    assert_eq!(
        (seen.origin.as_str(), seen.prefix.as_str()),
        ("39.3", ""),
        "{seen:?}"
    );
    for tick in &seen.ticks {
        // Positions are whole units of 2^−20 of the half width or finer.
        let expected = if tick.at.abs() < 1e-6 {
            "0"
        } else if tick.at < 0.0 {
            "\u{2212}"
        } else {
            "+"
        };
        assert!(tick.label.starts_with(expected), "{tick:?}");
        assert!(tick.label.chars().count() < 10, "{tick:?}");
    }
}
