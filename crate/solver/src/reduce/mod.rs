//! Reduction of a Hermitian matrix, or a pair, to real tridiagonal form.
//!
//! Notation: A the matrix, M = L Lᴴ the metric, C = L⁻¹ A L⁻ᴴ (C = A without a
//! metric), Q = H₁ H₂ … the product of reflectors, D a diagonal of phases,
//! T = Dᴴ Qᴴ C Q D real symmetric tridiagonal.
//!
//! Reflectors are taken from the first column on and act on rows and columns
//! 2…n only, so Q e₁ = e₁.

mod checkpoint;
mod error;
mod gauge;
mod metric;
mod pass;
mod pending;
mod reflector;
mod run;

#[cfg(test)]
mod tests;

pub(crate) use checkpoint::Checkpoint;
pub use error::ReduceError;
pub(crate) use metric::solve_adjoint;
pub use metric::{cholesky, CholeskyError};
pub(crate) use run::dot;
pub use run::ReductionRun;

use crate::control::{Control, Flow, Stage};
use crate::ledger::{Event, Listening, Recorder, Totals};
use crate::matrix::norms::{length, power_of_two};
use crate::matrix::Dense;
use crate::rounded::Rounded;
use gauge::Gauge;

/// A real symmetric tridiagonal matrix.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Tridiagonal {
    /// n diagonal entries.
    pub diagonal: Vec<f64>,
    /// n − 1 off-diagonal entries; none are negative when they came from a
    /// complex matrix.
    pub off_diagonal: Vec<f64>,
}

impl Tridiagonal {
    /// Number of rows.
    pub fn order(&self) -> usize {
        self.diagonal.len()
    }

    /// Largest sum of moduli over a row; bounds the 2-norm.
    pub fn row_sum_norm(&self) -> f64 {
        let off = |k: Option<usize>| {
            k.and_then(|k| self.off_diagonal.get(k))
                .map_or(0.0, |e| e.abs())
        };
        let sums = self.diagonal.iter().enumerate();
        let sums = sums.map(|(k, d)| off(k.checked_sub(1)) + d.abs() + off(Some(k)));
        sums.fold(0.0, |norm, sum| if sum > norm { sum } else { norm })
    }
}

/// The reflectors of a reduction, in factored form.
#[derive(Clone, Debug)]
pub(crate) struct Reflectors {
    /// Rows a stored column has (the order, made even).
    pub stride: usize,
    /// Column c holds v of reflector c in rows c+1.., with its leading 1.
    pub re: Vec<f64>,
    /// Imaginary parts; empty for a real matrix.
    pub im: Vec<f64>,
    /// τ of each reflector, 0 for the identity.
    pub scalars: Vec<f64>,
}

/// A reduced problem.
#[derive(Clone, Debug)]
pub struct Reduction {
    /// T.
    pub tridiagonal: Tridiagonal,
    pub(crate) reflectors: Reflectors,
    /// D; empty for a real matrix.
    pub(crate) phases: Vec<(f64, f64)>,
    /// L, with a metric only; complex when the pair is.
    pub(crate) factor: Option<Dense>,
    /// λ of the typed problem is an eigenvalue of T times 2^scale.
    pub(crate) scale: i32,
}

impl Reduction {
    /// Number of rows.
    pub fn order(&self) -> usize {
        self.tridiagonal.order()
    }

    /// L with M = L Lᴴ, when there is a metric.
    pub fn metric_factor(&self) -> Option<&Dense> {
        self.factor.as_ref()
    }
}

/// Range of the largest entry within which the arithmetic of all stages
/// neither overflows nor loses anything that matters.
const SCALED: std::ops::RangeInclusive<f64> = power_of_two(-100)..=power_of_two(100);

