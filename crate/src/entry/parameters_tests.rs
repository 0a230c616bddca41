//! Parameters: order of dependence, and what is said of the faulty ones.

use super::cell::{parse_cell, CellErrorKind, CellOptions, Parameters};
use super::parameters::{ParameterErrorKind, MAX_PARAMETERS};

fn read(list: &[(&str, &str)]) -> (Parameters, Vec<(usize, ParameterErrorKind)>) {
    let list: Vec<_> = list
        .iter()
        .map(|(n, v)| ((*n).to_owned(), (*v).to_owned()))
        .collect();
    let (parameters, errors) = Parameters::read(&list, CellOptions::default());
    for error in &errors {
        assert!(error.to_string().ends_with('.'), "{error}");
    }
    (
        parameters,
        errors.into_iter().map(|e| (e.index, e.kind)).collect(),
    )
}

fn text_of(parameters: &Parameters, name: &str) -> Option<String> {
    parameters.value(name).map(|v| v.re.to_string())
}

#[test]
fn values_may_use_later_parameters() {
    let (p, errors) = read(&[("a", "b+c"), ("b", "2c"), ("c", "1/3")]);
    assert_eq!(errors, vec![]);
    assert_eq!(text_of(&p, "a").as_deref(), Some("1"));
    assert_eq!(text_of(&p, "b").as_deref(), Some("2/3"));
}

#[test]
fn circles_are_named_in_order() {
    let (p, errors) = read(&[("a", "b"), ("b", "c"), ("c", "a"), ("d", "a+1"), ("e", "e")]);
    let names = |list: &[&str]| list.iter().map(|s| (*s).to_owned()).collect::<Vec<_>>();
    assert_eq!(
        errors,
        vec![
            (
                0,
                ParameterErrorKind::Circular(names(&["a", "b", "c", "a"]))
            ),
            (
                1,
                ParameterErrorKind::Circular(names(&["b", "c", "a", "b"]))
            ),
            (
                2,
                ParameterErrorKind::Circular(names(&["c", "a", "b", "c"]))
            ),
            (3, ParameterErrorKind::Unavailable("a".to_owned())),
            (4, ParameterErrorKind::Circular(names(&["e", "e"]))),
        ]
    );
    let error = parse_cell("1+d", &p, CellOptions::default()).err();
    assert_eq!(
        error.map(|e| (e.kind, e.span)),
        Some((CellErrorKind::ValuelessName, 2..3))
    );
}

#[test]
fn names_and_values_are_checked() {
    let (_, errors) = read(&[
        ("k", "1"),
        ("k", "2"),
        ("2k", "1"),
        ("pi", "3"),
        ("I", "5"),
        ("i", "5"),
        ("x", "1/0"),
        ("y", "x"),
        ("z", "nowhere"),
        ("w", "1 ± 2"),
        ("", "1"),
    ]);
    let kinds: Vec<_> = errors
        .iter()
        .map(|(index, kind)| match kind {
            ParameterErrorKind::Value(error) => (*index, format!("{:?}", error.kind)),
            other => (*index, format!("{other:?}")),
        })
        .collect();
    let expected = [
        (1, "DuplicateName(0)"),
        (2, "BadName"),
        (3, "ReservedName"),
        (5, "ReservedName"),
        (6, "DivisionByZero"),
        (7, "Unavailable(\"x\")"),
        (8, "UnknownName"),
        (9, "MisplacedTolerance"),
        (10, "BadName"),
    ];
    let expected: Vec<_> = expected
        .iter()
        .map(|(i, s)| (*i, (*s).to_owned()))
        .collect();
    assert_eq!(kinds, expected);
}

#[test]
fn unused_parameters_are_pointed_out() {
    let (p, errors) = read(&[("a", "b"), ("b", "1"), ("c", "a")]);
    assert_eq!(errors, vec![]);
    let unused = |p: &Parameters| {
        p.unused()
            .iter()
            .map(|e| e.name.clone())
            .collect::<Vec<_>>()
    };
    assert_eq!(unused(&p), ["a", "b", "c"]);
    assert!(parse_cell("2a", &p, CellOptions::default()).is_ok());
    assert_eq!(unused(&p), ["c"]);
}

#[test]
fn an_exponent_letter_that_is_a_name_is_doubtful() {
    let (p, _) = read(&[("e3", "7"), ("D", "2")]);
    for text in ["2e3", "1.5D-3"] {
        let error = parse_cell(text, &p, CellOptions::default()).err();
        assert_eq!(
            error.map(|e| e.kind),
            Some(CellErrorKind::AmbiguousProduct),
            "{text}"
        );
    }
    assert!(parse_cell("2E3", &p, CellOptions::default()).is_ok());
}

#[test]
fn long_chains_and_long_lists_end() {
    let chain: Vec<(String, String)> = (0..MAX_PARAMETERS + 5)
        .map(|k| {
            (
                format!("p{k}"),
                if k == 0 {
                    "√(1+√2)".into()
                } else {
                    format!("p{}+p{}", k - 1, k - 1)
                },
            )
        })
        .collect();
    let (p, errors) = Parameters::read(&chain, CellOptions::default());
    assert!(p.value("p3").is_some());
    let doubled = errors.iter().any(
        |e| matches!(&e.kind, ParameterErrorKind::Value(v) if v.kind == CellErrorKind::TooLarge),
    );
    assert!(
        doubled,
        "doubling a nested root must meet its bound: {:?}",
        errors.first()
    );
    assert!(errors.iter().any(|e| e.kind == ParameterErrorKind::TooMany));
}
