//! Stored states of a reduction, from which the ledger replays.

use super::pending::Pending;
use super::run::ReductionRun;

impl ReductionRun {
    /// What is needed to go on from here: the trailing triangle, packed, the
    /// band before it and the pending pair.
    pub(crate) fn checkpoint(&self) -> Checkpoint {
        let left = self.order - self.done;
        let (band, pending) = (self.band_planes(), self.pending.stored());
        let triangles = self.planes() * (left * (left + 1) / 2);
        let length = triangles + band.iter().map(|plane| plane.len()).sum::<usize>();
        let mut numbers = Vec::with_capacity(length + pending.len());
        for plane in [&self.re, &self.im] {
            if !plane.is_empty() {
                for col in self.done..self.order {
                    numbers.extend_from_slice(&plane[col * self.stride..][col..self.order]);
                }
            }
        }
        band.iter()
            .for_each(|plane| numbers.extend_from_slice(plane));
        numbers.extend_from_slice(pending);
        Checkpoint {
            order: self.order,
            done: self.done,
            complex: self.is_complex(),
            numbers,
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
    /// The triangle by planes, the diagonal, the off-diagonals by planes, and
    /// the pending pair if there is one.
    numbers: Vec<f64>,
}

impl Checkpoint {
    /// A run that goes on from here.
    pub fn resume(&self) -> ReductionRun {
        let (order, done) = (self.order, self.done);
        let stride = order + order % 2;
        let mut rest = &self.numbers[..];
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

    /// Bytes held.
    pub fn approx_bytes(&self) -> usize {
        8 * self.numbers.len()
    }
}
