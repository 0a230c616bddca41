//! The wasm module: compiled from the crate, then given its glue and types.

use std::fs;
use std::path::{Path, PathBuf};

use anyhow::{Context, Result};
use sha2::{Digest, Sha256};
use wasm_bindgen_cli_support::Bindgen;

use crate::console::{self, say};
use crate::layout::Layout;
use crate::wasm_target::{WasmTarget, TARGET};

/// Compiles the crate and writes glue, types and module where the page
/// imports them from. The page's packages must be installed: the optimiser is
/// one of them.
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
        .context("the module's glue could not be written")?;
    shrink(layout, &layout.generated.join("eigenledger_bg.wasm"))
}

/// Where sources stand on this machine, and what to call it: the workspace, and
/// each registry that Cargo keeps packages of.
fn source_folders(layout: &Layout) -> Vec<(PathBuf, &'static str)> {
    let cargo_home = std::env::var_os("CARGO_HOME").map(PathBuf::from);
    let home = std::env::var_os("HOME").map(|home| Path::new(&home).join(".cargo"));
    let registries = cargo_home
        .or(home)
        .and_then(|folder| fs::read_dir(folder.join("registry/src")).ok());
    let packages = registries
        .into_iter()
        .flatten()
        .filter_map(|entry| Some((entry.ok()?.path(), "packages")));
    let own = (layout.root.clone(), "eigenledger");
    packages.chain([own]).collect()
}

/// The extensions of WebAssembly that the compiler itself may use; the optimiser
/// must not bring in others.
const FEATURES: [&str; 7] = [
    "--enable-simd",
    "--enable-bulk-memory",
    "--enable-nontrapping-float-to-int",
    "--enable-sign-ext",
    "--enable-mutable-globals",
    "--enable-reference-types",
    "--enable-multivalue",
];

/// Makes the module a fifth smaller with the optimiser among the page's
/// packages. It reorders no arithmetic: only its `--fast-math` would. Half a
/// minute, so the result is kept under the digest of what it was made from.
fn shrink(layout: &Layout, module: &Path) -> Result<()> {
    let digest = Sha256::digest(fs::read(module)?);
    let name: String = digest.iter().map(|byte| format!("{byte:02x}")).collect();
    let folder = layout.target.join("shrunk");
    let shrunk = folder.join(format!("{name}.wasm"));
    if !shrunk.is_file() {
        say("Shrinking the module.");
        fs::create_dir_all(&folder)?;
        // Renamed when whole, so that an interrupted run leaves nothing believed.
        let unfinished = folder.join("unfinished.wasm");
        let mut optimiser = console::command_in(
            &layout.web,
            "node",
            &["node_modules/binaryen/bin/wasm-opt", "-Oz"],
        );
        optimiser
            .args(FEATURES)
            .arg(module)
            .arg("-o")
            .arg(&unfinished);
        console::run(&mut optimiser)?;
        fs::rename(&unfinished, &shrunk)?;
    }
    fs::copy(&shrunk, module)
        .map(drop)
        .context("the smaller module could not be put in place")
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
    // The same bytes wherever it is built: panics name their source, and that
    // must not be a folder of this machine.
    for (folder, name) in source_folders(layout) {
        let remap = format!("--remap-path-prefix={}={name}", folder.display());
        let setting = format!("target.{TARGET}.rustflags={:?}", [remap]);
        command.args(["--config", &setting]);
    }
    console::run(&mut command)?;
    Ok(target
        .target_dir(layout)
        .join(TARGET)
        .join("module/eigenledger.wasm"))
}
