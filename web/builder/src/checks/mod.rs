//! `cargo page test`: every check of the project, one step after another.
//!
//! A step that fails does not stop the others; the last line counts what
//! passed and what failed, and the exit status is success only without
//! failures.

pub mod browser;
mod budget;
mod engines;
mod fuzz;
pub mod outside;
mod rust;
mod tally;

use std::process::ExitCode;
use std::time::Instant;

use anyhow::{bail, Result};

use crate::console::{self, say};
use crate::layout::Layout;
use crate::page;
use tally::Tally;

/// One step of the run.
struct Step {
    /// What a filter is matched against, and what is printed.
    name: &'static str,
    /// Whether it looks at the built page.
    needs: Needs,
    run: fn(&Layout) -> Result<Tally>,
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Needs {
    Sources,
    Page,
}

/// Cheap steps first, so that a slip of the pen is heard of early.
const STEPS: [Step; 14] = [
    Step {
        name: "format",
        needs: Needs::Sources,
        run: rust::format,
    },
    Step {
        name: "clippy",
        needs: Needs::Sources,
        run: rust::clippy,
    },
    Step {
        name: "documentation",
        needs: Needs::Sources,
        run: rust::documentation,
    },
    Step {
        name: "native tests",
        needs: Needs::Sources,
        run: rust::native_tests,
    },
    Step {
        name: "builder tests",
        needs: Needs::Sources,
        run: rust::builder_tests,
    },
    Step {
        name: "wasm tests",
        needs: Needs::Sources,
        run: rust::wasm_tests,
    },
    Step {
        name: "fuzzing",
        needs: Needs::Sources,
        run: fuzz::check,
    },
    Step {
        name: "types of the page",
        needs: Needs::Page,
        run: types,
    },
    Step {
        name: "lint of the page",
        needs: Needs::Page,
        run: lint,
    },
    Step {
        name: "byte budget",
        needs: Needs::Page,
        run: budget::check,
    },
    Step {
        name: "outside checks",
        needs: Needs::Sources,
        run: outside::check,
    },
    Step {
        name: "browser",
        needs: Needs::Page,
        run: browser::served,
    },
    Step {
        name: "single file",
        needs: Needs::Page,
        run: browser::single_file,
    },
    Step {
        name: "engines",
        needs: Needs::Page,
        run: engines::check,
    },
];

/// Runs the steps whose name contains the filter.
pub fn run(layout: &Layout, filter: &str) -> Result<ExitCode> {
    let steps: Vec<&Step> = STEPS
        .iter()
        .filter(|step| step.name.contains(filter))
        .collect();
    if steps.is_empty() {
        let names: Vec<&str> = STEPS.iter().map(|step| step.name).collect();
        bail!(
            "No step is named like \u{201c}{filter}\u{201d}. The steps are: {}.",
            names.join(", ")
        );
    }
    let mut total = Tally::default();
    let mut page_ready = None;
    for step in steps {
        if step.needs == Needs::Page && page_ready.is_none() {
            page_ready = Some(timed("the page's build", || {
                page::build(layout).map(|()| Tally::one_passed())
            }));
        }
        let outcome =
            if step.needs == Needs::Page && page_ready.is_some_and(|tally| tally.failed > 0) {
                println!("  {} not run: the page could not be built", step.name);
                Tally::one_failed()
            } else {
                timed(step.name, || (step.run)(layout))
            };
        total = total + outcome;
    }
    total = total + page_ready.unwrap_or_default();
    println!("{total}");
    Ok(if total.failed == 0 {
        ExitCode::SUCCESS
    } else {
        ExitCode::FAILURE
    })
}

fn timed(name: &str, check: impl FnOnce() -> Result<Tally>) -> Tally {
    say(&format!("Checking: {name}"));
    let started = Instant::now();
    let tally = check().unwrap_or_else(|error| {
        println!("  FAILED {name}: {error:#}");
        Tally::one_failed()
    });
    println!(
        "  {name}: {} right, {} wrong, in {:.0} s",
        tally.passed,
        tally.failed,
        started.elapsed().as_secs_f64()
    );
    tally
}

fn types(layout: &Layout) -> Result<Tally> {
    tally::whole(&mut console::command_in(
        &layout.web,
        "npm",
        &["run", "--silent", "check"],
    ))
}

fn lint(layout: &Layout) -> Result<Tally> {
    tally::whole(&mut console::command_in(
        &layout.web,
        "npm",
        &["run", "--silent", "lint"],
    ))
}
