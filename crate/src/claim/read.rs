//! From text to a claim.
//!
//! A claim is a head and figures. The head is a few plain words up to a colon;
//! options stand in it behind commas:
//!
//! ```text
//! eigenvalues, truncated: 1.381, 1.381, 3.618
//! eigenvalue 2: 3.618 ± 0.001
//! vector for 3.618: 1.000 1.618
//! matrix 1:
//!   5.0000 -3.7417 0.0000
//!   …
//! ```
//!
//! | head | figures |
//! |---|---|
//! | `eigenvalue`, `eigenvalue 2` | one value (the second in ascending order) |
//! | `eigenvalues`, `some eigenvalues` | all of them with multiplicities (`3 ×2`), or some |
//! | `frequency`, `frequencies`, `angular frequency 1`, … | readings √λ/2π and √λ |
//! | `vector`, `vector 2`, `vector for 3.618` | components, any scale and phase |
//! | `vectors`, `vectors, orthonormal` | n rows; the columns are vectors |
//! | `decomposition` | a row of values, then n rows with the vectors as columns |
//! | `tridiagonal`, `tridiagonal with Q` | n rows, or diagonal and off-diagonal; then n rows of Q |
//! | `reflector 1`, `reflector 1 scalar 0.5` | v, with or without its leading zeros; H itself |
//! | `matrix 1` | the matrix after that many reflectors |
//! | `cholesky` | L, or Lᴴ |
//! | `polynomial` | n + 1 coefficients, highest power first |
//! | `determinant`, `trace`, `condition`, `radius` | one number |
//! | `positive`, `negative`, `zero` | how many eigenvalues are |
//! | `output` | an outside solver's values, then its vectors as columns |
//!
//! Options: `truncated` (the last digit is cut off, not rounded), `exact`,
//! `4 figures`, `± 0.01`, `decimal commas`, `decimal points`.
//!
//! Several claims may follow one another in one text: a worked calculation.

use dashu_ratio::RBig;

use super::body::{self, BodyError};
use super::commas::{Commas, Wanted};
use super::figure::{raw, spanned, Digits, Figure};
use super::statement::{
    Claim, ClaimError, Extent, Kind, Length, Quantity, Reflector, Scalar, Table, Values,
};

/// Reads one claim.
///
/// # Errors
/// [`ClaimError`] with the place of what cannot be read.
pub fn read(text: &str) -> Result<Claim, ClaimError> {
    let (head, rest) = match text.split_once(':') {
        Some((head, rest)) => (head.trim(), rest),
        None => (text.trim(), ""),
    };
    let mut parts = head.split(',').map(str::trim);
    let words: Vec<String> = parts
        .next()
        .unwrap_or("")
        .split_whitespace()
        .map(str::to_lowercase)
        .collect();
    let mut digits = Digits::Rounded;
    let mut length = Length::Any;
    let mut commas = Commas::default();
    for option in parts {
        match option.to_lowercase().as_str() {
            "orthonormal" | "unit" => length = Length::Unit,
            "decimal commas" | "decimal comma" => commas = Commas::Decimal,
            "decimal points" | "decimal point" => commas = Commas::Separating,
            other => digits = digits_option(other)?,
        }
    }
    let first_line = text.split(':').next().unwrap_or("").lines().count().max(1);
    let wanted = wanted(&words);
    let rows = body::rows(rest, first_line, wanted, commas).map_err(|error| match error {
        BodyError::Comma { text } => ClaimError::Comma { text },
        BodyError::Figure { line, place, text } => ClaimError::Figure { line, place, text },
    })?;
    let head = Head {
        typed: head,
        words,
        length,
    };
    if head.words.is_empty() {
        return Err(ClaimError::UnknownKind {
            head: head.typed.to_owned(),
        });
    }
    let kind = head.kind(rows, &digits)?;
    Ok(Claim {
        head: head.typed.to_owned(),
        kind,
        digits,
    })
}

/// What the words of a head want behind them.
fn wanted(words: &[String]) -> Wanted {
    match words.first().map_or("", String::as_str) {
        "eigenvalue" | "frequency" | "determinant" | "trace" | "positive" | "negative" | "zero"
        | "condition" | "radius" => Wanted::One,
        "angular" if words.get(1).is_some_and(|word| word == "frequency") => Wanted::One,
        "eigenvalues" | "some" | "frequencies" | "angular" | "vector" | "polynomial" => Wanted::Run,
        _ => Wanted::Rows,
    }
}

