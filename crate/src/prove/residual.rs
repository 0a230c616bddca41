//! How far approximate pairs are from being exact, in plain double precision.
//!
//! Notation: R = AX − MXΛ the residual, F = XᴴMX − I, φ ≥ ‖F‖₂, g the constant
//! of a product's rounding, u = 2^−53; Y = LᴴX with M = LLᴴ (never formed).
//!
//! With φ < 1 the metric is positive definite and X nonsingular (Sylvester's
//! law of inertia), σ_min(Y)² ≥ 1 − φ, and CY − YΛ = L⁻¹R for C = L⁻¹AL⁻ᴴ, the
//! standard problem with the same eigenvalues. Then for every k, both spectra
//! in ascending order,
//!     |λₖ − λ̃ₖ| ≤ ‖L⁻¹R‖₂ / √(1 − φ):
//! Kahan's conjecture, proved by Cao, Xie and Li (SIAM J. Matrix Anal. Appl.
//! 17, 1996). For square X it is short: were λₖ(C) − λ̃ₖ = d > 0, take U, the
//! spectral space of C for λₖ(C) and above, and V, that of Λ for λ̃ₖ and below.
//! Their dimensions add to n + 1, so Yv ∈ U for some unit v ∈ V, hence the
//! compression P_U Y P_V has norm at least σ_min(Y); and its top singular pair
//! shows ‖P_U (CY − YΛ) P_V‖ ≥ d · σ_min(Y). The case d < 0 is the same for −A.
//!
//! Column by column, an eigenvalue lies within ‖L⁻¹rₖ‖/‖yₖ‖ of λ̃ₖ (Krylov,
//! Weinstein). ‖L⁻¹r‖² = r*M⁻¹r with M⁻¹ = X(XᴴMX)⁻¹Xᴴ, so that
//! ‖L⁻¹r‖ ≤ ‖X‖₂‖r‖₂/√(1 − φ); for M = I it is ‖r‖₂ itself.

use crate::matrix::passes::{self, column, column_mut};
use crate::matrix::Dense;
use crate::num::upper::{square_sum_up, UNIT};
use crate::num::Upper;
use nalgebra::DMatrix;

use super::frame::Frame;
use super::norms::{column_norm, Norms, Rounding};
use super::products::{hermitian_gram, watched_product, Cancelled, Watch};

/// What the linear statements need.
#[derive(Clone, Debug)]
pub(super) struct Residual {
    /// φ ≥ ‖XᴴMX − I‖₂.
    pub defect: Upper,
    /// ≥ |λₖ − λ̃ₖ| for every k; unknown unless φ < 1.
    pub radius: Upper,
    /// ≥ ‖L⁻¹rₖ‖/σ_min(Y), column by column; unknown unless φ < 1.
    pub columns: Vec<Upper>,
    /// Part of `radius` that rounding the typed entries to doubles accounts for.
    pub input_loss: Upper,
}

/// Measures X and Λ of a frame. Columns far from unit norm are rescaled once.
///
/// Cost: n³ + n³/2 multiplications and additions for M = I, n³ more for a pair.
pub(super) fn measure(
    frame: &mut Frame,
    watch: &mut Watch<'_>,
) -> Result<(Gram, Residual), Cancelled> {
    let first = Gram::of(frame, watch)?;
    let gram = match first.unit_factors() {
        None => first,
        Some(factors) => {
            frame.rescale(&factors);
            Gram::of(frame, watch)?
        }
    };
    let residual = gram.residual(frame, watch)?;
    Ok((gram, residual))
}

/// The products with the metric.
#[derive(Clone, Debug)]
pub(super) struct Gram {
    /// fl(MX) for a pair.
    weighted: Option<Dense>,
    /// Approximate F = XᴴMX − I, exactly Hermitian, n × n.
    pub defects: Dense,
    /// ≥ the spectral norm of its error.
    pub defects_error: Upper,
    /// φ ≥ ‖F‖₂.
    pub defect: Upper,
    /// Norms of X.
    pub vectors: Norms,
    /// ≥ ‖fl(MX)ₖ − MXₖ‖₂ for typed M; empty for M = I.
    weighted_loss: Vec<Upper>,
}

impl Gram {
    fn of(frame: &Frame, watch: &mut Watch<'_>) -> Result<Self, Cancelled> {
        let order = frame.order;
        let vectors = Norms::of(&frame.vectors);
        let rounding = Rounding::new(order, order, frame.vectors.is_complex());
        let (weighted, weighted_loss, weighted_norms) = match &frame.metric {
            None => (None, Vec::new(), None),
            Some(metric) => {
                let weighted = watched_product(metric, &frame.vectors, watch)?;
                let size = Norms::of(metric).spectral;
                let loss = column_loss(rounding, size, &vectors);
                let norms = Norms::of(&weighted);
                (Some(weighted), loss, Some(norms))
            }
        };
        let right = weighted.as_ref().unwrap_or(&frame.vectors);
        let mut gram = hermitian_gram(&frame.vectors, right, watch)?;
        let mut subtraction = 0.0f64;
        for k in 0..order {
            let entry = gram.re[(k, k)] - 1.0;
            subtraction = subtraction.max(entry.abs());
            gram.re[(k, k)] = entry;
        }
        // ‖fl − exact‖: the product's own rounding and the subtraction's.
        let right = weighted_norms.as_ref().unwrap_or(&vectors).spectral;
        let mut own = rounding.factor.times(vectors.spectral).times(right);
        if weighted.is_some() {
            // |X|ᴴ|W| is not symmetric; its mirrored half is below it plus its transpose.
            own = own.times(Upper::of(2.0));
            // ‖mirrored half of N‖ ≤ √2·‖N‖_F, N = XᴴΔW, ΔW what MX lost.
            let lost = vectors.spectral.times(root_sum_square(&weighted_loss));
            own = own.plus(lost.times(Upper::of(std::f64::consts::SQRT_2.next_up())));
        }
        let defects_error = own
            .plus(rounding.underflow.times(Upper::of(order as f64)))
            .plus(Upper::of(subtraction).times(Upper::of(UNIT)));
        let defect = Norms::of(&gram).spectral.plus(defects_error);
        Ok(Self {
            weighted,
            defects: gram,
            defects_error,
            defect,
            vectors,
            weighted_loss,
        })
    }

