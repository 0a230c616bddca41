//! Numbers outside the rationals: a normal form where there is one, an
//! expression tree where there is not.

use super::dyadic::DyadicInterval;
use super::terms::Terms;
use super::{ArithmeticError, ExactReal};
use dashu_ratio::RBig;
use std::sync::Arc;

/// Nodes an expression of nested surds may have, shared ones counted each
/// time they are used, since each use is evaluated (and evaluation recurses).
const MAX_NODES: usize = 500;

/// Greatest working precision tried before a sign is called undecided.
const MAX_WORKING_BITS: usize = 1 << 13;

/// A number that is not zero, and irrational or not recognised as rational.
/// Its sign is known.
#[derive(Clone, Debug)]
pub struct Irrational {
    form: Form,
    nodes: usize,
    negative: bool,
}

#[derive(Clone, Debug)]
enum Form {
    /// A sum of rational multiples of √d·π^k: zero is decided by form.
    Terms(Terms),
    Sum(Arc<Irrational>, Arc<Irrational>),
    Product(Arc<Irrational>, Arc<Irrational>),
    Reciprocal(Arc<Irrational>),
    Root(Arc<Irrational>),
}

impl PartialEq for Irrational {
    /// Equality of form: equal forms are equal numbers, not conversely.
    fn eq(&self, other: &Self) -> bool {
        if std::ptr::eq(self, other) {
            return true;
        }
        if self.nodes != other.nodes || self.negative != other.negative {
            return false;
        }
        match (&self.form, &other.form) {
            (Form::Terms(a), Form::Terms(b)) => a == b,
            (Form::Sum(a, b), Form::Sum(c, d)) | (Form::Product(a, b), Form::Product(c, d)) => {
                (a == c && b == d) || (a == d && b == c)
            }
            (Form::Reciprocal(a), Form::Reciprocal(b)) | (Form::Root(a), Form::Root(b)) => a == b,
            _ => false,
        }
    }
}

impl Irrational {
    pub(super) fn pi() -> Self {
        Self {
            form: Form::Terms(Terms::pi()),
            nodes: 1,
            negative: false,
        }
    }

    /// Whether the number is below zero.
    pub fn is_negative(&self) -> bool {
        self.negative
    }

    /// An interval about 2^−`bits` of the number wide that contains it.
    pub(super) fn enclose(&self, bits: usize) -> DyadicInterval {
        let mut working = bits + 32;
        loop {
            let found = self.evaluate(working);
            let last = working >= MAX_WORKING_BITS.max(4 * bits);
            match found {
                Some(interval) if last || interval.is_narrow(bits) => return interval,
                _ => working *= 2,
            }
        }
    }

    /// One evaluation at a working precision; `None` when a divisor or a
    /// radicand is not yet told from zero, which a higher precision cures
    /// because its sign was decided when the node was built.
    fn evaluate(&self, bits: usize) -> Option<DyadicInterval> {
        match &self.form {
            Form::Terms(terms) => Some(terms.enclose(bits)),
            Form::Sum(a, b) => Some(a.evaluate(bits)?.add(&b.evaluate(bits)?, bits)),
            Form::Product(a, b) => Some(a.evaluate(bits)?.mul(&b.evaluate(bits)?, bits)),
            Form::Reciprocal(a) => a.evaluate(bits)?.reciprocal(bits),
            Form::Root(a) => a.evaluate(bits)?.root(bits),
        }
    }

    fn terms(&self) -> Option<&Terms> {
        match &self.form {
            Form::Terms(terms) => Some(terms),
            _ => None,
        }
    }

    /// The number with this form, once its sign is decided.
    fn settle(form: Form) -> Result<ExactReal, ArithmeticError> {
        let nodes = match &form {
            Form::Terms(terms) => {
                if let Some(r) = terms.ratio() {
                    return Ok(ExactReal::from(r));
                }
                terms.0.len()
            }
            Form::Sum(a, b) | Form::Product(a, b) => a.nodes.saturating_add(b.nodes),
            Form::Reciprocal(a) | Form::Root(a) => a.nodes.saturating_add(1),
        };
        if nodes > MAX_NODES {
            return Err(ArithmeticError::TooLarge);
        }
        let negative = match &form {
            Form::Product(a, b) => a.negative != b.negative,
            Form::Reciprocal(a) => a.negative,
            Form::Root(_) => false,
            Form::Sum(a, b) if a.negative == b.negative => a.negative,
            Form::Terms(_) | Form::Sum(..) => {
                let trial = Self {
                    form: form.clone(),
                    nodes,
                    negative: false,
                };
                trial.decide_sign()?
            }
        };
        Ok(ExactReal::Irrational(Arc::new(Self {
            form,
            nodes,
            negative,
        })))
    }

