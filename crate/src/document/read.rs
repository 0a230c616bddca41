//! From JSON text to a problem document.

use super::fields::{DocumentError, DocumentErrorKind, Node};
use super::{Adjustment, Choices, Parameter, ProblemDocument, FORMAT, VERSION};
use crate::entry::parameters::MAX_PARAMETERS;
use crate::entry::Settings;

/// Bytes a document may have.
pub const MAX_BYTES: usize = 128 << 20;

const MAX_TITLE: usize = 1_000;
const MAX_NOTES: usize = 1 << 20;
const MAX_CLAIMS: usize = 1_000;
const MAX_CLAIM: usize = 1 << 20;

/// Reads a problem document.
///
/// Cost: linear in the text. Nothing of the matrix is interpreted here.
///
/// # Errors
/// [`DocumentError`] with the path of the field at fault.
pub fn read(text: &str) -> Result<ProblemDocument, DocumentError> {
    if text.len() > MAX_BYTES {
        return Err(DocumentError::new(
            DocumentErrorKind::TooLong,
            "",
            format!(
                "A problem document may have {} MB at most.",
                MAX_BYTES >> 20
            ),
        ));
    }
    let whole = Node::whole(text.trim_start_matches('\u{feff}'))?;
    let not_ours = || {
        DocumentError::new(
            DocumentErrorKind::NotOurs,
            "format",
            format!("This is no problem document: its field “format” should be “{FORMAT}”."),
        )
    };
    if !whole.raw.get().starts_with('{') {
        return Err(not_ours());
    }
    let fields = whole.fields()?;
    let field = |name: &str| fields.iter().find(|(n, _)| n == name).map(|(_, node)| node);
    if field("format")
        .and_then(|node| node.text(100).ok())
        .as_deref()
        != Some(FORMAT)
    {
        return Err(not_ours());
    }
    check_version(field("version"))?;
    let mut document = ProblemDocument::default();
    let mut matrix = None;
    for (name, node) in &fields {
        match name.as_str() {
            "format" | "version" => {}
            "title" => document.title = title(node)?,
            "notes" => document.notes = node.text(MAX_NOTES)?,
            "matrix" => matrix = Some(matrix_text(node)?),
            "metric" if is_null(node) => {}
            "metric" => document.metric = Some(matrix_text(node)?),
            "parameters" => document.parameters = parameters(node)?,
            "choices" => document.choices = choices(node)?,
            "claims" => {
                let claims = node.items(MAX_CLAIMS)?;
                document.claims = claims
                    .iter()
                    .map(|c| c.text(MAX_CLAIM))
                    .collect::<Result<_, _>>()?;
            }
            _ => return Err(node.unknown()),
        }
    }
    document.matrix = matrix.ok_or_else(|| missing("matrix"))?;
    Ok(document)
}

fn missing(path: &str) -> DocumentError {
    DocumentError::new(
        DocumentErrorKind::MissingField,
        path,
        format!("The field “{path}” is missing."),
    )
}

fn is_null(node: &Node<'_>) -> bool {
    node.raw.get() == "null"
}

fn check_version(node: Option<&Node<'_>>) -> Result<(), DocumentError> {
    let node = node.ok_or_else(|| missing("version"))?;
    match node.raw.get().parse::<u64>() {
        Ok(VERSION) => Ok(()),
        Ok(other) => Err(DocumentError::new(
            DocumentErrorKind::UnknownVersion,
            "version",
            format!(
                "This document is of version {other}; version {VERSION} is read here. Open it \
                 with the version of this page that wrote it."
            ),
        )),
        Err(_) => Err(DocumentError::wrong_kind("version", "a whole number")),
    }
}

fn title(node: &Node<'_>) -> Result<String, DocumentError> {
    let title = node.text(MAX_TITLE)?;
    if title.contains(['\n', '\r']) {
        return Err(DocumentError::wrong_kind("title", "a text of one line"));
    }
    Ok(title)
}

/// A matrix as text in any layout, or nested arrays kept as their own text.
fn matrix_text(node: &Node<'_>) -> Result<String, DocumentError> {
    let raw = node.raw.get();
    if raw.starts_with('"') {
        node.text(MAX_BYTES)
    } else if raw.starts_with('[') {
        Ok(raw.to_owned())
    } else {
        Err(DocumentError::wrong_kind(
            &node.path,
            "a text or an array of rows",
        ))
    }
}

fn parameters(node: &Node<'_>) -> Result<Vec<Parameter>, DocumentError> {
    let mut list = Vec::new();
    for item in node.items(MAX_PARAMETERS)? {
        let (mut name, mut value) = (None, None);
        for (field, child) in item.fields()? {
            match field.as_str() {
                "name" => name = Some(child.text(MAX_TITLE)?),
                // A number stands for its own digits.
                "value"
                    if child
                        .raw
                        .get()
                        .starts_with(|c: char| c == '-' || c.is_ascii_digit()) =>
                {
                    value = Some(child.raw.get().to_owned());
                }
                "value" => value = Some(child.text(crate::entry::cell::MAX_CELL_BYTES)?),
                _ => return Err(child.unknown()),
            }
        }
        let lacking = |field: &str| missing(&format!("{}.{field}", item.path));
        list.push(Parameter {
            name: name.ok_or_else(|| lacking("name"))?,
            value: value.ok_or_else(|| lacking("value"))?,
        });
    }
    Ok(list)
}

fn choices(node: &Node<'_>) -> Result<Choices, DocumentError> {
    let mut choices = Choices::default();
    for (name, child) in node.fields()? {
        match name.as_str() {
            _ if is_null(&child) => {}
            "matrixLayout" => choices.matrix_layout = Some(layout(&child)?),
            "metricLayout" => choices.metric_layout = Some(layout(&child)?),
            "matrixAdjustment" => choices.matrix_adjustment = Some(adjustment(&child)?),
            "metricAdjustment" => choices.metric_adjustment = Some(adjustment(&child)?),
            _ => return Err(child.unknown()),
        }
    }
    Ok(choices)
}

fn adjustment(node: &Node<'_>) -> Result<Adjustment, DocumentError> {
    serde_json::from_str(node.raw.get())
        .map_err(|_| DocumentError::wrong_kind(&node.path, "“lower”, “upper” or “mean”"))
}

/// Checks the settings of a layout and keeps them as text.
fn layout(node: &Node<'_>) -> Result<String, DocumentError> {
    let refused = |error: serde_json::Error| {
        DocumentError::new(
            DocumentErrorKind::WrongKind,
            &node.path,
            format!("The field “{}” is no choice of layout: {error}.", node.path),
        )
    };
    let settings: Settings = serde_json::from_str(node.raw.get()).map_err(refused)?;
    serde_json::to_string(&settings).map_err(refused)
}
