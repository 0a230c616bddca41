//! The exact tridiagonal form of a rational Hermitian matrix or pair.
//!
//! Notation: p₁ = e₁; αₖ = pₖ*Apₖ / pₖ*Mpₖ;
//! p_{k+1} = M⁻¹Apₖ − αₖpₖ − β²_{k−1}p_{k−1}; β²ₖ = p_{k+1}*Mp_{k+1} / pₖ*Mpₖ.
//! A reduction whose first basis vector is a multiple of e₁ must end in this
//! form, up to the signs (phases) of its off-diagonals: the implicit Q theorem
//! (Golub and Van Loan, Matrix Computations, section 8.3, from memory).

use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::gauss::{apply, inner, primitive, Gauss};
use super::integers::{integers, metric_quotient, Integers};
use super::limits::{ExactError, Limits, Meter};
use super::polynomial::Polynomial;
use crate::control::Control;
use crate::problem::Problem;

/// The exact form T: rational diagonal, rational squared off-diagonals.
#[derive(Clone, Debug)]
pub struct ExactTridiagonal {
    /// αₖ, length n.
    pub diagonal: Vec<RBig>,
    /// β²ₖ between rows k and k+1, length n − 1; zero where the form splits.
    pub squares: Vec<RBig>,
    /// First row of each unreduced block, ascending, the first being 0. When
    /// there is more than one, the rows from the second block on depend on the
    /// vector the recurrence was restarted from: T is then one of many. The
    /// characteristic polynomial is not affected.
    pub blocks: Vec<usize>,
    /// Integer multiples of the basis vectors pₖ, in order; each is primitive.
    /// Column k of the reduction's Q is a unit multiple (in the metric) of it.
    pub basis: Vec<Vec<Gauss>>,
    /// Squared norms of `basis`, in the metric with its denominators cleared.
    pub norms: Vec<IBig>,
    /// Bits of the largest integer met on the way.
    pub largest_bits: usize,
}

/// How many eigenvalues lie below, at and above a point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Counts {
    /// λ < x.
    pub below: usize,
    /// λ = x.
    pub equal: usize,
    /// λ > x.
    pub above: usize,
}

/// The exact tridiagonal form of `problem`.
///
/// Cost: O(n³) operations on integers of up to about 2n²·b bits, b the bits of
/// an entry.
///
/// # Errors
/// [`ExactError`]: order or growth beyond `limits`, an irrational entry, a
/// metric that is not positive definite, or a cancel.
pub fn tridiagonal(
    problem: &Problem,
    limits: &Limits,
    control: &mut dyn Control,
) -> Result<ExactTridiagonal, ExactError> {
    let mut meter = Meter::new(limits, control);
    meter.check_order(problem.matrix.order())?;
    let pair = integers(problem, &mut meter)?;
    let operator = Operator::new(&pair, &mut meter)?;
    let order = pair.order;
    let mut basis: Vec<Step> = Vec::with_capacity(order);
    let mut form = ExactTridiagonal {
        diagonal: Vec::with_capacity(order),
        squares: Vec::with_capacity(order.saturating_sub(1)),
        blocks: Vec::new(),
        basis: Vec::with_capacity(order),
        norms: Vec::with_capacity(order),
        largest_bits: 0,
    };
    while basis.len() < order {
        let next = match basis.last() {
            Some(_) => operator.continued(&basis, form.blocks.last().copied(), &mut meter)?,
            None => None,
        };
        let vector = match next {
            Some(vector) => vector,
            None => {
                form.blocks.push(basis.len());
                operator.restarted(&basis, &mut meter)?
            }
        };
        let step = operator.step(vector);
        meter.see(&step.energy)?;
        meter.see(&step.norm)?;
        if let Some(last) = basis.last() {
            let square = if form.blocks.last() == Some(&basis.len()) {
                RBig::ZERO
            } else {
                // |pₖ*Ap_{k+1}|² / (‖pₖ‖²‖p_{k+1}‖²) does not see the scaling.
                let coupling = inner(&last.image, &step.vector).norm_squared();
                ratio(coupling, &last.norm * &step.norm) * &pair.unit * &pair.unit
            };
            form.squares.push(square);
        }
        form.diagonal
            .push(ratio(step.energy.clone(), step.norm.clone()) * &pair.unit);
        basis.push(step);
        meter.progress(0.3 + 0.7 * basis.len() as f64 / order as f64)?;
    }
    for step in basis {
        form.basis.push(step.vector);
        form.norms.push(step.norm);
    }
    form.largest_bits = meter.largest_bits;
    Ok(form)
}

/// One vector of the recurrence with what the formulas need of it.
struct Step {
    vector: Vec<Gauss>,
    /// A·vector.
    image: Vec<Gauss>,
    /// M·vector.
    weighed: Vec<Gauss>,
    /// vector*·A·vector, real.
    energy: IBig,
    /// vector*·M·vector, positive.
    norm: IBig,
}

/// A, M and (for a pair) det(M)·M⁻¹A in integers.
struct Operator<'a> {
    pair: &'a Integers,
    quotient: Option<(IBig, Vec<Gauss>)>,
}

impl<'a> Operator<'a> {
    fn new(pair: &'a Integers, meter: &mut Meter<'_>) -> Result<Self, ExactError> {
        let quotient = match &pair.metric {
            Some(metric) => Some(metric_quotient(&pair.matrix, metric, pair.order, meter)?),
            None => None,
        };
        Ok(Self { pair, quotient })
    }

    fn step(&self, vector: Vec<Gauss>) -> Step {
        let image = apply(&self.pair.matrix, &vector);
        let weighed = match &self.pair.metric {
            Some(metric) => apply(metric, &vector),
            None => vector.clone(),
        };
        let energy = inner(&vector, &image).re;
        let norm = inner(&vector, &weighed).re;
        Step {
            vector,
            image,
            weighed,
            energy,
            norm,
        }
    }