    /// Factors that bring columns of norm far from one to norm one.
    fn unit_factors(&self) -> Option<Vec<f64>> {
        let diagonal = self.defects.re.diagonal();
        let far = diagonal.iter().any(|entry| entry.abs() > 0.125);
        let usable = diagonal
            .iter()
            .all(|entry| entry.is_finite() && *entry > -1.0);
        (far && usable).then(|| {
            diagonal
                .iter()
                .map(|entry| 1.0 / (1.0 + entry).sqrt())
                .collect()
        })
    }

    fn residual(&self, frame: &Frame, watch: &mut Watch<'_>) -> Result<Residual, Cancelled> {
        let order = frame.order;
        let rounding = Rounding::new(order, order, frame.vectors.is_complex());
        let size = Norms::of(&frame.matrix).spectral;
        let matrix_loss = column_loss(rounding, size, &self.vectors);
        let mut residual = watched_product(&frame.matrix, &frame.vectors, watch)?;
        let right = self.weighted.as_ref().unwrap_or(&frame.vectors);
        let unit = Upper::of(UNIT);
        let mut columns = Vec::with_capacity(order);
        let mut losses = Vec::with_capacity(order);
        for k in 0..order {
            let value = frame.values[k];
            let scaled_norm = subtract_multiple(&mut residual, right, k, value);
            let computed = column_norm(&residual, k);
            // fl(p − fl(λ̃w)): u times the result, u times the product, and what
            // underflows in it.
            let mut loss = matrix_loss[k]
                .plus(unit.times(computed))
                .plus(unit.times(scaled_norm))
                .plus(rounding.underflow);
            if let Some(weighted_loss) = self.weighted_loss.get(k) {
                loss = loss.plus(weighted_loss.times(Upper::of(value)));
            }
            columns.push(computed.plus(loss));
            losses.push(loss);
        }
        let total = Norms::of(&residual)
            .spectral
            .plus(root_sum_square(&losses))
            .least(root_sum_square(&columns));
        // σ_min(Y)² ≥ 1 − φ; a pair pays ‖X‖ and another root for M⁻¹.
        let floor = self.defect.one_minus();
        let (weight, divisor) = match frame.metric {
            None => (Upper::of(1.0), floor.max(0.0).sqrt().next_down()),
            Some(_) => (self.vectors.spectral, floor),
        };
        let finish = |bound: Upper| bound.times(weight).over(divisor);
        let mut input = size.times(self.vectors.frobenius);
        if let Some(metric) = &frame.metric {
            let moved: Vec<Upper> = self
                .vectors
                .columns
                .iter()
                .zip(&frame.values)
                .map(|(norm, value)| norm.times(Upper::of(*value)))
                .collect();
            input = input.plus(Norms::of(metric).spectral.times(root_sum_square(&moved)));
        }
        Ok(Residual {
            defect: self.defect,
            radius: finish(total),
            columns: columns.into_iter().map(finish).collect(),
            input_loss: finish(unit.times(input)),
        })
    }
}

/// ≥ ‖fl(AX)ₖ − (typed A)Xₖ‖₂ for each column: the product's rounding plus u|A|
/// for the entries' rounding to nearest (half a subnormal step is inside the
/// underflow term).
fn column_loss(rounding: Rounding, size: Upper, vectors: &Norms) -> Vec<Upper> {
    let factor = rounding.factor.plus(Upper::of(UNIT)).times(size);
    vectors
        .columns
        .iter()
        .map(|norm| {
            let subnormal = rounding.underflow.times(norm.plus(Upper::of(1.0)));
            factor.times(*norm).plus(subnormal)
        })
        .collect()
}

/// √Σ xₖ² of bounds.
pub(super) fn root_sum_square(bounds: &[Upper]) -> Upper {
    square_sum_up(bounds.iter().map(|bound| bound.get())).sqrt()
}

/// targetₖ ← targetₖ − value·sourceₖ; returns a bound on ‖fl(value·sourceₖ)‖₂.
fn subtract_multiple(target: &mut Dense, source: &Dense, k: usize, value: f64) -> Upper {
    let subtract = |target: &mut DMatrix<f64>, source: &DMatrix<f64>| {
        passes::subtract_multiple(column_mut(target, k), value, column(source, k));
    };
    subtract(&mut target.re, &source.re);
    if let (Some(target), Some(source)) = (&mut target.im, &source.im) {
        subtract(target, source);
    }
    let slack = Upper::of(1.0 + 2.0 * f64::EPSILON);
    column_norm(source, k).times(Upper::of(value)).times(slack)
}
