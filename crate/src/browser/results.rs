//! From solving on: every method here makes plain data of what a
//! [`Run`] holds. Where there is no run, the answer is `undefined`.

use js_sys::{Function, Uint8Array};
use tsify::{Ts, Tsify};
use wasm_bindgen::prelude::*;

use super::document::ProblemDocument;
use super::read::Ready;
use super::reading::ClaimedFiles;
use super::Workbench;
use crate::claim::files::{claim_of, OutputFile};
use crate::claim::Judgement;
use crate::control::{Control, Flow, Stage};
use crate::exact;
use crate::ledger::Ledger;
use crate::prove::Level;
use crate::report::claims;
use crate::report::exact_view::{self, ExactAnswer};
use crate::report::export::{self, ExportKind, FileText};
use crate::report::proof_view::{self, ProofView};
use crate::report::run::{Heading, Run};
use crate::report::sheet;
use crate::report::solution::{self, Solution};
use crate::report::spectrum::{self, SpectrumView, Window, WindowMove};
use crate::report::tolerances::{self, TolerancesView};
use crate::report::values::{self, Checks, Settled, ValueTable};
use crate::report::vector::VectorView;
use crate::report::working::{self, EntryView, HistoryView, LedgerPage};

/// Hands progress to the page. A cancel ends the worker, so none is heard.
struct Reporter<'a> {
    report: &'a Function,
    last: Option<(Stage, f64)>,
}

/// Progress is told in steps of at least this much.
const STEP: f64 = 0.02;

impl<'a> Reporter<'a> {
    fn new(report: &'a Function) -> Self {
        Self { report, last: None }
    }
}

impl Control for Reporter<'_> {
    fn progress(&mut self, stage: Stage, done: f64) -> Flow {
        let told = self
            .last
            .is_some_and(|(before, at)| before == stage && done - at < STEP);
        if !told {
            self.last = Some((stage, done));
            // A page that cannot hear its progress still wants the result.
            let _ = self
                .report
                .call2(&JsValue::NULL, &stage_name(stage).into(), &done.into());
        }
        Flow::Continue
    }
}

fn stage_name(stage: Stage) -> &'static str {
    match stage {
        Stage::Entry => "reading",
        Stage::Reduce => "reducing",
        Stage::Iterate => "iterating",
        Stage::Pairs => "eigenvectors",
        Stage::Prove => "proving",
        Stage::Exact => "exact road",
        Stage::Claim => "claims",
    }
}

fn heading(ready: &Ready) -> Heading {
    let document = &ready.document;
    Heading {
        title: document.title.clone(),
        notes: document.notes.clone(),
        matrix_text: document.matrix.clone(),
        metric_text: document.metric.clone(),
        parameters: document
            .parameters
            .iter()
            .map(|parameter| (parameter.name.clone(), parameter.value.clone()))
            .collect(),
        labels: ready.row_labels.clone(),
        claims: document.claims.clone(),
    }
}

type Answer<T> = Result<Option<Ts<T>>, JsError>;

fn answer<T: Tsify + serde::Serialize>(view: Option<T>) -> Answer<T> {
    match view {
        Some(view) => Ok(Some(Ts::from_rust(&view)?)),
        None => Ok(None),
    }
}

#[wasm_bindgen]
impl Workbench {
    /// Solves the problem last read. `report` is called with the stage and how
    /// much of it is done, from 0 to 1.
    ///
    /// # Errors
    /// If no problem that can be solved was read. A run that fails is a result,
    /// with its ledger up to there.
    pub fn solve(&mut self, report: &Function) -> Result<Ts<Solution>, JsError> {
        let Some(ready) = &self.ready else {
            return Err(JsError::new("There is no problem to solve yet."));
        };
        let mut ledger = Ledger::new();
        for adjustment in &ready.assembly.adjustments {
            ledger.enter_adjustment(adjustment.to_string(), adjustment.found.count);
        }
        let problem = ready.assembly.problem.clone();
        let rounded = problem.rounded();
        let outcome = crate::solve::solve(&rounded, &mut ledger, &mut Reporter::new(report));
        let assembly = &ready.assembly;
        let run = Run::new(heading(ready), problem, rounded, ledger, outcome).with_tolerances(
            assembly.tolerances.clone(),
            assembly.metric_tolerances.clone(),
        );
        let view = solution::view(&run);
        self.run = Some(run);
        Ok(Ts::from_rust(&view)?)
    }

    /// Rows of the ledger.
    pub fn ledger_page(&self, first: u32, count: u32) -> Answer<LedgerPage> {
        answer(
            self.run
                .as_ref()
                .map(|run| working::page(run, first as usize, count as usize)),
        )
    }

    /// One entry in full, with the state after it; `place` from 0.
    pub fn ledger_entry(&self, place: u32) -> Answer<EntryView> {
        answer(
            self.run
                .as_ref()
                .and_then(|run| working::entry(run, place as usize)),
        )
    }

    /// The off-diagonals through all sweeps.
    pub fn history(&self) -> Answer<HistoryView> {
        answer(self.run.as_ref().and_then(working::history))
    }

    /// The closing balance with its standing.
    pub fn closing_balance(&self) -> Answer<Settled> {
        answer(self.run.as_ref().map(values::closing_balance))
    }

