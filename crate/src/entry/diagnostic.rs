//! What is said about a text: where, what, what was expected, and what would
//! repair it.

use super::question::Question;
use super::repair::Repair;
use super::span::{Bytes, Offsets, Span};
use serde::Serialize;

/// How much a diagnostic weighs.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Severity {
    /// Said so that nothing is understood in silence.
    Note,
    /// The matrix is usable, but look here.
    Warning,
    /// The matrix cannot be used as it stands.
    Error,
}

/// What kind of thing a diagnostic says.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
#[non_exhaustive]
pub enum Kind {
    /// There is nothing to read.
    Empty,
    /// More bytes, rows, columns or levels than are read.
    TooLarge,
    /// The bytes are not text, or a kind of file that is not read.
    Unsupported,
    /// The structure of the layout is broken.
    Malformed,
    /// A row has another number of cells than the rest.
    Ragged,
    /// As many rows as columns were wanted.
    NotSquare,
    /// A cell has no text where one is needed.
    BlankCell,
    /// A cell is not a number or an expression.
    UnreadableCell,
    /// A cell uses a name that has no value.
    UnknownName,
    /// A number is NaN or infinite, or too large or small to hold.
    OutOfRange,
    /// Thousands separators, which are refused rather than misread.
    ThousandsSeparator,
    /// Decimal commas beside decimal points.
    MixedDecimalMarks,
    /// The two places that hold a Hermitian pair disagree.
    TriangleDisagrees,
    /// The content can be read in more than one way.
    Ambiguous,
    /// What was recognised, said because another reading was possible.
    Recognised,
    /// Something was passed over: comments, invisible characters, blank rows.
    Ignored,
}

/// One thing said about the text.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(rename_all = "camelCase")]
pub struct Diagnostic {
    /// How much it weighs.
    pub severity: Severity,
    /// Its kind.
    pub kind: Kind,
    /// Row as people count, from 1.
    pub row: Option<u32>,
    /// Column as people count, from 1.
    pub col: Option<u32>,
    /// The place in the text.
    pub span: Option<Span>,
    /// The text at fault, cut to a readable length.
    pub text: String,
    /// A sentence a person can act on.
    pub sentence: String,
    /// What was expected there.
    pub expected: String,
    /// What would put it right, best first.
    pub repairs: Vec<Repair>,
}

/// A diagnostic in the making: offsets are still bytes.
#[derive(Clone, Debug)]
pub(crate) struct Finding {
    pub severity: Severity,
    pub kind: Kind,
    pub place: Option<(usize, usize)>,
    pub row_only: bool,
    pub bytes: Option<Bytes>,
    pub text: String,
    pub sentence: String,
    pub expected: String,
    pub repairs: Vec<Repair>,
}

impl Finding {
    fn new(severity: Severity, kind: Kind, sentence: impl Into<String>) -> Self {
        Self {
            severity,
            kind,
            place: None,
            row_only: false,
            bytes: None,
            text: String::new(),
            sentence: sentence.into(),
            expected: String::new(),
            repairs: Vec::new(),
        }
    }

    pub fn error(kind: Kind, sentence: impl Into<String>) -> Self {
        Self::new(Severity::Error, kind, sentence)
    }

    pub fn warning(kind: Kind, sentence: impl Into<String>) -> Self {
        Self::new(Severity::Warning, kind, sentence)
    }

    pub fn note(kind: Kind, sentence: impl Into<String>) -> Self {
        Self::new(Severity::Note, kind, sentence)
    }

    /// At a cell, both counted from 0.
    pub fn at(mut self, row: usize, col: usize) -> Self {
        self.place = Some((row, col));
        self
    }

    /// At a whole row, counted from 0.
    pub fn at_row(mut self, row: usize) -> Self {
        self.place = Some((row, 0));
        self.row_only = true;
        self
    }

    pub fn span(mut self, bytes: Bytes) -> Self {
        self.bytes = Some(bytes);
        self
    }

    pub fn text(mut self, text: &str) -> Self {
        self.text = excerpt(text);
        self
    }

