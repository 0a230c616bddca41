//! Claims about one reflector and the column it is meant for.
//!
//! Notation as in `reduction`. What stands in column k > 1 depends on the
//! signs of the reflectors before it; a claim that names no states is granted
//! every choice of them.

use dashu_ratio::RBig;

use super::compare::{distance, fit, Fit};
use super::figure::Figure;
use super::interval::{one, Complex, Precision};
use super::print;
use super::reduction::{Mirror, Sign, State};
use super::space::{meets, Meeting};
use super::standard::standard;
use super::statement::{Reflector, Table};
use super::states::PRECISIONS;
use super::surds::Surds;
use super::vectors::complex_text;
use super::verdict::{Finding, FindingKind, Freedom, Item, Verdict, Word};
use crate::problem::Problem;

/// Most reflectors before the one claimed: their sign choices double with each.
const MAX_BEFORE: usize = 8;

/// Judges the reflector stated for `column` (from 1).
pub(super) fn judge(column: usize, stated: &Reflector, problem: &Problem) -> Verdict {
    let order = problem.matrix.order();
    if column == 0 || column + 2 > order {
        return Verdict::new(
            Word::Refuted,
            format!(
                "a reduction of order {order} has {} reflectors",
                order.saturating_sub(2)
            ),
        );
    }
    if column > MAX_BEFORE + 1 {
        return Verdict::new(
            Word::Undecided,
            "too many choices of earlier signs; state the matrix before this reflector instead",
        );
    }
    let padded = match padded(stated, column, order) {
        Ok(padded) => padded,
        Err(sentence) => return Verdict::new(Word::Refuted, sentence),
    };
    for bits in PRECISIONS {
        let p = Precision(bits);
        let Some(mirrors) = mirrors(column - 1, problem, p) else {
            continue;
        };
        if mirrors.is_empty() {
            return Verdict::new(
                Word::Undecided,
                format!("column {column} needs no reflector: everything below is zero already"),
            );
        }
        if let Some(verdict) = attempt(column, &padded, &mirrors, p) {
            return verdict.granting(Freedom::ReflectorSign);
        }
    }
    exactly(column, &padded, problem).granting(Freedom::ReflectorSign)
}

/// A stated reflector with vectors of full length.
enum Padded {
    Vector(Vec<Figure>),
    Scaled(Vec<Figure>, Box<Figure>),
    Matrix(Table),
}

/// A vector may be stated without its leading zeros, and a matrix without its
/// leading identity.
fn padded(stated: &Reflector, column: usize, order: usize) -> Result<Padded, String> {
    let nothing = || {
        let raw = super::figure::raw("0")
            .map(|raw| vec![raw])
            .unwrap_or_default();
        super::figure::spanned(raw, &super::figure::Digits::Exact)
    };
    let long = |vector: &[Figure]| -> Result<Vec<Figure>, String> {
        let missing = order.checked_sub(vector.len());
        match missing {
            Some(missing) if missing == 0 || missing == column => {
                let mut full = Vec::with_capacity(order);
                for _ in 0..missing {
                    full.extend(nothing());
                }
                full.extend_from_slice(vector);
                Ok(full)
            }
            _ => Err(format!(
                "the vector has {} components; it needs {order}, or {} without its zeros",
                vector.len(),
                order - column
            )),
        }
    };
    match stated {
        Reflector::Vector(vector) => long(vector).map(Padded::Vector),
        Reflector::Scaled(vector, scalar) => Ok(Padded::Scaled(long(vector)?, scalar.clone())),
        Reflector::Matrix(table) if table.rows == order || table.rows + column == order => {
            Ok(Padded::Matrix(table.clone()))
        }
        Reflector::Matrix(table) => Err(format!(
            "the stated matrix has {} rows; it needs {order}, or {} without its leading identity",
            table.rows,
            order - column
        )),
    }
}

/// Both reflectors for column `col` (from 0) after every choice of earlier
/// signs; `None` when the precision does not suffice.
fn mirrors(col: usize, problem: &Problem, p: Precision) -> Option<Vec<Mirror>> {
    let order = problem.matrix.order();
    let mut states = vec![State {
        order,
        cells: standard(problem, p)?,
    }];
    for before in 0..col {
        let mut next = Vec::new();
        for state in &states {
            for mirror in both(state, before, p)? {
                next.push(state.stepped(before, &mirror, p));
            }
            if state.is_done(before) {
                next.push(state.clone());
            }
        }
        states = next;
    }
    let mut mirrors = Vec::new();
    for state in &states {
        mirrors.extend(both(state, col, p)?);
    }
    Some(mirrors)
}

