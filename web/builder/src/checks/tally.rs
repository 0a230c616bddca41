//! Counting what passed and what failed.

use std::fmt;
use std::io::{BufRead, BufReader};
use std::ops::Add;
use std::process::{Command, Stdio};

use anyhow::{Context, Result};

use crate::console;

/// How many checks passed, failed and could not be made on this machine.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Tally {
    /// Those that passed.
    pub passed: usize,
    /// Those that failed.
    pub failed: usize,
    /// Those left out, each after a sentence saying why.
    pub skipped: usize,
}

impl Tally {
    /// A check that counts as one, passed.
    pub fn one_passed() -> Self {
        Self {
            passed: 1,
            ..Self::default()
        }
    }

    /// A check that counts as one, failed.
    pub fn one_failed() -> Self {
        Self {
            failed: 1,
            ..Self::default()
        }
    }
}

impl Add for Tally {
    type Output = Self;

    fn add(self, other: Self) -> Self {
        Self {
            passed: self.passed + other.passed,
            failed: self.failed + other.failed,
            skipped: self.skipped + other.skipped,
        }
    }
}

impl fmt::Display for Tally {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} passed, {} failed", self.passed, self.failed)?;
        if self.skipped > 0 {
            write!(f, ", {} left out", self.skipped)?;
        }
        Ok(())
    }
}

/// Runs a command that counts as one check.
pub fn whole(command: &mut Command) -> Result<Tally> {
    console::run(command)?;
    Ok(Tally::one_passed())
}

/// Runs a command that says for itself how many checks it made; its output is
/// shown, indented so that no line of it is taken for the whole run's.
pub fn counted(command: &mut Command) -> Result<Tally> {
    let mut child = command
        .stdin(Stdio::null())
        .stdout(Stdio::piped())
        .spawn()
        .with_context(|| {
            format!(
                "could not start {}",
                command.get_program().to_string_lossy()
            )
        })?;
    let mut tally = Tally::default();
    if let Some(output) = child.stdout.take() {
        for line in BufReader::new(output).lines() {
            let line = line?;
            println!("  {line}");
            if let Some(counts) = counts_in(&line) {
                tally = tally + counts;
            }
        }
    }
    let status = child.wait()?;
    // A program that was ended, or that counted nothing, has proved nothing.
    let silent_failure = !status.success() && tally.failed == 0;
    if silent_failure || tally.passed + tally.failed == 0 {
        tally.failed += 1;
    }
    Ok(tally)
}

/// The counts in a line of the form `3 passed, 1 failed`, with whatever stands
/// before or after, and `;` for `,` as Cargo writes it; or in one of the two
/// closing lines of Node's test runner.
fn counts_in(line: &str) -> Option<Tally> {
    let words: Vec<&str> = line
        .split_whitespace()
        .map(|word| word.trim_end_matches([',', ';']))
        .collect();
    if let ["\u{2139}", kind, count] = words.as_slice() {
        let mut counts = Tally::default();
        let field = match *kind {
            "pass" => &mut counts.passed,
            "fail" => &mut counts.failed,
            "skipped" => &mut counts.skipped,
            _ => return None,
        };
        *field = count.parse().ok()?;
        return Some(counts);
    }
    let place = words
        .windows(4)
        .position(|four| four[1] == "passed" && four[3] == "failed")?;
    Some(Tally {
        passed: words[place].parse().ok()?,
        failed: words[place + 2].parse().ok()?,
        ..Tally::default()
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn counts_are_read_from_every_runner_used() {
        let expected = |passed, failed, skipped| {
            Some(Tally {
                passed,
                failed,
                skipped,
            })
        };
        for (line, counts) in [
            (
                "test result: FAILED. 3 passed; 1 failed; 0 ignored; 0 measured",
                expected(3, 1, 0),
            ),
            ("3 passed, 1 failed, 7 skipped", expected(3, 1, 0)),
            ("3 passed, 1 failed", expected(3, 1, 0)),
            ("\u{2139} pass 3", expected(3, 0, 0)),
            ("\u{2139} fail 1", expected(0, 1, 0)),
            ("\u{2139} skipped 2", expected(0, 0, 2)),
        ] {
            assert_eq!(counts_in(line), counts, "{line:?}");
        }
    }

    #[test]
    fn other_lines_count_nothing() {
        for line in [
            "",
            "passed failed",
            "test a ... ok",
            "x passed, y failed",
            "3 passed, 1 skipped",
        ] {
            assert_eq!(counts_in(line), None, "{line:?}");
        }
    }

    #[test]
    fn a_command_that_counts_nothing_fails() -> Result<()> {
        assert_eq!(counted(&mut Command::new("true"))?, Tally::one_failed());
        Ok(())
    }
}
