//! Vectors of T by twisted factorisations, checked.
//!
//! Notation: T with diagonal d and off-diagonals e, λ an eigenvalue,
//! T − λ = L D⁺ Lᵀ from the top and U D⁻ Uᵀ from the bottom; joined in row r
//! they leave the residual γᵣ eᵣ with γᵣ = D⁺ᵣ + D⁻ᵣ − (dᵣ − λ). The r with the
//! least |γ| gives z with (T − λ) z = γᵣ eᵣ, zᵣ = 1, by multiplications alone
//! (Fernando, "On computing an eigenvector of a tridiagonal matrix", SIAM J.
//! Matrix Anal. Appl. 18, 1997; Parlett and Dhillon, Linear Algebra Appl. 267,
//! 1997). λ is corrected by γᵣ/‖z‖², its Rayleigh quotient, for this purpose
//! only: the values handed over stay those of the recorded iteration.
//!
//! Eight vectors are computed side by side, which hides the divisions' latency.
//! Each is then orthogonalised against those of the values less than about
//! [`WINDOW`]/2 mean gaps below its own, and against the whole chain it hangs on
//! when neighbours follow closer than [`CHAIN`]/2 mean gaps.
//!
//! Nothing here is safe for tight clusters, so the result is judged by its
//! residuals and its orthogonality; what fails is computed by rotations.

use super::judge::{judge, Doubt, ALLOWED_RESIDUAL};
use crate::iterate::Iteration;
use crate::matrix::lanes::Lanes;
use crate::reduce::{dot, Tridiagonal};
use nalgebra::DMatrix;

/// Registers of two lanes handled together.
const REGISTERS: usize = 4;
/// Vectors handled together.
const BATCH: usize = 2 * REGISTERS;
/// u.
const UNIT: f64 = f64::EPSILON / 2.0;
/// Factorisations of one batch at most: one to correct the values, one for the
/// vectors, as a rule.
const ROUNDS: usize = 2;
/// Residual, in u·‖T‖, that ends the corrections.
const SMALL_RESIDUAL: f64 = 0.5;
/// In ‖T‖/m for a block of order m, whose mean gap is at most twice that.
const WINDOW: f64 = 6.0;
/// Likewise.
const CHAIN: f64 = 0.01;
type Row = [Lanes; REGISTERS];
type Packed = [f64; BATCH];

/// Z with T Z = Z Λ, columns taken in `ascending` order of the values.
/// Cost: O(n²) plus 4·n operations for each pair of vectors orthogonalised.
pub(super) fn vectors(
    tridiagonal: &Tridiagonal,
    iteration: &Iteration,
    ascending: &[usize],
) -> Result<DMatrix<f64>, Doubt> {
    let order = tridiagonal.order();
    let mut basis = DMatrix::zeros(order, order);
    let norm = tridiagonal.row_sum_norm();
    let blocks = blocks(iteration, order);
    let mut members: Vec<Vec<Member>> = vec![Vec::new(); blocks.len()];
    for (column, position) in ascending.iter().enumerate() {
        let block = blocks.partition_point(|(_, end)| end <= position);
        members[block].push(Member {
            column,
            value: iteration.values[*position],
        });
    }
    let mut room = Room::default();
    for ((start, end), members) in blocks.into_iter().zip(members) {
        if end - start == 1 {
            basis[(start, members[0].column)] = 1.0;
            continue;
        }
        let block = Block {
            diagonal: &tridiagonal.diagonal[start..end],
            off: &tridiagonal.off_diagonal[start..end - 1],
            start,
            norm,
        };
        for batch in members.chunks(BATCH) {
            block.batch(batch, &mut room, &mut basis);
        }
        block.separate_neighbours(&members, &mut basis)?;
    }
    let values = ascending.iter().map(|position| iteration.values[*position]);
    judge(tridiagonal, values, norm, &basis)?;
    Ok(basis)
}

/// A value and the column its vector goes to.
#[derive(Clone, Copy)]
struct Member {
    column: usize,
    value: f64,
}

