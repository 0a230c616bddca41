//! The tight certificate: accurate residuals and quadratic bounds.
//!
//! Notation: R = AX − MXΛ, F = XᴴMX − I, φ ≥ ‖F‖₂ < 1, G = XᴴR; then
//! XᴴAX = (I + F)Λ + G. K a cluster of indices, J the others.
//!
//! One index k (Temple 1928, Kato 1949). With x = Xeₖ, ρ = x*Ax/x*Mx
//! = λ̃ₖ + Gₖₖ/(1 + Fₖₖ) and η² = r*M⁻¹r/x*Mx for r = Ax − ρMx: expanding x in
//! M-orthonormal eigenvectors, Σ|cᵢ|²(λᵢ − b)(λᵢ − λₖ) ≥ 0 whenever λₖ ≤ b ≤
//! λₖ₊₁, which is (b − ρ)(ρ − λₖ) ≤ η²; likewise from below with λₖ₋₁ ≤ a ≤ λₖ:
//!     ρ − η²/(b − ρ) ≤ λₖ ≤ ρ + η²/(ρ − a).
//! M⁻¹ = X(I + F)⁻¹Xᴴ and Xᴴr has entries Gⱼₖ + (λ̃ₖ − ρ)Fⱼₖ for j ≠ k, and 0
//! for j = k, so η² ≤ Σ_{j≠k}|Gⱼₖ + (λ̃ₖ − ρ)Fⱼₖ|² / ((1 − φ)(1 + Fₖₖ)).
//!
//! A cluster is done by the same idea in block form: see [`super::block`].

use crate::matrix::kernels::adjoint_product;
use crate::matrix::Dense;
use crate::num::upper::square_sum_up;
use crate::num::{Dyadic, Toward, Upper};
use crate::problem::Problem;

use super::accurate::{accurate_dot, root_sum_square, subtract_scaled, Accurate, Pair};
use super::block;
use super::enclosure::Theorem;
use super::frame::Frame;
use super::norms::{column_norms, Norms, Rounding};
use super::products::{Cancelled, Watch};
use super::residual::Gram;
use super::slices::{accurate_product, Left, Right};
use super::spectrum::Spectrum;

/// Bits kept in quotients; their error is far below that of what is divided.
pub(super) const QUOTIENT_BITS: u32 = 192;

/// Everything the quadratic bounds need.
pub(super) struct Certificate<'a> {
    pub frame: &'a Frame,
    pub gram: &'a Gram,
    /// MX to about twice the working precision.
    pub weighted: Accurate,
    /// R likewise.
    pub residual: Accurate,
    /// G in plain double, n × n.
    pub coupling: Dense,
    /// ≥ the 2-norm of the error of each column of `coupling`.
    pub coupling_loss: Vec<Upper>,
    /// ≥ ‖G‖₂.
    pub coupling_norm: Upper,
}

/// The tight certificate's spectrum, in the frame's scale; `None` if a number
/// overflows or φ is too large, so that the quick one stands.
///
/// Cost: ten plain products and the two of G and F for M = I; twenty for a pair.
pub(super) fn tight(
    problem: &Problem,
    frame: &Frame,
    gram: &Gram,
    watch: &mut Watch<'_>,
) -> Result<Option<Spectrum>, Cancelled> {
    let Some(certificate) = Certificate::new(problem, frame, gram, watch)? else {
        return Ok(None);
    };
    let Some(mut spectrum) = certificate.linear() else {
        return Ok(None);
    };
    spectrum.ascend();
    for group in spectrum.groups() {
        watch.check()?;
        if group.start() == group.end() {
            certificate.temple_kato(*group.start(), &mut spectrum);
        } else {
            block::tighten(&certificate, &group, &mut spectrum);
        }
    }
    spectrum.ascend();
    Ok(Some(spectrum))
}

impl<'a> Certificate<'a> {
    fn new(
        problem: &Problem,
        frame: &'a Frame,
        gram: &'a Gram,
        watch: &mut Watch<'_>,
    ) -> Result<Option<Self>, Cancelled> {
        let order = frame.order;
        let right = Right::new(&frame.vectors);
        let weighted = match (&frame.metric, &problem.metric) {
            (Some(metric), Some(typed)) => {
                let (low, missing) = frame.low_parts(typed, metric, frame.metric_scale);
                accurate_product(&Left::new(metric, low, missing), &right, watch)?
            }
            _ => Accurate::exactly(&frame.vectors),
        };
        let (low, missing) = frame.low_parts(&problem.matrix, &frame.matrix, frame.matrix_scale);
        let mut residual =
            accurate_product(&Left::new(&frame.matrix, low, missing), &right, watch)?;
        subtract_scaled(&mut residual, &weighted, &frame.values);
        residual.renormalise();
        let coupling = adjoint_product(&frame.vectors, &residual.high);
        let rounding = Rounding::new(order, order, frame.vectors.is_complex());
        let size = gram.vectors.spectral;
        let (highs, _) = column_norms(&residual.high);
        let (lows, _) = column_norms(&residual.low);
        let coupling_loss: Vec<Upper> = (0..order)
            .map(|k| {
                let left_out = residual.loss[k].plus(lows[k]);
                rounding
                    .factor
                    .times(size)
                    .times(highs[k])
                    .plus(size.times(left_out))
                    .plus(rounding.underflow)
            })
            .collect();
        let coupling_norm = Norms::of(&coupling)
            .spectral
            .plus(root_sum_square(coupling_loss.iter().copied()));
        let usable = coupling_norm.is_known() && gram.defect.get() < LARGEST_DEFECT;
        Ok(usable.then_some(Self {
            frame,
            gram,
            weighted,
            residual,
            coupling,
            coupling_loss,
            coupling_norm,
        }))
    }

