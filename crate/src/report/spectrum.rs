//! The spectrum on a line, seen through a window of any width.
//!
//! An enclosure of 28 or 500 digits is far narrower than doubles can place.
//! So the window is kept in integers here, and the page is handed positions
//! from −1 (left edge) to 1 (right edge) together with the marks of the axis
//! as text.

mod axis;
mod window;

use dashu_ratio::RBig;
use serde::{Deserialize, Serialize};

use axis::Axis;
pub use window::Window;

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
    /// Proven ends over all problems within the tolerances, where there are any.
    pub range: Option<(RBig, RBig)>,
    /// The figure as printed elsewhere on the page.
    pub figure: String,
}

/// How the page asks for another window.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(target_arch = "wasm32", derive(tsify::Tsify))]
#[serde(tag = "move", rename_all = "camelCase")]
pub enum WindowMove {
    /// The whole spectrum.
    All,
    /// The whole spectrum with its ranges over the tolerances.
    Ranges,
    /// So close to one line of the spectrum that its enclosure has a width.
    Lens {
        /// Place in the list of lines, from 0.
        line: u32,
    },
    /// The same of the line that holds one eigenvalue.
    Eigenvalue {
        /// Its place in ascending order, from 0.
        index: u32,
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
#[serde(rename_all = "camelCase")]
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
    /// Position of the lower end of its range over the tolerances, likewise.
    pub range_lower: Option<f64>,
    /// Position of the upper end of it.
    pub range_upper: Option<f64>,
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
    /// What the labels are distances from; empty when they are places.
    pub origin: String,
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
        let range = line
            .range
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
                range_lower: range.map(|range| range.0),
                range_upper: range.map(|range| range.1),
                figure: line.figure.clone(),
                stacked,
            });
        }
    }
    let axis = Axis::of(window);
    SpectrumView {
        window: window.text(),
        prefix: axis.prefix,
        origin: axis.origin,
        ticks: axis.ticks,
        step: axis.step,
        width: window.width(),
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

#[cfg(test)]
mod tests;
