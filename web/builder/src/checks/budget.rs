//! The bytes a first visit loads: they are stable where times are not, so they
//! are what is checked.

use std::fs;
use std::path::Path;

use anyhow::{bail, Result};

use super::tally::Tally;
use crate::layout::Layout;
use crate::serve;
use crate::single;

/// All that a first visit loads, compressed, in bytes.
const PAGE_BUDGET: u64 = 500_000;
/// The module alone, compressed, in bytes.
const MODULE_BUDGET: u64 = 250_000;

/// Measures the served files as gzip sends them. What is kept for offline use
/// is the same files again; its script is counted too.
pub fn check(layout: &Layout) -> Result<Tally> {
    let mut files = Vec::new();
    collect(&layout.dist, &mut files)?;
    let is_module = |name: &str| name.ends_with(".wasm");
    let module: u64 = files
        .iter()
        .filter(|(name, _)| is_module(name))
        .map(|(_, bytes)| bytes)
        .sum();
    let all: u64 = files.iter().map(|(_, bytes)| bytes).sum();
    for (name, bytes) in &files {
        println!("  {bytes:>8} {name}");
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
    })
}

/// Every served file with its size as it is sent.
fn collect(folder: &Path, files: &mut Vec<(String, u64)>) -> Result<()> {
    let mut entries: Vec<_> = fs::read_dir(folder)?.collect::<Result<_, _>>()?;
    entries.sort_by_key(fs::DirEntry::file_name);
    for entry in entries {
        let path = entry.path();
        let name = entry.file_name().to_string_lossy().into_owned();
        if path.is_dir() {
            collect(&path, files)?;
        } else if !name.ends_with(".gz") && name != single::FILE_NAME {
            let compressed =
                fs::metadata(serve::gzip_of(&path)).or_else(|_| fs::metadata(&path))?;
            files.push((name, compressed.len()));
        }
    }
    Ok(())
}
