//! Ways to the same answers that share no code with the exact road.

use dashu_ratio::RBig;

use crate::problem::Problem;

/// A complex rational number.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct C(pub(super) RBig, pub(super) RBig);

impl C {
    fn zero() -> Self {
        Self(RBig::ZERO, RBig::ZERO)
    }

    fn times(&self, o: &Self) -> Self {
        Self(
            &self.0 * &o.0 - &self.1 * &o.1,
            &self.0 * &o.1 + &self.1 * &o.0,
        )
    }

    fn plus(&self, o: &Self) -> Self {
        Self(&self.0 + &o.0, &self.1 + &o.1)
    }

    fn inverse(&self) -> Self {
        let size = &self.0 * &self.0 + &self.1 * &self.1;
        Self(&self.0 / &size, -(&self.1 / &size))
    }
}

type Rows = Vec<Vec<C>>;

/// M⁻¹A by Gauss–Jordan elimination over the complex rationals.
pub(super) fn operator(problem: &Problem) -> Rows {
    let read = |m: &crate::matrix::ExactMatrix| -> Rows {
        (0..m.order())
            .map(|i| {
                (0..m.order())
                    .map(|j| {
                        C(
                            m.re(i, j).rational().expect("real"),
                            m.im(i, j).rational().expect("im"),
                        )
                    })
                    .collect()
            })
            .collect()
    };
    let mut a = read(&problem.matrix);
    let Some(metric) = &problem.metric else {
        return a;
    };
    let mut m = read(metric);
    let n = a.len();
    for k in 0..n {
        let inverse = m[k][k].inverse();
        for j in 0..n {
            m[k][j] = m[k][j].times(&inverse);
            a[k][j] = a[k][j].times(&inverse);
        }
        for i in (0..n).filter(|&i| i != k) {
            let factor = C(-m[i][k].0.clone(), -m[i][k].1.clone());
            for j in 0..n {
                m[i][j] = m[i][j].plus(&factor.times(&m[k][j]));
                a[i][j] = a[i][j].plus(&factor.times(&a[k][j]));
            }
        }
    }
    a
}

fn product(a: &Rows, b: &Rows) -> Rows {
    let n = a.len();
    (0..n)
        .map(|i| {
            (0..n)
                .map(|j| (0..n).fold(C::zero(), |sum, k| sum.plus(&a[i][k].times(&b[k][j]))))
                .collect()
        })
        .collect()
}

/// Monic characteristic polynomial by Faddeev and LeVerrier: N₁ = I,
/// cₙ₋ₖ = −tr(A·Nₖ)/k, Nₖ₊₁ = A·Nₖ + cₙ₋ₖI. Ascending powers.
pub(super) fn characteristic(a: &Rows) -> Vec<RBig> {
    let n = a.len();
    let mut coefficients = vec![RBig::ZERO; n + 1];
    coefficients[n] = RBig::ONE;
    let mut power: Rows = (0..n)
        .map(|i| {
            (0..n)
                .map(|j| {
                    if i == j {
                        C(RBig::ONE, RBig::ZERO)
                    } else {
                        C::zero()
                    }
                })
                .collect()
        })
        .collect();
    for k in 1..=n {
        let moved = product(a, &power);
        let mut trace = C::zero();
        for (i, row) in moved.iter().enumerate() {
            trace = trace.plus(&row[i]);
        }
        assert!(trace.1.is_zero(), "the trace of a Hermitian power is real");
        let c = -(trace.0 / RBig::from(k));
        power = moved;
        for (i, row) in power.iter_mut().enumerate() {
            row[i].0 += &c;
        }
        coefficients[n - k] = c;
    }
    coefficients
}

/// Σ cₖxᵏ.
pub(super) fn value(coefficients: &[RBig], x: &RBig) -> RBig {
    coefficients
        .iter()
        .rev()
        .fold(RBig::ZERO, |sum, c| sum * x + c)
}
