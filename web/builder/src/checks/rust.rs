//! Format, lints, documentation and tests of the Rust packages.

use std::path::PathBuf;
use std::process::Command;

use anyhow::{bail, Context, Result};
use wasm_bindgen_cli_support::Bindgen;

use super::tally::{counted, whole, Tally};
use crate::console::{self, say};
use crate::layout::Layout;
use crate::wasm_target::{WasmTarget, TARGET};

fn cargo(layout: &Layout, arguments: &[&str]) -> Command {
    let program = std::env::var("CARGO").unwrap_or_else(|_| "cargo".to_owned());
    console::command_in(&layout.root, &program, arguments)
}

/// Every Rust file stands as rustfmt lays it out.
pub fn format(layout: &Layout) -> Result<Tally> {
    whole(&mut cargo(layout, &["fmt", "--all", "--check"]))
}

/// No lint speaks, natively and for the boundary that only wasm32 compiles.
pub fn clippy(layout: &Layout) -> Result<Tally> {
    let native = whole(&mut cargo(
        layout,
        &[
            "clippy",
            "--quiet",
            "--workspace",
            "--all-targets",
            "--",
            "-D",
            "warnings",
        ],
    ))?;
    let target = WasmTarget::find()?;
    if matches!(target, WasmTarget::Debian { .. }) {
        say("The boundary is not linted: Debian's compiler for wasm comes without clippy.");
        return Ok(native);
    }
    let mut boundary = target.cargo(layout, "clippy");
    boundary.args([
        "--quiet",
        "--package",
        "eigenledger",
        "--",
        "-D",
        "warnings",
    ]);
    Ok(native + whole(&mut boundary)?)
}

/// Every public item is documented and every link in the documentation leads
/// somewhere.
pub fn documentation(layout: &Layout) -> Result<Tally> {
    whole(
        cargo(layout, &["doc", "--quiet", "--workspace", "--no-deps"])
            .env("RUSTDOCFLAGS", "-D warnings"),
    )
}

/// The tests of the crate and of the cross-package checks, on this machine.
pub fn native_tests(layout: &Layout) -> Result<Tally> {
    counted(&mut cargo(
        layout,
        &[
            "test",
            "--workspace",
            "--exclude",
            "page-builder",
            "--no-fail-fast",
        ],
    ))
}

/// The builder's own tests, in the profile it is already compiled in.
pub fn builder_tests(layout: &Layout) -> Result<Tally> {
    counted(&mut cargo(
        layout,
        &[
            "test",
            "--quiet",
            "--profile",
            "builder",
            "--package",
            "page-builder",
        ],
    ))
}

/// The unit tests of the mathematics once more, as wasm in Node.
pub fn wasm_tests(layout: &Layout) -> Result<Tally> {
    let target = WasmTarget::find()?;
    let solver = wasm_tests_of("eigenledger-solver", layout, &target)?;
    Ok(solver + wasm_tests_of("eigenledger", layout, &target)?)
}

fn wasm_tests_of(package: &str, layout: &Layout, target: &WasmTarget) -> Result<Tally> {
    let compiled = compile_wasm_tests(package, layout, target)?;
    let folder = target.target_dir(layout).join("wasm-tests").join(package);
    Bindgen::new()
        .input_path(&compiled)
        .out_name("tests")
        .web(true)?
        .typescript(false)
        .generate(&folder)
        .context("the test module's glue could not be written")?;
    std::fs::write(folder.join("package.json"), "{ \"type\": \"module\" }\n")?;
    let glue = folder.join("tests.js");
    counted(&mut console::command_in(
        &layout.root,
        "node",
        &["tests/wasm/run.mjs", &glue.to_string_lossy()],
    ))
}

fn compile_wasm_tests(package: &str, layout: &Layout, target: &WasmTarget) -> Result<PathBuf> {
    let mut command = target.cargo(layout, "test");
    // The harness needs a compiler feature, which this opens for our crates.
    command.env("RUSTC_BOOTSTRAP", bootstrap(target)).args([
        "--quiet",
        "--no-run",
        "--package",
        package,
        "--lib",
        "--message-format",
        "json",
    ]);
    let output = command.stderr(std::process::Stdio::inherit()).output()?;
    if !output.status.success() {
        bail!("the tests of {package} do not compile for {TARGET}");
    }
    let messages = String::from_utf8_lossy(&output.stdout);
    executable_in(&messages).context("Cargo named no compiled test module")
}

const fn bootstrap(target: &WasmTarget) -> &'static str {
    match target {
        WasmTarget::Installed => "eigenledger,eigenledger_solver,eigenledger_wasm_harness",
        // Building the standard library needs it for every crate.
        WasmTarget::Debian { .. } => "1",
    }
}

/// The path in the last `"executable":"…"` of Cargo's messages. Nothing else
/// of them is needed, and paths with escapes in them are not expected.
fn executable_in(messages: &str) -> Option<PathBuf> {
    let (_, rest) = messages.rsplit_once("\"executable\":\"")?;
    let (path, _) = rest.split_once('"')?;
    Some(PathBuf::from(path))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_executable_is_found_among_messages() {
        let messages = "{\"reason\":\"compiler-artifact\",\"executable\":null}\n\
                        {\"reason\":\"compiler-artifact\",\"executable\":\"/a/b.wasm\",\"fresh\":true}\n\
                        {\"reason\":\"build-finished\"}";
        assert_eq!(executable_in(messages), Some(PathBuf::from("/a/b.wasm")));
        assert_eq!(executable_in("{\"executable\":null}"), None);
    }
}
