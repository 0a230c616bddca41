//! The plain road of Eigenledger: from doubles to approximate eigenpairs, every
//! act on the matrix entered in a ledger. Nothing here is proved.
//!
//! ```text
//! Rounded ──reduce──▶ Reduction ──iterate──▶ Iteration ──pairs──▶ Approximation
//!              └──────────────┴── ledger ──┴────────────┘
//! ```
//!
//! It is a package of its own for two reasons. Its loops are compiled for speed
//! and the rest of the project for size; and what proves a result cannot be
//! mixed up with what computed it.

// As wasm, the tests run under a harness of our own (its package says why).
#![cfg_attr(
    all(test, target_arch = "wasm32"),
    feature(custom_test_frameworks),
    test_runner(eigenledger_wasm_harness::keep)
)]

pub mod control;
pub mod eft;
pub mod iterate;
pub mod ledger;
pub mod matrix;
pub mod pairs;
pub mod reduce;
pub mod residuals;
pub mod rounded;
pub mod solve;