    /// The eigenvalues, at most `limit` significant digits each; 0 for all
    /// that are proven.
    pub fn values(&self, limit: u32) -> Answer<ValueTable> {
        answer(self.run.as_ref().map(|run| values::table(run, limit)))
    }

    /// One eigenvector; `index` from 0.
    pub fn vector(&self, index: u32) -> Answer<VectorView> {
        answer(
            self.run
                .as_ref()
                .and_then(|run| values::vector(run, index as usize)),
        )
    }

    /// The spectrum through a window: the one handed out before, moved, or the
    /// whole if there was none.
    pub fn spectrum(
        &self,
        window: Option<String>,
        window_move: Ts<WindowMove>,
        limit: u32,
    ) -> Answer<SpectrumView> {
        let Some(run) = &self.run else {
            return Ok(None);
        };
        let lines = run.lines(limit);
        let window = window
            .and_then(|text| Window::parse(&text))
            .unwrap_or_else(|| Window::all(&lines))
            .moved(&window_move.to_rust()?, &lines);
        answer(Some(spectrum::view(&window, &lines)))
    }

    /// Proves the result at a level: `quick`, `tight`, or `deep` with a number
    /// of digits. A proof that comes to nothing does not replace one that did.
    ///
    /// # Errors
    /// If the level is none of these.
    pub fn prove(&mut self, level: &str, digits: u32, report: &Function) -> Answer<ProofView> {
        let level = match level {
            "quick" => Level::Quick,
            "tight" => Level::Tight,
            "deep" => Level::Deep {
                digits: digits.clamp(1, 1000),
            },
            _ => return Err(JsError::new("The level is quick, tight or deep.")),
        };
        let Some(run) = &mut self.run else {
            return Ok(None);
        };
        run.prove(level, &mut Reporter::new(report));
        answer(proof_view::view(run))
    }

    /// What the tolerances of the entries do to the eigenvalues, with the
    /// ranking of entries for the one at `index` (from 0).
    pub fn tolerances(&self, index: u32) -> Answer<TolerancesView> {
        answer(
            self.run
                .as_ref()
                .and_then(|run| tolerances::view(run, index as usize)),
        )
    }

    /// Takes the exact road, beyond the default order where that is asked for.
    pub fn exact(&mut self, beyond_default: bool, report: &Function) -> Answer<ExactAnswer> {
        let Some(run) = &mut self.run else {
            return Ok(None);
        };
        let limits = if beyond_default {
            exact::Limits::for_order(run.order())
        } else {
            exact::Limits::default()
        };
        let outcome = exact::spectrum(&run.problem, &limits, &mut Reporter::new(report));
        let view = exact_view::answer(outcome.as_ref());
        run.exact = outcome.ok();
        answer(Some(view))
    }

    /// The certificate: problem, vectors and bounds, for another program to
    /// check.
    pub fn certificate(&self) -> Answer<FileText> {
        answer(self.run.as_ref().and_then(export::certificate))
    }

    /// How good the whole set is.
    pub fn checks(&self) -> Answer<Checks> {
        answer(self.run.as_ref().map(|run| Checks {
            facts: values::checks(run),
        }))
    }

    /// The residual report.
    pub fn report(&self) -> Answer<FileText> {
        answer(self.run.as_ref().map(sheet::report))
    }

    /// Judges claims; a text may hold several.
    pub fn judge(&self, texts: Vec<String>, report: &Function) -> Answer<Judgement> {
        let mut reporter = Reporter::new(report);
        answer(
            self.run
                .as_ref()
                .map(|run| claims::judge(run, &texts, &mut reporter)),
        )
    }

    /// The claim that an outside solver's output files make about the problem
    /// last solved; `names` and `contents` belong together.
    ///
    /// # Errors
    /// Only if the answer cannot be handed over.
    pub fn claim_of_files(
        &self,
        names: Vec<String>,
        contents: Vec<Uint8Array>,
    ) -> Answer<ClaimedFiles> {
        let Some(run) = &self.run else {
            return Ok(None);
        };
        let bytes: Vec<Vec<u8>> = contents.iter().map(Uint8Array::to_vec).collect();
        let files: Vec<OutputFile<'_>> = names
            .iter()
            .zip(&bytes)
            .map(|(name, bytes)| OutputFile { name, bytes })
            .collect();
        answer(Some(match claim_of(&files, run.order()) {
            Ok(text) => ClaimedFiles::Claim { text },
            Err(reason) => ClaimedFiles::Refused { reason },
        }))
    }

    /// Takes title, notes and claims of the document for the files and the
    /// sheet of the run; they change no figure, so nothing is solved again.
    ///
    /// # Errors
    /// If the document is not of the expected form.
    pub fn take_heading(&mut self, document: Ts<ProblemDocument>) -> Result<(), JsError> {
        let document = document.to_rust()?;
        if let Some(run) = &mut self.run {
            run.heading.title = document.title;
            run.heading.notes = document.notes;
            run.heading.claims = document.claims;
        }
        Ok(())
    }

    /// A data file.
    pub fn export_results(&self, kind: Ts<ExportKind>) -> Answer<FileText> {
        let kind = kind.to_rust()?;
        answer(self.run.as_ref().and_then(|run| export::of_run(run, kind)))
    }
}
