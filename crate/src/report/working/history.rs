//! The off-diagonals through all sweeps. Pictures only: heights are
//! logarithms, whose last bit may differ between machines.

use super::rows::magnitude;
use super::{DecadeTick, HistoryDeflation, HistoryLine, HistoryView};
use crate::ledger::{Act, State};
use crate::report::run::Run;

/// Lines drawn at most: more run into one another.
const MOST_LINES: usize = 24;
/// Points of a line at most.
const MOST_POINTS: usize = 400;
/// Decades drawn at most below the largest off-diagonal.
const MOST_DECADES: f64 = 40.0;

/// The history of a run. Cost: O(n · sweeps). `None` when the run did not
/// reach its tridiagonal form.
pub fn history(run: &Run) -> Option<HistoryView> {
    let entries = run.ledger.entries();
    let start = entries
        .iter()
        .position(|entry| matches!(entry.act, Act::Phases { .. }))?;
    let Ok(State::Tridiagonal(form)) = run.ledger.replay(start) else {
        return None;
    };
    let sweeps = run.ledger.sweeps();
    let drawn = drawn_places(form.off_diagonal.len());
    let every = sweeps.div_ceil(MOST_POINTS).max(1);
    let mut sizes: Vec<f64> = form.off_diagonal.iter().map(|beta| beta.abs()).collect();
    let mut lines: Vec<Fall> = drawn
        .iter()
        .map(|place| Fall::new(*place, sizes[*place]))
        .collect();
    let mut deflations = Vec::new();
    let mut sweep = 0;
    for (place, entry) in entries.iter().enumerate().skip(start + 1) {
        match &entry.act {
            Act::Sweep { step, after, .. } => {
                sweep += 1;
                for (k, beta) in run.ledger.numbers(*after).iter().enumerate() {
                    sizes[step.first + k] = beta.abs();
                }
                if sweep % every == 0 {
                    for line in &mut lines {
                        line.see(sweep, sizes[line.place]);
                    }
                }
            }
            Act::Deflation(deflation) => {
                if let Some(line) = lines.iter_mut().find(|line| line.place == deflation.index) {
                    line.see(sweep, deflation.size);
                    line.fallen = true;
                }
                deflations.push(Drop {
                    entry: place,
                    sweep,
                    size: deflation.size,
                    index: deflation.index,
                });
            }
            _ => {}
        }
    }
    let scale = Scale::over(&lines, &deflations, run.scale());
    Some(HistoryView {
        sweeps: sweeps as u32,
        words: words(
            run,
            drawn.len(),
            form.off_diagonal.len(),
            sweeps,
            deflations.len(),
            every,
        ),
        lines: lines.iter().map(|line| line.view(&scale)).collect(),
        deflations: deflations
            .iter()
            .map(|drop| HistoryDeflation {
                entry: drop.entry as u32,
                sweep: drop.sweep as f32,
                at: scale.height(drop.size),
                words: format!(
                    "after sweep {}: between rows {} and {}, {}",
                    drop.sweep,
                    drop.index + 1,
                    drop.index + 2,
                    magnitude(run, drop.size)
                ),
            })
            .collect(),
        ticks: scale.ticks(),
    })
}

/// Places of the off-diagonals drawn: all, or evenly spaced ones.
fn drawn_places(count: usize) -> Vec<usize> {
    if count <= MOST_LINES {
        return (0..count).collect();
    }
    (0..MOST_LINES)
        .map(|k| k * (count - 1) / (MOST_LINES - 1))
        .collect()
}

struct Drop {
    entry: usize,
    sweep: usize,
    size: f64,
    index: usize,
}

struct Fall {
    place: usize,
    sizes: Vec<(usize, f64)>,
    fallen: bool,
}

impl Fall {
    fn new(place: usize, size: f64) -> Self {
        Self {
            place,
            sizes: vec![(0, size)],
            fallen: false,
        }
    }

    fn see(&mut self, sweep: usize, size: f64) {
        if self.fallen {
            return;
        }
        match self.sizes.last_mut() {
            Some(last) if last.0 == sweep => last.1 = size,
            _ => self.sizes.push((sweep, size)),
        }
    }

    fn view(&self, scale: &Scale) -> HistoryLine {
        HistoryLine {
            place: self.place as u32 + 1,
            points: self
                .sizes
                .iter()
                .map(|(sweep, size)| (*sweep as f32, scale.height(*size)))
                .collect(),
        }
    }
}

struct Scale {
    /// log₁₀ of the scaled size at the head.
    top: f64,
    /// The same at the foot.
    foot: f64,
    /// What to add to make it a size of the typed problem.
    shift: f64,
}

impl Scale {
    fn over(lines: &[Fall], drops: &[Drop], scale: i32) -> Self {
        let mut largest = 0.0f64;
        let mut least = f64::INFINITY;
        let sizes = lines
            .iter()
            .flat_map(|line| line.sizes.iter().map(|(_, size)| *size));
        for size in sizes
            .chain(drops.iter().map(|drop| drop.size))
            .filter(|size| *size > 0.0)
        {
            largest = largest.max(size);
            least = least.min(size);
        }
        let shift = f64::from(scale) * std::f64::consts::LOG10_2;
        if largest == 0.0 {
            return Self {
                top: 0.0,
                foot: -1.0,
                shift,
            };
        }
        let top = largest.log10();
        let foot = least.log10().max(top - MOST_DECADES).min(top - 1.0);
        // A little room, so that neither end sits on the frame.
        Self {
            top: top + 0.3,
            foot: foot - 0.5,
            shift,
        }
    }

    fn height(&self, size: f64) -> f32 {
        if size <= 0.0 {
            return 0.0;
        }
        (((size.log10() - self.foot) / (self.top - self.foot)).clamp(0.0, 1.0)) as f32
    }

    fn ticks(&self) -> Vec<DecadeTick> {
        let (foot, top) = (self.foot + self.shift, self.top + self.shift);
        let every = (((top - foot) / 6.0).ceil() as i32).max(1);
        let first = (foot.ceil() as i32).div_euclid(every) * every;
        (0..)
            .map(|k| first + k * every)
            .skip_while(|decade| f64::from(*decade) < foot)
            .take_while(|decade| f64::from(*decade) <= top)
            .map(|decade| DecadeTick {
                at: ((f64::from(decade) - foot) / (top - foot)) as f32,
                label: crate::report::decimal::typeset(&format!("1e{decade}")),
            })
            .collect()
    }
}

fn words(
    run: &Run,
    drawn: usize,
    all: usize,
    sweeps: usize,
    deflations: usize,
    every: usize,
) -> String {
    let which = if drawn == all {
        format!("{all} off-diagonals")
    } else {
        format!("{drawn} of the {all} off-diagonals, evenly spaced,")
    };
    let points = if every == 1 {
        String::new()
    } else {
        format!(" at every {every}th sweep")
    };
    let settled = if run.outcome.is_ok() {
        ""
    } else {
        " The iteration did not settle."
    };
    format!(
        "{which} over {sweeps} sweeps{points}, on a logarithmic scale; {deflations} deflations are \
         marked.{settled}"
    )
}
