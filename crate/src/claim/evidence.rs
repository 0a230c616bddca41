//! What a claim is held against: the exact spectrum where there is one, else
//! enclosures that can be deepened.

use dashu_ratio::RBig;

use super::eigenvectors::{eigenspace, Space};
use super::interval::{Complex, Precision};
use super::proven::Proven;
use crate::control::Control;
use crate::exact::{spectrum, ExactError, ExactSpectrum, Limits};
use crate::matrix::ExactMatrix;
use crate::pairs::Approximation;
use crate::problem::Problem;
use crate::prove::Proof;

/// An interval proven to hold exactly `count` eigenvalues, with multiplicity.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct EnclosedValue {
    /// Lower end.
    pub lower: RBig,
    /// Upper end.
    pub upper: RBig,
    /// Index of the first of them in ascending order, from 0.
    pub first: usize,
    /// How many.
    pub count: usize,
}

/// Asks the proof stage for narrower enclosures; `None` when there are none.
pub type Deepen<'a> = dyn FnMut() -> Option<Vec<EnclosedValue>> + 'a;

/// Evidence about the eigenvalues of one problem.
pub struct Evidence<'a> {
    pub(super) exact: Option<ExactSpectrum>,
    proven: Option<Proven<'a>>,
    values: Vec<EnclosedValue>,
    deepen: Option<Box<Deepen<'a>>>,
    /// Bits of width the exact intervals are refined to, and working precision
    /// of interval arithmetic.
    bits: usize,
}

/// Where deepening stops: about 1,200 digits.
const CAP_BITS: usize = 4_096;
const FIRST_BITS: usize = 128;

impl<'a> Evidence<'a> {
    fn empty() -> Self {
        Self {
            exact: None,
            proven: None,
            values: Vec::new(),
            deepen: None,
            bits: FIRST_BITS,
        }
    }

    /// Evidence from the exact road.
    ///
    /// # Errors
    /// As [`crate::exact::spectrum()`].
    pub fn exact(
        problem: &Problem,
        limits: &Limits,
        control: &mut dyn Control,
    ) -> Result<Self, ExactError> {
        Ok(Self::from_exact(spectrum(problem, limits, control)?))
    }

    /// Evidence from an exact spectrum already at hand.
    pub fn from_exact(spectrum: ExactSpectrum) -> Self {
        let mut evidence = Self {
            exact: Some(spectrum),
            ..Self::empty()
        };
        evidence.refresh();
        evidence
    }

    /// Evidence from a proof, taken to further levels as claims need it. The
    /// proof and the approximation must be those of `problem`.
    pub fn proven(problem: &'a Problem, approximation: &'a Approximation, proof: Proof) -> Self {
        let mut evidence = Self {
            proven: Some(Proven::new(problem, approximation, proof)),
            ..Self::empty()
        };
        evidence.refresh();
        evidence
    }

    /// The exact road where `limits` allow it, else the proof.
    pub fn best(
        problem: &'a Problem,
        approximation: &'a Approximation,
        proof: Proof,
        limits: &Limits,
        control: &mut dyn Control,
    ) -> Self {
        Self::exact(problem, limits, control)
            .unwrap_or_else(|_| Self::proven(problem, approximation, proof))
    }

    /// Evidence from proven enclosures of any source, ascending and complete;
    /// `deepen` returns narrower ones while it can.
    pub fn enclosed(values: Vec<EnclosedValue>, deepen: Option<Box<Deepen<'a>>>) -> Self {
        Self {
            values,
            deepen,
            ..Self::empty()
        }
    }

    /// The enclosures as they stand.
    pub fn values(&self) -> &[EnclosedValue] {
        &self.values
    }

    /// Number of eigenvalues, with multiplicity.
    pub fn order(&self) -> usize {
        self.values.iter().map(|value| value.count).sum()
    }

    /// Working precision that goes with the enclosures.
    pub(super) fn precision(&self) -> Precision {
        Precision(self.bits)
    }

    /// Narrows everything; false at the cap.
    pub fn narrow(&mut self) -> bool {
        if self.bits >= CAP_BITS {
            return false;
        }
        if self.exact.is_some() {
            self.bits *= 2;
            self.refresh();
            return true;
        }
        if let Some(proven) = &mut self.proven {
            if !proven.narrow() {
                return false;
            }
            self.bits *= 2;
            self.refresh();
            return true;
        }
        let Some(values) = self.deepen.as_mut().and_then(|deepen| deepen()) else {
            return false;
        };
        self.values = values;
        self.bits *= 2;
        true
    }

    /// The space that goes with the value at `place`, where it is known.
    pub(super) fn space(&self, place: usize) -> Option<Space> {
        match &self.proven {
            Some(proven) => proven.space(self.values.get(place)?.first, self.precision()),
            None => eigenspace(self, place),
        }
    }

    fn refresh(&mut self) {
        if let Some(proven) = &self.proven {
            self.values = proven.values();
        }
        let Some(spectrum) = &mut self.exact else {
            return;
        };
        for eigenvalue in &mut spectrum.eigenvalues {
            eigenvalue
                .root
                .refine_relative(i64::try_from(self.bits).unwrap_or(i64::MAX));
        }
        self.values = spectrum
            .eigenvalues
            .iter()
            .map(|eigenvalue| EnclosedValue {
                lower: eigenvalue.root.lower(),
                upper: eigenvalue.root.upper(),
                first: eigenvalue.first_index,
                count: eigenvalue.multiplicity,
            })
            .collect();
    }

    /// The value's closed form where it has one, else its proven digits.
    pub(super) fn told(&self, place: usize) -> String {
        let value = &self.values[place];
        let digits = super::print::enclosed(&value.lower, &value.upper, 12);
        let form = self
            .exact
            .as_ref()
            .and_then(|spectrum| spectrum.eigenvalues.get(place))
            .and_then(|eigenvalue| eigenvalue.form.as_ref());
        match form {
            Some(crate::exact::ClosedForm::Rational(value)) if value.denominator().is_one() => {
                form.map_or(digits, ToString::to_string)
            }
            Some(form) => format!("{form} = {digits}"),
            None => digits,
        }
    }
}

/// Enclosures of all entries, row-major.
pub(super) fn entries(matrix: &ExactMatrix, precision: Precision) -> Vec<Complex> {
    let order = matrix.order();
    let mut cells = Vec::with_capacity(order * order);
    for row in 0..order {
        for col in 0..order {
            cells.push(Complex {
                re: matrix.re(row, col).enclose(precision.0),
                im: matrix.im(row, col).enclose(precision.0),
            });
        }
    }
    cells
}
