//! Numbers: exact reals as typed, exact binary fractions, error-free
//! transformations and upper bounds.

pub mod dyadic;
#[cfg(test)]
mod eft_tests;
pub mod exact;
pub mod figure;
pub mod upper;

pub use dyadic::{Dyadic, Toward};
pub use eigenledger_solver::eft;
pub use exact::ExactReal;
pub use upper::Upper;
