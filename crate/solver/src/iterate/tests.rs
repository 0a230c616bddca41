use super::*;
use crate::control::Unattended;
use crate::ledger::{Act, Ledger, Silent, Totals};

fn kac(order: usize) -> Tridiagonal {
    Tridiagonal {
        diagonal: vec![0.0; order],
        off_diagonal: (1..order)
            .map(|k| ((k * (order - k)) as f64).sqrt())
            .collect(),
    }
}

fn values(tridiagonal: &Tridiagonal) -> Vec<f64> {
    let mut values = iterate(tridiagonal, Limits::default(), &mut Silent, &mut Unattended)
        .expect("converges")
        .values;
    values.sort_by(f64::total_cmp);
    values
}

/// Values of a symmetric matrix move by no more than the backward error of the
/// iteration: 10·n·u·‖T‖ is what the whole solve is held to.
fn assert_near(name: &str, found: &[f64], expected: &[f64], norm: f64) {
    let slack = 10.0 * found.len() as f64 * f64::EPSILON / 2.0 * norm;
    assert_eq!(found.len(), expected.len(), "{name}");
    for (k, (x, y)) in found.iter().zip(expected).enumerate() {
        assert!(
            (x - y).abs() <= slack,
            "{name}, value {k}: {x} against {y}, slack {slack:e}"
        );
    }
}

#[test]
fn second_differences_have_their_closed_form() {
    // 2 − 2 cos(kπ/(n+1)); Gregory and Karney, "A Collection of Matrices for
    // Testing Computational Algorithms" (1969), from memory.
    for order in [2, 5, 40, 150] {
        let t = Tridiagonal {
            diagonal: vec![2.0; order],
            off_diagonal: vec![-1.0; order - 1],
        };
        let angle = |k: usize| k as f64 * std::f64::consts::PI / (order + 1) as f64;
        let expected: Vec<f64> = (1..=order).map(|k| 2.0 - 2.0 * angle(k).cos()).collect();
        assert_near("second differences", &values(&t), &expected, 4.0);
    }
}

#[test]
fn the_kac_matrix_has_integers() {
    // ±(n−1), ±(n−3), …: Clement, SIAM Review 1 (1959).
    for order in [2, 3, 20, 75] {
        let expected: Vec<f64> = (0..order)
            .map(|k| 2.0 * k as f64 - (order - 1) as f64)
            .collect();
        assert_near("Kac", &values(&kac(order)), &expected, (order - 1) as f64);
    }
}

#[test]
fn wilkinsons_matrix_has_its_close_pairs() {
    // W21+: largest two 10.746194182903322 and 10.746194182903393, from memory
    // of Wilkinson, "The Algebraic Eigenvalue Problem" (1965), §5.45.
    let t = Tridiagonal {
        diagonal: (0..21).map(|k| (f64::from(k) - 10.0).abs()).collect(),
        off_diagonal: vec![1.0; 20],
    };
    let found = values(&t);
    let expected = [10.746_194_182_903_322, 10.746_194_182_903_393];
    assert_near("W21+", &found[19..], &expected, 11.0);
    assert!(found[20] > found[19], "the pair is not merged: {found:?}");
}

#[test]
fn the_cap_ends_the_iteration_and_keeps_the_ledger() {
    let mut ledger = Ledger::new();
    let t = kac(20);
    let reduction = crate::ledger::Event::Phases {
        phases: &[],
        tridiagonal: &t,
    };
    ledger.record(reduction, Totals::of_tridiagonal(&t));
    let limits = Limits { sweeps_per_row: 0 };
    let error = iterate(&t, limits, &mut ledger, &mut Unattended).expect_err("no sweep allowed");
    assert_eq!(
        error,
        IterateError::NotConverged {
            first: 0,
            last: 19,
            sweeps: 0
        }
    );
    let limits = Limits { sweeps_per_row: 1 };
    let error = iterate(&t, limits, &mut ledger, &mut Unattended).expect_err("too few allowed");
    assert!(
        matches!(error, IterateError::NotConverged { sweeps: 20, .. }),
        "{error}"
    );
    let sweeps = ledger
        .entries()
        .iter()
        .filter(|e| matches!(e.act, Act::Sweep { .. }))
        .count();
    assert_eq!(sweeps, 20);
}

#[test]
fn infinite_input_is_refused_with_its_row() {
    let mut t = kac(5);
    t.off_diagonal[3] = f64::NAN;
    let error = iterate(&t, Limits::default(), &mut Silent, &mut Unattended);
    assert_eq!(error, Err(IterateError::NotFinite { row: 3 }));
}

#[test]
fn a_sweep_costs_one_rotation_a_row_and_few_sweeps_are_needed() {
    for order in [10, 20, 40, 80, 160] {
        let t = kac(order);
        let mut rotations = 0;
        let step = SweepStep {
            first: 0,
            last: order - 1,
            shift: 0.5,
            direction: Direction::Down,
        };
        sweep(&mut t.clone(), step, |_, _| rotations += 1);
        assert_eq!(rotations, order - 1, "O(n) a sweep");
        let sweeps = iterate(&t, Limits::default(), &mut Silent, &mut Unattended)
            .expect("converges")
            .sweeps
            .len();
        assert!(sweeps <= 4 * order, "{sweeps} sweeps for order {order}");
    }
}

#[test]
fn both_directions_are_similarities_of_the_same_kind() {
    // Upward on T is downward on T turned end for end, to the bit.
    let t = kac(9);
    let turned = Tridiagonal {
        diagonal: t.diagonal.iter().rev().copied().collect(),
        off_diagonal: t.off_diagonal.iter().rev().copied().collect(),
    };
    let step = SweepStep {
        first: 0,
        last: 8,
        shift: 0.7,
        direction: Direction::Up,
    };
    let (mut up, mut down) = (t, turned);
    repeat(&mut up, step);
    repeat(
        &mut down,
        SweepStep {
            direction: Direction::Down,
            ..step
        },
    );
    up.diagonal.reverse();
    up.off_diagonal.reverse();
    assert_eq!(up, down);
}
