//! The bytes a first visit loads: they are stable where times are not, so they
//! are what is checked.

use anyhow::{bail, Result};

use super::tally::Tally;
use crate::compressed;
use crate::layout::Layout;

/// All that a first visit loads, compressed, in bytes: what it weighs today and
/// 3 % more, so that it cannot grow unseen but another compiler may differ. The aim is 500 kB.
const PAGE_BUDGET: u64 = 553_000;
/// The module alone, compressed, in bytes: likewise. The aim is 250 kB.
const MODULE_BUDGET: u64 = 419_000;

/// Measures the served files as they are sent. The script that keeps them for
/// offline use is counted too.
pub fn check(layout: &Layout) -> Result<Tally> {
    let (mut module, mut all) = (0, 0);
    for path in compressed::served_files(&layout.dist)? {
        let bytes = compressed::bytes_sent(&path)?;
        println!(
            "  {bytes:>8} {}",
            path.strip_prefix(&layout.dist)?.display()
        );
        all += bytes;
        if path
            .extension()
            .is_some_and(|extension| extension == "wasm")
        {
            module += bytes;
        }
    }
    println!("  {module:>8} of {MODULE_BUDGET} bytes: the module");
    println!("  {all:>8} of {PAGE_BUDGET} bytes: everything served");
    if module == 0 {
        bail!("no module stands in {}", layout.dist.display());
    }
    let verdicts = [module < MODULE_BUDGET, all < PAGE_BUDGET];
    let passed = verdicts.iter().filter(|within| **within).count();
    Ok(Tally {
        passed,
        failed: verdicts.len() - passed,
        ..Tally::default()
    })
}
