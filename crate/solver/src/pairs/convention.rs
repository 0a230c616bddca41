//! The phase convention of vectors; see the module above.

use crate::matrix::norms::{largest, length};
use crate::matrix::Dense;

/// Moduli within this factor of the largest one count as tied with it. Far
/// above the rounding of a vector, far below a difference worth seeing.
const TIE: f64 = 1.0 - 1.0 / (1 << 20) as f64;

/// Turns every column so that its first component of largest modulus is real
/// and positive. Cost: O(n²).
pub(super) fn fix_phases(vectors: &mut Dense) {
    let rows = vectors.rows();
    if rows == 0 {
        return;
    }
    let columns = vectors.re.as_mut_slice().chunks_exact_mut(rows);
    match &mut vectors.im {
        None => columns.for_each(fix_real),
        Some(im) => columns
            .zip(im.as_mut_slice().chunks_exact_mut(rows))
            .for_each(|(re, im)| fix_complex(re, im)),
    }
}

fn fix_real(column: &mut [f64]) {
    let largest = largest(column.iter());
    let pivot = column.iter().find(|x| x.abs() >= largest * TIE);
    if pivot.is_some_and(|x| *x < 0.0) {
        column.iter_mut().for_each(|x| *x = -*x);
    }
}

fn fix_complex(re: &mut [f64], im: &mut [f64]) {
    let squares = || re.iter().zip(im.iter()).map(|(x, y)| x * x + y * y);
    let largest = squares().fold(0.0, |largest, x| if x > largest { x } else { largest });
    let Some(at) = squares().position(|square| square >= largest * TIE * TIE) else {
        return;
    };
    let modulus = length(re[at], im[at]);
    if modulus == 0.0 {
        return;
    }
    let (c, s) = (re[at] / modulus, im[at] / modulus);
    for (x, y) in re.iter_mut().zip(im.iter_mut()) {
        (*x, *y) = (*x * c + *y * s, *y * c - *x * s);
    }
    (re[at], im[at]) = (modulus, 0.0);
}
