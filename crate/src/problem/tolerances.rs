//! Tolerances of the entries: how far the true matrix may lie from the typed.

use crate::num::ExactReal;

/// Radius of each entry of a Hermitian matrix: |true − typed| ≤ radius, also
/// for complex entries. Symmetric: entry (i, j) and its mirror move together.
#[derive(Clone, Debug)]
pub struct Tolerances {
    order: usize,
    /// Row-major, order².
    radii: Vec<ExactReal>,
}

impl Tolerances {
    /// From row-major radii; of a pair of mirrored ones the larger counts.
    pub(super) fn new(order: usize, mut radii: Vec<ExactReal>) -> Self {
        for row in 0..order {
            for col in 0..row {
                let (lower, upper) = (row * order + col, col * order + row);
                if is_less(&radii[lower], &radii[upper]) {
                    radii[lower] = radii[upper].clone();
                } else {
                    radii[upper] = radii[lower].clone();
                }
            }
        }
        Self { order, radii }
    }

    /// Number of rows.
    pub fn order(&self) -> usize {
        self.order
    }

    /// Radius of the entry in `row` and `col`, from 0; zero where none was
    /// written.
    pub fn radius(&self, row: usize, col: usize) -> &ExactReal {
        &self.radii[row * self.order + col]
    }
}

/// Whether a < b; an undecidable difference counts as none.
fn is_less(a: &ExactReal, b: &ExactReal) -> bool {
    a.sub(b).is_ok_and(|d| d.is_negative())
}
