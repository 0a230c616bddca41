//! The fuzz targets over their kept corpus, and over small changes of it: the
//! run that needs no fuzzer. A short one with it is `cargo page test fuzz`, a long
//! one `RUSTC_BOOTSTRAP=1 cargo fuzz run --fuzz-dir tests/fuzz TARGET`.

use std::fs;
use std::path::Path;

#[path = "../fuzz/checks/mod.rs"]
mod checks;

/// Changed copies of each seed; EIGENLEDGER_FUZZ_CHANGES asks for more.
const CHANGES: u64 = 150;

/// A generator of the linear congruential kind (Knuth's constants for 64 bits,
/// from memory): the changes are the same on every machine.
struct Changes(u64);

impl Changes {
    fn below(&mut self, limit: usize) -> usize {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 33) as usize % limit.max(1)
    }

    /// The seed with a few bytes replaced, dropped, doubled or taken from the
    /// characters that mean something to some reader.
    fn of(&mut self, seed: &[u8]) -> Vec<u8> {
        const SIGNS: &[u8] = b" \t\n,;:.|&<>/\\{}()[]\"'+-*^%#$0159eijx\xC2\xB1";
        let mut bytes = seed.to_vec();
        for _ in 0..=self.below(4) {
            let at = self.below(bytes.len() + 1);
            match self.below(4) {
                0 if at < bytes.len() => bytes[at] = SIGNS[self.below(SIGNS.len())],
                1 if at < bytes.len() => drop(bytes.remove(at)),
                2 => bytes.insert(at, SIGNS[self.below(SIGNS.len())]),
                _ => bytes.truncate(bytes.len() - self.below(bytes.len() / 4)),
            }
        }
        bytes
    }
}

fn replay(target: &str, check: fn(&[u8])) {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("fuzz/corpus")
        .join(target);
    let mut seeds: Vec<_> = fs::read_dir(&folder)
        .unwrap_or_else(|error| panic!("{}: {error}", folder.display()))
        .map(|entry| entry.expect("a readable folder").path())
        .collect();
    seeds.sort();
    assert!(!seeds.is_empty(), "{} is empty", folder.display());
    let asked = std::env::var("EIGENLEDGER_FUZZ_CHANGES");
    let count = asked
        .ok()
        .and_then(|count| count.parse().ok())
        .unwrap_or(CHANGES);
    let mut changes = Changes(count);
    for path in seeds {
        let seed = fs::read(&path).unwrap_or_else(|error| panic!("{}: {error}", path.display()));
        check(&seed);
        for _ in 0..count {
            check(&changes.of(&seed));
        }
    }
}

#[test]
fn text() {
    replay("text", checks::text);
}

#[test]
fn cell() {
    replay("cell", checks::cell);
}

#[test]
fn json() {
    replay("json", checks::json);
}

#[test]
fn latex() {
    replay("latex", checks::latex);
}

#[test]
fn markup() {
    replay("markup", checks::markup);
}

#[test]
fn matrix_market() {
    replay("matrix_market", checks::matrix_market);
}

#[test]
fn npy() {
    replay("npy", checks::npy);
}

#[test]
fn document() {
    replay("document", checks::document);
}

#[test]
fn link() {
    replay("link", checks::link);
}
