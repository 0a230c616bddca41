//! The page: its packages, its bundle, and the single file.

use std::fs;
use std::path::Path;

use anyhow::{bail, Context, Result};

use crate::console::{self, say};
use crate::layout::Layout;
use crate::module;
use crate::serve;
use crate::single;

/// Builds everything that is served, and the single file.
pub fn build(layout: &Layout) -> Result<()> {
    module::build(layout)?;
    require_node()?;
    install_packages_in(&layout.web, "the page")?;
    say("Bundling the page.");
    console::run(&mut console::command_in(
        &layout.web,
        "npm",
        &["run", "--silent", "build"],
    ))?;
    single::assemble(layout)?;
    let served = serve::compress_folder(&layout.dist)?;
    say(&format!(
        "dist/ holds {:.0} kB, compressed.",
        served as f64 / 1000.0
    ));
    Ok(())
}

/// Brings `node_modules` of a folder in step with its lock file, when it is
/// not.
pub fn install_packages_in(folder: &Path, purpose: &str) -> Result<()> {
    let lock_path = folder.join("package-lock.json");
    let lock =
        fs::read(&lock_path).with_context(|| format!("{} is missing", lock_path.display()))?;
    let stamp = folder.join("node_modules/.installed-from-lock");
    if fs::read(&stamp).is_ok_and(|installed| installed == lock) {
        return Ok(());
    }
    say(&format!("Installing the packages of {purpose}: npm ci"));
    console::run(&mut console::command_in(
        folder,
        "npm",
        &["ci", "--no-progress", "--loglevel=error"],
    ))?;
    fs::write(&stamp, lock).context("node_modules could not be marked as installed")
}

fn require_node() -> Result<()> {
    let Some(version) = console::output("node", &["--version"]) else {
        bail!("Node 20.19 or later is missing: install it (on Debian `apt-get install nodejs npm` where that is new enough), then try again.");
    };
    let mut parts = version
        .trim_start_matches('v')
        .split('.')
        .map(|part| part.parse::<u32>().unwrap_or(0));
    let found = (parts.next().unwrap_or(0), parts.next().unwrap_or(0));
    if found < (20, 19) {
        bail!("Node {version} is too old: the page's bundler needs 20.19 or later.");
    }
    Ok(())
}
