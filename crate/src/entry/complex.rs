//! Exact complex numbers, as far as cells need them.

use crate::num::exact::ArithmeticError;
use crate::num::ExactReal;

/// re + im·i, exactly.
#[derive(Clone, Debug)]
pub struct ExactComplex {
    /// Real part.
    pub re: ExactReal,
    /// Imaginary part.
    pub im: ExactReal,
}

impl From<ExactReal> for ExactComplex {
    fn from(re: ExactReal) -> Self {
        Self {
            re,
            im: ExactReal::ZERO,
        }
    }
}

impl ExactComplex {
    /// Exact zero.
    pub const ZERO: Self = Self {
        re: ExactReal::ZERO,
        im: ExactReal::ZERO,
    };
    /// i.
    pub const I: Self = Self {
        re: ExactReal::ZERO,
        im: ExactReal::ONE,
    };

    /// Whether the imaginary part is exactly zero.
    pub fn is_real(&self) -> bool {
        self.im.is_zero()
    }

    /// Whether the number is exactly zero.
    pub fn is_zero(&self) -> bool {
        self.re.is_zero() && self.im.is_zero()
    }

    /// −z.
    pub fn neg(&self) -> Self {
        Self {
            re: self.re.neg(),
            im: self.im.neg(),
        }
    }

    /// z + w.
    ///
    /// # Errors
    /// As [`ExactReal::add`].
    pub fn add(&self, other: &Self) -> Result<Self, ArithmeticError> {
        Ok(Self {
            re: self.re.add(&other.re)?,
            im: self.im.add(&other.im)?,
        })
    }

    /// z − w.
    ///
    /// # Errors
    /// As [`ExactReal::add`].
    pub fn sub(&self, other: &Self) -> Result<Self, ArithmeticError> {
        Ok(Self {
            re: self.re.sub(&other.re)?,
            im: self.im.sub(&other.im)?,
        })
    }

    /// z·w.
    ///
    /// # Errors
    /// As [`ExactReal::mul`].
    pub fn mul(&self, other: &Self) -> Result<Self, ArithmeticError> {
        if self.is_real() && other.is_real() {
            return Ok(Self::from(self.re.mul(&other.re)?));
        }
        let re = self.re.mul(&other.re)?.sub(&self.im.mul(&other.im)?)?;
        let im = self.re.mul(&other.im)?.add(&self.im.mul(&other.re)?)?;
        Ok(Self { re, im })
    }

    /// z/w = z·w̄/|w|².
    ///
    /// # Errors
    /// As [`ExactReal::div`].
    pub fn div(&self, other: &Self) -> Result<Self, ArithmeticError> {
        if other.is_real() {
            let im = if self.is_real() {
                ExactReal::ZERO
            } else {
                self.im.div(&other.re)?
            };
            return Ok(Self {
                re: self.re.div(&other.re)?,
                im,
            });
        }
        let size = other.re.mul(&other.re)?.add(&other.im.mul(&other.im)?)?;
        let top = self.mul(&Self {
            re: other.re.clone(),
            im: other.im.neg(),
        })?;
        Ok(Self {
            re: top.re.div(&size)?,
            im: top.im.div(&size)?,
        })
    }

    /// z^n by repeated squaring.
    ///
    /// # Errors
    /// As [`ExactReal::pow`].
    pub fn pow(&self, n: i32) -> Result<Self, ArithmeticError> {
        if self.is_real() {
            return Ok(Self::from(self.re.pow(n)?));
        }
        let mut result = Self::from(ExactReal::ONE);
        let mut base = self.clone();
        let mut left = n.unsigned_abs();
        while left > 0 {
            if left % 2 == 1 {
                result = result.mul(&base)?;
            }
            left /= 2;
            if left > 0 {
                base = base.mul(&base)?;
            }
        }
        if n < 0 {
            Self::from(ExactReal::ONE).div(&result)
        } else {
            Ok(result)
        }
    }
}
