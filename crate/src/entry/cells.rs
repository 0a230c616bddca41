//! Raw cells to cells with values, each refusal with its sentence.

use super::diagnostic::{excerpt, Finding, Findings, Kind};
use super::raw::RawCell;
use super::repair::{Action, Repair};
use super::settings::Settings;
use super::shape::Source;
use super::value::{self, Refusal, Value};
use super::{Cell, Origin, Span};

/// Reads the cells of one text.
pub(crate) struct CellReader<'a> {
    pub text: &'a str,
    pub settings: &'a Settings,
}

impl CellReader<'_> {
    /// The value of a cell; a refusal is reported at `row` and `col`.
    pub fn read(
        &self,
        cell: &RawCell,
        row: usize,
        col: usize,
        findings: &mut Findings,
    ) -> Option<Value> {
        let text = cell.text(self.text);
        match value::read(text, self.settings.decimal.unwrap_or_default()) {
            Ok(value) => Some(value),
            Err(refusal) => {
                let finding = self
                    .describe(&refusal, text, row, col)
                    .at(row, col)
                    .span(cell.span)
                    .text(text);
                findings.push(finding);
                None
            }
        }
    }

    fn describe(&self, refusal: &Refusal, text: &str, row: usize, col: usize) -> Finding {
        let place = format!("row {}, column {}", row + 1, col + 1);
        let shown = excerpt(text);
        let repair = |label: &str, action| Repair::new(label, action, *self.settings);
        match refusal {
            Refusal::Blank => {
                Finding::error(Kind::BlankCell, format!("The cell in {place} is blank."))
                    .expected("a number; write 0 where nothing is meant")
                    .repair(repair("Write 0 in blank cells", Action::FillBlanks))
            }
            Refusal::Thousands { plain } => Finding::error(
                Kind::ThousandsSeparator,
                format!("{shown} in {place} has thousands separators."),
            )
            .expected(format!("the number without them: {plain}"))
            .repair(repair(
                "Take out the thousands separators",
                Action::StripThousands,
            )),
            Refusal::DecimalComma { plain } => Finding::error(
                Kind::MixedDecimalMarks,
                format!("{shown} in {place} has a decimal comma."),
            )
            .expected(format!("a decimal point: {plain}"))
            .repair(repair(
                "Write points for decimal commas",
                Action::PointsForCommas,
            )),
            Refusal::NotFinite => Finding::error(
                Kind::OutOfRange,
                format!("{shown} in {place} is not a finite number."),
            )
            .expected("a finite number"),
            Refusal::Unreadable => Finding::error(
                Kind::UnreadableCell,
                format!("{shown} in {place} is not a number or expression."),
            )
            .expected("a number such as -1.5, 2e-3, 1/3 or 1+2i"),
        }
    }
}

/// The matrix cell that comes from `source` among the cells given.
pub(crate) fn lay(source: Source, given: &[Vec<Cell>]) -> Cell {
    let at = |row: usize, col: usize| given.get(row).and_then(|cells| cells.get(col));
    match source {
        Source::Given(row, col) => at(row, col).cloned().unwrap_or(Cell {
            value: None,
            span: Span::default(),
            origin: Origin::Implied,
        }),
        Source::Mirrored(row, col) => match at(row, col) {
            Some(cell) => Cell {
                value: cell.value.as_ref().map(Value::conjugate),
                span: cell.span,
                origin: Origin::Mirrored,
            },
            None => Cell {
                value: None,
                span: Span::default(),
                origin: Origin::Implied,
            },
        },
        Source::Zero => Cell {
            value: Some(Value::ZERO),
            span: Span::default(),
            origin: Origin::Implied,
        },
    }
}
