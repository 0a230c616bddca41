//! Whole texts, from the bytes to the cells and sentences.

use super::*;
use crate::num::ExactReal;

fn decimal(value: &ExactReal) -> String {
    value
        .rational()
        .map_or_else(|| "irrational".to_owned(), |ratio| ratio.to_string())
}

/// The cells as `re` or `re+im i`, `?` where there is no value.
fn cells(entry: &Entry) -> Vec<Vec<String>> {
    entry
        .cells
        .chunks(entry.cols.max(1))
        .map(|row| {
            row.iter()
                .map(|cell| match &cell.value {
                    None => "?".to_owned(),
                    Some(value) if value.im.is_zero() => decimal(&value.re),
                    Some(value) => format!("{}|{}", decimal(&value.re), decimal(&value.im)),
                })
                .collect()
        })
        .collect()
}

fn square(text: &str) -> Entry {
    read(Input::Text(text), &ReadOptions::default())
}

/// Asserts a clean reading.
fn assert_reads(text: &str, layout: Layout, wanted: &[&[&str]]) {
    let entry = square(text);
    assert!(
        entry.is_usable(),
        "{text:?}: {:#?} {:#?}",
        entry.diagnostics,
        entry.question
    );
    assert_eq!(
        entry.settings.and_then(|settings| settings.layout),
        Some(layout),
        "{text:?}"
    );
    assert_eq!(cells(&entry), wanted, "{text:?}");
}

#[test]
fn plain_layouts() {
    use Layout::*;
    let two: &[&[&str]] = &[&["2", "-1"], &["-1", "3"]];
    for (text, layout) in [
        ("2 -1\n-1 3", Spaces),
        ("  2   -1 \n\n -1    3\n", Spaces),
        ("2\t-1\n-1\t3", Tabs),
        ("2,-1\n-1,3", Commas),
        ("2, -1,\n-1, 3,\n", Commas),
        ("2;-1\n-1;3", Semicolons),
        ("2 -1; -1 3", RowsAtSemicolons),
        ("2 -1;\n-1 3;", RowsAtSemicolons),
        ("2, -1; -1, 3", CommasRowsAtSemicolons),
        ("[[2, -1], [-1, 3]]", Json),
        ("\"2\",\"-1\"\n\"-1\",\"3\"", Commas),
        ("2\t\u{2212}1\t\t\n\u{2212}1\t3\t\t\n\t\t\t\n", Tabs),
    ] {
        assert_reads(text, layout, two);
    }
}

#[test]
fn decimal_commas_beside_tabs_and_semicolons() {
    let two: &[&[&str]] = &[&["3/2", "1/4"], &["1/4", "2"]];
    for (text, layout) in [
        ("1,5\t0,25\n0,25\t2", Layout::Tabs),
        ("1,5;0,25\n0,25;2", Layout::Semicolons),
        ("\"1,5\";\"0,25\"\n\"0,25\";\"2\"", Layout::Semicolons),
        ("1,5 0,25\n0,25 2,0", Layout::Spaces),
    ] {
        assert_reads(text, layout, two);
    }
}

#[test]
fn a_single_cell_is_a_matrix() {
    assert_reads("7", Layout::Spaces, &[&["7"]]);
    assert_reads("[[7]]", Layout::Json, &[&["7"]]);
    assert_reads("1 + 2i", Layout::Spaces, &[&["1|2"]]);
}

#[test]
fn complex_cells_with_spaces_inside() {
    let two: &[&[&str]] = &[&["1", "1|2"], &["1|-2", "3"]];
    for (text, layout) in [
        ("1 1 + 2i\n1 - 2i 3", Layout::Spaces),
        ("1 1 +2i\n1 -2i 3", Layout::Spaces),
        ("1, 1 + 2i\n1 - 2i, 3", Layout::Commas),
        ("1\t1 + 2i\n1 - 2i\t3", Layout::Tabs),
        ("[[1, [1, 2]], [{\"re\": 1, \"im\": -2}, 3]]", Layout::Json),
    ] {
        assert_reads(text, layout, two);
    }
}

#[test]
fn triangles_and_bands() {
    let full: &[&[&str]] = &[&["1", "2", "4|-1"], &["2", "3", "5"], &["4|1", "5", "6"]];
    assert_reads("1\n2 3\n4+i 5 6", Layout::Spaces, full);
    assert_reads("1 2 4-i\n3 5\n6", Layout::Spaces, full);
    assert_reads("1\t\t\n2\t3\t\n4+i\t5\t6", Layout::Tabs, full);
    assert_reads("1\t2\t4-i\n\t3\t5\n\t\t6", Layout::Tabs, full);
    assert_reads("[[1], [2, 3], [[4, 1], 5, 6]]", Layout::Json, full);
    let band: &[&[&str]] = &[&["1", "4|-1", "0"], &["4|1", "2", "5"], &["0", "5", "3"]];
    assert_reads("1 2 3\n4+i 5", Layout::Spaces, band);
    assert_reads("4+i 5\n1 2 3", Layout::Spaces, band);
    assert_reads("4+i 5\n1 2 3\n4-i 5", Layout::Spaces, band);
}

