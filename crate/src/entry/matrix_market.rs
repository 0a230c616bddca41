//! Matrix Market exchange files (Boisvert, Pozo and Remington, "The Matrix
//! Market exchange formats: initial design", NIST IR 5935, 1996).
//!
//! The tokenizer is our own because the exact decimals must survive, with
//! their places; the crates for this format give doubles.

use super::clean;
use super::diagnostic::{count, Finding, Findings, Kind, Refused};
use super::raw::{RawCell, RawTable};
use super::span::Bytes;

const BANNER: &str = "%%matrixmarket";

/// Whether the text begins with the format's banner.
pub(crate) fn looks_like(body: &str) -> bool {
    body.get(..BANNER.len())
        .is_some_and(|start| start.eq_ignore_ascii_case(BANNER))
}

#[derive(Clone, Copy, PartialEq)]
enum Form {
    Array,
    Coordinate,
}

#[derive(Clone, Copy, PartialEq)]
enum Field {
    Real,
    Complex,
    Pattern,
}

#[derive(Clone, Copy, PartialEq)]
enum Symmetry {
    General,
    Symmetric,
    Hermitian,
}

struct Header {
    form: Form,
    field: Field,
    symmetry: Symmetry,
}

/// Reads the file into rows: all of them, or the lower triangle where the file
/// holds one triangle of a real symmetric or Hermitian matrix.
pub(crate) fn read(
    source: &str,
    table: RawTable,
    order: usize,
    findings: &mut Findings,
) -> Option<RawTable> {
    match file(source, table, order) {
        Ok((table, remarks)) => {
            remarks.into_iter().for_each(|remark| findings.push(remark));
            Some(table)
        }
        Err(finding) => {
            findings.push(*finding);
            None
        }
    }
}

fn refuse(sentence: impl Into<String>, bytes: Bytes, source: &str, expected: &str) -> Refused {
    Box::new(
        Finding::error(Kind::Malformed, sentence)
            .span(bytes)
            .text(bytes.of(source))
            .expected(expected),
    )
}

fn file(
    source: &str,
    mut table: RawTable,
    limit: usize,
) -> Result<(RawTable, Vec<Finding>), Refused> {
    let (start, _) = clean::trim(source);
    let banner_end = source[start..]
        .find(clean::is_line_break)
        .map_or(source.len(), |at| start + at);
    let header = header(source, Bytes::new(start, banner_end))?;
    let mut tokens = Tokens {
        source,
        at: banner_end,
    };
    let rows = tokens.size("number of rows")?;
    let cols = tokens.size("number of columns")?;
    if rows > limit || cols > limit {
        let sentence = format!(
            "The file holds {} of {}; matrices up to order {} are worked here.",
            count(rows, "row"),
            count(cols, "cell"),
            super::diagnostic::grouped(limit)
        );
        return Err(Box::new(Finding::error(Kind::TooLarge, sentence)));
    }
    if header.symmetry != Symmetry::General && rows != cols {
        let sentence = format!("The file calls a matrix of {rows} by {cols} symmetric.");
        return Err(refuse(
            sentence,
            Bytes::new(start, banner_end),
            source,
            "a square matrix",
        ));
    }
    let mut grid = Grid {
        rows,
        cols,
        cells: vec![None; rows * cols],
    };
    let mut remarks = Vec::new();
    if header.form == Form::Array {
        array(&header, &mut tokens, &mut grid)?;
    } else {
        coordinates(&header, &mut tokens, &mut grid, &mut remarks)?;
    }
    if let Some(token) = tokens.next() {
        return Err(refuse(
            "There is more in the file than its size line says.",
            token,
            source,
            "the end of the file",
        ));
    }
    let mirrored = header.symmetry == Symmetry::Hermitian
        || header.symmetry == Symmetry::Symmetric && header.field != Field::Complex;
    if header.symmetry == Symmetry::Symmetric && header.field == Field::Complex {
        remarks.push(Finding::note(
            Kind::Recognised,
            "The file says symmetric, not hermitian: both triangles hold the same complex numbers.",
        ));
    }
    table.marked_lower = mirrored;
    for row in 0..rows {
        for col in 0..if mirrored { row + 1 } else { cols } {
            let cell = match header.symmetry {
                Symmetry::General => grid.take(row, col),
                _ => grid.cells[row.max(col) * cols + row.min(col)].clone(),
            };
            table.push(cell.unwrap_or_else(RawCell::implied_zero));
        }
        table.end_row();
    }
    Ok((table, remarks))
}

