//! How far the exact road may go, and what stops it.

use core::fmt;

use dashu_base::BitTest;
use dashu_int::IBig;

use super::gauss::Gauss;
use crate::control::{Control, Flow, Stage};

/// Bounds on exact work.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Limits {
    /// Largest order accepted.
    pub order: usize,
    /// Largest number of bits any intermediate integer may have.
    pub bits: usize,
}

impl Limits {
    /// Limits for a problem larger than the default allows, on request.
    pub fn for_order(order: usize) -> Self {
        Self {
            order,
            ..Self::default()
        }
    }
}

impl Default for Limits {
    /// Order 16 and 200,000 bits. Measured with three-digit integers, native:
    /// the whole spectrum takes 2 ms at order 8, 6 ms at 12, 20 ms at 16 and
    /// 140 ms at 24, where the largest number has 26,000 bits.
    fn default() -> Self {
        Self {
            order: 12,
            bits: 200_000,
        }
    }
}

/// Why the exact road ended early.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ExactError {
    /// The order exceeds the limit.
    OrderTooLarge {
        /// Order of the problem.
        order: usize,
        /// Largest order the limits accept.
        limit: usize,
    },
    /// An entry is not a rational number.
    Irrational {
        /// Row, from 0.
        row: usize,
        /// Column, from 0.
        col: usize,
        /// Whether the entry is the metric's.
        in_metric: bool,
    },
    /// A leading block of the metric is not positive definite.
    MetricNotPositive {
        /// Order of the first leading block whose determinant is not positive.
        leading: usize,
    },
    /// A number outgrew the limit.
    GrowthTooLarge {
        /// Bits of the number met.
        bits: usize,
        /// Most bits the limits accept.
        limit: usize,
    },
    /// The caller cancelled.
    Cancelled,
}

impl fmt::Display for ExactError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::OrderTooLarge { order, limit } => write!(
                f,
                "order {order} is beyond the exact road's limit of {limit}; raise the limit to go on"
            ),
            Self::Irrational { row, col, in_metric } => write!(
                f,
                "the entry in row {}, column {} of the {} is irrational, so the exact road is closed; \
                 the enclosures still hold",
                row + 1,
                col + 1,
                if *in_metric { "metric" } else { "matrix" }
            ),
            Self::MetricNotPositive { leading } => write!(
                f,
                "the metric is not positive definite: the determinant of its leading {leading} × \
                 {leading} block is not positive"
            ),
            Self::GrowthTooLarge { bits, limit } => write!(
                f,
                "an exact number grew to {bits} bits, beyond the limit of {limit}; raise the limit \
                 or round the entries"
            ),
            Self::Cancelled => write!(f, "the exact computation was cancelled"),
        }
    }
}

impl core::error::Error for ExactError {}

/// Watches growth and hears a cancel.
pub(super) struct Meter<'a> {
    limits: Limits,
    control: &'a mut dyn Control,
    /// Bits of the largest number seen.
    pub(super) largest_bits: usize,
}

impl<'a> Meter<'a> {
    pub(super) fn new(limits: &Limits, control: &'a mut dyn Control) -> Self {
        Self {
            limits: *limits,
            control,
            largest_bits: 0,
        }
    }

    pub(super) fn check_order(&self, order: usize) -> Result<(), ExactError> {
        if order > self.limits.order {
            return Err(ExactError::OrderTooLarge {
                order,
                limit: self.limits.order,
            });
        }
        Ok(())
    }

    pub(super) fn see(&mut self, value: &IBig) -> Result<(), ExactError> {
        let bits = value.bit_len();
        self.largest_bits = self.largest_bits.max(bits);
        if bits > self.limits.bits {
            return Err(ExactError::GrowthTooLarge {
                bits,
                limit: self.limits.bits,
            });
        }
        Ok(())
    }

    pub(super) fn see_gauss(&mut self, value: &Gauss) -> Result<(), ExactError> {
        self.see(&value.re)?;
        self.see(&value.im)
    }

    pub(super) fn progress(&mut self, done: f64) -> Result<(), ExactError> {
        match self.control.progress(Stage::Exact, done) {
            Flow::Continue => Ok(()),
            Flow::Cancel => Err(ExactError::Cancelled),
        }
    }
}
