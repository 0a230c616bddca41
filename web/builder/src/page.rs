//! The page: its packages, its bundle, and the single file.

use std::fs;
use std::path::Path;

use anyhow::{bail, Context, Result};

use crate::compressed;
use crate::console::{self, say};
use crate::layout::Layout;
use crate::module;
use crate::single;

/// The folder of the examples in the finished page.
pub const EXAMPLES: &str = "examples";

/// Builds everything that is served, and the single file.
pub fn build(layout: &Layout) -> Result<()> {
    require_node()?;
    install_packages_in(&layout.web, "the page")?;
    module::build(layout)?;
    say("Bundling the page.");
    console::run(&mut console::command_in(
        &layout.web,
        "npm",
        &["run", "--silent", "build"],
    ))?;
    single::assemble(layout)?;
    bring_examples(layout)?;
    compressed::write(layout)
}

/// The examples go along, with a page of links to them and one that uses the
/// module by itself.
fn bring_examples(layout: &Layout) -> Result<()> {
    let folder = layout.dist.join(EXAMPLES);
    fs::create_dir_all(&folder)?;
    for source in [layout.root.join("www-examples"), layout.generated.clone()] {
        for entry in fs::read_dir(&source)? {
            let path = entry?.path();
            let wanted = path.extension().is_some_and(|extension| {
                ["json", "html", "js", "wasm"]
                    .iter()
                    .any(|known| extension == *known)
            });
            if wanted {
                fs::copy(&path, folder.join(path.file_name().unwrap_or_default()))?;
            }
        }
    }
    Ok(())
}

/// Brings `node_modules` of a folder in step with its lock file, when it is
/// not.
pub fn install_packages_in(folder: &Path, purpose: &str) -> Result<()> {
    let lock_path = folder.join("package-lock.json");
    let lock =
        fs::read(&lock_path).with_context(|| format!("{} is missing", lock_path.display()))?;
    let stamp = folder.join("node_modules/.installed-from-lock");
    if fs::read(&stamp).is_ok_and(|installed| installed == lock) {
        return Ok(());
    }
    say(&format!("Installing the packages of {purpose}: npm ci"));
    console::run(&mut console::command_in(
        folder,
        "npm",
        &["ci", "--no-progress", "--loglevel=error"],
    ))?;
    fs::write(&stamp, lock).context("node_modules could not be marked as installed")
}

fn require_node() -> Result<()> {
    let Some(version) = console::output("node", &["--version"]) else {
        bail!("Node 20.19 or later is missing: install it (on Debian `apt-get install nodejs npm` where that is new enough), then try again.");
    };
    let mut parts = version
        .trim_start_matches('v')
        .split('.')
        .map(|part| part.parse::<u32>().unwrap_or(0));
    let found = (parts.next().unwrap_or(0), parts.next().unwrap_or(0));
    if found < (20, 19) {
        bail!("Node {version} is too old: the page's bundler needs 20.19 or later.");
    }
    Ok(())
}
