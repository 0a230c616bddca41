//! The check of vectors of T found by the fast road.
//!
//! Residuals are taken of every vector against its recorded value. The defect
//! of orthogonality is taken on probe vectors of signs s, for which
//! ‖(ZᵀZ − I) s‖² has the mean ‖ZᵀZ − I‖²_F (Hutchinson 1989).

use crate::matrix::lanes::Lanes;
use crate::reduce::{dot, Tridiagonal};
use nalgebra::DMatrix;

/// u.
const UNIT: f64 = f64::EPSILON / 2.0;
/// Residual ‖T z − λ z‖ allowed, and largest correction of λ taken, in u·‖T‖
/// per √n. The recorded values are good to a third of this on random matrices
/// up to order 400; a larger correction would be a neighbour's. All columns
/// together stay below 4·n·u·‖T‖, less than half of what a solve may show.
pub(super) const ALLOWED_RESIDUAL: f64 = 4.0;
/// ‖(ZᵀZ − I) s‖ allowed for a probe s of length √n, in n·u: half of what the
/// whole solve may show.
const ALLOWED_DEFECT: f64 = 5.0;
/// Probes of signs.
const PROBES: u64 = 3;

/// Why the vectors are not handed over.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Doubt {
    /// Neighbouring vectors are nearly parallel, or a residual is too large.
    Vector,
    /// The vectors together are not orthogonal enough.
    Orthogonality,
}

/// Accepts Z or says what is wrong with it. Cost: O(n²).
pub(super) fn judge(
    tridiagonal: &Tridiagonal,
    values: impl Iterator<Item = f64>,
    norm: f64,
    basis: &DMatrix<f64>,
) -> Result<(), Doubt> {
    let order = basis.nrows();
    let allowed = ALLOWED_RESIDUAL * UNIT * norm * (order as f64).sqrt();
    let columns = || basis.as_slice().chunks_exact(order.max(1));
    for (value, z) in values.zip(columns()) {
        let square = residual_square(tridiagonal, value, z);
        if square.is_nan() || square > allowed * allowed {
            return Err(Doubt::Vector);
        }
    }
    for probe in 0..PROBES {
        let signs: Vec<f64> = (0..order as u64)
            .map(|k| sign(probe * order as u64 + k))
            .collect();
        let mut image = vec![0.0; order];
        for (sign, z) in signs.iter().zip(columns()) {
            image.iter_mut().zip(z).for_each(|(y, x)| *y += sign * x);
        }
        let square = signs.iter().zip(columns()).fold(0.0, |sum, (sign, z)| {
            let defect = dot(z, &image) - sign;
            sum + defect * defect
        });
        let allowed = ALLOWED_DEFECT * order as f64 * UNIT;
        if square.is_nan() || square > allowed * allowed {
            return Err(Doubt::Orthogonality);
        }
    }
    Ok(())
}

/// ‖T z − λ z‖², the inner rows in two lanes.
fn residual_square(tridiagonal: &Tridiagonal, value: f64, z: &[f64]) -> f64 {
    let (d, e) = (&tridiagonal.diagonal, &tridiagonal.off_diagonal);
    let order = z.len();
    let row = |i: usize| {
        let before = if i > 0 { e[i - 1] * z[i - 1] } else { 0.0 };
        let after = if i + 1 < order { e[i] * z[i + 1] } else { 0.0 };
        before + (d[i] - value) * z[i] + after
    };
    let square = |i: usize| {
        let entry = row(i);
        entry * entry
    };
    if order < 4 {
        return (0..order).fold(0.0, |sum, i| sum + square(i));
    }
    let inner = order - 2;
    let pairs = inner / 2;
    fn chunks(values: &[f64], start: usize, pairs: usize) -> &[[f64; 2]] {
        &values[start..].as_chunks::<2>().0[..pairs]
    }
    let (above, here, below) = (
        chunks(z, 0, pairs),
        chunks(z, 1, pairs),
        chunks(z, 2, pairs),
    );
    let (d_here, e_above, e_below) = (
        chunks(d, 1, pairs),
        chunks(e, 0, pairs),
        chunks(e, 1, pairs),
    );
    let value = Lanes::splat(value);
    let mut squares = Lanes::splat(0.0);
    for k in 0..pairs {
        let diagonal = (Lanes::load(&d_here[k]) - value) * Lanes::load(&here[k]);
        let entry = Lanes::load(&e_above[k]) * Lanes::load(&above[k])
            + diagonal
            + Lanes::load(&e_below[k]) * Lanes::load(&below[k]);
        squares = squares + entry * entry;
    }
    let ends = square(0) + square(order - 1);
    let odd = if inner % 2 == 1 {
        square(order - 2)
    } else {
        0.0
    };
    squares.sum() + (ends + odd)
}

/// +1 or −1 by a mixing of the counter's bits (SplitMix64: Steele, Lea and Flood 2014).
fn sign(counter: u64) -> f64 {
    let mut bits = counter
        .wrapping_mul(0x9E37_79B9_7F4A_7C15)
        .wrapping_add(0x9E37_79B9_7F4A_7C15);
    bits = (bits ^ (bits >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
    bits = (bits ^ (bits >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
    if (bits >> 63) == 0 {
        1.0
    } else {
        -1.0
    }
}
