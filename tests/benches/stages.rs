//! Native times of the kernels and stages: `cargo bench -p eigenledger-tests`.
//! For comparing one state of the sources with another on one machine; the
//! speeds that are reported are those of `cargo page bench`.

use std::hint::black_box;

use criterion::{BenchmarkId, Criterion};
use eigenledger::control::Unattended;
use eigenledger::iterate::{iterate, Limits};
use eigenledger::ledger::{Ledger, Silent};
use eigenledger::matrix::kernels::{adjoint_product, product};
use eigenledger::matrix::ExactMatrix;
use eigenledger::num::ExactReal;
use eigenledger::pairs::{pairs, Road};
use eigenledger::problem::{Problem, Rounded};
use eigenledger::prove::{prove, Level};
use eigenledger::reduce::reduce;
use eigenledger::solve::solve;
use eigenledger_tests::{random_hermitian, Field};

const ORDERS: [usize; 4] = [10, 50, 100, 200];
const SEED: u64 = 1;

/// Order and field, as they stand in a benchmark's name.
fn kinds() -> impl Iterator<Item = (usize, Field, String)> {
    [Field::Real, Field::Complex]
        .into_iter()
        .flat_map(|field| ORDERS.map(|order| (order, field, format!("{field:?} {order}"))))
}

fn rounded(order: usize, field: Field) -> Rounded {
    Rounded::from_doubles(random_hermitian(order, field, SEED), None)
}

/// The matrix of [`rounded`] as a problem of exact doubles.
fn problem(order: usize, field: Field) -> Problem {
    let matrix = random_hermitian(order, field, SEED);
    let exact = |plane: &nalgebra::DMatrix<f64>| {
        let rows = plane.row_iter();
        rows.flat_map(|row| {
            row.iter()
                .copied()
                .map(ExactReal::Binary)
                .collect::<Vec<_>>()
        })
        .collect()
    };
    let matrix = ExactMatrix::new(order, exact(&matrix.re), matrix.im.as_ref().map(exact));
    Problem {
        matrix,
        metric: None,
    }
}

fn products(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("product");
    for (order, field, name) in kinds() {
        let (a, b) = (
            random_hermitian(order, field, 2),
            random_hermitian(order, field, 3),
        );
        group.bench_function(BenchmarkId::new("plain", &name), |bencher| {
            bencher.iter(|| product(black_box(&a), black_box(&b)));
        });
        group.bench_function(BenchmarkId::new("adjoint", &name), |bencher| {
            bencher.iter(|| adjoint_product(black_box(&a), black_box(&b)));
        });
    }
    group.finish();
}

fn stages(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("stage");
    for (order, field, name) in kinds() {
        let given = rounded(order, field);
        let reduced = || reduce(&given, &mut Silent, &mut Unattended).expect("reduces");
        let reduction = reduced();
        let iterated = || {
            iterate(
                &reduction.tridiagonal,
                Limits::default(),
                &mut Silent,
                &mut Unattended,
            )
            .expect("converges")
        };
        let iteration = iterated();
        group.bench_function(BenchmarkId::new("reduce", &name), |bencher| {
            bencher.iter(reduced);
        });
        group.bench_function(BenchmarkId::new("iterate", &name), |bencher| {
            bencher.iter(iterated);
        });
        group.bench_function(BenchmarkId::new("pairs", &name), |bencher| {
            bencher.iter(|| pairs(&reduction, &iteration, Road::Checked, &mut Unattended));
        });
    }
    group.finish();
}

fn wholes(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("whole");
    for (order, field, name) in kinds() {
        let given = rounded(order, field);
        group.bench_function(BenchmarkId::new("solve", &name), |bencher| {
            bencher.iter(|| solve(&given, &mut Silent, &mut Unattended));
        });
        group.bench_function(BenchmarkId::new("solve with ledger", &name), |bencher| {
            bencher.iter(|| solve(&given, &mut Ledger::new(), &mut Unattended));
        });
        let problem = problem(order, field);
        let solution = solve(&problem.rounded(), &mut Silent, &mut Unattended).expect("converges");
        for level in [Level::Quick, Level::Tight] {
            group.bench_function(
                BenchmarkId::new(format!("{level:?} proof"), &name),
                |bencher| {
                    bencher
                        .iter(|| prove(&problem, &solution.approximation, level, &mut Unattended));
                },
            );
        }
    }
    group.finish();
}

fn main() {
    let mut criterion = Criterion::default().configure_from_args();
    products(&mut criterion);
    stages(&mut criterion);
    wholes(&mut criterion);
    criterion.final_summary();
}
