//! Where things stand in the project.

use std::path::{Path, PathBuf};

use anyhow::{bail, Result};

/// The folders the builder reads and writes.
pub struct Layout {
    /// The workspace.
    pub root: PathBuf,
    /// The page's sources.
    pub web: PathBuf,
    /// Glue, types and module made from the crate; the page imports them.
    pub generated: PathBuf,
    /// The finished page.
    pub dist: PathBuf,
    /// Build results of Cargo.
    pub target: PathBuf,
}

impl Layout {
    /// The layout of the workspace this program was compiled from.
    pub fn find() -> Result<Self> {
        let builder = Path::new(env!("CARGO_MANIFEST_DIR"));
        let Some(root) = builder
            .ancestors()
            .nth(2)
            .filter(|root| root.join("Cargo.lock").is_file())
        else {
            bail!("the workspace was moved since the builder was compiled: run `cargo clean -p page-builder` once.");
        };
        let web = root.join("web");
        let target =
            std::env::var_os("CARGO_TARGET_DIR").map_or_else(|| root.join("target"), PathBuf::from);
        Ok(Self {
            generated: web.join("src/shared/generated"),
            dist: root.join("dist"),
            root: root.to_owned(),
            target,
            web,
        })
    }
}
