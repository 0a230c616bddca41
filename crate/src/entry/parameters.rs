//! Parameters: names with values, for use in cells.
//!
//! A value may use other parameters. Values are found in an order in which
//! each comes after those it uses; what is left over is circular.

use super::cell::{parse_cell, CellError, CellErrorKind, CellOptions};
use super::complex::ExactComplex;
use super::expression_lexer::{is_name, is_reserved, names_in};
use std::cell::Cell;
use std::collections::BTreeMap;

/// Parameters a problem may have.
pub const MAX_PARAMETERS: usize = 1_000;

/// What is wrong with one parameter.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum ParameterErrorKind {
    /// The name is not a letter followed by letters, digits or subscripts.
    BadName,
    /// The name stands for something else: pi, i, j, sqrt, …
    ReservedName,
    /// An earlier parameter has the same name (its index).
    DuplicateName(usize),
    /// The value's text could not be read.
    Value(CellError),
    /// The value depends on itself, through these names in order.
    Circular(Vec<String>),
    /// The value uses a parameter that has no value itself.
    Unavailable(String),
    /// No cell and no used parameter uses this one: a remark, not a fault.
    Unused,
    /// There are more than [`MAX_PARAMETERS`].
    TooMany,
}

/// A remark about one parameter, by its place in the list.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ParameterError {
    /// Place in the list, from 0.
    pub index: usize,
    /// The name as given.
    pub name: String,
    /// What is wrong.
    pub kind: ParameterErrorKind,
}

impl std::fmt::Display for ParameterError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let name = &self.name;
        match &self.kind {
            ParameterErrorKind::BadName => write!(
                f,
                "“{name}” cannot be a name: a name is a letter followed by letters, digits, \
                 subscripts or _."
            ),
            ParameterErrorKind::ReservedName => {
                write!(
                    f,
                    "“{name}” has a meaning of its own in cells; choose another name."
                )
            }
            ParameterErrorKind::DuplicateName(first) => {
                write!(
                    f,
                    "“{name}” is already parameter {}; give each name once.",
                    first + 1
                )
            }
            ParameterErrorKind::Value(error) => write!(f, "The value of {name}: {error}"),
            ParameterErrorKind::Circular(path) => {
                write!(f, "{name} depends on itself: {}.", path.join(" → "))
            }
            ParameterErrorKind::Unavailable(other) => {
                write!(f, "{name} uses {other}, which has no value.")
            }
            ParameterErrorKind::Unused => write!(f, "{name} is not used in any cell."),
            ParameterErrorKind::TooMany => {
                write!(f, "A problem may have {MAX_PARAMETERS} parameters at most.")
            }
        }
    }
}

impl std::error::Error for ParameterError {}

/// What a name stands for.
pub(crate) enum Lookup<'a> {
    /// A parameter with this value.
    Value(&'a ExactComplex),
    /// A parameter whose own value could not be found.
    Valueless,
    /// No parameter has this name.
    Unknown,
}

/// Names with their exact values. Remembers which names cells have asked for,
/// so that unused ones can be pointed out.
#[derive(Clone, Debug, Default)]
pub struct Parameters {
    list: Vec<Named>,
    by_name: BTreeMap<String, usize>,
}

#[derive(Clone, Debug)]
struct Named {
    name: String,
    uses: Vec<usize>,
    value: Option<ExactComplex>,
    asked: Cell<bool>,
}

impl Parameters {
    /// No parameters.
    pub fn none() -> Self {
        Self::default()
    }

    /// Reads a list of (name, text of value). Parameters at fault are kept
    /// without value, so that cells which use them are told so.
    ///
    /// Cost: linear in the texts and in the uses.
    pub fn read(given: &[(String, String)], options: CellOptions) -> (Self, Vec<ParameterError>) {
        let mut errors = Vec::new();
        let mut found = Self::default();
        let fault = |index: usize, kind| ParameterError {
            index,
            name: given[index].0.clone(),
            kind,
        };
        for (index, (name, _)) in given.iter().enumerate() {
            if index == MAX_PARAMETERS {
                errors.push(fault(index, ParameterErrorKind::TooMany));
                break;
            }
            let trimmed = name.trim();
            if is_reserved(trimmed) {
                errors.push(fault(index, ParameterErrorKind::ReservedName));
            } else if !is_name(trimmed) {
                errors.push(fault(index, ParameterErrorKind::BadName));
            } else if let Some(first) = found.by_name.get(trimmed) {
                errors.push(fault(index, ParameterErrorKind::DuplicateName(*first)));
            } else {
                found.by_name.insert(trimmed.to_owned(), index);
            }
            found.list.push(Named {
                name: trimmed.to_owned(),
                uses: Vec::new(),
                value: None,
                asked: Cell::new(false),
            });
        }
        found.link(given);
        for index in found.order() {
            match parse_cell(&given[index].1, &found, options) {
                Ok(cell) if cell.tolerance.is_some() => {
                    let error = CellError::new(
                        CellErrorKind::MisplacedTolerance,
                        0..given[index].1.len(),
                        "A parameter has no tolerance; write it in the cells.",
                    );
                    errors.push(fault(index, ParameterErrorKind::Value(error)));
                }
                Ok(cell) => {
                    found.list[index].value = Some(ExactComplex {
                        re: cell.re,
                        im: cell.im,
                    });
                }
                Err(error) if error.kind == CellErrorKind::ValuelessName => {
                    let other = given[index]
                        .1
                        .get(error.span)
                        .unwrap_or_default()
                        .to_owned();
                    errors.push(fault(index, ParameterErrorKind::Unavailable(other)));
                }
                Err(error) => errors.push(fault(index, ParameterErrorKind::Value(error))),
            }
        }
        found.report_circular(given, &mut errors);
        for named in &found.list {
            named.asked.set(false);
        }
        errors.sort_by_key(|e| e.index);
        (found, errors)
    }

