//! One problem, solved with vectors by us and by our peers, in one module: the
//! same compiler, the same flags, the same run.

use eigenledger::control::Unattended;
use eigenledger::ledger::{Ledger, Silent};
use eigenledger::matrix::Dense;
use eigenledger::problem::Rounded;
use eigenledger::solve::solve;
use nalgebra::{Complex, DMatrix};
use wasm_bindgen::prelude::*;

/// A problem in the form each library takes; made outside the measured time.
#[wasm_bindgen]
pub struct Bench {
    rounded: Rounded,
    real: DMatrix<f64>,
    complex: Option<DMatrix<Complex<f64>>>,
}

fn next(state: &mut u64) -> f64 {
    // xorshift64*: S. Vigna, ACM TOMS 42, 2016; the constants from memory.
    *state ^= *state >> 12;
    *state ^= *state << 25;
    *state ^= *state >> 27;
    (state.wrapping_mul(0x2545_f491_4f6c_dd1d) >> 11) as f64 / (1_u64 << 52) as f64 - 1.0
}

#[wasm_bindgen]
impl Bench {
    /// A random Hermitian matrix, the same for every run.
    #[wasm_bindgen(constructor)]
    pub fn new(order: usize, complex: bool) -> Self {
        let mut state = 20_261_201 + order as u64;
        let mut re = DMatrix::zeros(order, order);
        let mut im = DMatrix::zeros(order, order);
        for col in 0..order {
            for row in col..order {
                re[(row, col)] = next(&mut state);
                re[(col, row)] = re[(row, col)];
                if complex && row > col {
                    im[(row, col)] = next(&mut state);
                    im[(col, row)] = -im[(row, col)];
                }
            }
        }
        let full = complex.then(|| re.zip_map(&im, Complex::new));
        let dense = if complex { Dense::complex(re.clone(), im) } else { Dense::real(re.clone()) };
        Self { rounded: Rounded::from_doubles(dense, None), real: re, complex: full }
    }

    /// The real parts, column by column, for libraries outside the module.
    pub fn entries(&self) -> Vec<f64> {
        self.real.as_slice().to_vec()
    }

    /// Ours, with the ledger; the least eigenvalue.
    pub fn ours(&self) -> Result<f64, JsError> {
        let mut ledger = Ledger::new();
        let solution = solve(&self.rounded, &mut ledger, &mut Unattended)?;
        Ok(scaled_least(&solution.approximation))
    }

    /// Ours, without the ledger.
    pub fn ours_unrecorded(&self) -> Result<f64, JsError> {
        let solution = solve(&self.rounded, &mut Silent, &mut Unattended)?;
        Ok(scaled_least(&solution.approximation))
    }

    /// nalgebra's symmetric eigensolver.
    pub fn nalgebra(&self) -> f64 {
        match &self.complex {
            None => self.real.clone().symmetric_eigen().eigenvalues.min(),
            Some(full) => full.clone().symmetric_eigen().eigenvalues.min(),
        }
    }

    /// faer's self-adjoint eigensolver, one thread.
    pub fn faer(&self) -> Result<f64, JsError> {
        faer::set_global_parallelism(faer::Par::Seq);
        let order = self.real.nrows();
        let failed = |_| JsError::new("faer did not converge");
        match &self.complex {
            None => {
                let full = faer::Mat::from_fn(order, order, |row, col| self.real[(row, col)]);
                let solved = full.self_adjoint_eigen(faer::Side::Lower).map_err(failed)?;
                Ok(solved.S()[0])
            }
            Some(complex) => {
                let full = faer::Mat::from_fn(order, order, |row, col| complex[(row, col)]);
                let solved = full.self_adjoint_eigen(faer::Side::Lower).map_err(failed)?;
                Ok(solved.S()[0].re)
            }
        }
    }
}

fn scaled_least(approximation: &eigenledger::pairs::Approximation) -> f64 {
    approximation.values[0] * f64::from(approximation.scale).exp2()
}
