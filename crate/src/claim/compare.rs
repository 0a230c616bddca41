//! Stated figures against intervals.

use dashu_ratio::RBig;

use super::figure::{size, Figure, Span};
use super::interval::{middle, Complex, Real};
use super::print;
use super::vectors::complex_text;
use super::verdict::{Finding, FindingKind};

/// How a stated figure stands to a true number known as an interval.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Fit {
    /// The truth lies within what is stated.
    Inside,
    /// It does not.
    Outside,
    /// Not decided.
    Unclear,
}

impl Fit {
    pub(super) fn and(self, other: Self) -> Self {
        match (self, other) {
            (Self::Outside, _) | (_, Self::Outside) => Self::Outside,
            (Self::Unclear, _) | (_, Self::Unclear) => Self::Unclear,
            _ => Self::Inside,
        }
    }
}

/// A stated span against rational ends.
pub(super) fn fit_ends(span: &Span, low: &RBig, high: &RBig) -> Fit {
    if span.low <= *low && *high <= span.high {
        Fit::Inside
    } else if *high < span.low || span.high < *low {
        Fit::Outside
    } else {
        Fit::Unclear
    }
}

pub(super) fn fit_real(span: &Span, truth: &Real) -> Fit {
    fit_ends(span, &truth.lower_ratio(), &truth.upper_ratio())
}

pub(super) fn fit(figure: &Figure, truth: &Complex) -> Fit {
    fit_real(&figure.re, &truth.re).and(fit_real(&figure.im, &truth.im))
}

/// Distance of the stated number from the middle of the truth.
pub(super) fn distance(figure: &Figure, truth: &Complex) -> RBig {
    let re = size(&(&figure.re.stated - middle(&truth.re)));
    let im = size(&(&figure.im.stated - middle(&truth.im)));
    re.max(im)
}

/// The finding for an entry that departs.
pub(super) fn departure(row: usize, col: usize, figure: &Figure, truth: &Complex) -> Finding {
    let text = format!(
        "row {}, column {}: {} is stated and {} is true, off by {}",
        row + 1,
        col + 1,
        figure.text,
        complex_text(truth),
        print::at_least(&distance(figure, truth))
    );
    Finding::at(FindingKind::Departure, row, col, text)
}