    /// Notes which parameter uses which.
    fn link(&mut self, given: &[(String, String)]) {
        for index in 0..self.list.len() {
            let mut uses: Vec<usize> = names_in(&given[index].1)
                .filter_map(|name| self.by_name.get(name).copied())
                .collect();
            uses.sort_unstable();
            uses.dedup();
            self.list[index].uses = uses;
        }
    }

    /// Indices of the parameters whose uses are all settled before them
    /// (Kahn 1962, topological sorting), in list order among equals.
    fn order(&self) -> Vec<usize> {
        let n = self.list.len();
        let mut waiting: Vec<usize> = self.list.iter().map(|p| p.uses.len()).collect();
        let mut users: Vec<Vec<usize>> = vec![Vec::new(); n];
        for (index, named) in self.list.iter().enumerate() {
            for &used in &named.uses {
                users[used].push(index);
            }
        }
        let mut order: Vec<usize> = (0..n).filter(|&i| waiting[i] == 0).collect();
        let mut next = 0;
        while next < order.len() {
            for &user in &users[order[next]] {
                waiting[user] -= 1;
                if waiting[user] == 0 {
                    order.push(user);
                }
            }
            next += 1;
        }
        order
    }

    fn report_circular(&self, given: &[(String, String)], errors: &mut Vec<ParameterError>) {
        let settled = self.order();
        let mut open = vec![true; self.list.len()];
        for index in settled {
            open[index] = false;
        }
        for index in 0..self.list.len() {
            if !open[index] {
                continue;
            }
            let (path, is_cycle) = self.follow(index, &open);
            let kind = if is_cycle {
                ParameterErrorKind::Circular(path)
            } else {
                let used = self.list[index].uses.iter().find(|&&u| open[u]);
                let name = used.map(|&u| self.list[u].name.clone()).unwrap_or_default();
                ParameterErrorKind::Unavailable(name)
            };
            errors.push(ParameterError {
                index,
                name: given[index].0.clone(),
                kind,
            });
        }
    }

    /// The names met by following, from `start`, the shortest way back to it
    /// among the open ones; whether there is one.
    fn follow(&self, start: usize, open: &[bool]) -> (Vec<String>, bool) {
        let mut from: Vec<Option<usize>> = vec![None; self.list.len()];
        let mut queue = vec![start];
        let mut next = 0;
        while next < queue.len() {
            let here = queue[next];
            next += 1;
            for &used in &self.list[here].uses {
                if used == start {
                    let mut path = vec![self.list[start].name.clone()];
                    let mut step = Some(here);
                    while let Some(index) = step {
                        path.push(self.list[index].name.clone());
                        step = if index == start { None } else { from[index] };
                    }
                    path.reverse();
                    return (path, true);
                }
                if open[used] && from[used].is_none() {
                    from[used] = Some(here);
                    queue.push(used);
                }
            }
        }
        (Vec::new(), false)
    }

    /// What `name` stands for; remembers that it was asked for.
    pub(crate) fn lookup(&self, name: &str) -> Lookup<'_> {
        match self.by_name.get(name) {
            None => Lookup::Unknown,
            Some(&index) => {
                self.list[index].asked.set(true);
                match &self.list[index].value {
                    Some(value) => Lookup::Value(value),
                    None => Lookup::Valueless,
                }
            }
        }
    }

    /// Whether there are none.
    pub fn is_empty(&self) -> bool {
        self.list.is_empty()
    }

    /// Whether a parameter has this name.
    pub fn has(&self, name: &str) -> bool {
        self.by_name.contains_key(name)
    }

    /// The value of a parameter.
    pub fn value(&self, name: &str) -> Option<&ExactComplex> {
        self.by_name
            .get(name)
            .and_then(|&index| self.list[index].value.as_ref())
    }

    /// The names in the order given.
    pub fn names(&self) -> impl Iterator<Item = &str> {
        self.list.iter().map(|p| p.name.as_str())
    }

    /// Remarks on parameters that no cell read so far has used, directly or
    /// through another parameter.
    pub fn unused(&self) -> Vec<ParameterError> {
        let mut reached: Vec<bool> = self.list.iter().map(|p| p.asked.get()).collect();
        let mut queue: Vec<usize> = (0..self.list.len()).filter(|&i| reached[i]).collect();
        while let Some(index) = queue.pop() {
            for &used in &self.list[index].uses {
                if !reached[used] {
                    reached[used] = true;
                    queue.push(used);
                }
            }
        }
        let remark = |(index, named): (usize, &Named)| ParameterError {
            index,
            name: named.name.clone(),
            kind: ParameterErrorKind::Unused,
        };
        self.list
            .iter()
            .enumerate()
            .filter(|(i, _)| !reached[*i])
            .map(remark)
            .collect()
    }
}
