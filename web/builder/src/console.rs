//! What the builder says, and how it runs other programs.

use std::path::Path;
use std::process::{Command, Stdio};
use std::time::Instant;

use anyhow::{bail, Context, Result};

/// Says what is being done now, before it is done.
pub fn say(text: &str) {
    println!("· {text}");
}

/// Runs a program that prints for itself; its failure is an error that names
/// the command.
pub fn run(command: &mut Command) -> Result<()> {
    let shown = shown(command);
    let started = Instant::now();
    let status = command
        .stdin(Stdio::null())
        .status()
        .with_context(|| format!("could not start {shown}"))?;
    if !status.success() {
        bail!(
            "failed after {:.0} s: {shown}",
            started.elapsed().as_secs_f64()
        );
    }
    Ok(())
}

/// The standard output of a short program, or nothing when it is missing or
/// fails.
pub fn output(program: &str, arguments: &[&str]) -> Option<String> {
    let output = Command::new(program)
        .args(arguments)
        .stdin(Stdio::null())
        .stderr(Stdio::null())
        .output()
        .ok()?;
    output
        .status
        .success()
        .then(|| String::from_utf8_lossy(&output.stdout).trim().to_owned())
}

/// Where a program stands on the search path, if it does.
pub fn find_program(name: &str) -> Option<std::path::PathBuf> {
    let path = std::env::var_os("PATH")?;
    std::env::split_paths(&path)
        .map(|folder| folder.join(name))
        .find(|candidate| candidate.is_file())
}

/// A program to be run in a folder.
pub fn command_in(folder: &Path, program: &str, arguments: &[&str]) -> Command {
    let mut command = Command::new(program);
    command.current_dir(folder).args(arguments);
    command
}

fn shown(command: &Command) -> String {
    let mut words = vec![command.get_program().to_string_lossy().into_owned()];
    words.extend(
        command
            .get_args()
            .map(|word| word.to_string_lossy().into_owned()),
    );
    words.join(" ")
}
