//! One elementary reflector.
//!
//! Notation: H = I − τ v vᴴ with v₁ = 1 and τ real, so H is Hermitian, unitary
//! and its own inverse; H x = β e₁ with |β| = ‖x‖.

use crate::matrix::norms::{length, norm2};

/// Scalar and image of a reflector; its vector replaces the column it came from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Formed {
    /// τ = 2/‖v‖², or 0 when there is nothing to zero and H = I.
    pub scalar: f64,
    /// Real part of β.
    pub image_re: f64,
    /// Imaginary part of β.
    pub image_im: f64,
}

/// Forms H from x and overwrites x by v. `im` is empty for real x.
///
/// β takes the phase of −x₁, so v is formed without cancellation
/// (Householder 1958; Wilkinson, "The Algebraic Eigenvalue Problem", §5.29).
/// For complex x the scalar stays real and β complex: a diagonal of phases
/// makes the off-diagonals real afterwards.
pub(crate) fn form(re: &mut [f64], im: &mut [f64]) -> Formed {
    let (first_re, first_im) = (re[0], im.first().copied().unwrap_or(0.0));
    let nothing_to_zero = re[1..].iter().all(|x| *x == 0.0) && im.iter().skip(1).all(|x| *x == 0.0);
    if nothing_to_zero {
        re[0] = 1.0;
        if let Some(first) = im.first_mut() {
            *first = 0.0;
        }
        return Formed {
            scalar: 0.0,
            image_re: first_re,
            image_im: first_im,
        };
    }
    let norm = norm2(re.iter().chain(im.iter()));
    if im.is_empty() {
        let image_re = if first_re < 0.0 { norm } else { -norm };
        let pivot = first_re - image_re;
        re[0] = 1.0;
        re[1..].iter_mut().for_each(|x| *x /= pivot);
        return Formed {
            scalar: pivot.abs() / norm,
            image_re,
            image_im: 0.0,
        };
    }
    let modulus = length(first_re, first_im);
    // Unit phase of x₁; 1 when x₁ = 0.
    let (cosine, sine) = if modulus == 0.0 {
        (1.0, 0.0)
    } else {
        (first_re / modulus, first_im / modulus)
    };
    let pivot = modulus + norm;
    re[0] = 1.0;
    im[0] = 0.0;
    for (x_re, x_im) in re[1..].iter_mut().zip(&mut im[1..]) {
        let turned_re = (*x_re * cosine + *x_im * sine) / pivot;
        let turned_im = (*x_im * cosine - *x_re * sine) / pivot;
        (*x_re, *x_im) = (turned_re, turned_im);
    }
    Formed {
        scalar: pivot / norm,
        image_re: -cosine * norm,
        image_im: -sine * norm,
    }
}