/// Reads the banner.
fn header(source: &str, banner: Bytes) -> Result<Header, Refused> {
    let words: Vec<String> = banner
        .of(source)
        .split_whitespace()
        .skip(1)
        .map(str::to_ascii_lowercase)
        .collect();
    let word = |index: usize| words.get(index).map_or("", String::as_str);
    let wrong = |what: &str, expected: &str| {
        refuse(
            format!("The banner of the file names no {what} that is known."),
            banner,
            source,
            expected,
        )
    };
    if word(0) != "matrix" {
        return Err(wrong("object", "%%MatrixMarket matrix …"));
    }
    let form = match word(1) {
        "array" => Form::Array,
        "coordinate" => Form::Coordinate,
        _ => return Err(wrong("form", "array or coordinate")),
    };
    let field = match word(2) {
        "real" | "integer" | "double" | "unsigned-integer" => Field::Real,
        "complex" => Field::Complex,
        "pattern" if form == Form::Coordinate => Field::Pattern,
        _ => {
            return Err(wrong(
                "field",
                "real, integer, complex, or pattern with coordinates",
            ))
        }
    };
    let symmetry = match word(3) {
        "general" => Symmetry::General,
        "symmetric" => Symmetry::Symmetric,
        "hermitian" => Symmetry::Hermitian,
        "skew-symmetric" => {
            let finding = Finding::error(
                Kind::Unsupported,
                "The file holds a skew-symmetric matrix. Its eigenvalues are imaginary, so it is not Hermitian; i times it is.",
            );
            return Err(Box::new(
                finding
                    .span(banner)
                    .text("skew-symmetric")
                    .expected("general, symmetric or hermitian"),
            ));
        }
        _ => return Err(wrong("symmetry", "general, symmetric or hermitian")),
    };
    Ok(Header {
        form,
        field,
        symmetry,
    })
}

/// Column by column; only the lower triangle of a symmetric matrix.
fn array(header: &Header, tokens: &mut Tokens, grid: &mut Grid) -> Result<(), Refused> {
    for col in 0..grid.cols {
        let first = if header.symmetry == Symmetry::General {
            0
        } else {
            col
        };
        for row in first..grid.rows {
            let cell = tokens.cell(header.field, row, col)?;
            grid.cells[row * grid.cols + col] = Some(cell);
        }
    }
    Ok(())
}

fn coordinates(
    header: &Header,
    tokens: &mut Tokens,
    grid: &mut Grid,
    remarks: &mut Vec<Finding>,
) -> Result<(), Refused> {
    let entries = tokens.size("number of entries")?;
    let mut above = 0usize;
    for _ in 0..entries {
        let (row, place) = tokens.index(grid.rows, "row")?;
        let (col, _) = tokens.index(grid.cols, "column")?;
        let cell = tokens.cell(header.field, row, col)?;
        let (mut at_row, mut at_col) = (row, col);
        if header.symmetry != Symmetry::General && col > row {
            above += 1;
            (at_row, at_col) = (col, row);
            if header.symmetry == Symmetry::Hermitian && header.field == Field::Complex {
                let sentence = format!(
                    "The entry at {}, {} lies above the diagonal.",
                    row + 1,
                    col + 1
                );
                return Err(refuse(
                    sentence,
                    place,
                    tokens.source,
                    "entries on and below the diagonal of a Hermitian matrix",
                ));
            }
        }
        let held = &mut grid.cells[at_row * grid.cols + at_col];
        if held.is_some() {
            let sentence = format!("The entry at {}, {} is given twice.", row + 1, col + 1);
            return Err(refuse(sentence, place, tokens.source, "each entry once"));
        }
        *held = Some(cell);
    }
    if above > 0 {
        remarks.push(Finding::warning(
            Kind::Recognised,
            format!(
                "{} above the diagonal of a symmetric matrix; read as the ones below.",
                count(above, "entry")
            ),
        ));
    }
    Ok(())
}

struct Grid {
    rows: usize,
    cols: usize,
    cells: Vec<Option<RawCell>>,
}

impl Grid {
    fn take(&mut self, row: usize, col: usize) -> Option<RawCell> {
        self.cells[row * self.cols + col].take()
    }
}

/// The words of the file after the banner, comment lines left out.
struct Tokens<'a> {
    source: &'a str,
    at: usize,
}

