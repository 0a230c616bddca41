//! Eigenvalues as ranges over all matrices within the tolerances.
//!
//! Notation: T, T_M the non-negative matrices of tolerances of A and M; ΔA, ΔM
//! any Hermitian changes with |ΔA| ≤ T, |ΔM| ≤ T_M; X, Λ, F, G as in
//! [`super::tight`]; primes mark the changed problem.
//!
//! For M = I without T_M, Weyl (1912): |λₖ′ − λₖ| ≤ ‖ΔA‖₂ ≤ ‖T‖₂, and ‖T‖₂ ≤
//! maxᵢ (Tv)ᵢ/vᵢ for any positive v (Collatz 1942; T is symmetric).
//!
//! In general G′ = G + XᴴΔAX − XᴴΔMXΛ and F′ = F + XᴴΔMX, so with P = |X|ᴴT|X|,
//! Q = |X|ᴴT_M|X| column k of G′ is within pₖ = Pₖ + Qₖ|λ̃ₖ| of that of G, entry
//! by entry, and φ′ ≤ φ + ‖Q‖. The statements on G and F then hold for G′ and
//! F′: |λₖ′ − λ̃ₖ| ≤ ‖G′‖/(1 − φ′) for all k; and where the ranges of k and its
//! neighbours stay apart, Temple's bound with |ρ′ − λ̃ₖ| ≤ s = (gₖ + pₖₖ)/(1 − φ′),
//! gₖ ≥ ‖Gₖ‖, and η′ ≤ (gₖ + ‖pₖ‖ + sφ′)/(1 − φ′). To first order the range is
//! ±pₖₖ: the sum of what each entry can do.

use nalgebra::DMatrix;

use crate::control::Control;
use crate::matrix::kernels::product;
use crate::matrix::Dense;
use crate::num::figure;
use crate::num::{Dyadic, Toward, Upper};
use crate::pairs::Approximation;
use crate::problem::{Problem, Tolerances};

use super::frame::{magnitude, Frame};
use super::norms::{column_norms, modulus_up, Norms, Rounding};
use super::products::Watch;
use super::residual;

/// The proven range of one eigenvalue over all problems within the tolerances:
/// λₖ′ in ascending order stays inside, for each k.
#[derive(Clone, Debug)]
pub struct Range {
    index: usize,
    lower: Dyadic,
    upper: Dyadic,
}

impl Range {
    /// Position in ascending order, from 0.
    pub fn index(&self) -> usize {
        self.index
    }

    /// No λₖ′ is below.
    pub fn lower(&self) -> &Dyadic {
        &self.lower
    }

    /// No λₖ′ is above.
    pub fn upper(&self) -> &Dyadic {
        &self.upper
    }

    /// Decimal ends, rounded outward.
    pub fn decimals(&self) -> (String, String) {
        figure::outward(&self.lower, &self.upper)
    }
}

/// Ranges of all eigenvalues, ascending; `None` when nothing is proven: X too
/// far from M-orthonormal, a cancel, or tolerances of the metric that might make it
/// singular.
///
/// Not claimed: that the ends are attained. Cost: 2 n³ besides the quick proof
/// (4 n³ with tolerances in the metric).
pub fn tolerance_ranges(
    problem: &Problem,
    approximation: &Approximation,
    tolerances: Option<&Tolerances>,
    metric_tolerances: Option<&Tolerances>,
    control: &mut dyn Control,
) -> Option<Vec<Range>> {
    let mut frame = Frame::new(problem, approximation).ok()?;
    let mut watch = Watch { control, done: 0.0 };
    let (gram, residual) = residual::measure(&mut frame, &mut watch).ok()?;
    let spread = Spread::of(&frame, tolerances, metric_tolerances)?;
    let defect = gram.defect.plus(spread.defect);
    let floor = defect.one_minus();
    // `residual` is already divided by 1 − φ or its root: ‖G‖ is no larger.
    let radius = residual.radius.plus(spread.norm).over(floor);
    let mut bounds = Bounds::around(&frame, radius)?;
    if frame.metric.is_none() {
        let weyl = residual.radius.plus(spread.typed_norm);
        bounds.tighten_all(&frame, weyl)?;
    }
    let linear = bounds.clone();
    for k in 0..frame.order {
        bounds.temple_kato(k, &linear, &frame, residual.columns[k], &spread, defect);
    }
    let scale = frame.scale();
    let ranges = bounds.lower.iter().zip(&bounds.upper).enumerate();
    Some(
        ranges
            .map(|(index, (lower, upper))| Range {
                index,
                lower: lower.scaled(scale),
                upper: upper.scaled(scale),
            })
            .collect(),
    )
}

