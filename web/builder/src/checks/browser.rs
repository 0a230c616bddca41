//! The page in a browser: served, and as the single file.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

use anyhow::{Context, Result};

use super::outside;
use super::tally::{counted, Tally};
use crate::console;
use crate::debian;
use crate::layout::Layout;
use crate::page;
use crate::serve;
use crate::single;

/// Names under which Chromium stands on the search path.
const CHROMIUM: [&str; 4] = ["chromium", "chromium-browser", "google-chrome", "chrome"];

/// The scenarios on the served page.
pub fn served(layout: &Layout) -> Result<Tally> {
    let server = serve::start(&layout.dist, 0)?;
    let mut command = scenarios(layout, "tests/browser/served")?;
    let examples = outside::compile_examples(layout)?;
    counted(
        command
            .env("PAGE_ADDRESS", &server.address)
            .env("EIGENLEDGER_EXAMPLES", examples),
    )
}

/// The scenarios on the single file, opened without a server.
pub fn single_file(layout: &Layout) -> Result<Tally> {
    let mut command = scenarios(layout, "tests/browser/single")?;
    let address = format!("file://{}", layout.dist.join(single::FILE_NAME).display());
    counted(command.env("PAGE_ADDRESS", address))
}

/// Node, told to run every scenario of a folder.
pub fn scenarios(layout: &Layout, folder: &str) -> Result<Command> {
    page::install_packages_in(&layout.root.join("tests"), "the browser tests")?;
    let chromium = chromium()?;
    let mut command = console::command_in(
        &layout.root,
        "node",
        &["--test", "--test-reporter=spec", "--test-concurrency=1"],
    );
    command
        .args(scenario_files(&layout.root.join(folder))?)
        .env("CHROMIUM", chromium)
        .env("PROJECT", &layout.root);
    Ok(command)
}

/// Node expands patterns itself only from version 21 on.
fn scenario_files(folder: &Path) -> Result<Vec<PathBuf>> {
    let mut files: Vec<PathBuf> = fs::read_dir(folder)
        .with_context(|| format!("{} is missing", folder.display()))?
        .filter_map(|entry| Some(entry.ok()?.path()))
        .filter(|path| path.to_string_lossy().ends_with(".test.mjs"))
        .collect();
    files.sort();
    Ok(files)
}

/// Chromium, installed first where that is allowed.
pub fn chromium() -> Result<PathBuf> {
    let found = || {
        let named = std::env::var_os("CHROMIUM").map(PathBuf::from);
        named.or_else(|| CHROMIUM.iter().find_map(|name| console::find_program(name)))
    };
    if let Some(path) = found() {
        return Ok(path);
    }
    debian::install(&["chromium"], "Chromium for the browser tests")?;
    found().context(
        "Chromium was installed, but stands nowhere on the search path; set CHROMIUM to its path",
    )
}