impl Tokens<'_> {
    fn next(&mut self) -> Option<Bytes> {
        loop {
            let rest = &self.source[self.at..];
            let word = rest.trim_start_matches(clean::is_blank_char);
            let start = self.at + rest.len() - word.len();
            if word.is_empty() {
                return None;
            }
            if word.starts_with('%') {
                self.at = word
                    .find(clean::is_line_break)
                    .map_or(self.source.len(), |at| start + at);
                continue;
            }
            let end = word
                .find(clean::is_blank_char)
                .map_or(self.source.len(), |at| start + at);
            self.at = end;
            return Some(Bytes::new(start, end));
        }
    }

    fn due(&mut self, what: &str) -> Result<Bytes, Refused> {
        self.next().ok_or_else(|| {
            let end = Bytes::new(self.source.len(), self.source.len());
            refuse(
                format!("The file ends where a {what} is due."),
                end,
                self.source,
                what,
            )
        })
    }

    fn size(&mut self, what: &str) -> Result<usize, Refused> {
        let token = self.due(what)?;
        token
            .of(self.source)
            .parse::<u32>()
            .map(|size| size as usize)
            .map_err(|_| {
                refuse(
                    format!("The size line has no {what}."),
                    token,
                    self.source,
                    "a whole number",
                )
            })
    }

    /// An index from 1, as an index from 0, and its place.
    fn index(&mut self, size: usize, what: &str) -> Result<(usize, Bytes), Refused> {
        let token = self.due(&format!("{what} index"))?;
        match token.of(self.source).parse::<usize>() {
            Ok(index) if (1..=size).contains(&index) => Ok((index - 1, token)),
            _ => Err(refuse(
                format!(
                    "{} is no {what} of the matrix.",
                    super::diagnostic::excerpt(token.of(self.source))
                ),
                token,
                self.source,
                &format!("a whole number from 1 to {size}"),
            )),
        }
    }

    fn cell(&mut self, field: Field, row: usize, col: usize) -> Result<RawCell, Refused> {
        let what = format!("value for row {}, column {}", row + 1, col + 1);
        match field {
            Field::Pattern => Ok(RawCell::rewritten(self.at, self.at, "1".to_owned())),
            Field::Real => {
                let token = self.due(&what)?;
                Ok(RawCell {
                    span: token,
                    ..RawCell::default()
                })
            }
            Field::Complex => {
                let re = self.due(&what)?;
                let im = self.due(&what)?;
                let text = format!("({})+({})*i", re.of(self.source), im.of(self.source));
                Ok(RawCell::rewritten(re.start as usize, im.end as usize, text))
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(source: &str) -> Result<Vec<Vec<String>>, String> {
        let (table, _) = file(source, RawTable::new(20), 20).map_err(|finding| finding.sentence)?;
        Ok(table.texts(source))
    }

    #[test]
    fn every_variant() {
        for (source, wanted) in [
            (
                "%%MatrixMarket matrix array real general\n% remark\n2 2\n1\n3\n2\n4\n",
                vec![vec!["1", "2"], vec!["3", "4"]],
            ),
            (
                "%%MatrixMarket matrix array real symmetric\n2 2\n1.10\n3\n4\n",
                vec![vec!["1.10"], vec!["3", "4"]],
            ),
            (
                "%%matrixmarket MATRIX coordinate integer symmetric\n\n2 2 2\n1 1 5\n2 1 -3\n",
                vec![vec!["5"], vec!["-3", "0"]],
            ),
            (
                "%%MatrixMarket matrix coordinate complex hermitian\n2 2 2\n1 1 1e0 0\n2 1 0 -1\n",
                vec![vec!["(1e0)+(0)*i"], vec!["(0)+(-1)*i", "0"]],
            ),
            (
                "%%MatrixMarket matrix coordinate pattern general\n2 2 1\n1 2\n",
                vec![vec!["0", "1"], vec!["0", "0"]],
            ),
            (
                "%%MatrixMarket matrix coordinate pattern symmetric\n2 2 1\n1 2\n",
                vec![vec!["0"], vec!["1", "0"]],
            ),
            (
                "%%MatrixMarket matrix array complex symmetric\n2 2\n1 0\n0 1\n2 0\n",
                vec![
                    vec!["(1)+(0)*i", "(0)+(1)*i"],
                    vec!["(0)+(1)*i", "(2)+(0)*i"],
                ],
            ),
        ] {
            assert_eq!(
                texts(source).as_deref(),
                Ok(wanted
                    .iter()
                    .map(|row| row.iter().map(|s| (*s).to_owned()).collect())
                    .collect::<Vec<Vec<String>>>()
                    .as_slice()),
                "{source}"
            );
        }
    }

    #[test]
    fn each_fault_has_its_sentence() {
        for (source, sentence) in [
            ("%%MatrixMarket matrix array real skew-symmetric\n1 1\n", "The file holds a skew-symmetric matrix. Its eigenvalues are imaginary, so it is not Hermitian; i times it is."),
            ("%%MatrixMarket vector array real general\n", "The banner of the file names no object that is known."),
            ("%%MatrixMarket matrix array pattern general\n", "The banner of the file names no field that is known."),
            ("%%MatrixMarket matrix array real general\n2 2\n1 2 3\n", "The file ends where a value for row 2, column 2 is due."),
            ("%%MatrixMarket matrix array real general\n1 1\n1 2\n", "There is more in the file than its size line says."),
            ("%%MatrixMarket matrix coordinate real general\n2 2 1\n3 1 1\n", "3 is no row of the matrix."),
            ("%%MatrixMarket matrix coordinate real general\n2 2 2\n1 1 1\n1 1 2\n", "The entry at 1, 1 is given twice."),
            ("%%MatrixMarket matrix coordinate complex hermitian\n2 2 1\n1 2 1 1\n", "The entry at 1, 2 lies above the diagonal."),
            ("%%MatrixMarket matrix array real general\n5000 5000\n", "The file holds 5,000 rows of 5,000 cells; matrices up to order 20 are worked here."),
            ("%%MatrixMarket matrix array real symmetric\n2 3\n", "The file calls a matrix of 2 by 3 symmetric."),
            ("%%MatrixMarket matrix array real general\nx\n", "The size line has no number of rows."),
        ] {
            assert_eq!(texts(source), Err(sentence.to_owned()), "{source}");
        }
    }
}
