//! How much work of order n³ the stages do: counted, since times depend on the
//! machine. Leading terms are those the stages' own documentation states.

use super::cases;
use crate::control::Unattended;
use crate::iterate::{iterate, Limits};
use crate::ledger::{Ledger, Silent};
use crate::matrix::counted::counted;
use crate::matrix::Dense;
use crate::pairs::{pairs, Road};
use crate::reduce::reduce;
use crate::rounded::Rounded;

/// Operations of the reduction, of the vectors by the checked road, and of the
/// vectors by rotations.
fn operations(matrix: Dense) -> [f64; 3] {
    let rounded = Rounded::from_doubles(matrix, None);
    let (reduction, reducing) = counted(|| reduce(&rounded, &mut Silent, &mut Unattended));
    let reduction = reduction.expect("reduces");
    let form = &reduction.tridiagonal;
    let iteration =
        iterate(form, Limits::default(), &mut Silent, &mut Unattended).expect("converges");
    let by = |road| {
        let (found, taken) = counted(|| pairs(&reduction, &iteration, road, &mut Unattended));
        found.expect("finds vectors");
        taken
    };
    [reducing, by(Road::Checked), by(Road::Rotations)]
}

#[test]
fn the_stages_cost_what_they_state() {
    for (complex, kind) in [(false, 1.0), (true, 4.0)] {
        for order in [60, 120, 240] {
            let n = order as f64;
            let [reducing, checked, rotating] = operations(cases::random(order, complex, 3));
            let states = |name: &str, found: f64, cubes: f64, squares: f64| {
                let least = 0.9 * kind * cubes * n * n * n;
                let most = kind * (cubes * n * n * n + squares * n * n);
                assert!(
                    (least..=most).contains(&found),
                    "{name}, order {order}, complex {complex}: {found} operations, not {least} to {most}"
                );
            };
            states("reduction", reducing, 4.0 / 3.0, 3.0);
            // Reflectors are applied in groups of 32, whose triangular
            // factor and unused corners cost about 120·n².
            states("vectors, checked road", checked, 2.0, 130.0);
            // About 1.1·n² rotations, on the real basis of T: only what follows
            // them is complex.
            states("vectors, rotations", rotating, 2.0 + 7.0 / kind, 150.0);
        }
    }
}

#[test]
fn recording_adds_no_work_of_order_n_cubed() {
    let rounded = Rounded::from_doubles(cases::random(120, true, 4), None);
    let (_, silent) = counted(|| reduce(&rounded, &mut Silent, &mut Unattended));
    let (_, recorded) = counted(|| reduce(&rounded, &mut Ledger::new(), &mut Unattended));
    assert!(
        recorded <= 1.1 * silent,
        "{recorded} operations with the ledger, {silent} without"
    );
}
