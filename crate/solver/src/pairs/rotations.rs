//! Vectors of T by accumulating the rotations of the recorded sweeps.
//!
//! The safe road: Z is a product of plane rotations, so it is orthogonal to
//! rounding whatever the spectrum. The sweeps are repeated from T; their
//! rotations are gathered over several sweeps and applied to strips of rows
//! that stay in the first-level cache.
//! Notation: Z ← Z G, row strip by row strip.

use crate::iterate::{sweep, Iteration, Rotation};
use crate::matrix::counted::count;
use crate::matrix::lanes::Lanes;
use crate::reduce::Tridiagonal;
use nalgebra::DMatrix;

/// Rows of Z handled together.
const STRIP: usize = 8;
/// Rotations gathered before they are applied (32 kB).
const BATCH: usize = 2048;

/// A run of rotations on neighbouring columns, all moving one way.
struct Chain {
    start: usize,
    end: usize,
    first_column: usize,
    step: Step,
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Step {
    Right,
    Left,
}

/// Z with T = Z Λ Zᵀ, columns taken in `order_of_values`. n × n, column-major.
/// Cost: 6·n operations a rotation, about 5·n³ in all.
pub(super) fn vectors(
    tridiagonal: &Tridiagonal,
    iteration: &Iteration,
    order_of_values: &[usize],
) -> DMatrix<f64> {
    let order = tridiagonal.order();
    let strips = order.div_ceil(STRIP);
    // Strip by strip, each column-major with STRIP rows.
    let mut basis = vec![0.0; strips * STRIP * order];
    for k in 0..order {
        basis[(k / STRIP) * STRIP * order + k * STRIP + k % STRIP] = 1.0;
    }
    let mut state = tridiagonal.clone();
    let mut rotations: Vec<Rotation> = Vec::with_capacity(BATCH + order);
    let mut chains: Vec<Chain> = Vec::new();
    let mut deflations = iteration.deflations.iter().peekable();
    for (done, step) in iteration.sweeps.iter().enumerate() {
        while let Some((_, deflation)) = deflations.next_if(|(before, _)| *before <= done) {
            state.off_diagonal[deflation.index] = 0.0;
        }
        let start = rotations.len();
        let mut columns = (None, Step::Right);
        sweep(&mut state, *step, |column, rotation| {
            match columns.0 {
                None => columns.0 = Some(column),
                Some(first) if column < first => columns.1 = Step::Left,
                Some(_) => {}
            }
            rotations.push(rotation);
        });
        let (first_column, step) = (columns.0.unwrap_or(0), columns.1);
        chains.push(Chain {
            start,
            end: rotations.len(),
            first_column,
            step,
        });
        if rotations.len() >= BATCH || done + 1 == iteration.sweeps.len() {
            for strip in basis.chunks_exact_mut((STRIP * order).max(1)) {
                apply(strip, &rotations, &chains);
            }
            rotations.clear();
            chains.clear();
        }
    }
    let mut result = DMatrix::zeros(order, order);
    for (target, source) in order_of_values.iter().enumerate() {
        for strip in 0..strips {
            let rows = STRIP.min(order - strip * STRIP);
            let from = strip * STRIP * order + source * STRIP;
            let to = target * order + strip * STRIP;
            result.as_mut_slice()[to..to + rows].copy_from_slice(&basis[from..from + rows]);
        }
    }
    result
}

type Column = [Lanes; STRIP / 2];

/// Written out, so that a column stays in registers.
#[inline(always)]
fn each(mut f: impl FnMut(usize) -> Lanes) -> Column {
    [f(0), f(1), f(2), f(3)]
}

#[inline(always)]
fn load(column: &[f64; STRIP]) -> Column {
    let pairs = column.as_chunks::<2>().0;
    each(|k| Lanes::load(&pairs[k]))
}

#[inline(always)]
fn store(values: Column, column: &mut [f64; STRIP]) {
    for (value, pair) in values.iter().zip(column.as_chunks_mut::<2>().0) {
        value.store(pair);
    }
}

/// Applies the chains to one strip; the column shared by two neighbouring
/// rotations stays in registers.
fn apply(strip: &mut [f64], rotations: &[Rotation], chains: &[Chain]) {
    let columns = strip.as_chunks_mut::<STRIP>().0;
    for chain in chains {
        let rotations = &rotations[chain.start..chain.end];
        count(6 * STRIP * rotations.len());
        match chain.step {
            Step::Right => {
                let mut left = load(&columns[chain.first_column]);
                for (k, rotation) in rotations.iter().enumerate() {
                    let at = chain.first_column + k;
                    let right = load(&columns[at + 1]);
                    let (first, second) = turn(left, right, *rotation);
                    store(first, &mut columns[at]);
                    left = second;
                }
                store(left, &mut columns[chain.first_column + rotations.len()]);
            }
            Step::Left => {
                let mut right = load(&columns[chain.first_column + 1]);
                for (k, rotation) in rotations.iter().enumerate() {
                    let at = chain.first_column - k;
                    let left = load(&columns[at]);
                    let (first, second) = turn(left, right, *rotation);
                    store(second, &mut columns[at + 1]);
                    right = first;
                }
                store(
                    right,
                    &mut columns[chain.first_column + 1 - rotations.len()],
                );
            }
        }
    }
}

#[inline(always)]
fn turn(left: Column, right: Column, rotation: Rotation) -> (Column, Column) {
    let (c, s) = (Lanes::splat(rotation.cosine), Lanes::splat(rotation.sine));
    (
        each(|k| left[k] * c + right[k] * s),
        each(|k| right[k] * c - left[k] * s),
    )
}
