//! `cargo page bench`: the table of speeds, our peers beside us in the same
//! module, page and run.

use std::fs;
use std::path::Path;

use anyhow::{Context, Result};
use wasm_bindgen_cli_support::Bindgen;

use crate::checks::{browser, outside};
use crate::console::{self, say};
use crate::layout::Layout;
use crate::page;
use crate::serve;
use crate::wasm_target::{WasmTarget, TARGET};

/// Scripts of the page that measures, and the page itself.
const PAGE_FILES: [&str; 3] = ["index.html", "solvers.js", "shipped.js"];

/// Prints the tables, and writes them as JSON and as a curve to
/// `target/bench`. With `keep`, a quiet run also replaces the README's curve.
pub fn run(layout: &Layout, keep: bool) -> Result<()> {
    page::build(layout)?;
    let tests = layout.root.join("tests");
    page::install_packages_in(&tests, "the benchmark")?;
    let folder = layout.target.join("bench/page");
    let sources = tests.join("peers/run");
    gather(layout, &sources, &folder)?;
    write_module(layout, &folder)?;
    let measuring = serve::start(&folder, 0)?;
    let site = serve::start(&layout.dist, 0)?;
    say("Measuring in headless Chromium; other work on this machine disturbs the figures.");
    let mut command = console::command_in(&layout.root, "node", &[]);
    command
        .arg(sources.join("bench.mjs"))
        .arg(layout.target.join("bench"))
        .env("CHROMIUM", browser::chromium()?)
        .env("PAGE_ADDRESS", &measuring.address)
        .env("SITE_ADDRESS", &site.address);
    if keep {
        command.arg(layout.root.join("www-examples/pictures/growth.svg"));
    }
    if let Some(python) = outside::existing_environment(layout) {
        command.env("PYTHON", python);
    }
    console::run(&mut command)
}

/// Puts the measuring page together: its scripts, the JavaScript peer, and the
/// module as it is shipped.
fn gather(layout: &Layout, sources: &Path, folder: &Path) -> Result<()> {
    let shipped = folder.join("shipped");
    fs::create_dir_all(&shipped)?;
    for name in PAGE_FILES {
        fs::copy(sources.join(name), folder.join(name))?;
    }
    for name in ["eigenledger.js", "eigenledger_bg.wasm"] {
        fs::copy(layout.generated.join(name), shipped.join(name))?;
    }
    let library = layout
        .root
        .join("tests/node_modules/ml-matrix/matrix.umd.js");
    fs::copy(library, folder.join("matrix.umd.js"))
        .context("the JavaScript library for comparison is not installed")?;
    Ok(())
}

fn write_module(layout: &Layout, folder: &Path) -> Result<()> {
    let target = WasmTarget::find()?;
    say("Compiling ourselves and our peers.");
    let mut command = target.cargo(layout, "build");
    command
        .args(["--quiet", "--release", "--manifest-path"])
        .arg(layout.root.join("tests/peers/Cargo.toml"));
    console::run(&mut command)?;
    let compiled = target
        .target_dir(layout)
        .join(TARGET)
        .join("release/eigenledger_peers.wasm");
    Bindgen::new()
        .input_path(&compiled)
        .out_name("peers")
        .web(true)?
        .typescript(false)
        .generate(folder)
        .context("the benchmark module's glue could not be written")
}
