//! What must hold of every reader, whatever the bytes. Each function is the
//! body of one fuzz target, and is replayed over the kept corpus by an ordinary
//! test.

use eigenledger::entry::grid::{self, CellEdit, Mirror};
use eigenledger::entry::repair;
use eigenledger::entry::{
    read, Entry, Input, Layout, Limits, ReadOptions, Settings, Severity, Wanted,
};

/// Small limits, so that the fuzzer reaches them.
fn options(wanted: Wanted, settings: Settings) -> ReadOptions<'static> {
    ReadOptions {
        wanted,
        settings,
        limits: Limits {
            order: 12,
            ..Limits::default()
        },
        ..ReadOptions::default()
    }
}

/// Whatever text: recognised by its content, read as each kind of thing wanted.
pub fn text(data: &[u8]) {
    let Ok(text) = std::str::from_utf8(data) else {
        return;
    };
    for wanted in [Wanted::Square, Wanted::Metric, Wanted::List, Wanted::Any] {
        check(text, &options(wanted, Settings::default()));
    }
}

/// One cell.
pub fn cell(data: &[u8]) {
    use eigenledger::entry::cell::{parse_cell, CellOptions, Parameters, MAX_CELL_BYTES};
    let Ok(text) = std::str::from_utf8(data) else {
        return;
    };
    let given = [
        ("k".to_owned(), "3/7".to_owned()),
        ("m".to_owned(), "2*k".to_owned()),
    ];
    let (parameters, _) = Parameters::read(&given, CellOptions::default());
    match parse_cell(text, &parameters, CellOptions::default()) {
        Ok(value) => {
            let printed = value.to_string();
            if printed.len() > MAX_CELL_BYTES {
                return;
            }
            let again = parse_cell(&printed, &parameters, CellOptions::default())
                .unwrap_or_else(|error| panic!("{text:?} printed as {printed:?}: {error}"));
            let same = again.re.equals(&value.re) != Some(false)
                && again.im.equals(&value.im) != Some(false);
            assert!(same, "{text:?} printed as {printed:?}");
        }
        Err(error) => {
            assert!(error.span.start <= error.span.end, "{text:?}: {error:?}");
            assert!(error.span.end <= text.len(), "{text:?}: {error:?}");
            assert!(
                text.is_char_boundary(error.span.start),
                "{text:?}: {error:?}"
            );
            assert!(text.is_char_boundary(error.span.end), "{text:?}: {error:?}");
        }
    }
}

/// Problem documents: as they are, and as further fields of a small one.
pub fn document(data: &[u8]) {
    use eigenledger::document::{read, understand, write};
    let Ok(text) = std::str::from_utf8(data) else {
        return;
    };
    let small = r#"{"format":"eigenledger problem","version":1,"#;
    for text in [text.to_owned(), [small, text, "}"].concat()] {
        match read(&text) {
            Ok(document) => {
                assert_eq!(read(&write(&document)), Ok(document.clone()), "{text:?}");
                let found = understand(&document);
                assert!(
                    found.assembly.is_err() || found.matrix.is_usable(),
                    "{text:?}"
                );
            }
            Err(error) => assert!(error.sentence.ends_with('.'), "{text:?}: {error:?}"),
        }
    }
}

/// Links: any text is answered, and a link that carries this text is refused
/// after any change of one character.
pub fn link(data: &[u8]) {
    use eigenledger::document::ProblemDocument;
    use eigenledger::link::{decode, encode};
    let Ok(text) = std::str::from_utf8(data) else {
        return;
    };
    if let Ok(document) = decode(text) {
        assert_eq!(decode(&encode(&document)), Ok(document), "{text:?}");
    }
    let document = ProblemDocument {
        matrix: text.to_owned(),
        ..ProblemDocument::default()
    };
    let whole = encode(&document);
    assert_eq!(decode(&whole), Ok(document), "{text:?}");
    let at = data.iter().map(|byte| usize::from(*byte)).sum::<usize>() % whole.len();
    let mut changed = whole.clone().into_bytes();
    changed[at] = if changed[at] == b'A' { b'B' } else { b'A' };
    let changed = String::from_utf8(changed).unwrap_or_default();
    assert!(decode(&changed).is_err(), "{text:?}: {changed}");
    assert!(decode(&whole[..at]).is_err(), "{text:?}: {}", &whole[..at]);
}

/// JSON arrays.
pub fn json(data: &[u8]) {
    framed(data, "[", "]", Layout::Json);
}

/// The inside of a LaTeX environment.
pub fn latex(data: &[u8]) {
    framed(data, "\\begin{pmatrix}", "\\end{pmatrix}", Layout::Latex);
}

