//! The test for Hermitian form on exact values, and the repairs offered.

use super::{Cells, Part};
use crate::entry::cell::CellValue;
use crate::num::{figure, ExactReal};

/// Disagreeing pairs that are listed; all are counted.
pub const LISTED: usize = 100;

/// How the mirrored cells of a matrix are brought to agree.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mirror {
    /// The cells below the diagonal count.
    Lower,
    /// The cells above the diagonal count.
    Upper,
    /// The exact mean of each cell and its mirror's conjugate counts.
    Mean,
}

/// One pair of mirrored cells that disagree, or a diagonal cell that is not
/// real (then `row` equals `col`).
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Disagreement {
    /// Row of the cell below the diagonal, from 0.
    pub row: usize,
    /// Its column.
    pub col: usize,
    /// The value of cell (row, col).
    pub lower: String,
    /// The value of cell (col, row).
    pub upper: String,
    /// lower − conj(upper), to a few digits.
    pub difference: String,
}

/// How large the disagreement is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum AsymmetrySize {
    /// No larger than the rounding of a computed matrix leaves (for instance
    /// of a product A·B·Aᵀ): at most 8·n·u times the largest entry, with
    /// u = 2^−53. The factor is common practice, no source.
    Rounding,
    /// Larger than that.
    Real,
}

/// What is not Hermitian about a matrix.
#[derive(Clone, Debug, PartialEq)]
pub struct Asymmetry {
    /// Which matrix.
    pub part: Part,
    /// The first pairs that disagree, row by row, up to a cap.
    pub pairs: Vec<Disagreement>,
    /// How many disagree in all, diagonal cells included.
    pub count: usize,
    /// How many of these are diagonal cells that are not real.
    pub diagonal: usize,
    /// The largest difference, as a double.
    pub largest: f64,
    /// Whether rounding explains it.
    pub size: AsymmetrySize,
}

impl std::fmt::Display for Asymmetry {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let name = self.part.name();
        let Some(first) = self.pairs.first() else {
            return write!(f, "The {name} is not Hermitian.");
        };
        let (row, col) = (first.row + 1, first.col + 1);
        if row == col {
            write!(
                f,
                "The {name} is not Hermitian: its diagonal must be real, and the cell in row \
                 {row}, column {row} is {}",
                first.lower
            )?;
        } else {
            write!(
                f,
                "The {name} is not Hermitian: row {row}, column {col} is {} but row {col}, \
                 column {row} is {}",
                first.lower, first.upper
            )?;
        }
        match self.count {
            1 => f.write_str(".")?,
            count => write!(f, ", and so on in {} more.", count - 1)?,
        }
        if self.size == AsymmetrySize::Rounding {
            f.write_str(
                " The differences are of the size rounding leaves; the mean removes them.",
            )?;
        }
        Ok(())
    }
}

/// What was done to make a matrix Hermitian: an act of the ledger.
#[derive(Clone, Debug, PartialEq)]
pub struct Adjustment {
    /// What was taken.
    pub mirror: Mirror,
    /// What disagreed before.
    pub found: Asymmetry,
}

impl std::fmt::Display for Adjustment {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let taken = match self.mirror {
            Mirror::Lower => "the lower triangle was taken",
            Mirror::Upper => "the upper triangle was taken",
            Mirror::Mean => "the mean of both was taken",
        };
        let name = self.found.part.name();
        let pairs = if self.found.count == 1 {
            "pair"
        } else {
            "pairs"
        };
        write!(
            f,
            "{} {pairs} of the {name} disagreed, by {} at most; {taken}.",
            self.found.count,
            figure::plain(self.found.largest, 3)
        )
    }
}

/// lower − conj(upper), as exact parts; `None` when they agree for certain.
enum Difference {
    Parts(ExactReal, ExactReal),
    Undecided,
}

