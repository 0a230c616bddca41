//! The fingerprint: SHA-256 (FIPS 180-4) over the canonical problem and the
//! bits of the results. Equal fingerprints mean the same input gave the same
//! bits; they say nothing about either being right.
//!
//! Layout hashed: sections, each a label, a zero byte, the content's length in
//! bytes as eight little-endian bytes, and the content. Doubles enter as their
//! IEEE 754 bits, little-endian, matrices column by column, the real plane
//! before the imaginary one.

use crate::matrix::Dense;
use crate::pairs::Approximation;
use sha2::{Digest, Sha256};
use std::fmt;

/// 32 bytes; printed as eight groups of eight hexadecimal digits.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Fingerprint(pub [u8; 32]);

impl fmt::Display for Fingerprint {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (group, bytes) in self.0.chunks_exact(4).enumerate() {
            let gap = if group == 0 { "" } else { " " };
            write!(
                f,
                "{gap}{:02x}{:02x}{:02x}{:02x}",
                bytes[0], bytes[1], bytes[2], bytes[3]
            )?;
        }
        Ok(())
    }
}

/// A fingerprint being taken, section by section.
#[derive(Clone)]
pub struct Taking {
    hash: Sha256,
}

impl Taking {
    /// Starts with the problem's canonical bytes.
    pub fn of_problem(canonical: &[u8]) -> Self {
        let mut taking = Self {
            hash: Sha256::new(),
        };
        taking.bytes("problem", canonical);
        taking
    }

    /// Adds the values, vectors and scale of an approximation.
    pub fn approximation(&mut self, approximation: &Approximation) {
        self.bytes("scale", &approximation.scale.to_le_bytes());
        self.doubles("values", &approximation.values);
        self.matrix("vectors", &approximation.vectors);
    }

    /// Adds a section of doubles.
    pub fn doubles(&mut self, label: &str, values: &[f64]) {
        self.open(label, 8 * values.len());
        for value in values {
            self.hash.update(value.to_bits().to_le_bytes());
        }
    }

    /// Adds a matrix: its real plane, then its imaginary plane if it has one.
    pub fn matrix(&mut self, label: &str, matrix: &Dense) {
        self.doubles(label, matrix.re.as_slice());
        if let Some(im) = &matrix.im {
            self.doubles(label, im.as_slice());
        }
    }

    /// Adds a section of bytes.
    pub fn bytes(&mut self, label: &str, content: &[u8]) {
        self.open(label, content.len());
        self.hash.update(content);
    }

    /// The fingerprint of everything added.
    pub fn finish(self) -> Fingerprint {
        Fingerprint(self.hash.finalize().into())
    }

    fn open(&mut self, label: &str, length: usize) {
        self.hash.update(label.as_bytes());
        self.hash.update([0]);
        self.hash.update((length as u64).to_le_bytes());
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sections_are_hashed_as_the_layout_says() {
        let mut taking = Taking::of_problem(b"abc");
        taking.doubles("values", &[1.0, -0.0]);
        let mut bytes = b"problem\0\x03\0\0\0\0\0\0\0abc".to_vec();
        bytes.extend(b"values\0\x10\0\0\0\0\0\0\0");
        bytes.extend(b"\0\0\0\0\0\0\xf0\x3f\0\0\0\0\0\0\0\x80");
        let expected: [u8; 32] = Sha256::digest(&bytes).into();
        assert_eq!(taking.finish(), Fingerprint(expected));
    }

    #[test]
    fn one_bit_changes_it_and_moving_a_boundary_does_too() {
        let of = |values: &[f64], more: &[f64]| {
            let mut taking = Taking::of_problem(b"p");
            taking.doubles("values", values);
            taking.doubles("values", more);
            taking.finish()
        };
        let base = of(&[1.0, 2.0], &[3.0]);
        assert_ne!(base, of(&[1.0, 2.0f64.next_up()], &[3.0]));
        assert_ne!(base, of(&[1.0], &[2.0, 3.0]));
        assert_eq!(base, of(&[1.0, 2.0], &[3.0]));
    }

    #[test]
    fn it_prints_in_eight_groups() {
        let mut bytes = [0u8; 32];
        bytes[0] = 0xab;
        bytes[31] = 0x0f;
        let print = Fingerprint(bytes).to_string();
        assert!(
            print.starts_with("ab000000 ") && print.ends_with(" 0000000f"),
            "{print}"
        );
        assert_eq!(print.split(' ').count(), 8, "{print}");
    }
}
