//! The wasm module: compiled from the crate, then given its glue and types.

use std::fs;
use std::path::PathBuf;

use anyhow::{Context, Result};
use wasm_bindgen_cli_support::Bindgen;

use crate::console::{self, say};
use crate::layout::Layout;
use crate::wasm_target::{WasmTarget, TARGET};

/// Compiles the crate and writes glue, types and module where the page
/// imports them from.
pub fn build(layout: &Layout) -> Result<()> {
    let target = WasmTarget::find()?;
    say("Compiling the module.");
    let compiled = compile(layout, &target)?;
    say("Writing the module's glue and types.");
    fs::create_dir_all(&layout.generated)?;
    let mut bindgen = Bindgen::new();
    bindgen
        .input_path(&compiled)
        .web(true)?
        .typescript(true)
        .remove_name_section(true)
        .remove_producers_section(true)
        .generate(&layout.generated)
        .context("the module's glue could not be written")
}

fn compile(layout: &Layout, target: &WasmTarget) -> Result<PathBuf> {
    let mut command = target.cargo(layout, "rustc");
    command.args([
        "--quiet",
        "--package",
        "eigenledger",
        "--lib",
        "--crate-type",
        "cdylib",
        "--profile",
        "module",
    ]);
    console::run(&mut command)?;
    Ok(target
        .target_dir(layout)
        .join(TARGET)
        .join("module/eigenledger.wasm"))
}