/// What the tolerances can do to G and F.
struct Spread {
    /// Bound on |G′ − G| entry by entry: p, n × n.
    coupling: DMatrix<f64>,
    /// ≥ ‖p‖₂.
    norm: Upper,
    /// ≥ ‖p's column k‖₂.
    columns: Vec<Upper>,
    /// ≥ ‖Q‖₂.
    defect: Upper,
    /// ≥ ‖T‖₂.
    typed_norm: Upper,
}

impl Spread {
    fn of(
        frame: &Frame,
        tolerances: Option<&Tolerances>,
        metric: Option<&Tolerances>,
    ) -> Option<Self> {
        let order = frame.order;
        let moduli = DMatrix::from_fn(order, order, |i, k| {
            let im = frame.vectors.im.as_ref().map_or(0.0, |im| im[(i, k)]);
            modulus_up(frame.vectors.re[(i, k)], im)
        });
        let zero = DMatrix::zeros(order, order);
        let typed = tolerances.map_or(Some(zero.clone()), |found| {
            radii(found, frame, frame.matrix_scale)
        })?;
        let typed_norm = symmetric_norm(&typed);
        let mut coupling = sandwich(&moduli, &typed)?;
        let mut defect = Upper::ZERO;
        if let Some(found) = metric {
            let weighted = sandwich(&moduli, &radii(found, frame, frame.metric_scale)?)?;
            defect = Norms::of(&Dense::real(weighted.clone())).spectral;
            for (k, value) in frame.values.iter().enumerate() {
                for i in 0..order {
                    let moved = Upper::of(weighted[(i, k)]).times(Upper::of(*value));
                    coupling[(i, k)] = Upper::of(coupling[(i, k)]).plus(moved).get();
                }
            }
        }
        let dense = Dense::real(coupling.clone());
        let (columns, _) = column_norms(&dense);
        Some(Self {
            coupling,
            norm: Norms::of(&dense).spectral,
            columns,
            defect,
            typed_norm,
        })
    }
}

/// The tolerances in the frame, rounded up.
fn radii(tolerances: &Tolerances, frame: &Frame, scale: i32) -> Option<DMatrix<f64>> {
    let order = frame.order;
    if tolerances.order() != order {
        return None;
    }
    let plane = DMatrix::from_fn(order, order, |i, j| {
        let radius = tolerances.radius(i, j);
        match magnitude(radius) {
            None => 0.0,
            Some(_) => radius
                .nearest(scale - frame.weights[i] - frame.weights[j])
                .abs()
                .next_up(),
        }
    });
    plane.iter().all(|x| x.is_finite()).then_some(plane)
}

/// |X|ᵀT|X| rounded up: two products of non-negative matrices, whose plain
/// value is below the true one by at most the factor 1 − γ and underflow.
fn sandwich(moduli: &DMatrix<f64>, tolerances: &DMatrix<f64>) -> Option<DMatrix<f64>> {
    let order = moduli.nrows();
    let half = product(
        &Dense::real(tolerances.clone()),
        &Dense::real(moduli.clone()),
    );
    let whole = product(&Dense::real(moduli.transpose()), &half).re;
    let rounding = Rounding::new(order, order, false);
    let stretch = rounding
        .factor
        .plus(rounding.factor)
        .plus(rounding.factor)
        .plus(Upper::of(1.0));
    let lost = rounding.underflow.times(Upper::of(1.0 + order as f64));
    let up = whole.map(|x| {
        Upper::of(x)
            .times(stretch)
            .plus(if x == 0.0 { Upper::ZERO } else { lost })
            .get()
    });
    up.iter().all(|x| x.is_finite()).then_some(up)
}

