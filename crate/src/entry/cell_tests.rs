//! The grammar of cells, case by case and by properties.

use super::cell::{
    parse_cell, CellErrorKind, CellOptions, CellValue, DecimalMark, Parameters, MAX_CELL_BYTES,
};
use crate::num::ExactReal;
use dashu_int::IBig;
use dashu_ratio::RBig;
use proptest::prelude::*;

fn given(list: &[(&str, &str)]) -> Parameters {
    let list: Vec<_> = list
        .iter()
        .map(|(n, v)| ((*n).to_owned(), (*v).to_owned()))
        .collect();
    let (parameters, errors) = Parameters::read(&list, CellOptions::default());
    assert!(errors.is_empty(), "{errors:?}");
    parameters
}

fn read(text: &str) -> CellValue {
    match parse_cell(text, &Parameters::none(), CellOptions::default()) {
        Ok(value) => value,
        Err(error) => panic!("“{text}”: {error:?}"),
    }
}

fn comma() -> CellOptions {
    CellOptions {
        decimal_mark: DecimalMark::Comma,
    }
}

/// Whether two cells have the same exact value.
fn same(a: &CellValue, b: &CellValue) -> bool {
    let tolerance = match (&a.tolerance, &b.tolerance) {
        (None, None) => Some(true),
        (Some(x), Some(y)) => x.equals(y),
        _ => Some(false),
    };
    a.re.equals(&b.re) == Some(true) && a.im.equals(&b.im) == Some(true) && tolerance == Some(true)
}

#[test]
fn texts_with_the_same_value() {
    let cases = [
        ("12.50", "12.5"),
        ("  7 ", "7"),
        (".5", "1/2"),
        ("5.", "5"),
        ("+3", "3"),
        ("1e3", "1000"),
        ("1.5E-3", "0.0015"),
        ("1.5D-3", "0.0015"),
        ("1e−3", "0.001"),
        ("1/3+1/6", "1/2"),
        ("−2", "-2"),
        ("–2", "-2"),
        ("—2", "-2"),
        ("‐2", "-2"),
        ("﹣2", "-2"),
        ("－2", "-2"),
        ("1 − 3", "-2"),
        ("2×3", "6"),
        ("2·3", "6"),
        ("6÷4", "3/2"),
        ("6/4/3", "1/2"),
        ("2^10", "1024"),
        ("2^-2", "1/4"),
        ("-2^2", "-4"),
        ("(-2)^2", "4"),
        ("2^3^2", "512"),
        ("3²", "9"),
        ("2⁻³", "1/8"),
        ("10¹²", "1e12"),
        ("((1+2)*(3))", "9"),
        ("--4", "4"),
        ("sqrt(4)", "2"),
        ("√4", "2"),
        ("sqrt(1/9)", "1/3"),
        ("sqrt(2)*sqrt(2)", "2"),
        ("√2·√8", "4"),
        ("sqrt(2)/2", "1/sqrt(2)"),
        ("2√3", "sqrt(12)"),
        ("π", "pi"),
        ("2π", "2*pi"),
        ("2πi", "i*2*pi"),
        ("π²/π", "π"),
        ("sqrt(π^2)", "π"),
        ("i", "1i"),
        ("j", "i"),
        ("-i", "0-1i"),
        ("3-4j", "3 - 4*i"),
        ("i*2", "2i"),
        ("i^2", "-1"),
        ("1/i", "-i"),
        ("(1+2i)*(1-2i)", "5"),
        ("(1+i)^4", "-4"),
        ("(3+4i)/(1+2i)", "2.2-0.4i"),
        ("2(1+2)", "6"),
        ("0e999", "0"),
        ("1e400*1e-400", "1"),
        ("12.5±0.1", "12.5 +/- 0.1"),
        ("12.5 +/− 1/10", "12.5 ± 0.1"),
        ("1+i ± 2", "(1+i) ± 2"),
        ("sqrt(3+2√2)^2", "3+2√2"),
        (
            "123456789012345678901234567890",
            "123456789012345678*10^12 + 901234567890",
        ),
    ];
    for (left, right) in cases {
        let (a, b) = (read(left), read(right));
        assert!(same(&a, &b), "“{left}” is {a} but “{right}” is {b}");
    }
}