    pub fn expected(mut self, expected: impl Into<String>) -> Self {
        self.expected = expected.into();
        self
    }

    pub fn repair(mut self, repair: Repair) -> Self {
        self.repairs.push(repair);
        self
    }
}

/// A finding that ends the reading.
pub(crate) type Refused = Box<Finding>;

/// Collects findings up to a limit and counts the rest.
pub(crate) struct Findings {
    list: Vec<Finding>,
    limit: usize,
    passed_over: usize,
}

impl Findings {
    pub fn new(limit: usize) -> Self {
        Self {
            list: Vec::new(),
            limit,
            passed_over: 0,
        }
    }

    pub fn push(&mut self, finding: Finding) {
        if self.list.len() < self.limit {
            self.list.push(finding);
        } else {
            self.passed_over += 1;
        }
    }

    /// Whether anything said so far makes the matrix unusable.
    pub fn has_errors(&self) -> bool {
        self.list
            .iter()
            .any(|finding| finding.severity == Severity::Error)
    }

    /// Gives every cell's place once labels in front are taken into account.
    pub fn into_diagnostics(self, offsets: &Offsets) -> Vec<Diagnostic> {
        let mut list: Vec<Diagnostic> = self
            .list
            .into_iter()
            .map(|finding| Diagnostic {
                severity: finding.severity,
                kind: finding.kind,
                row: finding.place.map(|(row, _)| row as u32 + 1),
                col: finding
                    .place
                    .filter(|_| !finding.row_only)
                    .map(|(_, col)| col as u32 + 1),
                span: finding.bytes.map(|bytes| offsets.span(bytes)),
                text: finding.text,
                sentence: finding.sentence,
                expected: finding.expected,
                repairs: finding.repairs,
            })
            .collect();
        // Errors first; the sort is stable, so the order of the text stays.
        list.sort_by_key(|diagnostic| std::cmp::Reverse(diagnostic.severity));
        if self.passed_over > 0 {
            let more = Finding::warning(
                Kind::Ignored,
                format!(
                    "{} more findings are not listed; put these right first.",
                    self.passed_over
                ),
            );
            let mut rest = Findings::new(1);
            rest.push(more);
            list.extend(rest.into_diagnostics(offsets));
        }
        list
    }
}

/// Characters of the text at fault that a diagnostic repeats.
const EXCERPT: usize = 40;

/// The text cut to [`EXCERPT`] characters, characters that cannot be seen made
/// visible, and text from right to left isolated, so that it does not turn the
/// sentence around it (Unicode Standard Annex 9, isolates).
pub(crate) fn excerpt(text: &str) -> String {
    let mut out: String = text
        .chars()
        .take(EXCERPT)
        .map(|c| {
            if c.is_control() || super::clean::is_invisible(c) {
                '\u{FFFD}'
            } else {
                c
            }
        })
        .collect();
    if text.chars().nth(EXCERPT).is_some() {
        out.push('…');
    }
    if out.chars().any(super::clean::is_right_to_left) {
        return format!("\u{2068}{out}\u{2069}");
    }
    out
}

/// `1 cell`, `3 cells`, `2 entries`.
pub(crate) fn count(number: usize, noun: &str) -> String {
    let number_text = grouped(number);
    match noun.strip_suffix('y') {
        _ if number == 1 => format!("{number_text} {noun}"),
        Some(stem) => format!("{number_text} {stem}ies"),
        None => format!("{number_text} {noun}s"),
    }
}

/// A whole number with thin groups of three, for sentences.
pub(crate) fn grouped(number: usize) -> String {
    let digits = number.to_string();
    let mut out = String::new();
    for (at, digit) in digits.chars().enumerate() {
        if at > 0 && (digits.len() - at).is_multiple_of(3) {
            out.push(',');
        }
        out.push(digit);
    }
    out
}

/// The diagnostic that goes with an open question.
pub(crate) fn asks(question: &Question) -> Finding {
    Finding::error(Kind::Ambiguous, question.sentence.clone())
        .expected("a choice between the readings")
}
