//! The residual report: one HTML file that opens anywhere and prints.
//!
//! Everything typed by a person goes through the template's escaping; the file
//! holds no script and asks nothing of a network.

use maud::{html, Markup, DOCTYPE};

use super::claims;
use super::decimal::typeset;
use super::exact_view;
use super::export::{file_name, FileText};
use super::proof_view;
use super::run::Run;
use super::solution;
use super::tolerances;
use super::values::{self, Standing};
use super::working;
use crate::claim::Word;
use crate::control::Unattended;
use crate::ledger::Act;

const STYLE: &str = "\
:root{color-scheme:light}\
body{font:10.5pt/1.45 system-ui,'Segoe UI','Noto Sans',sans-serif;color:#111;background:#fff;\
max-width:52rem;margin:2rem auto;padding:0 1.5rem;font-variant-numeric:tabular-nums}\
h1,h2{font-family:ui-serif,Palatino,Georgia,serif;line-height:1.2}\
h1{font-size:1.6rem;margin:0 0 .3rem}h2{font-size:1.1rem;margin:1.6rem 0 .4rem;\
border-bottom:1px solid #999;padding-bottom:.15rem}\
table{border-collapse:collapse;width:100%}\
th,td{text-align:left;padding:.15rem .8rem .15rem 0;border-bottom:1px solid #ddd;vertical-align:baseline}\
th{font-weight:600}td.n,code,pre{font-family:ui-monospace,Menlo,Consolas,'DejaVu Sans Mono',monospace;\
font-size:.92em;overflow-wrap:anywhere}\
pre{white-space:pre-wrap;border-left:2px solid #999;padding-left:.8rem;margin:.4rem 0}\
dl{display:grid;grid-template-columns:max-content 1fr;gap:.15rem 1rem;margin:0}dt{color:#555}dd{margin:0}\
.soft{color:#555}.caution{border:1px solid #111;padding:.5rem .8rem;margin-top:1.6rem}\
tr,pre,.caution{break-inside:avoid}thead{display:table-header-group}\
@page{margin:18mm}@media print{body{margin:0;padding:0;max-width:none}}";

/// Cells of text typed that are repeated on the sheet; more would bury the rest.
const MOST_TYPED_BYTES: usize = 20_000;

/// The report as a file.
pub fn report(run: &Run) -> FileText {
    FileText {
        name: file_name(run.heading.title.trim(), "sheet.html"),
        media_type: "text/html".to_owned(),
        text: document(run).into_string(),
    }
}

fn document(run: &Run) -> Markup {
    html! {
        (DOCTYPE)
        html lang="en" {
            head {
                meta charset="utf-8";
                meta name="viewport" content="width=device-width, initial-scale=1";
                title { (run.title()) }
                style { (maud::PreEscaped(STYLE)) }
            }
            body {
                (heading(run))
                (problem(run))
                (eigenvalues(run))
                (proof(run))
                (within_tolerances(run))
                (exact(run))
                (claimed(run))
                (working_summary(run))
                (closing(run))
            }
        }
    }
}

fn heading(run: &Run) -> Markup {
    html! {
        h1 { (run.title()) }
        p.soft { "Eigenvalues of a " (solution::kind(run)) " of order " (run.order()) }
        @if !run.heading.notes.trim().is_empty() {
            @for paragraph in run.heading.notes.split('\n').filter(|line| !line.trim().is_empty()) {
                p { (paragraph) }
            }
        }
    }
}

fn problem(run: &Run) -> Markup {
    html! {
        h2 { "Problem as typed" }
        (typed(&run.heading.matrix_text))
        @if let Some(metric) = &run.heading.metric_text {
            p { "Metric" }
            (typed(metric))
        }
        @if !run.heading.parameters.is_empty() {
            dl {
                @for (name, value) in &run.heading.parameters {
                    dt { code { (name) } }
                    dd { code { (value) } }
                }
            }
        }
        @for entry in run.ledger.entries() {
            @if let Act::Adjustment { text, .. } = &entry.act {
                p { "Adjusted: " (text) }
            }
        }
    }
}

fn typed(text: &str) -> Markup {
    let end = (0..=text.len().min(MOST_TYPED_BYTES))
        .rev()
        .find(|at| text.is_char_boundary(*at))
        .unwrap_or(0);
    html! {
        pre { (text[..end]) }
        @if end < text.len() {
            p.soft { "The first " (end) " of " (text.len()) " bytes; the problem document holds the rest." }
        }
    }
}

fn eigenvalues(run: &Run) -> Markup {
    let table = values::table(run, 0);
    let ends = values::proven_ends(run);
    html! {
        h2 { "Eigenvalues" }
        @match &run.outcome {
            Err(error) => p { (error) },
            Ok(_) => {
                p.soft { (table.words) }
                table {
                    thead {
                        tr {
                            th { "λ" }
                            th { "value" }
                            th { "standing" }
                            @if !ends.is_empty() {
                                th { "not below" }
                                th { "not above" }
                            }
                            th { "residual ≤" }
                        }
                    }
                    tbody {
                        @for row in &table.rows {
                            tr {
                                td { (row.first) @if row.last > row.first { "–" (row.last) } }
                                td.n { (row.figure) }
                                td { (standing(row.standing)) }
                                @if let (Some(low), Some(high)) =
                                    (ends.get(row.first as usize - 1), ends.get(row.last as usize - 1))
                                {
                                    td.n { (typeset(&low.lower)) }
                                    td.n { (typeset(&high.upper)) }
                                }
                                td.n { (row.residual.as_deref().unwrap_or("")) }
                            }
                        }
                    }
                }
                p.soft {
                    "Residuals are norms of Ax − λMx for the vector found, for the problem rounded to double \
                     precision, with an a-priori bound on their own rounding added."
                }
                @for check in values::checks(run) {
                    p { (check.name) ": " code { (check.figure) } }
                }
            }
        }
    }
}

