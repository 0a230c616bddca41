//! A short coverage-guided run of every fuzz target, from the kept corpus.
//!
//! `tests/fuzz` has no need of a nightly compiler: the coverage counters that
//! libFuzzer reads are code generation options of the stable one, and the code
//! under test is safe Rust, so that no sanitizer is wanted beside them.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

use anyhow::{bail, Context, Result};

use super::tally::Tally;
use crate::console::{self, say};
use crate::debian;
use crate::layout::Layout;

/// What puts libFuzzer's counters in.
const INSTRUMENTED: &str = "-Cpasses=sancov-module \
    -Cllvm-args=-sanitizer-coverage-level=4 \
    -Cllvm-args=-sanitizer-coverage-inline-8bit-counters \
    -Cllvm-args=-sanitizer-coverage-pc-table \
    -Cllvm-args=-sanitizer-coverage-trace-compares \
    -Cdebug-assertions --cfg fuzzing";

/// Inputs a target is given: a number, not a time, so that every machine runs
/// the same ones.
const RUNS: &str = "-runs=4000";

/// Runs every target; each counts as one check. What a target found is kept
/// under the build folder, and a failure names the input.
pub fn check(layout: &Layout) -> Result<Tally> {
    if !cfg!(target_os = "linux") {
        say("Left out: fuzzing, whose linking is tried on Linux alone.");
        return Ok(Tally {
            skipped: 1,
            ..Tally::default()
        });
    }
    if console::find_program("c++").is_none() {
        debian::install(&["g++"], "a C++ compiler, for libFuzzer")?;
    }
    let programs = compile(layout)?;
    let corpus = layout.root.join("tests/fuzz/corpus");
    let mut targets: Vec<PathBuf> = fs::read_dir(&corpus)?
        .filter_map(|entry| Some(entry.ok()?.path()))
        .collect();
    targets.sort();
    if targets.is_empty() {
        bail!("no corpus stands in {}", corpus.display());
    }
    targets.iter().try_fold(Tally::default(), |total, seeds| {
        Ok(total + run_target(&programs, seeds)?)
    })
}

fn compile(layout: &Layout) -> Result<PathBuf> {
    say("Compiling the fuzz targets.");
    let host = host()?;
    let folder = layout.target.join("fuzz");
    let cargo = std::env::var("CARGO").unwrap_or_else(|_| "cargo".to_owned());
    let mut command = console::command_in(
        &layout.root,
        &cargo,
        &["build", "--quiet", "--release", "--manifest-path"],
    );
    command
        .arg("tests/fuzz/Cargo.toml")
        .arg("--target-dir")
        .arg(&folder)
        // With a target named, build scripts and macros go without the counters.
        .args(["--target", &host])
        .env("RUSTFLAGS", INSTRUMENTED);
    console::run(&mut command)?;
    Ok(folder.join(host).join("release"))
}

/// The compiler's name for this machine.
fn host() -> Result<String> {
    let told = console::output("rustc", &["-vV"]).unwrap_or_default();
    let name = told.lines().find_map(|line| line.strip_prefix("host: "));
    name.map(str::to_owned)
        .context("rustc does not say what machine it runs on")
}

/// `seeds` is the target's corpus, of the target's name.
fn run_target(programs: &Path, seeds: &Path) -> Result<Tally> {
    let name = seeds.file_name().unwrap_or_default();
    let found = programs.join("found").join(name);
    fs::create_dir_all(&found)?;
    let output = Command::new(programs.join(name))
        .args([RUNS, "-seed=1", "-max_len=4096", "-timeout=20"])
        .arg(format!("-artifact_prefix={}/failing-", found.display()))
        .args([&found, seeds])
        .output()?;
    if output.status.success() {
        return Ok(Tally::one_passed());
    }
    println!(
        "  FAILED {}: {}",
        name.to_string_lossy(),
        String::from_utf8_lossy(&output.stderr)
    );
    Ok(Tally::one_failed())
}
