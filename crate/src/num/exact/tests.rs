//! Tests of exact numbers. Containment and equality are tested, never
//! closeness.

use super::{ArithmeticError, ExactReal};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use proptest::prelude::*;

fn decimal(digits: i64, exponent: i16) -> ExactReal {
    ExactReal::Decimal { digits, exponent }
}

fn ratio(top: i64, bottom: u64) -> ExactReal {
    ExactReal::from(RBig::from_parts(IBig::from(top), UBig::from(bottom)))
}

fn root(n: i64) -> ExactReal {
    ExactReal::from(n).sqrt().unwrap()
}

fn exact(x: f64) -> RBig {
    ExactReal::Binary(x).rational().unwrap()
}

/// |y − x| for the double y, as a ratio.
fn distance(y: f64, x: &RBig) -> RBig {
    let d = exact(y) - x;
    if d < RBig::ZERO {
        -d
    } else {
        d
    }
}

#[test]
fn a_cell_stays_within_two_words() {
    assert_eq!(std::mem::size_of::<ExactReal>(), 16);
}

#[test]
fn sums_of_surds_are_recognised_as_rational() {
    let two = root(2).mul(&root(2)).unwrap();
    assert_eq!(two.rational(), Some(RBig::from(2)), "{two}");
    let same = root(8).sub(&root(2).add(&root(2)).unwrap()).unwrap();
    assert!(same.is_zero(), "sqrt(8) - 2 sqrt(2) = {same}");
    let third = ratio(1, 9).sqrt().unwrap();
    assert_eq!(third.equals(&ratio(1, 3)), Some(true));
    // 1000003 and 1000033 are primes beyond the squares taken out by hand.
    let a = root(1_000_003 * 1_000_003 * 2);
    let b = root(2).mul(&ExactReal::from(1_000_003)).unwrap();
    assert_eq!(a.equals(&b), Some(true), "{a} against {b}");
    assert_eq!(root(1_000_003).equals(&root(1_000_033)), Some(false));
}

#[test]
fn conjugates_clear_a_denominator() {
    let x = ExactReal::ONE.add(&root(2)).unwrap();
    let inverse = ExactReal::ONE.div(&x).unwrap();
    let expected = root(2).sub(&ExactReal::ONE).unwrap();
    assert_eq!(inverse.equals(&expected), Some(true), "1/({x}) = {inverse}");
    let pi_over_pi = ExactReal::pi().div(&ExactReal::pi()).unwrap();
    assert_eq!(pi_over_pi.equals(&ExactReal::ONE), Some(true));
}

#[test]
fn nested_roots_cancel_by_form() {
    let nested = ExactReal::ONE.add(&root(2)).unwrap().sqrt().unwrap();
    assert!(nested.sub(&nested).unwrap().is_zero());
    let square = nested.mul(&nested).unwrap();
    let expected = ExactReal::ONE.add(&root(2)).unwrap();
    assert_eq!(square.equals(&expected), Some(true), "{square}");
    assert_eq!(nested.neg().neg().equals(&nested), Some(true));
    assert!(nested.neg().is_negative());
}

#[test]
fn long_chains_do_not_nest_in_print() {
    let mut sum = ExactReal::ZERO;
    for n in 2..90 {
        let term = ExactReal::ONE.add(&root(n)).unwrap().sqrt().unwrap();
        sum = sum.add(&term).unwrap();
    }
    let text = sum.to_string();
    let deepest = text.chars().fold((0i32, 0i32), |(depth, most), c| {
        let depth = depth + i32::from(c == '(') - i32::from(c == ')');
        (depth, most.max(depth))
    });
    assert!(deepest.1 < 6, "{text}");
}

#[test]
fn a_negative_zero_is_zero() {
    assert_eq!(ExactReal::Binary(-0.0).nearest(0).to_bits(), 0);
    assert_eq!(ExactReal::Binary(-0.0).expansion(0).hi.to_bits(), 0);
}

