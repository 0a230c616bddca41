//! Claims about eigenvectors.

use dashu_ratio::RBig;

use super::evidence::{entries, Evidence};
use super::exactly::{eigenvalue_of, Exactness};
use super::figure::Figure;
use super::interval::{ends, middle, Complex, Precision};
use super::print;
use super::space::{meets, nearest_multiple, Meeting};
use super::statement::{Extent, Length, Quantity, Table, Values};
use super::values;
use super::verdict::{Finding, FindingKind, Freedom, Item, Verdict, Word};
use crate::problem::Problem;

/// Judges one stated vector.
pub(super) fn judge(
    value: Option<&Figure>,
    place: Option<usize>,
    vector: &[Figure],
    problem: &Problem,
    evidence: &mut Evidence<'_>,
) -> Verdict {
    located(value, place, vector, problem, evidence).0
}

/// The verdict, and for a confirmed vector the place of its eigenvalue in the
/// evidence.
fn located(
    value: Option<&Figure>,
    place: Option<usize>,
    vector: &[Figure],
    problem: &Problem,
    evidence: &mut Evidence<'_>,
) -> (Verdict, Option<usize>) {
    let order = problem.matrix.order();
    if vector.len() != order {
        let sentence = format!(
            "the vector has {} components, and the order is {order}",
            vector.len()
        );
        return (Verdict::new(Word::Refuted, sentence), None);
    }
    if vector
        .iter()
        .all(|x| x.re.stated.is_zero() && x.im.stated.is_zero())
    {
        return (
            Verdict::new(Word::Refuted, "the zero vector is no eigenvector"),
            None,
        );
    }
    if place.is_some_and(|place| place == 0 || place > evidence.order()) {
        let sentence = format!("there are only {} eigenvalues", evidence.order());
        return (Verdict::new(Word::Refuted, sentence), None);
    }
    let (mut verdict, found) = match eigenvalue_of(problem, vector) {
        Exactness::Eigenvector(lambda) => exact_vector(&lambda, place, evidence),
        Exactness::Not => (refuted_exactly(vector, place, problem, evidence), None),
        Exactness::NotApplicable => by_enclosure(value, place, vector, problem, evidence),
    };
    if let Some(value) = value {
        let stated = Values {
            figures: vec![(value.clone(), 1)],
            extent: Extent::Some,
            quantity: Quantity::Eigenvalue,
            place: None,
        };
        let of_value = values::judge(&stated, evidence);
        if of_value.word != Word::Confirmed {
            verdict.sentence = format!("{}; {}", of_value.sentence, verdict.sentence);
        }
        if let (Exactness::Eigenvector(lambda), Word::Confirmed) =
            (eigenvalue_of(problem, vector), of_value.word)
        {
            if lambda < value.re.low || value.re.high < lambda {
                verdict.word = Word::Refuted;
                verdict.sentence = format!(
                    "this is an eigenvector, but of {}, not of {}",
                    print::exact(&lambda, 12),
                    value.text
                );
            }
        }
        verdict.word = verdict.word.and(of_value.word);
        verdict.findings.extend(of_value.findings);
        verdict.items.splice(0..0, of_value.items);
    }
    (verdict.granting(Freedom::Scale), found)
}

/// A vector meant exactly that is one.
fn exact_vector(
    lambda: &RBig,
    place: Option<usize>,
    evidence: &Evidence<'_>,
) -> (Verdict, Option<usize>) {
    let told = print::exact(lambda, 12);
    let known = evidence.values();
    let here = known
        .iter()
        .position(|value| value.lower <= *lambda && *lambda <= value.upper);
    if let (Some(place), Some(value)) = (place, here.map(|here| &known[here])) {
        if place <= value.first || place > value.first + value.count {
            let sentence =
                format!("this is an eigenvector, but of {told}, not of eigenvalue number {place}");
            return (Verdict::new(Word::Refuted, sentence), None);
        }
    }
    let sentence = format!("A x = λ x holds exactly, with λ = {told}");
    (
        Verdict::new(Word::Confirmed, sentence).resting_on("residual", "0 (exact)"),
        here,
    )
}

/// A vector meant exactly that is none.
fn refuted_exactly(
    vector: &[Figure],
    place: Option<usize>,
    problem: &Problem,
    evidence: &Evidence<'_>,
) -> Verdict {
    let mut verdict = Verdict::new(
        Word::Refuted,
        "A x is not a multiple of x in exact arithmetic, and every figure is meant exactly",
    );
    if let Some(near) = nearest_place(vector, place, problem, evidence) {
        show(&mut verdict, vector, near, evidence);
    }
    verdict
}

fn by_enclosure(
    value: Option<&Figure>,
    place: Option<usize>,
    vector: &[Figure],
    problem: &Problem,
    evidence: &mut Evidence<'_>,
) -> (Verdict, Option<usize>) {
    loop {
        if let Some(found) = attempt(value, place, vector, problem, evidence) {
            return found;
        }
        if !evidence.narrow() {
            let sentence = "the eigenvector could not be enclosed narrowly enough to tell";
            return (Verdict::new(Word::Undecided, sentence), None);
        }
    }
}

