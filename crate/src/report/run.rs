//! One run, as every view draws on it: the problem, its ledger, its result
//! and what was proven of it.

use dashu_ratio::RBig;

use super::decimal::{self, Rounding};
use super::spectrum::Line;
use crate::control::Control;
use crate::exact::ExactSpectrum;
use crate::fingerprint::Taking;
use crate::ledger::Ledger;
use crate::num::figure;
use crate::num::ExactReal;
use crate::problem::{Problem, Rounded, Tolerances};
use crate::prove::{self, Level, Proof, Range};
use crate::residuals::{residuals, Residuals};
use crate::solve::{Solution, SolveError};

/// What was typed around the numbers.
#[derive(Clone, Debug, Default)]
pub struct Heading {
    /// Title; may be empty.
    pub title: String,
    /// Notes; may be empty.
    pub notes: String,
    /// The matrix as typed.
    pub matrix_text: String,
    /// The metric as typed.
    pub metric_text: Option<String>,
    /// Names and their values.
    pub parameters: Vec<(String, String)>,
    /// Row labels; empty, or one a row.
    pub labels: Vec<String>,
    /// Claims as typed.
    pub claims: Vec<String>,
}

/// One run with everything found of it so far.
#[derive(Debug)]
pub struct Run {
    /// What was typed around the numbers.
    pub heading: Heading,
    /// The exact problem.
    pub problem: Problem,
    /// The problem the arithmetic worked on.
    pub rounded: Rounded,
    /// What was done.
    pub ledger: Ledger,
    /// What came of it.
    pub outcome: Result<Solution, SolveError>,
    /// Fingerprint of problem and result; empty without a result.
    pub fingerprint: String,
    /// Residuals of the rounded problem, scaled.
    pub residuals: Option<Residuals>,
    /// What is proven so far.
    pub proof: Option<Proof>,
    /// What the exact road found.
    pub exact: Option<ExactSpectrum>,
    /// Tolerances of the matrix, if any were written.
    pub tolerances: Option<Tolerances>,
    /// Tolerances of the metric, if any were written.
    pub metric_tolerances: Option<Tolerances>,
    /// Proven ranges of the eigenvalues over all problems within them.
    pub ranges: Option<Vec<Range>>,
}

/// Digits of a figure nothing is proven of, unless fewer are asked for.
const UNPROVEN_DIGITS: u32 = 8;

impl Run {
    /// Takes a finished run in.
    pub fn new(
        heading: Heading,
        problem: Problem,
        rounded: Rounded,
        ledger: Ledger,
        outcome: Result<Solution, SolveError>,
    ) -> Self {
        let fingerprint = fingerprint(&problem, &outcome);
        let residuals = outcome
            .as_ref()
            .ok()
            .map(|solution| residuals(&rounded, &solution.approximation));
        Self {
            heading,
            problem,
            rounded,
            ledger,
            outcome,
            fingerprint,
            residuals,
            proof: None,
            exact: None,
            tolerances: None,
            metric_tolerances: None,
            ranges: None,
        }
    }

    /// The same run with the tolerances that were written beside the entries.
    pub fn with_tolerances(
        mut self,
        matrix: Option<Tolerances>,
        metric: Option<Tolerances>,
    ) -> Self {
        self.tolerances = matrix;
        self.metric_tolerances = metric;
        self
    }

    /// Whether any entry has a tolerance.
    pub fn has_tolerances(&self) -> bool {
        self.tolerances.is_some() || self.metric_tolerances.is_some()
    }

    /// Proves the result at `level`, and once the ranges over the tolerances. A
    /// proof that comes to nothing does not replace one that did.
    pub fn prove(&mut self, level: Level, control: &mut dyn Control) {
        let Ok(solution) = &self.outcome else {
            return;
        };
        let approximation = &solution.approximation;
        let proof = prove::prove(&self.problem, approximation, level, control);
        if self.ranges.is_none() && self.has_tolerances() {
            self.ranges = prove::tolerance_ranges(
                &self.problem,
                approximation,
                self.tolerances.as_ref(),
                self.metric_tolerances.as_ref(),
                control,
            );
        }
        if self.proven().is_none() || proof.level().is_some() {
            self.proof = Some(proof);
        }
    }

    /// Power of two between the ledger's numbers and those of the problem.
    pub fn scale(&self) -> i32 {
        self.rounded.matrix_scale - self.rounded.metric_scale
    }

    /// Rows of the problem.
    pub fn order(&self) -> usize {
        self.problem.matrix.order()
    }

    /// The proof, if anything at all is proven.
    pub fn proven(&self) -> Option<&Proof> {
        self.proof
            .as_ref()
            .filter(|proof| proof.enclosures().len() == self.order())
    }

    /// Title for headings: never empty.
    pub fn title(&self) -> &str {
        match self.heading.title.trim() {
            "" => "Untitled",
            title => title,
        }
    }

