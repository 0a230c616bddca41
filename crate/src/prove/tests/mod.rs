//! Tests of the stage: approximations come from nalgebra or are made bad on
//! purpose; enclosures are held against typed eigenvalues or exact counts.

mod containment;
mod deep;
mod ranges;
mod rubbish;
mod rules;
pub(in crate::prove) mod support;
