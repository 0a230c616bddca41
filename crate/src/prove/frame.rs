//! The numbers a proof in double precision works on.
//!
//! Everything is moved by powers of two, so that no product overflows and what
//! underflows is far below every bound. A pair is balanced by D = diag(2^dᵢ):
//! (DAD, DMD) has the eigenvalues of (A, M) exactly, and a metric with unit
//! diagonal has nearly the least condition that scaling can give (A. van der
//! Sluis, Numer. Math. 14, 1969).
//!
//! Notation: n the order, A the matrix, M the metric, X the approximate
//! vectors, λ̃ the approximate values, d the balancing exponents.

use dashu_base::BitTest;
use nalgebra::DMatrix;

use crate::matrix::{Dense, ExactMatrix};
use crate::num::upper::square_sum_up;
use crate::num::{ExactReal, Upper};
use crate::pairs::Approximation;
use crate::problem::Problem;

/// A, M, X and λ̃ in the proof's own scale.
#[derive(Clone, Debug)]
pub(super) struct Frame {
    /// Order n.
    pub order: usize,
    /// D A D · 2^−`matrix_scale`, each entry to nearest, n × n.
    pub matrix: Dense,
    /// D M D · 2^−`metric_scale`, each entry to nearest, n × n.
    pub metric: Option<Dense>,
    /// Approximate vectors of the balanced problem, columns, n × n.
    pub vectors: Dense,
    /// Approximate eigenvalues of the balanced problem, ascending.
    pub values: Vec<f64>,
    /// Exponents d: typed x = 2^d · frame x, component by component, times a
    /// factor common to all.
    pub weights: Vec<i32>,
    /// Power of two taken out of A.
    pub matrix_scale: i32,
    /// Power of two taken out of M.
    pub metric_scale: i32,
}

/// Why no frame could be laid out.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum FrameError {
    /// Shapes of problem and approximation differ.
    Shape,
    /// The diagonal entry of the metric at this index is not positive.
    MetricDiagonal(usize),
    /// An entry has no finite value in double precision.
    NotFinite,
}

impl Frame {
    /// Lays out a problem and an approximation; n² work.
    pub fn new(problem: &Problem, approximation: &Approximation) -> Result<Self, FrameError> {
        let order = problem.matrix.order();
        let agrees = approximation.values.len() == order
            && approximation.vectors.rows() == order
            && approximation.vectors.cols() == order
            && problem
                .metric
                .as_ref()
                .is_none_or(|metric| metric.order() == order);
        if !agrees {
            return Err(FrameError::Shape);
        }
        let mut frame = Self::without_vectors(problem)?;
        frame.take(approximation);
        Ok(frame)
    }

    /// The problem alone, with X = I and λ̃ the diagonal of A: what is left to
    /// start from when the approximation is of no use.
    pub fn without_vectors(problem: &Problem) -> Result<Self, FrameError> {
        let order = problem.matrix.order();
        let mut weights = vec![0; order];
        let mut metric_scale = 0;
        let mut metric = None;
        if let Some(typed) = &problem.metric {
            for (i, weight) in weights.iter_mut().enumerate() {
                let diagonal = typed.re(i, i);
                match magnitude(diagonal) {
                    Some(size) if diagonal.nearest(size) > 0.0 => *weight = -size.div_euclid(2),
                    _ => return Err(FrameError::MetricDiagonal(i)),
                }
            }
            metric_scale = largest(typed, &weights);
            metric = Some(rounded(typed, metric_scale, &weights)?);
        }
        let matrix_scale = largest(&problem.matrix, &weights);
        let matrix = rounded(&problem.matrix, matrix_scale, &weights)?;
        let identity = Approximation {
            values: matrix.re.diagonal().iter().copied().collect(),
            vectors: Dense::real(DMatrix::identity(order, order)),
            scale: matrix_scale,
        };
        let mut frame = Self {
            order,
            matrix,
            metric,
            vectors: identity.vectors.clone(),
            values: Vec::new(),
            weights: vec![0; order],
            matrix_scale,
            metric_scale: 0,
        };
        frame.take(&identity);
        frame.weights = weights;
        frame.metric_scale = metric_scale;
        Ok(frame)
    }

