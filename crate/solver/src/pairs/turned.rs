//! Vectors of small problems: Q D is formed outright, and every rotation of the
//! iteration turns two of its columns as soon as it is known.
//!
//! The numbers of a rotation come out of a chain through a square root and a
//! division, during which the processor has little else to do; up to about
//! [`LARGEST`] rows it turns the columns in that time. The basis is a product of
//! reflectors and rotations, so it is orthogonal to rounding whatever the
//! spectrum, and nothing has to be checked.
//!
//! Notation: H = I − τ v vᴴ a reflector, Q = H₁ H₂ …, D the phases, q a column.

use crate::iterate::Rotation;
use crate::matrix::lanes::Lanes;
use crate::matrix::{short, Dense};
use crate::reduce::{dot, Reduction, Reflectors};
use nalgebra::DMatrix;

/// Largest order that is solved this way; beyond it the roads of O(n²) for the
/// vectors of T, with Q applied in groups, are faster.
pub(crate) const LARGEST: usize = 60;

/// A basis in the making. Column-major; a column holds its real parts, padded
/// to an even number, then its imaginary parts likewise.
pub(crate) struct Basis {
    numbers: Vec<f64>,
    order: usize,
    height: usize,
    stride: usize,
}

impl Basis {
    /// Q D. Cost: 4/3·n³ operations real, 16/3·n³ complex.
    pub fn of(reduction: &Reduction) -> Self {
        let order = reduction.order();
        let height = order + order % 2;
        let complex = !reduction.phases.is_empty();
        let stride = if complex { 2 * height } else { height };
        let mut basis = Self {
            numbers: vec![0.0; stride * order],
            order,
            height,
            stride,
        };
        for k in 0..order {
            basis.numbers[k * stride + k] = 1.0;
        }
        for k in (0..order.saturating_sub(2)).rev() {
            basis.reflect(&reduction.reflectors, k, complex);
        }
        for (k, phase) in reduction.phases.iter().enumerate() {
            let (re, im) = basis.column(k);
            for (re, im) in re.iter_mut().zip(im) {
                (*re, *im) = (*re * phase.0 - *im * phase.1, *re * phase.1 + *im * phase.0);
            }
        }
        basis
    }

    fn column(&mut self, k: usize) -> (&mut [f64], &mut [f64]) {
        self.numbers[k * self.stride..(k + 1) * self.stride].split_at_mut(self.height)
    }

    /// q ← H q for the columns that reflector `k` reaches, with those before it
    /// still missing: the first of them is a unit vector.
    fn reflect(&mut self, reflectors: &Reflectors, k: usize, complex: bool) {
        let tau = reflectors.scalars[k];
        if tau == 0.0 {
            return;
        }
        let rows = k + 1..self.order;
        let source = k * reflectors.stride + rows.start..k * reflectors.stride + rows.end;
        let v_re = &reflectors.re[source.clone()];
        let v_im = if complex { &reflectors.im[source] } else { &[] };
        for col in rows.clone() {
            let (re, im) = self.column(col);
            let re = &mut re[rows.clone()];
            if complex {
                let im = &mut im[rows.clone()];
                let s_re = tau * (dot(v_re, re) + dot(v_im, im));
                let s_im = tau * (dot(v_re, im) - dot(v_im, re));
                for i in 0..re.len() {
                    re[i] -= s_re * v_re[i] - s_im * v_im[i];
                    im[i] -= s_re * v_im[i] + s_im * v_re[i];
                }
            } else {
                let s = tau * dot(v_re, re);
                re.iter_mut().zip(v_re).for_each(|(q, v)| *q -= s * v);
            }
        }
    }

    /// Columns k and k + 1 turned by a rotation. Cost: 6·n operations, 12·n complex.
    #[inline(always)]
    pub fn turn(&mut self, k: usize, rotation: Rotation) {
        let columns = &mut self.numbers[k * self.stride..(k + 2) * self.stride];
        let (left, right) = columns.split_at_mut(self.stride);
        let (left, right) = (left.as_chunks_mut::<2>().0, right.as_chunks_mut::<2>().0);
        let (c, s) = (Lanes::splat(rotation.cosine), Lanes::splat(rotation.sine));
        for (left, right) in left.iter_mut().zip(right) {
            let (x, y) = (Lanes::load(left), Lanes::load(right));
            (x * c + y * s).store(left);
            (y * c - x * s).store(right);
        }
    }

    /// The columns in the order given, as the other roads hand them over.
    pub fn into_vectors(self, positions: &[usize]) -> Dense {
        let plane = |start: usize| {
            let mut entries = Vec::with_capacity(self.order * self.order);
            for position in positions {
                let at = position * self.stride + start;
                short::append(&mut entries, &self.numbers[at..at + self.order]);
            }
            DMatrix::from_vec(self.order, self.order, entries)
        };
        if self.stride == self.height {
            Dense::real(plane(0))
        } else {
            Dense::complex(plane(0), plane(self.height))
        }
    }
}
