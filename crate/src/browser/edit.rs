//! A changed text as the smallest single replacement, so that the editor keeps
//! its place and one undo takes the change back.

use super::reading::{TextEdit, TextEdits};

/// The replacement that turns `before` into `after`, in UTF-16 code units.
pub(super) fn between(before: &str, after: &str) -> TextEdits {
    if before == after {
        return TextEdits { edits: Vec::new() };
    }
    let head = common_length(before.chars(), after.chars());
    let tail = common_length(before[head..].chars().rev(), after[head..].chars().rev());
    let removed = &before[head..before.len() - tail];
    let from = units(&before[..head]);
    TextEdits {
        edits: vec![TextEdit {
            from,
            to: from + units(removed),
            insert: after[head..after.len() - tail].to_owned(),
        }],
    }
}

/// Bytes of the longest common beginning.
fn common_length(a: impl Iterator<Item = char>, b: impl Iterator<Item = char>) -> usize {
    a.zip(b)
        .take_while(|(x, y)| x == y)
        .map(|(x, _)| x.len_utf8())
        .sum()
}

fn units(text: &str) -> u32 {
    text.encode_utf16().count() as u32
}
