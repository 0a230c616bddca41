//! `cargo page bench`: the table of speeds, our peers beside us in the same
//! module, page and run.

use std::fs;

use anyhow::{Context, Result};
use wasm_bindgen_cli_support::Bindgen;

use crate::checks::browser;
use crate::console::{self, say};
use crate::layout::Layout;
use crate::page;
use crate::serve;
use crate::wasm_target::{WasmTarget, TARGET};

/// Prints the table, and writes it as JSON and as a curve to `target/bench`.
pub fn run(layout: &Layout) -> Result<()> {
    let tests = layout.root.join("tests");
    page::install_packages_in(&tests, "the benchmark")?;
    let folder = layout.target.join("bench/page");
    fs::create_dir_all(&folder)?;
    write_module(layout, &folder)?;
    let sources = tests.join("peers/run");
    for name in ["index.html", "measure.js"] {
        fs::copy(sources.join(name), folder.join(name))?;
    }
    fs::copy(
        tests.join("node_modules/ml-matrix/matrix.umd.js"),
        folder.join("matrix.umd.js"),
    )
    .context("the JavaScript library for comparison is not installed")?;
    let server = serve::start(&folder, 0)?;
    say("Measuring in headless Chromium; other work on this machine disturbs the figures.");
    let script = sources.join("bench.mjs");
    let output = layout.target.join("bench");
    let mut command = console::command_in(&layout.root, "node", &[]);
    command
        .args([&script, &output])
        .env("CHROMIUM", browser::chromium()?)
        .env("PAGE_ADDRESS", &server.address);
    console::run(&mut command)
}

fn write_module(layout: &Layout, folder: &std::path::Path) -> Result<()> {
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