    /// Whether the number is below zero, by evaluation at rising precision.
    fn decide_sign(&self) -> Result<bool, ArithmeticError> {
        let mut working = 64;
        while working <= MAX_WORKING_BITS {
            if let Some(interval) = self.evaluate(working) {
                if !interval.holds_zero() {
                    return Ok(interval.is_negative());
                }
            }
            working *= 2;
        }
        Err(ArithmeticError::Undecided)
    }

    fn of_ratio(r: RBig, negative: bool) -> Self {
        Self {
            form: Form::Terms(Terms::of_ratio(r)),
            nodes: 1,
            negative,
        }
    }

    /// Views a number that is not zero as an [`Irrational`] operand.
    fn lift(x: &ExactReal) -> Arc<Self> {
        match x {
            ExactReal::Irrational(x) => Arc::clone(x),
            _ => {
                let r = x.rational().unwrap_or(RBig::ZERO);
                Arc::new(Self::of_ratio(r, x.is_negative()))
            }
        }
    }

    /// a + b for operands that are not zero, at least one irrational.
    pub(super) fn sum(a: &ExactReal, b: &ExactReal) -> Result<ExactReal, ArithmeticError> {
        let (a, b) = (Self::lift(a), Self::lift(b));
        match (a.terms(), b.terms()) {
            (Some(x), Some(y)) => Self::settle(Form::Terms(x.add(y)?)),
            _ if a.negative != b.negative && a.is_opposite(&b) => Ok(ExactReal::ZERO),
            _ => Self::settle(Form::Sum(a, b)),
        }
    }

    /// a·b for operands that are not zero, at least one irrational.
    pub(super) fn product(a: &ExactReal, b: &ExactReal) -> Result<ExactReal, ArithmeticError> {
        let (a, b) = (Self::lift(a), Self::lift(b));
        match (&a.form, &b.form) {
            (Form::Terms(x), Form::Terms(y)) => Self::settle(Form::Terms(x.mul(y)?)),
            (Form::Terms(x), _) if x.is_one() => Ok(ExactReal::Irrational(b)),
            (_, Form::Terms(y)) if y.is_one() => Ok(ExactReal::Irrational(a)),
            (Form::Root(x), Form::Root(y)) if x == y => Ok(ExactReal::Irrational(Arc::clone(x))),
            (Form::Reciprocal(x), _) if *x == b => Ok(ExactReal::ONE),
            (_, Form::Reciprocal(y)) if a == *y => Ok(ExactReal::ONE),
            (Form::Terms(x), Form::Product(..)) => a.rescale(x, &b),
            (Form::Product(..), Form::Terms(y)) => b.rescale(y, &a),
            // The factor in normal form stands first, where `rescale` and
            // `is_opposite` look for it.
            (_, Form::Terms(_)) => Self::settle(Form::Product(b, a)),
            _ => Self::settle(Form::Product(a, b)),
        }
    }

    /// `self`·(c·y) with the factors gathered, so that −(−x) is x again.
    fn rescale(
        self: &Arc<Self>,
        mine: &Terms,
        product: &Arc<Self>,
    ) -> Result<ExactReal, ArithmeticError> {
        if let Form::Product(c, rest) = &product.form {
            if let Some(theirs) = c.terms() {
                let gathered = Self::settle(Form::Terms(mine.mul(theirs)?))?;
                if gathered.equals(&ExactReal::ONE) == Some(true) {
                    return Ok(ExactReal::Irrational(Arc::clone(rest)));
                }
                return Self::settle(Form::Product(Self::lift(&gathered), Arc::clone(rest)));
            }
        }
        Self::settle(Form::Product(Arc::clone(self), Arc::clone(product)))
    }

