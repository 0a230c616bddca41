//! Numbers: exact reals as typed, and (later stages) double-double and
//! outward-rounded intervals.

pub mod exact;

pub use exact::ExactReal;
