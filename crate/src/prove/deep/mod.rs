//! The deep certificate: as many digits as asked for, in fixed point.
//!
//! X is refined ([`refine`]) and then certified by the linear statements of
//! [`super::residual`], with every rounding counted in units of 2^−p. X and Λ
//! are exactly the integers they are; only the typed matrices and the products
//! carry errors.
//!
//! Notation: p the bits after the point, e_A and e_M the units a part of a typed
//! entry may be off, F = XᴴMX − I, R = AX − MXΛ.

mod factor;
mod fixed;
mod refine;

use dashu_int::IBig;

use crate::control::Control;
use crate::num::{Dyadic, Toward};
use crate::problem::Problem;

use super::frame::Frame;
use super::spectrum::Spectrum;
use factor::orthonormal_start;
use fixed::{root_up, Fixed, Typed, NORM_BITS};
use refine::{refine, RefineError, Span};

/// Precision of the first stage, in bits.
const FIRST_STAGE: usize = 192;

/// Bits beyond the digits asked for, before the first try.
const GUARD: usize = 40;

/// Orders for which zero is looked at through more bits.
const SMALL_ORDER: usize = 16;

/// Most tries with more bits.
const TRIES: usize = 6;

/// No stage works with more bits than this (about 20,000 digits).
const MOST_BITS: usize = 1 << 16;

/// How a deep proof ended.
pub(super) enum Outcome {
    /// A certificate; its digits are what they are.
    Proven {
        /// In the frame's scale.
        spectrum: Spectrum,
        /// φ.
        defect: Dyadic,
        /// Radius of all eigenvalues.
        radius: Dyadic,
    },
    /// The metric is not positive definite: its leading block of this order.
    MetricRefuted(usize),
    /// Nothing was proven.
    Nothing,
    /// The caller cancelled.
    Cancelled,
}

/// Whether the approximate X of the frame may be started from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Start {
    /// φ is small.
    FromVectors,
    /// X is of no use.
    FromNothing,
}

/// One certificate.
struct Certified {
    values: Vec<Dyadic>,
    defect: Dyadic,
    radius: Dyadic,
    radii: Vec<Dyadic>,
}

/// Refines until every eigenvalue has `digits` proven significant digits, or
/// until more bits no longer help.
///
/// Cost: about 20 n³ multiplications of p-bit integers at the last precision.
pub(super) fn deep(
    problem: &Problem,
    frame: &Frame,
    start: Start,
    digits: u32,
    control: &mut dyn Control,
) -> Outcome {
    let target = digits as usize * 3_322 / 1_000
        + GUARD
        + 4 * frame.order.checked_ilog2().unwrap_or(0) as usize;
    let mut bits = target.clamp(FIRST_STAGE, MOST_BITS);
    let mut vectors = match start {
        Start::FromVectors => Fixed::from_dense(&frame.vectors, FIRST_STAGE),
        Start::FromNothing => None,
    };
    let mut best = Outcome::Nothing;
    let mut refuted = None;
    for attempt in 0..TRIES {
        let span = Span {
            from: attempt as f64 / (attempt + 1) as f64,
            to: (attempt + 1) as f64 / (attempt + 2) as f64,
        };
        let stage = Stages {
            problem,
            frame,
            bits,
        };
        match stage.run(vectors.take(), &span, control) {
            Err(Failure::Cancelled) => {
                return if matches!(best, Outcome::Proven { .. }) {
                    best
                } else {
                    Outcome::Cancelled
                };
            }
            Err(Failure::NotPositive(block)) => {
                refuted = Some(block);
                break;
            }
            Err(Failure::Precision) => bits *= 2,
            Ok((refined, certified)) => {
                let spectrum = certified.spectrum();
                let missing = missing_bits(&spectrum, digits, bits);
                let Certified { defect, radius, .. } = certified;
                best = Outcome::Proven {
                    spectrum,
                    defect,
                    radius,
                };
                vectors = Some(refined);
                match missing {
                    0 => break,
                    more => bits += more + 16,
                }
            }
        }
        if bits > MOST_BITS {
            break;
        }
    }
    match (refuted, best) {
        (Some(block), Outcome::Nothing) => Outcome::MetricRefuted(block),
        (_, best) => best,
    }
}

