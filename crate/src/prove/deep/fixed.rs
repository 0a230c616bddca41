//! Square matrices in fixed point: integers times one power of two.
//!
//! A product is summed exactly and cut once, so an entry errs by less than one
//! unit in each part, whatever the order: rounding analysis is a count of units.
//!
//! Notation: p the bits after the point, a unit is 2^−p.

use dashu_base::BitTest;
use dashu_int::IBig;

use crate::matrix::{Dense, ExactMatrix};
use crate::num::{Dyadic, Toward};

/// A square matrix of integers in units of 2^−bits, column-major.
#[derive(Clone, Debug)]
pub(super) struct Fixed {
    pub order: usize,
    pub bits: usize,
    pub re: Vec<IBig>,
    pub im: Option<Vec<IBig>>,
}

/// A typed matrix in fixed point, exactly Hermitian, and how many units each
/// part of an entry may be off.
#[derive(Clone, Debug)]
pub(super) struct Typed {
    pub matrix: Fixed,
    pub error: IBig,
}

impl Fixed {
    /// The identity.
    pub fn identity(order: usize, bits: usize, complex: bool) -> Self {
        let mut re = vec![IBig::ZERO; order * order];
        for k in 0..order {
            re[k * order + k] = IBig::ONE << bits;
        }
        let im = complex.then(|| vec![IBig::ZERO; order * order]);
        Self {
            order,
            bits,
            re,
            im,
        }
    }

    /// A matrix of finite doubles, cut to the unit.
    pub fn from_dense(matrix: &Dense, bits: usize) -> Option<Self> {
        let plane = |plane: &[f64]| {
            plane
                .iter()
                .map(|&x| {
                    Some(
                        Dyadic::from_f64(x)?
                            .scaled(bits as i64)
                            .to_integer(Toward::Down),
                    )
                })
                .collect::<Option<Vec<_>>>()
        };
        let re = plane(matrix.re.as_slice())?;
        let im = match &matrix.im {
            Some(im) => Some(plane(im.as_slice())?),
            None => None,
        };
        Some(Self {
            order: matrix.rows(),
            bits,
            re,
            im,
        })
    }

    /// The same numbers with more bits after the point.
    pub fn widened(&self, bits: usize) -> Self {
        let widen = |plane: &Vec<IBig>| plane.iter().map(|x| x << (bits - self.bits)).collect();
        Self {
            order: self.order,
            bits,
            re: widen(&self.re),
            im: self.im.as_ref().map(widen),
        }
    }

    /// The conjugate transpose.
    pub fn adjoint(&self) -> Self {
        let n = self.order;
        let plane = |plane: &Vec<IBig>, negate: bool| {
            let turned = (0..n * n).map(|at| {
                let x = &plane[(at % n) * n + at / n];
                if negate {
                    -x
                } else {
                    x.clone()
                }
            });
            turned.collect()
        };
        Self {
            order: n,
            bits: self.bits,
            re: plane(&self.re, false),
            im: self.im.as_ref().map(|im| plane(im, true)),
        }
    }

    /// Column k of a plane.
    pub fn column(plane: &[IBig], order: usize, k: usize) -> &[IBig] {
        &plane[k * order..(k + 1) * order]
    }

    /// Σ conj(a_li)·b_lk in units of 2^−2p, exactly: (real, imaginary).
    pub fn dot(a: &Self, i: usize, b: &Self, k: usize) -> (IBig, IBig) {
        let n = a.order;
        let sum = |x: &[IBig], y: &[IBig]| {
            let mut sum = IBig::ZERO;
            for (x, y) in Self::column(x, n, i).iter().zip(Self::column(y, n, k)) {
                sum += x * y;
            }
            sum
        };
        let mut re = sum(&a.re, &b.re);
        let mut im = IBig::ZERO;
        if let Some(b_im) = &b.im {
            im += sum(&a.re, b_im);
            if let Some(a_im) = &a.im {
                re += sum(a_im, b_im);
            }
        }
        if let Some(a_im) = &a.im {
            im -= sum(a_im, &b.re);
        }
        (re, im)
    }

