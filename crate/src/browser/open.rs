//! Files and links.

use super::reading::Opened;
use crate::document::{self, DocumentErrorKind};
use crate::entry::{self, ReadOptions};
use crate::link;

/// What a file holds. A matrix becomes text, as if it had been pasted.
pub(super) fn file(bytes: &[u8], name: &str) -> Opened {
    if let Some(opened) = own_document(bytes) {
        return opened;
    }
    let read = entry::read(entry::Input::File { bytes, name }, &ReadOptions::default());
    match (read.text, read.diagnostics.first()) {
        (Some(text), _) => Opened::Matrix { text },
        (None, Some(first)) => Opened::Refused {
            reason: first.sentence.clone(),
        },
        (None, None) => Opened::Refused {
            reason: "Nothing in it can be read.".to_owned(),
        },
    }
}

/// The document, or why it cannot be read; `None` for a file of another kind.
fn own_document(bytes: &[u8]) -> Option<Opened> {
    let text = std::str::from_utf8(bytes).ok()?;
    if !text
        .trim_start_matches('\u{feff}')
        .trim_start()
        .starts_with('{')
    {
        return None;
    }
    match document::read(text) {
        Ok(document) => Some(Opened::Document { document }),
        Err(error) if matters(error.kind) => Some(Opened::Refused {
            reason: error.sentence,
        }),
        Err(_) => None,
    }
}

/// Whether the file meant to be a document of ours.
fn matters(kind: DocumentErrorKind) -> bool {
    !matches!(
        kind,
        DocumentErrorKind::NotJson | DocumentErrorKind::NotOurs
    )
}

/// The document in a link's fragment, or why it cannot be opened.
pub(super) fn link(fragment: &str) -> Opened {
    match link::decode(fragment) {
        Ok(document) => Opened::Document { document },
        Err(error) => Opened::Refused {
            reason: error.to_string(),
        },
    }
}