fn difference(lower: &CellValue, upper: &CellValue) -> Option<Difference> {
    let re = lower.re.equals(&upper.re);
    // Most matrices are real: two zeros need no arithmetic.
    let im = if lower.im.is_zero() && upper.im.is_zero() {
        Some(true)
    } else {
        lower.im.equals(&upper.im.neg())
    };
    if re == Some(true) && im == Some(true) {
        return None;
    }
    match (lower.re.sub(&upper.re), lower.im.add(&upper.im)) {
        (Ok(re), Ok(im)) => Some(Difference::Parts(re, im)),
        _ => Some(Difference::Undecided),
    }
}

/// Compares every pair of mirrored cells. Cost: n².
pub(super) fn asymmetry(cells: &Cells, part: Part) -> Option<Asymmetry> {
    let n = cells.rows;
    let mut pairs = Vec::new();
    let (mut count, mut diagonal, mut largest) = (0, 0, 0.0f64);
    for row in 0..n {
        for col in 0..=row {
            let (lower, upper) = (cells.at(row, col), cells.at(col, row));
            let Some(found) = difference(lower, upper) else {
                continue;
            };
            count += 1;
            diagonal += usize::from(row == col);
            let text = match &found {
                Difference::Parts(re, im) => {
                    let (re, im) = (re.nearest(0), im.nearest(0));
                    largest = largest.max(re.abs()).max(im.abs());
                    (pairs.len() < LISTED).then(|| short(re, im))
                }
                Difference::Undecided => Some("not decided".to_owned()),
            };
            if let (true, Some(difference)) = (pairs.len() < LISTED, text) {
                pairs.push(Disagreement {
                    row,
                    col,
                    lower: lower.to_string(),
                    upper: upper.to_string(),
                    difference,
                });
            }
        }
    }
    if count == 0 {
        return None;
    }
    let biggest = cells.values.iter().fold(0.0f64, |big, cell| {
        big.max(cell.re.nearest(0).abs())
            .max(cell.im.nearest(0).abs())
    });
    let rounding = 8.0 * n as f64 * (f64::EPSILON / 2.0) * biggest;
    let size = if largest <= rounding {
        AsymmetrySize::Rounding
    } else {
        AsymmetrySize::Real
    };
    Some(Asymmetry {
        part,
        pairs,
        count,
        diagonal,
        largest,
        size,
    })
}

/// A difference in three significant digits.
fn short(re: f64, im: f64) -> String {
    let real = figure::plain(re, 3);
    if im == 0.0 {
        return real;
    }
    let sign = if im < 0.0 { '-' } else { '+' };
    format!("{real} {sign} {}i", figure::plain(im.abs(), 3))
}

/// Makes the cells Hermitian by the choice given. The diagonal keeps its real
/// parts in every case.
pub(super) fn mend(cells: &mut Cells, mirror: Mirror) {
    let n = cells.rows;
    for row in 0..n {
        cells.values[row * n + row].im = ExactReal::ZERO;
        for col in 0..row {
            let (below, above) = (row * n + col, col * n + row);
            let tolerances = (
                cells.values[below].tolerance.clone(),
                cells.values[above].tolerance.clone(),
            );
            let lower = match mirror {
                Mirror::Lower => cells.values[below].clone(),
                Mirror::Upper => cells.values[above].conj(),
                Mirror::Mean => mean(&cells.values[below], &cells.values[above]),
            };
            cells.values[above] = lower.conj();
            cells.values[below] = lower;
            cells.values[below].tolerance = tolerances.0;
            cells.values[above].tolerance = tolerances.1;
        }
    }
}

/// (a + conj(b))/2; a itself where the exact mean would be too long to carry.
fn mean(a: &CellValue, b: &CellValue) -> CellValue {
    let part = |x: &ExactReal, y: &ExactReal| x.add(y).and_then(|sum| sum.half());
    match (part(&a.re, &b.re), part(&a.im, &b.im.neg())) {
        (Ok(re), Ok(im)) => CellValue::complex(re, im),
        _ => a.clone(),
    }
}