#[test]
fn labels_are_kept_apart() {
    for (text, rows, cols) in [
        (
            "\tmast\tpod\nmast\t2\t-1\npod\t-1\t3",
            vec!["mast", "pod"],
            vec!["mast", "pod"],
        ),
        ("mast,pod\n2,-1\n-1,3", vec![], vec!["mast", "pod"]),
        ("mast 2 -1\npod -1 3", vec!["mast", "pod"], vec![]),
        ("node,a,b\na,2,-1\nb,-1,3", vec!["a", "b"], vec!["a", "b"]),
        ("  a b\na 2 -1\nb -1 3", vec!["a", "b"], vec!["a", "b"]),
        ("\t1\t2\n1\t2\t-1\n2\t-1\t3", vec!["1", "2"], vec!["1", "2"]),
    ] {
        let entry = square(text);
        assert!(entry.is_usable(), "{text:?}: {:#?}", entry.diagnostics);
        assert_eq!(cells(&entry), [["2", "-1"], ["-1", "3"]], "{text:?}");
        assert_eq!(
            (entry.row_labels, entry.col_labels),
            (
                rows.iter().map(|s| (*s).to_owned()).collect(),
                cols.iter().map(|s| (*s).to_owned()).collect()
            ),
            "{text:?}"
        );
    }
}

#[test]
fn ambiguous_texts_are_asked_about() {
    for (text, wanted, sizes) in [
        ("1,5 2,5", Wanted::Any, vec![(1, 2), (1, 4)]),
        ("1,5; 2,5", Wanted::Any, vec![(2, 2), (1, 2)]),
        ("2 1\n3", Wanted::Square, vec![(2, 2), (2, 2)]),
        ("1 2 3 4", Wanted::Square, vec![(4, 4), (2, 2)]),
        ("1 2 3", Wanted::Square, vec![(3, 3), (2, 2)]),
        ("1 2", Wanted::Square, vec![(2, 2)]),
        (
            "1,234\t2,345\n2,345\t1,000",
            Wanted::Square,
            vec![(2, 2), (2, 2)],
        ),
    ] {
        let options = ReadOptions {
            wanted,
            ..ReadOptions::default()
        };
        let entry = read(Input::Text(text), &options);
        let question = entry
            .question
            .clone()
            .unwrap_or_else(|| panic!("{text:?}: {entry:#?}"));
        assert!(!entry.is_usable(), "{text:?}");
        let found: Vec<_> = question
            .choices
            .iter()
            .map(|choice| (choice.preview.rows, choice.preview.cols))
            .collect();
        assert_eq!(found, sizes, "{text:?}");
        for choice in question.choices {
            let taken = read(
                Input::Text(text),
                &ReadOptions {
                    wanted,
                    settings: choice.settings,
                    ..ReadOptions::default()
                },
            );
            assert!(
                taken.is_usable(),
                "{text:?} as {:?}: {:#?}",
                choice.label,
                taken.diagnostics
            );
            assert_eq!(
                (taken.rows, taken.cols),
                (choice.preview.rows, choice.preview.cols),
                "{text:?}"
            );
        }
    }
}

#[test]
fn a_reading_taken_because_it_alone_fits_is_said() {
    for text in ["1,5 0,25\n0,25 2,0", "1,2\n2,1", "1 1 +2i\n1 -2i 3"] {
        let entry = square(text);
        assert!(entry.is_usable(), "{text:?}");
        assert!(
            entry
                .diagnostics
                .iter()
                .any(|said| said.kind == Kind::Recognised),
            "{text:?}: {:?}",
            entry.diagnostics
        );
    }
}

