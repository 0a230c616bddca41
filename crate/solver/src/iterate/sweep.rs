//! One sweep of the implicit shifted QR iteration on a block.
//!
//! Notation: T the tridiagonal matrix with diagonal d and off-diagonals e, σ the
//! shift, G a plane rotation with cosine c and sine s in rows k, k+1.
//! The sweep computes Gᵀ…T…G by chasing; the off-diagonal the rotation acts
//! upon is never formed (Dubrulle, Martin and Wilkinson, "The implicit QL
//! algorithm", Numer. Math. 12, 1968; here from the top down).

use crate::matrix::norms::length;
use crate::reduce::Tridiagonal;

/// Which way the rotations run.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Direction {
    /// From the block's first row to its last: the last off-diagonal falls.
    Down,
    /// From the last row to the first: the first off-diagonal falls.
    Up,
}

/// A sweep, as far as it must be known to repeat it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SweepStep {
    /// First row of the active block, from 0.
    pub first: usize,
    /// Last row of it.
    pub last: usize,
    /// σ.
    pub shift: f64,
    /// Which way it ran.
    pub direction: Direction,
}

/// A rotation of the columns k and k+1 of the accumulated basis:
/// (z_k, z_{k+1}) ← (c z_k + s z_{k+1}, c z_{k+1} − s z_k).
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Rotation {
    pub cosine: f64,
    pub sine: f64,
}

/// The eigenvalue of the leading or trailing 2 × 2 of the block that lies
/// nearer its corner (Wilkinson 1968); `corner` is the corner's diagonal entry.
pub(super) fn wilkinson_shift(corner: f64, neighbour: f64, coupling: f64) -> f64 {
    let half = (neighbour - corner) / (2.0 * coupling);
    let root = length(half, 1.0);
    corner - coupling / (half + if half < 0.0 { -root } else { root })
}

/// Carries out the sweep and hands each rotation with its first column to
/// `rotate`, in order of application. Cost: O(last − first).
pub(crate) fn sweep(
    tridiagonal: &mut Tridiagonal,
    step: SweepStep,
    rotate: impl FnMut(usize, Rotation),
) {
    let diagonal = &mut tridiagonal.diagonal[step.first..=step.last];
    let off = &mut tridiagonal.off_diagonal[step.first..step.last];
    let mut rotate = rotate;
    match step.direction {
        Direction::Down => chase(diagonal, off, step.shift, |k, rotation| {
            rotate(step.first + k, rotation)
        }),
        Direction::Up => {
            diagonal.reverse();
            off.reverse();
            // Mirrored, the rotation's two columns change places: the sine changes sign.
            chase(diagonal, off, step.shift, |k, rotation| {
                rotate(
                    step.last - 1 - k,
                    Rotation {
                        sine: -rotation.sine,
                        ..rotation
                    },
                );
            });
            diagonal.reverse();
            off.reverse();
        }
    }
}

#[inline(always)]
fn chase(
    diagonal: &mut [f64],
    off: &mut [f64],
    shift: f64,
    mut rotate: impl FnMut(usize, Rotation),
) {
    let last = off.len();
    let (mut cosine, mut sine) = (1.0, 1.0);
    let mut carried = 0.0;
    let mut leading = diagonal[0] - shift;
    for k in 0..last {
        let bulge = sine * off[k];
        let present = cosine * off[k];
        let radius = length(leading, bulge);
        if k > 0 {
            off[k - 1] = radius;
        }
        if radius == 0.0 {
            (cosine, sine) = (1.0, 0.0);
        } else {
            (cosine, sine) = (leading / radius, bulge / radius);
        }
        let above = diagonal[k] - carried;
        let turned = (diagonal[k + 1] - above) * sine + 2.0 * cosine * present;
        carried = sine * turned;
        diagonal[k] = above + carried;
        leading = cosine * turned - present;
        rotate(k, Rotation { cosine, sine });
    }
    diagonal[last] -= carried;
    off[last - 1] = leading;
}
