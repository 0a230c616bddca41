//! Is the metric positive definite, and if not, where does it fail?
//!
//! Notation: Dₖ the leading principal minor of order k (D₀ = 1); dₖ = Dₖ/Dₖ₋₁
//! the k-th pivot of M = L·diag(d)·Lᴴ. M is positive definite exactly when
//! every Dₖ is positive (Sylvester).
//!
//! Rational metrics of small order are decided exactly, by fraction-free
//! elimination (Bareiss 1968), in which the k-th pivot is Dₖ itself. Larger
//! ones are factored in doubles; where a pivot fails there, a witness v with
//! vᴴMv ≤ 0 is evaluated with outward rounding on the exact entries, so a
//! refusal is certain. That every pivot came out positive in doubles is *not*
//! a proof of definiteness; the proof stage gives that.

use crate::exact::Gauss;
use crate::matrix::{Dense, ExactMatrix};
use crate::num::exact::DyadicInterval;
use crate::num::figure;
use crate::reduce::cholesky;
use dashu_base::{BitTest, Gcd, UnsignedAbs};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// Orders up to which a rational metric is decided exactly.
const EXACT_ORDER: usize = 16;

/// Significant digits of a pivot in a sentence.
const PIVOT_DIGITS: usize = 7;

/// Bits carried while a witness is evaluated.
const WITNESS_BITS: usize = 256;

/// Where a metric fails to be positive definite.
#[derive(Clone, Debug, PartialEq)]
pub struct MetricFault {
    /// Order of the first leading block that is not positive definite.
    pub block: usize,
    /// The pivot dₖ of that block: what is left of its last diagonal entry
    /// after the rows before it are taken out; not positive.
    pub pivot: f64,
    /// Whether this is certain about the exact entries.
    pub certainty: Certainty,
}

/// How sure a statement about the metric is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Certainty {
    /// It holds for the exact entries.
    Proven,
    /// It holds in double precision; the exact entries may differ.
    InDoubles,
}

impl std::fmt::Display for MetricFault {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let k = self.block;
        let pivot = figure::plain(self.pivot, PIVOT_DIGITS);
        let what = if k == 1 {
            format!("its first diagonal entry is {pivot}")
        } else {
            format!(
                "its leading {k} × {k} block is not, while the {} × {} block is: the pivot of \
                 row {k} is {pivot}",
                k - 1,
                k - 1,
            )
        };
        match self.certainty {
            Certainty::Proven => write!(
                f,
                "The metric is not positive definite: {what}, and it must be above zero."
            ),
            Certainty::InDoubles => write!(
                f,
                "The metric cannot be told from a singular one in double precision: {what}."
            ),
        }
    }
}

/// What is known of a metric.
#[derive(Clone, Debug, PartialEq)]
pub enum MetricVerdict {
    /// Every pivot is positive.
    Positive {
        /// Whether that is certain about the exact entries.
        certainty: Certainty,
        /// About how many of 16 decimal digits cancel in the factorisation:
        /// the decimal logarithm of the largest ratio of a diagonal entry
        /// to its pivot. An
        /// estimate, not a bound.
        digits_lost: u32,
    },
    /// Some pivot is not.
    NotPositive(MetricFault),
}

impl MetricVerdict {
    /// What a person should know about a metric that is nearly singular;
    /// `None` when less than four digits are lost.
    pub fn warning(&self) -> Option<String> {
        match self {
            Self::Positive { digits_lost, .. } if *digits_lost >= 4 => Some(format!(
                "The metric is nearly singular: about {digits_lost} of 16 digits cancel when it \
                 is factored, and eigenvalues may lose as many. The proof says what is left."
            )),
            _ => None,
        }
    }
}

/// Tests an exactly Hermitian metric. Cost: n³/3 double operations, or
/// fraction-free elimination in integers for small rational metrics.
pub fn metric_check(metric: &ExactMatrix) -> MetricVerdict {
    let n = metric.order();
    if n <= EXACT_ORDER {
        if let Some(minors) = leading_minors(metric) {
            return by_minors(metric, &minors);
        }
    }
    in_doubles(metric)
}

