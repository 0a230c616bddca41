use super::*;
use crate::control::Unattended;
use crate::ledger::Silent;
use crate::matrix::kernels::product;
use crate::solve::cases::{self, Stream};
use nalgebra::DMatrix;

fn rounded(matrix: Dense) -> Rounded {
    Rounded::from_doubles(matrix, None)
}

/// H = I − τ v vᴴ as a full matrix.
fn full(scalar: f64, re: &[f64], im: &[f64]) -> Dense {
    let order = re.len();
    let im = |k: usize| im.get(k).copied().unwrap_or(0.0);
    let plane_re = DMatrix::from_fn(order, order, |i, j| {
        f64::from(u8::from(i == j)) - scalar * (re[i] * re[j] + im(i) * im(j))
    });
    let plane_im = DMatrix::from_fn(order, order, |i, j| {
        -scalar * (im(i) * re[j] - re[i] * im(j))
    });
    Dense::complex(plane_re, plane_im)
}

#[test]
fn a_reflector_is_unitary_its_own_adjoint_and_zeroes_its_column() {
    let mut stream = Stream::new(1);
    for (order, complex) in [(2, false), (2, true), (5, false), (9, true), (40, true)] {
        let mut part = || (0..order).map(|_| stream.next()).collect::<Vec<f64>>();
        let (x_re, x_im) = (part(), if complex { part() } else { Vec::new() });
        let (mut re, mut im) = (x_re.clone(), x_im.clone());
        let formed = reflector::form(&mut re, &mut im);
        let h = full(formed.scalar, &re, &im);
        let context = format!("x = {x_re:?} + i {x_im:?}");
        // Products of matrices of this order are good to a few n·u.
        let slack = 4.0 * order as f64 * f64::EPSILON;
        let h_im = h.im.as_ref().expect("built complex");
        assert!((&h.re - h.re.transpose()).amax() <= slack, "{context}");
        assert!((h_im + h_im.transpose()).amax() <= slack, "{context}");
        let square = product(&h, &h);
        assert!(
            (square.re - DMatrix::identity(order, order)).amax() <= slack,
            "{context}"
        );
        assert!(square.im.expect("complex").amax() <= slack, "{context}");
        let zeros = vec![0.0; order];
        let x = Dense::complex(
            DMatrix::from_column_slice(order, 1, &x_re),
            DMatrix::from_column_slice(order, 1, if complex { &x_im } else { &zeros }),
        );
        let image = product(&h, &x);
        let image_im = image.im.expect("complex");
        for row in 0..order {
            let expected = if row == 0 {
                (formed.image_re, formed.image_im)
            } else {
                (0.0, 0.0)
            };
            assert!(
                (image.re[(row, 0)] - expected.0).abs() <= slack,
                "{context}, row {row}"
            );
            assert!(
                (image_im[(row, 0)] - expected.1).abs() <= slack,
                "{context}, row {row}"
            );
        }
    }
}

#[test]
fn extreme_columns_give_unitary_reflectors() {
    for unit in [1e-308, 5e-324, 1e-200, 1e-100, 1.0] {
        let mut re = vec![3.0 * unit, 4.0 * unit, 0.0, -12.0 * unit];
        let formed = reflector::form(&mut re, &mut []);
        let square: f64 = re.iter().map(|x| x * x).sum();
        // Subnormal columns hold few bits, so their norm is good to one part in 13 only.
        let slack = if unit < 1e-300 { 0.1 } else { 1e-15 };
        assert!(
            (formed.scalar * square - 2.0).abs() <= 2.0 * slack,
            "unit {unit:e}: {formed:?} {re:?}"
        );
        assert!(
            (formed.image_re + 13.0 * unit).abs() <= 13.0 * unit * slack,
            "unit {unit:e}: {formed:?}"
        );
    }
}

#[test]
fn the_right_application_leaves_the_zeros_and_the_diagonal_stays_real() {
    for complex in [false, true] {
        let mut run = ReductionRun::new(&cases::random(12, complex, 5));
        for done in 1..=12 {
            run.step();
            let state = run.matrix();
            for col in 0..done {
                for row in col + 2..12 {
                    assert_eq!(state.re[(row, col)], 0.0, "{complex} {done} ({row}, {col})");
                    let im = state.im.as_ref().map_or(0.0, |im| im[(row, col)]);
                    assert_eq!(im, 0.0, "{complex} {done} ({row}, {col})");
                }
            }
            if let Some(im) = &state.im {
                assert!(im.diagonal().iter().all(|x| *x == 0.0), "{done}: {im}");
            }
        }
    }
}

#[test]
fn the_first_basis_vector_is_kept() {
    // Q e₁ = e₁, so the first entry of T is that of A, to the bit.
    for complex in [false, true] {
        let rounded = rounded(cases::random(9, complex, 6));
        let reduction = reduce(&rounded, &mut Silent, &mut Unattended).expect("good");
        assert_eq!(reduction.tridiagonal.diagonal[0], rounded.matrix.re[(0, 0)]);
    }
}

#[test]
fn errors_name_the_place() {
    let mut matrix = cases::random(4, true, 1);
    matrix.im.as_mut().expect("complex")[(2, 1)] = f64::NAN;
    let problem = Rounded {
        matrix,
        matrix_scale: 0,
        metric: None,
        metric_scale: 0,
    };
    let error = reduce(&problem, &mut Silent, &mut Unattended).expect_err("NaN");
    assert_eq!(error, ReduceError::NotFinite { row: 2, col: 1 });
    assert!(error.to_string().contains("row 3, column 2"), "{error}");

    let wide = Dense::real(DMatrix::zeros(2, 3));
    let problem = Rounded {
        matrix: wide,
        matrix_scale: 0,
        metric: None,
        metric_scale: 0,
    };
    let error = reduce(&problem, &mut Silent, &mut Unattended).expect_err("not square");
    assert_eq!(error, ReduceError::Shape { rows: 2, cols: 3 });

    let huge = cases::real(2, |_, _| 1e300);
    let problem = Rounded {
        matrix: huge,
        matrix_scale: 0,
        metric: None,
        metric_scale: 0,
    };
    let error = reduce(&problem, &mut Silent, &mut Unattended).expect_err("unscaled");
    assert_eq!(error, ReduceError::NotScaled { largest: 1e300 });

    // L = (2; 1, 1; 0, 1, ·) exactly, and −1 is left in the third row.
    let entries = [[4.0, 2.0, 0.0], [2.0, 2.0, 1.0], [0.0, 1.0, 0.0]];
    let metric = cases::real(3, |i, j| entries[i][j]);
    let error = cholesky(&metric).expect_err("indefinite");
    assert_eq!(
        error,
        CholeskyError {
            row: 2,
            pivot: -1.0
        }
    );
}

#[test]
fn cancelling_is_heard_at_once() {
    struct Impatient;
    impl Control for Impatient {
        fn progress(&mut self, _: Stage, _: f64) -> Flow {
            Flow::Cancel
        }
    }
    let error = reduce(
        &rounded(cases::random(5, false, 1)),
        &mut Silent,
        &mut Impatient,
    );
    assert_eq!(error.err(), Some(ReduceError::Cancelled { column: 0 }));
}