/// Markdown and HTML.
pub fn markup(data: &[u8]) {
    framed(data, "<table><tr><td>", "</table>", Layout::Html);
    framed(data, "| a | b |\n|---|---|\n|", "|", Layout::Markdown);
}

/// Matrix Market files after their banner's first words.
pub fn matrix_market(data: &[u8]) {
    framed(data, "%%MatrixMarket matrix ", "", Layout::MatrixMarket);
}

/// Files: as they are, and as NumPy arrays after the magic string.
pub fn npy(data: &[u8]) {
    for bytes in [data.to_vec(), [b"\x93NUMPY", data].concat()] {
        let options = options(Wanted::Any, Settings::default());
        let entry = read(
            Input::File {
                bytes: &bytes,
                name: "fuzz",
            },
            &options,
        );
        if let Some(text) = entry.text.clone() {
            consistent(&text, &entry, &options);
        }
    }
}

/// The text as it is, and inside the frame that makes it this layout.
fn framed(data: &[u8], before: &str, after: &str, layout: Layout) {
    let Ok(text) = std::str::from_utf8(data) else {
        return;
    };
    let settings = Settings {
        layout: Some(layout),
        ..Settings::default()
    };
    for text in [text.to_owned(), [before, text, after].concat()] {
        check(&text, &options(Wanted::Square, settings));
    }
}

fn check(text: &str, options: &ReadOptions) {
    let entry = read(Input::Text(text), options);
    consistent(text, &entry, options);
    for diagnostic in &entry.diagnostics {
        for offered in &diagnostic.repairs {
            let repaired = repair::apply(text, offered);
            read(Input::Text(&repaired), options);
        }
    }
    for choice in entry.question.iter().flat_map(|question| &question.choices) {
        let chosen = ReadOptions {
            settings: choice.settings,
            limits: options.limits,
            ..ReadOptions::default()
        };
        let chosen = ReadOptions {
            wanted: options.wanted,
            ..chosen
        };
        let taken = read(Input::Text(text), &chosen);
        assert_eq!(
            (taken.rows, taken.cols),
            (choice.preview.rows, choice.preview.cols),
            "{text:?} as {:?}",
            choice.label
        );
    }
    edits(text, &entry, options);
}

/// What every entry holds.
fn consistent(text: &str, entry: &Entry, options: &ReadOptions) {
    assert_eq!(entry.cells.len(), entry.rows * entry.cols, "{text:?}");
    let spans = entry.cells.iter().map(|cell| cell.span);
    let said = entry
        .diagnostics
        .iter()
        .filter_map(|diagnostic| diagnostic.span);
    for span in spans.chain(said) {
        let shown = text.get(span.start as usize..span.end as usize);
        let shown = shown.unwrap_or_else(|| panic!("{text:?}: {span:?}"));
        let before = text[..span.start as usize].encode_utf16().count();
        assert_eq!(span.utf16_start as usize, before, "{text:?}: {span:?}");
        let length = (span.utf16_end - span.utf16_start) as usize;
        assert_eq!(length, shown.encode_utf16().count(), "{text:?}: {span:?}");
    }
    if entry.is_usable() {
        assert!(
            entry.cells.iter().all(|cell| cell.value.is_some()),
            "{text:?}"
        );
        assert!(
            entry.rows <= options.limits.order || options.wanted == Wanted::List,
            "{text:?}"
        );
    } else {
        let error = entry
            .diagnostics
            .iter()
            .any(|said| said.severity == Severity::Error);
        assert!(error, "{text:?} is refused without a word");
    }
}

/// Writing a whole number into a cell of a usable matrix puts it there.
fn edits(text: &str, entry: &Entry, options: &ReadOptions) {
    if !entry.is_usable() || options.wanted == Wanted::List {
        return;
    }
    let (row, col) = (entry.rows / 2, entry.cols / 3);
    let edit = CellEdit {
        row,
        col,
        text: "41".to_owned(),
    };
    let edited = grid::set_cell(text, entry, &edit, Mirror::Conjugate, options);
    let again = ReadOptions {
        settings: edited.settings,
        limits: options.limits,
        ..ReadOptions::default()
    };
    let again = ReadOptions {
        wanted: options.wanted,
        ..again
    };
    let read_back = read(Input::Text(&edited.text), &again);
    let value = read_back.cell(row, col).and_then(|cell| cell.value.clone());
    let holds = value.is_some_and(|value| value.re.nearest(0) == 41.0 && value.im.is_zero());
    assert!(
        holds,
        "{text:?} became {:?}: {:?}",
        edited.text, read_back.diagnostics
    );
}