/// Which eigenvalues the claim may be about.
fn candidates(value: Option<&Figure>, place: Option<usize>, evidence: &Evidence<'_>) -> Vec<usize> {
    let all = evidence.values().iter().enumerate();
    all.filter(|(_, known)| match (value, place) {
        (Some(figure), _) => known.lower <= figure.re.high && figure.re.low <= known.upper,
        (None, Some(place)) => known.first < place && place <= known.first + known.count,
        (None, None) => true,
    })
    .map(|(place, _)| place)
    .collect()
}

/// One try at the present precision; `None` when it does not decide.
fn attempt(
    value: Option<&Figure>,
    place: Option<usize>,
    vector: &[Figure],
    problem: &Problem,
    evidence: &Evidence<'_>,
) -> Option<(Verdict, Option<usize>)> {
    let complex = problem.matrix.is_complex()
        || problem
            .metric
            .as_ref()
            .is_some_and(crate::matrix::ExactMatrix::is_complex)
        || vector.iter().any(Figure::is_complex);
    let mut nearest: Option<(RBig, usize)> = None;
    let mut unclear = false;
    for candidate in candidates(value, place, evidence) {
        let Some(space) = evidence.space(candidate) else {
            unclear = true;
            continue;
        };
        match meets(&space.basis, vector, complex, evidence.precision()) {
            Meeting::Yes if !space.is_eigenspace => unclear = true,
            Meeting::Yes => {
                let mut verdict = Verdict::new(
                    Word::Confirmed,
                    format!(
                        "a multiple of a true eigenvector of {} = {} rounds to the stated figures",
                        print::lambda(evidence.values()[candidate].first),
                        evidence.told(candidate)
                    ),
                )
                .resting_on("eigenvalue", evidence.told(candidate));
                if space.basis.len() > 1 {
                    verdict = verdict.granting(Freedom::Basis);
                }
                show(&mut verdict, vector, candidate, evidence);
                return Some((verdict, Some(candidate)));
            }
            Meeting::No(short) => {
                if nearest.as_ref().is_none_or(|(least, _)| short < *least) {
                    nearest = Some((short, candidate));
                }
            }
            Meeting::Unclear => unclear = true,
        }
    }
    if unclear {
        return None;
    }
    let near = match nearest {
        Some((_, near)) if place.is_some() || value.is_some() => Some(near),
        _ => nearest_place(vector, place, problem, evidence),
    };
    let mut verdict = Verdict::new(
        Word::Refuted,
        "no multiple of a true eigenvector lies within the stated figures",
    );
    if let Some((short, _)) = &nearest {
        verdict = verdict.resting_on(
            "every figure would need a tolerance wider by at least",
            print::at_least(short),
        );
    }
    if let Some(near) = near {
        show(&mut verdict, vector, near, evidence);
    }
    Some((verdict, None))
}

/// The eigenvalue nearest to the vector's Rayleigh quotient.
fn nearest_place(
    vector: &[Figure],
    place: Option<usize>,
    problem: &Problem,
    evidence: &Evidence<'_>,
) -> Option<usize> {
    if let Some(place) = place {
        return candidates(None, Some(place), evidence).first().copied();
    }
    let p = evidence.precision();
    let quotient = rayleigh(vector, problem, p)?;
    let places = 0..evidence.values().len();
    places.min_by_key(|&place| {
        let value = &evidence.values()[place];
        super::figure::size(&((&value.lower + &value.upper) / RBig::from(2) - &quotient))
    })
}

fn rayleigh(vector: &[Figure], problem: &Problem, p: Precision) -> Option<RBig> {
    let order = vector.len();
    let x: Vec<Complex> = vector
        .iter()
        .map(|f| Complex {
            re: p.of(&f.re.stated),
            im: p.of(&f.im.stated),
        })
        .collect();
    let form = |cells: &[Complex]| {
        let mut sum = Complex::zero();
        for row in 0..order {
            for col in 0..order {
                let moved = p.cmul(&cells[row * order + col], &x[col]);
                sum = p.cadd(&sum, &p.cmul(&x[row].conj(), &moved));
            }
        }
        sum.re
    };
    let top = form(&entries(&problem.matrix, p));
    let bottom = match &problem.metric {
        Some(metric) => form(&entries(metric, p)),
        None => x.iter().fold(super::interval::zero(), |sum, x| {
            p.add(&sum, &p.norm_squared(x))
        }),
    };
    p.div(&top, &bottom).map(|quotient| middle(&quotient))
}

/// Adds the components beside those of the nearest true multiple.
fn show(verdict: &mut Verdict, vector: &[Figure], place: usize, evidence: &Evidence<'_>) {
    let Some(space) = evidence.space(place) else {
        return;
    };
    let [only] = space.basis.as_slice() else {
        return;
    };
    let Some(truth) = nearest_multiple(only, vector, evidence.precision()) else {
        return;
    };
    for (row, (figure, truth)) in vector.iter().zip(&truth).enumerate() {
        let (low, high) = ends(&truth.re);
        let off = &figure.re.stated - middle(&truth.re);
        let inside = figure.re.low <= low
            && high <= figure.re.high
            && figure.im.low <= truth.im.lower_ratio()
            && truth.im.upper_ratio() <= figure.im.high;
        verdict.items.push(Item {
            label: format!("component {}", row + 1),
            claimed: figure.text.clone(),
            truth: complex_text(truth),
            word: if inside || verdict.word == Word::Confirmed {
                Word::Confirmed
            } else {
                Word::Refuted
            },
            off_by: (!inside && verdict.word == Word::Refuted).then(|| print::at_least(&off)),
            drawn: None,
        });
    }
}

