//! The wasm boundary: conversions only. No mathematics and no rule for
//! printing numbers lives here.
//!
//! The page's worker holds one [`Workbench`]. Every method takes and returns
//! plain data whose TypeScript types are generated from the Rust ones. A long
//! call is cancelled by ending the worker, so no method has to hear a cancel.

mod convert;
pub mod document;
mod edit;
mod open;
mod read;
pub mod reading;
mod results;

use tsify::Ts;
use wasm_bindgen::prelude::*;

use crate::entry;
use document::ProblemDocument;
use read::Ready;
use reading::{GridEdit, Opened, Reading, TextChange, Which};

/// What the worker holds: the problem last read and what was found of it.
#[wasm_bindgen]
#[derive(Default)]
pub struct Workbench {
    /// The problem last read, if it can be solved.
    ready: Option<Ready>,
    /// What came of solving it.
    run: Option<crate::report::run::Run>,
}

#[wasm_bindgen]
impl Workbench {
    /// An empty workbench. Panics are reported on the console from here on.
    #[wasm_bindgen(constructor)]
    pub fn new() -> Self {
        console_error_panic_hook::set_once();
        Self::default()
    }

    /// Reads the whole document and holds its problem for what comes next.
    ///
    /// # Errors
    /// If the document is not of the expected form; whatever is wrong with the
    /// texts in it is in the reading.
    pub fn read(&mut self, document: Ts<ProblemDocument>) -> Result<Ts<Reading>, JsError> {
        let document = document.to_rust()?;
        self.ready = None;
        let (reading, ready) = read::document(&document)?;
        self.ready = ready;
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
    ) -> Result<Ts<TextChange>, JsError> {
        let document = document.to_rust()?;
        let repair: entry::Repair = serde_json::from_str(key)?;
        let before = document.text(which.to_rust()?);
        let after = entry::repair::apply(before, &repair);
        Ok(Ts::from_rust(&edit::between(before, &after, None))?)
    }

    /// The change of one text that an edit in the grid makes.
    ///
    /// # Errors
    /// If the document is not of the expected form.
    pub fn edit_grid(
        &self,
        document: Ts<ProblemDocument>,
        which: Ts<Which>,
        edit: Ts<GridEdit>,
    ) -> Result<Ts<TextChange>, JsError> {
        let document = document.to_rust()?;
        let change = read::edited(&document, which.to_rust()?, edit.to_rust()?)?;
        Ok(Ts::from_rust(&change)?)
    }

    /// What a file holds: a document of ours, or a matrix in any form that is
    /// read, or a sentence saying why neither.
    ///
    /// # Errors
    /// Only if the answer cannot be handed over.
    pub fn open_file(&self, bytes: &[u8], name: &str) -> Result<Ts<Opened>, JsError> {
        Ok(Ts::from_rust(&open::file(bytes, name))?)
    }

    /// The fragment of a link that carries the document, without the #.
    ///
    /// # Errors
    /// If the document is not of the expected form.
    pub fn link_encode(&self, document: Ts<ProblemDocument>) -> Result<String, JsError> {
        Ok(crate::link::encode(&document.to_rust()?))
    }

    /// The document in a link's fragment, whole or not at all.
    ///
    /// # Errors
    /// Only if the answer cannot be handed over.
    pub fn link_decode(&self, fragment: &str) -> Result<Ts<Opened>, JsError> {
        Ok(Ts::from_rust(&open::link(fragment))?)
    }

    /// The document as the text of a file.
    ///
    /// # Errors
    /// If the document is not of the expected form.
    pub fn document_write(&self, document: Ts<ProblemDocument>) -> Result<String, JsError> {
        Ok(crate::document::write(&document.to_rust()?))
    }
}
