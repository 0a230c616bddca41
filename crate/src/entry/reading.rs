//! From the candidates that a text allows to the one reading that is taken, or
//! to a question.

use super::decimal;
use super::diagnostic::{count, grouped, Finding, Findings, Kind};
use super::labels::{self, Stripped};
use super::question::{Choice, Preview, Question};
use super::raw::RawTable;
use super::recognise;
use super::settings::{DecimalMark, Labels, Layout, Limits, Settings, Shape, SignedWords, Wanted};
use super::{brackets, html, json, latex, markdown, matrix_market, plain, shape, ReadOptions};

/// A reading of the text: everything about it is settled but the numbers.
pub(crate) struct Reading {
    /// Every field is filled in.
    pub settings: Settings,
    pub stripped: Stripped,
    pub shape: Shape,
}

/// What became of the candidates.
pub(crate) struct Outcome {
    pub reading: Option<Reading>,
    pub question: Option<Question>,
}

/// Cells of a preview's corner, each way.
const CORNER: usize = 4;

/// The raw table of a text in the layout that the settings name.
pub(crate) fn raw_table(source: &str, settings: &Settings, limits: &Limits) -> RawTable {
    tokenise(source, settings, limits, &mut Findings::new(0)).unwrap_or_else(|| RawTable::new(0))
}

fn tokenise(
    source: &str,
    settings: &Settings,
    limits: &Limits,
    findings: &mut Findings,
) -> Option<RawTable> {
    let table = RawTable::new(limits.order);
    let signed = settings.signed_words.unwrap_or_default();
    match settings.layout.unwrap_or(Layout::Spaces) {
        Layout::Json => json::read(source, table, findings),
        Layout::Brackets => Some(brackets::read(source, signed, table)),
        Layout::Latex => Some(latex::read(source, table, findings)),
        Layout::Markdown => Some(markdown::read(source, table)),
        Layout::Html => Some(html::read(source, table, findings)),
        Layout::MatrixMarket => matrix_market::read(source, table, limits.order, findings),
        layout => Some(plain::read(source, layout, signed, table)),
    }
}

/// Weighs the readings the text allows.
///
/// Choices made for an earlier state of the text may not fit it any more; then
/// first the shape and labels among them are let go, then all of them.
pub(crate) fn choose(source: &str, options: &ReadOptions, findings: &mut Findings) -> Outcome {
    let chosen = options.settings;
    let mut relaxed = vec![
        chosen,
        Settings {
            shape: None,
            labels: None,
            ..chosen
        },
        Settings::default(),
    ];
    relaxed.dedup();
    let mut weighed = weigh(source, &relaxed[0], options, findings);
    for settings in &relaxed[1..] {
        if matches!(&weighed, Weighed::Misfit(..)) {
            let mut quiet = Findings::new(0);
            let again = weigh(source, settings, options, &mut quiet);
            if matches!(&again, Weighed::Fits { .. }) {
                weighed = again;
            }
        }
    }
    match weighed {
        Weighed::Fits { fits, candidates } => take(source, fits, &candidates, options, findings),
        Weighed::Misfit(settings, table) => Outcome {
            reading: Some(misfit(source, settings, &table, options, findings)),
            question: None,
        },
        Weighed::Nothing => Outcome {
            reading: None,
            question: None,
        },
    }
}

/// What the candidates come to.
enum Weighed {
    /// Readings that give what is wanted, among these candidates.
    Fits {
        fits: Vec<Reading>,
        candidates: Vec<Settings>,
    },
    /// None does; the first candidate and its cells.
    Misfit(Settings, RawTable),
    /// There is nothing to show; a finding says why.
    Nothing,
}