#[test]
fn each_mistake_has_its_sentence_and_place() {
    for (text, kind, place, sentence) in [
        ("", Kind::Empty, (None, None), "There is nothing here yet."),
        (
            "# only a remark",
            Kind::Empty,
            (None, None),
            "There are no cells in the text.",
        ),
        (
            "1 2 3\n4 5\n7 8 9",
            Kind::Ragged,
            (Some(2), None),
            "Row 2 has 2 cells; 3 expected, as in most rows.",
        ),
        (
            "1\n2 3\n4 5",
            Kind::Ragged,
            (Some(3), None),
            "Row 3 has 2 cells; 3 expected, as the rows form a lower triangle.",
        ),
        (
            "1 2 3\n4 5 6",
            Kind::NotSquare,
            (None, None),
            "2 rows of 3 cells make no square matrix.",
        ),
        (
            "1 x\n2 3",
            Kind::UnknownName,
            (Some(1), Some(2)),
            "The name x in row 1, column 2 has no value.",
        ),
        (
            "1 2?\n2 3",
            Kind::UnreadableCell,
            (Some(1), Some(2)),
            "2? in row 1, column 2 is not a number or expression.",
        ),
        (
            "1 NaN\n2 3",
            Kind::OutOfRange,
            (Some(1), Some(2)),
            "NaN in row 1, column 2 is not a finite number.",
        ),
        (
            "1;;2\n3;4;5\n6;7;8",
            Kind::BlankCell,
            (Some(1), Some(2)),
            "The cell in row 1, column 2 is blank.",
        ),
        (
            "1.5\t2\n2\t3,5",
            Kind::MixedDecimalMarks,
            (Some(2), Some(2)),
            "3,5 in row 2, column 2 has a decimal comma.",
        ),
        (
            "1\t1,234.5\n1,234.5\t1",
            Kind::ThousandsSeparator,
            (Some(1), Some(2)),
            "1,234.5 in row 1, column 2 has thousands separators.",
        ),
        (
            "<b>1</b>\t2\n2\t3",
            Kind::UnreadableCell,
            (Some(1), Some(1)),
            "<b>1</b> in row 1, column 1 is not a number or expression.",
        ),
        (
            "[[1, true], [2, 3]]",
            Kind::UnreadableCell,
            (Some(1), Some(2)),
            "The cell in row 1, column 2 is not a number.",
        ),
        (
            "שלום 1\n1 2",
            Kind::UnknownName,
            (Some(1), Some(1)),
            "The name \u{2068}שלום\u{2069} in row 1, column 1 has no value.",
        ),
    ] {
        let entry = square(text);
        let first = entry
            .diagnostics
            .first()
            .unwrap_or_else(|| panic!("{text:?}: nothing said"));
        assert_eq!(
            (
                first.severity,
                first.kind,
                (first.row, first.col),
                first.sentence.as_str()
            ),
            (Severity::Error, kind, place, sentence),
            "{text:?}"
        );
    }
}

#[test]
fn repairs_make_the_text_usable() {
    for (text, wanted) in [
        ("1.5\t2\n2\t3,5", [["3/2", "2"], ["2", "7/2"]]),
        ("1\t1,234.5\n1,234.5\t1", [["1", "2469/2"], ["2469/2", "1"]]),
        ("1;2\n2;\n", [["1", "2"], ["2", "0"]]),
        ("8 9\n1 2\n2 3", [["1", "2"], ["2", "3"]]),
        ("[[9, 1, 2], [9, 2, 3]]", [["1", "2"], ["2", "3"]]),
        ("a,b\n8,9\n1,2\n2,3", [["1", "2"], ["2", "3"]]),
        ("1 0\n2 3", [["1", "2"], ["2", "3"]]),
        ("1; 1/4\n0; 3", [["1", "1/4"], ["1/4", "3"]]),
        ("1,5\t2.5\n2.5\t3", [["3/2", "5/2"], ["5/2", "3"]]),
    ] {
        let entry = square(text);
        let repair = entry
            .diagnostics
            .iter()
            .flat_map(|said| &said.repairs)
            .next()
            .unwrap_or_else(|| panic!("{text:?}: {:?}", entry.diagnostics));
        let repaired = repair::apply(text, repair);
        let entry = square(&repaired);
        assert!(
            entry.is_usable(),
            "{text:?} became {repaired:?}: {:?}",
            entry.diagnostics
        );
        assert_eq!(cells(&entry), wanted, "{text:?} became {repaired:?}");
    }
}

#[test]
fn spans_point_at_the_cells_in_both_units() {
    let text = "\u{FEFF}1 \u{2212}2\n𝜋² 4";
    let entry = square(text);
    let units: Vec<u16> = text.encode_utf16().collect();
    for (cell, shown) in entry.cells.iter().zip(["1", "\u{2212}2", "𝜋²", "4"]) {
        let span = cell.span;
        assert_eq!(&text[span.start as usize..span.end as usize], shown);
        assert_eq!(
            String::from_utf16_lossy(&units[span.utf16_start as usize..span.utf16_end as usize]),
            shown
        );
    }
}

