//! Runs a package's own tests as wasm: the same functions, from the same
//! source, one call each.
//!
//! The standard harness has no way to print, to take arguments or to survive a
//! failing test on wasm32-unknown-unknown. This one only keeps the list that
//! the compiler makes; the host asks for the names, runs the tests one by one,
//! and makes a fresh instance after one that trapped. Compiled for wasm32 and
//! for tests alone, with the compiler features `test` and, in the package under
//! test, `custom_test_frameworks`.

#![cfg(target_arch = "wasm32")]
#![feature(test)]

use std::cell::OnceCell;

use wasm_bindgen::prelude::*;

extern crate test;

use test::{ShouldPanic, TestDescAndFn, TestFn};

thread_local! {
    static TESTS: OnceCell<Vec<&'static TestDescAndFn>> = const { OnceCell::new() };
}

#[wasm_bindgen]
extern "C" {
    /// The host's function of this name takes the message of a failure.
    #[wasm_bindgen(js_name = harnessReport)]
    fn report(text: &str);
}

/// Takes the list of tests; the compiler's `main` calls it.
pub fn keep(tests: &[&'static TestDescAndFn]) {
    std::panic::set_hook(Box::new(|panic| report(&panic.to_string())));
    TESTS.with(|kept| {
        kept.get_or_init(|| tests.to_vec());
    });
}

fn test(index: usize) -> Option<&'static TestDescAndFn> {
    TESTS.with(|kept| kept.get()?.get(index).copied())
}

/// How many tests there are.
#[wasm_bindgen(js_name = harnessCount)]
pub fn count() -> usize {
    TESTS.with(|kept| kept.get().map_or(0, Vec::len))
}

/// The full name of a test.
#[wasm_bindgen(js_name = harnessName)]
pub fn name(index: usize) -> Option<String> {
    test(index).map(|test| test.desc.name.as_slice().to_owned())
}

/// What is expected of a test: `return`, `panic` or, for one that is not to be
/// run, `ignore`.
#[wasm_bindgen(js_name = harnessExpects)]
pub fn expects(index: usize) -> String {
    let expected = test(index).map(|test| match test.desc.should_panic {
        _ if test.desc.ignore => "ignore",
        ShouldPanic::No => "return",
        ShouldPanic::Yes | ShouldPanic::YesWithMessage(_) => "panic",
    });
    expected.unwrap_or("ignore").to_owned()
}

/// Runs a test; true when it returned without an error. A panic reports its
/// message and traps.
#[wasm_bindgen(js_name = harnessRun)]
pub fn run(index: usize) -> bool {
    let Some(TestFn::StaticTestFn(run)) = test(index).map(|test| &test.testfn) else {
        report("not a plain test function");
        return false;
    };
    run().map_err(|message| report(&message)).is_ok()
}