fn weigh(
    source: &str,
    chosen: &Settings,
    options: &ReadOptions,
    findings: &mut Findings,
) -> Weighed {
    let candidates = recognise::candidates(source, chosen);
    let mut fits: Vec<Reading> = Vec::new();
    let mut first: Option<(Settings, RawTable)> = None;
    for settings in &candidates {
        // Signed words are joined only where apart they make no matrix.
        if settings.signed_words == Some(SignedWords::Joined) && !fits.iter().all(is_run) {
            continue;
        }
        let Some(table) = tokenise(source, settings, &options.limits, findings) else {
            continue;
        };
        if too_large(&table, options, findings) {
            return Weighed::Nothing;
        }
        let table = labels::without_blank_margins(table, source);
        if !table.is_empty() {
            collect(source, settings, &table, options, &mut fits);
            first.get_or_insert((*settings, table));
        }
    }
    if !fits.is_empty() {
        return Weighed::Fits { fits, candidates };
    }
    if let Some((settings, table)) = first {
        return Weighed::Misfit(settings, table);
    }
    if !findings.has_errors() {
        let nothing = Finding::error(Kind::Empty, "There are no cells in the text.");
        findings.push(nothing.expected("rows of numbers"));
    }
    Weighed::Nothing
}

/// Takes the one reading that fits, or asks.
fn take(
    source: &str,
    mut fits: Vec<Reading>,
    candidates: &[Settings],
    options: &ReadOptions,
    findings: &mut Findings,
) -> Outcome {
    settle_runs(&mut fits, options.wanted);
    if let [fit] = fits.as_slice() {
        let others: Vec<&Settings> = candidates
            .iter()
            .filter(|other| !is_same(other, &fit.settings))
            .filter(|other| other.signed_words != Some(SignedWords::Joined))
            .collect();
        if !others.is_empty() {
            findings.push(only_fit(fit, &others));
        }
    }
    let question = ask(&fits, source, options);
    let taken = question
        .as_ref()
        .and_then(|question| question.preferred)
        .unwrap_or(0);
    Outcome {
        reading: Some(fits.swap_remove(taken)),
        question,
    }
}

/// Adds the readings that fit what is wanted.
fn collect(
    source: &str,
    settings: &Settings,
    table: &RawTable,
    options: &ReadOptions,
    fits: &mut Vec<Reading>,
) {
    let labels = match settings.labels {
        Some(labels) => vec![labels],
        None => labels::possible(table, source, options.parameters),
    };
    let mut runs = Vec::new();
    for labels in labels {
        let stripped = labelled(table, source, labels, options);
        let shapes = match settings.shape {
            Some(shape) => vec![shape],
            None if stripped.table.marked_lower && stripped.table.rows() > 1 => {
                vec![Shape::LowerTriangle]
            }
            None => shape::possible(&stripped.table.widths(), options.wanted),
        };
        let decimals = match settings.decimal {
            Some(decimal) => vec![decimal],
            None => decimal::possible(&stripped.table, source),
        };
        let mut found = false;
        for shape in shapes {
            let widths = stripped.table.widths();
            if !fits_exactly(shape, &stripped.table, options.wanted)
                || exceeds(shape, &widths, options)
            {
                continue;
            }
            for &decimal in &decimals {
                let reading = Reading {
                    settings: resolved(settings, labels, decimal, shape),
                    stripped: stripped.clone(),
                    shape,
                };
                if is_run(&reading) && settings.labels.is_none() {
                    runs.push(reading);
                } else {
                    found = true;
                    add(fits, reading);
                }
            }
        }
        if found {
            return;
        }
    }
    // A single run beside a header is likelier a short text than a matrix, so
    // it counts only where no other choice of labels gives rows and columns.
    let first = runs.first().map(|reading| reading.settings.labels);
    for reading in runs {
        if Some(reading.settings.labels) == first {
            add(fits, reading);
        }
    }
}

/// Adds a reading unless it is there already.
fn add(fits: &mut Vec<Reading>, reading: Reading) {
    if fits.iter().all(|fit| fit.settings != reading.settings) {
        fits.push(reading);
    }
}

