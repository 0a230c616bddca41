//! Back-transformation: vectors of T to vectors of the problem.
//!
//! Notation: Y = Q D Z; reflectors in groups H₁…H_b = I − V F Vᴴ with F upper
//! triangular (compact WY form: Schreiber and Van Loan, SIAM J. Sci. Stat.
//! Comput. 10, 1989), so that nearly all work is in matrix products.

use crate::matrix::kernels::{
    accumulate_split, Operand, Orientation, Packing, Shape, SplitTarget, Update,
};
use crate::matrix::Dense;
use crate::reduce::{Reduction, Reflectors};
use nalgebra::DMatrix;

/// Reflectors in a group.
const GROUP: usize = 32;

/// Y from Z. Cost: 2·n³ operations real, 8·n³ complex.
pub(super) fn transform(reduction: &Reduction, basis: DMatrix<f64>) -> Dense {
    let order = reduction.order();
    let mut vectors = with_phases(basis, &reduction.phases);
    let reflectors = &reduction.reflectors;
    let count = order.saturating_sub(2);
    let mut room = Room::default();
    for start in (0..count).step_by(GROUP).rev() {
        let end = count.min(start + GROUP);
        if reflectors.scalars[start..end]
            .iter()
            .any(|scalar| *scalar != 0.0)
        {
            apply_group(reflectors, order, start, end, &mut vectors, &mut room);
        }
    }
    vectors
}

fn with_phases(basis: DMatrix<f64>, phases: &[(f64, f64)]) -> Dense {
    if phases.is_empty() {
        return Dense::real(basis);
    }
    let order = basis.nrows();
    let (mut re, mut im) = (basis.clone(), basis);
    for (re, im) in re
        .as_mut_slice()
        .chunks_exact_mut(order.max(1))
        .zip(im.as_mut_slice().chunks_exact_mut(order.max(1)))
    {
        for (row, phase) in phases.iter().enumerate() {
            re[row] *= phase.0;
            im[row] *= phase.1;
        }
    }
    Dense::complex(re, im)
}

/// A block of reflectors' vectors and what is computed with it, by planes.
#[derive(Default)]
struct Room {
    v: [Vec<f64>; 2],
    factor: [Vec<f64>; 2],
    image: [Vec<f64>; 2],
    turned: [Vec<f64>; 2],
    packing: Packing,
}

/// X ← (I − V F Vᴴ) X on rows start+1...
fn apply_group(
    reflectors: &Reflectors,
    order: usize,
    start: usize,
    end: usize,
    vectors: &mut Dense,
    room: &mut Room,
) {
    let width = end - start;
    let top = start + 1;
    let rows = order - top;
    let cols = vectors.cols();
    let complex = vectors.is_complex();
    gather(reflectors, start, end, rows, room);
    triangular_factor(&reflectors.scalars[start..end], rows, complex, room);
    let planes = if complex { 2 } else { 1 };
    for plane in 0..planes {
        room.image[plane].clear();
        room.image[plane].resize(width * cols, 0.0);
        room.turned[plane].clear();
        room.turned[plane].resize(width * cols, 0.0);
    }
    let Room {
        v,
        factor,
        image,
        turned,
        packing,
    } = room;
    let (x_re, x_im) = (
        &mut vectors.re.as_mut_slice()[top..],
        vectors
            .im
            .as_mut()
            .map_or(&mut [][..], |im| &mut im.as_mut_slice()[top..]),
    );
    // image = Vᴴ X, turned = F image, X ← X − V turned
    accumulate_split(
        Shape {
            rows: width,
            cols,
            inner: rows,
        },
        Update::Add,
        (operand(v, rows), Orientation::Transposed),
        Operand {
            re: x_re,
            im: x_im,
            stride: order,
        },
        &mut target(image, width),
        packing,
    );
    accumulate_split(
        Shape {
            rows: width,
            cols,
            inner: width,
        },
        Update::Add,
        (operand(factor, width), Orientation::AsStored),
        operand(image, width),
        &mut target(turned, width),
        packing,
    );
    accumulate_split(
        Shape {
            rows,
            cols,
            inner: width,
        },
        Update::Subtract,
        (operand(v, rows), Orientation::AsStored),
        operand(turned, width),
        &mut SplitTarget {
            re: x_re,
            im: x_im,
            stride: order,
        },
        packing,
    );
}

fn operand(planes: &[Vec<f64>; 2], stride: usize) -> Operand<'_> {
    Operand {
        re: &planes[0],
        im: &planes[1],
        stride,
    }
}

fn target(planes: &mut [Vec<f64>; 2], stride: usize) -> SplitTarget<'_> {
    let [re, im] = planes;
    SplitTarget { re, im, stride }
}

/// V as a dense trapezoid: zero above each leading 1.
fn gather(reflectors: &Reflectors, start: usize, end: usize, rows: usize, room: &mut Room) {
    for (plane, source) in [&reflectors.re, &reflectors.im].into_iter().enumerate() {
        room.v[plane].clear();
        if source.is_empty() {
            continue;
        }
        room.v[plane].resize(rows * (end - start), 0.0);
        for (k, column) in room.v[plane].chunks_exact_mut(rows).enumerate() {
            let from = (start + k) * reflectors.stride + start + 1 + k;
            column[k..].copy_from_slice(&source[from..from + rows - k]);
        }
    }
}

/// F: column k is τₖ eₖ − τₖ F Vᴴ vₖ over the columns before it.
fn triangular_factor(scalars: &[f64], rows: usize, complex: bool, room: &mut Room) {
    let width = scalars.len();
    let planes = if complex { 2 } else { 1 };
    for plane in 0..planes {
        room.factor[plane].clear();
        room.factor[plane].resize(width * width, 0.0);
    }
    if !complex {
        room.factor[1].clear();
    }
    let mut inner = vec![(0.0, 0.0); width];
    for k in 0..width {
        let tau = scalars[k];
        for j in 0..k {
            inner[j] = inner_product(&room.v, rows, j, k);
        }
        for i in 0..k {
            let (mut re, mut im) = (0.0, 0.0);
            for j in i..k {
                let f_re = room.factor[0][i + j * width];
                let f_im = if complex {
                    room.factor[1][i + j * width]
                } else {
                    0.0
                };
                re += f_re * inner[j].0 - f_im * inner[j].1;
                im += f_re * inner[j].1 + f_im * inner[j].0;
            }
            room.factor[0][i + k * width] = -tau * re;
            if complex {
                room.factor[1][i + k * width] = -tau * im;
            }
        }
        room.factor[0][k + k * width] = tau;
    }
}

/// vⱼᴴ vₖ for j < k, where both are non-zero.
fn inner_product(v: &[Vec<f64>; 2], rows: usize, j: usize, k: usize) -> (f64, f64) {
    use crate::reduce::dot;
    let part = |plane: usize, column: usize| &v[plane][column * rows + k..(column + 1) * rows];
    let re = dot(part(0, j), part(0, k));
    if v[1].is_empty() {
        return (re, 0.0);
    }
    (
        re + dot(part(1, j), part(1, k)),
        dot(part(0, j), part(1, k)) - dot(part(1, j), part(0, k)),
    )
}