/// Integer entries k·m with one k > 0 for all; `None` if some is irrational.
fn integers(metric: &ExactMatrix) -> Option<(Vec<Gauss>, UBig)> {
    let n = metric.order();
    let mut ratios = Vec::with_capacity(n * n);
    let mut common = UBig::ONE;
    for row in 0..n {
        for col in 0..n {
            let (re, im) = (
                metric.re(row, col).rational()?,
                metric.im(row, col).rational()?,
            );
            for r in [&re, &im] {
                let d = r.denominator();
                common = &common / (&common).gcd(d) * d;
            }
            ratios.push((re, im));
        }
    }
    let whole = |r: &RBig| r.numerator() * IBig::from(&common / r.denominator());
    let cells = ratios
        .iter()
        .map(|(re, im)| Gauss {
            re: whole(re),
            im: whole(im),
        })
        .collect();
    Some((cells, common))
}

/// D₁, D₂, … up to the first that is not positive.
fn leading_minors(metric: &ExactMatrix) -> Option<Vec<RBig>> {
    let n = metric.order();
    let (mut a, unit) = integers(metric)?;
    let mut minors = Vec::with_capacity(n);
    let mut previous = IBig::ONE;
    let mut scale = UBig::ONE;
    for k in 0..n {
        let pivot = a[k * n + k].re.clone();
        scale *= &unit;
        minors.push(RBig::from_parts(pivot.clone(), scale.clone()));
        if pivot <= IBig::ZERO {
            break;
        }
        for i in k + 1..n {
            for j in k + 1..=i {
                let kept = a[i * n + j].scaled(&pivot);
                let taken = a[i * n + k].times(&a[j * n + k].conj());
                a[i * n + j] = kept.minus(&taken).divided(&previous);
            }
        }
        previous = pivot;
    }
    Some(minors)
}

fn by_minors(metric: &ExactMatrix, minors: &[RBig]) -> MetricVerdict {
    let mut before = RBig::ONE;
    let mut digits_lost = 0;
    for (k, minor) in minors.iter().enumerate() {
        let pivot = minor / &before;
        let near = crate::num::ExactReal::from(pivot.clone()).nearest(0);
        if pivot <= RBig::ZERO {
            return MetricVerdict::NotPositive(MetricFault {
                block: k + 1,
                pivot: near,
                certainty: Certainty::Proven,
            });
        }
        if let Some(diagonal) = metric.re(k, k).rational() {
            let ratio = diagonal / pivot;
            let whole = (ratio.numerator().clone().unsigned_abs() / ratio.denominator()).bit_len();
            digits_lost = digits_lost.max(decimal_digits(whole));
        }
        before = minor.clone();
    }
    MetricVerdict::Positive {
        certainty: Certainty::Proven,
        digits_lost,
    }
}

/// Decimal digits in so many bits: 0.30103 of them, rounded down.
fn decimal_digits(bits: usize) -> u32 {
    (bits.saturating_sub(1) * 30_103 / 100_000) as u32
}

fn in_doubles(metric: &ExactMatrix) -> MetricVerdict {
    let scale = metric.scale();
    let rounded = super::scale::rounded_at(metric, scale);
    match cholesky(&rounded) {
        Ok(factor) => {
            let mut digits_lost = 0;
            for k in 0..metric.order() {
                let pivot = factor.re[(k, k)] * factor.re[(k, k)];
                let ratio = rounded.re[(k, k)] / pivot;
                let bits = (ratio.min(1e18) as u64)
                    .checked_ilog2()
                    .map_or(0, |b| b as usize + 1);
                digits_lost = digits_lost.max(decimal_digits(bits));
            }
            MetricVerdict::Positive {
                certainty: Certainty::InDoubles,
                digits_lost,
            }
        }
        Err(fault) => {
            let certainty = if witness(metric, &rounded, fault.row, scale) {
                Certainty::Proven
            } else {
                Certainty::InDoubles
            };
            let unit = super::scale::times_power_of_two(fault.pivot, scale);
            MetricVerdict::NotPositive(MetricFault {
                block: fault.row + 1,
                pivot: unit,
                certainty,
            })
        }
    }
}