fn labelled(table: &RawTable, source: &str, labels: Labels, options: &ReadOptions) -> Stripped {
    let mut stripped = labels::strip(table, source, labels);
    stripped.table = match options.wanted {
        Wanted::List => stripped.table.in_one_row(),
        Wanted::Any => stripped.table,
        _ => labels::without_blank_triangle(stripped.table, source),
    };
    stripped
}

fn resolved(settings: &Settings, labels: Labels, decimal: DecimalMark, shape: Shape) -> Settings {
    Settings {
        layout: settings.layout,
        decimal: Some(decimal),
        signed_words: Some(settings.signed_words.unwrap_or_default()),
        shape: Some(shape),
        labels: Some(labels),
    }
}

/// Whether a shape, perhaps chosen for an earlier text, can hold these rows.
fn fits_exactly(shape: Shape, table: &RawTable, wanted: Wanted) -> bool {
    let widths = table.widths();
    let square = table.marked_lower || !matches!(wanted, Wanted::List | Wanted::Any);
    match (shape, widths.first()) {
        (_, None) => false,
        (Shape::Full, Some(first)) => widths.iter().all(|width| width == first),
        _ => square && shape::possible(&widths, Wanted::Square).contains(&shape),
    }
}

/// Whether the shape makes a matrix larger than is worked here; a list may be
/// as long as a matrix has cells.
fn exceeds(shape: Shape, widths: &[usize], options: &ReadOptions) -> bool {
    let (rows, cols) = shape::size(shape, widths);
    options.wanted != Wanted::List && rows.max(cols) > options.limits.order
}

/// Whether the reading makes its matrix from one run of cells.
fn is_run(fit: &Reading) -> bool {
    matches!(
        fit.shape,
        Shape::Diagonal | Shape::PackedRows | Shape::PackedLower
    )
}

fn too_large(table: &RawTable, options: &ReadOptions, findings: &mut Findings) -> bool {
    let order = options.limits.order;
    let (rows, cols) = (table.rows_seen, table.widest_seen);
    // A run of cells may hold a whole matrix, so its length alone says nothing.
    let run = rows == 1 || cols == 1;
    let too_many = if run {
        rows.max(cols) > order * order
    } else {
        rows > order + 1 || cols > order + 1
    };
    if too_many || (table.overflowed() && !run) {
        findings.push(
            Finding::error(
                Kind::TooLarge,
                format!(
                    "The text has {} and {} in the widest; matrices up to order {} are worked here.",
                    count(rows, "row"),
                    count(cols, "cell"),
                    grouped(order)
                ),
            )
            .expected(format!("at most {} rows and columns", grouped(order))),
        );
        return true;
    }
    false
}

/// The reading of a table that makes no matrix of the kind wanted, for its
/// cells, with what is wrong about it.
fn misfit(
    source: &str,
    settings: Settings,
    table: &RawTable,
    options: &ReadOptions,
    findings: &mut Findings,
) -> Reading {
    let labels = settings.labels.unwrap_or_else(|| {
        labels::possible(table, source, options.parameters)
            .first()
            .copied()
            .unwrap_or_default()
    });
    let mut labels = labels;
    let mut stripped = labelled(table, source, labels, options);
    if stripped.table.is_empty() {
        labels = Labels::None;
        stripped = labelled(table, source, labels, options);
    }
    let decimal = settings
        .decimal
        .unwrap_or_else(|| decimal::possible(&stripped.table, source)[0]);
    let settings = resolved(&settings, labels, decimal, Shape::Full);
    super::misfit::describe(&stripped.table, &settings, options, findings);
    Reading {
        settings,
        stripped,
        shape: Shape::Full,
    }
}

/// One run of cells is a matrix only where nothing better is: beside a reading
/// with rows and columns it is left out.
fn settle_runs(fits: &mut Vec<Reading>, wanted: Wanted) {
    if wanted == Wanted::Square && !fits.iter().all(is_run) {
        fits.retain(|fit| !is_run(fit));
    }
}

