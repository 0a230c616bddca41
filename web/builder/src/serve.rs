//! Serves `dist/` on this machine's loopback address, and nothing else.

use std::fs::File;
use std::io;
use std::path::{Component, Path, PathBuf};
use std::sync::Arc;

use anyhow::{anyhow, Context, Result};
use tiny_http::{Header, Method, Request, Response, Server};

use crate::compressed;
use crate::console::say;
use crate::layout::Layout;
use crate::page;

/// Tried first; any free port is taken when it is in use.
pub const DEFAULT_PORT: u16 = 4180;

/// Requests are answered by this many threads: a browser opens about six
/// connections to one host (common practice, no source).
const THREADS: usize = 6;

/// Builds the page, serves it until the program is ended, and prints its
/// address.
pub fn build_and_serve(layout: &Layout, port: u16) -> Result<()> {
    page::build(layout)?;
    let server = start(&layout.dist, port)?;
    say(&format!(
        "Serving {} — end with Ctrl+C.",
        layout.dist.display()
    ));
    println!("{}", server.address);
    server.wait();
    Ok(())
}

/// A server at work.
pub struct Running {
    /// Where it can be reached.
    pub address: String,
    threads: Vec<std::thread::JoinHandle<()>>,
}

impl Running {
    /// Waits until the program is ended.
    pub fn wait(self) {
        for thread in self.threads {
            // A thread ends early only by a panic, which it has reported itself.
            let _ = thread.join();
        }
    }
}

/// Starts serving a folder on loopback, at the port or, when it is taken, at
/// a free one.
pub fn start(folder: &Path, port: u16) -> Result<Running> {
    let server = Server::http(("127.0.0.1", port))
        .or_else(|_| Server::http(("127.0.0.1", 0)))
        .map_err(|error| anyhow!("no port could be opened on 127.0.0.1: {error}"))?;
    let address = server
        .server_addr()
        .to_ip()
        .context("the server has no address")?;
    let server = Arc::new(server);
    let threads = (0..THREADS)
        .map(|_| {
            let server = Arc::clone(&server);
            let folder = folder.to_owned();
            std::thread::spawn(move || {
                while let Ok(request) = server.recv() {
                    // A browser that closed the connection early is no fault of ours.
                    let _ = answer(request, &folder);
                }
            })
        })
        .collect();
    Ok(Running {
        address: format!("http://{address}/"),
        threads,
    })
}

fn answer(request: Request, folder: &Path) -> io::Result<()> {
    if !matches!(request.method(), Method::Get | Method::Head) {
        return request.respond(Response::from_string("Only GET is served.").with_status_code(405));
    }
    let Some(path) = file_for(request.url(), folder) else {
        return request.respond(Response::from_string("No such file.").with_status_code(404));
    };
    let compressed = accepts_brotli(&request)
        .then(|| compressed::beside(&path))
        .filter(|file| file.is_file());
    let file = File::open(compressed.as_ref().unwrap_or(&path))?;
    let mut response = Response::from_file(file);
    let mut headers = vec![
        header("Content-Type", content_type(&path)),
        header("Cache-Control", "no-cache"),
        header("X-Content-Type-Options", "nosniff"),
    ];
    if compressed.is_some() {
        headers.push(header("Content-Encoding", "br"));
    }
    for header in headers.into_iter().flatten() {
        response.add_header(header);
    }
    request.respond(response)
}

/// The file below the folder that an address names; nothing outside it.
fn file_for(url: &str, folder: &Path) -> Option<PathBuf> {
    let path = url
        .split(['?', '#'])
        .next()
        .unwrap_or_default()
        .trim_start_matches('/');
    let relative = Path::new(path);
    if !relative
        .components()
        .all(|part| matches!(part, Component::Normal(_)))
    {
        return None;
    }
    let mut file = folder.join(relative);
    if file.is_dir() {
        file.push("index.html");
    }
    file.is_file().then_some(file)
}

fn accepts_brotli(request: &Request) -> bool {
    request
        .headers()
        .iter()
        .any(|header| header.field.equiv("Accept-Encoding") && takes_brotli(header.value.as_str()))
}

/// `br` is listed, and not with the weight 0 that refuses it.
fn takes_brotli(accepted: &str) -> bool {
    accepted.split(',').any(|coding| {
        let mut parts = coding.split(';').map(str::trim);
        parts.next() == Some("br") && parts.next() != Some("q=0")
    })
}

fn header(name: &'static str, value: &'static str) -> Option<Header> {
    Header::from_bytes(name, value).ok()
}

fn content_type(path: &Path) -> &'static str {
    match path.extension().and_then(|extension| extension.to_str()) {
        Some("html") => "text/html; charset=utf-8",
        Some("js" | "mjs") => "text/javascript; charset=utf-8",
        Some("css") => "text/css; charset=utf-8",
        Some("json" | "map") => "application/json; charset=utf-8",
        Some("webmanifest") => "application/manifest+json; charset=utf-8",
        Some("wasm") => "application/wasm",
        Some("svg") => "image/svg+xml",
        Some("png") => "image/png",
        Some("woff2") => "font/woff2",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_outside_the_folder_is_served() {
        let folder = Path::new(env!("CARGO_MANIFEST_DIR"));
        assert_eq!(
            file_for("/Cargo.toml?x#y", folder),
            Some(folder.join("Cargo.toml"))
        );
        for url in [
            "/../Cargo.toml",
            "/src/../../eslint.config.js",
            "//etc/passwd",
            "/no-such-file",
            "/./",
        ] {
            assert_eq!(file_for(url, folder), None, "{url}");
        }
    }

    #[test]
    fn brotli_is_sent_only_to_those_who_take_it() {
        assert!(takes_brotli("gzip, deflate, br, zstd"));
        assert!(takes_brotli("br;q=0.5"));
        assert!(!takes_brotli("gzip, br;q=0"));
        assert!(!takes_brotli("gzip, brotli"));
    }
}
