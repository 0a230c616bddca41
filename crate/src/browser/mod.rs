//! The wasm boundary: conversions only. No mathematics and no rule for
//! printing numbers lives here.
//!
//! The page's worker holds one [`Workbench`]. Every method takes and returns
//! plain data whose TypeScript types are generated from the Rust ones. A long
//! call is cancelled by ending the worker, so no method has to hear a cancel.

pub mod document;
pub mod reading;

use wasm_bindgen::prelude::*;

/// What the worker holds: the problem last read and what was found of it.
#[wasm_bindgen]
#[derive(Default)]
pub struct Workbench {}

#[wasm_bindgen]
impl Workbench {
    /// An empty workbench. Panics are reported on the console from here on.
    #[wasm_bindgen(constructor)]
    pub fn new() -> Self {
        console_error_panic_hook::set_once();
        Self::default()
    }
}
