//! What is written in any layout reads back to the same exact values.

use super::cell::{parse_cell, CellOptions};
use super::*;
use proptest::prelude::*;

/// Cells as people write them, without spaces inside.
fn cell_text() -> impl Strategy<Value = String> {
    prop_oneof![
        (-99999i64..99999).prop_map(|n| n.to_string()),
        (any::<i32>(), 0usize..9).prop_map(|(n, places)| {
            let digits = format!("{:0>10}", n.unsigned_abs());
            let (whole, fraction) = digits.split_at(digits.len() - places);
            let sign = if n < 0 { "-" } else { "" };
            format!("{sign}{whole}.{fraction}0")
        }),
        (1i64..999, -40i32..40).prop_map(|(n, e)| format!("-{n}e{e}")),
        (-50i64..50, 1i64..50).prop_map(|(n, d)| format!("{n}/{d}")),
        (-9i64..9, 1i64..9).prop_map(|(re, im)| format!("{re}-{im}i")),
        (1i64..9, 1i64..9).prop_map(|(a, b)| format!("{a}*sqrt({b})")),
    ]
}

fn table() -> impl Strategy<Value = Vec<Vec<String>>> {
    (2usize..6).prop_flat_map(|order| {
        prop::collection::vec(prop::collection::vec(cell_text(), order), order)
    })
}

fn joined(rows: &[Vec<String>], cell: &str, row: &str) -> String {
    rows.iter()
        .map(|cells| cells.join(cell))
        .collect::<Vec<_>>()
        .join(row)
}

/// The table in every layout of text that holds any cell.
fn texts(rows: &[Vec<String>]) -> Vec<(Layout, String)> {
    let json: Vec<Vec<String>> = rows
        .iter()
        .map(|cells| cells.iter().map(|text| format!("\"{text}\"")).collect())
        .collect();
    vec![
        (Layout::Spaces, joined(rows, "  ", "\n")),
        (Layout::Tabs, joined(rows, "\t", "\r\n")),
        (Layout::Commas, joined(rows, ", ", "\n")),
        (Layout::Semicolons, joined(rows, ";", "\n")),
        (Layout::RowsAtSemicolons, joined(rows, " ", "; ")),
        (Layout::CommasRowsAtSemicolons, joined(rows, ", ", "; ")),
        (Layout::Brackets, format!("[{}]", joined(rows, " ", "; "))),
        (
            Layout::Brackets,
            format!("{{{{{}}}}}", joined(rows, ", ", "}, {")),
        ),
        (Layout::Json, format!("[[{}]]", joined(&json, ",", "],["))),
        (
            Layout::Latex,
            format!(
                "\\begin{{bmatrix}}{}\\end{{bmatrix}}",
                joined(rows, " & ", " \\\\ ")
            ),
        ),
        (
            Layout::Markdown,
            format!("| {} |", joined(rows, " | ", " |\n| ")),
        ),
        (
            Layout::Html,
            format!(
                "<table><tr><td>{}</table>",
                joined(rows, "<td>", "<tr><td>")
            ),
        ),
    ]
}

fn same(a: &CellValue, b: &CellValue) -> bool {
    a.re.equals(&b.re) == Some(true) && a.im.equals(&b.im) == Some(true)
}

/// Asserts that the entry holds these cells in its full rows.
fn holds(entry: &Entry, rows: &[Vec<String>]) -> bool {
    rows.iter().enumerate().all(|(row, cells)| {
        cells.iter().enumerate().all(|(col, text)| {
            let typed = parse_cell(text, &Parameters::none(), CellOptions::default());
            let read = entry.cell(row, col).and_then(|cell| cell.value.as_ref());
            typed
                .ok()
                .zip(read)
                .is_some_and(|(typed, read)| same(&typed, read))
        })
    })
}