/// Brings the problem to real tridiagonal form.
///
/// `rounded` is read in its lower triangles. The recorder hears of the scaling,
/// the metric's factor, every reflector and the phases; what it does has no
/// influence on the arithmetic.
///
/// # Errors
/// [`ReduceError`], with the place. Cost: 4/3·n³ operations (real), 16/3·n³
/// (complex), and for a pair 7/3·n³ (28/3·n³) before that.
/// Not guaranteed: for a pair the backward error grows with the condition of M.
pub fn reduce(
    rounded: &Rounded,
    recorder: &mut dyn Recorder,
    control: &mut dyn Control,
) -> Result<Reduction, ReduceError> {
    let order = check(rounded)?;
    let listening = recorder.listening();
    if rounded.metric.is_some() && listening == Listening::Yes {
        record_scaling(rounded, recorder, Totals::of_matrix(&rounded.matrix));
    }
    let (form, factor) = match &rounded.metric {
        None => (None, None),
        Some(metric_matrix) => {
            let factor = cholesky(metric_matrix).map_err(ReduceError::Metric)?;
            let form = metric::standard_form(&rounded.matrix, &factor);
            let (_, factor) = metric::same_kind(&form, &factor);
            (Some(form), Some(factor))
        }
    };
    let mut run = ReductionRun::new(form.as_ref().unwrap_or(&rounded.matrix));
    drop(form);
    let mut gauge = Gauge::new(listening);
    if let Some(factor) = &factor {
        recorder.record(Event::Metric { factor, run: &run }, gauge.read(&run));
    } else if listening == Listening::Yes {
        let totals = gauge.read(&run);
        record_scaling(rounded, recorder, totals);
        recorder.record(Event::Start { run: &run }, totals);
    }
    for col in 0..order {
        if control.progress(Stage::Reduce, share_done(col, order)) == Flow::Cancel {
            return Err(ReduceError::Cancelled { column: col });
        }
        run.step();
        if col + 2 < order && listening == Listening::Yes {
            if let Some(reflector) = run.last_reflector() {
                let event = Event::Reflector {
                    column: reflector.column,
                    vector_re: reflector.re,
                    vector_im: reflector.im,
                    scalar: reflector.scalar,
                    image: reflector.image,
                    run: &run,
                };
                recorder.record(event, gauge.read(&run));
            }
        }
    }
    let finished = run.finish();
    let (tridiagonal, phases) = make_real(
        finished.diagonal,
        finished.off_re,
        &finished.off_im,
        rounded.matrix.is_complex() || factor.as_ref().is_some_and(Dense::is_complex),
    );
    let reduction = Reduction {
        tridiagonal,
        reflectors: Reflectors {
            stride: finished.stride,
            re: finished.re,
            im: finished.im,
            scalars: finished.scalars,
        },
        phases,
        factor,
        scale: rounded.matrix_scale - rounded.metric.as_ref().map_or(0, |_| rounded.metric_scale),
    };
    if listening == Listening::Yes {
        let tridiagonal = &reduction.tridiagonal;
        let totals = Totals::of_tridiagonal(tridiagonal);
        recorder.record(
            Event::Phases {
                phases: &reduction.phases,
                tridiagonal,
            },
            totals,
        );
    }
    Ok(reduction)
}

/// The work of eliminating column k is proportional to (n − k)².
fn share_done(col: usize, order: usize) -> f64 {
    let left = (order - col) as f64 / order as f64;
    1.0 - left * left * left
}

fn check(rounded: &Rounded) -> Result<usize, ReduceError> {
    let order = rounded.matrix.rows();
    for matrix in [Some(&rounded.matrix), rounded.metric.as_ref()]
        .into_iter()
        .flatten()
    {
        if matrix.rows() != order || matrix.cols() != order {
            return Err(ReduceError::Shape {
                rows: matrix.rows(),
                cols: matrix.cols(),
            });
        }
        let mut largest: f64 = 0.0;
        for plane in [Some(&matrix.re), matrix.im.as_ref()].into_iter().flatten() {
            for (at, x) in plane.as_slice().iter().enumerate() {
                if !x.is_finite() {
                    return Err(ReduceError::NotFinite {
                        row: at % order,
                        col: at / order,
                    });
                }
                if x.abs() > largest {
                    largest = x.abs();
                }
            }
        }
        if largest != 0.0 && !SCALED.contains(&largest) {
            return Err(ReduceError::NotScaled { largest });
        }
    }
    Ok(order)
}

fn record_scaling(rounded: &Rounded, recorder: &mut dyn Recorder, totals: Totals) {
    let metric = rounded.metric.as_ref().map(|_| rounded.metric_scale);
    let event = Event::Scaling {
        matrix: rounded.matrix_scale,
        metric,
    };
    recorder.record(event, totals);
}

/// T and D from complex off-diagonals: T's are their moduli, D's entries the
/// running products of their unit phases. Real off-diagonals stay as they are.
fn make_real(
    diagonal: Vec<f64>,
    off_re: Vec<f64>,
    off_im: &[f64],
    complex: bool,
) -> (Tridiagonal, Vec<(f64, f64)>) {
    if !complex {
        return (
            Tridiagonal {
                diagonal,
                off_diagonal: off_re,
            },
            Vec::new(),
        );
    }
    let mut phases = vec![(1.0, 0.0); diagonal.len()];
    let mut off_diagonal = Vec::with_capacity(off_re.len());
    for (k, (re, im)) in off_re.iter().zip(off_im).enumerate() {
        let modulus = length(*re, *im);
        off_diagonal.push(modulus);
        let (c, s) = if modulus == 0.0 {
            (1.0, 0.0)
        } else {
            (re / modulus, im / modulus)
        };
        let (d_re, d_im) = phases[k];
        let next = (d_re * c - d_im * s, d_re * s + d_im * c);
        // Renormalised, so that a long product does not drift from the unit circle.
        let size = length(next.0, next.1);
        phases[k + 1] = (next.0 / size, next.1 / size);
    }
    (
        Tridiagonal {
            diagonal,
            off_diagonal,
        },
        phases,
    )
}