/// Cuts a worked calculation into its claims: each begins at a line whose
/// first word names a kind.
pub fn split(text: &str) -> Vec<&str> {
    let mut starts: Vec<usize> = Vec::new();
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        let word: String = line
            .trim_start()
            .chars()
            .take_while(|c| c.is_alphabetic())
            .collect();
        if line.contains(':') && KINDS.contains(&word.to_lowercase().as_str()) {
            starts.push(at);
        }
        at += line.len();
    }
    let mut claims = Vec::new();
    for (place, &start) in starts.iter().enumerate() {
        let end = starts.get(place + 1).copied().unwrap_or(text.len());
        claims.push(text[start..end].trim());
    }
    if claims.is_empty() && !text.trim().is_empty() {
        claims.push(text.trim());
    }
    claims
}

const KINDS: [&str; 22] = [
    "output",
    "eigenvalue",
    "eigenvalues",
    "some",
    "vector",
    "vectors",
    "decomposition",
    "tridiagonal",
    "reflector",
    "matrix",
    "cholesky",
    "polynomial",
    "determinant",
    "trace",
    "positive",
    "negative",
    "zero",
    "condition",
    "radius",
    "frequency",
    "frequencies",
    "angular",
];

fn digits_option(option: &str) -> Result<Digits, ClaimError> {
    let unknown = || ClaimError::UnknownOption {
        option: option.to_owned(),
    };
    match option {
        "rounded" => return Ok(Digits::Rounded),
        "truncated" => return Ok(Digits::Truncated),
        "exact" => return Ok(Digits::Exact),
        _ => {}
    }
    if let Some(within) = option
        .strip_prefix('±')
        .or_else(|| option.strip_prefix("+/-"))
    {
        let figure = raw(within).ok_or_else(unknown)?;
        let figure = spanned(vec![figure], &Digits::Exact)
            .pop()
            .ok_or_else(unknown)?;
        if figure.is_complex() || figure.re.stated < RBig::ZERO {
            return Err(unknown());
        }
        return Ok(Digits::Within(figure.re.stated));
    }
    let count = option
        .strip_suffix("figures")
        .or_else(|| option.strip_suffix("figure"))
        .and_then(|count| count.trim().parse::<u32>().ok())
        .filter(|count| (1..=1000).contains(count));
    count.map(Digits::Significant).ok_or_else(unknown)
}

struct Head<'a> {
    typed: &'a str,
    words: Vec<String>,
    length: Length,
}