#[test]
fn a_denested_root_in_disguise_is_undecided_not_endless() {
    // sqrt(3 + 2 sqrt 2) = 1 + sqrt 2, which no rule here sees.
    let disguised = ExactReal::from(3).add(&root(8)).unwrap().sqrt().unwrap();
    let plain = ExactReal::ONE.add(&root(2)).unwrap();
    assert_eq!(disguised.equals(&plain), None);
    assert!(matches!(
        disguised.sub(&plain),
        Err(ArithmeticError::Undecided)
    ));
}

#[test]
fn refusals_of_arithmetic() {
    assert_eq!(
        ExactReal::from(-1).sqrt().err(),
        Some(ArithmeticError::NegativeRoot)
    );
    assert_eq!(
        ExactReal::ONE.div(&ExactReal::ZERO).err(),
        Some(ArithmeticError::DivisionByZero)
    );
    assert_eq!(
        ExactReal::ZERO.pow(-1).err(),
        Some(ArithmeticError::DivisionByZero)
    );
    assert_eq!(
        decimal(1, 9999).pow(9999).err(),
        Some(ArithmeticError::TooLarge)
    );
    assert_eq!(ExactReal::ZERO.pow(0).unwrap().rational(), Some(RBig::ONE));
}

#[test]
fn pi_is_enclosed_by_its_published_digits() {
    // The first 50 decimals of π, from memory.
    let digits: IBig = "314159265358979323846264338327950288419716939937510"
        .parse()
        .unwrap();
    let power = UBig::from(10u8).pow(50);
    let low = RBig::from_parts(digits.clone(), power.clone());
    let high = RBig::from_parts(digits + IBig::ONE, power);
    for bits in [10, 53, 120, 160, 700] {
        let around = ExactReal::pi().enclose(bits);
        assert!(
            around.lower_ratio() < high && around.upper_ratio() > low,
            "{bits}: {around:?}"
        );
        assert!(around.is_narrow(bits), "{bits}: {around:?}");
    }
    let fine = ExactReal::pi().enclose(200);
    assert!(
        fine.lower_ratio() > low && fine.upper_ratio() < high,
        "{fine:?}"
    );
}

#[test]
fn a_root_is_enclosed_by_squaring() {
    for n in [2i64, 3, 5, 7, 10, 12_345_678_901] {
        for bits in [20, 64, 333] {
            let around = root(n).enclose(bits);
            let (low, high) = (around.lower_ratio(), around.upper_ratio());
            let n = RBig::from(n);
            assert!(
                &low * &low <= n && &high * &high >= n,
                "sqrt({n}) at {bits}: {around:?}"
            );
            assert!(around.is_narrow(bits), "sqrt({n}) at {bits}: {around:?}");
        }
    }
}

/// Hard cases of decimal to binary conversion. The long ones are stress cases
/// of the kind in Paxson 1991, "A program for testing IEEE decimal-binary
/// conversion", and Clinger 1990; digits from memory. The expected double is
/// not looked up: it is checked to be the nearest, and even on a tie.
#[test]
fn hard_decimal_conversions_round_to_nearest_even() {
    let cases = [
        (9_007_199_254_740_993, 0),
        (9_007_199_254_740_995, 0),
        (5, 125),
        (69, 267),
        (999, -26),
        (7861, -34),
        (75_569, -254),
        (928_609, -261),
        (9_210_917, 80),
        (84_863_171, 114),
        (653_777_767, 273),
        (5_232_604_057, -298),
        (27_235_667_517, -109),
        (653_532_977_297, -123),
        (3_142_213_164_987, -294),
        (46_202_199_371_337, -72),
        (231_010_996_856_685, -73),
        (9_324_754_620_109_615, 212),
        (78_459_735_791_271_921, 49),
        (272_104_041_512_242_479, 200),
        (6_802_601_037_806_061_975, 198),
        (17_976_931_348_623_157, 292),
        (22_250_738_585_072_011, -324),
        (22_250_738_585_072_014, -324),
        (49_406_564_584_124_654, -340),
        (24_703_282_292_062_327, -340),
        (24_703_282_292_062_328, -340),
    ];
    for (digits, exponent) in cases {
        let x = decimal(digits, exponent);
        assert_nearest(&x, x.nearest(0));
        let negative = x.neg();
        assert_nearest(&negative, negative.nearest(0));
        let text = format!("{digits}e{exponent}");
        assert_eq!(
            x.nearest(0).to_bits(),
            text.parse::<f64>().unwrap().to_bits(),
            "{text}"
        );
    }
    assert_eq!(
        decimal(9_007_199_254_740_993, 0).nearest(0),
        9_007_199_254_740_992.0
    );
    assert_eq!(
        decimal(9_007_199_254_740_995, 0).nearest(0),
        9_007_199_254_740_996.0
    );
    assert_eq!(decimal(24_703_282_292_062_327, -340).nearest(0), 0.0);
    assert_eq!(
        decimal(24_703_282_292_062_328, -340).nearest(0),
        f64::from_bits(1)
    );
}

