//! Two doubles side by side: one SIMD register in wasm, a pair elsewhere.
//!
//! Each lane is one IEEE 754 operation, never fused, so that a kernel written
//! in lanes gives the same bits natively and in every browser engine.

use std::ops::{Add, Mul, Sub};

#[cfg(all(target_arch = "wasm32", target_feature = "simd128"))]
mod register {
    use core::arch::wasm32::{
        f64x2_abs, f64x2_add, f64x2_div, f64x2_extract_lane, f64x2_lt, f64x2_mul, f64x2_splat,
        f64x2_sub, v128, v128_bitselect, v128_load, v128_store,
    };

    pub type Register = v128;

    #[inline(always)]
    pub fn splat(x: f64) -> Register {
        f64x2_splat(x)
    }
    #[inline(always)]
    pub fn load(pair: &[f64; 2]) -> Register {
        // SAFETY: the reference spans 16 readable bytes; v128 loads need no alignment.
        unsafe { v128_load(pair.as_ptr().cast()) }
    }
    #[inline(always)]
    pub fn store(x: Register, pair: &mut [f64; 2]) {
        // SAFETY: the reference spans 16 writable bytes; v128 stores need no alignment.
        unsafe { v128_store(pair.as_mut_ptr().cast(), x) }
    }
    #[inline(always)]
    pub fn lanes(x: Register) -> [f64; 2] {
        [f64x2_extract_lane::<0>(x), f64x2_extract_lane::<1>(x)]
    }
    #[inline(always)]
    pub fn add(x: Register, y: Register) -> Register {
        f64x2_add(x, y)
    }
    #[inline(always)]
    pub fn sub(x: Register, y: Register) -> Register {
        f64x2_sub(x, y)
    }
    #[inline(always)]
    pub fn mul(x: Register, y: Register) -> Register {
        f64x2_mul(x, y)
    }
    #[inline(always)]
    pub fn div(x: Register, y: Register) -> Register {
        f64x2_div(x, y)
    }
    #[inline(always)]
    pub fn abs(x: Register) -> Register {
        f64x2_abs(x)
    }
    #[inline(always)]
    pub fn choose(x: Register, y: Register, less: Register, otherwise: Register) -> Register {
        v128_bitselect(less, otherwise, f64x2_lt(x, y))
    }
}

#[cfg(not(all(target_arch = "wasm32", target_feature = "simd128")))]
mod register {
    pub type Register = [f64; 2];

    #[inline(always)]
    pub fn splat(x: f64) -> Register {
        [x, x]
    }
    #[inline(always)]
    pub fn load(pair: &[f64; 2]) -> Register {
        *pair
    }
    #[inline(always)]
    pub fn store(x: Register, pair: &mut [f64; 2]) {
        *pair = x;
    }
    #[inline(always)]
    pub fn lanes(x: Register) -> [f64; 2] {
        x
    }
    #[inline(always)]
    pub fn add(x: Register, y: Register) -> Register {
        [x[0] + y[0], x[1] + y[1]]
    }
    #[inline(always)]
    pub fn sub(x: Register, y: Register) -> Register {
        [x[0] - y[0], x[1] - y[1]]
    }
    #[inline(always)]
    pub fn mul(x: Register, y: Register) -> Register {
        [x[0] * y[0], x[1] * y[1]]
    }
    #[inline(always)]
    pub fn div(x: Register, y: Register) -> Register {
        [x[0] / y[0], x[1] / y[1]]
    }
    #[inline(always)]
    pub fn abs(x: Register) -> Register {
        [x[0].abs(), x[1].abs()]
    }
    #[inline(always)]
    pub fn choose(x: Register, y: Register, less: Register, otherwise: Register) -> Register {
        std::array::from_fn(|lane| {
            if x[lane] < y[lane] {
                less[lane]
            } else {
                otherwise[lane]
            }
        })
    }
}

/// Two doubles, operated on lane by lane.
#[derive(Clone, Copy)]
pub struct Lanes(register::Register);

impl Lanes {
    /// Both lanes `x`.
    #[inline(always)]
    pub fn splat(x: f64) -> Self {
        Self(register::splat(x))
    }

    /// The two doubles of `pair`.
    #[inline(always)]
    pub fn load(pair: &[f64; 2]) -> Self {
        Self(register::load(pair))
    }

    /// Writes the two lanes to `pair`.
    #[inline(always)]
    pub fn store(self, pair: &mut [f64; 2]) {
        register::store(self.0, pair);
    }

    /// The two lanes as an array.
    #[inline(always)]
    pub fn to_array(self) -> [f64; 2] {
        register::lanes(self.0)
    }

    /// First lane plus second lane.
    #[inline(always)]
    pub fn sum(self) -> f64 {
        let [first, second] = self.to_array();
        first + second
    }

    /// Lane-wise quotient.
    #[inline(always)]
    pub fn over(self, divisor: Self) -> Self {
        Self(register::div(self.0, divisor.0))
    }

    /// Lane-wise modulus.
    #[inline(always)]
    pub fn abs(self) -> Self {
        Self(register::abs(self.0))
    }

    /// Lane by lane: `less` where self < `bound`, `otherwise` elsewhere (also
    /// where either is not a number).
    #[inline(always)]
    pub fn where_below(self, bound: Self, less: Self, otherwise: Self) -> Self {
        Self(register::choose(self.0, bound.0, less.0, otherwise.0))
    }
}

impl Add for Lanes {
    type Output = Self;
    #[inline(always)]
    fn add(self, other: Self) -> Self {
        Self(register::add(self.0, other.0))
    }
}

impl Sub for Lanes {
    type Output = Self;
    #[inline(always)]
    fn sub(self, other: Self) -> Self {
        Self(register::sub(self.0, other.0))
    }
}

impl Mul for Lanes {
    type Output = Self;
    #[inline(always)]
    fn mul(self, other: Self) -> Self {
        Self(register::mul(self.0, other.0))
    }
}