fn standing(standing: Standing) -> &'static str {
    match standing {
        Standing::Plain => "not proven",
        Standing::Bounded => "bounded only",
        Standing::Proven => "proven",
        Standing::Undecided => "undecided",
        Standing::Refuted => "refuted",
    }
}

fn proof(run: &Run) -> Markup {
    let Some(view) = proof_view::view(run) else {
        return html! {};
    };
    html! {
        h2 { "Proof" }
        p { (view.words) }
        table {
            tbody {
                @for condition in &view.conditions {
                    tr {
                        th { (condition.symbol) }
                        td.n { (condition.bound.as_deref().unwrap_or("")) }
                        td { (standing(condition.standing)) }
                        td { (condition.sentence) }
                    }
                }
            }
        }
        @for theorem in &view.theorems {
            p { (theorem.used) ": " (theorem.statement) " (" (theorem.source) ")." }
        }
        p { "Not proven:" }
        ul {
            @for sentence in &view.not_proven {
                li { (sentence) }
            }
        }
    }
}

fn within_tolerances(run: &Run) -> Markup {
    if !run.has_tolerances() {
        return html! {};
    }
    let ranges = tolerances::ranges(run);
    html! {
        h2 { "Within the tolerances" }
        p { (tolerances::reason(run)) }
        @if !ranges.is_empty() {
            table {
                thead {
                    tr {
                        th { "λ" }
                        th { "not below" }
                        th { "not above" }
                        th { "moved most by entry (to first order)" }
                    }
                }
                tbody {
                    @for range in &ranges {
                        tr {
                            td { (range.index) }
                            td.n { (range.lower) }
                            td.n { (range.upper) }
                            td { (range.most) }
                        }
                    }
                }
            }
        }
    }
}

fn exact(run: &Run) -> Markup {
    let Some(spectrum) = &run.exact else {
        return html! {};
    };
    let view = exact_view::view(spectrum);
    html! {
        h2 { "Exact results" }
        dl {
            dt { "diagonal of the tridiagonal form" }
            dd { (view.diagonal.join(", ")) }
            dt { "its off-diagonals" }
            dd { (view.off_diagonal.join(", ")) }
            dt { "characteristic polynomial" }
            dd {
                @for term in &view.polynomial {
                    (term.sign) " " (term.coefficient)
                    @if term.power > 0 { "λ" }
                    @if term.power > 1 { sup { (term.power) } }
                    " "
                }
            }
            @for eigenvalue in &view.eigenvalues {
                dt { "λ" sub { (eigenvalue.first) } }
                dd {
                    (eigenvalue.form.as_deref().unwrap_or("neither rational nor a quadratic surd"))
                    @if eigenvalue.multiplicity > 1 { ", multiplicity " (eigenvalue.multiplicity) }
                }
            }
        }
    }
}

fn claimed(run: &Run) -> Markup {
    if run
        .heading
        .claims
        .iter()
        .all(|claim| claim.trim().is_empty())
    {
        return html! {};
    }
    let judgement = claims::judge(run, &run.heading.claims, &mut Unattended);
    html! {
        h2 { "Claims" }
        @for (place, line) in (0u32..).zip(&judgement.lines) {
            pre { (line.text) }
            @match (&line.verdict, &line.error) {
                (Some(verdict), _) => p {
                    b { (word(verdict.word)) } ": " (verdict.sentence)
                    @if judgement.first_wrong == Some(place) { " Here it first goes wrong." }
                    @for finding in &verdict.findings { " " (finding.text) }
                },
                (None, Some(error)) => p { "Not understood: " (error) },
                (None, None) => {},
            }
        }
    }
}

fn word(word: Word) -> &'static str {
    match word {
        Word::Confirmed => "confirmed",
        Word::Refuted => "refuted",
        Word::Undecided => "undecided",
    }
}

fn working_summary(run: &Run) -> Markup {
    let summary = working::summary(run);
    html! {
        h2 { "Working" }
        p { (summary.words) }
        dl {
            dt { "trace" }
            dd { code { (summary.trace) } }
            dt { "Frobenius norm" }
            dd { code { (summary.norm) } }
            dt { "drift" }
            dd { (summary.drift) }
        }
    }
}

fn closing(run: &Run) -> Markup {
    let balance = values::closing_balance(run);
    html! {
        h2 { "Closing" }
        dl {
            dt { "closing balance" }
            dd { code { (balance.figure) } " (" (standing(balance.standing)) ") " (balance.reason) }
            @if !run.fingerprint.is_empty() {
                dt { "fingerprint" }
                dd { code { (run.fingerprint) } }
            }
        }
        p.soft {
            "The fingerprint is taken over the exact problem and the bits of values and vectors: whoever solves \
             the same problem with the same version finds the same one."
        }
        p.caution {
            "This sheet speaks of the arithmetic of one matrix, not of the model behind it. Where structures, \
             machines or people depend on the figures, local codes and licensed practice decide."
        }
    }
}

#[cfg(test)]
mod tests;