    /// A standard problem of doubles, meant exactly, values ascending.
    pub fn of_doubles(matrix: Dense, vectors: Dense, values: Vec<f64>) -> Self {
        let order = matrix.rows();
        Self {
            order,
            matrix,
            metric: None,
            vectors,
            values,
            weights: vec![0; order],
            matrix_scale: 0,
            metric_scale: 0,
        }
    }

    /// What rounding `typed` to the frame's doubles `high` left: its low parts, and a
    /// bound on the Frobenius norm of what those miss.
    pub fn low_parts<'a>(
        &self,
        typed: &'a ExactMatrix,
        high: &Dense,
        scale: i32,
    ) -> (Dense, Upper) {
        let order = self.order;
        let mut bounds = Vec::new();
        let mut plane = |part: &dyn Fn(usize, usize) -> &'a ExactReal, rounded: &DMatrix<f64>| {
            let mut plane = DMatrix::zeros(order, order);
            for i in 0..order {
                for j in 0..order {
                    let parts = part(i, j).expansion(scale - self.weights[i] - self.weights[j]);
                    plane[(i, j)] = parts.lo;
                    // The frame's double is the high part, unless a nested surd
                    // lies next to the middle of two doubles.
                    let off = (parts.hi - rounded[(i, j)]).abs() + parts.bound;
                    if off != 0.0 {
                        bounds.push(off.next_up());
                    }
                }
            }
            plane
        };
        let re = plane(&|i, j| typed.re(i, j), &high.re);
        let im = high
            .im
            .as_ref()
            .map(|high| plane(&|i, j| typed.im(i, j), high));
        (Dense { re, im }, square_sum_up(bounds.into_iter()).sqrt())
    }

    /// Typed λ = frame λ · 2^scale.
    pub fn scale(&self) -> i64 {
        i64::from(self.matrix_scale) - i64::from(self.metric_scale)
    }

    /// Takes over values and vectors, ascending. Any doubles will do: the
    /// proof asks nothing of them.
    fn take(&mut self, approximation: &Approximation) {
        let order = self.order;
        let mut places: Vec<usize> = (0..order).collect();
        places.sort_by(|&i, &j| approximation.values[i].total_cmp(&approximation.values[j]));
        let shift = i64::from(approximation.scale) - self.scale();
        self.values = places
            .iter()
            .map(|&k| times_power(approximation.values[k], shift))
            .collect();
        let plane = |source: &DMatrix<f64>| {
            DMatrix::from_fn(order, order, |i, j| {
                times_power(source[(i, places[j])], -i64::from(self.weights[i]))
            })
        };
        let re = plane(&approximation.vectors.re);
        let im = approximation.vectors.im.as_ref().map(plane);
        self.vectors = Dense { re, im };
        self.unify_planes();
        // A metric in another scale leaves one common factor in all columns.
        if self.metric.is_some() && order > 0 {
            let factor = 1.0 / self.first_norm().sqrt();
            if factor.is_finite() && factor > 0.0 && (factor - 1.0).abs() > NEARLY_UNIT {
                self.rescale(&vec![factor; order]);
            }
        }
    }

    /// All parts complex, or none: one case for every kernel.
    fn unify_planes(&mut self) {
        let order = self.order;
        let parts = [
            Some(&mut self.matrix),
            self.metric.as_mut(),
            Some(&mut self.vectors),
        ];
        let mut parts: Vec<&mut Dense> = parts.into_iter().flatten().collect();
        if parts.iter().any(|part| part.is_complex()) {
            for part in &mut parts {
                part.im.get_or_insert_with(|| DMatrix::zeros(order, order));
            }
        }
    }

    /// Multiplies column k of X by `factors[k]`, rounded: another X.
    pub fn rescale(&mut self, factors: &[f64]) {
        let scale = |plane: &mut DMatrix<f64>| {
            for (k, &factor) in factors.iter().enumerate() {
                for entry in plane.column_mut(k).iter_mut() {
                    *entry *= factor;
                }
            }
        };
        scale(&mut self.vectors.re);
        if let Some(im) = &mut self.vectors.im {
            scale(im);
        }
    }

    /// x*Mx of the first column, in plain double.
    fn first_norm(&self) -> f64 {
        let Some(metric) = &self.metric else {
            return 1.0;
        };
        let re = self.vectors.re.column(0);
        let mut norm = (&metric.re * re).dot(&re);
        if let Some(im) = &self.vectors.im {
            let im = im.column(0);
            norm += (&metric.re * im).dot(&im);
            if let Some(metric_im) = &metric.im {
                norm += (metric_im * re).dot(&im) - (metric_im * im).dot(&re);
            }
        }
        norm
    }
}