/// The reflectors of both signs; for a column that is done already, those
/// that are not the identity.
fn both(state: &State, col: usize, p: Precision) -> Option<Vec<Mirror>> {
    let mut mirrors = Vec::new();
    for sign in [Sign::Minus, Sign::Plus] {
        match state
            .target(col, sign, p)
            .and_then(|target| state.mirror(col, target, p))
        {
            Some(mirror) => mirrors.push(mirror),
            None if state.is_done(col) => {}
            None => return None,
        }
    }
    Some(mirrors)
}

/// One try; `None` when it does not decide.
fn attempt(column: usize, stated: &Padded, mirrors: &[Mirror], p: Precision) -> Option<Verdict> {
    let mut unclear = false;
    let mut nearest: Option<(RBig, &Mirror)> = None;
    for mirror in mirrors {
        let (fit, off) = compare(stated, mirror, p);
        match fit {
            Fit::Inside => {
                let text = format!(
                    "this reflector turns column {column} into ({}, 0, …) below the diagonal",
                    complex_text(&mirror.target)
                );
                let mut verdict = Verdict::new(Word::Confirmed, text).resting_on(
                    "entry left below the diagonal",
                    complex_text(&mirror.target),
                );
                if !matches!(stated, Padded::Matrix(_)) {
                    verdict = verdict.granting(Freedom::Scale);
                }
                return Some(verdict);
            }
            Fit::Unclear => unclear = true,
            Fit::Outside => {
                if nearest.as_ref().is_none_or(|(least, _)| off < *least) {
                    nearest = Some((off, mirror));
                }
            }
        }
    }
    if unclear {
        return None;
    }
    let (off, mirror) = nearest?;
    Some(refuted(column, stated, mirror, &off, p))
}

fn refuted(column: usize, stated: &Padded, mirror: &Mirror, off: &RBig, p: Precision) -> Verdict {
    let mut verdict = Verdict::new(
        Word::Refuted,
        format!("neither reflector of column {column} agrees with the stated figures"),
    )
    .resting_on("least distance", print::at_least(off));
    if let Padded::Scaled(vector, scalar) = stated {
        if along(vector, mirror, p) == Fit::Inside {
            verdict.sentence = format!(
                "the vector is right, but the scalar {} does not make a reflector of it",
                scalar.text
            );
            let one_stated = scalar.re.low <= RBig::ONE && RBig::ONE <= scalar.re.high;
            if one_stated {
                verdict.findings.push(Finding::new(
                    FindingKind::Cause,
                    "a scalar of 1 stands where 2/‖v‖² belongs",
                ));
            }
        }
    }
    if let Padded::Vector(figures) | Padded::Scaled(figures, _) = stated {
        let truth = super::space::nearest_multiple(&mirror.vector, figures, p);
        for (row, (figure, truth)) in figures.iter().zip(truth.iter().flatten()).enumerate() {
            let inside = fit(figure, truth) == Fit::Inside;
            verdict.items.push(Item {
                label: format!("component {}", row + 1),
                claimed: figure.text.clone(),
                truth: complex_text(truth),
                word: if inside {
                    Word::Confirmed
                } else {
                    Word::Refuted
                },
                off_by: (!inside).then(|| print::at_least(&distance(figure, truth))),
                drawn: None,
            });
        }
    }
    if let Padded::Matrix(table) = stated {
        if let Some(((row, col), truth)) = first_wrong(table, mirror, p) {
            verdict.findings.push(super::compare::departure(
                row,
                col,
                table.at(row, col),
                &truth,
            ));
        }
    }
    verdict
}

/// How a stated reflector stands to a true one, and how far it is off.
fn compare(stated: &Padded, mirror: &Mirror, p: Precision) -> (Fit, RBig) {
    match stated {
        Padded::Vector(vector) => (along(vector, mirror, p), short(vector, mirror, p)),
        Padded::Scaled(vector, scalar) => {
            let direction = along(vector, mirror, p);
            let fit = direction.and(scalar_fit(vector, scalar, p));
            (fit, short(vector, mirror, p))
        }
        Padded::Matrix(table) => {
            let mut worst = Fit::Inside;
            let mut furthest = RBig::ZERO;
            for row in 0..table.rows {
                for col in 0..table.cols {
                    let truth = entry(table, mirror, row, col, p);
                    worst = worst.and(fit(table.at(row, col), &truth));
                    furthest = furthest.max(distance(table.at(row, col), &truth));
                }
            }
            (worst, furthest)
        }
    }
}

