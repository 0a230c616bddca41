//! Matrix, array and tabular environments of LaTeX.
//!
//! Rows end at `\\` (or `\cr`), cells at `&`. Inside a cell the commands of
//! plain mathematics become the signs they print; everything else is kept as it
//! is and refused later by name.

use super::clean;
use super::diagnostic::{Finding, Findings, Kind};
use super::latex_cell;
use super::raw::{RawCell, RawTable};
use super::span::Bytes;

/// Environments whose rows and cells are a table.
const ENVIRONMENTS: [&str; 16] = [
    "matrix",
    "pmatrix",
    "bmatrix",
    "Bmatrix",
    "vmatrix",
    "Vmatrix",
    "smallmatrix",
    "array",
    "tabular",
    "matrix*",
    "pmatrix*",
    "bmatrix*",
    "Bmatrix*",
    "vmatrix*",
    "Vmatrix*",
    "psmallmatrix",
];

/// Whether the text holds such an environment, or its inside: cells at `&`,
/// which means nothing else in a text of numbers.
pub(crate) fn looks_like(body: &str) -> bool {
    body.contains("\\begin{") || body.contains('&')
}

/// Reads the first such environment; without one, the whole text is its inside.
pub(crate) fn read(source: &str, mut table: RawTable, findings: &mut Findings) -> RawTable {
    let (start, end) = inside(source, findings);
    let mut reader = Cells {
        source,
        row_has_text: false,
    };
    let mut from = start;
    let mut depth = 0usize;
    let mut at = start;
    while at < end {
        let byte = source.as_bytes()[at];
        match byte {
            b'\\' => {
                let command = command_at(source, at, end);
                let ends_row =
                    depth == 0 && matches!(command, "\\\\" | "\\cr" | "\\tabularnewline");
                if ends_row {
                    reader.push(from, at, &mut table, findings);
                    reader.end_row(&mut table);
                    at = after_optional(source, at + command.len(), end);
                    from = at;
                    continue;
                }
                if depth == 0 && is_rule(command) {
                    at = after_rule(source, at + command.len(), end);
                    from = at;
                    continue;
                }
                at += command.len();
                continue;
            }
            b'{' => depth += 1,
            b'}' => depth = depth.saturating_sub(1),
            b'&' if depth == 0 => {
                reader.push(from, at, &mut table, findings);
                reader.row_has_text = true;
                from = at + 1;
            }
            b'%' => {
                // A comment runs to the end of its line.
                let line_end = source[at..end]
                    .find(clean::is_line_break)
                    .map_or(end, |offset| at + offset);
                if clean::is_blank(&source[from..at]) {
                    from = line_end;
                }
                at = line_end;
                continue;
            }
            _ => {}
        }
        at += 1;
    }
    if reader.row_has_text || !clean::is_blank(&source[from..end]) {
        reader.push(from, end, &mut table, findings);
        reader.end_row(&mut table);
    }
    table
}

/// The bytes inside the first table environment.
fn inside(source: &str, findings: &mut Findings) -> (usize, usize) {
    let mut at = 0;
    while let Some(found) = source[at..].find("\\begin{") {
        let name_start = at + found + "\\begin{".len();
        let Some(length) = source[name_start..].find('}') else {
            break;
        };
        let name = &source[name_start..name_start + length];
        let mut start = name_start + length + 1;
        if !ENVIRONMENTS.contains(&name) {
            at = start;
            continue;
        }
        start = after_optional(source, start, source.len());
        if matches!(name, "array" | "tabular") {
            start = after_group(source, start, COLUMNS);
        }
        let closing = format!("\\end{{{name}}}");
        let Some(length) = source[start..].find(&closing) else {
            findings.push(
                Finding::error(
                    Kind::Malformed,
                    format!("The environment {name} is not closed by {closing}."),
                )
                .span(Bytes::new(at + found, start))
                .text(&source[at + found..start])
                .expected(closing),
            );
            return (start, source.len());
        };
        let after = start + length + closing.len();
        if ENVIRONMENTS
            .iter()
            .any(|name| source[after..].contains(&format!("\\begin{{{name}}}")))
        {
            findings.push(Finding::note(
                Kind::Ignored,
                "There is more than one matrix; the first was read.",
            ));
        }
        return (start, start + length);
    }
    (0, source.len())
}

/// The command that begins at the backslash: its letters, or one character.
pub(crate) fn command_at(source: &str, at: usize, end: usize) -> &str {
    let rest = &source[at..end];
    let letters = rest
        .bytes()
        .skip(1)
        .take_while(u8::is_ascii_alphabetic)
        .count();
    let length = match letters {
        0 => 1 + rest[1..].chars().next().map_or(0, char::len_utf8),
        letters => 1 + letters,
    };
    &rest[..length]
}

/// Past `*` and an optional argument in square brackets, as in `\\[2pt]`.
fn after_optional(source: &str, at: usize, end: usize) -> usize {
    let rest = &source[at..end];
    let star = rest.strip_prefix('*').unwrap_or(rest);
    let visible = star.trim_start_matches([' ', '\t']);
    let skipped = rest.len() - visible.len();
    // Only a length is an argument; a cell may begin with a bracket too.
    let argument = visible.strip_prefix('[').and_then(|inner| {
        let close = inner.bytes().take(ARGUMENT).position(|byte| byte == b']')?;
        Some(&inner[..close])
    });
    match argument {
        Some(argument) if argument.contains(|c: char| c.is_ascii_alphabetic()) => {
            at + skipped + argument.len() + 2
        }
        _ => at + (rest.len() - star.len()),
    }
}

