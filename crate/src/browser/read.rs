//! A document through the entry and problem stages.

use super::convert;
use super::document::{Adjustment, ProblemDocument};
use super::edit;
use super::reading::{
    Diagnostic, Disagreements, GridEdit, ParameterDiagnostic, Reading, Severity, TextChange,
    TextReading, Which,
};
use crate::entry::cell::CellOptions;
use crate::entry::parameters::{ParameterError, ParameterErrorKind};
use crate::entry::{self, Entry, Kind, Parameters, ReadOptions, Settings, Wanted};
use crate::problem::{
    assemble, metric_check, Assembly, Asymmetry, Cells, Choices, MetricVerdict, Mirror, Part,
    ProblemError,
};

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
    let (parameters, faults) = parameters(document);
    let mut matrix = Text::read(document, Which::Matrix, &parameters)?;
    let mut metric = match document.metric {
        Some(_) => Some(Text::read(document, Which::Metric, &parameters)?),
        None => None,
    };
    let mut said = parameter_diagnostics(faults.iter().chain(&parameters.unused()));
    for text in [Some(&matrix), metric.as_ref()].into_iter().flatten() {
        text.missing_names(&mut said);
    }
    let assembly = match (matrix.cells(), metric.as_ref().map(Text::cells)) {
        (None, _) | (_, Some(None)) => None,
        (Some(cells), metric_cells) => {
            match assemble(cells, metric_cells.flatten(), &choices(document)) {
                Ok(assembly) => Some(assembly),
                Err(error) => {
                    blamed(&error, &mut matrix, metric.as_mut()).refuse(&error);
                    None
                }
            }
        }
    };
    let assembly = assembly.filter(|assembly| is_positive(assembly, metric.as_mut()));
    for text in [Some(&mut matrix), metric.as_mut()].into_iter().flatten() {
        text.note_choice(document);
    }
    let ready = assembly.map(|assembly| Ready {
        document: document.clone(),
        assembly,
        row_labels: matrix.entry.row_labels.clone(),
    });
    let reading = Reading {
        matrix: matrix.told,
        metric: metric.map(|text| text.told),
        parameters: said,
        ready: ready.is_some(),
    };
    Ok((reading, ready))
}

/// One text of the document, as read.
struct Text<'a> {
    which: Which,
    text: &'a str,
    entry: Entry,
    told: TextReading,
}

impl<'a> Text<'a> {
    fn read(
        document: &'a ProblemDocument,
        which: Which,
        parameters: &Parameters,
    ) -> Result<Self, serde_json::Error> {
        let options = options(document, which, parameters)?;
        let text = document.text(which);
        let entry = entry::read(entry::Input::Text(text), &options);
        let told = convert::text_reading(text, &entry, &options.settings);
        Ok(Self {
            which,
            text,
            entry,
            told,
        })
    }

    fn cells(&self) -> Option<Cells> {
        if !self.entry.is_usable() {
            return None;
        }
        let values = self.entry.cells.iter().map(|cell| cell.value.clone());
        Some(Cells {
            rows: self.entry.rows,
            cols: self.entry.cols,
            values: values.collect::<Option<_>>()?,
        })
    }