/// How many more bits the digits need, 0 when they are reached. Where zero is
/// inside, its digits cannot be counted: such an eigenvalue is followed to about
/// twice the bits, no farther.
fn missing_bits(spectrum: &Spectrum, digits: u32, bits: usize) -> usize {
    let mut most = 0;
    for k in 0..spectrum.len() {
        let (lower, upper) = (spectrum.lower(k), spectrum.upper(k));
        match crate::num::figure::proven_digits(lower, upper) {
            Some(proven) => {
                let short = (i64::from(digits) - proven).max(0) as usize;
                most = most.max(short * 3_322 / 1_000 + usize::from(short > 0));
            }
            None => {
                let width = (upper - lower).magnitude().unwrap_or(i64::MIN / 2);
                let asked = 2 * (i64::from(digits) * 3_322 / 1_000 + GUARD as i64);
                // Small orders are cheap enough to look below the range of doubles.
                let enough = if spectrum.len() <= SMALL_ORDER {
                    asked.max(2_200)
                } else {
                    asked
                };
                if -width < enough {
                    most = most.max((enough as usize).saturating_sub(bits).max(GUARD) + GUARD);
                }
            }
        }
    }
    most
}

enum Failure {
    Cancelled,
    NotPositive(usize),
    Precision,
}

struct Stages<'a> {
    problem: &'a Problem,
    frame: &'a Frame,
    bits: usize,
}

impl Stages<'_> {
    fn typed(&self, bits: usize) -> (Typed, Option<Typed>) {
        let frame = self.frame;
        let complex = frame.vectors.is_complex();
        let matrix = Typed::new(
            &self.problem.matrix,
            frame.matrix_scale,
            &frame.weights,
            bits,
            complex,
        );
        let metric =
            self.problem.metric.as_ref().map(|metric| {
                Typed::new(metric, frame.metric_scale, &frame.weights, bits, complex)
            });
        (matrix, metric)
    }

    /// Stages of doubled precision up to `bits`, then the certificate.
    fn run(
        &self,
        start: Option<Fixed>,
        span: &Span,
        control: &mut dyn Control,
    ) -> Result<(Fixed, Certified), Failure> {
        let mut bits = match &start {
            Some(start) => (2 * start.bits).max(FIRST_STAGE).min(self.bits),
            // From nothing, an ill-conditioned metric needs all bits at once.
            None if self.problem.metric.is_some() => self.bits,
            None => FIRST_STAGE.min(self.bits),
        };
        // A start at the first stage's own precision is good to double only.
        if start
            .as_ref()
            .is_some_and(|start| start.bits == FIRST_STAGE)
        {
            bits = FIRST_STAGE.min(self.bits);
        }
        let mut x = start;
        loop {
            let (matrix, metric) = self.typed(bits);
            let from = match x.take() {
                Some(x) => x.widened(bits),
                None => match &metric {
                    None => {
                        Fixed::identity(self.frame.order, bits, self.frame.vectors.is_complex())
                    }
                    Some(metric) => {
                        orthonormal_start(metric).map_err(|pivot| match pivot.quotient {
                            Some(quotient) if quotient.signum() <= 0 => {
                                Failure::NotPositive(pivot.block)
                            }
                            _ => Failure::Precision,
                        })?
                    }
                },
            };
            let done = bits as f64 / self.bits as f64;
            let part = Span {
                from: span.from + (span.to - span.from) * done / 2.0,
                to: span.from + (span.to - span.from) * done,
            };
            let metric_matrix = metric.as_ref().map(|metric| &metric.matrix);
            let (refined, values) = refine(&matrix.matrix, metric_matrix, from, &part, control)
                .map_err(|error| match error {
                    RefineError::Cancelled => Failure::Cancelled,
                    RefineError::NotOrthonormal => Failure::Precision,
                })?;
            if bits >= self.bits {
                let certified = certify(&matrix, metric.as_ref(), &refined, values)
                    .ok_or(Failure::Precision)?;
                return Ok((refined, certified));
            }
            x = Some(refined);
            bits = (2 * bits).min(self.bits);
        }
    }
}

