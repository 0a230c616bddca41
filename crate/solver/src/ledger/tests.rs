use super::*;
use crate::control::Unattended;
use crate::rounded::Rounded;
use crate::solve::{cases, solve};

/// Captures every state of the run itself, as the run shows it to its recorder.
#[derive(Default)]
struct Witness {
    ledger: Ledger,
    states: Vec<Option<State>>,
}

impl Recorder for Witness {
    fn listening(&self) -> Listening {
        Listening::Yes
    }

    fn record(&mut self, event: Event<'_>, totals: Totals) {
        let state = match event {
            Event::Scaling { .. } => None,
            Event::Start { run } | Event::Metric { run, .. } | Event::Reflector { run, .. } => {
                Some(State::Matrix(run.matrix()))
            }
            Event::Phases { tridiagonal, .. }
            | Event::Sweep { tridiagonal, .. }
            | Event::Deflation { tridiagonal, .. } => Some(State::Tridiagonal(tridiagonal.clone())),
        };
        match event {
            // The start is no entry of its own: it is the state after the scaling.
            Event::Start { .. } => *self.states.last_mut().expect("scaling comes first") = state,
            _ => self.states.push(state),
        }
        self.ledger.record(event, totals);
    }
}

fn bits(state: &State) -> Vec<u64> {
    let numbers: Vec<f64> = match state {
        State::Matrix(matrix) => {
            let im = matrix.im.iter().flat_map(|im| im.as_slice());
            matrix.re.as_slice().iter().chain(im).copied().collect()
        }
        State::Tridiagonal(t) => t.diagonal.iter().chain(&t.off_diagonal).copied().collect(),
    };
    numbers.into_iter().map(f64::to_bits).collect()
}

fn witnessed(rounded: &Rounded) -> Witness {
    let mut witness = Witness::default();
    solve(rounded, &mut witness, &mut Unattended).expect("a good problem");
    witness
}

#[test]
fn a_replayed_state_is_the_runs_bit_for_bit() {
    let metric = cases::planted(&[1.0, 2.0, 3.0, 1.5, 2.5, 1.25, 4.0], true, 3);
    let mut problems: Vec<(String, Rounded)> = cases::hard()
        .into_iter()
        .map(|(name, matrix)| (name, Rounded::from_doubles(matrix, None)))
        .collect();
    let pair = Rounded::from_doubles(cases::random(7, false, 4), Some(metric));
    problems.push(("pair".to_string(), pair));
    for (name, rounded) in problems {
        let witness = witnessed(&rounded);
        let entries = witness.ledger.entries().len();
        assert_eq!(entries, witness.states.len(), "{name}");
        // Every entry of the small ones, a spread of the large ones.
        let stride = 1 + entries / 60;
        for entry in (0..entries).step_by(stride) {
            match (&witness.states[entry], witness.ledger.replay(entry)) {
                (Some(seen), Ok(replayed)) => {
                    assert!(bits(seen) == bits(&replayed), "{name}, entry {entry}");
                }
                (None, Err(ReplayError::BeforeReduction { .. })) => {}
                (seen, replayed) => panic!("{name}, entry {entry}: {seen:?} against {replayed:?}"),
            }
        }
        assert!(matches!(
            witness.ledger.replay(entries),
            Err(ReplayError::NoSuchEntry { .. })
        ));
    }
}

