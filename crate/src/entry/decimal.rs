//! Which decimal mark the cells of a table use, by the cells themselves.

use super::plain::SIGNS;
use super::raw::RawTable;
use super::settings::DecimalMark;
use super::value;

/// The decimal marks under which the cells can be read, most natural first.
///
/// A comma decides for the decimal comma when it cannot group thousands
/// (`0,5`, `1,25`, `1234,5`) and no cell has a decimal point. When every comma
/// stands before exactly three digits both are possible, and it is asked.
pub(crate) fn possible(table: &RawTable, source: &str) -> Vec<DecimalMark> {
    let mut commas = Commas::default();
    for cell in table.iter() {
        commas.count(cell.text(source));
    }
    if commas.alone + commas.decisive == 0 || commas.points > 0 || commas.refused > 0 {
        vec![DecimalMark::Point]
    } else if commas.decisive > 0 {
        vec![DecimalMark::Comma]
    } else {
        vec![DecimalMark::Comma, DecimalMark::PointWithGroups]
    }
}

#[derive(Default)]
struct Commas {
    /// Cells whose comma may be either mark.
    alone: usize,
    /// Cells whose comma can only be a decimal mark.
    decisive: usize,
    /// Cells with a decimal point and no comma.
    points: usize,
    /// Cells with certain thousands separators.
    refused: usize,
}

impl Commas {
    fn count(&mut self, text: &str) {
        if !text.contains(',') {
            self.points += usize::from(text.contains('.'));
            return;
        }
        if value::without_groups(text).is_some() {
            self.refused += 1;
            return;
        }
        for number in text
            .split([' ', '+', '*', '/', '(', ')', '±', '·'])
            .flat_map(|part| part.split(SIGNS))
        {
            let Some((whole, fraction)) = number.split_once(',') else {
                continue;
            };
            let digits = fraction.bytes().take_while(u8::is_ascii_digit).count();
            if digits == 3 && (1..=3).contains(&whole.len()) && !whole.starts_with('0') {
                self.alone += 1;
            } else if digits > 0 {
                self.decisive += 1;
            }
        }
    }
}
