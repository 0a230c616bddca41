//! Does a box of stated components hold a vector of a given space?
//!
//! Notation: the space is spanned by d vectors known as intervals; the box is
//! |yᵢ − cᵢ| ≤ hᵢ, complex vectors being taken as real ones of twice the
//! length. *Yes* is proven by a vector of the space, computed in intervals,
//! that lies in the box. *No* is proven by a w orthogonal to the space with
//! w·y > 0 all over the box (the separating plane of two convex sets). Both
//! are searched for by projecting in turn onto the space and onto the box, in
//! plain doubles, and only then verified.

use dashu_ratio::RBig;

use super::figure::{size, Figure};
use super::interval::{approx, middle, zero, Complex, Precision, Real};

/// Whether box and space meet.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Meeting {
    /// They do.
    Yes,
    /// They do not; the box would have to be wider by at least this.
    No(RBig),
    /// Not decided at this precision.
    Unclear,
}

/// Rounds of the search. Projections converge linearly; boxes that need more
/// are so thin that they are left undecided.
const ROUNDS: usize = 4_000;

/// One space and one box of real coordinates.
struct Search<'a> {
    precision: Precision,
    centre: &'a [RBig],
    half: &'a [RBig],
    /// Orthogonal basis of the space.
    basis: Vec<Vec<Real>>,
    /// Squared lengths of the basis vectors.
    lengths: Vec<Real>,
}

/// Whether the box of `figures` holds a multiple of a vector in the span of
/// `space`. `complex` allows complex multiples.
pub(super) fn meets(
    space: &[Vec<Complex>],
    figures: &[Figure],
    complex: bool,
    precision: Precision,
) -> Meeting {
    let mut centre: Vec<RBig> = figures.iter().map(|figure| figure.re.centre()).collect();
    let mut half: Vec<RBig> = figures
        .iter()
        .map(|figure| figure.re.half_width())
        .collect();
    let mut vectors: Vec<Vec<Real>> = Vec::new();
    for vector in space {
        let mut coordinates: Vec<Real> = vector.iter().map(|x| x.re.clone()).collect();
        if complex {
            coordinates.extend(vector.iter().map(|x| x.im.clone()));
        }
        vectors.push(coordinates);
        if complex {
            let mut turned: Vec<Real> =
                vector.iter().map(|x| super::interval::neg(&x.im)).collect();
            turned.extend(vector.iter().map(|x| x.re.clone()));
            vectors.push(turned);
        }
    }
    if complex {
        centre.extend(figures.iter().map(|figure| figure.im.centre()));
        half.extend(figures.iter().map(|figure| figure.im.half_width()));
    }
    match Search::new(&vectors, &centre, &half, precision) {
        Some(search) => search.run(),
        None => Meeting::Unclear,
    }
}

impl<'a> Search<'a> {
    /// Orthogonalises the space; `None` when its vectors are not proven
    /// independent at this precision.
    fn new(
        vectors: &[Vec<Real>],
        centre: &'a [RBig],
        half: &'a [RBig],
        precision: Precision,
    ) -> Option<Self> {
        let mut search = Self {
            precision,
            centre,
            half,
            basis: Vec::new(),
            lengths: Vec::new(),
        };
        for vector in vectors {
            let rest = search.rest(vector)?;
            let length = search.dot(&rest, &rest);
            if length.lower <= dashu_int::IBig::ZERO {
                return None;
            }
            search.basis.push(rest);
            search.lengths.push(length);
        }
        Some(search)
    }

    fn dot(&self, x: &[Real], y: &[Real]) -> Real {
        let mut sum = zero();
        for (a, b) in x.iter().zip(y) {
            sum = self.precision.add(&sum, &self.precision.mul(a, b));
        }
        sum
    }

    /// x less its projection onto the space.
    fn rest(&self, x: &[Real]) -> Option<Vec<Real>> {
        let p = self.precision;
        let mut rest = x.to_vec();
        for (g, length) in self.basis.iter().zip(&self.lengths) {
            let along = p.div(&self.dot(x, g), length)?;
            for (r, g) in rest.iter_mut().zip(g) {
                *r = p.sub(r, &p.mul(&along, g));
            }
        }
        Some(rest)
    }

