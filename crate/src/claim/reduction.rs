//! Householder's reduction in intervals: what the states of a hand calculation
//! are held against.
//!
//! Notation: x the part of column k below the diagonal, κ the entry it is
//! turned into, v = x − κe₁, H = I − τvvᴴ with τ = 2/vᴴv. H is Hermitian
//! exactly when κ is ±‖x‖ times the phase of x₁: the two signs are the freedom
//! a reflector has (Householder 1958).

use super::interval::{one, zero, Complex, Precision, Real};

/// Which of the two reflectors is taken.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Sign {
    /// κ has the phase of x₁ (+‖x‖ for real input).
    Plus,
    /// κ has the opposite phase (−‖x‖ for real input).
    Minus,
}

/// One reflector.
#[derive(Clone, Debug)]
pub(super) struct Mirror {
    /// v, with zeros down to the column's diagonal.
    pub(super) vector: Vec<Complex>,
    /// τ = 2/vᴴv.
    pub(super) tau: Real,
    /// κ.
    pub(super) target: Complex,
}

/// A square matrix in intervals.
#[derive(Clone, Debug)]
pub(super) struct State {
    pub(super) order: usize,
    pub(super) cells: Vec<Complex>,
}

impl State {
    pub(super) fn at(&self, row: usize, col: usize) -> &Complex {
        &self.cells[row * self.order + col]
    }

    /// The κ of `sign` for column `col` (from 0).
    pub(super) fn target(&self, col: usize, sign: Sign, p: Precision) -> Option<Complex> {
        let order = self.order;
        let mut square = zero();
        for row in col + 1..order {
            square = p.add(&square, &p.norm_squared(self.at(row, col)));
        }
        let norm = p.sqrt(&square)?;
        let signed = match sign {
            Sign::Plus => norm,
            Sign::Minus => super::interval::neg(&norm),
        };
        let first = self.at(col + 1, col);
        let real = first.im.lower == first.im.upper && first.im.holds_zero();
        if real {
            return Some(Complex {
                re: signed,
                im: zero(),
            });
        }
        let size = p.sqrt(&p.norm_squared(first))?;
        let inverse = p.div(&one(), &size)?;
        Some(p.scale(&p.scale(first, &inverse), &signed))
    }

    /// The reflector for column `col` (from 0) with `target` for κ; `None`
    /// when v may be zero.
    pub(super) fn mirror(&self, col: usize, target: Complex, p: Precision) -> Option<Mirror> {
        let mut vector = vec![Complex::zero(); self.order];
        let mut square = zero();
        for row in col + 1..self.order {
            let mut value = self.at(row, col).clone();
            if row == col + 1 {
                value = p.csub(&value, &target);
            }
            square = p.add(&square, &p.norm_squared(&value));
            vector[row] = value;
        }
        let two = p.add(&one(), &one());
        let tau = p.div(&two, &square)?;
        Some(Mirror {
            vector,
            tau,
            target,
        })
    }

    /// H·self·H for H = I − scalar·v·wᴴ from the left and its adjoint from the
    /// right, as `sides` has it.
    pub(super) fn turned(&self, mirror: &Mirror, sides: Sides, p: Precision) -> Self {
        let mut state = self.clone();
        if sides != Sides::Right {
            state = state.left(&mirror.vector, &mirror.vector, &mirror.tau, p);
        }
        if sides != Sides::Left {
            state = state
                .adjoint()
                .left(&mirror.vector, &mirror.vector, &mirror.tau, p)
                .adjoint();
        }
        state
    }

    /// (I − scalar·v·wᴴ)·self.
    pub(super) fn left(&self, v: &[Complex], w: &[Complex], scalar: &Real, p: Precision) -> Self {
        let order = self.order;
        let mut state = self.clone();
        for col in 0..order {
            let mut along = Complex::zero();
            for row in 0..order {
                along = p.cadd(&along, &p.cmul(&w[row].conj(), self.at(row, col)));
            }
            let along = p.scale(&along, scalar);
            for row in 0..order {
                let value = p.csub(self.at(row, col), &p.cmul(&v[row], &along));
                state.cells[row * order + col] = value;
            }
        }
        state
    }

    pub(super) fn adjoint(&self) -> Self {
        let order = self.order;
        let cells = (0..order * order)
            .map(|place| self.at(place % order, place / order).conj())
            .collect();
        Self { order, cells }
    }

    /// The state after the reflector of column `col`, its known entries set
    /// exactly.
    pub(super) fn stepped(&self, col: usize, mirror: &Mirror, p: Precision) -> Self {
        let order = self.order;
        let mut state = self.turned(mirror, Sides::Both, p);
        for row in col + 1..order {
            let value = if row == col + 1 {
                mirror.target.clone()
            } else {
                Complex::zero()
            };
            state.cells[col * order + row] = value.conj();
            state.cells[row * order + col] = value;
        }
        state
    }

    /// Whether everything below row `col` + 1 of column `col` is exactly zero:
    /// the column needs no reflector.
    pub(super) fn is_done(&self, col: usize) -> bool {
        (col + 2..self.order).all(|row| {
            let x = self.at(row, col);
            [&x.re, &x.im]
                .iter()
                .all(|part| part.lower == part.upper && part.holds_zero())
        })
    }
}

/// From which sides a reflector is applied.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Sides {
    Both,
    Left,
    Right,
}
