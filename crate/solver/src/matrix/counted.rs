//! Operations of the innermost loops, counted in tests: a guard against lost
//! blocking or a slower road, which times on a shared machine cannot be.
//!
//! Counted are real additions and multiplications where work of order n³ is
//! done: tiles of products (padding included), columns of the reduction's
//! pass, rotations of vectors. Outside tests the calls compile to nothing.

#[cfg(test)]
use std::cell::Cell;

#[cfg(test)]
thread_local! {
    static OPERATIONS: Cell<u64> = const { Cell::new(0) };
}

/// Adds to the count.
#[cfg(test)]
pub(crate) fn count(operations: usize) {
    OPERATIONS.set(OPERATIONS.get() + operations as u64);
}

/// Nothing is counted outside tests.
#[cfg(not(test))]
#[inline(always)]
pub(crate) fn count(_: usize) {}

/// The operations of one act, beside what it returns.
#[cfg(test)]
pub(crate) fn counted<T>(act: impl FnOnce() -> T) -> (T, f64) {
    let before = OPERATIONS.get();
    let result = act();
    (result, (OPERATIONS.get() - before) as f64)
}
