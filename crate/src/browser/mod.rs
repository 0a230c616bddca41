//! The wasm boundary: conversions only. No mathematics and no rule for
//! printing numbers lives here.
//!
//! The page's worker holds one [`Workbench`]. Every method takes and returns
//! plain data whose TypeScript types are generated from the Rust ones. A long
//! call is cancelled by ending the worker, so no method has to hear a cancel.

mod convert;
pub mod document;
mod edit;
pub mod reading;

use tsify::Ts;
use wasm_bindgen::prelude::*;

use crate::entry::{self, Entry, ReadOptions, Settings, Wanted};
use document::ProblemDocument;
use reading::{Reading, TextEdits, TextReading, Which};

/// What the worker holds: the problem last read and what was found of it.
#[wasm_bindgen]
#[derive(Default)]
pub struct Workbench {}

#[wasm_bindgen]
impl Workbench {
    /// An empty workbench. Panics are reported on the console from here on.
    #[wasm_bindgen(constructor)]
    pub fn new() -> Self {
        console_error_panic_hook::set_once();
        Self::default()
    }

    /// Reads the whole document.
    ///
    /// # Errors
    /// If the document is not of the expected form; whatever is wrong with the
    /// texts in it is in the reading.
    pub fn read(&mut self, document: Ts<ProblemDocument>) -> Result<Ts<Reading>, JsError> {
        let document = document.to_rust()?;
        let (matrix, entry) = read_text(&document, Which::Matrix)?;
        let metric = match &document.metric {
            Some(_) => Some(read_text(&document, Which::Metric)?.0),
            None => None,
        };
        let reading = Reading {
            matrix,
            metric,
            parameters: Vec::new(),
            ready: entry.is_usable(),
        };
        Ok(Ts::from_rust(&reading)?)
    }

    /// The changes of one text that an offered repair makes.
    ///
    /// # Errors
    /// If the key is not one that was offered.
    pub fn apply_repair(
        &self,
        document: Ts<ProblemDocument>,
        which: Ts<Which>,
        key: &str,
    ) -> Result<Ts<TextEdits>, JsError> {
        let document = document.to_rust()?;
        let repair: entry::Repair = serde_json::from_str(key)?;
        let before = document.text(which.to_rust()?);
        let after = entry::repair::apply(before, &repair);
        Ok(Ts::from_rust(&edit::between(before, &after))?)
    }
}

fn read_text(document: &ProblemDocument, which: Which) -> Result<(TextReading, Entry), JsError> {
    let settings: Settings = match document.layout(which) {
        Some(key) => serde_json::from_str(key)?,
        None => Settings::default(),
    };
    let options = ReadOptions {
        wanted: match which {
            Which::Matrix => Wanted::Square,
            Which::Metric => Wanted::Metric,
        },
        settings,
        ..ReadOptions::default()
    };
    let text = document.text(which);
    let entry = entry::read(entry::Input::Text(text), &options);
    Ok((convert::text_reading(text, &entry, &settings), entry))
}