/// Columns whose norm is this close to one need no common factor.
const NEARLY_UNIT: f64 = 1e-6;

/// e with 2^(e−1) ≤ |x| < 2^(e+1), about; `None` for zero.
pub(super) fn magnitude(x: &ExactReal) -> Option<i32> {
    let near = x.nearest(0);
    if near.is_normal() {
        return Some(exponent_of(near));
    }
    if x.is_zero() {
        return None;
    }
    let around = x.enclose(16);
    let largest = around.lower.bit_len().max(around.upper.bit_len());
    i32::try_from(largest as i64 + around.exponent).ok()
}

/// e with 2^(e−1) ≤ |x| < 2^e, for a normal double.
fn exponent_of(x: f64) -> i32 {
    ((x.to_bits() >> 52) & 0x7ff) as i32 - 1022
}

/// x · 2^power, rounded once at most.
pub(super) fn times_power(x: f64, power: i64) -> f64 {
    if power == 0 || x == 0.0 {
        return x;
    }
    if x.is_normal() {
        let target = i64::from(exponent_of(x)) + power;
        if (-1021..=1024).contains(&target) {
            let bits = (x.to_bits() & !(0x7ff << 52)) | (((target + 1022) as u64) << 52);
            return f64::from_bits(bits);
        }
    }
    let step = power.clamp(-1000, 1000);
    let factor = f64::from_bits(((step + 1023) as u64) << 52);
    if step == power {
        x * factor
    } else {
        times_power(x * factor, power - step)
    }
}

/// The largest size of an entry of D·typed·D; zero for a zero matrix.
fn largest(typed: &ExactMatrix, weights: &[i32]) -> i32 {
    let order = typed.order();
    let mut found: Option<i32> = None;
    for i in 0..order {
        for j in 0..=i {
            for part in [typed.re(i, j), typed.im(i, j)] {
                if let Some(size) = magnitude(part) {
                    let size = size + weights[i] + weights[j];
                    found = Some(found.map_or(size, |known| known.max(size)));
                }
            }
        }
    }
    found.unwrap_or(0)
}

/// D·typed·D · 2^−scale with every entry to nearest; `typed` is Hermitian.
fn rounded(typed: &ExactMatrix, scale: i32, weights: &[i32]) -> Result<Dense, FrameError> {
    let order = typed.order();
    let mut bad = false;
    // The lower triangle, mirrored: reading an exact number costs far more than
    // copying a double.
    let mut plane = |part: &dyn Fn(usize, usize) -> f64, sign: f64| {
        let mut plane = DMatrix::zeros(order, order);
        for j in 0..order {
            for i in j..order {
                let entry = part(i, j);
                bad |= !entry.is_finite();
                plane[(j, i)] = sign * entry;
                plane[(i, j)] = entry;
            }
        }
        plane
    };
    let power = |i: usize, j: usize| weights[i] + weights[j] - scale;
    let re = plane(&|i, j| nearest(typed.re(i, j), power(i, j)), 1.0);
    let im = typed
        .is_complex()
        .then(|| plane(&|i, j| nearest(typed.im(i, j), power(i, j)), -1.0));
    if bad {
        return Err(FrameError::NotFinite);
    }
    Ok(Dense { re, im })
}

/// The double nearest to x · 2^power.
fn nearest(x: &ExactReal, power: i32) -> f64 {
    let near = x.nearest(0);
    let moved = times_power(near, i64::from(power));
    // Moving a normal double to a normal double rounds nothing.
    if near.is_normal() && moved.is_normal() {
        return moved;
    }
    x.nearest(-power)
}
