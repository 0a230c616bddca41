//! Reading, writing and understanding problem documents.

mod schema;

use super::*;
use crate::num::ExactReal;
use proptest::prelude::*;

const SMALL: &str = r#"{
  "version": 1,
  "matrix": [["0.1", 2], [2, [3.00, "0"]]],
  "format": "eigenledger problem"
}"#;

fn opened(text: &str) -> ProblemDocument {
    read(text).unwrap_or_else(|e| panic!("{text}: {e:?}"))
}

#[test]
fn nested_arrays_keep_every_digit() {
    let long = "0.1000000000000000000000000000000000000001";
    let text = SMALL.replace("\"0.1\"", long);
    let document = opened(&text);
    let assembly = problem(&document).unwrap_or_else(|e| panic!("{e}"));
    let typed = assembly.problem.matrix.re(0, 0);
    let digits = long.parse::<f64>().unwrap_or(f64::NAN);
    assert_eq!(typed.nearest(0), digits);
    assert_eq!(
        typed.equals(&ExactReal::Decimal {
            digits: 1,
            exponent: -1
        }),
        Some(false)
    );
}

#[test]
fn a_whole_document_becomes_a_problem() {
    let document = ProblemDocument {
        title: "A mast".into(),
        matrix: "k1+k2 -k2\n-k2 k2 ± 0.5".into(),
        metric: Some("m 2m".into()),
        parameters: vec![
            Parameter {
                name: "k1".into(),
                value: "2".into(),
            },
            Parameter {
                name: "k2".into(),
                value: "k1/3".into(),
            },
            Parameter {
                name: "m".into(),
                value: "1/7".into(),
            },
            Parameter {
                name: "spare".into(),
                value: "1".into(),
            },
        ],
        ..ProblemDocument::default()
    };
    let found = understand(&document);
    let assembly = found.assembly.unwrap_or_else(|e| panic!("{e}"));
    let third = assembly
        .problem
        .matrix
        .re(0, 1)
        .rational()
        .map(|r| r.to_string());
    assert_eq!(third.as_deref(), Some("-2/3"));
    let metric = assembly
        .problem
        .metric
        .unwrap_or_else(|| panic!("a metric was given"));
    assert_eq!(
        metric.re(1, 1).rational().map(|r| r.to_string()).as_deref(),
        Some("2/7")
    );
    assert!(assembly.tolerances.is_some());
    let unused: Vec<_> = found.remarks.iter().map(|r| r.name.as_str()).collect();
    assert_eq!(unused, ["spare"]);
}

#[test]
fn what_stands_in_the_way_is_said() {
    let with = |matrix: &str| ProblemDocument {
        matrix: matrix.into(),
        ..ProblemDocument::default()
    };
    let sentence =
        |d: &ProblemDocument| problem(d).err().map(|e| e.to_string()).unwrap_or_default();
    assert!(sentence(&with("1 2\n3 4")).contains("not Hermitian"));
    assert!(sentence(&with("1 x\nx 4")).contains("x"));
    assert!(!sentence(&with("")).is_empty());
    let mut circular = with("1 a\na 4");
    circular.parameters = vec![Parameter {
        name: "a".into(),
        value: "a".into(),
    }];
    assert!(
        sentence(&circular).contains("depends on itself"),
        "{}",
        sentence(&circular)
    );
    let mut repaired = with("1 2\n3 4");
    repaired.choices.matrix_adjustment = Some(Adjustment::Mean);
    let assembly = problem(&repaired).unwrap_or_else(|e| panic!("{e}"));
    assert_eq!(assembly.adjustments.len(), 1);
    assert_eq!(assembly.problem.matrix.re(0, 1).nearest(0), 2.5);
}

