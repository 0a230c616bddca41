//! The single file: the page with its style, scripts, worker and module inside
//! it, which works from a file:// address with no server and no network.
//!
//! The worker's script and the module travel as text in elements that the page
//! looks for (`embedded-worker`, `embedded-module`). The policy names the one
//! script by its hash and allows no connection at all.

use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};

use anyhow::{bail, Context, Result};
use base64::engine::general_purpose::STANDARD as BASE64;
use base64::Engine;
use sha2::{Digest, Sha256};

use crate::console::say;
use crate::layout::Layout;

/// Its name in the folder of the finished page.
pub const FILE_NAME: &str = "eigenledger.html";

/// Writes the single file from the bundled page.
pub fn assemble(layout: &Layout) -> Result<()> {
    say("Assembling the single file.");
    let page = fs::read_to_string(layout.dist.join("index.html"))
        .context("the bundler wrote no index.html")?;
    let assets = Assets::find(&layout.dist.join("assets"))?;
    let text = single_file(&page, &layout.dist, &assets)?;
    let path = layout.dist.join(FILE_NAME);
    fs::write(&path, &text)?;
    say(&format!(
        "{} holds {:.0} kB.",
        path.display(),
        text.len() as f64 / 1000.0
    ));
    Ok(())
}

/// The files the page would fetch by itself.
struct Assets {
    worker: String,
    module: Vec<u8>,
}

impl Assets {
    fn find(folder: &Path) -> Result<Self> {
        let mut worker = Vec::new();
        let mut module = Vec::new();
        for entry in fs::read_dir(folder).context("the bundler wrote no assets")? {
            let path = entry?.path();
            let name = path
                .file_name()
                .unwrap_or_default()
                .to_string_lossy()
                .into_owned();
            if name.ends_with(".wasm") {
                module.push(path);
            } else if name.starts_with("main-") && name.ends_with(".js") {
                worker.push(path);
            }
        }
        Ok(Self {
            worker: fs::read_to_string(only(&worker, "worker script")?)?,
            module: fs::read(only(&module, "module")?)?,
        })
    }
}

fn only<'a>(paths: &'a [PathBuf], what: &str) -> Result<&'a PathBuf> {
    match paths {
        [path] => Ok(path),
        _ => bail!(
            "the bundled page has {} files that could be its {what}, and not one",
            paths.len()
        ),
    }
}

fn single_file(page: &str, dist: &Path, assets: &Assets) -> Result<String> {
    let (page, style) = take_element(page, "<link rel=\"stylesheet\"", ">", "href", dist)?;
    let (page, script) = take_element(&page, "<script type=\"module\"", "</script>", "src", dist)?;
    let (page, icon) = take_element(&page, "<link rel=\"icon\"", ">", "href", dist)?;
    if script.contains("from\"./") || script.contains("import(\"./") {
        bail!("the page's script is split into parts: the single file needs it whole");
    }
    let script = format!("\n{}\n", script_text(&script));
    let page = replace_policy(&page, &script)?;
    let icon = BASE64.encode(icon);
    let head = format!(
        "<link rel=\"icon\" type=\"image/svg+xml\" href=\"data:image/svg+xml;base64,{icon}\" />\n<style>\n{}\n</style>\n</head>",
        style.replace("</style", "<\\/style")
    );
    let body = format!(
        "<script type=\"text/plain\" id=\"embedded-worker\">{}</script>\n\
         <script type=\"text/plain\" id=\"embedded-module\">{}</script>\n\
         <script type=\"module\">{script}</script>\n</body>",
        script_text(&assets.worker),
        BASE64.encode(gzip(&assets.module)?)
    );
    // From the end: the script may hold the words of a tag, the page's own last tags may not.
    let page = replace_last(&page, "</body>", &body)?;
    replace_first(&page, "</head>", &head)
}

