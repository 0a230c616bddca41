//! Storage and kernels.

pub mod dense;
pub mod kernels;
pub mod lanes;
pub mod norms;
mod packing;
mod tile;

pub use dense::Dense;
