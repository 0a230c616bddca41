//! Counting what passed and what failed.

use std::fmt;
use std::io::{BufRead, BufReader};
use std::ops::Add;
use std::process::{Command, Stdio};

use anyhow::{Context, Result};

use crate::console;

/// How many checks passed and failed.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Tally {
    /// Those that passed.
    pub passed: usize,
    /// Those that failed.
    pub failed: usize,
}

impl Tally {
    /// A check that counts as one, passed.
    pub const fn one_passed() -> Self {
        Self {
            passed: 1,
            failed: 0,
        }
    }

    /// A check that counts as one, failed.
    pub const fn one_failed() -> Self {
        Self {
            passed: 0,
            failed: 1,
        }
    }
}

impl Add for Tally {
    type Output = Self;

    fn add(self, other: Self) -> Self {
        Self {
            passed: self.passed + other.passed,
            failed: self.failed + other.failed,
        }
    }
}

impl fmt::Display for Tally {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} passed, {} failed", self.passed, self.failed)
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
    if silent_failure || tally == Tally::default() {
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
    match words.as_slice() {
        ["\u{2139}", "pass", passed] => {
            return Some(Tally {
                passed: passed.parse().ok()?,
                failed: 0,
            })
        }
        ["\u{2139}", "fail", failed] => {
            return Some(Tally {
                passed: 0,
                failed: failed.parse().ok()?,
            })
        }
        _ => {}
    }
    let place = words
        .windows(4)
        .position(|four| four[1] == "passed" && four[3] == "failed")?;
    Some(Tally {
        passed: words[place].parse().ok()?,
        failed: words[place + 2].parse().ok()?,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn counts_are_read_from_every_runner_used() {
        let expected = Some(Tally {
            passed: 3,
            failed: 1,
        });
        assert_eq!(
            counts_in("test result: FAILED. 3 passed; 1 failed; 0 ignored; 0 measured"),
            expected
        );
        assert_eq!(counts_in("3 passed, 1 failed, 7 skipped"), expected);
        assert_eq!(counts_in("3 passed, 1 failed"), expected);
        assert_eq!(
            counts_in("\u{2139} pass 3"),
            Some(Tally {
                passed: 3,
                failed: 0
            })
        );
        assert_eq!(
            counts_in("\u{2139} fail 1"),
            Some(Tally {
                passed: 0,
                failed: 1
            })
        );
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
