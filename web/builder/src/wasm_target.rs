//! Finds or installs what compiles Rust to wasm32-unknown-unknown.

use std::path::{Path, PathBuf};
use std::process::Command;

use anyhow::{bail, Result};

use crate::console::{self, say};
use crate::layout::Layout;

/// The target's name.
pub const TARGET: &str = "wasm32-unknown-unknown";

/// Debian's compiler for the target; its standard library comes as sources.
const DEBIAN_PACKAGES: [&str; 3] = ["rustc-web", "cargo-web", "rust-web-src"];

/// A way to compile for the target.
#[derive(Clone, Debug)]
pub enum WasmTarget {
    /// The user's own toolchain has the target's library.
    Installed,
    /// Debian's compiler, which builds the library from its sources first.
    Debian {
        /// The linker: lld in its wasm flavour.
        linker: PathBuf,
    },
}

impl WasmTarget {
    /// Looks for the target, installs it where that is possible, and otherwise
    /// says what to install.
    pub fn find() -> Result<Self> {
        if installed() {
            return Ok(Self::Installed);
        }
        if console::find_program("rustup").is_some() {
            say(&format!(
                "Adding Rust's {TARGET} target: rustup target add {TARGET}"
            ));
            let added = console::run(Command::new("rustup").args(["target", "add", TARGET]));
            if added.is_ok() && installed() {
                return Ok(Self::Installed);
            }
            say("The target could not be added; looking for Debian's compiler instead.");
        }
        if !Path::new(DEBIAN_RUSTC).is_file() || !Path::new(DEBIAN_CARGO).is_file() {
            crate::debian::install(&DEBIAN_PACKAGES, "the compiler for the wasm target")?;
        }
        match wasm_linker() {
            Some(linker) => Ok(Self::Debian { linker }),
            None => {
                crate::debian::install(&["lld"], "the linker for the wasm target")?;
                match wasm_linker() {
                    Some(linker) => Ok(Self::Debian { linker }),
                    None => bail!("No linker for wasm was found: run `apt-get install lld`."),
                }
            }
        }
    }

    /// A Cargo command that compiles for the target.
    pub fn cargo(&self, layout: &Layout, verb: &str) -> Command {
        let mut command = match self {
            Self::Installed => {
                Command::new(std::env::var_os("CARGO").unwrap_or_else(|| "cargo".into()))
            }
            Self::Debian { linker } => {
                let mut command = Command::new(DEBIAN_CARGO);
                command
                    .env("RUSTC", DEBIAN_RUSTC)
                    .env("RUSTC_BOOTSTRAP", "1")
                    .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_LINKER", linker)
                    .env_remove("RUSTUP_TOOLCHAIN");
                command
            }
        };
        command.arg(verb);
        if matches!(self, Self::Debian { .. }) {
            command.arg("-Zbuild-std=std,panic_abort");
        }
        command
            .current_dir(&layout.root)
            .args(["--target", TARGET, "--target-dir"])
            .arg(self.target_dir(layout));
        command
    }

    /// Cargo's folder for this compiler: Debian's must not take turns with the
    /// user's own in one folder, since each would compile everything again.
    pub fn target_dir(&self, layout: &Layout) -> PathBuf {
        match self {
            Self::Installed => layout.target.clone(),
            Self::Debian { .. } => layout.target.join("debian"),
        }
    }
}

const DEBIAN_RUSTC: &str = "/usr/lib/rust-web/bin/rustc";
const DEBIAN_CARGO: &str = "/usr/lib/rust-web/bin/cargo";

fn installed() -> bool {
    let rustc = std::env::var("RUSTC").unwrap_or_else(|_| "rustc".to_owned());
    console::output(&rustc, &["--print", "target-libdir", "--target", TARGET])
        .is_some_and(|folder| Path::new(&folder).is_dir())
}

/// Rustup's own lld, else the distribution's.
fn wasm_linker() -> Option<PathBuf> {
    let bundled = console::output("rustc", &["--print", "target-libdir"])
        .and_then(|folder| Some(Path::new(&folder).parent()?.join("bin/rust-lld")))
        .filter(|linker| linker.is_file());
    bundled.or_else(|| console::find_program("wasm-ld"))
}
