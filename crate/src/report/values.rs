//! The eigenvalues as a table, and one vector at a time.

use serde::{Deserialize, Serialize};

use super::decimal::{self, typeset};
use super::run::Run;
use super::vector::{self, VectorView};
use super::working::Fact;
use crate::num::{figure, Dyadic};
use crate::prove::Cluster;

/// How far a figure is settled; each has its mark in the margin.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "lowercase")]
pub enum Standing {
    /// Computed; nothing is proven.
    Plain,
    /// Inside a proven interval together with others.
    Bounded,
    /// Proven, and apart from all others.
    Proven,
    /// Neither proven nor refuted.
    Undecided,
    /// Proven not to hold.
    Refuted,
}

/// One line of the table.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct ValueRow {
    /// Index of the first eigenvalue, from 1.
    pub first: u32,
    /// Index of the last.
    pub last: u32,
    /// The value as printed.
    pub figure: String,
    /// How far it is settled.
    pub standing: Standing,
    /// What that rests on, as a sentence.
    pub reason: String,
    /// Bound on the norm of the largest residual of the line.
    #[cfg_attr(target_arch = "wasm32", tsify(optional))]
    #[serde(skip_serializing_if = "Option::is_none")]
    pub residual: Option<String>,
}

/// The table.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct ValueTable {
    /// Ascending.
    pub rows: Vec<ValueRow>,
    /// How the figures are to be read, as a sentence.
    pub words: String,
}

/// A single figure with its standing.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Settled {
    /// The figure.
    pub figure: String,
    /// How far it is settled.
    pub standing: Standing,
    /// What that rests on, as a sentence.
    pub reason: String,
}

/// Figures on the whole set.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Checks {
    /// Name and figure.
    pub facts: Vec<Fact>,
}

/// The table; at most `limit` significant digits, 0 for all that are proven.
pub fn table(run: &Run, limit: u32) -> ValueTable {
    let lines = run.lines(limit);
    let Some(proof) = run.proven() else {
        let rows = lines
            .into_iter()
            .map(|line| ValueRow {
                first: line.first,
                last: line.last,
                figure: line.figure,
                standing: Standing::Plain,
                reason: "Computed in double precision; nothing is proven of it yet.".to_owned(),
                residual: largest_residual(run, line.first, line.last),
            })
            .collect();
        return ValueTable {
            rows,
            words: "Nothing is proven of these figures yet; their last digits may be wrong."
                .to_owned(),
        };
    };
    let rows = lines
        .into_iter()
        .zip(proof.clusters())
        .map(|(line, cluster)| ValueRow {
            first: line.first,
            last: line.last,
            figure: line.figure,
            standing: if cluster.count() == 1 {
                Standing::Proven
            } else {
                Standing::Bounded
            },
            reason: reason(cluster, &theorems(run, cluster)),
            residual: largest_residual(run, line.first, line.last),
        })
        .collect();
    ValueTable {
        rows,
        words:
            "Every digit shown is proven; the figure in brackets is how far, in units of the last \
                digit, the eigenvalue can lie from the number printed."
                .to_owned(),
    }
}

fn largest_residual(run: &Run, first: u32, last: u32) -> Option<String> {
    let bound = |k: &usize| run.residual_bound(*k).unwrap_or(0.0);
    let largest =
        (first as usize - 1..last as usize).max_by(|a, b| bound(a).total_cmp(&bound(b)))?;
    run.residual_text(largest).map(|bound| typeset(&bound))
}

/// How good the whole set is, in units of n·u.
pub fn checks(run: &Run) -> Vec<Fact> {
    let Some(residuals) = &run.residuals else {
        return Vec::new();
    };
    let unit = run.order() as f64 * (f64::EPSILON / 2.0);
    let fact = |name: &str, norm: f64| Fact {
        name: name.to_owned(),
        figure: typeset(&decimal::magnitude(norm / unit)),
    };
    // Of a zero matrix the defect itself is told: it has no size to be held against.
    let size = if residuals.matrix_norm == 0.0 {
        1.0
    } else {
        residuals.matrix_norm
    };
    vec![
        fact(
            "backward error ‖A − MXΛXᴴM‖/(n·u·‖A‖)",
            residuals.reconstruction.approx_norm / size,
        ),
        fact(
            "orthogonality defect ‖XᴴMX − I‖/(n·u)",
            residuals.orthogonality.approx_norm,
        ),
    ]
}

/// The published sources that the bounds of a cluster rest on.
fn theorems(run: &Run, cluster: &Cluster) -> String {
    let mut sources: Vec<&str> = Vec::new();
    if let Some(proof) = run.proven() {
        for enclosure in &proof.enclosures()[cluster.first()..=cluster.last()] {
            let source = enclosure.theorem().source();
            if !sources.contains(&source) {
                sources.push(source);
            }
        }
    }
    sources.join("; ")
}

