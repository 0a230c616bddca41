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