impl Certified {
    fn spectrum(&self) -> Spectrum {
        let radii = self.radii.iter().cloned().map(Some).collect();
        let mut spectrum = Spectrum::linear(self.values.clone(), &self.radius, radii);
        spectrum.ascend();
        spectrum
    }
}

/// The linear statements for integers X and Λ; `None` unless φ < 1.
///
/// Cost: n³ + n³/2 multiplications for M = I, 2.5 n³ for a pair.
fn certify(
    matrix: &Typed,
    metric: Option<&Typed>,
    x: &Fixed,
    values: Vec<IBig>,
) -> Option<Certified> {
    let n = x.order;
    let bits = x.bits as i64;
    let root = Dyadic::new(IBig::from(root_up(n)), 0);
    let unit = |count: IBig| Dyadic::new(count, -bits);
    let columns: Vec<Dyadic> = (0..n).map(|k| x.column_norm(k)).collect();
    let widest = columns.iter().cloned().fold(Dyadic::ZERO, Dyadic::max);
    // ‖x‖₁ ≤ √n‖x‖₂; the modulus of an error is at most twice that of a part.
    let weighted = metric.map(|metric| {
        let product = Fixed::adjoint_product(&metric.matrix, x);
        let error =
            &unit(IBig::from(2)) + &(&unit(&metric.error * IBig::from(2)) * &(&root * &widest));
        (product, error)
    });
    let (right, right_error) = match &weighted {
        Some((product, error)) => (product, error.clone()),
        None => (x, Dyadic::ZERO),
    };
    let mut gram = Fixed::hermitian_product(x, right);
    for k in 0..n {
        gram.re[k * n + k] -= IBig::ONE << x.bits;
    }
    let entry = &unit(IBig::from(2)) + &(&(&root * &widest) * &right_error);
    let defect = &gram.frobenius() + &(&Dyadic::new(IBig::from(n), 0) * &entry);
    let floor = &Dyadic::one() - &defect;
    if floor.signum() <= 0 {
        return None;
    }
    let weight = match metric {
        None => Dyadic::one(),
        Some(_) => x.frobenius(),
    };
    let mut radii = Vec::with_capacity(n);
    let mut squares = Dyadic::ZERO;
    for (k, value) in values.iter().enumerate() {
        let computed = residual_norm(&matrix.matrix, x, right, k, value);
        let moved = &unit(&matrix.error * IBig::from(2)) * &(&root * &columns[k]);
        let entry = &(&unit(IBig::from(2)) + &moved) + &(&unit(value.clone()).abs() * &right_error);
        let norm = (&computed + &(&root * &entry)).rounded(NORM_BITS, Toward::Up);
        squares = (&squares + &(&norm * &norm)).rounded(NORM_BITS, Toward::Up);
        radii.push((&norm * &weight).divided(&floor, NORM_BITS, Toward::Up)?);
    }
    let radius = (&squares.sqrt_up(NORM_BITS) * &weight).divided(&floor, NORM_BITS, Toward::Up)?;
    let values = values.into_iter().map(unit).collect();
    Some(Certified {
        values,
        defect,
        radius,
        radii,
    })
}

/// ≥ ‖(Ax − λw)ₖ‖₂ with each part of an entry cut by less than a unit.
fn residual_norm(matrix: &Fixed, x: &Fixed, right: &Fixed, k: usize, value: &IBig) -> Dyadic {
    let n = x.order;
    let mut squares = IBig::ZERO;
    for i in 0..n {
        let (re, im) = Fixed::dot(matrix, i, x, k);
        let re = (re - value * &right.re[k * n + i]) >> x.bits;
        squares += &re * &re;
        if let Some(plane) = &right.im {
            let im = (im - value * &plane[k * n + i]) >> x.bits;
            squares += &im * &im;
        }
    }
    Dyadic::new(squares, -2 * x.bits as i64).sqrt_up(NORM_BITS)
}
