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
//! Nothing here is safe for tight clusters, so the result is judged: the
//! residual of every vector against the recorded value, and the defect of
//! orthogonality on probe vectors of signs s, for which ‖(ZᵀZ − I) s‖² has the
//! mean ‖ZᵀZ − I‖²_F (Hutchinson 1989). Whoever fails is computed by rotations.

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
/// Residual ‖T z − λ z‖ allowed, and largest correction of λ taken, in u·‖T‖
/// per √n. The recorded values are good to a third of this on random matrices
/// up to order 400; a larger correction would be a neighbour's. All columns
/// together stay below 4·n·u·‖T‖, less than half of what a solve may show.
const ALLOWED_RESIDUAL: f64 = 4.0;
/// ‖(ZᵀZ − I) s‖ allowed for a probe s of length √n, in n·u: half of what the
/// whole solve may show.
const ALLOWED_DEFECT: f64 = 5.0;
/// In ‖T‖/m for a block of order m, whose mean gap is at most twice that.
const WINDOW: f64 = 6.0;
/// Likewise.
const CHAIN: f64 = 0.01;
/// Probes of signs.
const PROBES: u64 = 3;

type Row = [Lanes; REGISTERS];
type Packed = [f64; BATCH];

/// Why the vectors are not handed over.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Doubt {
    /// Neighbouring vectors are nearly parallel, or a residual is too large.
    Vector,
    /// The vectors together are not orthogonal enough.
    Orthogonality,
}

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

fn judge(
    tridiagonal: &Tridiagonal,
    values: impl Iterator<Item = f64>,
    norm: f64,
    basis: &DMatrix<f64>,
) -> Result<(), Doubt> {
    let order = basis.nrows();
    let allowed = ALLOWED_RESIDUAL * UNIT * norm * (order as f64).sqrt();
    let columns = || basis.as_slice().chunks_exact(order.max(1));
    for (value, z) in values.zip(columns()) {
        let square = residual_square(tridiagonal, value, z);
        if square.is_nan() || square > allowed * allowed {
            return Err(Doubt::Vector);
        }
    }
    for probe in 0..PROBES {
        let signs: Vec<f64> = (0..order as u64)
            .map(|k| sign(probe * order as u64 + k))
            .collect();
        let mut image = vec![0.0; order];
        for (sign, z) in signs.iter().zip(columns()) {
            image.iter_mut().zip(z).for_each(|(y, x)| *y += sign * x);
        }
        let square = signs.iter().zip(columns()).fold(0.0, |sum, (sign, z)| {
            let defect = dot(z, &image) - sign;
            sum + defect * defect
        });
        let allowed = ALLOWED_DEFECT * order as f64 * UNIT;
        if square.is_nan() || square > allowed * allowed {
            return Err(Doubt::Orthogonality);
        }
    }
    Ok(())
}

/// ‖T z − λ z‖², the inner rows in two lanes.
fn residual_square(tridiagonal: &Tridiagonal, value: f64, z: &[f64]) -> f64 {
    let (d, e) = (&tridiagonal.diagonal, &tridiagonal.off_diagonal);
    let order = z.len();
    let row = |i: usize| {
        let before = if i > 0 { e[i - 1] * z[i - 1] } else { 0.0 };
        let after = if i + 1 < order { e[i] * z[i + 1] } else { 0.0 };
        before + (d[i] - value) * z[i] + after
    };
    let square = |i: usize| {
        let entry = row(i);
        entry * entry
    };
    if order < 4 {
        return (0..order).fold(0.0, |sum, i| sum + square(i));
    }
    let inner = order - 2;
    let pairs = inner / 2;
    fn chunks(values: &[f64], start: usize, pairs: usize) -> &[[f64; 2]] {
        &values[start..].as_chunks::<2>().0[..pairs]
    }
    let (above, here, below) = (
        chunks(z, 0, pairs),
        chunks(z, 1, pairs),
        chunks(z, 2, pairs),
    );
    let (d_here, e_above, e_below) = (
        chunks(d, 1, pairs),
        chunks(e, 0, pairs),
        chunks(e, 1, pairs),
    );
    let value = Lanes::splat(value);
    let mut squares = Lanes::splat(0.0);
    for k in 0..pairs {
        let diagonal = (Lanes::load(&d_here[k]) - value) * Lanes::load(&here[k]);
        let entry = Lanes::load(&e_above[k]) * Lanes::load(&above[k])
            + diagonal
            + Lanes::load(&e_below[k]) * Lanes::load(&below[k]);
        squares = squares + entry * entry;
    }
    let ends = square(0) + square(order - 1);
    let odd = if inner % 2 == 1 {
        square(order - 2)
    } else {
        0.0
    };
    squares.sum() + (ends + odd)
}

/// +1 or −1 by a mixing of the counter's bits (SplitMix64: Steele, Lea and Flood 2014).
fn sign(counter: u64) -> f64 {
    let mut bits = counter
        .wrapping_mul(0x9E37_79B9_7F4A_7C15)
        .wrapping_add(0x9E37_79B9_7F4A_7C15);
    bits = (bits ^ (bits >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
    bits = (bits ^ (bits >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
    if (bits >> 63) == 0 {
        1.0
    } else {
        -1.0
    }
}
