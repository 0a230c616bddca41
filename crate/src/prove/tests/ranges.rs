//! Ranges over tolerances, against sampled corners.

use super::support::*;
use crate::control::Unattended;
use crate::entry::cell::CellValue;
use crate::matrix::ExactMatrix;
use crate::num::{ExactReal, Toward};
use crate::problem::{assemble, Assembly, Cells, Choices, Problem};
use crate::prove::tolerance_ranges;

/// An assembly of order 3 with a tolerance on every entry, pair or not.
fn with_tolerances(stream: &mut Stream, pair: bool) -> (Assembly, [i64; 9]) {
    let radius = [1i64, 20, 300][(stream.next().abs() * 3.0) as usize];
    let mut matrix = vec![CellValue::ZERO; 9];
    let mut metric = vec![CellValue::ZERO; 9];
    for i in 0..3 {
        for j in 0..=i {
            let spread = if i == j { 4000.0 * i as f64 } else { 0.0 };
            let digits = (stream.next() * 1000.0 + spread) as i64;
            let weight = if i == j {
                1000
            } else {
                (stream.next() * 200.0) as i64
            };
            for at in [3 * i + j, 3 * j + i] {
                matrix[at].re = decimal(digits, -3);
                matrix[at].tolerance = Some(decimal(radius, -3));
                metric[at].re = decimal(weight, -3);
                metric[at].tolerance = Some(decimal(radius, -4));
            }
        }
    }
    let cells = |values: Vec<CellValue>| Cells {
        rows: 3,
        cols: 3,
        values,
    };
    let metric = pair.then(|| cells(metric));
    let assembly = assemble(cells(matrix), metric, &Choices::default()).expect("Hermitian");
    (assembly, std::array::from_fn(|_| radius))
}

#[test]
fn corners_of_the_tolerances_never_leave_the_ranges() {
    let mut stream = Stream(31);
    for round in 0..24 {
        let (assembly, radii) = with_tolerances(&mut stream, round % 2 == 1);
        let problem = &assembly.problem;
        let ranges = tolerance_ranges(
            problem,
            &approximate(problem, 0),
            assembly.tolerances.as_ref(),
            assembly.metric_tolerances.as_ref(),
            &mut Unattended,
        )
        .expect("a metric far from singular");
        for corner in 0..16 {
            let mut signs = [0i64; 9];
            for i in 0..3 {
                for j in 0..=i {
                    let sign = if stream.next() > 0.0 { 1 } else { -1 };
                    signs[3 * i + j] = sign;
                    signs[3 * j + i] = sign;
                }
            }
            let moved = |typed: &ExactMatrix, exponent: i16| {
                hermitian(
                    3,
                    |i, j| {
                        let by = decimal(radii[0] * signs[3 * i + j], exponent)
                            .rational()
                            .expect("decimal");
                        let sum = typed.re(i, j).rational().expect("decimal") + by;
                        ExactReal::Rational(Box::new(sum))
                    },
                    None,
                )
            };
            let corner_problem = Problem {
                matrix: moved(&problem.matrix, -3),
                metric: problem.metric.as_ref().map(|metric| moved(metric, -4)),
            };
            for range in &ranges {
                let k = range.index();
                let below = exact_count_below(&corner_problem, &range.lower().to_rational());
                let above = exact_count_below(&corner_problem, &range.upper().to_rational());
                let ends = range.decimals();
                assert!(
                    below.is_none_or(|count| count <= k),
                    "round {round}, corner {corner}: {ends:?}"
                );
                assert!(
                    above.is_none_or(|count| count > k),
                    "round {round}, corner {corner}: {ends:?}"
                );
            }
        }
    }
}

#[test]
fn a_diagonal_tolerance_gives_its_own_range() {
    // diag(1 ± 0.1, 5, 9): the first eigenvalue moves by 0.1, the others hardly.
    let mut values = vec![CellValue::ZERO; 9];
    for (i, digits) in [1, 5, 9].into_iter().enumerate() {
        values[4 * i].re = decimal(digits, 0);
    }
    values[0].tolerance = Some(decimal(1, -1));
    let cells = Cells {
        rows: 3,
        cols: 3,
        values,
    };
    let assembly = assemble(cells, None, &Choices::default()).expect("Hermitian");
    let problem = &assembly.problem;
    let ranges = tolerance_ranges(
        problem,
        &approximate(problem, 0),
        assembly.tolerances.as_ref(),
        None,
        &mut Unattended,
    );
    let ranges = ranges.expect("M is the identity");
    let width = |k: usize| (ranges[k].upper() - ranges[k].lower()).to_f64(Toward::Up);
    assert!(
        ranges[0].lower().to_rational() <= rational(9, 10)
            && ranges[0].upper().to_rational() >= rational(11, 10)
    );
    assert!(width(0) < 0.2 + 1e-9 && width(2) < 1e-9, "{ranges:?}");
}
