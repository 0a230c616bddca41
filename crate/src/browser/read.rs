//! A document through the entry and problem stages, as the page is told of it.

use super::convert;
use super::document::{part_of, ProblemDocument};
use super::edit;
use super::reading::{
    Diagnostic, Disagreements, GridEdit, ParameterDiagnostic, Reading, Severity, TextChange,
    TextReading, Which,
};
use crate::document::{understand, NotReady};
use crate::entry::cell::CellOptions;
use crate::entry::parameters::{ParameterError, ParameterErrorKind};
use crate::entry::{self, Entry, Kind, Parameters, ReadOptions, Settings, Wanted};
use crate::problem::ProblemError;
use crate::problem::{metric_check, Assembly, Asymmetry, AsymmetrySize, MetricVerdict, Part};

/// A problem that can be solved, with what the results are labelled by.
pub(super) struct Ready {
    pub document: ProblemDocument,
    pub assembly: Assembly,
    /// Labels of the rows as typed; empty when there are none.
    pub row_labels: Vec<String>,
}

/// Reads the document; the problem is there when nothing is wrong.
pub(super) fn document(
    document: &ProblemDocument,
) -> Result<(Reading, Option<Ready>), serde_json::Error> {
    let understood = understand(document);
    let mut parameters = parameter_diagnostics(&understood.remarks);
    let mut matrix = told(document, Which::Matrix, &understood.matrix, &mut parameters)?;
    let mut metric = match &understood.metric {
        Some(entry) => Some(told(document, Which::Metric, entry, &mut parameters)?),
        None => None,
    };
    let assembly = match understood.assembly {
        Ok(assembly) => Some(assembly).filter(|found| is_positive(found, metric.as_mut())),
        Err(NotReady::Problem(error)) => {
            let text = match (part_of(&error), metric.as_mut()) {
                (Part::Metric, Some(metric)) => metric,
                _ => &mut matrix,
            };
            refuse(text, &error);
            None
        }
        // Already said, parameter by parameter and cell by cell.
        Err(NotReady::Parameters(_) | NotReady::Text { .. }) => None,
    };
    let ready = assembly.map(|assembly| Ready {
        document: document.clone(),
        assembly,
        row_labels: understood.matrix.row_labels.clone(),
    });
    let reading = Reading {
        matrix,
        metric,
        parameters,
        ready: ready.is_some(),
    };
    Ok((reading, ready))
}

/// What a grid edit changes in one text of the document.
pub(super) fn edited(
    document: &ProblemDocument,
    which: Which,
    edit: GridEdit,
) -> Result<TextChange, serde_json::Error> {
    let given: Vec<(String, String)> = document
        .parameters
        .iter()
        .map(|parameter| (parameter.name.clone(), parameter.value.clone()))
        .collect();
    let (parameters, _) = Parameters::read(&given, CellOptions::default());
    let options = ReadOptions {
        wanted: match which {
            Which::Matrix => Wanted::Square,
            Which::Metric => Wanted::Metric,
        },
        settings: settings(document, which)?,
        parameters: Some(&parameters),
        ..ReadOptions::default()
    };
    let text = document.text(which);
    let entry = entry::read(entry::Input::Text(text), &options);
    let edited = edit::in_grid(text, &entry, edit, &options);
    let layout = serde_json::to_string(&edited.settings)?;
    Ok(edit::between(text, &edited.text, Some(layout)))
}

fn settings(document: &ProblemDocument, which: Which) -> Result<Settings, serde_json::Error> {
    match document.layout(which) {
        Some(key) => serde_json::from_str(key),
        None => Ok(Settings::default()),
    }
}

fn told(
    document: &ProblemDocument,
    which: Which,
    entry: &Entry,
    parameters: &mut Vec<ParameterDiagnostic>,
) -> Result<TextReading, serde_json::Error> {
    let text = document.text(which);
    missing_names(text, entry, parameters);
    let mut told = convert::text_reading(text, entry, &settings(document, which)?);
    told.adjusted = match which {
        Which::Matrix => document.choices.matrix_adjustment,
        Which::Metric => document.choices.metric_adjustment,
    };
    Ok(told)
}

fn missing_names(text: &str, entry: &Entry, said: &mut Vec<ParameterDiagnostic>) {
    let unknown = entry
        .diagnostics
        .iter()
        .filter(|found| found.kind == Kind::UnknownName);
    for span in unknown.filter_map(|found| found.span) {
        let Some(name) = text.get(span.start as usize..span.end as usize) else {
            continue;
        };
        if !said.iter().any(|known| known.name == name) {
            said.push(ParameterDiagnostic {
                index: None,
                name: name.to_owned(),
                severity: Severity::Error,
                message: format!("{name} is used but has no value."),
            });
        }
    }
}

fn refuse(text: &mut TextReading, error: &ProblemError) {
    if let ProblemError::NotHermitian(asymmetry) = error {
        text.disagreements = Some(disagreements(asymmetry));
    } else {
        say(text, error.to_string(), Severity::Error);
    }
}

fn say(text: &mut TextReading, message: String, severity: Severity) {
    text.diagnostics.push(Diagnostic {
        severity,
        row: None,
        col: None,
        from: 0,
        to: 0,
        message,
        expected: String::new(),
        repairs: Vec::new(),
    });
}

/// Refuses a metric that is not positive definite.
fn is_positive(assembly: &Assembly, text: Option<&mut TextReading>) -> bool {
    let (Some(metric), Some(text)) = (&assembly.problem.metric, text) else {
        return true;
    };
    let verdict = metric_check(metric);
    if let Some(warning) = verdict.warning() {
        say(text, warning, Severity::Warning);
    }
    match verdict {
        MetricVerdict::Positive { .. } => true,
        MetricVerdict::NotPositive(fault) => {
            say(text, fault.to_string(), Severity::Error);
            false
        }
    }
}

fn disagreements(found: &Asymmetry) -> Disagreements {
    Disagreements {
        total: found.count as u32,
        pairs: found.pairs.iter().map(convert::pair).collect(),
        rounding_sized: found.size == AsymmetrySize::Rounding,
    }
}

fn parameter_diagnostics(remarks: &[ParameterError]) -> Vec<ParameterDiagnostic> {
    let told = remarks.iter().map(|remark| ParameterDiagnostic {
        index: Some(remark.index as u32),
        name: remark.name.clone(),
        severity: match remark.kind {
            ParameterErrorKind::Unused => Severity::Note,
            _ => Severity::Error,
        },
        message: remark.to_string(),
    });
    told.collect()
}
