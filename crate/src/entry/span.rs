//! Where in the text something stands.

use serde::Serialize;

/// A stretch of the text, in bytes of UTF-8 (for Rust) and in UTF-16 code
/// units (for editors in a browser). Ends are exclusive.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize)]
pub struct Span {
    /// First byte.
    pub start: u32,
    /// One past the last byte.
    pub end: u32,
    /// First UTF-16 code unit.
    pub utf16_start: u32,
    /// One past the last UTF-16 code unit.
    pub utf16_end: u32,
}

/// A stretch of the text in bytes, before it is given out as a [`Span`].
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(crate) struct Bytes {
    pub start: u32,
    pub end: u32,
}

impl Bytes {
    /// From offsets into a text that is known to be shorter than 4 GiB.
    pub fn new(start: usize, end: usize) -> Self {
        Self {
            start: start as u32,
            end: end as u32,
        }
    }

    /// The text of the stretch; empty when it does not lie in `source`.
    pub fn of<'a>(&self, source: &'a str) -> &'a str {
        source
            .get(self.start as usize..self.end as usize)
            .unwrap_or("")
    }
}

/// Bytes between two remembered positions of the table.
const STRIDE: usize = 64;

/// Translates byte offsets to UTF-16 offsets: each look-up scans at most
/// [`STRIDE`] bytes, so translating every cell stays linear in the text.
pub(crate) struct Offsets<'a> {
    text: &'a str,
    /// UTF-16 code units before byte k·STRIDE; empty for ASCII text.
    marks: Vec<u32>,
}

impl<'a> Offsets<'a> {
    pub fn new(text: &'a str) -> Self {
        let mut marks = Vec::new();
        if !text.is_ascii() {
            let mut units = 0u32;
            for (at, byte) in text.bytes().enumerate() {
                if at % STRIDE == 0 {
                    marks.push(units);
                }
                units += units_begun_by(byte);
            }
        }
        Self { text, marks }
    }

    /// Code units before byte `at`.
    fn utf16(&self, at: u32) -> u32 {
        let at = (at as usize).min(self.text.len());
        let Some(mark) = self.marks.get(at / STRIDE) else {
            return match self.marks.last() {
                // Only the end of a text whose length is a multiple of the stride.
                Some(last) => last + self.units((self.marks.len() - 1) * STRIDE, at),
                None => at as u32,
            };
        };
        mark + self.units(at - at % STRIDE, at)
    }

    fn units(&self, from: usize, to: usize) -> u32 {
        self.text.as_bytes()[from..to]
            .iter()
            .map(|&byte| units_begun_by(byte))
            .sum()
    }

    pub fn span(&self, bytes: Bytes) -> Span {
        Span {
            start: bytes.start,
            end: bytes.end,
            utf16_start: self.utf16(bytes.start),
            utf16_end: self.utf16(bytes.end),
        }
    }
}

/// UTF-16 code units of the character that this byte begins; 0 for the later
/// bytes of a character.
fn units_begun_by(byte: u8) -> u32 {
    match byte {
        0x80..=0xBF => 0,
        0xF0..=0xFF => 2,
        _ => 1,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_boundary_translates_as_the_standard_library_counts() {
        let text: String = ["a", "é", "𝜋", "\u{2212}1,5 ", "שלום\n"]
            .concat()
            .repeat(40);
        let offsets = Offsets::new(&text);
        for (at, _) in text.char_indices().chain([(text.len(), ' ')]) {
            let expected = text[..at].encode_utf16().count() as u32;
            let span = offsets.span(Bytes::new(at, at));
            assert_eq!(span.utf16_start, expected, "byte {at} of {text:?}");
        }
    }

    #[test]
    fn the_end_of_a_text_of_whole_strides_translates() {
        let text = format!("{}é", "x".repeat(STRIDE - 2));
        assert_eq!(text.len(), STRIDE);
        let span = Offsets::new(&text).span(Bytes::new(STRIDE, STRIDE));
        assert_eq!(span.utf16_end as usize, STRIDE - 1, "{text:?}");
    }
}