    fn run(&self) -> Meeting {
        let p = self.precision;
        let Some(widest) = self.half.iter().max().filter(|h| **h > RBig::ZERO) else {
            return Meeting::Unclear;
        };
        let centre: Vec<Real> = self.centre.iter().map(|c| p.of(c)).collect();
        let Some(rest) = self.rest(&centre) else {
            return Meeting::Unclear;
        };
        // The box, moved to the projection of its centre and measured in the
        // widest half-width, is small enough for doubles.
        let offset: Vec<f64> = rest
            .iter()
            .map(|r| (middle(r) / widest).to_f64().value())
            .collect();
        let half: Vec<f64> = self
            .half
            .iter()
            .map(|h| (h / widest).to_f64().value())
            .collect();
        let directions = self.directions();
        // Aiming at a smaller box first leaves room for the verification; the
        // full box gives the separating plane.
        for aim in [0.9, 0.999, 1.0] {
            let (inside, gap) = search(&directions, &offset, &half, aim);
            let candidate = self.candidate(&centre, &rest, &directions, &inside, widest);
            let within = candidate.iter().zip(self.centre.iter().zip(self.half));
            if within
                .into_iter()
                .all(|(y, (c, h))| y.lower_ratio() >= c - h && y.upper_ratio() <= c + h)
            {
                return Meeting::Yes;
            }
            if let Some(meeting) = self.separated(&gap) {
                return meeting;
            }
        }
        Meeting::Unclear
    }

    /// The basis as unit vectors in doubles.
    fn directions(&self) -> Vec<Vec<f64>> {
        self.basis
            .iter()
            .map(|g| {
                // Scaled by the largest component first: squares stay in range.
                let largest = g
                    .iter()
                    .map(|x| size(&middle(x)))
                    .max()
                    .unwrap_or(RBig::ONE);
                let scaled: Vec<f64> = g
                    .iter()
                    .map(|x| (middle(x) / &largest).to_f64().value())
                    .collect();
                let norm = scaled.iter().fold(0.0, |sum: f64, x| sum + x * x).sqrt();
                scaled.iter().map(|x| x / norm).collect()
            })
            .collect()
    }

    /// The vector of the space that lies where the search ended.
    fn candidate(
        &self,
        centre: &[Real],
        rest: &[Real],
        directions: &[Vec<f64>],
        inside: &[f64],
        widest: &RBig,
    ) -> Vec<Real> {
        let p = self.precision;
        let mut y: Vec<Real> = centre.iter().zip(rest).map(|(c, r)| p.sub(c, r)).collect();
        for (g, direction) in self.basis.iter().zip(directions) {
            let along = direction
                .iter()
                .zip(inside)
                .fold(0.0, |sum, (d, z)| sum + d * z);
            // Any multiple of g is in the space; this one is the search's.
            let (Some(place), Ok(along)) = (largest_place(direction), RBig::try_from(along)) else {
                continue;
            };
            let pivot = middle(&g[place]);
            let unit = RBig::try_from(direction[place]).unwrap_or(RBig::ZERO);
            if pivot.is_zero() {
                continue;
            }
            let factor = p.of(&(along * widest * unit / pivot));
            for (y, g) in y.iter_mut().zip(g) {
                *y = p.add(y, &p.mul(&factor, g));
            }
        }
        y
    }

    /// Verifies the separating plane with normal near `gap`.
    fn separated(&self, gap: &[f64]) -> Option<Meeting> {
        let p = self.precision;
        let normal: Option<Vec<Real>> = gap
            .iter()
            .map(|w| RBig::try_from(*w).ok().map(|w| p.of(&w)))
            .collect();
        let normal = self.rest(&normal?)?;
        let mut least = zero();
        let mut weight = zero();
        for (w, (c, h)) in normal.iter().zip(self.centre.iter().zip(self.half)) {
            let size = magnitude(w);
            least = p.add(&least, &p.mul(w, &p.of(c)));
            least = p.sub(&least, &p.mul(&size, &p.of(h)));
            weight = p.add(&weight, &size);
        }
        if least.lower <= dashu_int::IBig::ZERO {
            return None;
        }
        // Widening every side by t lowers the least value by t·Σ|wᵢ|.
        let short = p.div(&least, &weight)?.lower_ratio();
        Some(Meeting::No(short))
    }
}

/// Interval of |x|.
pub(super) fn magnitude(x: &Real) -> Real {
    if x.holds_zero() {
        let mut whole = x.clone();
        let low = super::interval::neg(x);
        whole.upper = whole.upper.max(low.upper);
        whole.lower = dashu_int::IBig::ZERO;
        return whole;
    }
    if x.is_negative() {
        super::interval::neg(x)
    } else {
        x.clone()
    }
}

fn largest_place(x: &[f64]) -> Option<usize> {
    let mut best: Option<usize> = None;
    for (place, value) in x.iter().enumerate() {
        if best.is_none_or(|b| value.abs() > x[b].abs()) {
            best = Some(place);
        }
    }
    best
}

