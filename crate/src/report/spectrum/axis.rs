//! The axis under the spectrum: its ticks and their labels.

use dashu_int::IBig;
use dashu_ratio::RBig;

use super::window::Window;
use super::Tick;
use crate::report::decimal;

/// The marks of the axis under a window.
pub(super) struct Axis {
    /// What all labels begin with; empty when each is whole.
    pub prefix: String,
    /// The ticks, their labels without the prefix.
    pub ticks: Vec<Tick>,
    /// What the labels are distances from; empty when they are places.
    pub origin: String,
    /// Distance between two of them.
    pub step: String,
}

impl Axis {
    /// Ticks at multiples of 1, 2 or 5 times a power of ten: at least four
    /// of them, at most ten.
    pub fn of(window: &Window) -> Self {
        let (left, right) = (window.edge(-1), window.edge(1));
        let fifth = (&right - &left) / RBig::from(5);
        let place = decimal::leading_place(&fifth).unwrap_or(0);
        let ten = decimal::ten_to(place);
        let mantissa = [5u8, 2, 1]
            .into_iter()
            .find(|m| &ten * RBig::from(*m) <= fifth)
            .unwrap_or(1);
        let step = ten * RBig::from(mantissa);
        let mut count = (&left / &step).ceil();
        let last = (&right / &step).floor();
        let mut ticks = Vec::new();
        let mut multiples = Vec::new();
        while count <= last {
            let n = &count * IBig::from(mantissa);
            let at = window.position(&(RBig::from(count.clone()) * &step));
            ticks.push(Tick {
                at,
                label: label(&n, place),
            });
            multiples.push(n);
            count += IBig::ONE;
        }
        let prefix = shared_beginning(&ticks);
        for tick in &mut ticks {
            tick.label.drain(..prefix.len());
        }
        let origin = if prefix.is_empty() {
            from_roundest(&mut ticks, &multiples, place)
        } else {
            String::new()
        };
        Self {
            prefix,
            ticks,
            origin,
            step: label(&IBig::from(mantissa), place),
        }
    }
}

/// Labels longer than this are told as distances from one of them.
const LONGEST_LABEL: usize = 14;

/// Where the labels are long and have no beginning in common (39.2999…, 39.3,
/// 39.3000…): makes them distances from the roundest one, which it returns.
fn from_roundest(ticks: &mut [Tick], multiples: &[IBig], place: i32) -> String {
    let long = |tick: &Tick| tick.label.chars().count() > LONGEST_LABEL;
    let roundest = multiples.iter().max_by_key(|n| zeros(n));
    let Some(origin) = roundest.filter(|_| ticks.iter().any(long)) else {
        return String::new();
    };
    for (tick, n) in ticks.iter_mut().zip(multiples) {
        let distance = n - origin;
        tick.label = if distance.is_zero() {
            "0".to_owned()
        } else {
            let sign = if distance > IBig::ZERO { "+" } else { "" };
            format!("{sign}{}", label(&distance, place))
        };
    }
    let known = zeros(origin).min(place.min(0).unsigned_abs());
    let shortened = origin / IBig::from(10u8).pow(known as usize);
    label(&shortened, place + known as i32)
}

/// Zeros at the end of the decimal digits of n.
fn zeros(n: &IBig) -> u32 {
    let digits = n.to_string();
    (digits.len() - digits.trim_end_matches('0').len()) as u32
}

/// n·10^place; the zeros of a whole number are known, so they may be written.
fn label(n: &IBig, place: i32) -> String {
    let text = match u32::try_from(place) {
        Ok(zeros @ 1..=6) => decimal::written(&(n * IBig::from(10u32.pow(zeros))), 0),
        _ => decimal::written(n, place),
    };
    decimal::typeset(&text)
}

/// What all labels begin with, if that is long enough to be worth taking out;
/// at least three characters are left to each.
fn shared_beginning(ticks: &[Tick]) -> String {
    let Some(first) = ticks.first() else {
        return String::new();
    };
    // Labels with a power of ten have their tail in common, not their head.
    if ticks.iter().any(|tick| tick.label.contains('e')) {
        return String::new();
    }
    let shared = ticks
        .iter()
        .map(|tick| {
            tick.label
                .bytes()
                .zip(first.label.bytes())
                .take_while(|(a, b)| a == b)
                .count()
        })
        .min()
        .unwrap_or(0);
    let shortest = ticks.iter().map(|tick| tick.label.len()).min().unwrap_or(0);
    let cut = shared.min(shortest.saturating_sub(3));
    if cut < 6 {
        return String::new();
    }
    first.label[..cut].to_owned()
}