/// Whether a multiple of the true v lies within the stated figures.
fn along(vector: &[Figure], mirror: &Mirror, p: Precision) -> Fit {
    let complex = vector.iter().any(Figure::is_complex)
        || mirror
            .vector
            .iter()
            .any(|x| !x.im.lower.is_zero() || !x.im.upper.is_zero());
    match meets(std::slice::from_ref(&mirror.vector), vector, complex, p) {
        Meeting::Yes => Fit::Inside,
        Meeting::No(_) => Fit::Outside,
        Meeting::Unclear => Fit::Unclear,
    }
}

fn short(vector: &[Figure], mirror: &Mirror, p: Precision) -> RBig {
    let Some(truth) = super::space::nearest_multiple(&mirror.vector, vector, p) else {
        return vector.iter().fold(RBig::ZERO, |most, f| {
            most.max(super::figure::size(&f.re.stated))
        });
    };
    vector
        .iter()
        .zip(&truth)
        .fold(RBig::ZERO, |most, (f, t)| most.max(distance(f, t)))
}

/// Whether the stated scalar agrees with 2/vᴴv of the stated vector.
fn scalar_fit(vector: &[Figure], scalar: &Figure, p: Precision) -> Fit {
    let mut square = super::interval::zero();
    for figure in vector {
        for span in [&figure.re, &figure.im] {
            square = p.add(&square, &p.square(&p.between(&span.low, &span.high)));
        }
    }
    let product = p.mul(&square, &p.between(&scalar.re.low, &scalar.re.high));
    let two = p.add(&one(), &one());
    let off = p.sub(&product, &two);
    if off.holds_zero() && scalar.im.low <= RBig::ZERO && scalar.im.high >= RBig::ZERO {
        Fit::Inside
    } else {
        Fit::Outside
    }
}

/// Entry of H, for the whole or the trailing block.
fn entry(table: &Table, mirror: &Mirror, row: usize, col: usize, p: Precision) -> Complex {
    let skip = mirror.vector.len() - table.rows;
    let (v, w) = (&mirror.vector[row + skip], mirror.vector[col + skip].conj());
    let mut value = p.scale(&p.cmul(v, &w), &super::interval::neg(&mirror.tau));
    if row == col {
        value.re = p.add(&value.re, &one());
    }
    value
}

fn first_wrong(table: &Table, mirror: &Mirror, p: Precision) -> Option<((usize, usize), Complex)> {
    for row in 0..table.rows {
        for col in 0..table.cols {
            let truth = entry(table, mirror, row, col, p);
            if fit(table.at(row, col), &truth) == Fit::Outside {
                return Some(((row, col), truth));
            }
        }
    }
    None
}

/// Figures meant exactly, in exact surds (real, small, no metric).
fn exactly(column: usize, stated: &Padded, problem: &Problem) -> Verdict {
    let undecided = Verdict::new(
        Word::Undecided,
        "figures meant exactly could not be told from the true ones; state decimals instead",
    );
    let Padded::Vector(vector) = stated else {
        return undecided;
    };
    let Some(start) = Surds::new(problem) else {
        return undecided;
    };
    if vector.iter().any(Figure::is_complex) {
        return undecided;
    }
    let mut states = vec![start];
    for before in 0..column - 1 {
        let mut next = Vec::new();
        for state in &states {
            for positive in [true, false] {
                let reflected = state
                    .vector(before, positive)
                    .and_then(|(vector, _)| state.reflected(&vector));
                let Ok(reflected) = reflected else {
                    return undecided;
                };
                next.push(reflected);
            }
        }
        states = next;
    }
    let mut certain = true;
    for state in &states {
        for positive in [true, false] {
            let Ok((truth, target)) = state.vector(column - 1, positive) else {
                return undecided;
            };
            match super::surds::parallel(vector, &truth) {
                Some(true) => {
                    return Verdict::new(
                        Word::Confirmed,
                        format!(
                            "this reflector turns column {column} into ({target}, 0, …) below the \
                             diagonal, exactly"
                        ),
                    )
                    .resting_on("entry left below the diagonal", target.to_string())
                    .granting(Freedom::Scale)
                }
                Some(false) => {}
                None => certain = false,
            }
        }
    }
    if !certain {
        return undecided;
    }
    Verdict::new(
        Word::Refuted,
        format!(
            "the stated figures, meant exactly, are a multiple of neither reflector vector of \
             column {column}"
        ),
    )
}