/// Bytes that an argument of `\\\\` or of a rule may have; a bound, so that text
/// full of unclosed arguments is still read in one pass.
const ARGUMENT: usize = 64;

/// Bytes that the column specification of an array may have.
const COLUMNS: usize = 1 << 14;

/// Past a braced argument of at most `longest` bytes.
fn after_group(source: &str, at: usize, longest: usize) -> usize {
    let rest = &source[at..];
    let visible = rest.trim_start();
    if !visible.starts_with('{') {
        return at;
    }
    let mut depth = 0usize;
    for (offset, byte) in visible.bytes().take(longest).enumerate() {
        match byte {
            b'{' => depth += 1,
            b'}' => {
                depth -= 1;
                if depth == 0 {
                    return at + (rest.len() - visible.len()) + offset + 1;
                }
            }
            _ => {}
        }
    }
    at
}

fn is_rule(command: &str) -> bool {
    matches!(
        command,
        "\\hline" | "\\cline" | "\\toprule" | "\\midrule" | "\\bottomrule" | "\\cmidrule"
    )
}

fn after_rule(source: &str, at: usize, end: usize) -> usize {
    after_group(&source[..end], at, ARGUMENT)
}

/// The text of a cell without the comment that ends it.
fn without_comment(text: &str) -> &str {
    let percent = text
        .match_indices('%')
        .find(|&(at, _)| !text[..at].ends_with('\\'));
    match percent {
        Some((at, _)) => {
            let comment = text[at..].find(clean::is_line_break);
            let rest = comment.map_or("", |end| &text[at + end..]);
            if clean::is_blank(rest) {
                &text[..at]
            } else {
                text
            }
        }
        None => text,
    }
}

struct Cells<'a> {
    source: &'a str,
    /// Whether a cell of the row has been ended.
    row_has_text: bool,
}

impl Cells<'_> {
    fn push(&self, start: usize, end: usize, table: &mut RawTable, findings: &mut Findings) {
        let end = start + without_comment(&self.source[start..end]).len();
        let (from, to) = clean::trim(&self.source[start..end]);
        let (start, end) = (start + from, start + to);
        let text = &self.source[start..end];
        if let Some(dots) = latex_cell::dots(text) {
            findings.push(
                Finding::error(
                    Kind::UnreadableCell,
                    format!("{dots} leaves cells to the reader; write them out."),
                )
                .span(Bytes::new(start, end))
                .text(text)
                .expected("every cell of the matrix"),
            );
        }
        let plain = latex_cell::plain(text);
        table.push(if plain == text {
            RawCell::plain(start, end)
        } else {
            RawCell::rewritten(start, end, plain)
        });
    }

    fn end_row(&mut self, table: &mut RawTable) {
        table.end_row();
        self.row_has_text = false;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(source: &str) -> Vec<Vec<String>> {
        let mut findings = Findings::new(10);
        let table = read(source, RawTable::new(20), &mut findings);
        assert!(!findings.has_errors(), "{source:?}");
        table.texts(source)
    }

    #[test]
    fn environments_rows_and_cells() {
        for (source, wanted) in [
            (r"\begin{pmatrix} 1 & 2 \\ 3 & 4 \end{pmatrix}", vec![vec!["1", "2"], vec!["3", "4"]]),
            ("$$A = \\left[\\begin{array}{c|c}\n 1 & 2 \\\\[2pt] \\hline\n 3 & 4 \\\\\n\\end{array}\\right]$$", vec![vec!["1", "2"], vec!["3", "4"]]),
            (r"\begin{bmatrix*}[r] 1 & -i \\ i & {2} \end{bmatrix*}", vec![vec!["1", "-i"], vec!["i", "(2)"]]),
            ("1 & 2 \\\\ % note & more\n 3 & 4", vec![vec!["1", "2"], vec!["3", "4"]]),
            (r"\begin{matrix}1\cr 2&3\end{matrix}", vec![vec!["1"], vec!["2", "3"]]),
            (r"\begin{matrix}1 & \\ 2 & 3\end{matrix}", vec![vec!["1", ""], vec!["2", "3"]]),
            (r"\begin{matrix} [1] \\ [2] \end{matrix}", vec![vec!["[1]"], vec!["[2]"]]),
        ] {
            assert!(looks_like(source), "{source:?}");
            assert_eq!(texts(source), wanted, "{source:?}");
        }
    }

    #[test]
    fn spans_are_those_of_the_markup() {
        let source = r"\begin{pmatrix} \frac{1}{2} & \pi \end{pmatrix}";
        let table = read(source, RawTable::new(20), &mut Findings::new(1));
        let spans: Vec<_> = table.iter().map(|cell| cell.span.of(source)).collect();
        assert_eq!(spans, [r"\frac{1}{2}", r"\pi"]);
    }

    #[test]
    fn unclosed_and_dotted_matrices_are_errors() {
        for source in [
            r"\begin{pmatrix} 1 & 2",
            r"\begin{pmatrix} 1 & \cdots & 2 \end{pmatrix}",
        ] {
            let mut findings = Findings::new(10);
            read(source, RawTable::new(20), &mut findings);
            assert!(findings.has_errors(), "{source:?}");
        }
    }
}
