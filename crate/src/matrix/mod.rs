//! Storage and kernels.

pub mod dense;
pub mod exact;

pub use dense::Dense;
pub use exact::ExactMatrix;