    /// A row's label, or its number; `row` from 0.
    pub fn label(&self, row: usize) -> String {
        match self.heading.labels.get(row) {
            Some(label) if !label.is_empty() => label.clone(),
            _ => (row + 1).to_string(),
        }
    }

    /// The eigenvalues as they stand on a line: the proof's clusters, or
    /// without one each approximation by itself. Figures show at most `limit`
    /// significant digits, 0 for all that are proven.
    pub fn lines(&self, limit: u32) -> Vec<Line> {
        let Ok(solution) = &self.outcome else {
            return Vec::new();
        };
        let approximation = &solution.approximation;
        let approx = |k: usize| {
            decimal::exact(approximation.values[k], approximation.scale).unwrap_or(RBig::ZERO)
        };
        let Some(proof) = self.proven() else {
            return (0..approximation.values.len())
                .map(|k| {
                    let value = approx(k);
                    let digits = if limit == 0 {
                        UNPROVEN_DIGITS
                    } else {
                        limit.min(16)
                    };
                    Line {
                        first: k as u32 + 1,
                        last: k as u32 + 1,
                        figure: decimal::typeset(&decimal::significant(
                            &value,
                            digits,
                            Rounding::Nearest,
                        )),
                        approx: value,
                        enclosure: None,
                        range: None,
                    }
                })
                .collect();
        };
        proof
            .clusters()
            .iter()
            .map(|cluster| {
                let (lower, upper) = (cluster.lower().to_rational(), cluster.upper().to_rational());
                let limit = (limit > 0).then_some(limit as usize);
                let figure = figure::bounded(cluster.lower(), cluster.upper(), limit);
                Line {
                    first: cluster.first() as u32 + 1,
                    last: cluster.last() as u32 + 1,
                    approx: (&lower + &upper) / RBig::from(2),
                    enclosure: Some((lower, upper)),
                    range: self.range(cluster.first(), cluster.last()),
                    figure: decimal::typeset(&figure),
                }
            })
            .collect()
    }

    /// From the lowest to the highest end of the ranges of these eigenvalues.
    fn range(&self, first: usize, last: usize) -> Option<(RBig, RBig)> {
        let ranges = self.ranges.as_ref()?;
        let (low, high) = (ranges.get(first)?.lower(), ranges.get(last)?.upper());
        Some((low.to_rational(), high.to_rational()))
    }

    /// Bound on the residual norm of the eigenvalue at `index` (from 0), scaled.
    pub fn residual_bound(&self, index: usize) -> Option<f64> {
        let measured = self.residuals.as_ref()?.pairs.get(index)?;
        Some((measured.approx_norm + measured.rounding).next_up())
    }

    /// The same as text, in the units of the problem.
    pub fn residual_text(&self, index: usize) -> Option<String> {
        let bound = decimal::exact(self.residual_bound(index)?, self.rounded.matrix_scale)?;
        Some(decimal::significant(&bound, 2, Rounding::Up))
    }

    /// A number of the scaled problem in `digits` significant digits.
    pub fn figure(&self, value: f64, digits: u32) -> String {
        figure_of(value, self.scale(), digits)
    }
}

/// value · 2^scale in `digits` significant digits, typeset.
pub fn figure_of(value: f64, scale: i32, digits: u32) -> String {
    match decimal::exact(value, scale) {
        Some(x) => decimal::typeset(&decimal::significant(&x, digits, Rounding::Nearest)),
        None => "not a number".to_owned(),
    }
}

/// Fingerprint of problem and result; empty without a result.
fn fingerprint(problem: &Problem, outcome: &Result<Solution, SolveError>) -> String {
    let Ok(solution) = outcome else {
        return String::new();
    };
    let mut taking = Taking::of_problem(&canonical(problem));
    taking.approximation(&solution.approximation);
    taking.finish().to_string()
}

/// The exact problem in one form, however it was typed: the order, then the
/// lower triangle row by row, each cell as a ratio in lowest terms (an
/// irrational one as its expression), then the metric likewise.
fn canonical(problem: &Problem) -> Vec<u8> {
    let mut bytes = problem.matrix.order().to_string().into_bytes();
    for matrix in std::iter::once(&problem.matrix).chain(&problem.metric) {
        bytes.push(b';');
        for row in 0..matrix.order() {
            for col in 0..=row {
                bytes.push(b' ');
                put(&mut bytes, matrix.re(row, col));
                if !matrix.im(row, col).is_zero() {
                    bytes.push(b',');
                    put(&mut bytes, matrix.im(row, col));
                }
            }
        }
    }
    bytes
}

fn put(bytes: &mut Vec<u8>, cell: &ExactReal) {
    let text = match cell.rational() {
        Some(ratio) => ratio.to_string(),
        None => cell.to_string(),
    };
    bytes.extend(text.bytes());
}