/// Looks for a point of the space in the box shrunk by `aim`; returns the best
/// point of the space and a direction from the space to the box.
fn search(directions: &[Vec<f64>], offset: &[f64], half: &[f64], aim: f64) -> (Vec<f64>, Vec<f64>) {
    if offset.iter().chain(half).any(|x| !x.is_finite()) {
        return (vec![0.0; offset.len()], vec![0.0; offset.len()]);
    }
    match directions {
        [direction] => on_line(direction, offset, half, aim),
        _ => in_turn(directions, offset, half, aim),
    }
}

/// The search on a line, where each side of the box bounds the multiple.
fn on_line(direction: &[f64], offset: &[f64], half: &[f64], aim: f64) -> (Vec<f64>, Vec<f64>) {
    let mut low: (f64, Option<usize>) = (f64::NEG_INFINITY, None);
    let mut high: (f64, Option<usize>) = (f64::INFINITY, None);
    let mut gap = vec![0.0; offset.len()];
    for (place, &d) in direction.iter().enumerate() {
        let (o, h) = (offset[place], aim * half[place]);
        if d == 0.0 {
            if o.abs() > h {
                gap[place] = o.signum();
                return (vec![0.0; offset.len()], gap);
            }
            continue;
        }
        let (one, other) = ((o - h) / d, (o + h) / d);
        if one.min(other) > low.0 {
            low = (one.min(other), Some(place));
        }
        if one.max(other) < high.0 {
            high = (one.max(other), Some(place));
        }
    }
    let (Some(least), Some(most)) = (low.1, high.1) else {
        return (vec![0.0; offset.len()], gap);
    };
    if low.0 > high.0 {
        // Scaled so that neither part overflows; the plane does not mind.
        let scale = direction[least].abs().min(direction[most].abs());
        gap[least] += scale / direction[least];
        gap[most] -= scale / direction[most];
    }
    let along = low.0 + (high.0 - low.0) / 2.0;
    (direction.iter().map(|d| d * along).collect(), gap)
}

/// The search by projecting in turn onto the space and onto the box.
fn in_turn(
    directions: &[Vec<f64>],
    offset: &[f64],
    half: &[f64],
    aim: f64,
) -> (Vec<f64>, Vec<f64>) {
    let clamp = |z: &[f64]| -> Vec<f64> {
        z.iter()
            .zip(offset.iter().zip(half))
            .map(|(z, (o, h))| z.clamp(o - aim * h, o + aim * h))
            .collect()
    };
    let project = |y: &[f64]| -> Vec<f64> {
        let mut z = vec![0.0; y.len()];
        for direction in directions {
            let along = direction.iter().zip(y).fold(0.0, |sum, (d, y)| sum + d * y);
            for (z, d) in z.iter_mut().zip(direction) {
                *z += along * d;
            }
        }
        z
    };
    let mut z = vec![0.0; offset.len()];
    for _ in 0..ROUNDS {
        let y = clamp(&z);
        let moved = project(&y);
        let step = moved
            .iter()
            .zip(&z)
            .fold(0.0, |m: f64, (a, b)| m.max((a - b).abs()));
        z = moved;
        let outside = z
            .iter()
            .zip(offset.iter().zip(half))
            .any(|(z, (o, h))| (z - o).abs() > (0.5 + aim / 2.0) * h);
        if !outside || step < 1e-15 {
            break;
        }
    }
    let gap = clamp(&z).iter().zip(&z).map(|(y, z)| y - z).collect();
    (z, gap)
}

/// The multiple of `vector` that comes nearest to the stated figures, as text:
/// what should have been stated.
pub(super) fn nearest_multiple(
    vector: &[Complex],
    figures: &[Figure],
    precision: Precision,
) -> Option<Vec<Complex>> {
    let p = precision;
    let mut overlap = Complex::zero();
    let mut length = zero();
    for (x, figure) in vector.iter().zip(figures) {
        let stated = Complex {
            re: p.of(&figure.re.stated),
            im: p.of(&figure.im.stated),
        };
        overlap = p.cadd(&overlap, &p.cmul(&x.conj(), &stated));
        length = p.add(&length, &p.norm_squared(x));
    }
    let inverse = length.reciprocal(p.0)?;
    let factor = p.scale(&overlap, &inverse);
    if approx(&factor.re) == 0.0 && approx(&factor.im) == 0.0 {
        return None;
    }
    Some(vector.iter().map(|x| p.cmul(x, &factor)).collect())
}
