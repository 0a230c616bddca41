//! Eigenvectors as bars and figures.

use dashu_ratio::RBig;
use serde::{Deserialize, Serialize};

use super::decimal::{self, Rounding};
use crate::matrix::Dense;

/// One component of a vector.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct VectorComponent {
    /// The row's label, or its number.
    pub label: String,
    /// The component as printed.
    pub figure: String,
    /// Length of its bar: −1 to 1 of the longest for a real vector, 0 to 1
    /// for a complex one.
    pub bar: f64,
    /// Angle of a complex component in radians, from the positive real axis.
    pub phase: Option<f64>,
}

/// One eigenvector.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct VectorView {
    /// Index of its eigenvalue, from 1.
    pub index: u32,
    /// Its components, in the order of the rows.
    pub components: Vec<VectorComponent>,
    /// What its length and phase are made to be.
    pub convention: String,
    /// What is known of its angle to the true eigenvector.
    pub standing: String,
}

/// Column `col` of `vectors` (from 0), figures to `decimals` places.
pub fn components(
    vectors: &Dense,
    col: usize,
    labels: &[String],
    decimals: u32,
) -> Vec<VectorComponent> {
    let complex = vectors.is_complex();
    let parts = |row: usize| {
        let im = vectors.im.as_ref().map_or(0.0, |im| im[(row, col)]);
        (vectors.re[(row, col)], im)
    };
    let size = |(re, im): (f64, f64)| (re * re + im * im).sqrt();
    let longest = (0..vectors.rows())
        .map(|row| size(parts(row)))
        .fold(0.0, f64::max);
    let longest = if longest > 0.0 { longest } else { 1.0 };
    (0..vectors.rows())
        .map(|row| {
            let (re, im) = parts(row);
            VectorComponent {
                label: labels
                    .get(row)
                    .cloned()
                    .unwrap_or_else(|| (row + 1).to_string()),
                figure: if complex {
                    complex_figure(re, im, decimals)
                } else {
                    figure(re, decimals)
                },
                bar: if complex {
                    size((re, im)) / longest
                } else {
                    re / longest
                },
                // Pictures only: the angle's last bit may differ between machines.
                phase: complex.then(|| im.atan2(re)),
            }
        })
        .collect()
}

/// x to `decimals` places.
pub fn figure(x: f64, decimals: u32) -> String {
    let x = decimal::exact(x, 0).unwrap_or(RBig::ZERO);
    decimal::typeset(&decimal::to_place(
        &x,
        -(decimals as i32),
        Rounding::Nearest,
    ))
}

/// re + im·i to `decimals` places.
pub fn complex_figure(re: f64, im: f64, decimals: u32) -> String {
    let imaginary = figure(im.abs(), decimals);
    // A part that rounds to zero has no sign to show.
    let shown = imaginary.contains(|digit: char| ('1'..='9').contains(&digit));
    let sign = if shown && im < 0.0 { '−' } else { '+' };
    format!("{} {sign} {imaginary}i", figure(re, decimals))
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::DMatrix;

    #[test]
    fn real_components_have_signed_bars() {
        let vectors = Dense::real(DMatrix::from_column_slice(2, 1, &[0.375, -0.5]));
        let found = components(&vectors, 0, &["crown".to_owned()], 3);
        assert_eq!(found[0].label, "crown");
        assert_eq!(found[1].label, "2");
        assert_eq!(
            (found[0].figure.as_str(), found[1].figure.as_str()),
            ("0.375", "−0.500")
        );
        assert_eq!((found[0].bar, found[1].bar), (0.75, -1.0));
        assert_eq!(found[0].phase, None);
    }

    #[test]
    fn complex_components_have_a_length_and_an_angle() {
        let re = DMatrix::from_column_slice(2, 1, &[0.0, 0.5]);
        let im = DMatrix::from_column_slice(2, 1, &[-0.5, 0.0]);
        let found = components(&Dense::complex(re, im), 0, &[], 2);
        assert_eq!(found[0].figure, "0.00 − 0.50i");
        assert_eq!(found[1].figure, "0.50 + 0.00i");
        assert_eq!(found[0].bar, 1.0);
        assert_eq!(found[0].phase, Some(-std::f64::consts::FRAC_PI_2));
    }
}
