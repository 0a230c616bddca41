//! The ledger as the page shows it: rows, the state at an entry, the history
//! of the off-diagonals.

mod entry;
mod history;
mod rows;
mod state;

#[cfg(test)]
pub(crate) mod tests;

pub use entry::entry;
pub use history::history;
pub use rows::{page, summary};

use serde::{Deserialize, Serialize};

use super::map::MagnitudePicture;

/// What an entry records.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "lowercase")]
pub enum EntryKind {
    /// A change to the input.
    Adjustment,
    /// Scaling, rounding, and the Cholesky factor of the metric.
    Preparation,
    /// A reflector from both sides.
    Reflector,
    /// The phase step.
    Phases,
    /// A sweep.
    Sweep,
    /// A deflation.
    Deflation,
}

/// One row of the ledger.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct LedgerRow {
    /// Number of the entry, from 1.
    pub number: u32,
    /// What it records.
    pub kind: EntryKind,
    /// The act in words and figures.
    pub words: String,
    /// What is still outside the form aimed at.
    pub balance: String,
    /// Drift of the trace since the start, in units in the last place.
    pub trace_drift: String,
    /// Drift of the Frobenius norm, likewise.
    pub norm_drift: String,
}

/// Some consecutive rows.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct LedgerPage {
    /// Place of the first row, from 0.
    pub first: u32,
    /// The rows.
    pub rows: Vec<LedgerRow>,
}

/// The ledger at a glance.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct LedgerSummary {
    /// Entries in all.
    pub entries: u32,
    /// How many of which kind, as a sentence.
    pub words: String,
    /// Places of the deflations, from 0, ascending.
    pub deflations: Vec<u32>,
    /// Trace at the start.
    pub trace: String,
    /// Frobenius norm at the start.
    pub norm: String,
    /// The largest drift of either at any entry, as a sentence.
    pub drift: String,
}

/// A name and its figure.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Fact {
    /// What it is.
    pub name: String,
    /// How much.
    pub figure: String,
}

/// One off-diagonal before and after a sweep.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct OffDiagonalChange {
    /// Its place, from 1.
    pub place: u32,
    /// Before the sweep.
    pub before: String,
    /// After it.
    pub after: String,
}

/// How a cell of a state is to be read.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "lowercase")]
pub enum CellRole {
    /// An entry like any other.
    Plain,
    /// Made zero by this entry of the ledger.
    Zeroed,
    /// Changed by this entry of the ledger.
    Changed,
    /// Zero, and of no further concern.
    Blank,
}

/// One cell of a state.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct StateCell {
    /// The number.
    pub figure: String,
    /// How to read it.
    pub role: CellRole,
}

/// The matrix after an entry: in numbers or as a map.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct StateView {
    /// What it is a state of, and its power of two, in words.
    pub caption: String,
    /// Row by row, for small orders; else empty.
    pub cells: Vec<Vec<StateCell>>,
    /// For large orders.
    pub picture: Option<MagnitudePicture>,
}

/// An entry in full.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct EntryView {
    /// The row of the list.
    pub row: LedgerRow,
    /// What the act rested on.
    pub facts: Vec<Fact>,
    /// A reflector's vector, component by component; else empty.
    pub vector: Vec<Fact>,
    /// A sweep's off-diagonals; else empty.
    pub off_diagonals: Vec<OffDiagonalChange>,
    /// Trace and Frobenius norm after it.
    pub trace: String,
    /// Frobenius norm after it.
    pub norm: String,
    /// The state after it.
    pub state: StateView,
}

/// A tick of a logarithmic axis.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct DecadeTick {
    /// Height, 0 at the foot and 1 at the head.
    pub at: f32,
    /// The magnitude.
    pub label: String,
}

/// One off-diagonal through all sweeps.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct HistoryLine {
    /// Its place in the tridiagonal form, from 1.
    pub place: u32,
    /// Points (sweep, height): sweep from 0 (the form before the first).
    pub points: Vec<(f32, f32)>,
}

/// A deflation on the history.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct HistoryDeflation {
    /// Entry of the ledger, from 0.
    pub entry: u32,
    /// Sweeps done before it.
    pub sweep: f32,
    /// Height of the off-diagonal it set to zero; 0 where it was zero already.
    pub at: f32,
    /// The deflation in words.
    pub words: String,
}

/// The off-diagonals falling sweep by sweep.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct HistoryView {
    /// Sweeps in all.
    pub sweeps: u32,
    /// The off-diagonals drawn.
    pub lines: Vec<HistoryLine>,
    /// The deflations.
    pub deflations: Vec<HistoryDeflation>,
    /// The axis.
    pub ticks: Vec<DecadeTick>,
    /// What the picture shows and what it leaves out, as sentences.
    pub words: String,
}
