//! Dense matrices of doubles, real and imaginary parts in planes of their own.

use nalgebra::DMatrix;

/// A dense matrix, column-major, split planes. `im` is `None` for a real
/// matrix. Kernels work on the planes' slices; the algebra off the hot path
/// uses nalgebra's own operations on them.
#[derive(Clone, Debug, PartialEq)]
pub struct Dense {
    /// Real parts.
    pub re: DMatrix<f64>,
    /// Imaginary parts, same shape as `re`.
    pub im: Option<DMatrix<f64>>,
}

impl Dense {
    /// A real matrix.
    pub fn real(re: DMatrix<f64>) -> Self {
        Self { re, im: None }
    }

    /// A complex matrix; both planes have the same shape.
    pub fn complex(re: DMatrix<f64>, im: DMatrix<f64>) -> Self {
        assert_eq!(
            re.shape(),
            im.shape(),
            "planes of one matrix differ in shape"
        );
        Self { re, im: Some(im) }
    }

    /// Rows.
    pub fn rows(&self) -> usize {
        self.re.nrows()
    }

    /// Columns.
    pub fn cols(&self) -> usize {
        self.re.ncols()
    }

    /// Whether there is an imaginary plane.
    pub fn is_complex(&self) -> bool {
        self.im.is_some()
    }
}