#[test]
fn a_million_rows_are_counted_and_refused() {
    let text = "1 2 3\n".repeat(1_000_000);
    let entry = square(&text);
    assert_eq!(entry.diagnostics[0].kind, Kind::TooLarge);
    assert_eq!(
        entry.diagnostics[0].sentence,
        "The text has 1,000,000 rows and 3 cells in the widest; matrices up to order 1,000 are worked here."
    );
}

#[test]
fn lists_written_as_columns_can_be_turned() {
    let text = "1 4\n2 5\n3";
    let entry = square(text);
    let repair = entry.diagnostics[0].repairs.first().expect("a repair");
    let entry = square(&repair::apply(text, repair));
    assert_eq!(
        cells(&entry),
        [["1", "4", "0"], ["4", "2", "5"], ["0", "5", "3"]]
    );
}

#[test]
fn choices_that_no_longer_fit_are_let_go() {
    let settings = Settings {
        layout: Some(Layout::Spaces),
        shape: Some(Shape::Diagonal),
        ..Settings::default()
    };
    for text in ["1 2\n2 3", "[[1, 2], [2, 3]]"] {
        let options = ReadOptions {
            settings,
            ..ReadOptions::default()
        };
        let entry = read(Input::Text(text), &options);
        assert!(entry.is_usable(), "{text:?}: {:?}", entry.diagnostics);
        assert_eq!(cells(&entry), [["1", "2"], ["2", "3"]], "{text:?}");
    }
}

#[test]
fn a_run_too_long_for_a_diagonal_is_no_matrix() {
    let entry = square(&"1 ".repeat(5000));
    assert!(!entry.is_usable());
    assert_eq!((entry.rows, entry.cols), (1, 5000));
}

#[test]
fn lists_run_over_rows_and_columns() {
    let options = ReadOptions {
        wanted: Wanted::List,
        ..ReadOptions::default()
    };
    for text in [
        "1 2 3",
        "1\n2\n3",
        "1 2\n3",
        "[1, 2, 3]",
        "1; 2; 3",
        "1\t2\t3\n",
    ] {
        let entry = read(Input::Text(text), &options);
        assert!(entry.is_usable(), "{text:?}: {:?}", entry.diagnostics);
        assert_eq!(cells(&entry), [["1", "2", "3"]], "{text:?}");
    }
}

#[test]
fn every_other_layout_reads_to_the_end() {
    let two: &[&[&str]] = &[&["1", "1/2"], &["1/2", "3"]];
    for (text, layout) in [
        (
            r"\begin{pmatrix} 1 & \frac{1}{2} \\ \tfrac12 & 3 \end{pmatrix}",
            Layout::Latex,
        ),
        (
            "| | a | b |\n|---|---|---|\n| a | 1 | 1/2 |\n| b | 1/2 | 3 |",
            Layout::Markdown,
        ),
        ("| 1 | 0.5 |\n|---|---|\n| 0.5 | 3 |", Layout::Markdown),
        (
            "<table><tr><th>a<th>b<tr><td>1<td>1/2<tr><td>1/2<td>3</table>",
            Layout::Html,
        ),
        ("[1 1/2; 1/2 3]", Layout::Brackets),
        (
            "%%MatrixMarket matrix array real symmetric\n2 2\n1\n.5\n3\n",
            Layout::MatrixMarket,
        ),
    ] {
        assert_reads(text, layout, two);
    }
}

#[test]
fn files_are_read_and_their_text_kept() {
    let doubles: Vec<u8> = [1.0f64, 0.5, 0.5, 3.0]
        .iter()
        .flat_map(|x| x.to_le_bytes())
        .collect();
    let header = b"{'descr': '<f8', 'fortran_order': False, 'shape': (2, 2), }\n";
    let npy = [
        b"\x93NUMPY\x01\x00",
        &[header.len() as u8, 0][..],
        header,
        &doubles,
    ]
    .concat();
    for bytes in [&npy[..], b"1 0.5\n0.5 3"] {
        let entry = read(
            Input::File {
                bytes,
                name: "a.npy",
            },
            &ReadOptions::default(),
        );
        assert!(entry.is_usable(), "{:?}", entry.diagnostics);
        let text = entry.text.clone().expect("the text of the file");
        assert_eq!(cells(&entry), [["1", "1/2"], ["1/2", "3"]]);
        assert_eq!(cells(&square(&text)), cells(&entry), "{text:?}");
    }
    let entry = read(
        Input::File {
            bytes: b"\x00\x01",
            name: "a.bin",
        },
        &ReadOptions::default(),
    );
    assert_eq!(entry.diagnostics[0].sentence, "a.bin is not a text file.");
}
