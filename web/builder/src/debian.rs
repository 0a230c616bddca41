//! Installing a distribution's packages, where that is allowed without asking.

use std::path::Path;
use std::process::Command;

use anyhow::{bail, Result};

use crate::console::{self, say};

/// Installs Debian packages when this is Debian and we are root; otherwise the
/// error says the command that cures it.
pub fn install(packages: &[&str], purpose: &str) -> Result<()> {
    let cure = format!("apt-get install --yes {}", packages.join(" "));
    if !Path::new("/etc/debian_version").is_file() {
        bail!("Missing: {purpose}. On Debian `{cure}` installs it; elsewhere, install its equivalent.");
    }
    if console::output("id", &["-u"]).as_deref() != Some("0") {
        bail!("Missing: {purpose}. Run `sudo {cure}`, then try again.");
    }
    say(&format!("Installing {purpose}: {cure}"));
    let quiet = |arguments: &[&str]| {
        let mut command = Command::new("apt-get");
        command
            .env("DEBIAN_FRONTEND", "noninteractive")
            .arg("-qq")
            .args(arguments);
        console::run(&mut command)
    };
    quiet(&["update"])?;
    let mut arguments = vec!["install", "--yes", "--no-install-recommends"];
    arguments.extend(packages);
    quiet(&arguments)
}
