//! The problems measured on, the same in every run.

use eigenledger::matrix::ExactMatrix;
use eigenledger::num::ExactReal;
use eigenledger::problem::Problem;
use nalgebra::{Complex, DMatrix, DVector};

/// What kind of matrix.
#[derive(Clone, Copy)]
pub enum Family {
    /// Entries of three decimals in [−1, 1): eigenvalues well apart.
    Random,
    /// A tenth as many values as rows, each repeated, in a random basis: no
    /// gap to lean on inside a cluster.
    Repeated,
}

impl Family {
    /// The family of a name.
    pub fn named(name: &str) -> Option<Self> {
        match name {
            "random" => Some(Self::Random),
            "repeated" => Some(Self::Repeated),
            _ => None,
        }
    }
}

/// A stream of whole numbers below 2⁵³ (xorshift64*: S. Vigna, ACM TOMS 42,
/// 2016; the constants from memory). `native.py` draws the same.
struct Stream(u64);

impl Stream {
    fn next(&mut self) -> u64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        self.0.wrapping_mul(0x2545_f491_4f6c_dd1d) >> 11
    }

    /// In thousandths, from −1000 to 999.
    fn thousandths(&mut self) -> i64 {
        (self.next() % 2000) as i64 - 1000
    }

    /// In [−1, 1).
    fn double(&mut self) -> f64 {
        self.next() as f64 / (1_u64 << 52) as f64 - 1.0
    }
}

/// One problem of a family.
pub fn problem(family: Family, order: usize, complex: bool) -> Problem {
    let mut stream = Stream(20_261_201 + order as u64);
    let matrix = match family {
        Family::Random => random(order, complex, &mut stream),
        Family::Repeated => repeated(order, complex, &mut stream),
    };
    Problem {
        matrix,
        metric: None,
    }
}

fn random(order: usize, complex: bool, stream: &mut Stream) -> ExactMatrix {
    let zero = vec![0; order * order];
    let (mut re, mut im) = (zero.clone(), zero);
    for col in 0..order {
        for row in col..order {
            re[row * order + col] = stream.thousandths();
            re[col * order + row] = re[row * order + col];
            if complex && row > col {
                im[row * order + col] = stream.thousandths();
                im[col * order + row] = -im[row * order + col];
            }
        }
    }
    let exact = |plane: Vec<i64>| plane.into_iter().map(typed_thousandths).collect();
    ExactMatrix::new(order, exact(re), complex.then(|| exact(im)))
}

fn typed_thousandths(digits: i64) -> ExactReal {
    ExactReal::Decimal {
        digits,
        exponent: -3,
    }
}

/// H₃H₂H₁ diag(values) H₁H₂H₃ with reflectors H along random directions,
/// each two-sided step a rank-two change, and the mean of the two triangles.
fn repeated(order: usize, complex: bool, stream: &mut Stream) -> ExactMatrix {
    let distinct = (order / 10).max(1);
    let values = DVector::from_fn(order, |k, _| Complex::from((k % distinct + 1) as f64));
    let mut a = DMatrix::from_diagonal(&values);
    for _ in 0..3 {
        let v = DVector::from_fn(order, |_, _| {
            Complex::new(stream.double(), if complex { stream.double() } else { 0.0 })
        });
        // w = τAv − (τ²/2)(vᴴAv)v with τ = 2/vᴴv, and A ← A − vwᴴ − wvᴴ.
        let tau = Complex::from(2.0 / v.norm_squared());
        let p = &a * &v * tau;
        let half = v.dotc(&p) * tau * Complex::from(0.5);
        let w = p - &v * half;
        a -= &v * w.adjoint() + &w * v.adjoint();
    }
    let exact = |part: &dyn Fn(usize, usize) -> f64| -> Vec<ExactReal> {
        let cells = (0..order * order).map(|cell| (cell / order, cell % order));
        cells
            .map(|(row, col)| ExactReal::Binary(part(row, col)))
            .collect()
    };
    let re = exact(&|row, col| (a[(row, col)].re + a[(col, row)].re) / 2.0);
    let im = exact(&|row, col| (a[(row, col)].im - a[(col, row)].im) / 2.0);
    ExactMatrix::new(order, re, complex.then_some(im))
}