/// Row ranges that no sweep ever joined: the values found in such a range are
/// those of that block of T.
fn blocks(iteration: &Iteration, order: usize) -> Vec<(usize, usize)> {
    let mut change = vec![0_i64; order + 1];
    for step in &iteration.sweeps {
        change[step.first] += 1;
        change[step.last] -= 1;
    }
    let mut blocks = Vec::new();
    let (mut start, mut crossings) = (0, 0);
    for row in 0..order {
        crossings += change[row];
        if crossings == 0 {
            blocks.push((start, row + 1));
            start = row + 1;
        }
    }
    blocks
}

/// Factors of a batch, kept between batches.
#[derive(Default)]
struct Room {
    pivots: Vec<Packed>,
    from_top: Vec<Packed>,
    from_bottom: Vec<Packed>,
    vectors: Vec<Packed>,
}

struct Block<'a> {
    diagonal: &'a [f64],
    off: &'a [f64],
    start: usize,
    norm: f64,
}

#[inline(always)]
fn load(packed: &Packed) -> Row {
    let pairs = packed.as_chunks::<2>().0;
    each(|k| Lanes::load(&pairs[k]))
}

#[inline(always)]
fn store(row: Row, packed: &mut Packed) {
    for (lanes, pair) in row.iter().zip(packed.as_chunks_mut::<2>().0) {
        lanes.store(pair);
    }
}

/// Written out, so that a row stays in registers.
#[inline(always)]
fn each(mut f: impl FnMut(usize) -> Lanes) -> Row {
    [f(0), f(1), f(2), f(3)]
}