#[test]
fn rational_cells_have_these_ratios() {
    let cases: [(&str, i64, u64); 7] = [
        ("0.1", 1, 10),
        ("-1/3", -1, 3),
        ("1.25e2", 125, 1),
        ("3/4 - 1/4", 1, 2),
        ("sqrt(0.25)", 1, 2),
        ("(1/2)^3", 1, 8),
        ("√(49)", 7, 1),
    ];
    for (text, top, bottom) in cases {
        let expected = RBig::from_parts(IBig::from(top), bottom.into());
        assert_eq!(read(text).re.rational(), Some(expected), "“{text}”");
    }
}

#[test]
fn parameters_stand_for_their_values() {
    let p = given(&[
        ("k1", "2"),
        ("k2", "k1/4"),
        ("t", "√3"),
        ("α₁", "1+2i"),
        ("φ", "0.5"),
    ]);
    let cases = [
        ("k1 + k2", "2.5"),
        ("-k2", "-1/2"),
        ("3·t/2", "3*sqrt(3)/2"),
        ("3t", "3*sqrt(3)"),
        ("3t·t", "9"),
        ("α₁", "1+2i"),
        ("2α₁", "2+4i"),
        ("k1^2", "4"),
        ("2φ", "1"),
        ("2 k1", "4"),
        ("2k1 i", "4i"),
    ];
    for (text, expected) in cases {
        let value = parse_cell(text, &p, CellOptions::default());
        let value = value.unwrap_or_else(|e| panic!("“{text}”: {e:?}"));
        assert!(
            same(&value, &read(expected)),
            "“{text}” is {value}, not {expected}"
        );
    }
    assert!(p.unused().is_empty(), "{:?}", p.unused());
}

#[test]
fn refusals_name_their_reason_and_place() {
    use CellErrorKind as K;
    let cases: [(&str, K, std::ops::Range<usize>); 51] = [
        ("", K::Empty, 0..0),
        ("   ", K::Empty, 0..3),
        ("1,234.5", K::ThousandsSeparator, 0..7),
        ("1,234,567", K::ThousandsSeparator, 0..9),
        ("1 234", K::ThousandsSeparator, 0..5),
        ("1\u{a0}234", K::ThousandsSeparator, 0..6),
        ("1'234", K::ThousandsSeparator, 0..5),
        ("1_234", K::ThousandsSeparator, 0..5),
        ("2+1 234", K::ThousandsSeparator, 2..7),
        ("3,14", K::DecimalComma, 0..4),
        ("1,234", K::DecimalComma, 0..5),
        ("1.2.3", K::MalformedNumber, 3..4),
        (".", K::MalformedNumber, 0..1),
        ("12 34", K::MissingOperator, 0..5),
        ("1e999", K::BeyondDouble, 0..5),
        ("1e99999", K::BeyondDouble, 0..7),
        ("-2e308", K::BeyondDouble, 0..6),
        ("1e300*1e300", K::BeyondDouble, 0..11),
        ("1e-400", K::BelowDouble, 0..6),
        ("1e-99999", K::BelowDouble, 0..8),
        ("NaN", K::NotFinite, 0..3),
        ("-inf", K::NotFinite, 1..4),
        ("Infinity", K::NotFinite, 0..8),
        ("∞", K::NotFinite, 0..3),
        ("1/0", K::DivisionByZero, 2..3),
        ("1/(2-2)", K::DivisionByZero, 2..7),
        ("0^-1", K::DivisionByZero, 0..4),
        ("sqrt(-1)", K::NegativeRoot, 0..8),
        ("√(1-√2)", K::NegativeRoot, 0..11),
        ("sqrt(i)", K::ComplexRoot, 0..7),
        ("2^0.5", K::Exponent, 2..5),
        ("2^i", K::Exponent, 2..3),
        ("2^99999", K::Exponent, 2..7),
        ("1/2π", K::AmbiguousProduct, 2..5),
        ("2^3i", K::AmbiguousProduct, 2..4),
        ("12.5(1)", K::AmbiguousProduct, 0..7),
        ("foo", K::UnknownName, 0..3),
        ("2+x", K::UnknownName, 2..3),
        ("(1+2", K::UnclosedParenthesis, 0..1),
        ("1+2)", K::UnopenedParenthesis, 3..4),
        ("1+", K::UnexpectedEnd, 2..2),
        ("*2", K::UnexpectedSign, 0..1),
        ("sqrt 2", K::UnexpectedSign, 5..6),
        ("1<2", K::UnexpectedSign, 1..2),
        ("i i", K::MissingOperator, 2..3),
        ("1 ± i", K::Tolerance, 5..6),
        ("1 ± -2", K::Tolerance, 5..7),
        ("(1 ± 2)", K::MisplacedTolerance, 3..5),
        ("± 2", K::MisplacedTolerance, 0..2),
        ("٣", K::ForeignDigit, 0..2),
        ("1\u{202e}2", K::InvisibleCharacter, 1..4),
    ];
    for (text, kind, span) in cases {
        match parse_cell(text, &Parameters::none(), CellOptions::default()) {
            Ok(value) => panic!("“{text}” was read as {value}"),
            Err(error) => {
                assert_eq!(
                    (error.kind, error.span.clone()),
                    (kind, span),
                    "“{text}”: {error:?}"
                );
                assert!(error.expected.ends_with('.'), "“{text}”: {error}");
            }
        }
    }
}

