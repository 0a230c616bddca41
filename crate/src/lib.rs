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
//! The three stages from doubles to eigenpairs, with their ledger, are the package
//! `eigenledger-solver`, handed on here under their own names.
//!
//! What is *not* proved: the model behind the matrix, and the conformance of
//! the processor and compiler to IEEE 754 binary64 with round to nearest.

// As wasm, the tests run under a harness of our own (its package says why).
#![cfg_attr(
    all(test, target_arch = "wasm32"),
    feature(custom_test_frameworks),
    test_runner(eigenledger_wasm_harness::keep)
)]

pub use eigenledger_solver::{control, iterate, ledger, pairs, reduce, residuals, solve};

pub mod claim;
pub mod document;
pub mod entry;
pub mod exact;
pub mod fingerprint;
pub mod link;
pub mod matrix;
pub mod num;
pub mod problem;
pub mod prove;
pub mod report;
pub mod sensitivity;

#[cfg(target_arch = "wasm32")]
pub mod browser;