    /// A double not above 1 − φ.
    pub fn floor(&self) -> f64 {
        self.gram.defect.one_minus()
    }

    /// The linear statements from the accurate residual.
    fn linear(&self) -> Option<Spectrum> {
        let floor = self.floor();
        let norms = Norms::of(&self.coupling);
        let columns =
            (0..self.frame.order).map(|k| norms.columns[k].plus(self.coupling_loss[k]).over(floor));
        let mut radius = self.coupling_norm.over(floor);
        let mut columns: Vec<Upper> = columns.collect();
        if self.frame.metric.is_none() {
            // M = I needs no Xᴴ: ‖R‖ itself, over √(1 − φ).
            let root = floor.sqrt().next_down();
            let highs = Norms::of(&self.residual.high);
            let (lows, _) = column_norms(&self.residual.low);
            let losses: Vec<Upper> = (0..self.frame.order)
                .map(|k| self.residual.loss[k].plus(lows[k]))
                .collect();
            let total = highs.spectral.plus(root_sum_square(losses.iter().copied()));
            radius = radius.least(total.over(root));
            for (k, column) in columns.iter_mut().enumerate() {
                *column = column.least(highs.columns[k].plus(losses[k]).over(root));
            }
        }
        let values = self
            .frame
            .values
            .iter()
            .map(|&value| Dyadic::from_f64(value))
            .collect::<Option<_>>()?;
        let radii = columns.into_iter().map(Upper::exact).collect();
        Some(Spectrum::linear(values, &radius.exact()?, radii))
    }

    /// Gⱼₖ to about twice the working precision.
    pub fn accurate_coupling(&self, j: usize, k: usize) -> (Pair, Pair) {
        let loss = self.gram.vectors.columns[j].times(self.residual.loss[k]);
        accurate_dot(&self.frame.vectors, j, &self.residual, k, loss)
    }

    /// (XᴴMX)ⱼₖ likewise.
    pub fn accurate_gram(&self, j: usize, k: usize) -> (Pair, Pair) {
        let loss = self.gram.vectors.columns[j].times(self.weighted.loss[k]);
        accurate_dot(&self.frame.vectors, j, &self.weighted, k, loss)
    }

    fn temple_kato(&self, k: usize, spectrum: &mut Spectrum) {
        let Some((lower, upper)) = self.temple_kato_bounds(k, spectrum) else {
            return;
        };
        spectrum.tighten(k, lower, upper, Theorem::TempleKato);
    }

    fn temple_kato_bounds(&self, k: usize, spectrum: &Spectrum) -> Option<(Dyadic, Dyadic)> {
        let (g_low, g_high) = ends(&self.accurate_coupling(k, k).0)?;
        let (m_low, m_high) = ends(&self.accurate_gram(k, k).0)?;
        // g/m over the four corners: m is positive, so two divisions decide each end.
        let quotient = |g: &Dyadic, toward: Toward| {
            let nearer = g.divided(&m_high, QUOTIENT_BITS, toward)?;
            let farther = g.divided(&m_low, QUOTIENT_BITS, toward)?;
            Some(match toward {
                Toward::Down => nearer.min(farther),
                Toward::Up => nearer.max(farther),
            })
        };
        let (shift_low, shift_high) = (
            quotient(&g_low, Toward::Down)?,
            quotient(&g_high, Toward::Up)?,
        );
        let value = &spectrum.values[k];
        let (rho_low, rho_high) = (value + &shift_low, value + &shift_high);
        let shift = Upper::of(shift_low.abs().max(shift_high.abs()).to_f64(Toward::Up));
        let mut entries: Vec<f64> = self.coupling.re.column(k).iter().copied().collect();
        entries[k] = 0.0;
        if let Some(im) = &self.coupling.im {
            entries.extend(
                im.column(k)
                    .iter()
                    .enumerate()
                    .filter(|(j, _)| *j != k)
                    .map(|(_, x)| *x),
            );
        }
        let numerator = square_sum_up(entries.into_iter())
            .sqrt()
            .plus(self.coupling_loss[k])
            .plus(shift.times(self.gram.defect));
        let squares = numerator.times(numerator).exact()?;
        let scale = &Dyadic::from_f64(self.floor())? * &m_low;
        let squares = squares.divided(&scale, QUOTIENT_BITS, Toward::Up)?;
        let lower = match spectrum.above(k) {
            None => rho_low.clone(),
            Some(b) => &rho_low - &squares.divided(&(b - &rho_high), QUOTIENT_BITS, Toward::Up)?,
        };
        let upper = match spectrum.below(k) {
            None => rho_high,
            Some(a) => &rho_high + &squares.divided(&(&rho_low - a), QUOTIENT_BITS, Toward::Up)?,
        };
        Some((lower, upper))
    }
}

/// Largest φ the second-order remainders are worked out for.
const LARGEST_DEFECT: f64 = 0.1;

/// The ends of a pair's interval.
pub(super) fn ends(pair: &Pair) -> Option<(Dyadic, Dyadic)> {
    let middle = &Dyadic::from_f64(pair.high)? + &Dyadic::from_f64(pair.low)?;
    let error = pair.error.exact()?;
    Some((&middle - &error, &middle + &error))
}