    fn missing_names(&self, said: &mut Vec<ParameterDiagnostic>) {
        let unknown = self
            .entry
            .diagnostics
            .iter()
            .filter(|found| found.kind == Kind::UnknownName);
        for span in unknown.filter_map(|found| found.span) {
            let Some(name) = self.text.get(span.start as usize..span.end as usize) else {
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

    fn refuse(&mut self, error: &ProblemError) {
        if let ProblemError::NotHermitian(asymmetry) = error {
            self.told.disagreements = Some(disagreements(asymmetry));
        } else {
            self.say(error.to_string(), Severity::Error);
        }
    }

    fn say(&mut self, message: String, severity: Severity) {
        self.told.diagnostics.push(Diagnostic {
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

    fn note_choice(&mut self, document: &ProblemDocument) {
        self.told.adjusted = match self.which {
            Which::Matrix => document.choices.matrix_adjustment,
            Which::Metric => document.choices.metric_adjustment,
        };
    }
}

/// What a grid edit changes in one text of the document.
pub(super) fn edited(
    document: &ProblemDocument,
    which: Which,
    edit: GridEdit,
) -> Result<TextChange, serde_json::Error> {
    let (parameters, _) = parameters(document);
    let options = options(document, which, &parameters)?;
    let text = document.text(which);
    let entry = entry::read(entry::Input::Text(text), &options);
    let edited = edit::in_grid(text, &entry, edit, &options);
    let layout = serde_json::to_string(&edited.settings)?;
    Ok(edit::between(text, &edited.text, Some(layout)))
}

fn parameters(document: &ProblemDocument) -> (Parameters, Vec<ParameterError>) {
    let given: Vec<(String, String)> = document
        .parameters
        .iter()
        .map(|parameter| (parameter.name.clone(), parameter.value.clone()))
        .collect();
    Parameters::read(&given, CellOptions::default())
}

fn options<'p>(
    document: &ProblemDocument,
    which: Which,
    parameters: &'p Parameters,
) -> Result<ReadOptions<'p>, serde_json::Error> {
    Ok(ReadOptions {
        wanted: match which {
            Which::Matrix => Wanted::Square,
            Which::Metric => Wanted::Metric,
        },
        settings: match document.layout(which) {
            Some(key) => serde_json::from_str(key)?,
            None => Settings::default(),
        },
        parameters: Some(parameters),
        ..ReadOptions::default()
    })
}

/// The text that an error is about.
fn blamed<'t, 'a>(
    error: &ProblemError,
    matrix: &'t mut Text<'a>,
    metric: Option<&'t mut Text<'a>>,
) -> &'t mut Text<'a> {
    let part = match error {
        ProblemError::Empty(part)
        | ProblemError::NotSquare { part, .. }
        | ProblemError::TooLarge { part, .. } => *part,
        ProblemError::NotHermitian(asymmetry) => asymmetry.part,
        ProblemError::OrderDiffers { .. } | ProblemError::MetricNotPositive(_) => Part::Metric,
    };
    match (part, metric) {
        (Part::Metric, Some(metric)) => metric,
        _ => matrix,
    }
}

/// Refuses a metric that is certainly not positive definite.
fn is_positive(assembly: &Assembly, text: Option<&mut Text>) -> bool {
    let (Some(metric), Some(text)) = (&assembly.problem.metric, text) else {
        return true;
    };
    let verdict = metric_check(metric);
    if let Some(warning) = verdict.warning() {
        text.say(warning, Severity::Warning);
    }
    match verdict {
        MetricVerdict::Positive { .. } => true,
        MetricVerdict::NotPositive(fault) => {
            text.say(fault.to_string(), Severity::Error);
            false
        }
    }
}

fn choices(document: &ProblemDocument) -> Choices {
    let mirror = |chosen: Option<Adjustment>| {
        chosen.map(|adjustment| match adjustment {
            Adjustment::Lower => Mirror::Lower,
            Adjustment::Upper => Mirror::Upper,
            Adjustment::Mean => Mirror::Mean,
        })
    };
    Choices {
        matrix: mirror(document.choices.matrix_adjustment),
        metric: mirror(document.choices.metric_adjustment),
    }
}

fn disagreements(found: &Asymmetry) -> Disagreements {
    Disagreements {
        total: found.count as u32,
        pairs: found.pairs.iter().map(convert::pair).collect(),
        rounding_sized: found.size == crate::problem::AsymmetrySize::Rounding,
    }
}

fn parameter_diagnostics<'a>(
    faults: impl Iterator<Item = &'a ParameterError>,
) -> Vec<ParameterDiagnostic> {
    faults
        .map(|fault| ParameterDiagnostic {
            index: Some(fault.index as u32),
            name: fault.name.clone(),
            severity: match fault.kind {
                ParameterErrorKind::Unused => Severity::Note,
                _ => Severity::Error,
            },
            message: fault.to_string(),
        })
        .collect()
}
