//! The part of the real line that is looked at, in integers.
//!
//! Notation: c·2^u the centre, h·2^u the half width, 2²⁰ ≤ h < 2²¹.

use dashu_base::{Abs, BitTest};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

use super::{Line, WindowMove};
use crate::report::decimal::{self, Rounding};

/// A part of the real line. Opaque to the page, which hands it back as it is.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Window {
    centre: IBig,
    half: u32,
    unit: i32,
}

const HALF_BITS: u32 = 20;
/// A deep proof's enclosure of 500 digits is about 2^−1700 wide; the ends of
/// the doubles' range, scaled, need some 2,100. Beyond this there is nothing.
const UNIT_RANGE: std::ops::RangeInclusive<i32> = -6000..=4200;

impl Window {
    /// From the text the page hands back; `None` if it is not one.
    pub fn parse(text: &str) -> Option<Self> {
        let mut parts = text.split(':');
        let centre: IBig = parts.next()?.parse().ok()?;
        let half: u32 = parts.next()?.parse().ok()?;
        let unit: i32 = parts.next()?.parse().ok()?;
        let sound = parts.next().is_none()
            && half >> HALF_BITS == 1
            && UNIT_RANGE.contains(&unit)
            && centre.bit_len() < 16_000;
        sound.then_some(Self { centre, half, unit })
    }

    /// The window as text.
    pub fn text(&self) -> String {
        format!("{}:{}:{}", self.centre, self.half, self.unit)
    }

    /// The least window of this form that reaches from `low` to `high`, with
    /// `margin` half widths to spare on either side.
    fn around(low: &RBig, high: &RBig, margin: f64) -> Self {
        let mut span = (high - low).abs();
        if span.is_zero() {
            // A single point: a window as wide as the point is far from zero.
            span = if low.is_zero() {
                RBig::ONE
            } else {
                low.clone().abs()
            };
        }
        let bits = span.numerator().bit_len() as i32 - span.denominator().bit_len() as i32;
        let unit = (bits - 1 - HALF_BITS as i32).clamp(*UNIT_RANGE.start(), *UNIT_RANGE.end());
        let half = to_f64(&(span / RBig::from(2) / power_of_two(unit))) * (1.0 + margin);
        let centre = ((low + high) / RBig::from(2) / power_of_two(unit)).round();
        Self {
            centre,
            half: 0,
            unit,
        }
        .with_half(half)
    }

    /// The same centre with a half width of `half` units, the unit adapted.
    fn with_half(mut self, half: f64) -> Self {
        let (low, high) = (
            f64::from(1u32 << HALF_BITS),
            f64::from(1u32 << (HALF_BITS + 1)),
        );
        let mut half = if half.is_finite() {
            half.max(1e-3)
        } else {
            high
        };
        while half >= high && self.unit < *UNIT_RANGE.end() {
            half /= 2.0;
            self.unit += 1;
            self.centre >>= 1;
        }
        while half < low && self.unit > *UNIT_RANGE.start() {
            half *= 2.0;
            self.unit -= 1;
            self.centre <<= 1;
        }
        self.half = half.clamp(low, high - 1.0) as u32;
        self
    }

    /// The window after a move.
    pub fn moved(self, by: &WindowMove, lines: &[Line]) -> Self {
        match by {
            WindowMove::Stay => self,
            WindowMove::All => Self::all(lines),
            WindowMove::Ranges => Self::ranges(lines),
            WindowMove::Lens { line } => match lines.get(*line as usize) {
                Some(line) => Self::lens(line, lines),
                None => self,
            },
            WindowMove::Eigenvalue { index } => {
                let holds = |line: &&Line| (line.first..=line.last).contains(&(index + 1));
                match lines.iter().find(holds) {
                    Some(line) => Self::lens(line, lines),
                    None => self,
                }
            }
            WindowMove::Pan { by } => {
                let step = by.clamp(-1e3, 1e3) * f64::from(self.half);
                Self {
                    centre: self.centre + IBig::from(step as i64),
                    ..self
                }
            }
            WindowMove::Zoom { factor, about } => {
                let factor = if factor.is_finite() {
                    factor.clamp(1e-3, 1e3)
                } else {
                    1.0
                };
                let about = about.clamp(-1.0, 1.0);
                let half = f64::from(self.half);
                let shift = about * (half - half * factor);
                let centre = self.centre + IBig::from(shift as i64);
                Self {
                    centre,
                    half: self.half,
                    unit: self.unit,
                }
                .with_half(half * factor)
            }
        }
    }

    /// The window over all lines.
    pub fn all(lines: &[Line]) -> Self {
        let lowest = lines.iter().map(|line| &line.approx).min();
        let highest = lines.iter().map(|line| &line.approx).max();
        match (lowest, highest) {
            (Some(low), Some(high)) => Self::around(low, high, 0.1),
            _ => Self::around(&RBig::ZERO, &RBig::ZERO, 0.0),
        }
    }

    /// The window over all ranges; over all lines where there are none.
    fn ranges(lines: &[Line]) -> Self {
        let ends = |line: &Line| {
            line.range
                .clone()
                .unwrap_or((line.approx.clone(), line.approx.clone()))
        };
        let lowest = lines.iter().map(|line| ends(line).0).min();
        let highest = lines.iter().map(|line| ends(line).1).max();
        match (lowest, highest) {
            (Some(low), Some(high)) => Self::around(&low, &high, 0.1),
            _ => Self::all(lines),
        }
    }

    /// A line's enclosure over half of the width; without a proof, the
    /// distance to its nearest neighbour.
    fn lens(line: &Line, lines: &[Line]) -> Self {
        if let Some((low, high)) = &line.enclosure {
            if low < high {
                return Self::around(low, high, 1.0);
            }
        }
        let gap = lines
            .iter()
            .map(|other| (&other.approx - &line.approx).abs())
            .filter(|gap| !gap.is_zero())
            .min();
        match gap {
            Some(gap) => Self::around(&(&line.approx - &gap), &(&line.approx + &gap), 0.2),
            None => Self::around(&line.approx, &line.approx, 0.1),
        }
    }

    /// Width of the window, in two digits.
    pub(super) fn width(&self) -> String {
        let width = RBig::from(2 * u64::from(self.half)) * power_of_two(self.unit);
        decimal::significant(&width, 2, Rounding::Nearest)
    }

    /// Position of x: −1 at the left edge, 1 at the right, cut off at ±2.
    pub(super) fn position(&self, x: &RBig) -> f64 {
        let units = x / power_of_two(self.unit) - RBig::from(self.centre.clone());
        let reach = RBig::from(2 * u64::from(self.half));
        if units >= reach {
            return 2.0;
        }
        if units <= -reach {
            return -2.0;
        }
        to_f64(&units) / f64::from(self.half)
    }

    pub(super) fn edge(&self, side: i8) -> RBig {
        let units = &self.centre + IBig::from(i64::from(side) * i64::from(self.half));
        RBig::from(units) * power_of_two(self.unit)
    }
}

fn power_of_two(power: i32) -> RBig {
    let magnitude = RBig::from(UBig::ONE << (power.unsigned_abs() as usize));
    if power >= 0 {
        magnitude
    } else {
        RBig::ONE / magnitude
    }
}

fn to_f64(x: &RBig) -> f64 {
    x.to_f64().value()
}
