//! A matrix as a map of magnitudes. For the eye only: nothing is computed
//! from it.

use serde::{Deserialize, Serialize};

use super::decimal;
use crate::matrix::Dense;

/// Cells a side beyond which a map is no easier to read.
const LARGEST_SIDE: usize = 160;

/// Magnitudes of a matrix for drawing. A large matrix is gathered into square
/// blocks, each standing for its largest entry.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct MagnitudePicture {
    /// Cells a side.
    pub side: u32,
    /// Rows of the matrix that one cell stands for.
    pub block: u32,
    /// log₁₀ of the magnitude, row by row; NaN where the entry is zero.
    pub decades: Vec<f32>,
    /// −1, 0 or 1: the sign of the real part, row by row.
    pub signs: Vec<i8>,
    /// The largest magnitude.
    pub largest: String,
    /// The smallest magnitude that is not zero.
    pub smallest: String,
}

/// Draws `matrix`; entries are entry · 2^`scale`. Cost: O(n²).
pub fn picture(matrix: &Dense, scale: i32) -> MagnitudePicture {
    let order = matrix.rows();
    let block = order.div_ceil(LARGEST_SIDE).max(1);
    let side = order.div_ceil(block);
    let mut sizes = vec![0.0f64; side * side];
    let mut signs = vec![0i8; side * side];
    for col in 0..matrix.cols() {
        for row in 0..order {
            let re = matrix.re[(row, col)];
            let im = matrix.im.as_ref().map_or(0.0, |im| im[(row, col)]);
            // The larger part stands for the modulus: within a factor √2 of it.
            let size = re.abs().max(im.abs());
            let cell = (row / block) * side + col / block;
            if size > sizes[cell] {
                sizes[cell] = size;
                signs[cell] = if re > 0.0 {
                    1
                } else if re < 0.0 {
                    -1
                } else {
                    0
                };
            }
        }
    }
    let largest = sizes.iter().copied().fold(0.0, f64::max);
    let least = sizes
        .iter()
        .copied()
        .filter(|size| *size > 0.0)
        .fold(largest, f64::min);
    // Pictures only: the logarithm's last bit may differ between machines.
    let shift = f64::from(scale) * std::f64::consts::LOG10_2;
    let decades = sizes
        .iter()
        .map(|size| {
            if *size == 0.0 {
                f32::NAN
            } else {
                (size.log10() + shift) as f32
            }
        })
        .collect();
    MagnitudePicture {
        side: side as u32,
        block: block as u32,
        decades,
        signs,
        largest: scaled_magnitude(largest, scale),
        smallest: scaled_magnitude(least, scale),
    }
}

/// |value · 2^scale| in three significant digits.
pub fn scaled_magnitude(value: f64, scale: i32) -> String {
    match decimal::exact(value.abs(), scale) {
        Some(x) => decimal::significant(&x, 3, decimal::Rounding::Nearest),
        None => "not a number".to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::DMatrix;

    #[test]
    fn blocks_keep_their_largest_entry_and_its_sign() {
        let mut re = DMatrix::zeros(400, 400);
        re[(399, 0)] = -8.0;
        re[(0, 0)] = 1e-3;
        let drawn = picture(&Dense::real(re), 0);
        assert_eq!((drawn.side, drawn.block), (134, 3));
        let corner = (133 * 134) as usize;
        assert_eq!(
            (drawn.decades[corner].round(), drawn.signs[corner]),
            (1.0, -1)
        );
        assert_eq!((drawn.decades[0].round(), drawn.signs[0]), (-3.0, 1));
        assert!(drawn.decades[1].is_nan());
        assert_eq!(
            (drawn.largest.as_str(), drawn.smallest.as_str()),
            ("8.00", "0.00100")
        );
    }

    #[test]
    fn a_zero_matrix_is_blank() {
        let drawn = picture(&Dense::real(DMatrix::zeros(2, 2)), 0);
        assert!(
            drawn.decades.iter().all(|decade| decade.is_nan()),
            "{drawn:?}"
        );
        assert_eq!(drawn.largest, "0");
    }
}
