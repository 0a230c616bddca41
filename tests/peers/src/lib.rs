//! One problem, solved with vectors by us and by our peers, in one module: the
//! same compiler, the same flags, the same run.

mod problems;

use eigenledger::control::Unattended;
use eigenledger::ledger::{Ledger, Recorder, Silent};
use eigenledger::pairs::Approximation;
use eigenledger::problem::{Problem, Rounded};
use eigenledger::prove::{prove, Level};
use eigenledger::solve::solve;
use nalgebra::{Complex, DMatrix};
use wasm_bindgen::prelude::*;

use problems::Family;

/// A problem in the form each library takes, made outside the measured time.
///
/// Every solver returns the least eigenvalue, so that a caller can see that
/// all of them solved the same problem.
#[wasm_bindgen]
pub struct Bench {
    problem: Problem,
    rounded: Rounded,
    for_nalgebra: ForNalgebra,
    for_faer: ForFaer,
}

enum ForNalgebra {
    Real(DMatrix<f64>),
    Complex(DMatrix<Complex<f64>>),
}

enum ForFaer {
    Real(faer::Mat<f64>),
    Complex(faer::Mat<Complex<f64>>),
}

#[wasm_bindgen]
impl Bench {
    /// The problem of a family (`random` or `repeated`), the same every time.
    ///
    /// # Errors
    /// If there is no family of that name.
    #[wasm_bindgen(constructor)]
    pub fn new(family: &str, order: usize, complex: bool) -> Result<Self, JsError> {
        let family = Family::named(family).ok_or_else(|| JsError::new("no such family"))?;
        let problem = problems::problem(family, order, complex);
        let rounded = problem.rounded();
        let re = &rounded.matrix.re;
        let (for_nalgebra, for_faer) = match &rounded.matrix.im {
            None => (
                ForNalgebra::Real(re.clone()),
                ForFaer::Real(faer::Mat::from_fn(order, order, |i, j| re[(i, j)])),
            ),
            Some(im) => {
                let full = re.zip_map(im, Complex::new);
                let for_faer = faer::Mat::from_fn(order, order, |i, j| full[(i, j)]);
                (ForNalgebra::Complex(full), ForFaer::Complex(for_faer))
            }
        };
        faer::set_global_parallelism(faer::Par::Seq);
        Ok(Self {
            problem,
            rounded,
            for_nalgebra,
            for_faer,
        })
    }

    /// The real parts, column by column, for libraries outside the module.
    pub fn entries(&self) -> Vec<f64> {
        self.rounded.matrix.re.as_slice().to_vec()
    }

    /// Ours, with the ledger.
    ///
    /// # Errors
    /// If it does not converge; so with the others below.
    pub fn ours(&self) -> Result<f64, JsError> {
        self.solved(&mut Ledger::new()).map(|found| least(&found))
    }

    /// Ours, without the ledger.
    pub fn ours_unrecorded(&self) -> Result<f64, JsError> {
        self.solved(&mut Silent).map(|found| least(&found))
    }

    /// Ours, with the ledger and the quick proof.
    pub fn ours_quick(&self) -> Result<f64, JsError> {
        self.proven(Level::Quick)
    }

    /// Ours, with the ledger and the tight proof.
    pub fn ours_tight(&self) -> Result<f64, JsError> {
        self.proven(Level::Tight)
    }

    /// nalgebra's symmetric eigensolver.
    pub fn nalgebra(&self) -> f64 {
        match &self.for_nalgebra {
            ForNalgebra::Real(full) => full.clone().symmetric_eigen().eigenvalues.min(),
            ForNalgebra::Complex(full) => full.clone().symmetric_eigen().eigenvalues.min(),
        }
    }

    /// faer's self-adjoint eigensolver, one thread.
    pub fn faer(&self) -> Result<f64, JsError> {
        let failed = |_| JsError::new("faer did not converge");
        match &self.for_faer {
            ForFaer::Real(full) => {
                let solved = full.self_adjoint_eigen(faer::Side::Lower).map_err(failed)?;
                Ok(solved.S()[0])
            }
            ForFaer::Complex(full) => {
                let solved = full.self_adjoint_eigen(faer::Side::Lower).map_err(failed)?;
                Ok(solved.S()[0].re)
            }
        }
    }
}

impl Bench {
    fn solved(&self, recorder: &mut dyn Recorder) -> Result<Approximation, JsError> {
        Ok(solve(&self.rounded, recorder, &mut Unattended)?.approximation)
    }

    fn proven(&self, level: Level) -> Result<f64, JsError> {
        let found = self.solved(&mut Ledger::new())?;
        let proof = prove(&self.problem, &found, level, &mut Unattended);
        if proof.level().is_none() {
            return Err(JsError::new("the proof came to nothing"));
        }
        Ok(least(&found))
    }
}

fn least(approximation: &Approximation) -> f64 {
    approximation.values[0] * f64::from(approximation.scale).exp2()
}
