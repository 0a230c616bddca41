//! Files and links.

use super::reading::Opened;
use crate::entry::{self, ReadOptions};

/// What a file holds. A matrix becomes text, as if it had been pasted.
pub(super) fn file(bytes: &[u8], name: &str) -> Opened {
    let read = entry::read(entry::Input::File { bytes, name }, &ReadOptions::default());
    match read.text {
        Some(text) => Opened::Matrix { text },
        None => Opened::Refused {
            reason: read.diagnostics.first().map_or_else(
                || "Nothing can be read from it.".to_owned(),
                |first| first.sentence.clone(),
            ),
        },
    }
}
