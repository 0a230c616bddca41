//! Walking a JSON text with the path at hand, and what can be wrong with it.

use serde::de::{Deserialize, Deserializer, MapAccess, Visitor};
use serde_json::value::RawValue;
use std::fmt;

/// What is wrong with a document.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum DocumentErrorKind {
    /// The text is longer than a document may be.
    TooLong,
    /// The text is not JSON.
    NotJson,
    /// It is JSON, but not one of our documents.
    NotOurs,
    /// It is of a version this program does not know.
    UnknownVersion,
    /// A field that documents do not have.
    UnknownField,
    /// A field that must be there is not.
    MissingField,
    /// A field that is there twice.
    DuplicateField,
    /// A field holds something of another kind than it should.
    WrongKind,
    /// A field holds more than it may.
    TooMuch,
}

/// Why a document was not read: where, and a sentence.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DocumentError {
    /// What is wrong.
    pub kind: DocumentErrorKind,
    /// Path of the field, such as `parameters[2].name`; empty for the whole.
    pub path: String,
    /// One sentence: what was found and what was expected.
    pub sentence: String,
}

impl fmt::Display for DocumentError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.sentence)
    }
}

impl std::error::Error for DocumentError {}

impl DocumentError {
    pub(super) fn new(kind: DocumentErrorKind, path: &str, sentence: impl Into<String>) -> Self {
        Self {
            kind,
            path: path.to_owned(),
            sentence: sentence.into(),
        }
    }

    pub(super) fn wrong_kind(path: &str, expected: &str) -> Self {
        let sentence = format!("The field “{path}” must be {expected}.");
        Self::new(DocumentErrorKind::WrongKind, path, sentence)
    }
}

/// A JSON value and the path that leads to it.
pub(super) struct Node<'a> {
    pub path: String,
    pub raw: &'a RawValue,
}

/// The fields of an object, in the order given, duplicates included.
struct Pairs<'a>(Vec<(String, &'a RawValue)>);

impl<'de> Deserialize<'de> for Pairs<'de> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct PairsVisitor;
        impl<'de> Visitor<'de> for PairsVisitor {
            type Value = Pairs<'de>;
            fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                f.write_str("an object")
            }
            fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Self::Value, A::Error> {
                let mut pairs = Vec::new();
                while let Some(pair) = map.next_entry()? {
                    pairs.push(pair);
                }
                Ok(Pairs(pairs))
            }
        }
        deserializer.deserialize_map(PairsVisitor)
    }
}

impl<'a> Node<'a> {
    /// The whole text as one value.
    pub fn whole(text: &'a str) -> Result<Self, DocumentError> {
        match serde_json::from_str(text) {
            Ok(raw) => Ok(Self {
                path: String::new(),
                raw,
            }),
            Err(error) => Err(DocumentError::new(
                DocumentErrorKind::NotJson,
                "",
                format!(
                    "This is not JSON: something is wrong in line {}, column {}.",
                    error.line(),
                    error.column()
                ),
            )),
        }
    }

    fn child(&self, name: &str, raw: &'a RawValue) -> Self {
        let path = match (self.path.is_empty(), name.starts_with('[')) {
            (true, _) => name.to_owned(),
            (false, true) => format!("{}{name}", self.path),
            (false, false) => format!("{}.{name}", self.path),
        };
        Self { path, raw }
    }

    /// The fields of an object; each name once.
    pub fn fields(&self) -> Result<Vec<(String, Self)>, DocumentError> {
        let pairs: Pairs<'a> = serde_json::from_str(self.raw.get())
            .map_err(|_| DocumentError::wrong_kind(&self.path, "an object"))?;
        let mut fields: Vec<(String, Self)> = Vec::with_capacity(pairs.0.len().min(16));
        for (name, raw) in pairs.0 {
            let child = self.child(&name, raw);
            if fields.iter().any(|(known, _)| *known == name) {
                return Err(DocumentError::new(
                    DocumentErrorKind::DuplicateField,
                    &child.path,
                    format!("The field “{}” is there twice.", child.path),
                ));
            }
            fields.push((name, child));
            if fields.len() > 64 {
                return Err(DocumentError::new(
                    DocumentErrorKind::TooMuch,
                    &self.path,
                    "This has far more fields than a problem document has.",
                ));
            }
        }
        Ok(fields)
    }

    /// The items of an array, at most `most`.
    pub fn items(&self, most: usize) -> Result<Vec<Self>, DocumentError> {
        let items: Vec<&'a RawValue> = serde_json::from_str(self.raw.get())
            .map_err(|_| DocumentError::wrong_kind(&self.path, "an array"))?;
        if items.len() > most {
            return Err(DocumentError::new(
                DocumentErrorKind::TooMuch,
                &self.path,
                format!("The field “{}” may have {most} items at most.", self.path),
            ));
        }
        Ok(items
            .into_iter()
            .enumerate()
            .map(|(index, raw)| self.child(&format!("[{index}]"), raw))
            .collect())
    }

    /// A string of at most `most` bytes.
    pub fn text(&self, most: usize) -> Result<String, DocumentError> {
        let text: String = serde_json::from_str(self.raw.get())
            .map_err(|_| DocumentError::wrong_kind(&self.path, "a text in quotation marks"))?;
        if text.len() > most {
            return Err(DocumentError::new(
                DocumentErrorKind::TooMuch,
                &self.path,
                format!(
                    "The field “{}” may have {most} characters at most.",
                    self.path
                ),
            ));
        }
        Ok(text)
    }

    /// Refuses a field of this object by its name.
    pub fn unknown(&self) -> DocumentError {
        DocumentError::new(
            DocumentErrorKind::UnknownField,
            &self.path,
            format!("A problem document has no field “{}”.", self.path),
        )
    }
}