#[test]
fn balances_and_totals_are_those_of_the_states() {
    for (name, matrix) in [
        ("real", cases::random(40, false, 1)),
        ("complex", cases::random(37, true, 2)),
    ] {
        let rounded = Rounded::from_doubles(matrix, None);
        let witness = witnessed(&rounded);
        let origin = witness.ledger.entries()[0].totals.frobenius;
        for (entry, (line, state)) in witness
            .ledger
            .entries()
            .iter()
            .zip(&witness.states)
            .enumerate()
        {
            let (trace, frobenius, balance) = match state.as_ref().expect("no pair here") {
                State::Matrix(m) => sums(m),
                State::Tridiagonal(t) => {
                    let totals = Totals::of_tridiagonal(t);
                    (totals.trace, totals.frobenius, totals.balance)
                }
            };
            let seen = line.totals;
            // Sums of n² terms in another order differ by n²·u at most.
            let slack = 1600.0 * f64::EPSILON * origin;
            assert!(
                (seen.trace - trace).abs() <= slack,
                "{name} {entry}: {seen:?} {trace}"
            );
            assert!(
                (seen.frobenius - frobenius).abs() <= slack,
                "{name} {entry}: {seen:?} {frobenius}"
            );
            // By difference the balance is known to √(n u) F only.
            let slack = match seen.basis {
                Basis::Measured => slack,
                Basis::ByDifference => (40.0 * f64::EPSILON).sqrt() * origin,
            };
            assert!(
                (seen.balance - balance).abs() <= slack,
                "{name} {entry}: {seen:?} {balance}"
            );
            let drift = witness
                .ledger
                .drift(entry)
                .expect("the reduction has begun");
            // A similarity changes neither; rounding moves them by some n ulps.
            assert!(
                drift.trace.abs() < 400.0 && drift.frobenius.abs() < 400.0,
                "{name} {entry}: {drift:?}"
            );
        }
        let last = witness.ledger.entries().last().expect("entries").totals;
        assert_eq!(last.balance, 0.0, "{name}: all off-diagonals are deflated");
    }
}

fn sums(matrix: &Dense) -> (f64, f64, f64) {
    let order = matrix.rows();
    let (mut all, mut outside) = (Vec::new(), Vec::new());
    for col in 0..order {
        for row in 0..order {
            let im = matrix.im.as_ref().map_or(0.0, |im| im[(row, col)]);
            let parts = [matrix.re[(row, col)], im];
            all.extend(parts);
            if row.abs_diff(col) > 1 {
                outside.extend(parts);
            }
        }
    }
    let norm = |parts: &[f64]| crate::matrix::norms::norm2(parts.iter());
    (matrix.re.trace(), norm(&all), norm(&outside))
}

#[test]
fn entries_hold_what_was_decided_and_on_what() {
    let rounded = Rounded::from_doubles(cases::random(30, true, 9), None);
    let witness = witnessed(&rounded);
    let ledger = &witness.ledger;
    let mut off: Vec<f64> = Vec::new();
    let (mut reflectors, mut deflations) = (0, 0);
    for (entry, line) in ledger.entries().iter().enumerate() {
        match &line.act {
            Act::Reflector {
                column,
                vector_re,
                vector_im,
                scalar,
                zeroed_from,
                ..
            } => {
                assert_eq!(*column, reflectors);
                reflectors += 1;
                assert_eq!(*zeroed_from, column + 2);
                let (re, im) = (ledger.numbers(*vector_re), ledger.numbers(*vector_im));
                assert_eq!((re.len(), re[0], im[0]), (29 - column, 1.0, 0.0));
                let square: f64 = re.iter().chain(im).map(|x| x * x).sum();
                assert!(
                    (scalar * square - 2.0).abs() < 1e-14,
                    "τ‖v‖² = {}",
                    scalar * square
                );
            }
            Act::Phases { re, im } => {
                for (x, y) in ledger.numbers(*re).iter().zip(ledger.numbers(*im)) {
                    assert!((x * x + y * y - 1.0).abs() < 1e-15, "phase {x} {y}");
                }
                let Ok(State::Tridiagonal(t)) = ledger.replay(entry) else {
                    panic!("not tridiagonal")
                };
                assert!(t.off_diagonal.iter().all(|e| *e >= 0.0));
                off = t.off_diagonal;
            }
            Act::Sweep {
                step,
                before,
                after,
            } => {
                assert_eq!(
                    ledger.numbers(*before),
                    &off[step.first..step.last],
                    "entry {entry}"
                );
                off[step.first..step.last].copy_from_slice(ledger.numbers(*after));
            }
            Act::Deflation(deflation) => {
                deflations += 1;
                assert!(deflation.size <= deflation.threshold, "{deflation:?}");
                assert_eq!(deflation.size, off[deflation.index].abs(), "{deflation:?}");
                off[deflation.index] = 0.0;
            }
            Act::Scaling { metric, .. } => assert_eq!((entry, *metric), (0, None)),
            other => panic!("unexpected {other:?}"),
        }
    }
    assert_eq!((reflectors, deflations), (28, 29));
}
