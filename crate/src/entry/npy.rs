//! NumPy's array files (NumPy Enhancement Proposal 1, "A simple file format for
//! NumPy arrays", versions 1.0 to 3.0), as text that holds exactly the numbers
//! of the file.
//!
//! The reader is our own: the format is a header of one line and the bare
//! numbers, and the extended and half formats have to be taken exactly.
//!
//! A double is written as a decimal where its exact decimal is short, else in
//! the hexadecimal notation of C (`0x1.999999999999ap-4`), which cells may hold.

use super::binary::{self, Float, Sixteen};
use super::diagnostic::{count, excerpt, grouped, Finding, Kind, Refused};

const MAGIC: &[u8] = b"\x93NUMPY";

/// Whether the bytes begin as such a file does.
pub(crate) fn looks_like(bytes: &[u8]) -> bool {
    bytes.starts_with(MAGIC)
}

/// The array as rows of cells apart by tabs.
pub(crate) fn text(bytes: &[u8], order: usize) -> Result<String, Refused> {
    let (header, data) = split(bytes)?;
    let header = Header::parse(header)?;
    let (rows, cols) = match *header.shape.as_slice() {
        [] => (1, 1),
        [cells] => (1, cells),
        [rows, cols] => (rows, cols),
        _ => {
            return Err(Box::new(
                Finding::error(
                    Kind::Unsupported,
                    format!(
                        "The array in the file has {} dimensions.",
                        header.shape.len()
                    ),
                )
                .expected("a matrix: two dimensions"),
            ))
        }
    };
    let limit = order * order;
    if (rows.min(cols) > 1 && rows.max(cols) > order) || rows.max(cols) > limit {
        return Err(Box::new(Finding::error(
            Kind::TooLarge,
            format!(
                "The file holds {} of {}; matrices up to order {} are worked here.",
                count(rows, "row"),
                count(cols, "cell"),
                grouped(order)
            ),
        )));
    }
    let size = header.element.size();
    let needed = rows * cols * size;
    if rows * cols == 0 {
        return Err(Box::new(Finding::error(
            Kind::Empty,
            "The array in the file has no cells.",
        )));
    }
    if data.len() < needed {
        return Err(Box::new(malformed(
            format!(
                "The file is cut off: {} of {} bytes of numbers are there.",
                grouped(data.len()),
                grouped(needed)
            ),
            "the whole file",
        )));
    }
    let mut numbers = Numbers {
        element: &header.element,
        data: &data[..needed],
        sixteen: Sixteen::Extended,
    };
    if header.element.width == 16 {
        let reals = needed / 16;
        numbers.sixteen = Sixteen::of((0..reals).map(|index| numbers.bits(index)));
    }
    let style = binary::Style::for_cells(rows * cols);
    let mut out = String::with_capacity(rows * cols * 8);
    for row in 0..rows {
        for col in 0..cols {
            if col > 0 {
                out.push('\t');
            }
            let index = if header.by_columns {
                col * rows + row
            } else {
                row * cols + col
            };
            numbers.write(index, style, &mut out);
        }
        out.push('\n');
    }
    Ok(out)
}

fn malformed(sentence: String, expected: &str) -> Finding {
    Finding::error(Kind::Malformed, sentence).expected(expected)
}

/// The header's text and the bytes of the numbers.
fn split(bytes: &[u8]) -> Result<(&str, &[u8]), Refused> {
    let cut = || {
        malformed(
            "The file is cut off in its header.".to_owned(),
            "the whole file",
        )
    };
    let version = *bytes.get(MAGIC.len()).ok_or_else(cut)?;
    let rest = bytes.get(MAGIC.len() + 2..).ok_or_else(cut)?;
    let (length, rest) = match version {
        1 => {
            let (head, rest) = rest.split_first_chunk::<2>().ok_or_else(cut)?;
            (u16::from_le_bytes(*head) as usize, rest)
        }
        2 | 3 => {
            let (head, rest) = rest.split_first_chunk::<4>().ok_or_else(cut)?;
            (u32::from_le_bytes(*head) as usize, rest)
        }
        _ => {
            return Err(Box::new(malformed(
                format!("The file says format version {version}."),
                "version 1, 2 or 3",
            )))
        }
    };
    if rest.len() < length {
        return Err(cut().into());
    }
    let (header, data) = rest.split_at(length);
    let header = std::str::from_utf8(header)
        .map_err(|_| malformed("The header is not text.".to_owned(), "a NumPy header"))?;
    Ok((header, data))
}

#[derive(Clone, Copy, PartialEq)]
enum Sort {
    Signed,
    Unsigned,
    Boolean,
    Float,
    Complex,
}

