//! Cell texts written as rows of text again.

use super::clean;
use super::plain;
use super::settings::Layout;

/// Writes rows of cell texts in the layout, or apart by spaces where the layout
/// is not one of plain text.
pub(crate) fn rows(rows: &[Vec<String>], layout: Layout) -> String {
    let (cell_mark, row_mark) = match layout {
        Layout::Tabs => ("\t", "\n"),
        Layout::Commas => (", ", "\n"),
        Layout::CommasRowsAtSemicolons => (", ", "; "),
        Layout::Semicolons => ("; ", "\n"),
        Layout::RowsAtSemicolons => ("  ", "; "),
        Layout::Json => return json(rows),
        _ => ("  ", "\n"),
    };
    let mut out = String::new();
    for (index, cells) in rows.iter().enumerate() {
        if index > 0 {
            out.push_str(row_mark);
        }
        for (col, text) in cells.iter().enumerate() {
            if col > 0 {
                out.push_str(cell_mark);
            }
            out.push_str(&cell(text, layout));
        }
    }
    out.push('\n');
    out
}

/// The cell text as it can stand in the layout by itself.
pub(crate) fn cell(text: &str, layout: Layout) -> String {
    let text = text.trim_matches(clean::is_blank_char);
    match layout {
        Layout::Json => json_cell(text),
        Layout::Tabs | Layout::Commas | Layout::Semicolons => {
            let delimiter = match layout {
                Layout::Tabs => '\t',
                Layout::Commas => ',',
                _ => ';',
            };
            if text.contains([delimiter, '"', '\n', '\r']) {
                format!("\"{}\"", text.replace('"', "\"\""))
            } else {
                text.to_owned()
            }
        }
        Layout::CommasRowsAtSemicolons if !text.contains([',', ';']) => text.to_owned(),
        _ => without_gaps(text),
    }
}

/// The cell without the white space that would part it into several.
pub(crate) fn without_gaps(text: &str) -> String {
    let mut words = text
        .split(clean::is_blank_char)
        .filter(|word| !word.is_empty());
    let mut out = words.next().unwrap_or("0").to_owned();
    for word in words {
        // Two operands side by side are no cell; keep them apart as they were.
        let operator = plain::continues(&out, word) || word.starts_with(plain::SIGNS);
        if !operator && !out.ends_with('(') && !word.starts_with(')') {
            out.push(' ');
        }
        out.push_str(word);
    }
    out
}

fn json(rows: &[Vec<String>]) -> String {
    let lines: Vec<String> = rows
        .iter()
        .map(|cells| {
            let cells: Vec<String> = cells.iter().map(|text| json_cell(text)).collect();
            format!("[{}]", cells.join(", "))
        })
        .collect();
    format!("[{}]\n", lines.join(",\n "))
}

/// A JSON number where the text is one, else a string.
fn json_cell(text: &str) -> String {
    let number = text.starts_with(|c: char| c == '-' || c.is_ascii_digit())
        && serde_json::from_str::<&serde_json::value::RawValue>(text).is_ok();
    if number {
        text.to_owned()
    } else {
        serde_json::Value::from(text).to_string()
    }
}
