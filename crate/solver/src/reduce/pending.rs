//! The two pairs of vectors a reduction works with: the pending one, whose
//! rank-two update is still to be carried out, and the one being formed.

use super::pass::{Planes, Split};

/// Both pairs in one allocation, which small problems notice.
///
/// Each pair is (v, w), each vector its real plane and, for a complex matrix,
/// its imaginary plane, padded to the stride with zeros. When nothing is
/// pending, the present pair is zero.
#[derive(Clone, Debug)]
pub(super) struct Pending {
    numbers: Vec<f64>,
    complex: bool,
    present: Half,
    any: bool,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Half {
    First,
    Second,
}

impl Pending {
    pub fn none(stride: usize, complex: bool) -> Self {
        let planes = if complex { 2 } else { 1 };
        Self {
            numbers: vec![0.0; 4 * planes * stride],
            complex,
            present: Half::First,
            any: false,
        }
    }

    /// A pair stored before; see [`Self::stored`].
    pub fn restore(&mut self, stored: &[f64]) {
        if !stored.is_empty() {
            self.numbers[..stored.len()].copy_from_slice(stored);
            (self.present, self.any) = (Half::First, true);
        }
    }

    /// The pending pair's numbers; empty when nothing is pending.
    pub fn stored(&self) -> &[f64] {
        if self.any {
            self.present()
        } else {
            &[]
        }
    }

    /// Whether an update is pending.
    pub fn any(&self) -> bool {
        self.any
    }

    fn present(&self) -> &[f64] {
        let (first, second) = self.numbers.split_at(self.numbers.len() / 2);
        match self.present {
            Half::First => first,
            Half::Second => second,
        }
    }

    /// v and w.
    #[inline(always)]
    pub fn pair(&self) -> (Split<'_>, Split<'_>) {
        read(self.present(), self.complex)
    }

    /// v and w, and room for the pair after them.
    #[inline(always)]
    pub fn pair_and_next(&mut self) -> ((Split<'_>, Split<'_>), (Planes<'_>, Planes<'_>)) {
        let half = self.numbers.len() / 2;
        let (first, second) = self.numbers.split_at_mut(half);
        let (present, next) = match self.present {
            Half::First => (first, second),
            Half::Second => (second, first),
        };
        let (x, y) = next.split_at_mut(half / 2);
        let next = (planes_mut(x, self.complex), planes_mut(y, self.complex));
        (read(present, self.complex), next)
    }

    /// The next pair becomes the pending one.
    pub fn advance(&mut self) {
        self.present = match self.present {
            Half::First => Half::Second,
            Half::Second => Half::First,
        };
        self.any = true;
    }

    /// Nothing is pending any more.
    pub fn clear(&mut self) {
        let half = self.numbers.len() / 2;
        let range = match self.present {
            Half::First => 0..half,
            Half::Second => half..2 * half,
        };
        self.numbers[range].fill(0.0);
        self.any = false;
    }
}

#[inline(always)]
fn read(pair: &[f64], complex: bool) -> (Split<'_>, Split<'_>) {
    let (v, w) = pair.split_at(pair.len() / 2);
    (planes(v, complex), planes(w, complex))
}

#[inline(always)]
fn planes(vector: &[f64], complex: bool) -> Split<'_> {
    let (re, im) = vector.split_at(plane_length(vector.len(), complex));
    Split { re, im }
}

#[inline(always)]
fn planes_mut(vector: &mut [f64], complex: bool) -> Planes<'_> {
    let (re, im) = vector.split_at_mut(plane_length(vector.len(), complex));
    Planes { re, im }
}

#[inline(always)]
fn plane_length(vector: usize, complex: bool) -> usize {
    if complex {
        vector / 2
    } else {
        vector
    }
}