/// ≥ ‖T‖₂ of a symmetric non-negative matrix: the largest row sum, sharpened by
/// a few steps of the power method (Collatz).
fn symmetric_norm(matrix: &DMatrix<f64>) -> Upper {
    let order = matrix.nrows();
    let mut vector = vec![1.0f64; order];
    let mut best = Norms::of(&Dense::real(matrix.clone())).spectral;
    for _ in 0..POWER_STEPS {
        let mut image = vec![0.0f64; order];
        for (j, weight) in vector.iter().enumerate() {
            for (i, sum) in image.iter_mut().enumerate() {
                *sum += matrix[(i, j)] * weight;
            }
        }
        let stretch = Upper::of(1.0).plus(
            Rounding::new(order, order, false)
                .factor
                .times(Upper::of(2.0)),
        );
        let quotient = image
            .iter()
            .zip(&vector)
            .fold(Upper::ZERO, |most, (sum, weight)| {
                most.most(Upper::of(*sum).times(stretch).over(*weight))
            });
        best = best.least(quotient.plus(Upper::of(f64::MIN_POSITIVE)));
        let largest = image.iter().fold(0.0, |most: f64, sum| most.max(*sum));
        if largest == 0.0 {
            break;
        }
        // Kept positive: a vector with a zero bounds nothing.
        vector = image
            .iter()
            .zip(&vector)
            .map(|(sum, weight)| (sum / largest + weight) / 2.0)
            .collect();
    }
    best
}

/// Steps of the power method.
const POWER_STEPS: usize = 12;

#[derive(Clone)]
struct Bounds {
    lower: Vec<Dyadic>,
    upper: Vec<Dyadic>,
}

impl Bounds {
    fn around(frame: &Frame, radius: Upper) -> Option<Self> {
        let radius = radius.exact()?;
        let values: Vec<Dyadic> = frame
            .values
            .iter()
            .map(|&value| Dyadic::from_f64(value))
            .collect::<Option<_>>()?;
        Some(Self {
            lower: values.iter().map(|value| value - &radius).collect(),
            upper: values.iter().map(|value| value + &radius).collect(),
        })
    }

    fn tighten_all(&mut self, frame: &Frame, radius: Upper) -> Option<()> {
        let other = Self::around(frame, radius)?;
        for k in 0..frame.order {
            self.tighten(k, other.lower[k].clone(), other.upper[k].clone());
        }
        Some(())
    }

    fn tighten(&mut self, k: usize, lower: Dyadic, upper: Dyadic) {
        if self.lower[k] < lower {
            self.lower[k] = lower;
        }
        if upper < self.upper[k] {
            self.upper[k] = upper;
        }
    }

    /// Temple's bound for every changed problem, where the linear ranges of k
    /// and its neighbours are apart.
    fn temple_kato(
        &mut self,
        k: usize,
        linear: &Self,
        frame: &Frame,
        column: Upper,
        spread: &Spread,
        defect: Upper,
    ) {
        let order = frame.order;
        let apart_below = k == 0 || linear.upper[k - 1] < linear.lower[k];
        let apart_above = k + 1 == order || linear.upper[k] < linear.lower[k + 1];
        if !apart_below || !apart_above {
            return;
        }
        let floor = defect.one_minus();
        let shift = column.plus(Upper::of(spread.coupling[(k, k)])).over(floor);
        let eta = column
            .plus(spread.columns[k])
            .plus(shift.times(defect))
            .over(floor);
        let (Some(shift), Some(squares), Some(value)) = (
            shift.exact(),
            eta.times(eta).exact(),
            Dyadic::from_f64(frame.values[k]),
        ) else {
            return;
        };
        let (rho_low, rho_high) = (&value - &shift, &value + &shift);
        // A gap that is not positive leaves that end as it is.
        let over = |gap: Option<Dyadic>| match gap {
            None => Some(Dyadic::ZERO),
            Some(gap) => squares.divided(&gap, 64, Toward::Up),
        };
        let above = over((k + 1 < order).then(|| &linear.lower[k + 1] - &rho_high));
        let below = over((k > 0).then(|| &rho_low - &linear.upper[k - 1]));
        let lower = above.map_or(self.lower[k].clone(), |term| &rho_low - &term);
        let upper = below.map_or(self.upper[k].clone(), |term| &rho_high + &term);
        self.tighten(k, lower, upper);
    }
}