#[test]
fn structure_is_strict_and_order_is_free() {
    use DocumentErrorKind as K;
    let cases = [
        ("", K::NotJson, ""),
        ("{", K::NotJson, ""),
        ("[1]", K::NotOurs, "format"),
        ("{}", K::NotOurs, "format"),
        (r#"{"format": "something else"}"#, K::NotOurs, "format"),
        (
            r#"{"format": "eigenledger problem"}"#,
            K::MissingField,
            "version",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 2, "odd": 0}"#,
            K::UnknownVersion,
            "version",
        ),
        (
            r#"{"format": "eigenledger problem", "version": "1"}"#,
            K::WrongKind,
            "version",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1}"#,
            K::MissingField,
            "matrix",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": 5}"#,
            K::WrongKind,
            "matrix",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1", "matrix": "2"}"#,
            K::DuplicateField,
            "matrix",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1", "colour": "red"}"#,
            K::UnknownField,
            "colour",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1", "title": "a\nb"}"#,
            K::WrongKind,
            "title",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1",
            "parameters": [{"name": "a", "value": "1"}, {"name": "b"}]}"#,
            K::MissingField,
            "parameters[1].value",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1",
            "parameters": [{"name": "a", "value": "1", "unit": "N"}]}"#,
            K::UnknownField,
            "parameters[0].unit",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1",
            "choices": {"matrixAdjustment": "both"}}"#,
            K::WrongKind,
            "choices.matrixAdjustment",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1",
            "choices": {"matrixLayout": {"layout": "knots"}}}"#,
            K::WrongKind,
            "choices.matrixLayout",
        ),
        (
            r#"{"format": "eigenledger problem", "version": 1, "matrix": "1", "claims": "none"}"#,
            K::WrongKind,
            "claims",
        ),
    ];
    for (text, kind, path) in cases {
        match read(text) {
            Ok(document) => panic!("{text} was read as {document:?}"),
            Err(error) => {
                assert_eq!(
                    (error.kind, error.path.as_str()),
                    (kind, path),
                    "{text}: {error:?}"
                );
                assert!(error.sentence.ends_with('.'), "{error}");
            }
        }
    }
    assert_eq!(opened(SMALL).matrix, r#"[["0.1", 2], [2, [3.00, "0"]]]"#);
    assert_eq!(opened(&format!("\u{feff}{SMALL}")), opened(SMALL));
}

#[test]
fn deep_nesting_is_refused_not_overrun() {
    let deep = SMALL.replace(
        "\"0.1\"",
        &format!("{}1{}", "[".repeat(100_000), "]".repeat(100_000)),
    );
    if let Ok(document) = read(&deep) {
        assert!(problem(&document).is_err());
    }
}

fn any_document() -> impl Strategy<Value = ProblemDocument> {
    let adjustment = prop_oneof![
        Just(None),
        Just(Some(Adjustment::Lower)),
        Just(Some(Adjustment::Upper)),
        Just(Some(Adjustment::Mean)),
    ];
    let layout = prop_oneof![
        Just(None),
        Just(Some("{}".to_owned())),
        Just(Some(r#"{"layout":"tabs","decimal":"comma"}"#.to_owned())),
    ];
    (
        "[^\n\r]{0,40}",
        any::<String>(),
        any::<String>(),
        prop::option::of(any::<String>()),
        prop::collection::vec((any::<String>(), any::<String>()), 0..4),
        (layout, adjustment),
        prop::collection::vec(any::<String>(), 0..3),
    )
        .prop_map(
            |(title, notes, matrix, metric, parameters, choices, claims)| ProblemDocument {
                title,
                notes,
                matrix,
                metric,
                parameters: parameters
                    .into_iter()
                    .map(|(name, value)| Parameter { name, value })
                    .collect(),
                choices: Choices {
                    matrix_layout: choices.0,
                    matrix_adjustment: choices.1,
                    ..Choices::default()
                },
                claims,
            },
        )
}

proptest! {
    #[test]
    fn what_is_written_reads_back(document in any_document()) {
        prop_assert_eq!(&opened(&write(&document)), &document);
        prop_assert_eq!(&opened(&write_compact(&document)), &document);
        schema::assert_valid(&write(&document));
    }

    #[test]
    fn links_read_back(document in any_document()) {
        let link = crate::link::encode(&document);
        prop_assert_eq!(crate::link::decode(&link), Ok(document));
    }

    #[test]
    fn any_text_is_answered(text in "\\PC{0,60}") {
        prop_assert!(read(&text).is_err());
    }
}