/// Whether a vector v with v ≠ 0 and vᴴMv ≤ 0 was found, for certain.
///
/// v solves M₁v₁ = −m in doubles and ends in 1, where M₁ is the leading block
/// before row `row` and m its next column: the exact such v gives the pivot.
fn witness(metric: &ExactMatrix, rounded: &Dense, row: usize, scale: i32) -> bool {
    let n = rounded.rows();
    let (mut re, mut im) = (vec![0.0; row + 1], vec![0.0; row + 1]);
    re[row] = 1.0;
    if row > 0 {
        let block = Dense {
            re: rounded.re.view((0, 0), (row, row)).into_owned(),
            im: rounded
                .im
                .as_ref()
                .map(|im| im.view((0, 0), (row, row)).into_owned()),
        };
        let Ok(factor) = cholesky(&block) else {
            return false;
        };
        for i in 0..row {
            re[i] = -rounded.re[(i, row)];
            im[i] = rounded.im.as_ref().map_or(0.0, |p| -p[(i, row)]);
        }
        solve(&factor, &mut re, &mut im);
    }
    if n == 0 || !re.iter().chain(&im).all(|x| x.is_finite()) {
        return false;
    }
    let total = quadratic_form(metric, &re, &im, scale);
    total.upper <= IBig::ZERO
}

/// Solves L·Lᴴ x = b in place for the first columns of `re` + i·`im`.
fn solve(factor: &Dense, re: &mut [f64], im: &mut [f64]) {
    let n = factor.rows();
    let at = |r: usize, c: usize| {
        (
            factor.re[(r, c)],
            factor.im.as_ref().map_or(0.0, |p| p[(r, c)]),
        )
    };
    for r in 0..n {
        for c in 0..r {
            let (a, b) = at(r, c);
            re[r] -= a * re[c] - b * im[c];
            im[r] -= a * im[c] + b * re[c];
        }
        re[r] /= factor.re[(r, r)];
        im[r] /= factor.re[(r, r)];
    }
    for r in (0..n).rev() {
        for c in r + 1..n {
            // Entry (r, c) of Lᴴ is the conjugate of (c, r) of L.
            let (a, b) = at(c, r);
            re[r] -= a * re[c] + b * im[c];
            im[r] -= a * im[c] - b * re[c];
        }
        re[r] /= factor.re[(r, r)];
        im[r] /= factor.re[(r, r)];
    }
}

/// An interval that holds 2^−scale·vᴴMv for the exact M.
fn quadratic_form(metric: &ExactMatrix, re: &[f64], im: &[f64], scale: i32) -> DyadicInterval {
    let bits = WITNESS_BITS;
    let point = |x: f64| {
        let exact = crate::num::ExactReal::Binary(x)
            .rational()
            .unwrap_or(RBig::ZERO);
        DyadicInterval::of_ratio(&exact, bits)
    };
    let mut total = DyadicInterval::point(IBig::ZERO, 0);
    for row in 0..re.len() {
        for col in 0..=row {
            // Both mirrored terms: 2·Re(conj(v_r)·m_rc·v_c) off the diagonal.
            let (x, y) = (point(re[row]), point(im[row]));
            let (p, q) = (point(re[col]), point(im[col]));
            let real = x.mul(&p, bits).add(&y.mul(&q, bits), bits);
            let mut term = metric.re(row, col).enclose(bits).mul(&real, bits);
            if !metric.im(row, col).is_zero() {
                let cross = y.mul(&p, bits).add(&x.mul(&q, bits).negated(), bits);
                term = term.add(&metric.im(row, col).enclose(bits).mul(&cross, bits), bits);
            }
            if row != col {
                term.exponent += 1;
            }
            total = total.add(&term, bits);
        }
    }
    total.exponent -= i64::from(scale);
    total
}
