//! Eigenvalues of small dense Hermitian matrices: the working, and a proof.
//!
//! The crate is a street of stages. Data flows one way, and each stage has one
//! public verb, one input type and one output type:
//!
//! ```text
//! text ──entry──▶ Entry ──problem──▶ Problem ──reduce──▶ Reduction ──iterate──▶ Iteration ──pairs──▶ Approximation
//!                                       │                                                               │
//!                                       └────────────────────────── prove ◀─────────────────────────────┘
//!                                                                     │
//!                                           claim ◀───────────────────┤───────────────────▶ report, link
//! ```
//!
//! What is *not* proved: the model behind the matrix, and the conformance of
//! the processor and compiler to IEEE 754 binary64 with round to nearest.

// As wasm, the tests run under a harness of our own (`wasm_harness` says why).
#![cfg_attr(
    all(test, target_arch = "wasm32"),
    feature(custom_test_frameworks, test),
    test_runner(crate::wasm_harness::keep)
)]

pub mod claim;
pub mod control;
pub mod document;
pub mod entry;
pub mod exact;
pub mod fingerprint;
pub mod iterate;
pub mod ledger;
pub mod link;
pub mod matrix;
pub mod num;
pub mod pairs;
pub mod problem;
pub mod prove;
pub mod reduce;
pub mod report;
pub mod residuals;
pub mod sensitivity;
pub mod solve;

#[cfg(target_arch = "wasm32")]
pub mod browser;

#[cfg(all(test, target_arch = "wasm32"))]
mod wasm_harness;
