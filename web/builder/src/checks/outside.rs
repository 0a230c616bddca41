//! Checks against other people's programs, in a pinned Python environment.

use std::fs;
use std::path::PathBuf;

use anyhow::{bail, Context, Result};

use super::tally::{counted, Tally};
use crate::console::{self, say};
use crate::layout::Layout;

/// Runs every script `tests/outside/check_*.py`; each prints its own counts.
pub fn check(layout: &Layout) -> Result<Tally> {
    let python = environment(layout)?;
    let examples = compile_examples(layout)?;
    let folder = layout.root.join("tests/outside");
    let mut scripts: Vec<PathBuf> = fs::read_dir(&folder)?
        .filter_map(|entry| Some(entry.ok()?.path()))
        .filter(|path| {
            let name = path.file_name().unwrap_or_default().to_string_lossy();
            name.starts_with("check_") && name.ends_with(".py")
        })
        .collect();
    scripts.sort();
    let mut total = Tally::default();
    for script in scripts {
        let script = script.to_string_lossy().into_owned();
        let mut command = console::command_in(&layout.root, &python.to_string_lossy(), &[&script]);
        command
            .env("EIGENLEDGER_EXAMPLES", &examples)
            .env("PYTHONDONTWRITEBYTECODE", "1");
        total = total + counted(&mut command)?;
    }
    Ok(total)
}

/// Compiles the crate's example programs, which other programs ask for our
/// answers; returns their folder.
pub fn compile_examples(layout: &Layout) -> Result<PathBuf> {
    let cargo = std::env::var("CARGO").unwrap_or_else(|_| "cargo".to_owned());
    say("Compiling the programs that the outside checks ask.");
    console::run(&mut console::command_in(
        &layout.root,
        &cargo,
        &["build", "--quiet", "--package", "eigenledger", "--examples"],
    ))?;
    Ok(layout.target.join("debug/examples"))
}

/// The interpreter of `tests/.venv`, if that was made before.
pub fn existing_environment(layout: &Layout) -> Option<PathBuf> {
    let python = layout.root.join("tests/.venv/bin/python");
    python.is_file().then_some(python)
}

/// The interpreter of `tests/.venv`, made or brought in step with the pinned
/// requirements first.
fn environment(layout: &Layout) -> Result<PathBuf> {
    let requirements_path = layout.root.join("tests/requirements.txt");
    let requirements = fs::read(&requirements_path).context("tests/requirements.txt is missing")?;
    let folder = layout.root.join("tests/.venv");
    let python = folder.join("bin/python");
    let stamp = folder.join("installed-requirements.txt");
    if fs::read(&stamp).is_ok_and(|installed| installed == requirements) {
        return Ok(python);
    }
    require_python()?;
    let folder_text = folder.to_string_lossy().into_owned();
    say("Making the Python environment: python3 -m venv tests/.venv, then pip install -r tests/requirements.txt");
    let make = |arguments: &[&str]| {
        console::run(&mut console::command_in(&layout.root, "python3", arguments))
    };
    let arguments = ["-m", "venv", "--clear", &folder_text];
    if make(&arguments).is_err() {
        crate::debian::install(&["python3-venv"], "Python's venv")?;
        make(&arguments)?;
    }
    console::run(&mut console::command_in(
        &layout.root,
        &python.to_string_lossy(),
        &[
            "-m",
            "pip",
            "install",
            "--quiet",
            "--disable-pip-version-check",
            "--only-binary",
            ":all:",
            "-r",
            &requirements_path.to_string_lossy(),
        ],
    ))?;
    fs::write(&stamp, requirements)?;
    Ok(python)
}

fn require_python() -> Result<()> {
    let test = "import sys; sys.exit(sys.version_info < (3, 11))";
    match console::output("python3", &["-c", test]) {
        Some(_) => Ok(()),
        None => bail!("Python 3.11 or later is missing: install it (on Debian `apt-get install python3 python3-venv`)."),
    }
}
