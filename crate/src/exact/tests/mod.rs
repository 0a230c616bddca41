//! The exact road against hand calculations, published spectra and methods
//! that share nothing with it.

mod oracle;
mod published;
mod random;
mod structure;

use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use crate::control::{Control, Flow, Stage, Unattended};
use crate::exact::{spectrum, tridiagonal, ExactSpectrum, ExactTridiagonal, Limits};
use crate::matrix::ExactMatrix;
use crate::num::ExactReal;
use crate::problem::Problem;

fn ratio(numerator: i64, denominator: u64) -> RBig {
    RBig::from_parts(IBig::from(numerator), UBig::from(denominator))
}

fn cell(value: RBig) -> ExactReal {
    ExactReal::Rational(Box::new(value))
}

fn matrix(rows: &[Vec<RBig>]) -> ExactMatrix {
    let cells = rows.iter().flatten().cloned().map(cell).collect();
    ExactMatrix::new(rows.len(), cells, None)
}

fn integer_rows(rows: &[&[i64]]) -> Vec<Vec<RBig>> {
    rows.iter()
        .map(|row| row.iter().map(|&a| ratio(a, 1)).collect())
        .collect()
}

fn real(rows: &[&[i64]]) -> Problem {
    Problem {
        matrix: matrix(&integer_rows(rows)),
        metric: None,
    }
}

/// A Hermitian matrix from its lower triangle of (re, im) integers.
fn hermitian(rows: &[&[(i64, i64)]]) -> Problem {
    let order = rows.len();
    let mut re = Vec::new();
    let mut im = Vec::new();
    for row in 0..order {
        for col in 0..order {
            let (a, b) = if col <= row {
                rows[row][col]
            } else {
                rows[col][row]
            };
            re.push(cell(ratio(a, 1)));
            im.push(cell(ratio(if col <= row { b } else { -b }, 1)));
        }
    }
    Problem {
        matrix: ExactMatrix::new(order, re, Some(im)),
        metric: None,
    }
}

fn form_of(problem: &Problem) -> ExactTridiagonal {
    tridiagonal(problem, &Limits::for_order(40), &mut Unattended).expect("an exact form")
}

fn spectrum_of(problem: &Problem) -> ExactSpectrum {
    spectrum(problem, &Limits::for_order(40), &mut Unattended).expect("an exact spectrum")
}

/// Each distinct eigenvalue as it is printed, with its multiplicity.
fn printed(spectrum: &ExactSpectrum) -> Vec<(String, usize)> {
    spectrum
        .eigenvalues
        .iter()
        .map(|e| {
            let form = e
                .form
                .as_ref()
                .map_or_else(|| "none".to_owned(), ToString::to_string);
            (form, e.multiplicity)
        })
        .collect()
}

fn expect_forms(spectrum: &ExactSpectrum, expected: &[(&str, usize)]) {
    let expected: Vec<_> = expected
        .iter()
        .map(|(form, many)| ((*form).to_owned(), *many))
        .collect();
    assert_eq!(printed(spectrum), expected);
}

/// Cancels after a number of reports.
struct CancelAfter(usize);

impl Control for CancelAfter {
    fn progress(&mut self, stage: Stage, done: f64) -> Flow {
        assert_eq!(stage, Stage::Exact);
        assert!((0.0..=1.0).contains(&done), "progress {done}");
        if self.0 == 0 {
            return Flow::Cancel;
        }
        self.0 -= 1;
        Flow::Continue
    }
}
