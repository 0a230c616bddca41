//! Matrices of exact cells, beside the solver's matrices of doubles.

pub mod exact;
#[cfg(test)]
pub(crate) mod published;

pub use eigenledger_solver::matrix::*;
pub use exact::ExactMatrix;
