//! From a problem document to a problem: the first two stages in a row.

use super::ProblemDocument;
use crate::entry::cell::CellOptions;
use crate::entry::parameters::{ParameterError, ParameterErrorKind};
use crate::entry::{
    self, Diagnostic, Entry, Input, Parameters, ReadOptions, Settings, Severity, Wanted,
};
use crate::problem::{self, assemble, Assembly, Cells, Part, ProblemError};

/// What was understood of a document.
#[derive(Clone, Debug)]
pub struct Understanding {
    /// The parameters with their values.
    pub parameters: Parameters,
    /// What is to be said of them, in list order; unused ones last.
    pub remarks: Vec<ParameterError>,
    /// The matrix text.
    pub matrix: Entry,
    /// The metric text, if there is one.
    pub metric: Option<Entry>,
    /// The problem, or why there is none.
    pub assembly: Result<Assembly, NotReady>,
}

/// Why a document gives no problem.
#[derive(Clone, Debug)]
pub enum NotReady {
    /// A parameter that is used is at fault; the remarks say which.
    Parameters(Vec<ParameterError>),
    /// A text could not be read; its diagnostics say why.
    Text {
        /// Which matrix.
        part: Part,
        /// Its errors.
        errors: Vec<Diagnostic>,
    },
    /// The cells make no problem.
    Problem(ProblemError),
}

impl std::fmt::Display for NotReady {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::Parameters(errors) => {
                let sentences: Vec<String> = errors.iter().map(ToString::to_string).collect();
                f.write_str(&sentences.join("\n"))
            }
            Self::Text { part, errors } => {
                write!(f, "The {} could not be read.", part.name())?;
                for error in errors {
                    write!(f, "\n{}", error.sentence)?;
                }
                Ok(())
            }
            Self::Problem(error) => error.fmt(f),
        }
    }
}

impl std::error::Error for NotReady {}

/// Reads parameters, matrix and metric, and builds the problem.
///
/// Cost: linear in the texts, n² for the Hermitian test. The definiteness of
/// the metric is left to [`crate::problem::metric_check`].
pub fn understand(document: &ProblemDocument) -> Understanding {
    let list: Vec<(String, String)> = document
        .parameters
        .iter()
        .map(|p| (p.name.clone(), p.value.clone()))
        .collect();
    let (parameters, mut remarks) = Parameters::read(&list, CellOptions::default());
    let choices = &document.choices;
    let matrix = read(
        &document.matrix,
        Wanted::Square,
        choices.matrix_layout.as_deref(),
        &parameters,
    );
    let metric = document.metric.as_deref().map(|text| {
        read(
            text,
            Wanted::Metric,
            choices.metric_layout.as_deref(),
            &parameters,
        )
    });
    let assembly = assembled(document, &matrix, metric.as_ref(), &remarks);
    remarks.extend(parameters.unused());
    Understanding {
        parameters,
        remarks,
        matrix,
        metric,
        assembly,
    }
}

fn read(text: &str, wanted: Wanted, layout: Option<&str>, parameters: &Parameters) -> Entry {
    let settings: Settings = layout
        .and_then(|key| serde_json::from_str(key).ok())
        .unwrap_or_default();
    let options = ReadOptions {
        wanted,
        settings,
        parameters: Some(parameters),
        ..ReadOptions::default()
    };
    entry::read(Input::Text(text), &options)
}

fn assembled(
    document: &ProblemDocument,
    matrix: &Entry,
    metric: Option<&Entry>,
    remarks: &[ParameterError],
) -> Result<Assembly, NotReady> {
    let faults: Vec<ParameterError> = remarks
        .iter()
        .filter(|r| r.kind != ParameterErrorKind::Unused)
        .cloned()
        .collect();
    if !faults.is_empty() {
        return Err(NotReady::Parameters(faults));
    }
    let matrix = cells(matrix, Part::Matrix)?;
    let metric = metric.map(|entry| cells(entry, Part::Metric)).transpose()?;
    let choices = problem::Choices {
        matrix: document
            .choices
            .matrix_adjustment
            .map(super::Adjustment::mirror),
        metric: document
            .choices
            .metric_adjustment
            .map(super::Adjustment::mirror),
    };
    assemble(matrix, metric, &choices).map_err(NotReady::Problem)
}

/// The values of an entry, if every cell has one.
fn cells(entry: &Entry, part: Part) -> Result<Cells, NotReady> {
    let values: Option<Vec<_>> = entry.cells.iter().map(|cell| cell.value.clone()).collect();
    match values {
        Some(values) if entry.is_usable() => Ok(Cells {
            rows: entry.rows,
            cols: entry.cols,
            values,
        }),
        _ => {
            let errors = entry
                .diagnostics
                .iter()
                .filter(|d| d.severity == Severity::Error);
            Err(NotReady::Text {
                part,
                errors: errors.cloned().collect(),
            })
        }
    }
}

/// The problem of a document.
///
/// # Errors
/// [`NotReady`] with every sentence a person needs to mend the document.
pub fn problem(document: &ProblemDocument) -> Result<Assembly, NotReady> {
    understand(document).assembly
}