impl Head<'_> {
    fn shape(&self, needed: &'static str) -> ClaimError {
        ClaimError::Shape {
            head: self.typed.to_owned(),
            needed,
        }
    }

    fn unknown(&self) -> ClaimError {
        ClaimError::UnknownKind {
            head: self.typed.to_owned(),
        }
    }

    /// The whole number that is the word at `place`, counted from 1.
    fn ordinal(&self, place: usize) -> Result<Option<usize>, ClaimError> {
        let Some(word) = self.words.get(place) else {
            return Ok(None);
        };
        match word.parse() {
            Ok(number) if number > 0 => Ok(Some(number)),
            _ => Err(self.unknown()),
        }
    }

    fn kind(&self, rows: Vec<body::Row>, digits: &Digits) -> Result<Kind, ClaimError> {
        if rows.is_empty() {
            return Err(ClaimError::NoFigures {
                head: self.typed.to_owned(),
            });
        }
        let words: Vec<&str> = self.words.iter().map(String::as_str).collect();
        let scalar = |which| Ok(Kind::Scalar(which, self.single(&rows, digits)?));
        match words.as_slice() {
            ["eigenvalue", ..] => self.values(&rows, digits, Quantity::Eigenvalue, 1),
            ["eigenvalues"] => self.list(&rows, digits, Quantity::Eigenvalue, Extent::All),
            ["some", "eigenvalues"] => self.list(&rows, digits, Quantity::Eigenvalue, Extent::Some),
            ["frequency", ..] => self.values(&rows, digits, Quantity::Frequency, 1),
            ["frequencies"] => self.list(&rows, digits, Quantity::Frequency, Extent::All),
            ["some", "frequencies"] => self.list(&rows, digits, Quantity::Frequency, Extent::Some),
            ["angular", "frequency", ..] => {
                self.values(&rows, digits, Quantity::AngularFrequency, 2)
            }
            ["angular", "frequencies"] => {
                self.list(&rows, digits, Quantity::AngularFrequency, Extent::All)
            }
            ["vector", ..] => self.vector(&rows, digits),
            ["vectors"] => {
                let columns = self.square(table(&rows, digits, 0))?;
                Ok(Kind::Vectors {
                    columns,
                    values: None,
                    length: self.length,
                })
            }
            ["decomposition"] => self.decomposition(&rows, digits),
            ["tridiagonal", ..] => self.tridiagonal(&rows, digits),
            ["reflector", ..] => self.reflector(&rows, digits),
            ["matrix", _] => {
                let step = self.ordinal(1)?.ok_or_else(|| self.unknown())?;
                Ok(Kind::State {
                    step,
                    matrix: self.square(table(&rows, digits, 0))?,
                })
            }
            ["cholesky"] => Ok(Kind::Cholesky(self.square(table(&rows, digits, 0))?)),
            ["polynomial"] => Ok(Kind::Polynomial(flat(&rows, digits))),
            ["output"] => self.output(&rows),
            ["determinant"] => scalar(Scalar::Determinant),
            ["trace"] => scalar(Scalar::Trace),
            ["positive"] => scalar(Scalar::Positive),
            ["negative"] => scalar(Scalar::Negative),
            ["zero"] => scalar(Scalar::Zero),
            ["condition"] => scalar(Scalar::Condition),
            ["radius"] => scalar(Scalar::Radius),
            _ => Err(self.unknown()),
        }
    }

    fn single(&self, rows: &[body::Row], digits: &Digits) -> Result<Figure, ClaimError> {
        let mut figures = flat(rows, digits);
        match (figures.pop(), figures.is_empty()) {
            (Some(figure), true) if !figure.is_complex() => Ok(figure),
            _ => Err(self.shape("one real figure")),
        }
    }

    fn values(
        &self,
        rows: &[body::Row],
        digits: &Digits,
        quantity: Quantity,
        place: usize,
    ) -> Result<Kind, ClaimError> {
        let place = self.ordinal(place)?;
        let figure = self.single(rows, digits)?;
        let many = rows[0].cells[0].many;
        Ok(Kind::Values(Values {
            figures: vec![(figure, many)],
            extent: Extent::Some,
            quantity,
            place,
        }))
    }

    fn list(
        &self,
        rows: &[body::Row],
        digits: &Digits,
        quantity: Quantity,
        extent: Extent,
    ) -> Result<Kind, ClaimError> {
        let many = rows
            .iter()
            .flat_map(|row| row.cells.iter().map(|cell| cell.many));
        let figures: Vec<_> = flat(rows, digits).into_iter().zip(many).collect();
        if figures.iter().any(|(figure, _)| figure.is_complex()) {
            return Err(self.shape("real figures: eigenvalues of Hermitian problems are real"));
        }
        Ok(Kind::Values(Values {
            figures,
            extent,
            quantity,
            place: None,
        }))
    }

    fn vector(&self, rows: &[body::Row], digits: &Digits) -> Result<Kind, ClaimError> {
        let vector = flat(rows, digits);
        let (value, place) = match self.words.get(1).map(String::as_str) {
            Some("for") => {
                let text = self.words[2..].join(" ");
                let value = raw(&text)
                    .and_then(|raw| spanned(vec![raw], digits).pop())
                    .ok_or_else(|| self.shape("the eigenvalue after “for”"))?;
                (Some(value), None)
            }
            _ => (None, self.ordinal(1)?),
        };
        Ok(Kind::Vector {
            value,
            place,
            vector,
        })
    }

    fn square(&self, table: Option<Table>) -> Result<Table, ClaimError> {
        table
            .filter(|table| table.rows == table.cols)
            .ok_or_else(|| self.shape("as many figures in each row as there are rows"))
    }

    fn decomposition(&self, rows: &[body::Row], digits: &Digits) -> Result<Kind, ClaimError> {
        let needed = "a row of values, then the vectors as columns";
        let order = rows[0].cells.len();
        if rows.len() != order + 1 {
            return Err(self.shape(needed));
        }
        let values = flat(&rows[..1], digits);
        let columns = self.square(table(rows, digits, 1))?;
        Ok(Kind::Vectors {
            columns,
            values: Some(values),
            length: Length::Unit,
        })
    }

    /// Values alone, or a row of values and the vectors as columns; figures of a
    /// machine are meant exactly.
    fn output(&self, rows: &[body::Row]) -> Result<Kind, ClaimError> {
        let exact = Digits::Exact;
        let order = rows[0].cells.len();
        if rows.len() == order + 1 && order > 1 {
            return Ok(Kind::Output {
                values: flat(&rows[..1], &exact),
                columns: Some(self.square(table(rows, &exact, 1))?),
            });
        }
        if rows.len() > 1 && order > 1 {
            return Err(self.shape("a row of values, then the vectors as columns"));
        }
        Ok(Kind::Output {
            values: flat(rows, &exact),
            columns: None,
        })
    }

    fn tridiagonal(&self, rows: &[body::Row], digits: &Digits) -> Result<Kind, ClaimError> {
        let with_basis = match self.words[1..]
            .iter()
            .map(String::as_str)
            .collect::<Vec<_>>()[..]
        {
            [] => false,
            ["with", "q"] => true,
            _ => return Err(self.unknown()),
        };
        let width = rows[0].cells.len();
        // Two rows are diagonal and off-diagonal, unless they are a 2 × 2 form.
        let lists = rows.len() >= 2 && rows[1].cells.len() + 1 == width;
        let form_rows = if lists { 2 } else { width };
        let expected = form_rows + if with_basis { width } else { 0 };
        if rows.len() != expected {
            return Err(self.shape(
                "the n × n form, or a row of n diagonal and a row of n − 1 off-diagonal figures; \
                 with Q, n rows of Q after it",
            ));
        }
        let basis = if with_basis {
            Some(self.square(table(rows, digits, form_rows))?)
        } else {
            None
        };
        if lists {
            let mut figures = flat(&rows[..2], digits);
            let off_diagonal = figures.split_off(width);
            return Ok(Kind::Tridiagonal {
                diagonal: figures,
                off_diagonal,
                outside: Vec::new(),
                basis,
            });
        }
        let form = self.square(table(&rows[..form_rows], digits, 0))?;
        let mut diagonal = Vec::new();
        let mut off_diagonal = Vec::new();
        let mut outside = Vec::new();
        for row in 0..width {
            for col in 0..width {
                let figure = form.at(row, col).clone();
                if row == col {
                    diagonal.push(figure);
                } else if row == col + 1 {
                    off_diagonal.push(figure);
                } else {
                    outside.push((row, col, figure));
                }
            }
        }
        Ok(Kind::Tridiagonal {
            diagonal,
            off_diagonal,
            outside,
            basis,
        })
    }

    fn reflector(&self, rows: &[body::Row], digits: &Digits) -> Result<Kind, ClaimError> {
        let column = self
            .ordinal(1)?
            .ok_or_else(|| self.shape("the column it is meant for"))?;
        let stated = match self.words[2..]
            .iter()
            .map(String::as_str)
            .collect::<Vec<_>>()[..]
        {
            [] if rows.len() > 1 && rows[0].cells.len() > 1 => {
                Reflector::Matrix(self.square(table(rows, digits, 0))?)
            }
            [] => Reflector::Vector(flat(rows, digits)),
            ["scalar", scalar] => {
                let scalar = raw(scalar)
                    .and_then(|raw| spanned(vec![raw], digits).pop())
                    .ok_or_else(|| self.shape("the scalar as a number"))?;
                Reflector::Scaled(flat(rows, digits), Box::new(scalar))
            }
            _ => return Err(self.unknown()),
        };
        Ok(Kind::Reflector { column, stated })
    }
}

/// All figures, row by row, spanned as one claim.
fn flat(rows: &[body::Row], digits: &Digits) -> Vec<Figure> {
    let raws = rows
        .iter()
        .flat_map(|row| row.cells.iter().map(|cell| cell.raw.clone()))
        .collect();
    spanned(raws, digits)
}

/// The rows from `first` on as a rectangle.
fn table(rows: &[body::Row], digits: &Digits, first: usize) -> Option<Table> {
    let rows = rows.get(first..)?;
    let cols = rows.first()?.cells.len();
    if rows.iter().any(|row| row.cells.len() != cols) {
        return None;
    }
    Some(Table {
        rows: rows.len(),
        cols,
        cells: flat(rows, digits),
    })
}
