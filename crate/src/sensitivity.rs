//! Which entry matters most: first-order sensitivities of eigenvalues.
//!
//! Notation: x the eigenvector of λ with xᴴMx = 1; δᵢⱼ Kronecker's symbol;
//! s the power of two taken out of M.
//!
//! A symmetric change of entry (i, j) and its mirror by t moves λ, to first
//! order, by (2 − δᵢⱼ)·Re(conj(xᵢ)·xⱼ·t), and the same change of the metric by
//! −λ times that (Courant and Hilbert 1924; Wilkinson 1965, chapter 2). For a
//! complex entry with a radius r the largest such move is
//! (2 − δᵢⱼ)·|xᵢ|·|xⱼ|·r.
//!
//! *Not* guaranteed: these are derivatives at an approximate vector, not
//! bounds; for an eigenvalue that is not well apart from its neighbours they
//! say nothing. Proven ranges over all matrices within the tolerances come
//! from the proof stage.

use crate::pairs::Approximation;
use crate::problem::{Part, Tolerances};
use std::cmp::Ordering;

/// How far one entry moves one eigenvalue.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sensitivity {
    /// Which matrix the entry is in.
    pub part: Part,
    /// Its row, from 0; not less than `col`.
    pub row: usize,
    /// Its column, from 0.
    pub col: usize,
    /// dλ/dt for a real change t of the entry and its mirror.
    pub derivative: f64,
    /// The largest first-order move of λ within the entry's tolerance; without
    /// tolerances, for a change of size 1.
    pub effect: f64,
}

/// What the entries may do.
#[derive(Clone, Copy, Debug)]
pub enum Moves<'a> {
    /// Each entry within its tolerance, in A and in M.
    Within {
        /// Tolerances of A.
        matrix: Option<&'a Tolerances>,
        /// Tolerances of M.
        metric: Option<&'a Tolerances>,
    },
    /// Each entry of A by 1, those of M not at all.
    Unit,
}

/// The entries that move eigenvalue `index` (from 0, ascending) most, greatest
/// effect first, at most `limit` of them; entries without effect are left out.
///
/// `metric_scale` is that of [`crate::problem::Rounded`] (0 without metric).
/// Cost: n² and a sort.
pub fn sensitivities(
    approximation: &Approximation,
    metric_scale: i32,
    index: usize,
    moves: Moves<'_>,
    limit: usize,
) -> Vec<Sensitivity> {
    let vectors = &approximation.vectors;
    let n = vectors.rows();
    if index >= approximation.values.len() || index >= vectors.cols() {
        return Vec::new();
    }
    let scaled = |x: f64, power: i32| crate::num::ExactReal::Binary(x).nearest(-power);
    let value = scaled(approximation.values[index], approximation.scale);
    let part = |k: usize| {
        let im = vectors.im.as_ref().map_or(0.0, |im| im[(k, index)]);
        (vectors.re[(k, index)], im)
    };
    let mut found = Vec::new();
    let mut add = |which: Part, factor: f64, radius: &dyn Fn(usize, usize) -> f64| {
        for row in 0..n {
            let (p, q) = part(row);
            for col in 0..=row {
                let r = radius(row, col);
                if r == 0.0 {
                    continue;
                }
                let (u, v) = part(col);
                let times = if row == col { factor } else { 2.0 * factor };
                let derivative = scaled(times * (p * u + q * v), -metric_scale);
                let size = ((p * p + q * q) * (u * u + v * v)).sqrt();
                let effect = scaled(times.abs() * size, -metric_scale) * r;
                if effect > 0.0 {
                    found.push(Sensitivity {
                        part: which,
                        row,
                        col,
                        derivative,
                        effect,
                    });
                }
            }
        }
    };
    match moves {
        Moves::Unit => add(Part::Matrix, 1.0, &|_, _| 1.0),
        Moves::Within { matrix, metric } => {
            if let Some(t) = matrix.filter(|t| t.order() == n) {
                add(Part::Matrix, 1.0, &|row, col| t.radius(row, col).nearest(0));
            }
            if let Some(t) = metric.filter(|t| t.order() == n) {
                add(Part::Metric, -value, &|row, col| {
                    t.radius(row, col).nearest(0)
                });
            }
        }
    }
    // Ties keep the order of entries, so the ranking is the same everywhere.
    found.sort_by(|a, b| b.effect.partial_cmp(&a.effect).unwrap_or(Ordering::Equal));
    found.truncate(limit);
    found
}

#[cfg(test)]
mod tests;
