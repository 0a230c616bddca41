//! The same bits natively and in three browser engines, over the examples and
//! the hard cases of the crate's own tests.
//!
//! Chromium has to be there. Firefox and WebKit are installed where that is
//! allowed without asking; elsewhere they are left out, which is said and
//! counted.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

use anyhow::{bail, Context, Result};

use super::browser;
use super::outside;
use super::tally::{counted, Tally};
use crate::console::{self, say};
use crate::debian;
use crate::layout::Layout;
use crate::serve;

/// Names under which Firefox stands on the search path.
const FIREFOX: [&str; 2] = ["firefox-esr", "firefox"];

/// WebKitGTK's driver and the X server without a screen, on the search path.
const WEBKIT_DRIVER: &str = "WebKitWebDriver";
const DISPLAY: &str = "Xvfb";

/// Folders in which distributions keep WebKitGTK's own small browser.
const MINI_BROWSER_FOLDERS: [&str; 4] = [
    "/usr/lib/x86_64-linux-gnu",
    "/usr/lib/aarch64-linux-gnu",
    "/usr/libexec",
    "/usr/lib",
];

/// Holds every engine against the native program.
pub fn check(layout: &Layout) -> Result<Tally> {
    let programs = outside::compile_examples(layout)?;
    let folder = layout.target.join("engines");
    let documents = gather(layout, &programs, &folder)?;
    let native = layout.target.join("engines-native.txt");
    fs::write(&native, native_lines(&programs, &folder, &documents)?)?;
    let served = serve::start(&folder, 0)?;
    let page = serve::start(&layout.dist, 0)?;
    let mut command = browser::scenarios(layout, "tests/browser/engines")?;
    command
        .env("PAGE_ADDRESS", &page.address)
        .env("FINGERPRINT_ADDRESS", &served.address)
        .env("NATIVE", &native);
    add_firefox(&mut command);
    add_webkit(&mut command);
    counted(&mut command)
}

/// Puts the page that takes fingerprints together, with the module as shipped;
/// returns the documents' names.
fn gather(layout: &Layout, programs: &Path, folder: &Path) -> Result<Vec<String>> {
    if folder.exists() {
        fs::remove_dir_all(folder)?;
    }
    fs::create_dir_all(folder)?;
    console::run(Command::new(programs.join("hard_cases")).arg(folder))?;
    copy(&layout.root.join("www-examples"), folder, "json")?;
    let mut documents: Vec<String> = fs::read_dir(folder)?
        .filter_map(|entry| Some(entry.ok()?.file_name().to_string_lossy().into_owned()))
        .collect();
    documents.sort();
    fs::write(folder.join("names.txt"), documents.join("\n"))?;
    let page = layout.root.join("tests/browser/engines/page");
    for (source, extension) in [(&page, "html"), (&page, "js")] {
        copy(source, folder, extension)?;
    }
    for extension in ["js", "wasm"] {
        copy(&layout.generated, folder, extension)?;
    }
    Ok(documents)
}

/// Copies a folder's files of one extension.
fn copy(source: &Path, folder: &Path, extension: &str) -> Result<()> {
    for entry in fs::read_dir(source)? {
        let path = entry?.path();
        if path.extension().is_some_and(|found| found == extension) {
            fs::copy(&path, folder.join(path.file_name().unwrap_or_default()))?;
        }
    }
    Ok(())
}

fn native_lines(programs: &Path, folder: &Path, documents: &[String]) -> Result<Vec<u8>> {
    let output = Command::new(programs.join("fingerprint"))
        .args(documents)
        .current_dir(folder)
        .output()
        .context("the native program could not be started")?;
    if !output.status.success() {
        bail!(
            "the native program failed: {}",
            String::from_utf8_lossy(&output.stderr)
        );
    }
    Ok(output.stdout)
}

/// Names Firefox to the scenarios, if it can be had.
fn add_firefox(command: &mut Command) {
    let find = || FIREFOX.iter().find_map(|name| console::find_program(name));
    if let Some(firefox) = had(find, &["firefox-esr"], "Firefox") {
        command.env("FIREFOX", firefox);
    }
}

/// Names WebKit's programs to the scenarios, if all of them can be had.
fn add_webkit(command: &mut Command) {
    let find = || {
        let driver = console::find_program(WEBKIT_DRIVER)?;
        let display = console::find_program(DISPLAY)?;
        Some((driver, mini_browser()?, display))
    };
    if let Some((driver, browser, display)) = had(find, &["webkit2gtk-driver", "xvfb"], "WebKit") {
        command
            .env("WEBKIT_DRIVER", driver)
            .env("WEBKIT_BROWSER", browser)
            .env("WEBKIT_DISPLAY", display);
    }
}

/// What is found, installing it first where that is allowed; otherwise the
/// reason is said and the engine is left out.
fn had<T>(find: impl Fn() -> Option<T>, packages: &[&str], name: &str) -> Option<T> {
    if let Some(found) = find() {
        return Some(found);
    }
    let installed = debian::install(packages, &format!("{name} for the browser tests"));
    let found = installed
        .and_then(|()| find().with_context(|| format!("{name} was installed, but is not found")));
    found
        .map_err(|reason| say(&format!("{name} is left out. {reason:#}")))
        .ok()
}

/// The browser stands below a folder with the version of its interface.
fn mini_browser() -> Option<PathBuf> {
    MINI_BROWSER_FOLDERS
        .iter()
        .flat_map(|folder| fs::read_dir(folder).into_iter().flatten().flatten())
        .filter(|entry| entry.file_name().to_string_lossy().starts_with("webkit"))
        .map(|entry| entry.path().join("MiniBrowser"))
        .find(|path| path.is_file())
}
