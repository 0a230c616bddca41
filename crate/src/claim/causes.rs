//! Causes of a wrong state, each tested: one is named only when the stated
//! numbers are what it would give.

use dashu_ratio::RBig;

use super::compare::{fit, Fit};
use super::interval::{neg, one, Complex, Precision};
use super::print;
use super::reduction::{Mirror, Sides, Sign, State};
use super::statement::Table;
use super::states::{overall, Trail};
use super::verdict::{Finding, FindingKind};

/// Tests the causes of a wrong matrix after the reflector of column `col`.
pub(super) fn of_state(
    col: usize,
    stated: &Table,
    trail: &Trail,
    wrong: &[(usize, usize)],
    p: Precision,
) -> Vec<Finding> {
    let mut found = Vec::new();
    if trail.mirror.is_some() {
        for sign in [Sign::Minus, Sign::Plus] {
            let target = trail.before.target(col, sign, p);
            let mirror = target.and_then(|target| trail.before.mirror(col, target, p));
            for (state, text) in mirror
                .iter()
                .flat_map(|m| wrong_reflections(col, m, trail, p))
            {
                if overall(&state, stated) == Fit::Inside {
                    found.push(Finding::new(FindingKind::Cause, text));
                    return found;
                }
            }
        }
        found.extend(wrong_sign(col, stated, trail, p));
    }
    if found.is_empty() {
        found.extend(swapped(stated, &trail.after, wrong));
    }
    if found.is_empty() {
        found.extend(single_slip(stated, &trail.after, wrong));
    }
    found
}

/// What each mistake in applying the reflector would give.
fn wrong_reflections(
    col: usize,
    mirror: &Mirror,
    trail: &Trail,
    p: Precision,
) -> Vec<(State, String)> {
    let before = &trail.before;
    let name = format!("reflector {}", col + 1);
    let mut results = vec![
        (
            before.turned(mirror, Sides::Left, p),
            format!("{name} was applied from the left but not from the right"),
        ),
        (
            before.turned(mirror, Sides::Right, p),
            format!("{name} was applied from the right but not from the left"),
        ),
        (
            before.turned(
                &Mirror {
                    tau: one(),
                    ..mirror.clone()
                },
                Sides::Both,
                p,
            ),
            format!("{name} was built as I − vvᴴ, with a scalar of 1 instead of 2/‖v‖²"),
        ),
    ];
    let half = p.div(&mirror.tau, &p.add(&one(), &one()));
    if let Some(tau) = half {
        results.push((
            before.turned(
                &Mirror {
                    tau,
                    ..mirror.clone()
                },
                Sides::Both,
                p,
            ),
            format!("{name} was built with 1/‖v‖² instead of 2/‖v‖²"),
        ));
    }
    let conjugate: Vec<Complex> = mirror.vector.iter().map(Complex::conj).collect();
    if mirror.vector.iter().any(|x| !x.im.holds_zero()) {
        // H = I − τvvᵀ, from both sides as it stands, and with its adjoint.
        let left = before.left(&mirror.vector, &conjugate, &mirror.tau, p);
        let both = left
            .adjoint()
            .left(&conjugate, &mirror.vector, &mirror.tau, p)
            .adjoint();
        let mixed = left
            .adjoint()
            .left(&mirror.vector, &conjugate, &mirror.tau, p)
            .adjoint();
        let text = format!("a conjugate is missing: {name} was built as I − 2vvᵀ/‖v‖²");
        results.push((both, text.clone()));
        results.push((mixed, text));
    }
    results
}

/// The off-diagonal carries the sign of one reflector, the rest of the matrix
/// is that of the other.
fn wrong_sign(col: usize, stated: &Table, trail: &Trail, p: Precision) -> Option<Finding> {
    let other = match trail.sign {
        Sign::Plus => Sign::Minus,
        Sign::Minus => Sign::Plus,
    };
    let target = trail.before.target(col, other, p)?;
    let mirror = trail.before.mirror(col, target, p)?;
    let mut state = trail.before.stepped(col, &mirror, p);
    let order = state.order;
    for (row, column) in [(col + 1, col), (col, col + 1)] {
        let cell = &mut state.cells[row * order + column];
        *cell = Complex {
            re: neg(&cell.re),
            im: neg(&cell.im),
        };
    }
    (overall(&state, stated) == Fit::Inside).then(|| {
        Finding::at(
            FindingKind::Cause,
            col + 1,
            col,
            format!(
                "the sign of the reflector: the entry in row {}, column {} has the sign of one \
                 reflector, and everything else is the result of the other",
                col + 2,
                col + 1
            ),
        )
    })
}

/// Two stated values that would be right in each other's place.
fn swapped(stated: &Table, truth: &State, wrong: &[(usize, usize)]) -> Option<Finding> {
    let places = half(wrong)?;
    let [first, second] = places.as_slice() else {
        return None;
    };
    let crosses = fit(stated.at(first.0, first.1), truth.at(second.0, second.1)) == Fit::Inside
        && fit(stated.at(second.0, second.1), truth.at(first.0, first.1)) == Fit::Inside;
    crosses.then(|| {
        Finding::new(
            FindingKind::Cause,
            format!(
                "two values are swapped: those in row {}, column {} and row {}, column {}",
                first.0 + 1,
                first.1 + 1,
                second.0 + 1,
                second.1 + 1
            ),
        )
    })
}

/// Departures of the lower triangle, when those of the upper mirror them (or
/// when only one of a pair departs).
fn half(wrong: &[(usize, usize)]) -> Option<Vec<(usize, usize)>> {
    let mut places: Vec<(usize, usize)> = Vec::new();
    for &(row, col) in wrong {
        let place = (row.max(col), row.min(col));
        if !places.contains(&place) {
            places.push(place);
        }
    }
    (places.len() <= 2).then_some(places)
}

/// One entry alone departs: which change would repair the matrix, and which
/// control total shows it.
fn single_slip(stated: &Table, truth: &State, wrong: &[(usize, usize)]) -> Option<Finding> {
    let places = half(wrong)?;
    let [(row, col)] = places[..] else {
        return None;
    };
    // With its mirror, an off-diagonal entry cannot be seen in the trace.
    let (row, col) = if wrong.contains(&(row, col)) {
        (row, col)
    } else {
        (col, row)
    };
    let one_sided = row != col && wrong.len() == 1;
    let figure = stated.at(row, col);
    let change = super::interval::middle(&truth.at(row, col).re) - &figure.re.stated;
    let seen = if row == col {
        "the trace and the Frobenius norm show it"
    } else if one_sided {
        "its mirror on the other side of the diagonal is right"
    } else {
        "the Frobenius norm shows it, the trace does not"
    };
    let signed = print::exact(&change, 6);
    let change = if change > RBig::ZERO {
        format!("+{signed}")
    } else {
        signed
    };
    Some(Finding::at(
        FindingKind::Cause,
        row,
        col,
        format!(
            "a slip in one entry: all others are right, and a change of {change} in row {}, column {} \
             would repair it; {seen}",
            row + 1,
            col + 1
        ),
    ))
}