struct Element {
    sort: Sort,
    /// Bytes of one real number.
    width: usize,
    big_endian: bool,
}

impl Element {
    fn size(&self) -> usize {
        if self.sort == Sort::Complex {
            2 * self.width
        } else {
            self.width
        }
    }

    /// From the description string, as in `<f8`.
    fn parse(text: &str) -> Result<Self, Refused> {
        let refused = || {
            Finding::error(
                Kind::Unsupported,
                format!("The array holds elements of type {}.", excerpt(text)),
            )
            .expected("numbers: floats, complex or whole numbers")
        };
        let mut chars = text.chars();
        let order = chars.next().ok_or_else(refused)?;
        let sort = chars.next().ok_or_else(refused)?;
        let size: usize = chars.as_str().parse().map_err(|_| refused())?;
        let big_endian = match order {
            '<' | '|' | '=' => false,
            '>' => true,
            _ => return Err(refused().into()),
        };
        let (sort, width) = match (sort, size) {
            ('i', 1 | 2 | 4 | 8) => (Sort::Signed, size),
            ('u', 1 | 2 | 4 | 8) => (Sort::Unsigned, size),
            ('b', 1) => (Sort::Boolean, 1),
            ('f', 2 | 4 | 8 | 16) => (Sort::Float, size),
            ('c', 8 | 16 | 32) => (Sort::Complex, size / 2),
            _ => return Err(refused().into()),
        };
        Ok(Self {
            sort,
            width,
            big_endian,
        })
    }
}

struct Header {
    element: Element,
    by_columns: bool,
    shape: Vec<usize>,
}

impl Header {
    /// Reads the dictionary of the header.
    fn parse(text: &str) -> Result<Self, Refused> {
        let missing =
            |key: &str| malformed(format!("The header names no {key}."), "a NumPy header");
        let value = |key: &str| {
            let quoted = text
                .split_once(&format!("'{key}'"))
                .or_else(|| text.split_once(&format!("\"{key}\"")));
            quoted
                .and_then(|(_, rest)| rest.trim_start().strip_prefix(':'))
                .map(str::trim_start)
        };
        let descr = value("descr").ok_or_else(|| missing("descr"))?;
        let quote = descr.chars().next().filter(|c| matches!(c, '\'' | '"'));
        let Some(quote) = quote else {
            return Err(Box::new(
                Finding::error(
                    Kind::Unsupported,
                    "The array holds records of several fields.",
                )
                .expected("an array of plain numbers"),
            ));
        };
        let descr = descr[1..].split(quote).next().unwrap_or("");
        let order = value("fortran_order").ok_or_else(|| missing("fortran_order"))?;
        let shape = value("shape")
            .and_then(|rest| rest.strip_prefix('('))
            .and_then(|rest| rest.split_once(')'));
        let (shape, _) = shape.ok_or_else(|| missing("shape"))?;
        let shape: Result<Vec<usize>, _> = shape
            .split(',')
            .map(|size| size.trim().trim_end_matches('L'))
            .filter(|size| !size.is_empty())
            .map(|size| size.parse::<u32>().map(|size| size as usize))
            .collect();
        Ok(Self {
            element: Element::parse(descr)?,
            by_columns: order.starts_with("True"),
            shape: shape.map_err(|_| missing("shape"))?,
        })
    }
}

struct Numbers<'a> {
    element: &'a Element,
    data: &'a [u8],
    /// What numbers of sixteen bytes are.
    sixteen: Sixteen,
}