/// Whether y is a nearest double to x, and the even one of two.
fn assert_nearest(x: &ExactReal, y: f64) {
    let r = x.rational().unwrap();
    let here = distance(y, &r);
    for neighbour in [y.next_up(), y.next_down()] {
        if !neighbour.is_finite() {
            continue;
        }
        let there = distance(neighbour, &r);
        assert!(here <= there, "{x}: {y:e} is farther than {neighbour:e}");
        if here == there {
            assert_eq!(y.to_bits() % 2, 0, "{x}: tie rounded to the odd {y:e}");
        }
    }
}

#[test]
fn exact_midpoints_go_to_even_at_every_scale() {
    // (2^53 + 1)·2^k lies halfway between two doubles while normal; with the
    // subnormals the spacing changes but the rule does not.
    for k in [-1126, -1120, -1074, -1022, -53, 0, 1, 900, 970] {
        for m in [(1i64 << 53) + 1, (1 << 53) + 3, 3, 5, 7] {
            let two = UBig::ONE << i32::abs(k) as usize;
            let x = if k >= 0 {
                RBig::from(IBig::from(m) * IBig::from(two))
            } else {
                RBig::from_parts(IBig::from(m), two)
            };
            assert_nearest(&ExactReal::from(x.clone()), ExactReal::from(x).nearest(0));
        }
    }
}

#[test]
fn scaling_is_by_exact_powers_of_two() {
    let x = decimal(1, -300);
    let y = x.nearest(-1000);
    assert_nearest(&x.mul(&ExactReal::from(2).pow(1000).unwrap()).unwrap(), y);
    assert_eq!(decimal(1, 300).nearest(-600), f64::INFINITY);
    assert_eq!(decimal(1, 400).nearest(0), f64::INFINITY);
    assert_eq!(ExactReal::Binary(f64::from_bits(1)).nearest(-1074), 1.0);
}

/// |y − hi − lo| ≤ bound, and the bound is no larger than promised.
fn assert_expansion(x: &ExactReal, scale: i32) {
    let e = x.expansion(scale);
    let factor = ExactReal::from(2).pow(-scale).unwrap();
    let y = x.mul(&factor).unwrap();
    let around = y.enclose(400);
    let sum = exact(e.hi) + exact(e.lo);
    let far = |end: RBig| {
        let d = end - &sum;
        if d < RBig::ZERO {
            -d
        } else {
            d
        }
    };
    let (low, high) = (far(around.lower_ratio()), far(around.upper_ratio()));
    let bound = exact(e.bound);
    // The enclosure is 2^−400 wide, far below any bound that is not zero.
    assert!(low <= bound && high <= bound, "{x} · 2^{}: {e:?}", -scale);
    let size = y.abs().enclose(60).upper_ratio();
    let promised = size / RBig::from(UBig::ONE << 105) + exact(f64::from_bits(2));
    assert!(
        bound <= promised,
        "{x} · 2^{}: bound {:e} too large",
        -scale,
        e.bound
    );
    assert_eq!(e.hi.to_bits(), x.nearest(scale).to_bits(), "{x}");
}