/// Removes an element from the page and returns the text of the file it names.
fn take_element(
    page: &str,
    opening: &str,
    closing: &str,
    attribute: &str,
    dist: &Path,
) -> Result<(String, String)> {
    let missing = || format!("the bundled page has no element `{opening}`");
    let start = page.find(opening).with_context(missing)?;
    let length = page[start..].find(closing).with_context(missing)? + closing.len();
    let element = &page[start..start + length];
    let named = element
        .split_once(&format!("{attribute}=\"./"))
        .and_then(|(_, rest)| rest.split_once('"'))
        .map(|(name, _)| name)
        .with_context(|| format!("{element} names no file of the page"))?;
    let text =
        fs::read_to_string(dist.join(named)).with_context(|| format!("{named} cannot be read"))?;
    Ok((
        format!("{}{}", &page[..start], &page[start + length..]),
        text,
    ))
}

/// A script that can stand inside an element: in JavaScript `\/` is `/` and
/// `\x3c` is `<` wherever these sequences can occur, in texts and patterns.
fn script_text(script: &str) -> String {
    script
        .replace("</script", "<\\/script")
        .replace("<!--", "\\x3c!--")
}

fn replace_policy(page: &str, script: &str) -> Result<String> {
    let hash = BASE64.encode(Sha256::digest(script.as_bytes()));
    let policy = format!(
        "default-src 'none'; script-src 'sha256-{hash}' 'wasm-unsafe-eval' blob:; worker-src blob:; \
         style-src 'unsafe-inline'; img-src data: blob:; base-uri 'none'; form-action 'none'"
    );
    let start = page
        .find("content=\"default-src")
        .context("the page states no policy")?
        + "content=\"".len();
    let length = page[start..]
        .find('"')
        .context("the page's policy has no end")?;
    Ok(format!(
        "{}{policy}{}",
        &page[..start],
        &page[start + length..]
    ))
}

fn replace_first(page: &str, tag: &str, with: &str) -> Result<String> {
    let place = page
        .find(tag)
        .with_context(|| format!("the page has no {tag}"))?;
    Ok(format!(
        "{}{with}{}",
        &page[..place],
        &page[place + tag.len()..]
    ))
}

fn replace_last(page: &str, tag: &str, with: &str) -> Result<String> {
    let place = page
        .rfind(tag)
        .with_context(|| format!("the page has no {tag}"))?;
    Ok(format!(
        "{}{with}{}",
        &page[..place],
        &page[place + tag.len()..]
    ))
}

fn gzip(bytes: &[u8]) -> Result<Vec<u8>> {
    let mut encoder = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::best());
    encoder.write_all(bytes)?;
    Ok(encoder.finish()?)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_script_cannot_end_its_element() {
        let inside = script_text("const a = '</script><!--'");
        assert!(
            !inside.contains("</script") && !inside.contains("<!--"),
            "{inside}"
        );
    }

    #[test]
    fn everything_is_inside_and_the_policy_names_the_script() -> Result<()> {
        let dist = std::env::temp_dir().join(format!("single-file-{}", std::process::id()));
        fs::create_dir_all(dist.join("assets"))?;
        fs::write(dist.join("assets/a.js"), "const head = '</head>';")?;
        fs::write(dist.join("assets/a.css"), "p { color: red }")?;
        fs::write(dist.join("mark.svg"), "<svg/>")?;
        let page = "<html><head><meta content=\"default-src 'none'\" />\
                    <link rel=\"icon\" href=\"./mark.svg\" />\
                    <script type=\"module\" crossorigin src=\"./assets/a.js\"></script>\
                    <link rel=\"stylesheet\" crossorigin href=\"./assets/a.css\">\
                    </head><body><div></div></body></html>";
        let assets = Assets {
            worker: "self.close()".to_owned(),
            module: b"module".to_vec(),
        };
        let single = single_file(page, &dist, &assets)?;
        fs::remove_dir_all(&dist)?;
        for inside in [
            "const head",
            "color: red",
            "self.close()",
            "'sha256-",
            "id=\"embedded-module\"",
        ] {
            assert!(single.contains(inside), "{inside} is not in {single}");
        }
        assert!(
            !single.contains("=\"./"),
            "something is still fetched: {single}"
        );
        Ok(())
    }
}
