//! The files of the finished page in their compressed form, which is what the
//! server sends and what the byte budget counts.

use std::fs;
use std::path::{Path, PathBuf};

use anyhow::Result;

use crate::console;
use crate::layout::Layout;
use crate::single;

/// Where the compressed form of a file stands.
pub fn beside(path: &Path) -> PathBuf {
    let mut name = path.as_os_str().to_owned();
    name.push(".br");
    PathBuf::from(name)
}

/// Writes the compressed form beside every served file that gains by it.
pub fn write(layout: &Layout) -> Result<()> {
    let files = served_files(&layout.dist)?;
    console::run(
        console::command_in(&layout.root, "node", &["web/builder/compress.mjs"]).args(&files),
    )
}

/// The bytes sent for a file.
pub fn bytes_sent(path: &Path) -> Result<u64> {
    let metadata = fs::metadata(beside(path)).or_else(|_| fs::metadata(path))?;
    Ok(metadata.len())
}

/// Every file that a visit may load, in the order of their names; the single
/// file and the examples' folder are not part of a visit.
pub fn served_files(folder: &Path) -> Result<Vec<PathBuf>> {
    let mut files = Vec::new();
    for entry in fs::read_dir(folder)? {
        let entry = entry?;
        let path = entry.path();
        let name = entry.file_name().to_string_lossy().into_owned();
        if path.is_dir() {
            if name != crate::page::EXAMPLES {
                files.extend(served_files(&path)?);
            }
        } else if !name.ends_with(".br") && name != single::FILE_NAME {
            files.push(path);
        }
    }
    files.sort();
    Ok(files)
}
