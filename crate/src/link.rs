//! A whole problem in the fragment of a link.
//!
//! ```text
//! p1.<length>.<check>.<data>
//! ```
//!
//! `p1` names the form and its version; `data` is the problem document as
//! compact JSON, deflated (RFC 1951) and written in base64url without padding
//! (RFC 4648, section 5); `length` is the number of characters of `data`, in
//! decimal; `check` is the first 48 bits of the SHA-256 of `length.data`, in
//! base64url. Every link cut short and every change of a single character is
//! noticed; that is what the check is for, it protects from accidents and not
//! from forgery.

use crate::document::{self, DocumentError, ProblemDocument};
use base64::engine::general_purpose::URL_SAFE_NO_PAD;
use base64::Engine;
use miniz_oxide::deflate::compress_to_vec;
use miniz_oxide::inflate::{decompress_to_vec_with_limit, TINFLStatus};
use sha2::{Digest, Sha256};

/// Form and version.
const PREFIX: &str = "p1";

/// Greatest number of characters of a link that is looked at.
pub const MAX_CHARACTERS: usize = 32 << 20;

/// Greatest size of the document inside.
pub const MAX_DOCUMENT: usize = 128 << 20;

/// Deflate's effort, of 10: higher gains little and takes long.
const EFFORT: u8 = 8;

/// Bytes of the hash that are kept.
const CHECK_BYTES: usize = 6;

/// Why a link was not opened.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum LinkError {
    /// The fragment is not one of ours.
    NotOurs,
    /// It is of a version this program does not know.
    UnknownVersion(String),
    /// The link ends too early.
    Truncated {
        /// Characters of data there are.
        found: usize,
        /// Characters of data there should be, if that much is there to say.
        expected: Option<usize>,
    },
    /// The link was changed on its way.
    Corrupt,
    /// The link, or what it unpacks to, is larger than what is opened here.
    TooLarge,
    /// The link is whole, but what it holds is no problem document.
    Document(DocumentError),
}

impl std::fmt::Display for LinkError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::NotOurs => {
                f.write_str("The link holds no problem: its part after # is of another kind.")
            }
            Self::UnknownVersion(version) => write!(
                f,
                "The link is of version {version}; version 1 is read here. Open it with the page \
                 that made it."
            ),
            Self::Truncated {
                found,
                expected: Some(expected),
            } => write!(
                f,
                "The link was cut short: {found} of its {expected} characters arrived. Copy it \
                 whole, or ask for the problem as a file."
            ),
            Self::Truncated { expected: None, .. } => f.write_str(
                "The link was cut short near its beginning. Copy it whole, or ask for the problem \
                 as a file.",
            ),
            Self::Corrupt => f.write_str(
                "The link was changed on its way: its check does not fit. Copy it again, or ask \
                 for the problem as a file.",
            ),
            Self::TooLarge => write!(
                f,
                "The link is too large to open: it may have {} MB, and {} MB unpacked. Ask for \
                 the problem as a file.",
                MAX_CHARACTERS >> 20,
                MAX_DOCUMENT >> 20
            ),
            Self::Document(error) => write!(f, "The link is whole but cannot be opened. {error}"),
        }
    }
}

impl std::error::Error for LinkError {}

/// The fragment for a document, without the #. Cost: linear in its size.
pub fn encode(document: &ProblemDocument) -> String {
    let packed = compress_to_vec(document::write_compact(document).as_bytes(), EFFORT);
    let data = URL_SAFE_NO_PAD.encode(packed);
    let length = data.len().to_string();
    let check = check(&length, &data);
    format!("{PREFIX}.{length}.{check}.{data}")
}

fn check(length: &str, data: &str) -> String {
    let mut hash = Sha256::new();
    hash.update(length.as_bytes());
    hash.update(b".");
    hash.update(data.as_bytes());
    URL_SAFE_NO_PAD.encode(&hash.finalize()[..CHECK_BYTES])
}

/// The document in a fragment, with or without the #. All or nothing: a
/// document comes back only from a link that arrived whole.
///
/// # Errors
/// [`LinkError`]; nothing larger than [`MAX_DOCUMENT`] is ever unpacked.
pub fn decode(fragment: &str) -> Result<ProblemDocument, LinkError> {
    let fragment = fragment.strip_prefix('#').unwrap_or(fragment);
    if fragment.len() > MAX_CHARACTERS {
        return Err(LinkError::TooLarge);
    }
    let data = whole_data(fragment)?;
    let packed = URL_SAFE_NO_PAD
        .decode(data)
        .map_err(|_| LinkError::Corrupt)?;
    let text = decompress_to_vec_with_limit(&packed, MAX_DOCUMENT).map_err(|error| {
        if error.status == TINFLStatus::HasMoreOutput {
            LinkError::TooLarge
        } else {
            LinkError::Corrupt
        }
    })?;
    let text = String::from_utf8(text).map_err(|_| LinkError::Corrupt)?;
    document::read(&text).map_err(LinkError::Document)
}

/// The data of a link whose form, length and check are right.
fn whole_data(fragment: &str) -> Result<&str, LinkError> {
    let cut_short = LinkError::Truncated {
        found: 0,
        expected: None,
    };
    let mut parts = fragment.splitn(4, '.');
    let prefix = parts.next().unwrap_or_default();
    if prefix != PREFIX {
        return Err(match prefix.strip_prefix('p') {
            _ if !prefix.is_empty() && PREFIX.starts_with(prefix) => cut_short,
            Some(version) if is_number(version) => LinkError::UnknownVersion(version.to_owned()),
            _ => LinkError::NotOurs,
        });
    }
    let (Some(length), Some(found_check), Some(data)) = (parts.next(), parts.next(), parts.next())
    else {
        return Err(cut_short);
    };
    if !is_number(length) {
        return Err(LinkError::Corrupt);
    }
    let expected: usize = length.parse().map_err(|_| LinkError::Corrupt)?;
    if data.len() < expected && data.is_ascii() {
        return Err(LinkError::Truncated {
            found: data.len(),
            expected: Some(expected),
        });
    }
    if data.len() != expected || check(length, data) != found_check {
        return Err(LinkError::Corrupt);
    }
    Ok(data)
}

fn is_number(text: &str) -> bool {
    (1..=9).contains(&text.len()) && text.bytes().all(|c| c.is_ascii_digit())
}

#[cfg(test)]
mod tests;
