//! Shared helpers of the cross-package checks: random matrices that are the
//! same on every machine, and norms.

use eigenledger::matrix::Dense;
use nalgebra::DMatrix;

/// Unit roundoff of binary64.
pub const UNIT_ROUNDOFF: f64 = f64::EPSILON / 2.0;

/// A stream of pseudo-random numbers: Steele, Lea and Flood's SplitMix64
/// (OOPSLA 2014), the constants from memory.
pub struct Stream(u64);

impl Stream {
    /// A stream of its own for every seed.
    pub fn new(seed: u64) -> Self {
        Self(seed)
    }

    /// The next 64 bits.
    pub fn bits(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Uniform in [−1, 1).
    pub fn number(&mut self) -> f64 {
        (self.bits() >> 11) as f64 / (1_u64 << 52) as f64 - 1.0
    }
}

/// Whether a matrix has imaginary parts.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Field {
    /// Real symmetric.
    Real,
    /// Complex Hermitian.
    Complex,
}

/// A random Hermitian matrix of the order, entries in the unit square.
pub fn random_hermitian(order: usize, field: Field, seed: u64) -> Dense {
    let mut stream = Stream::new(seed);
    let mut re = DMatrix::zeros(order, order);
    let mut im = DMatrix::zeros(order, order);
    for col in 0..order {
        for row in col..order {
            re[(row, col)] = stream.number();
            re[(col, row)] = re[(row, col)];
            if row > col && field == Field::Complex {
                im[(row, col)] = stream.number();
                im[(col, row)] = -im[(row, col)];
            }
        }
    }
    match field {
        Field::Real => Dense::real(re),
        Field::Complex => Dense::complex(re, im),
    }
}

/// The Frobenius norm.
pub fn frobenius(matrix: &Dense) -> f64 {
    let planes = [Some(&matrix.re), matrix.im.as_ref()];
    let squares: f64 = planes
        .into_iter()
        .flatten()
        .flat_map(|plane| plane.iter())
        .map(|x| x * x)
        .sum();
    squares.sqrt()
}