    /// Aᴴ·B, each part of an entry cut by less than a unit.
    pub fn adjoint_product(a: &Self, b: &Self) -> Self {
        let n = a.order;
        let complex = a.im.is_some() || b.im.is_some();
        let mut re = Vec::with_capacity(n * n);
        let mut im = Vec::new();
        for k in 0..n {
            for i in 0..n {
                let (x, y) = Self::dot(a, i, b, k);
                re.push(x >> a.bits);
                if complex {
                    im.push(y >> a.bits);
                }
            }
        }
        Self {
            order: n,
            bits: a.bits,
            re,
            im: complex.then_some(im),
        }
    }

    /// Aᴴ·B where it is known to be Hermitian: half the work, mirrored.
    pub fn hermitian_product(a: &Self, b: &Self) -> Self {
        let n = a.order;
        let complex = a.im.is_some() || b.im.is_some();
        let mut result = Self::identity(n, a.bits, complex);
        for k in 0..n {
            for i in 0..=k {
                let (x, y) = Self::dot(a, i, b, k);
                let (x, y) = (x >> a.bits, y >> a.bits);
                if let Some(im) = &mut result.im {
                    im[i * n + k] = if i == k { IBig::ZERO } else { -&y };
                    im[k * n + i] = if i == k { IBig::ZERO } else { y };
                }
                result.re[i * n + k] = x.clone();
                result.re[k * n + i] = x;
            }
        }
        result
    }

    /// ≥ ‖column k‖₂.
    pub fn column_norm(&self, k: usize) -> Dyadic {
        self.square_sum(k).sqrt_up(NORM_BITS)
    }

    /// ≥ ‖·‖_F.
    pub fn frobenius(&self) -> Dyadic {
        (0..self.order)
            .fold(Dyadic::ZERO, |sum, k| &sum + &self.square_sum(k))
            .sqrt_up(NORM_BITS)
    }

    fn square_sum(&self, k: usize) -> Dyadic {
        let mut sum = IBig::ZERO;
        for plane in std::iter::once(&self.re).chain(self.im.as_ref()) {
            for x in Self::column(plane, self.order, k) {
                sum += x * x;
            }
        }
        Dyadic::new(sum, -2 * self.bits as i64)
    }
}

/// Bits kept in norms.
pub(super) const NORM_BITS: u32 = 64;

impl Typed {
    /// D·typed·D · 2^−scale, with entries of at most about 1.
    pub fn new(
        typed: &ExactMatrix,
        scale: i32,
        weights: &[i32],
        bits: usize,
        complex: bool,
    ) -> Self {
        let order = typed.order();
        let mut matrix = Fixed::identity(order, bits, complex);
        let mut error = IBig::ZERO;
        for k in 0..order {
            for i in 0..=k {
                let power = i64::from(weights[i]) + i64::from(weights[k]) - i64::from(scale);
                let mut part = |x: &crate::num::ExactReal| {
                    // Entries are at most about 1, so this is well below a unit.
                    let around = x.enclose(bits + 8);
                    let shifted = |end: &IBig| {
                        Dyadic::new(end.clone(), around.exponent + power + bits as i64)
                            .to_integer(Toward::Down)
                    };
                    let (low, high) = (shifted(&around.lower), shifted(&around.upper));
                    let exact = around.lower == around.upper
                        && Dyadic::new(around.lower.clone(), around.exponent + power + bits as i64)
                            == Dyadic::new(low.clone(), 0);
                    if !exact {
                        let off = high - &low + IBig::ONE;
                        if off > error {
                            error = off;
                        }
                    }
                    low
                };
                let re = part(typed.re(i, k));
                matrix.re[k * order + i] = re.clone();
                matrix.re[i * order + k] = re;
                if let Some(im) = &mut matrix.im {
                    let value = part(typed.im(i, k));
                    im[i * order + k] = -&value;
                    im[k * order + i] = value;
                }
            }
        }
        Self { matrix, error }
    }
}

/// ⌈√x⌉ or more, for small counts.
pub(super) fn root_up(count: usize) -> i64 {
    (count as f64).sqrt() as i64 + 1
}

/// Bits of the largest entry.
pub(super) fn largest_bits(plane: &[IBig]) -> usize {
    plane.iter().map(BitTest::bit_len).max().unwrap_or(0)
}
