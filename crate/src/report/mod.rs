//! What the page, the files and the sheet say: view models, exports, the
//! residual report.
//!
//! Every number in a view model is text already, by the rules of [`decimal`];
//! the few plain doubles beside them place things in pictures and are never
//! printed.

pub mod claims;
pub mod decimal;
pub mod exact_view;
pub mod export;
pub mod map;
pub mod proof_view;
pub mod run;
pub mod sheet;
pub mod solution;
pub mod spectrum;
pub mod tolerances;
pub mod values;
pub mod vector;
pub mod working;
