//! A file's bytes as text: its encoding, or why it is not text.

use super::diagnostic::{excerpt, Finding, Kind, Refused};
use super::npy;

/// What the bytes hold.
pub(crate) struct Decoded {
    pub text: String,
    /// What was understood in a way worth saying.
    pub remark: Option<Finding>,
}

/// Kinds of file that people mistake for tables, by their first bytes.
const KNOWN: [(&[u8], &str, &str); 8] = [
    (
        b"PK\x03\x04",
        "a zip archive, as spreadsheets and .npz files are",
        "open it, then copy the cells and paste them, or save the one array as .npy",
    ),
    (b"%PDF", "a PDF document", "copy the numbers and paste them"),
    (b"\x1F\x8B", "compressed", "unpack it first"),
    (b"\x89PNG", "a picture", "type the numbers"),
    (b"\xFF\xD8\xFF", "a picture", "type the numbers"),
    (b"GIF8", "a picture", "type the numbers"),
    (
        b"\x89HDF",
        "an HDF5 file",
        "save the one array as .npy or as text",
    ),
    (
        b"\xD0\xCF\x11\xE0",
        "an old office document",
        "open it, then copy the cells and paste them",
    ),
];

/// Decodes a file.
pub(crate) fn decode(bytes: &[u8], name: &str, order: usize) -> Result<Decoded, Refused> {
    let name = excerpt(name);
    if npy::looks_like(bytes) {
        return npy::text(bytes, order).map(|text| Decoded { text, remark: None });
    }
    if let Some((_, what, cure)) = KNOWN.iter().find(|(magic, ..)| bytes.starts_with(magic)) {
        return Err(unsupported(format!("{name} is {what}; {cure}.")));
    }
    if let [0xFF, 0xFE, rest @ ..] = bytes {
        return Ok(utf16(rest, u16::from_le_bytes));
    }
    if let [0xFE, 0xFF, rest @ ..] = bytes {
        return Ok(utf16(rest, u16::from_be_bytes));
    }
    if bytes.iter().any(|&byte| is_binary(byte)) {
        return Err(unsupported(format!("{name} is not a text file.")));
    }
    match std::str::from_utf8(bytes) {
        Ok(text) => Ok(Decoded {
            text: text.to_owned(),
            remark: None,
        }),
        Err(_) => Ok(Decoded {
            text: bytes.iter().map(|&byte| windows_1252(byte)).collect(),
            remark: Some(Finding::note(
                Kind::Recognised,
                format!("{name} is not in UTF-8; it was read as Windows-1252 (Western European)."),
            )),
        }),
    }
}

fn unsupported(sentence: String) -> Refused {
    Box::new(Finding::error(Kind::Unsupported, sentence).expected("a text file or a .npy file"))
}

/// Bytes that no text holds, in any encoding whose units are bytes.
fn is_binary(byte: u8) -> bool {
    matches!(byte, 0..=8 | 0x0E..=0x1A | 0x1C..=0x1F)
}

fn utf16(bytes: &[u8], unit: fn([u8; 2]) -> u16) -> Decoded {
    let units = bytes.chunks_exact(2).map(|pair| unit([pair[0], pair[1]]));
    let text = char::decode_utf16(units)
        .map(|c| c.unwrap_or(char::REPLACEMENT_CHARACTER))
        .collect();
    Decoded { text, remark: None }
}

/// The character of a byte in Windows code page 1252, for those that tables of
/// numbers hold (signs, quotes); the other special ones become a mark.
fn windows_1252(byte: u8) -> char {
    match byte {
        0x80 => '€',
        0x91 | 0x92 => '’',
        0x93 | 0x94 => '"',
        0x96 => '\u{2013}',
        0x97 => '\u{2014}',
        0x81..=0x9F => char::REPLACEMENT_CHARACTER,
        _ => char::from(byte),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn encodings_of_text() {
        let utf16: Vec<u8> = [0xFEFFu16]
            .into_iter()
            .chain("1\t\u{2212}2".encode_utf16())
            .flat_map(u16::to_le_bytes)
            .collect();
        let big: Vec<u8> = [0xFEFFu16]
            .into_iter()
            .chain("1\t\u{2212}2".encode_utf16())
            .flat_map(u16::to_be_bytes)
            .collect();
        for (bytes, wanted) in [
            ("1 2".as_bytes(), "1 2"),
            (&utf16, "1\t\u{2212}2"),
            (&big, "1\t\u{2212}2"),
            (b"\x961 \xB1 2", "\u{2013}1 ± 2"),
        ] {
            let decoded = decode(bytes, "a.txt", 10).map_err(|finding| finding.sentence);
            assert_eq!(
                decoded.map(|decoded| decoded.text).as_deref(),
                Ok(wanted),
                "{bytes:?}"
            );
        }
    }

    #[test]
    fn binary_files_are_named() {
        for (bytes, sentence) in [
            (&b"PK\x03\x04abc"[..], "a.x is a zip archive, as spreadsheets and .npz files are; open it, then copy the cells and paste them, or save the one array as .npy."),
            (b"1 2\x00\x01", "a.x is not a text file."),
            (b"%PDF-1.4", "a.x is a PDF document; copy the numbers and paste them."),
        ] {
            let refused = decode(bytes, "a.x", 10).err().map(|finding| finding.sentence);
            assert_eq!(refused.as_deref(), Some(sentence), "{bytes:?}");
        }
    }
}
