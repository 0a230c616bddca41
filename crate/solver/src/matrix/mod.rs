//! Storage and kernels.

pub(crate) mod counted;
pub mod dense;
pub mod kernels;
pub mod lanes;
pub mod norms;
mod packing;
pub mod passes;
pub(crate) mod short;
mod tile;

pub use dense::Dense;
