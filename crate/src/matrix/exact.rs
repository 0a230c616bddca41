//! Square matrices of exact numbers, as typed.

use crate::num::ExactReal;

/// A square matrix of exact numbers, row-major, all order² cells present.
#[derive(Clone, Debug)]
pub struct ExactMatrix {
    order: usize,
    re: Vec<ExactReal>,
    im: Option<Vec<ExactReal>>,
}

impl ExactMatrix {
    /// From row-major planes of `order`² cells each.
    ///
    /// # Panics
    /// If a plane's length is not `order`²; callers build planes by order.
    pub fn new(order: usize, re: Vec<ExactReal>, im: Option<Vec<ExactReal>>) -> Self {
        assert_eq!(re.len(), order * order, "real plane of order {order}");
        if let Some(im) = &im {
            assert_eq!(im.len(), order * order, "imaginary plane of order {order}");
        }
        Self { order, re, im }
    }

    /// Number of rows.
    pub fn order(&self) -> usize {
        self.order
    }

    /// Whether any cell may have an imaginary part.
    pub fn is_complex(&self) -> bool {
        self.im.is_some()
    }

    /// Real part of the cell in `row` and `col` (from 0).
    pub fn re(&self, row: usize, col: usize) -> &ExactReal {
        &self.re[row * self.order + col]
    }

    /// Imaginary part of the cell in `row` and `col` (from 0).
    pub fn im(&self, row: usize, col: usize) -> &ExactReal {
        match &self.im {
            Some(im) => &im[row * self.order + col],
            None => &ExactReal::ZERO,
        }
    }
}
