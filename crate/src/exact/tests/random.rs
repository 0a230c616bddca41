//! Random rational problems against methods that share nothing with the road.

use proptest::prelude::*;

use super::oracle::{characteristic, operator, value};
use super::*;
use crate::exact::inertia::inertia;

/// Lower triangle of a Hermitian matrix and a Gram factor for the metric.
#[derive(Debug, Clone)]
struct Case {
    order: usize,
    lower: Vec<(i64, i64, u64)>,
    gram: Option<Vec<i64>>,
    complex: bool,
}

fn cases() -> impl Strategy<Value = Case> {
    (1usize..6, any::<bool>(), any::<bool>()).prop_flat_map(|(order, complex, pair)| {
        let cells = order * (order + 1) / 2;
        // Small numerators make splits and repeated eigenvalues common.
        let lower = prop::collection::vec((-3i64..4, -2i64..3, 1u64..3), cells);
        let gram = prop::collection::vec(-2i64..3, order * order);
        (lower, gram).prop_map(move |(lower, gram)| Case {
            order,
            lower,
            gram: pair.then_some(gram),
            complex,
        })
    })
}

fn problem(case: &Case) -> Problem {
    let n = case.order;
    let mut re = vec![RBig::ZERO; n * n];
    let mut im = re.clone();
    let mut next = case.lower.iter();
    for i in 0..n {
        for j in 0..=i {
            let &(a, b, d) = next.next().expect("one cell a place");
            re[i * n + j] = ratio(a, d);
            re[j * n + i] = ratio(a, d);
            if i != j && case.complex {
                im[i * n + j] = ratio(b, d);
                im[j * n + i] = ratio(-b, d);
            }
        }
    }
    let metric = case.gram.as_ref().map(|g| {
        // GᵀG + I is positive definite whatever G.
        let mut cells = Vec::new();
        for i in 0..n {
            for j in 0..n {
                let dot: i64 = (0..n).map(|k| g[k * n + i] * g[k * n + j]).sum();
                cells.push(cell(ratio(dot + i64::from(i == j), 1)));
            }
        }
        ExactMatrix::new(n, cells, None)
    });
    let plane = |cells: Vec<RBig>| cells.into_iter().map(cell).collect();
    let im = case.complex.then(|| plane(im));
    Problem {
        matrix: ExactMatrix::new(n, plane(re), im),
        metric,
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn polynomial_agrees_with_faddeev_leverrier(case in cases()) {
        let problem = problem(&case);
        let expected = characteristic(&operator(&problem));
        prop_assert_eq!(form_of(&problem).characteristic(), expected);
    }

    #[test]
    fn roots_are_contained_and_counted(case in cases()) {
        let problem = problem(&case);
        let expected = characteristic(&operator(&problem));
        let mut result = spectrum_of(&problem);
        result.refine(20);
        let mut index = 0;
        for eigenvalue in &result.eigenvalues {
            prop_assert_eq!(eigenvalue.first_index, index);
            index += eigenvalue.multiplicity;
            let (low, high) = (eigenvalue.root.lower(), eigenvalue.root.upper());
            if low == high {
                prop_assert!(value(&expected, &low).is_zero());
            } else if eigenvalue.multiplicity % 2 == 1 {
                let ends = value(&expected, &low) * value(&expected, &high);
                prop_assert!(ends < RBig::ZERO, "no change of sign over {}, {}", low, high);
            }
            // Sturm, elimination and the factors must tell the same counts.
            for (x, below) in [(&low, eigenvalue.first_index), (&high, index)] {
                let counts = result.tridiagonal.counts(x);
                let signs = inertia(&problem, x, &Limits::default(), &mut Unattended)
                    .expect("inertia");
                prop_assert_eq!(
                    (counts.below, counts.equal, counts.above),
                    (signs.negative, signs.zero, signs.positive)
                );
                if low != high {
                    prop_assert_eq!(counts.below + counts.equal, below);
                } else {
                    prop_assert_eq!(counts.below, eigenvalue.first_index);
                    prop_assert_eq!(counts.equal, eigenvalue.multiplicity);
                }
            }
        }
        prop_assert_eq!(index, case.order);
    }

    #[test]
    fn basis_tridiagonalises(case in cases()) {
        let problem = problem(&case);
        let form = form_of(&problem);
        let moved = operator(&problem);
        // M⁻¹A must take each vector into the span of its neighbours, and the
        // first vector must be a multiple of the first unit vector.
        prop_assert!(form.basis[0][1..].iter().all(crate::exact::Gauss::is_zero));
        let trace: RBig = moved.iter().enumerate().fold(RBig::ZERO, |t, (i, row)| t + &row[i].0);
        let diagonal = form.diagonal.iter().fold(RBig::ZERO, |t, a| t + a);
        prop_assert_eq!(trace, diagonal);
        prop_assert!(form.squares.iter().all(|b| *b >= RBig::ZERO));
        for range in form.block_ranges() {
            for k in range.start + 1..range.end {
                prop_assert!(form.squares[k - 1] > RBig::ZERO, "a split inside a block");
            }
        }
    }
}
