//! Shared helpers of the cross-package checks.
