//! Numbers: exact reals as typed, exact binary fractions, error-free
//! transformations and upper bounds.

pub mod dyadic;
pub mod eft;
pub mod exact;
pub mod figure;
pub mod upper;

pub use dyadic::{Dyadic, Toward};
pub use exact::ExactReal;
pub use upper::Upper;