/// Whether a candidate became the reading with these settings.
fn is_same(candidate: &Settings, taken: &Settings) -> bool {
    candidate.layout == taken.layout
        && candidate
            .decimal
            .is_none_or(|decimal| Some(decimal) == taken.decimal)
        && candidate.signed_words.unwrap_or_default() == taken.signed_words.unwrap_or_default()
}

/// Says which of several readings was taken because it alone makes sense.
fn only_fit(fit: &Reading, others: &[&Settings]) -> Finding {
    let name = |settings: &Settings| {
        let layout = settings.layout.map_or("", Layout::name);
        let mark = match (settings.decimal, settings.signed_words) {
            (Some(DecimalMark::Comma), _) => " with decimal commas",
            (_, Some(SignedWords::Joined)) => " with 1 +2i as one number",
            _ => "",
        };
        format!("{layout}{mark}")
    };
    let others: Vec<String> = others.iter().map(|settings| name(settings)).collect();
    Finding::note(
        Kind::Recognised,
        format!(
            "Read as {}; as {} it would make no square matrix.",
            name(&fit.settings),
            others.join(" or ")
        ),
    )
}

/// The question between readings, if there is one.
fn ask(fits: &[Reading], source: &str, options: &ReadOptions) -> Option<Question> {
    let run = fits.iter().any(|fit| fit.shape == Shape::Diagonal)
        && options.wanted == Wanted::Square
        && options.settings.shape.is_none();
    if fits.len() == 1 && !run {
        return None;
    }
    let choices: Vec<Choice> = fits
        .iter()
        .map(|fit| Choice {
            label: label(fit, fits),
            settings: fit.settings,
            preview: preview(source, fit),
        })
        .collect();
    let sentence = if fits.len() == 1 {
        "One run of cells: is it the diagonal of a matrix?".to_owned()
    } else {
        format!(
            "The text can be read in {} ways. Which is meant?",
            fits.len()
        )
    };
    Some(Question {
        sentence,
        choices,
        preferred: None,
    })
}

/// What tells this reading from the others.
fn label(fit: &Reading, fits: &[Reading]) -> String {
    let mut parts: Vec<&str> = Vec::new();
    let differs =
        |same: &dyn Fn(&Settings) -> bool| fits.iter().any(|other| !same(&other.settings));
    if differs(&|other| other.layout == fit.settings.layout) {
        parts.extend(fit.settings.layout.map(Layout::name));
    }
    if differs(&|other| other.decimal == fit.settings.decimal) {
        parts.push(match fit.settings.decimal {
            Some(DecimalMark::Comma) => "decimal commas",
            Some(DecimalMark::PointWithGroups) => "commas group thousands",
            _ => "decimal points",
        });
    }
    if differs(&|other| other.signed_words == fit.settings.signed_words) {
        parts.push(match fit.settings.signed_words {
            Some(SignedWords::Joined) => "1 +2i is one number",
            _ => "1 +2i is two cells",
        });
    }
    if parts.is_empty() || differs(&|other| other.shape == fit.settings.shape) {
        parts.push(fit.shape.name());
    }
    parts.join(", ")
}

fn preview(source: &str, fit: &Reading) -> Preview {
    let table = &fit.stripped.table;
    let (rows, cols) = shape::size(fit.shape, &table.widths());
    let shape = match fit.shape {
        Shape::Full if rows == cols => format!("order {}", grouped(rows)),
        Shape::Full => format!("{} of {}", count(rows, "row"), count(cols, "cell")),
        shape => format!("order {}, {}", grouped(rows), shape.name()),
    };
    let corner = (0..table.rows().min(CORNER))
        .map(|row| {
            table
                .row(row)
                .iter()
                .take(CORNER)
                .map(|cell| super::diagnostic::excerpt(cell.text(source)))
                .collect()
        })
        .collect();
    Preview {
        rows,
        cols,
        shape,
        corner,
    }
}
