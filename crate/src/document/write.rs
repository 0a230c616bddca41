//! From a problem document to JSON text.

use super::{Adjustment, Parameter, ProblemDocument, FORMAT, VERSION};
use crate::entry::Settings;
use serde::Serialize;

/// The document as a file holds it; empty fields are left out.
#[derive(Serialize)]
struct File<'a> {
    format: &'static str,
    version: u64,
    #[serde(skip_serializing_if = "str::is_empty")]
    title: &'a str,
    #[serde(skip_serializing_if = "str::is_empty")]
    notes: &'a str,
    matrix: &'a str,
    #[serde(skip_serializing_if = "Option::is_none")]
    metric: Option<&'a str>,
    #[serde(skip_serializing_if = "is_empty")]
    parameters: &'a [Parameter],
    #[serde(skip_serializing_if = "FileChoices::is_empty")]
    choices: FileChoices,
    #[serde(skip_serializing_if = "is_empty")]
    claims: &'a [String],
}

fn is_empty<T>(list: &[T]) -> bool {
    list.is_empty()
}

/// The choices with the layouts as objects instead of text.
#[derive(Serialize)]
#[serde(rename_all = "camelCase")]
struct FileChoices {
    #[serde(skip_serializing_if = "Option::is_none")]
    matrix_layout: Option<Settings>,
    #[serde(skip_serializing_if = "Option::is_none")]
    metric_layout: Option<Settings>,
    #[serde(skip_serializing_if = "Option::is_none")]
    matrix_adjustment: Option<Adjustment>,
    #[serde(skip_serializing_if = "Option::is_none")]
    metric_adjustment: Option<Adjustment>,
}

impl FileChoices {
    fn is_empty(&self) -> bool {
        self.matrix_layout.is_none()
            && self.metric_layout.is_none()
            && self.matrix_adjustment.is_none()
            && self.metric_adjustment.is_none()
    }
}

impl<'a> File<'a> {
    fn of(document: &'a ProblemDocument) -> Self {
        let choices = &document.choices;
        // A key that is no settings text means nothing, so nothing is lost.
        let layout = |key: &Option<String>| {
            key.as_deref()
                .and_then(|key| serde_json::from_str(key).ok())
        };
        Self {
            format: FORMAT,
            version: VERSION,
            title: &document.title,
            notes: &document.notes,
            matrix: &document.matrix,
            metric: document.metric.as_deref(),
            parameters: &document.parameters,
            choices: FileChoices {
                matrix_layout: layout(&choices.matrix_layout),
                metric_layout: layout(&choices.metric_layout),
                matrix_adjustment: choices.matrix_adjustment,
                metric_adjustment: choices.metric_adjustment,
            },
            claims: &document.claims,
        }
    }
}

/// The document as a file, in lines; [`super::read`] gives the same document
/// back.
pub fn write(document: &ProblemDocument) -> String {
    // Only a map with keys that are no strings can fail, and there is none.
    let mut text = serde_json::to_string_pretty(&File::of(document)).unwrap_or_default();
    text.push('\n');
    text
}

/// The document in one line without blanks, for links.
pub fn write_compact(document: &ProblemDocument) -> String {
    serde_json::to_string(&File::of(document)).unwrap_or_default()
}