/// A complex enclosure as text.
pub(super) fn complex_text(value: &Complex) -> String {
    let (low, high) = ends(&value.re);
    let re = print::enclosed(&low, &high, 8);
    let (low, high) = ends(&value.im);
    if low.is_zero() && high.is_zero() {
        return re;
    }
    let im = print::enclosed(&low, &high, 8);
    match im.strip_prefix('-') {
        Some(size) => format!("{re} - {size}i"),
        None => format!("{re} + {im}i"),
    }
}

/// Judges a full set of vectors, or a decomposition when values are stated.
pub(super) fn judge_all(
    columns: &Table,
    stated: Option<&[Figure]>,
    length: Length,
    problem: &Problem,
    evidence: &mut Evidence<'_>,
) -> Verdict {
    let order = problem.matrix.order();
    if columns.rows != order {
        return Verdict::new(
            Word::Refuted,
            format!(
                "{} vectors are stated, and the order is {order}",
                columns.rows
            ),
        );
    }
    let mut verdict = Verdict::new(Word::Confirmed, String::new());
    let mut wrong = Vec::new();
    let mut unclear = Vec::new();
    let mut columns_of: Vec<Vec<usize>> = vec![Vec::new(); evidence.values().len()];
    for col in 0..order {
        let vector: Vec<Figure> = (0..order).map(|row| columns.at(row, col).clone()).collect();
        let value = stated.and_then(|values| values.get(col));
        let (one, found) = located(value, None, &vector, problem, evidence);
        if let Some(found) = found {
            columns_of[found].push(col + 1);
        }
        match one.word {
            Word::Refuted => wrong.push(col),
            Word::Undecided => unclear.push(col),
            Word::Confirmed => {}
        }
        for freedom in &one.freedoms {
            verdict = verdict.granting(*freedom);
        }
        if one.word != Word::Confirmed {
            let mut finding = Finding::new(FindingKind::Departure, one.sentence.clone());
            finding.col = u32::try_from(col + 1).ok();
            verdict.findings.push(finding);
            verdict.items.extend(one.items.into_iter().map(|mut item| {
                item.label = format!("column {}, {}", col + 1, item.label);
                item
            }));
        }
        verdict.word = verdict.word.and(one.word);
    }
    let crowded = crowded(&columns_of, evidence);
    let set = match length {
        Length::Unit => super::gram::products(columns, problem, evidence.precision()),
        Length::Any => super::gram::independence(columns),
    };
    for more in crowded.into_iter().chain([set]) {
        if verdict.word != Word::Refuted {
            verdict.sentence.clone_from(&more.sentence);
        }
        verdict.word = verdict.word.and(more.word);
        verdict.findings.extend(more.findings);
    }
    let of_set = verdict.sentence.clone();
    let what = if stated.is_some() { "pair" } else { "vector" };
    verdict.sentence = match (verdict.word, wrong.first(), unclear.first()) {
        (Word::Refuted, Some(first), _) => format!(
            "{} of {order} {what}s are wrong; the first is column {}",
            wrong.len(),
            first + 1
        ),
        (Word::Refuted, None, _) => of_set,
        (Word::Undecided, _, Some(first)) => {
            format!("column {} could not be decided", first + 1)
        }
        (Word::Undecided, ..) => of_set,
        (Word::Confirmed, ..) => match length {
            Length::Unit => format!(
                "each of the {order} columns rounds from a true eigenvector, and their lengths and \
                 inner products agree with an orthonormal set to the digits stated"
            ),
            Length::Any => format!(
                "each of the {order} columns rounds from a multiple of a true eigenvector, and \
                 together they are a full set"
            ),
        },
    };
    verdict.resting_on(
        "columns right",
        format!("{} of {order}", order - wrong.len() - unclear.len()),
    )
}

/// More columns for one eigenvalue than its multiplicity allows.
fn crowded(columns_of: &[Vec<usize>], evidence: &Evidence<'_>) -> Option<Verdict> {
    let place = (0..columns_of.len())
        .find(|&place| columns_of[place].len() > evidence.values()[place].count)?;
    let value = &evidence.values()[place];
    let columns: Vec<String> = columns_of[place].iter().map(ToString::to_string).collect();
    let sentence = format!(
        "columns {} all belong to {}, whose multiplicity is {}",
        columns.join(", "),
        print::lambda(value.first),
        value.count
    );
    let mut verdict = Verdict::new(Word::Refuted, sentence.clone());
    verdict
        .findings
        .push(Finding::new(FindingKind::Extra, sentence));
    Some(verdict)
}
