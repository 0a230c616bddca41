//! `cargo page`: builds the module and the page, serves them on this machine,
//! and runs every check of the project.

mod bench;
mod checks;
mod compressed;
mod console;
mod debian;
mod layout;
mod module;
mod page;
mod serve;
mod single;
mod wasm_target;

use std::process::ExitCode;

use anyhow::{bail, Result};

const USAGE: &str = "\
cargo page serve [--port N]   build, then serve dist/ on this machine
cargo page build              build dist/ and the single file dist/eigenledger.html
cargo page test [STEP]       run every check, or those steps whose name contains STEP
cargo page bench [--keep]    print the tables of speeds, peers beside us; --keep renews the README's curve";

fn main() -> ExitCode {
    let words: Vec<String> = std::env::args().skip(1).collect();
    match run(&words) {
        Ok(code) => code,
        Err(error) => {
            eprintln!("{error:#}");
            ExitCode::FAILURE
        }
    }
}

fn run(words: &[String]) -> Result<ExitCode> {
    let layout = layout::Layout::find()?;
    let words: Vec<&str> = words.iter().map(String::as_str).collect();
    match words.as_slice() {
        ["build"] => {
            page::build(&layout)?;
        }
        ["serve"] => serve::build_and_serve(&layout, serve::DEFAULT_PORT)?,
        ["serve", "--port", port] => {
            let Ok(port) = port.parse() else {
                bail!("\u{201c}{port}\u{201d} is not a port: give a whole number from 0 to 65535.");
            };
            serve::build_and_serve(&layout, port)?;
        }
        ["bench"] => bench::run(&layout, false)?,
        ["bench", "--keep"] => bench::run(&layout, true)?,
        ["test"] => return checks::run(&layout, ""),
        ["test", filter] => return checks::run(&layout, filter),
        _ => {
            eprintln!("{USAGE}");
            return Ok(ExitCode::from(2));
        }
    }
    Ok(ExitCode::SUCCESS)
}
