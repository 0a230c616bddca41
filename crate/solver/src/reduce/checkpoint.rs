//! Stored states of a reduction, from which the ledger replays.

use super::pending::Pending;
use super::run::ReductionRun;
use crate::matrix::short;
use std::ops::Range;

impl ReductionRun {
    /// What is needed to go on from here, appended to `pool`: the trailing
    /// triangle, packed, the band before it and the pending pair.
    pub(crate) fn checkpoint(&self, pool: &mut Vec<f64>) -> Checkpoint {
        let start = pool.len();
        for plane in [&self.re, &self.im] {
            if !plane.is_empty() {
                for col in self.done..self.order {
                    short::append(pool, &plane[col * self.stride..][col..self.order]);
                }
            }
        }
        for plane in self.band_planes() {
            short::append(pool, plane);
        }
        short::append(pool, self.pending.stored());
        Checkpoint {
            order: self.order,
            done: self.done,
            complex: self.is_complex(),
            numbers: start..pool.len(),
        }
    }

    fn band_planes(&self) -> [&Vec<f64>; 3] {
        [&self.diagonal, &self.off_re, &self.off_im]
    }
}

/// A state of a reduction, without the reflectors before it; see
/// [`ReductionRun::checkpoint`]. About n²/2 doubles at the start (n² complex).
#[derive(Clone, Debug)]
pub(crate) struct Checkpoint {
    order: usize,
    done: usize,
    complex: bool,
    /// Where the pool holds the triangle by planes, the diagonal, the
    /// off-diagonals by planes, and the pending pair if there is one.
    numbers: Range<usize>,
}

impl Checkpoint {
    /// Numbers all checkpoints of a run take that divides its columns into
    /// `shares`: the triangle left is (1 − k/shares)² of the whole.
    pub fn numbers_of_all(order: usize, planes: usize, shares: usize) -> usize {
        let triangles = (1..=shares).map(|left| left * left).sum::<usize>();
        let triangle = order * (order + 1) / 2 + order;
        planes * (triangle * triangles / (shares * shares) + shares * 6 * order)
    }

    /// A run that goes on from here, its numbers taken from `pool`.
    pub fn resume(&self, pool: &[f64]) -> ReductionRun {
        let (order, done) = (self.order, self.done);
        let stride = order + order % 2;
        let mut rest = &pool[self.numbers.clone()];
        let mut next = |length: usize| {
            let (taken, later) = rest.split_at(length);
            rest = later;
            taken
        };
        let mut plane = || {
            let mut plane = vec![0.0; stride * stride];
            for col in done..order {
                plane[col * stride + col..col * stride + order].copy_from_slice(next(order - col));
            }
            plane
        };
        let re = plane();
        let im = if self.complex { plane() } else { Vec::new() };
        // Every column done but the last of all has left an off-diagonal.
        let off = done.min(order.saturating_sub(1));
        let diagonal = next(done).to_vec();
        let off_re = next(off).to_vec();
        let off_im = next(if self.complex { off } else { 0 }).to_vec();
        let mut pending = Pending::none(stride, self.complex);
        pending.restore(rest);
        let mut run = ReductionRun {
            order,
            stride,
            re,
            im,
            done,
            pending,
            diagonal,
            off_re,
            off_im,
            scalars: vec![0.0; done],
            settled_trace: 0.0,
            settled_squares: 0.0,
        };
        for col in 0..done {
            run.settle(col);
        }
        run
    }
}
