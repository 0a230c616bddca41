use super::*;
use crate::control::Unattended;
use crate::iterate::{iterate, Limits};
use crate::ledger::Silent;
use crate::reduce::reduce;
use crate::rounded::Rounded;
use crate::solve::cases;

/// How often each road is taken is part of what is claimed about the cost.
#[test]
fn the_fast_road_passes_its_check_where_values_are_apart() {
    let mut doubted = Vec::new();
    for (name, matrix) in cases::hard() {
        let rounded = Rounded::from_doubles(matrix, None);
        let reduction = reduce(&rounded, &mut Silent, &mut Unattended).expect(&name);
        let iteration = iterate(
            &reduction.tridiagonal,
            Limits::default(),
            &mut Silent,
            &mut Unattended,
        )
        .expect(&name);
        let ascending = ascending(&iteration.values);
        if let Err(doubt) = twisted::vectors(&reduction.tridiagonal, &iteration, &ascending) {
            assert!(!name.starts_with("random"), "{name}: {doubt:?}");
            doubted.push(format!("{name}: {doubt:?}"));
        }
    }
    println!("{doubted:#?}");
}

/// Both roads take the same rotations, so that even vectors of repeated values
/// agree to rounding: some n·u for each of the two products.
#[test]
fn a_turned_basis_gives_the_vectors_of_the_accumulated_rotations() {
    let mut matrices = cases::hard();
    for order in [LARGEST_TURNED - 1, LARGEST_TURNED] {
        for complex in [false, true] {
            let name = format!("order {order}, complex {complex}");
            matrices.push((name, cases::random(order, complex, 7)));
        }
    }
    matrices.retain(|(_, matrix)| matrix.rows() <= LARGEST_TURNED);
    assert!(
        matrices.len() > 8,
        "too few small cases: {}",
        matrices.len()
    );
    for (name, matrix) in matrices {
        let rounded = Rounded::from_doubles(matrix, None);
        let turned = crate::solve::solve(&rounded, &mut Silent, &mut Unattended).expect(&name);
        let other = pairs(
            &turned.reduction,
            &turned.iteration,
            Road::Rotations,
            &mut Unattended,
        )
        .expect(&name);
        assert_eq!(turned.approximation.values, other.values, "{name}");
        let order = rounded.matrix.rows() as f64;
        let slack = 20.0 * order * f64::EPSILON;
        let (found, other) = (&turned.approximation.vectors, &other.vectors);
        assert!(
            (&found.re - &other.re).amax() <= slack,
            "{name}: {found:?} {other:?}"
        );
        if let (Some(found), Some(other)) = (&found.im, &other.im) {
            assert!((found - other).amax() <= slack, "{name}: {found} {other}");
        }
    }
}
