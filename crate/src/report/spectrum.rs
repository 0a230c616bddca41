//! The spectrum on a line, seen through a window of any width.
//!
//! An enclosure of 28 or 500 digits is far narrower than doubles can place.
//! So the window is kept in integers here, and the page is handed positions
//! from −1 (left edge) to 1 (right edge) together with the marks of the axis
//! as text.
//!
//! Notation: c·2^u the centre, h·2^u the half width, 2²⁰ ≤ h < 2²¹.

use dashu_base::{Abs, BitTest};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;
use serde::{Deserialize, Serialize};

use super::decimal::{self, Rounding};

/// What stands on the line: one eigenvalue, or several that are not proven
/// apart.
#[derive(Clone, Debug)]
pub struct Line {
    /// Index of the first eigenvalue it stands for, from 1.
    pub first: u32,
    /// Index of the last.
    pub last: u32,
    /// Where it is drawn: an approximation.
    pub approx: RBig,
    /// Proven lower and upper ends, where there is a proof.
    pub enclosure: Option<(RBig, RBig)>,
    /// The figure as printed elsewhere on the page.
    pub figure: String,
}

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

/// How the page asks for another window.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(tag = "move", rename_all = "camelCase")]
pub enum WindowMove {
    /// The whole spectrum.
    All,
    /// So close to one line of the spectrum that its enclosure has a width.
    Lens {
        /// Place in the list of lines, from 0.
        line: u32,
    },
    /// To the side.
    Pan {
        /// In half widths; positive moves the window to larger values.
        by: f64,
    },
    /// In or out.
    Zoom {
        /// New width over old.
        factor: f64,
        /// The position that stays where it is, −1 to 1.
        about: f64,
    },
    /// As it is.
    Stay,
}

/// A tick of the axis.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct Tick {
    /// Position, −1 to 1.
    pub at: f64,
    /// The number, or its end after [`SpectrumView::prefix`].
    pub label: String,
}

/// A line of the spectrum in the window.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct SpectrumMark {
    /// Place in the list of lines, from 0.
    pub line: u32,
    /// Index of the first eigenvalue, from 1.
    pub first: u32,
    /// Index of the last.
    pub last: u32,
    /// Position of the approximation, −1 to 1.
    pub at: f64,
    /// Position of the proven lower end, cut off just outside the window.
    pub lower: Option<f64>,
    /// Position of the proven upper end.
    pub upper: Option<f64>,
    /// The figure as printed.
    pub figure: String,
    /// How many marks drawn before it stand so near that they would cover it.
    pub stacked: u32,
}

/// Which eigenvalues a line stands for.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
pub struct LineRange {
    /// Index of the first, from 1.
    pub first: u32,
    /// Index of the last.
    pub last: u32,
}

/// The spectrum through a window.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(rename_all = "camelCase")]
pub struct SpectrumView {
    /// To hand back with the next move.
    pub window: String,
    /// What all labels of the axis begin with; empty when each is whole.
    pub prefix: String,
    /// The ticks.
    pub ticks: Vec<Tick>,
    /// Distance between two ticks.
    pub step: String,
    /// Width of the window.
    pub width: String,
    /// Index ranges of all lines, ascending, seen or not.
    pub lines: Vec<LineRange>,
    /// What can be seen.
    pub marks: Vec<SpectrumMark>,
    /// Eigenvalues to the left of the window, with multiplicity.
    pub left_of: u32,
    /// Eigenvalues to the right of it.
    pub right_of: u32,
}

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
            WindowMove::Lens { line } => match lines.get(*line as usize) {
                Some(line) => Self::lens(line, lines),
                None => self,
            },
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

    /// Position of x: −1 at the left edge, 1 at the right, cut off at ±2.
    fn position(&self, x: &RBig) -> f64 {
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

    fn edge(&self, side: i8) -> RBig {
        let units = &self.centre + IBig::from(i64::from(side) * i64::from(self.half));
        RBig::from(units) * power_of_two(self.unit)
    }
}

/// Marks nearer than this, in half widths, are stacked: two pixels of a line
/// 800 pixels wide.
const STACKING_DISTANCE: f64 = 0.005;

/// The spectrum through `window`; `lines` ascending.
pub fn view(window: &Window, lines: &[Line]) -> SpectrumView {
    let mut marks: Vec<SpectrumMark> = Vec::new();
    let (mut left_of, mut right_of) = (0, 0);
    for (place, line) in lines.iter().enumerate() {
        let at = window.position(&line.approx);
        let ends = line
            .enclosure
            .as_ref()
            .map(|(low, high)| (window.position(low), window.position(high)));
        let (low, high) = ends.unwrap_or((at, at));
        let count = line.last - line.first + 1;
        if high.max(at) < -1.0 {
            left_of += count;
        } else if low.min(at) > 1.0 {
            right_of += count;
        } else {
            let stacked = match marks.last() {
                Some(before) if at - before.at < STACKING_DISTANCE => {
                    before.stacked + before.last - before.first + 1
                }
                _ => 0,
            };
            marks.push(SpectrumMark {
                line: place as u32,
                first: line.first,
                last: line.last,
                at,
                lower: ends.map(|ends| ends.0),
                upper: ends.map(|ends| ends.1),
                figure: line.figure.clone(),
                stacked,
            });
        }
    }
    let axis = Axis::of(window);
    SpectrumView {
        window: window.text(),
        prefix: axis.prefix,
        ticks: axis.ticks,
        step: axis.step,
        width: decimal::significant(
            &(RBig::from(2 * u64::from(window.half)) * power_of_two(window.unit)),
            2,
            Rounding::Nearest,
        ),
        lines: lines
            .iter()
            .map(|line| LineRange {
                first: line.first,
                last: line.last,
            })
            .collect(),
        marks,
        left_of,
        right_of,
    }
}

struct Axis {
    prefix: String,
    ticks: Vec<Tick>,
    step: String,
}

impl Axis {
    /// Ticks at multiples of 1, 2 or 5 times a power of ten: at least four
    /// of them, at most ten.
    fn of(window: &Window) -> Self {
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
        while count <= last {
            let n = &count * IBig::from(mantissa);
            let at = window.position(&(RBig::from(count.clone()) * &step));
            ticks.push(Tick {
                at,
                label: label(&n, place),
            });
            count += IBig::ONE;
        }
        let prefix = shared_beginning(&ticks);
        for tick in &mut ticks {
            tick.label.drain(..prefix.len());
        }
        Self {
            prefix,
            ticks,
            step: label(&IBig::from(mantissa), place),
        }
    }
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

#[cfg(test)]
mod tests;