    /// Whether other = −self by form.
    fn is_opposite(&self, other: &Self) -> bool {
        let negated = |x: &Self, y: &Self| match &x.form {
            Form::Product(c, rest) => {
                c.terms().and_then(Terms::ratio) == Some(RBig::from(-1)) && **rest == *y
            }
            _ => false,
        };
        if negated(self, other) || negated(other, self) {
            return true;
        }
        match (&self.form, &other.form) {
            (Form::Product(c, x), Form::Product(d, y)) if x == y => match (c.terms(), d.terms()) {
                (Some(c), Some(d)) => c.add(d).is_ok_and(|sum| sum.0.is_empty()),
                _ => false,
            },
            (Form::Sum(a, b), Form::Sum(c, d)) => {
                (a.is_opposite_number(c) && b.is_opposite_number(d))
                    || (a.is_opposite_number(d) && b.is_opposite_number(c))
            }
            _ => false,
        }
    }

    fn is_opposite_number(&self, other: &Self) -> bool {
        match (self.terms(), other.terms()) {
            (Some(x), Some(y)) => x.add(y).is_ok_and(|sum| sum.0.is_empty()),
            _ => self.is_opposite(other),
        }
    }

    /// −x without a bound on its size.
    pub(super) fn negated(x: &ExactReal) -> ExactReal {
        let x = Self::lift(x);
        let minus_one = Arc::new(Self::of_ratio(RBig::from(-1), true));
        ExactReal::Irrational(Arc::new(Self {
            nodes: x.nodes + 1,
            negative: !x.negative,
            form: Form::Product(minus_one, x),
        }))
    }

    /// 1/x.
    pub(super) fn reciprocal(x: &Arc<Self>) -> Result<ExactReal, ArithmeticError> {
        match &x.form {
            Form::Terms(terms) => match terms.reciprocal() {
                Some(inverse) => Self::settle(Form::Terms(inverse?)),
                None => Self::settle(Form::Reciprocal(Arc::clone(x))),
            },
            Form::Reciprocal(y) => Ok(ExactReal::Irrational(Arc::clone(y))),
            _ => Self::settle(Form::Reciprocal(Arc::clone(x))),
        }
    }

    /// √x; refused when x is negative.
    pub(super) fn root(x: &Arc<Self>) -> Result<ExactReal, ArithmeticError> {
        if x.negative {
            return Err(ArithmeticError::NegativeRoot);
        }
        match x.terms().and_then(Terms::root) {
            Some(root) => Self::settle(Form::Terms(root?)),
            None => Self::settle(Form::Root(Arc::clone(x))),
        }
    }

    /// √r for a ratio that is no square.
    pub(super) fn root_of_ratio(r: &RBig) -> Result<ExactReal, ArithmeticError> {
        Self::settle(Form::Terms(Terms::root_of_ratio(r)?))
    }

    /// Writes the number in the grammar of cells.
    pub(super) fn write(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match &self.form {
            Form::Terms(terms) => super::text::write_terms(terms, f),
            // Only the right operand needs parentheses: sums and products are
            // read from the left, so a long chain does not nest.
            Form::Sum(a, b) => {
                a.write(f)?;
                b.write_enclosed("+(", f)
            }
            Form::Product(a, b) if a.is_sum() => {
                a.write_enclosed("(", f)?;
                b.write_enclosed("*(", f)
            }
            Form::Product(a, b) => {
                a.write(f)?;
                b.write_enclosed("*(", f)
            }
            Form::Reciprocal(a) => a.write_enclosed("1/(", f),
            Form::Root(a) => a.write_enclosed("sqrt(", f),
        }
    }

    /// Whether the text of the number is a sum.
    fn is_sum(&self) -> bool {
        match &self.form {
            Form::Terms(terms) => terms.0.len() > 1,
            Form::Sum(..) => true,
            _ => false,
        }
    }

    /// Writes the number between `opening` and a closing parenthesis.
    fn write_enclosed(&self, opening: &str, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(opening)?;
        self.write(f)?;
        f.write_str(")")
    }
}