impl Block<'_> {
    fn batch(&self, members: &[Member], room: &mut Room, basis: &mut DMatrix<f64>) {
        let order = self.diagonal.len();
        for rows in [
            &mut room.pivots,
            &mut room.from_top,
            &mut room.from_bottom,
            &mut room.vectors,
        ] {
            rows.resize(order.max(rows.len()), [0.0; BATCH]);
        }
        // A batch that is not full repeats its last member.
        let mut shifts: Packed = std::array::from_fn(|k| members[k.min(members.len() - 1)].value);
        let recorded = shifts;
        let trusted = ALLOWED_RESIDUAL * UNIT * self.norm * (order as f64).sqrt();
        let mut squares = [1.0; BATCH];
        for _ in 0..ROUNDS {
            let twist = self.factor(load(&shifts), room);
            squares = self.multiply_out(twist.row, room);
            let mut settled = true;
            for k in 0..BATCH {
                let correction = twist.gamma[k] / squares[k];
                settled &=
                    twist.gamma[k].abs() <= SMALL_RESIDUAL * UNIT * self.norm * squares[k].sqrt();
                let corrected = shifts[k] + correction;
                if (corrected - recorded[k]).abs() <= trusted {
                    shifts[k] = corrected;
                }
            }
            if settled {
                break;
            }
        }
        for (k, member) in members.iter().enumerate() {
            let length = squares[k].sqrt();
            let rows = basis.nrows();
            let at = member.column * rows + self.start;
            let column = &mut basis.as_mut_slice()[at..at + order];
            for (entry, packed) in column.iter_mut().zip(&room.vectors) {
                *entry = packed[k] / length;
            }
        }
    }

    /// Both factorisations; the multipliers stay in `room`.
    fn factor(&self, shifts: Row, room: &mut Room) -> Twist {
        let order = self.diagonal.len();
        // A pivot this small is replaced: a change of T far below its rounding.
        let least = Lanes::splat(UNIT * UNIT * self.norm);
        let replacement = Lanes::splat(-UNIT * UNIT * self.norm);
        let guarded = |pivot: Lanes| pivot.abs().where_below(least, replacement, pivot);
        let mut pivot = each(|k| guarded(Lanes::splat(self.diagonal[0]) - shifts[k]));
        store(pivot, &mut room.pivots[0]);
        let (next, off) = (&self.diagonal[1..], self.off);
        let pivots = &mut room.pivots[1..order];
        let from_top = &mut room.from_top[..order - 1];
        for i in 0..order - 1 {
            let (e, d) = (Lanes::splat(off[i]), Lanes::splat(next[i]));
            let multiplier = each(|k| e.over(pivot[k]));
            pivot = each(|k| guarded((d - shifts[k]) - e * multiplier[k]));
            store(multiplier, &mut from_top[i]);
            store(pivot, &mut pivots[i]);
        }
        let mut gamma = pivot;
        let mut row = each(|_| Lanes::splat((order - 1) as f64));
        let mut pivot = each(|k| guarded(Lanes::splat(self.diagonal[order - 1]) - shifts[k]));
        let pivots = &room.pivots[..order - 1];
        let from_bottom = &mut room.from_bottom[..order - 1];
        for i in (0..order - 1).rev() {
            let (e, d) = (Lanes::splat(off[i]), Lanes::splat(self.diagonal[i]));
            let multiplier = each(|k| e.over(pivot[k]));
            store(multiplier, &mut from_bottom[i]);
            let product = each(|k| e * multiplier[k]);
            let top = load(&pivots[i]);
            let here = each(|k| top[k] - product[k]);
            let index = Lanes::splat(i as f64);
            row = each(|k| here[k].abs().where_below(gamma[k].abs(), index, row[k]));
            gamma = each(|k| here[k].abs().where_below(gamma[k].abs(), here[k], gamma[k]));
            pivot = each(|k| guarded((d - shifts[k]) - product[k]));
        }
        let mut packed = [0.0; BATCH];
        store(gamma, &mut packed);
        Twist { row, gamma: packed }
    }

    /// z from its row of joining outwards; returns ‖z‖².
    fn multiply_out(&self, twist: Row, room: &mut Room) -> Packed {
        let order = self.diagonal.len();
        let (zero, one, half) = (Lanes::splat(0.0), Lanes::splat(1.0), Lanes::splat(0.5));
        let vectors = &mut room.vectors[..order];
        let last = Lanes::splat((order - 1) as f64);
        let mut z = each(|k| (last - twist[k]).abs().where_below(half, one, zero));
        store(z, &mut vectors[order - 1]);
        for i in (0..order - 1).rev() {
            let multiplier = load(&room.from_top[i]);
            let index = Lanes::splat(i as f64);
            z = each(|k| {
                (index - twist[k])
                    .abs()
                    .where_below(half, one, zero - multiplier[k] * z[k])
            });
            store(z, &mut vectors[i]);
        }
        let mut squares = each(|k| z[k] * z[k]);
        for i in 1..order {
            let multiplier = load(&room.from_bottom[i - 1]);
            let (index, known) = (Lanes::splat(i as f64), load(&vectors[i]));
            z = each(|k| twist[k].where_below(index, zero - multiplier[k] * z[k], known[k]));
            store(z, &mut vectors[i]);
            squares = each(|k| squares[k] + z[k] * z[k]);
        }
        let mut packed = [0.0; BATCH];
        store(squares, &mut packed);
        packed
    }

    /// Modified Gram–Schmidt of each vector against its window and its chain.
    /// Beyond both, vectors meet at angles already right to rounding over gap.
    fn separate_neighbours(
        &self,
        members: &[Member],
        basis: &mut DMatrix<f64>,
    ) -> Result<(), Doubt> {
        let unit = self.norm / members.len() as f64;
        let rows = basis.nrows();
        let range = |column: usize| {
            let at = column * rows + self.start;
            at..at + self.diagonal.len()
        };
        let (mut chain, mut window) = (0, 0);
        for k in 1..members.len() {
            if members[k].value - members[k - 1].value > CHAIN * unit {
                chain = k;
            }
            while members[k].value - members[window].value > WINDOW * unit {
                window += 1;
            }
            let first = chain.min(window);
            if first == k {
                continue;
            }
            // Columns ascend with the members, so the earlier ones lie before.
            let (before, present) = basis.as_mut_slice().split_at_mut(members[k].column * rows);
            let present = &mut present[self.start..self.start + self.diagonal.len()];
            for earlier in &members[first..k] {
                let earlier = &before[range(earlier.column)];
                let overlap = dot(earlier, present);
                present
                    .iter_mut()
                    .zip(earlier)
                    .for_each(|(x, y)| *x -= overlap * y);
            }
            let square = dot(present, present);
            if square.is_nan() || square < 0.5 {
                return Err(Doubt::Vector);
            }
            let length = square.sqrt();
            present.iter_mut().for_each(|x| *x /= length);
        }
        Ok(())
    }
}

/// Where a batch's factorisations join, and what they leave there.
struct Twist {
    row: Row,
    gamma: Packed,
}
