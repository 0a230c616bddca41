//! Characters that people cannot see, and digits of other scripts.

use std::borrow::Cow;

/// Whether the character has no width and no meaning in a number: zero-width
/// and joining characters, marks of writing direction, the byte-order mark,
/// the soft hyphen.
pub(crate) fn is_invisible(c: char) -> bool {
    matches!(c,
        '\u{00AD}' | '\u{061C}' | '\u{180E}' | '\u{200B}'..='\u{200F}' | '\u{202A}'..='\u{202E}'
        | '\u{2060}'..='\u{2064}' | '\u{2066}'..='\u{206F}' | '\u{FE00}'..='\u{FE0F}' | '\u{FEFF}')
}

/// Whether the character is of a script written from right to left.
pub(crate) fn is_right_to_left(c: char) -> bool {
    matches!(c, '\u{0590}'..='\u{08FF}' | '\u{FB1D}'..='\u{FDFF}' | '\u{FE70}'..='\u{FEFC}' | '\u{10800}'..='\u{10FFF}' | '\u{1E800}'..='\u{1EFFF}')
}

/// Whether the character ends a line.
pub(crate) fn is_line_break(c: char) -> bool {
    matches!(
        c,
        '\n' | '\r' | '\u{0B}' | '\u{0C}' | '\u{85}' | '\u{2028}' | '\u{2029}'
    )
}

/// White space or nothing to see.
pub(crate) fn is_blank_char(c: char) -> bool {
    c.is_whitespace() || is_invisible(c)
}

/// Whether the text shows nothing.
pub(crate) fn is_blank(text: &str) -> bool {
    text.chars().all(is_blank_char)
}

/// The text without white space and invisible characters at its ends, as a
/// range of bytes relative to its own beginning.
pub(crate) fn trim(text: &str) -> (usize, usize) {
    let tail = text.trim_start_matches(is_blank_char);
    let start = text.len() - tail.len();
    (start, start + tail.trim_end_matches(is_blank_char).len())
}

/// The ASCII form of a digit or decimal mark of another script (Arabic-Indic,
/// Persian, Devanagari, full width); their bidirectional text then reads as
/// the number it shows.
fn ascii_of(c: char) -> Option<char> {
    let digit = |zero: char| char::from_digit(c as u32 - zero as u32, 10);
    match c {
        '\u{0660}'..='\u{0669}' => digit('\u{0660}'),
        '\u{06F0}'..='\u{06F9}' => digit('\u{06F0}'),
        '\u{0966}'..='\u{096F}' => digit('\u{0966}'),
        '\u{FF10}'..='\u{FF19}' => digit('\u{FF10}'),
        '\u{066B}' => Some('.'),
        _ => None,
    }
}

/// The text as a number reader wants it: invisible characters gone, digits in
/// ASCII, every other kind of space a plain one.
pub(crate) fn normal(text: &str) -> Cow<'_, str> {
    if text.is_ascii() {
        return Cow::Borrowed(text);
    }
    Cow::Owned(
        text.chars()
            .filter(|&c| !is_invisible(c))
            .map(|c| {
                if c.is_whitespace() {
                    ' '
                } else {
                    ascii_of(c).unwrap_or(c)
                }
            })
            .collect(),
    )
}

/// How many invisible characters the text holds.
pub(crate) fn invisible_count(text: &str) -> usize {
    if text.is_ascii() {
        return 0;
    }
    text.chars().filter(|&c| is_invisible(c)).count()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn digits_of_other_scripts_become_ascii() {
        for (text, wanted) in [
            ("١٢٫٥", "12.5"),
            ("۳", "3"),
            ("\u{200F}7\u{200E}", "7"),
            ("１２", "12"),
            ("1\u{00A0}2", "1 2"),
        ] {
            assert_eq!(normal(text), wanted, "{text:?}");
        }
    }

    #[test]
    fn trimming_takes_invisible_characters_too() {
        let text = "\u{FEFF} \u{200B}1 2\u{00A0}";
        let (start, end) = trim(text);
        assert_eq!(&text[start..end], "1 2", "{text:?}");
        assert_eq!(trim(" \u{200B}").1 - trim(" \u{200B}").0, 0);
    }
}
