//! Gaussian integers: the arithmetic of complex rational input once its
//! denominators are cleared.

use dashu_base::Gcd;
use dashu_int::{IBig, UBig};

/// re + i·im with integer parts.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Gauss {
    /// Real part.
    pub re: IBig,
    /// Imaginary part.
    pub im: IBig,
}

impl Gauss {
    /// Zero.
    pub const ZERO: Self = Self {
        re: IBig::ZERO,
        im: IBig::ZERO,
    };

    /// An integer.
    pub fn real(re: IBig) -> Self {
        Self { re, im: IBig::ZERO }
    }

    /// Whether both parts are zero.
    pub fn is_zero(&self) -> bool {
        self.re.is_zero() && self.im.is_zero()
    }

    /// Complex conjugate.
    pub fn conj(&self) -> Self {
        Self {
            re: self.re.clone(),
            im: -self.im.clone(),
        }
    }

    /// self · other.
    pub fn times(&self, other: &Self) -> Self {
        if self.im.is_zero() {
            return other.scaled(&self.re);
        }
        if other.im.is_zero() {
            return self.scaled(&other.re);
        }
        Self {
            re: &self.re * &other.re - &self.im * &other.im,
            im: &self.re * &other.im + &self.im * &other.re,
        }
    }

    /// self · k for an integer k.
    pub fn scaled(&self, k: &IBig) -> Self {
        Self {
            re: &self.re * k,
            im: &self.im * k,
        }
    }

    /// self + other.
    pub fn plus(&self, other: &Self) -> Self {
        Self {
            re: &self.re + &other.re,
            im: &self.im + &other.im,
        }
    }

    /// self − other.
    pub fn minus(&self, other: &Self) -> Self {
        Self {
            re: &self.re - &other.re,
            im: &self.im - &other.im,
        }
    }

    /// self / k where k divides both parts.
    pub fn divided(&self, k: &IBig) -> Self {
        Self {
            re: &self.re / k,
            im: &self.im / k,
        }
    }

    /// |self|².
    pub fn norm_squared(&self) -> IBig {
        &self.re * &self.re + &self.im * &self.im
    }
}

/// x* y.
pub(super) fn inner(x: &[Gauss], y: &[Gauss]) -> Gauss {
    let mut sum = Gauss::ZERO;
    for (a, b) in x.iter().zip(y) {
        sum = sum.plus(&a.conj().times(b));
    }
    sum
}

/// Row-major square matrix times a vector.
pub(super) fn apply(matrix: &[Gauss], x: &[Gauss]) -> Vec<Gauss> {
    let order = x.len();
    (0..order)
        .map(|row| {
            let mut sum = Gauss::ZERO;
            for (a, b) in matrix[row * order..(row + 1) * order].iter().zip(x) {
                if !a.is_zero() && !b.is_zero() {
                    sum = sum.plus(&a.times(b));
                }
            }
            sum
        })
        .collect()
}

/// Divides a vector by the greatest common divisor of its parts.
pub(super) fn primitive(x: &mut [Gauss]) {
    let mut content = UBig::ZERO;
    for value in x.iter() {
        for part in [&value.re, &value.im] {
            if !part.is_zero() {
                content = if content.is_zero() {
                    magnitude(part)
                } else {
                    content.gcd(magnitude(part))
                };
            }
        }
        if content.is_one() {
            return;
        }
    }
    if content.is_zero() {
        return;
    }
    let content = IBig::from(content);
    for value in x.iter_mut() {
        *value = value.divided(&content);
    }
}

/// |k|.
pub(super) fn magnitude(k: &IBig) -> UBig {
    k.clone().into_parts().1
}
