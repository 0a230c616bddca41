//! A changed text as the smallest single replacement, so that the editor keeps
//! its place and one undo takes the change back.

use super::reading::{GridEdit, Mirroring, TextChange};
use crate::entry::grid::{self, CellEdit, Edited, Mirror};
use crate::entry::{Entry, ReadOptions};

/// What a grid edit makes of the text.
pub(super) fn in_grid(text: &str, entry: &Entry, edit: GridEdit, options: &ReadOptions) -> Edited {
    match edit {
        GridEdit::Set {
            row,
            col,
            text: new,
            mirror,
        } => {
            let edit = CellEdit {
                row: row as usize,
                col: col as usize,
                text: new,
            };
            grid::set_cell(text, entry, &edit, mirrored(mirror), options)
        }
        GridEdit::Paste {
            row,
            col,
            block,
            mirror,
        } => {
            let place = (row as usize, col as usize);
            grid::paste(text, entry, place, &block, mirrored(mirror), options)
        }
        GridEdit::Insert { at } => grid::insert(text, entry, at as usize, options),
        GridEdit::Remove { at } => grid::remove(text, entry, at as usize, options),
        GridEdit::Zeros { order } => Edited {
            text: grid::zeros(order as usize),
            settings: options.settings,
        },
    }
}

fn mirrored(mirror: Mirroring) -> Mirror {
    match mirror {
        Mirroring::Conjugate => Mirror::Conjugate,
        Mirroring::Off => Mirror::Off,
    }
}

/// The replacement that turns `before` into `after`, in UTF-16 code units.
pub(super) fn between(before: &str, after: &str, layout: Option<String>) -> TextChange {
    let head = common_length(before.chars(), after.chars());
    let tail = common_length(before[head..].chars().rev(), after[head..].chars().rev());
    let from = units(&before[..head]);
    TextChange {
        from,
        to: from + units(&before[head..before.len() - tail]),
        insert: after[head..after.len() - tail].to_owned(),
        layout,
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
