//! The rule on imports.

#[test]
#[cfg_attr(target_arch = "wasm32", ignore = "reads the source tree")]
fn the_stage_imports_only_what_its_rule_allows() {
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("src/prove");
    let allowed = [
        "num",
        "matrix",
        "problem",
        "pairs::Approximation",
        "control",
        "prove",
    ];
    let mut folders = vec![folder];
    let mut seen = 0;
    while let Some(folder) = folders.pop() {
        for entry in std::fs::read_dir(&folder).expect("the stage's folder") {
            let path = entry.expect("an entry").path();
            if path.is_dir() {
                // Tests may use what they like.
                if !path.ends_with("tests") {
                    folders.push(path);
                }
                continue;
            }
            seen += 1;
            let source = std::fs::read_to_string(&path).expect("a source file");
            for tail in source.split(concat!("crate", "::")).skip(1) {
                let fine = allowed.iter().any(|name| tail.starts_with(name));
                assert!(
                    fine,
                    "{} imports {}",
                    path.display(),
                    tail.lines().next().unwrap_or("")
                );
            }
            for road in [concat!("super::super", "::super"), "eigenledger_solver"] {
                assert!(!source.contains(road), "{}: {road}", path.display());
            }
        }
    }
    assert!(seen > 5, "the sources were read");
}