#[test]
fn decimal_commas_are_read_where_chosen() {
    let p = Parameters::none();
    let read = |text: &str| parse_cell(text, &p, comma());
    let pi = read("3,14").map(|v| v.re.rational());
    assert_eq!(pi, Ok(Some(RBig::from_parts(IBig::from(157), 50u8.into()))));
    let sum = read("1,5+2,5i").unwrap_or_else(|e| panic!("{e:?}"));
    assert_eq!(sum.to_string(), "1.5+2.5i");
    assert_eq!(
        read("3.14").map_err(|e| e.kind).err(),
        Some(CellErrorKind::DecimalPoint)
    );
    assert_eq!(
        read("1.234,5").map_err(|e| e.kind).err(),
        Some(CellErrorKind::ThousandsSeparator)
    );
}

#[test]
fn commas_group_thousands_only_by_choice() {
    let options = CellOptions {
        decimal_mark: DecimalMark::PointWithGroups,
    };
    for (text, expected) in [
        ("1,234.5", "1234.5"),
        ("12,345,678", "12345678"),
        ("7", "7"),
    ] {
        let value = parse_cell(text, &Parameters::none(), options);
        let value = value.unwrap_or_else(|e| panic!("“{text}”: {e:?}"));
        assert!(same(&value, &read(expected)), "“{text}” is {value}");
    }
    assert!(parse_cell("1,23", &Parameters::none(), options).is_err());
}

#[test]
fn limits_have_sentences() {
    let deep = format!("{}1{}", "(".repeat(200), ")".repeat(200));
    let signs = "-".repeat(500) + "1";
    let long = "1+".repeat(MAX_CELL_BYTES) + "1";
    let powers = "9".to_owned() + &"^9".repeat(100);
    let cases = [
        (deep, CellErrorKind::TooDeep),
        (signs, CellErrorKind::TooDeep),
        (long, CellErrorKind::TooLong),
        (powers, CellErrorKind::TooDeep),
        ("(9^9999)^9999".to_owned(), CellErrorKind::TooLarge),
        ("sqrt(3+2√2) - 1 - √2".to_owned(), CellErrorKind::Undecided),
    ];
    for (text, kind) in cases {
        let error = parse_cell(&text, &Parameters::none(), CellOptions::default()).err();
        assert_eq!(
            error.map(|e| e.kind),
            Some(kind),
            "{}",
            &text[..text.len().min(40)]
        );
    }
}