    /// The next vector of the recurrence, or `None` where the form splits.
    fn continued(
        &self,
        basis: &[Step],
        block: Option<usize>,
        meter: &mut Meter<'_>,
    ) -> Result<Option<Vec<Gauss>>, ExactError> {
        let last = &basis[basis.len() - 1];
        let before = (block != Some(basis.len() - 1)).then(|| &basis[basis.len() - 2]);
        let (determinant, moved) = match &self.quotient {
            Some((determinant, quotient)) => (determinant.clone(), apply(quotient, &last.vector)),
            None => (IBig::ONE, last.image.clone()),
        };
        // Everything is multiplied by det(M)·‖pₖ‖²·‖p_{k−1}‖², then made primitive.
        let before_norm = before.map_or(IBig::ONE, |step| step.norm.clone());
        let lead = &last.norm * &before_norm;
        let along = &determinant * &last.energy * &before_norm;
        let back =
            before.map(|step| inner(&step.image, &last.vector).re * &determinant * &last.norm);
        let mut next = Vec::with_capacity(moved.len());
        for row in 0..moved.len() {
            let mut value = moved[row]
                .scaled(&lead)
                .minus(&last.vector[row].scaled(&along));
            if let (Some(step), Some(back)) = (before, &back) {
                value = value.minus(&step.vector[row].scaled(back));
            }
            meter.see_gauss(&value)?;
            next.push(value);
        }
        primitive(&mut next);
        Ok(next.iter().any(|value| !value.is_zero()).then_some(next))
    }

    /// The first unit vector that is not in the span of `basis`, made
    /// M-orthogonal to it.
    fn restarted(&self, basis: &[Step], meter: &mut Meter<'_>) -> Result<Vec<Gauss>, ExactError> {
        let order = self.pair.order;
        let mut vector = vec![Gauss::ZERO; order];
        for column in 0..order {
            vector = vec![Gauss::ZERO; order];
            vector[column] = Gauss::real(IBig::ONE);
            for step in basis {
                let overlap = inner(&step.weighed, &vector);
                if overlap.is_zero() {
                    continue;
                }
                for row in 0..order {
                    let value = vector[row]
                        .scaled(&step.norm)
                        .minus(&step.vector[row].times(&overlap));
                    meter.see_gauss(&value)?;
                    vector[row] = value;
                }
                primitive(&mut vector);
            }
            if vector.iter().any(|value| !value.is_zero()) {
                break;
            }
        }
        Ok(vector)
    }
}

/// numerator / denominator for a positive denominator.
fn ratio(numerator: IBig, denominator: IBig) -> RBig {
    let denominator = UBig::try_from(denominator).unwrap_or(UBig::ONE);
    RBig::from_parts(numerator, denominator)
}

impl ExactTridiagonal {
    /// Number of rows.
    pub fn order(&self) -> usize {
        self.diagonal.len()
    }

    /// Rows of each unreduced block, as half-open ranges.
    pub fn block_ranges(&self) -> Vec<core::ops::Range<usize>> {
        let mut ranges = Vec::with_capacity(self.blocks.len());
        for (place, &start) in self.blocks.iter().enumerate() {
            let end = self.blocks.get(place + 1).copied().unwrap_or(self.order());
            ranges.push(start..end);
        }
        ranges
    }

    /// Monic characteristic polynomial det(λI − T), coefficients ascending in
    /// powers of λ, from q_{k+1} = (λ − α_{k+1})qₖ − β²ₖq_{k−1}. For a pair it
    /// is det(λM − A)/det(M).
    pub fn characteristic(&self) -> Vec<RBig> {
        self.recurrence(0..self.order())
    }

    /// The characteristic polynomial of one block, in primitive integers.
    pub fn block_polynomial(&self, rows: core::ops::Range<usize>) -> Polynomial {
        Polynomial::from_rationals(&self.recurrence(rows))
    }

    fn recurrence(&self, rows: core::ops::Range<usize>) -> Vec<RBig> {
        let mut before: Vec<RBig> = Vec::new();
        let mut current = vec![RBig::ONE];
        for k in rows.clone() {
            let mut next = vec![RBig::ZERO; current.len() + 1];
            for (power, coefficient) in current.iter().enumerate() {
                next[power + 1] += coefficient;
                next[power] -= &self.diagonal[k] * coefficient;
            }
            if k > rows.start {
                for (power, coefficient) in before.iter().enumerate() {
                    next[power] -= &self.squares[k - 1] * coefficient;
                }
            }
            before = current;
            current = next;
        }
        current
    }

    /// Exact counts of eigenvalues about a rational point, by the signs of the
    /// Sturm sequence q₀, q₁, … of each block (Givens 1954).
    pub fn counts(&self, x: &RBig) -> Counts {
        let mut below = 0;
        let mut equal = 0;
        for rows in self.block_ranges() {
            let mut before = RBig::ZERO;
            let mut current = RBig::ONE;
            let mut positive = true;
            for k in rows.clone() {
                let mut next = (&self.diagonal[k] - x) * &current;
                if k > rows.start {
                    next -= &self.squares[k - 1] * &before;
                }
                // dₖ = next/current; a zero in between takes the sign that
                // makes one change over the two steps it touches.
                let next_positive = if next.is_zero() {
                    positive
                } else {
                    next > RBig::ZERO
                };
                if next_positive != positive {
                    below += 1;
                }
                positive = next_positive;
                before = current;
                current = next;
            }
            if current.is_zero() {
                equal += 1;
            }
        }
        Counts {
            below,
            equal,
            above: self.order() - below - equal,
        }
    }
}
