//! The published schema against our own documents, by a validator of just the
//! keywords the schema uses. A keyword it does not know fails the test, so the
//! schema cannot say more than is checked.

use super::{opened, SMALL};
use serde_json::Value;

const SCHEMA: &str = include_str!("../../../schema/problem-1.schema.json");

/// Why a value does not fit, or `None`.
fn misfit(root: &Value, schema: &Value, value: &Value, path: &str) -> Option<String> {
    let schema = schema.as_object()?;
    schema.iter().find_map(|(keyword, wanted)| {
        let fits = match keyword.as_str() {
            "$schema" | "$id" | "$defs" | "title" | "description" => true,
            "properties" => {
                return value.as_object()?.iter().find_map(|(name, child)| {
                    misfit(root, wanted.get(name)?, child, &format!("{path}.{name}"))
                });
            }
            "items" => {
                return value
                    .as_array()?
                    .iter()
                    .enumerate()
                    .find_map(|(index, child)| {
                        misfit(root, wanted, child, &format!("{path}[{index}]"))
                    });
            }
            "$ref" => {
                let pointer = wanted.as_str()?.trim_start_matches('#');
                let target = root.pointer(pointer);
                return match target {
                    Some(target) => misfit(root, target, value, path),
                    None => Some(format!("{path}: {pointer} is nowhere")),
                };
            }
            "anyOf" => {
                let options = wanted.as_array()?;
                options
                    .iter()
                    .any(|option| misfit(root, option, value, path).is_none())
            }
            "type" => match wanted {
                Value::Array(kinds) => kinds.iter().any(|kind| is_kind(kind, value)),
                kind => is_kind(kind, value),
            },
            "const" => value == wanted,
            "enum" => wanted.as_array()?.contains(value),
            "required" => wanted
                .as_array()?
                .iter()
                .all(|name| value.get(name.as_str().unwrap_or_default()).is_some()),
            "additionalProperties" => {
                let known = schema.get("properties").and_then(Value::as_object)?;
                value
                    .as_object()?
                    .keys()
                    .all(|name| known.contains_key(name))
            }
            "maxLength" => value.as_str()?.chars().count() as u64 <= wanted.as_u64()?,
            "maxItems" => value.as_array()?.len() as u64 <= wanted.as_u64()?,
            "minItems" => value.as_array()?.len() as u64 >= wanted.as_u64()?,
            "pattern" => {
                assert_eq!(wanted, "^[^\\n\\r]*$", "only this pattern is known");
                !value.as_str()?.contains(['\n', '\r'])
            }
            other => return Some(format!("{path}: unknown keyword {other}")),
        };
        (!fits).then(|| format!("{path}: {keyword} {wanted} against {value}"))
    })
}

fn is_kind(kind: &Value, value: &Value) -> bool {
    match kind.as_str() {
        Some("object") => value.is_object(),
        Some("array") => value.is_array(),
        Some("string") => value.is_string(),
        Some("number") => value.is_number(),
        Some("null") => value.is_null(),
        _ => false,
    }
}

fn check(text: &str) -> Option<String> {
    let schema: Value = serde_json::from_str(SCHEMA).unwrap_or_else(|e| panic!("schema: {e}"));
    let value: Value = serde_json::from_str(text).unwrap_or_else(|e| panic!("{text}: {e}"));
    misfit(&schema, &schema, &value, "")
}

pub(super) fn assert_valid(text: &str) {
    if let Some(reason) = check(text) {
        panic!("{text}: {reason}");
    }
}

#[test]
fn documents_that_are_read_fit_the_schema() {
    let cases = [
        SMALL.to_owned(),
        SMALL.replace("\"0.1\"", r#"{"re": "1/3"}"#),
        SMALL.replace("\"version\"", r#""choices": {"matrixLayout": null}, "metric": null, "version""#),
        SMALL.replace(
            "\"version\"",
            r#""parameters": [{"name": "k", "value": 2.50}], "claims": ["3"], "title": "t", "version""#,
        ),
        SMALL.replace(
            "\"version\"",
            r#""choices": {"matrixLayout": {"layout": "json", "shape": "full"}, "matrixAdjustment": "mean"}, "version""#,
        ),
    ];
    for text in cases {
        opened(&text);
        assert_valid(&text);
    }
}

#[test]
fn documents_that_are_refused_do_not_fit() {
    let cases = [
        SMALL.replace("\"version\": 1", "\"version\": 2"),
        SMALL.replace("eigenledger problem", "other"),
        SMALL.replace("\"version\"", r#""colour": "red", "version""#),
        SMALL.replace("\"version\"", r#""title": "a\nb", "version""#),
        SMALL.replace(
            "\"version\"",
            r#""choices": {"matrixAdjustment": "both"}, "version""#,
        ),
        SMALL.replace(
            "\"version\"",
            r#""choices": {"matrixLayout": {"layout": "knots"}}, "version""#,
        ),
        SMALL.replace("\"version\"", r#""parameters": [{"name": "k"}], "version""#),
        SMALL.replace("\"matrix\"", "\"metric\""),
    ];
    for text in cases {
        assert!(super::read(&text).is_err(), "{text}");
        assert!(check(&text).is_some(), "{text}");
    }
}

/// The example problems are files of the repository, so only a native test
/// can see them.
#[cfg(not(target_arch = "wasm32"))]
#[test]
fn the_example_problems_fit_and_can_be_solved() {
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("../www-examples");
    let mut seen = 0;
    let entries = std::fs::read_dir(&folder).unwrap_or_else(|e| panic!("{folder:?}: {e}"));
    for entry in entries.flatten() {
        let path = entry.path();
        if path.extension().is_none_or(|extension| extension != "json") {
            continue;
        }
        let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{path:?}: {e}"));
        assert_valid(&text);
        let document = opened(&text);
        if let Err(reason) = super::problem(&document) {
            panic!("{path:?}: {reason}");
        }
        seen += 1;
    }
    assert!(seen >= 6, "{seen} examples in {folder:?}");
}