#[test]
fn the_longest_chains_end() {
    let roots: Vec<String> = (2..400).map(|n| format!("√(1+√{n})")).collect();
    let text = roots.join("+");
    let result = parse_cell(&text, &Parameters::none(), CellOptions::default());
    assert!(result.is_ok() || result.is_err_and(|e| e.kind == CellErrorKind::TooLarge));
}

fn number_text() -> impl Strategy<Value = String> {
    prop_oneof![
        "[0-9]{1,25}",
        "[0-9]{1,12}\\.[0-9]{1,12}",
        "[0-9]{1,6}\\.[0-9]{1,6}e-?[0-9]{1,2}",
        "[0-9]{1,9}/[1-9][0-9]{0,9}",
        Just("sqrt(2)".to_owned()),
        Just("√(1+√3)".to_owned()),
        Just("π".to_owned()),
        Just("3i".to_owned()),
    ]
}

fn expression_text() -> impl Strategy<Value = String> {
    number_text().prop_recursive(3, 12, 3, |inner| {
        prop_oneof![
            (inner.clone(), inner.clone()).prop_map(|(a, b)| format!("({a}+{b})")),
            (inner.clone(), inner.clone()).prop_map(|(a, b)| format!("({a})*({b})")),
            (inner.clone(), inner.clone()).prop_map(|(a, b)| format!("({a})−({b})")),
            (inner.clone(), inner).prop_map(|(a, b)| format!("({a})/({b})")),
        ]
    })
}

proptest! {
    #[test]
    fn what_is_printed_parses_back(text in expression_text()) {
        if let Ok(value) = parse_cell(&text, &Parameters::none(), CellOptions::default()) {
            let printed = value.to_string();
            let again = parse_cell(&printed, &Parameters::none(), CellOptions::default());
            let again = again.unwrap_or_else(|e| panic!("{text} printed as {printed}: {e:?}"));
            prop_assert!(same(&value, &again), "{} printed as {} read as {}", text, printed, again);
        }
    }

    #[test]
    fn doubles_print_exactly(x in any::<f64>().prop_filter("finite", |x| x.is_finite())) {
        let printed = ExactReal::Binary(x).to_string();
        let again = read(&printed);
        prop_assert_eq!(again.re.nearest(0), x, "{}", printed);
        prop_assert_eq!(again.re.equals(&ExactReal::Binary(x)), Some(true), "{}", printed);
    }

    #[test]
    fn plain_decimals_agree_with_the_library(text in "-?[0-9]{1,20}(\\.[0-9]{0,20})?(e-?[0-9]{1,3})?") {
        let expected: f64 = text.parse().unwrap_or(f64::NAN);
        match parse_cell(&text, &Parameters::none(), CellOptions::default()) {
            Ok(value) => prop_assert_eq!(value.re.nearest(0), expected, "{}", text),
            Err(e) => prop_assert!(
                expected.is_infinite() || expected == 0.0, "{}: {:?}", text, e
            ),
        }
    }

    #[test]
    fn any_text_is_answered(text in "\\PC{0,40}") {
        let result = parse_cell(&text, &Parameters::none(), CellOptions::default());
        if let Err(error) = result {
            prop_assert!(error.span.end <= text.len(), "{:?}: {:?}", text, error);
            prop_assert!(text.get(error.span.clone()).is_some(), "{:?}: {:?}", text, error);
        }
    }

    #[test]
    fn any_arrangement_of_words_is_answered(words in prop::collection::vec(
        prop::sample::select(vec![
            "1", "2.5", "1e3", "+", "-", "*", "/", "^", "(", ")", "sqrt", "√", "π", "i", "±",
            "²", "k", " ", ".", ",", "e", "−", "+/-",
        ]), 0..14)) {
        let text = words.concat();
        let p = given(&[("k", "sqrt(2)-1")]);
        if let Err(error) = parse_cell(&text, &p, CellOptions::default()) {
            prop_assert!(text.get(error.span.clone()).is_some(), "{:?}: {:?}", text, error);
        }
    }
}