impl Numbers<'_> {
    fn write(&self, index: usize, style: binary::Style, out: &mut String) {
        let width = self.element.width;
        match self.element.sort {
            Sort::Complex => {
                let re = self.float(2 * index);
                let im = self.float(2 * index + 1);
                binary::write_complex(re, im, style, out);
            }
            Sort::Float => binary::write(self.float(index), style, out),
            Sort::Boolean => out.push(if self.bits(index) == 0 { '0' } else { '1' }),
            Sort::Unsigned => out.push_str(&self.bits(index).to_string()),
            Sort::Signed => {
                // Sign-extended from its width to 128 bits.
                let unused = 128 - 8 * width as u32;
                let value = (self.bits(index) << unused).cast_signed() >> unused;
                out.push_str(&value.to_string());
            }
        }
    }

    fn float(&self, index: usize) -> Float {
        Float::from_bits(self.bits(index), self.element.width, self.sixteen)
    }

    /// The bits of real number `index`.
    fn bits(&self, index: usize) -> u128 {
        let width = self.element.width;
        let bytes = &self.data[index * width..(index + 1) * width];
        let join = |bits: u128, &byte: &u8| (bits << 8) | u128::from(byte);
        if self.element.big_endian {
            bytes.iter().fold(0, join)
        } else {
            bytes.iter().rev().fold(0, join)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn file(descr: &str, by_columns: &str, shape: &str, data: &[u8]) -> Vec<u8> {
        let header =
            format!("{{'descr': '{descr}', 'fortran_order': {by_columns}, 'shape': {shape}, }}\n");
        let mut bytes = MAGIC.to_vec();
        bytes.extend([1, 0]);
        bytes.extend((header.len() as u16).to_le_bytes());
        bytes.extend(header.as_bytes());
        bytes.extend(data);
        bytes
    }

    #[test]
    fn elements_orders_and_endiannesses() {
        let doubles: Vec<u8> = [1.0f64, 2.5, -3.0, 0.1]
            .iter()
            .flat_map(|x| x.to_le_bytes())
            .collect();
        let exact_tenth = "0.1000000000000000055511151231257827021181583404541015625";
        for (bytes, wanted) in [
            (
                file("<f8", "False", "(2, 2)", &doubles),
                format!("1\t2.5\n-3\t{exact_tenth}\n"),
            ),
            (
                file("<f8", "True", "(2, 2)", &doubles),
                format!("1\t-3\n2.5\t{exact_tenth}\n"),
            ),
            (
                file(">i2", "False", "(2,)", &[0, 1, 0xFF, 0xFE]),
                "1\t-2\n".to_owned(),
            ),
            (file("|u1", "False", "()", &[200]), "200\n".to_owned()),
            (file("|b1", "False", "(1, 2)", &[1, 0]), "1\t0\n".to_owned()),
            (
                file(">f4", "False", "(1, 1)", &1.5f32.to_be_bytes()),
                "1.5\n".to_owned(),
            ),
            (
                file("<f2", "False", "(1, 2)", &[0x00, 0x3C, 0x01, 0x80]),
                "1\t-0.000000059604644775390625\n".to_owned(),
            ),
            (
                file(
                    "<c8",
                    "False",
                    "(1, 1)",
                    &[1.0f32.to_le_bytes(), (-2.0f32).to_le_bytes()].concat(),
                ),
                "1-2i\n".to_owned(),
            ),
            (
                file("<f8", "False", "(1, 1)", &f64::NAN.to_le_bytes()),
                "nan\n".to_owned(),
            ),
            (
                file("<f8", "False", "(1, 1)", &1e-300f64.to_le_bytes()),
                "0x1.56e1fc2f8f359p-997\n".to_owned(),
            ),
        ] {
            assert_eq!(
                text(&bytes, 20).map_err(|finding| finding.sentence),
                Ok(wanted.clone()),
                "{wanted}"
            );
        }
    }

    #[test]
    fn extended_precision_is_taken_exactly() {
        // 1 + 2⁻⁶³ in the 80-bit format, padded to 16 bytes.
        let mut data = [0u8; 16];
        data[0] = 1;
        data[7] = 0x80;
        data[8] = 0xFF;
        data[9] = 0x3F;
        let read = text(&file("<f16", "False", "(1, 1)", &data), 20);
        assert_eq!(
            read.map_err(|finding| finding.sentence),
            Ok("0x1.0000000000000002p0\n".to_owned())
        );
    }

    #[test]
    fn each_fault_has_its_sentence() {
        for (bytes, sentence) in [
            (file("<f8", "False", "(2, 2)", &[0; 31]), "The file is cut off: 31 of 32 bytes of numbers are there."),
            (file("<f8", "False", "(2, 2, 2)", &[0; 64]), "The array in the file has 3 dimensions."),
            (file("|O", "False", "(2, 2)", &[0; 64]), "The array holds elements of type |O."),
            (file("<U3", "False", "(2, 2)", &[0; 64]), "The array holds elements of type <U3."),
            (file("<f8", "False", "(0, 0)", &[]), "The array in the file has no cells."),
            (file("<f8", "False", "(4000, 4000)", &[]), "The file holds 4,000 rows of 4,000 cells; matrices up to order 20 are worked here."),
            (MAGIC.to_vec(), "The file is cut off in its header."),
            ([MAGIC, &[9, 0, 0, 0]].concat(), "The file says format version 9."),
            ([MAGIC, &[1, 0, 2, 0], b"{}"].concat(), "The header names no descr."),
        ] {
            assert_eq!(text(&bytes, 20).err().map(|finding| finding.sentence).as_deref(), Some(sentence));
        }
    }
}
