//! Raw cells to cells with values, each refusal with its sentence.

use super::cell::{CellError, CellErrorKind, CellValue, Parameters};
use super::clean;
use super::diagnostic::{excerpt, Finding, Findings, Kind};
use super::raw::{RawCell, RawText};
use super::repair::{Action, Repair};
use super::settings::{DecimalMark, Settings};
use super::shape::Source;
use super::span::Bytes;
use super::value;
use super::{Cell, Origin, Span};

/// Reads the cells of one text.
pub(crate) struct CellReader<'a> {
    pub text: &'a str,
    pub settings: &'a Settings,
    pub parameters: &'a Parameters,
}

impl CellReader<'_> {
    /// The value of a cell; a refusal is reported at `row` and `col`.
    pub fn read(
        &self,
        cell: &RawCell,
        row: usize,
        col: usize,
        findings: &mut Findings,
    ) -> Option<CellValue> {
        if cell.raw == RawText::ImpliedZero {
            return Some(CellValue::ZERO);
        }
        let shown = cell.text(self.text);
        let text = clean::normal(shown);
        let mark = self.settings.decimal.unwrap_or_default();
        match value::read(&text, self.parameters, mark) {
            Ok(value) => Some(value),
            Err(error) => {
                // The error's place is known in the source only where the text
                // read is the source itself.
                let exact = cell.raw == RawText::Source && text == shown;
                let bytes = if exact {
                    within(cell.span, &error)
                } else {
                    cell.span
                };
                findings.push(
                    self.describe(&error, &text, row, col)
                        .at(row, col)
                        .span(bytes),
                );
                None
            }
        }
    }

    fn describe(&self, error: &CellError, text: &str, row: usize, col: usize) -> Finding {
        let place = format!("row {}, column {}", row + 1, col + 1);
        let shown = excerpt(text.trim());
        let repair = |label: &str, action| Repair::new(label, action, *self.settings);
        if clean::is_blank(text) {
            return Finding::error(Kind::BlankCell, format!("The cell in {place} is blank."))
                .expected("a number; write 0 where nothing is meant")
                .repair(repair("Write 0 in blank cells", Action::FillBlanks));
        }
        let kind = kind_of(error.kind);
        let sentence = match kind {
            Kind::ThousandsSeparator => format!("{shown} in {place} has thousands separators."),
            Kind::MixedDecimalMarks if error.kind == CellErrorKind::DecimalComma => {
                format!("{shown} in {place} has a decimal comma.")
            }
            Kind::MixedDecimalMarks => {
                format!("{shown} in {place} has a decimal point among decimal commas.")
            }
            Kind::UnknownName => {
                let name = text.get(error.span.clone()).unwrap_or(text);
                format!("The name {} in {place} has no value.", excerpt(name))
            }
            Kind::OutOfRange if error.kind == CellErrorKind::NotFinite => {
                format!("{shown} in {place} is not a finite number.")
            }
            Kind::OutOfRange => {
                format!("{shown} in {place} is outside the range of numbers worked here.")
            }
            _ => format!("{shown} in {place} is not a number or expression."),
        };
        let finding = Finding::error(kind, sentence)
            .text(text.trim())
            .expected(error.expected.clone());
        match kind {
            Kind::ThousandsSeparator if value::without_groups(text).is_some() => finding.repair(
                repair("Take out the thousands separators", Action::StripThousands),
            ),
            Kind::MixedDecimalMarks => {
                let (label, action) = match self.settings.decimal {
                    Some(DecimalMark::Comma) => {
                        ("Write commas for decimal points", Action::CommasForPoints)
                    }
                    _ => ("Write points for decimal commas", Action::PointsForCommas),
                };
                finding.repair(repair(label, action))
            }
            _ => finding,
        }
    }
}

fn kind_of(kind: CellErrorKind) -> Kind {
    match kind {
        CellErrorKind::ThousandsSeparator => Kind::ThousandsSeparator,
        CellErrorKind::UnknownName | CellErrorKind::ValuelessName => Kind::UnknownName,
        CellErrorKind::NotFinite
        | CellErrorKind::BeyondDouble
        | CellErrorKind::BelowDouble
        | CellErrorKind::TooLarge => Kind::OutOfRange,
        kind if value::is_other_mark(kind) => Kind::MixedDecimalMarks,
        _ => Kind::UnreadableCell,
    }
}

/// The bytes of the source that the error is about.
fn within(cell: Bytes, error: &CellError) -> Bytes {
    let at = |offset: usize| (cell.start as usize + offset).min(cell.end as usize);
    if error.span.is_empty() {
        return cell;
    }
    Bytes::new(at(error.span.start), at(error.span.end))
}

/// The matrix cell that comes from `source` among the cells given.
pub(crate) fn lay(source: Source, given: &[Vec<Cell>]) -> Cell {
    let at = |row: usize, col: usize| given.get(row).and_then(|cells| cells.get(col));
    let absent = Cell {
        value: None,
        span: Span::default(),
        origin: Origin::Implied,
    };
    match source {
        Source::Given(row, col) => at(row, col).cloned().unwrap_or(absent),
        Source::Mirrored(row, col) => at(row, col).map_or(absent, |cell| Cell {
            value: cell.value.as_ref().map(CellValue::conj),
            span: cell.span,
            origin: Origin::Mirrored,
        }),
        Source::Zero => Cell {
            value: Some(CellValue::ZERO),
            ..absent
        },
    }
}
