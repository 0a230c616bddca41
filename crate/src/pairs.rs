//! Approximate eigenpairs. They carry no bound: only `prove` can give one.

use crate::matrix::Dense;

/// Approximate eigenpairs of the *scaled* problem (see
/// [`crate::problem::Rounded`]); λ = value · 2^`scale`.
#[derive(Clone, Debug)]
pub struct Approximation {
    /// Approximate eigenvalues of the scaled problem, ascending; length n.
    pub values: Vec<f64>,
    /// Columns are the approximate vectors, in the order of `values`; n × n.
    /// Standard problem: unit 2-norm. Pair: unit M-norm for the scaled metric.
    pub vectors: Dense,
    /// λ of the typed problem is value · 2^scale
    /// (scale = matrix_scale − metric_scale).
    pub scale: i32,
}
