//! Stored states of a reduction, from which the ledger replays.

use super::pass::Split;
use super::run::ReductionRun;

impl ReductionRun {
    /// What is needed to go on from here: the trailing triangle, packed.
    pub(crate) fn checkpoint(&self) -> Checkpoint {
        let left = self.order - self.done;
        let packed = |plane: &[f64]| {
            let mut packed = Vec::new();
            if !plane.is_empty() {
                packed.reserve_exact(left * (left + 1) / 2);
                for col in self.done..self.order {
                    let column = &plane[col * self.stride..][col..self.order];
                    packed.extend_from_slice(column);
                }
            }
            packed
        };
        Checkpoint {
            order: self.order,
            re: packed(&self.re),
            im: packed(&self.im),
            pending: self.pending.clone(),
            diagonal: self.diagonal.clone(),
            off_re: self.off_re.clone(),
            off_im: self.off_im.clone(),
        }
    }
}

/// A state of a reduction, without the reflectors before it; see
/// [`ReductionRun::checkpoint`]. About n²/2 doubles at the start (n² complex).
#[derive(Clone, Debug)]
pub(crate) struct Checkpoint {
    order: usize,
    re: Vec<f64>,
    im: Vec<f64>,
    pending: Option<(Split, Split)>,
    diagonal: Vec<f64>,
    off_re: Vec<f64>,
    off_im: Vec<f64>,
}

impl Checkpoint {
    /// A run that goes on from here.
    pub fn resume(&self) -> ReductionRun {
        let (order, done) = (self.order, self.diagonal.len());
        let stride = order + order % 2;
        let complex = !self.im.is_empty();
        let unpacked = |packed: &[f64]| {
            let mut plane = vec![0.0; stride * stride];
            let mut rest = packed;
            for col in done..order {
                let (column, later) = rest.split_at(order - col);
                plane[col * stride + col..col * stride + order].copy_from_slice(column);
                rest = later;
            }
            plane
        };
        let mut run = ReductionRun {
            order,
            stride,
            re: unpacked(&self.re),
            im: if complex {
                unpacked(&self.im)
            } else {
                Vec::new()
            },
            done,
            pending: self.pending.clone(),
            spare: [Split::zeros(stride, complex), Split::zeros(stride, complex)],
            diagonal: self.diagonal.clone(),
            off_re: self.off_re.clone(),
            off_im: self.off_im.clone(),
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
        8 * (self.re.len() + self.im.len() + 7 * self.order)
    }
}