#[test]
fn expansions_of_chosen_numbers_hold() {
    let nested = ExactReal::ONE.add(&root(2)).unwrap().sqrt().unwrap();
    let numbers = [
        decimal(1, -1),
        decimal(15, 24),
        decimal(123_456_789_012_345_678, -9),
        decimal(1, -22),
        decimal(3, 22),
        ratio(1, 3),
        ratio(-22, 7),
        root(2),
        ExactReal::pi(),
        nested,
        ExactReal::Binary(0.1),
        decimal(5, -324),
        decimal(17_976_931_348_623_157, 292),
    ];
    for x in &numbers {
        for scale in [0i32, 3, -7] {
            assert_expansion(
                x,
                if x.nearest(0).abs() > 1e300 {
                    scale.abs()
                } else {
                    scale
                },
            );
        }
    }
    assert_eq!(decimal(5, -1).expansion(0).bound, 0.0);
    assert_eq!(ExactReal::Binary(0.1).expansion(0).bound, 0.0);
    assert_eq!(decimal(15, 24).expansion(0).bound, 0.0);
    assert!(ratio(1, 3).expansion(0).bound > 0.0);
    // Two words hold these exactly.
    for x in [
        decimal(90_071_992_547_409_935, -1),
        decimal(i64::MAX, 0),
        decimal(i64::MIN + 1, 2),
    ] {
        let e = x.expansion(0);
        assert!(e.bound == 0.0 && e.lo != 0.0, "{x}: {e:?}");
    }
}

#[test]
fn a_mean_is_exact() {
    let mean = decimal(1, -1).add(&decimal(2, -1)).unwrap().half().unwrap();
    assert_eq!(mean.equals(&ratio(3, 20)), Some(true), "{mean}");
    assert_eq!(
        decimal(3, 0).half().unwrap().equals(&ratio(3, 2)),
        Some(true)
    );
}

fn any_number() -> impl Strategy<Value = ExactReal> {
    prop_oneof![
        (any::<i64>(), -340i16..300).prop_map(|(d, e)| decimal(d, e)),
        (any::<i64>(), -28i16..29).prop_map(|(d, e)| decimal(d, e)),
        (-(1i64 << 55)..1 << 55, -28i16..29).prop_map(|(d, e)| decimal(d, e)),
        (-100_000i64..100_000, -12i16..12).prop_map(|(d, e)| decimal(d, e)),
        (any::<i64>(), 1..u64::MAX).prop_map(|(p, q)| ratio(p, q)),
        any::<f64>()
            .prop_filter("finite", |x| x.is_finite())
            .prop_map(ExactReal::Binary),
    ]
}

proptest! {
    #[test]
    fn nearest_is_nearest(x in any_number()) {
        let y = x.nearest(0);
        if y.is_finite() {
            assert_nearest(&x, y);
        }
    }

    #[test]
    fn expansions_hold(x in any_number(), scale in -60i32..60) {
        if x.nearest(0).abs() < 1e280 {
            assert_expansion(&x, scale);
        }
    }

    #[test]
    fn arithmetic_agrees_with_ratios(x in any_number(), y in any_number()) {
        let (p, q) = (x.rational().unwrap(), y.rational().unwrap());
        prop_assert_eq!(x.add(&y).unwrap().rational().unwrap(), &p + &q);
        prop_assert_eq!(x.sub(&y).unwrap().rational().unwrap(), &p - &q);
        prop_assert_eq!(x.mul(&y).unwrap().rational().unwrap(), &p * &q);
        prop_assert_eq!(x.half().unwrap().rational().unwrap(), &p / RBig::from(2));
        prop_assert_eq!(x.is_negative(), p < RBig::ZERO);
        if !q.is_zero() {
            prop_assert_eq!(x.div(&y).unwrap().rational().unwrap(), p / q);
        }
    }

    #[test]
    fn surds_obey_the_ring_laws(a in 1i64..60, b in 1i64..60, c in -9i64..9, d in -9i64..9) {
        let x = root(a).mul(&ExactReal::from(c)).unwrap().add(&ExactReal::from(d)).unwrap();
        let y = root(b).add(&root(a)).unwrap();
        let left = x.add(&y).unwrap().mul(&x).unwrap();
        let right = x.mul(&x).unwrap().add(&y.mul(&x).unwrap()).unwrap();
        prop_assert_eq!(left.equals(&right), Some(true), "{} and {}", x, y);
        prop_assert_eq!(y.div(&y).unwrap().equals(&ExactReal::ONE), Some(true), "{}", y);
    }
}