fn reason(cluster: &Cluster, theorems: &str) -> String {
    let (lower, upper) = cluster.decimals();
    let (lower, upper) = (typeset(&lower), typeset(&upper));
    if cluster.count() == 1 {
        format!(
            "Proven between {lower} and {upper}, and apart from all others. Rests on {theorems}."
        )
    } else {
        format!(
            "Exactly {} eigenvalues, with multiplicity, are proven between {lower} and {upper}; they are \
             not proven apart. Rests on {theorems}.",
            cluster.count()
        )
    }
}

/// Places shown of the components while nothing is proven of them.
const UNPROVEN_PLACES: u32 = 4;
/// Places shown at most: more than this no one reads off a bar chart.
const MOST_PLACES: u32 = 8;

/// The vector of the eigenvalue with `index` (from 0); a cluster has none.
pub fn vector(run: &Run, index: usize) -> Option<VectorView> {
    let solution = run.outcome.as_ref().ok()?;
    let vectors = &solution.approximation.vectors;
    if index >= vectors.cols() {
        return None;
    }
    let cluster = run.proven().and_then(|proof| proof.cluster_of(index));
    let labels = &run.heading.labels;
    let view = |decimals: Option<u32>, standing: String| VectorView {
        index: index as u32 + 1,
        convention: match decimals {
            Some(_) => convention(run),
            None => String::new(),
        },
        components: decimals
            .map(|decimals| vector::components(vectors, index, labels, decimals))
            .unwrap_or_default(),
        standing,
    };
    Some(match cluster {
        None => view(
            Some(UNPROVEN_PLACES),
            "Nothing is proven of this vector yet.".to_owned(),
        ),
        Some(cluster) if cluster.count() > 1 => view(None, space(cluster)),
        Some(cluster) => match cluster.sine() {
            Some(sine) => {
                let places = places(sine);
                view(Some(places.clamp(1, MOST_PLACES)), angle(run, sine))
            }
            None => view(
                Some(UNPROVEN_PLACES),
                "No bound below one is proven on the sine of its angle to the true eigenvector."
                    .to_owned(),
            ),
        },
    })
}

fn convention(run: &Run) -> String {
    let length = if run.problem.metric.is_some() {
        "xᴴMx = 1 in the scaled metric"
    } else {
        "unit length"
    };
    format!("Made to have {length}, with its largest component real and positive.")
}

/// Decimal places of a unit vector's components that an angle with this sine
/// leaves standing: the vectors differ by at most 2·sin(θ/2) ≤ 2 sin θ.
fn places(sine: &Dyadic) -> u32 {
    match figure::decimal_exponent(sine) {
        Some(exponent) => u32::try_from(-exponent - 1).unwrap_or(0),
        None => MOST_PLACES,
    }
}

fn angle(run: &Run, sine: &Dyadic) -> String {
    let product = if run.problem.metric.is_some() {
        ", in the inner product of the metric"
    } else {
        ""
    };
    format!(
        "The sine of its angle to the true eigenvector is at most {}{product}.",
        typeset(&figure::at_most(sine))
    )
}

fn space(cluster: &Cluster) -> String {
    let count = cluster.count();
    let (first, last) = (cluster.first() + 1, cluster.last() + 1);
    let known = match cluster.sine() {
        Some(sine) => format!(
            "together they span a space whose largest angle to the true one has a sine of at most {}",
            typeset(&figure::at_most(sine))
        ),
        None => "and no bound below one is proven on the angle of the space they span".to_owned(),
    };
    format!(
        "Eigenvalues {first} to {last} are not proven apart, so no {count} single vectors are singled out; \
         {known}."
    )
}

/// The closing balance: the proven bound, or before a proof the last measured one.
pub fn closing_balance(run: &Run) -> Settled {
    if let Some(bound) = run.proven().and_then(|proof| proof.closing_bound()) {
        return Settled {
            figure: format!("≤ {}", typeset(&figure::at_most(&bound))),
            standing: Standing::Proven,
            reason: "No eigenvalue is farther than this from the middle of its proven interval."
                .to_owned(),
        };
    }
    let measured = run
        .ledger
        .entries()
        .last()
        .map_or(0.0, |entry| entry.totals.balance);
    Settled {
        figure: super::map::scaled_magnitude(measured, run.scale()),
        standing: Standing::Plain,
        reason:
            "What the last entry of the ledger left outside the diagonal; not a bound on any error."
                .to_owned(),
    }
}

/// Decimal ends of every eigenvalue, for the files.
pub fn proven_ends(run: &Run) -> Vec<super::export::ProvenEnds> {
    let Some(proof) = run.proven() else {
        return Vec::new();
    };
    proof
        .clusters()
        .iter()
        .flat_map(|cluster| (cluster.first()..=cluster.last()).map(move |k| (k, cluster)))
        .map(|(k, cluster)| {
            let (lower, upper) = proof.enclosures()[k].decimals();
            super::export::ProvenEnds {
                lower,
                upper,
                first: cluster.first() as u32 + 1,
                last: cluster.last() as u32 + 1,
            }
        })
        .collect()
}
