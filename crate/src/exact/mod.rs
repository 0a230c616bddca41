//! The exact road: rational arithmetic from the entries to the eigenvalues.
//!
//! For rational input nothing on this road is rounded. The three-term
//! recurrence from e₁ gives the tridiagonal form (its diagonal and the
//! *squares* of its off-diagonals are rational, whatever signs a reflector
//! took), the form gives the characteristic polynomial, and the polynomial
//! gives counts, multiplicities, closed forms and isolating intervals that
//! can be refined at will. Fraction-free elimination gives the inertia of
//! A − σM, and with it proven counts, at larger orders.
//!
//! What is *not* offered here: closed forms beyond rational numbers and
//! quadratic surds, and speed at large order. Every public verb takes
//! [`Limits`] and a [`crate::control::Control`], and reports the largest
//! number it met.

pub mod closed;
pub mod gauss;
pub mod inertia;
mod integers;
mod limits;
pub mod polynomial;
pub mod root;
pub mod spectrum;
pub mod tridiagonal;

pub use closed::ClosedForm;
pub use gauss::Gauss;
pub use inertia::{count_between, inertia, Inertia};
pub use limits::{ExactError, Limits};
pub use polynomial::Polynomial;
pub use root::Isolated;
pub use spectrum::{spectrum, ExactEigenvalue, ExactSpectrum};
pub use tridiagonal::{tridiagonal, ExactTridiagonal};

#[cfg(test)]
mod tests;