proptest! {
    #[test]
    fn full_tables_read_back_in_every_layout(rows in table()) {
        for (layout, text) in texts(&rows) {
            let entry = read(Input::Text(&text), &ReadOptions::default());
            prop_assert!(entry.is_usable(), "{:?} {:?} {:?}", layout, text, entry.diagnostics);
            prop_assert_eq!(entry.settings.and_then(|s| s.layout), Some(layout), "{}", text);
            prop_assert_eq!((entry.rows, entry.cols), (rows.len(), rows.len()), "{}", text);
            prop_assert!(holds(&entry, &rows), "{:?} {:?}", layout, text);
        }
    }

    #[test]
    fn lower_triangles_read_back_in_every_layout(rows in table()) {
        prop_assume!(rows.len() > 2);
        let lower: Vec<Vec<String>> = rows.iter().enumerate().map(|(k, cells)| cells[..=k].to_vec()).collect();
        for (layout, text) in texts(&lower) {
            let entry = read(Input::Text(&text), &ReadOptions::default());
            prop_assert!(entry.is_usable(), "{:?} {:?} {:?}", layout, text, entry.diagnostics);
            prop_assert_eq!(entry.settings.and_then(|s| s.shape), Some(Shape::LowerTriangle), "{}", text);
            prop_assert!(holds(&entry, &lower), "{:?} {:?}", layout, text);
            for row in 0..entry.rows {
                for col in row + 1..entry.cols {
                    let here = entry.cell(row, col).and_then(|cell| cell.value.as_ref());
                    let there = entry.cell(col, row).and_then(|cell| cell.value.as_ref());
                    let conjugate = here.zip(there).is_some_and(|(a, b)| same(a, &b.conj()));
                    prop_assert!(conjugate, "{:?} at {}, {}", text, row, col);
                }
            }
        }
    }

    #[test]
    fn writing_in_full_and_repairing_nothing_keep_the_values(rows in table()) {
        for (_, text) in texts(&rows) {
            let options = ReadOptions::default();
            let entry = read(Input::Text(&text), &options);
            let full = grid::write_in_full(&text, &entry, &options);
            let again = read(Input::Text(&full.text), &ReadOptions { settings: full.settings, ..ReadOptions::default() });
            prop_assert!(holds(&again, &rows), "{:?} became {:?}", text, full.text);
        }
    }

    #[test]
    fn decimal_commas_read_back(rows in table()) {
        let plain = rows.iter().flatten().all(|text| !text.contains('.'));
        prop_assume!(!plain);
        let commas: Vec<Vec<String>> =
            rows.iter().map(|cells| cells.iter().map(|text| text.replace('.', ",")).collect()).collect();
        for text in [joined(&commas, ";", "\n"), joined(&commas, "\t", "\n")] {
            let settings = Settings { decimal: Some(DecimalMark::Comma), ..Settings::default() };
            let entry = read(Input::Text(&text), &ReadOptions { settings, ..ReadOptions::default() });
            prop_assert!(entry.is_usable(), "{:?} {:?}", text, entry.diagnostics);
            prop_assert!(holds(&entry, &rows), "{:?}", text);
        }
    }

    #[test]
    fn any_text_is_read_without_panic(text in "[-0-9a-z.,;:|&<>/\\\\{}()\\[\\]\"' \t\n\u{2212}é]{0,60}") {
        let entry = read(Input::Text(&text), &ReadOptions::default());
        prop_assert_eq!(entry.cells.len(), entry.rows * entry.cols);
        prop_assert!(entry.is_usable() || !entry.diagnostics.is_empty(), "{:?}", text);
    }
}

/// Texts on which a reader that looks ahead for a partner at every mark would
/// take quadratic time: 400,000 bytes would then take minutes.
#[test]
fn texts_of_one_mark_alone_end_soon() {
    for unit in [
        "(", "[", "{", "\\\\[", "\\cline{", "<", "<td ", "<!--", "\"", "$", "|", ";", ",",
        "\\frac{", "&", "-", "1 +2i ",
    ] {
        let text = unit.repeat(400_000 / unit.len());
        let entry = read(Input::Text(&text), &ReadOptions::default());
        assert!(!entry.is_usable(), "{unit:?}");
        assert!(!entry.diagnostics.is_empty(), "{unit:?}");
    }
}
