//! What a comma in a claim's figures means.
//!
//! A comma separates unless the way the cells stand apart leaves no other
//! reading than a decimal comma. Where both are possible neither is taken: the
//! claim is answered with a sentence, and an option in its head decides.

/// What the head says of commas.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(super) enum Commas {
    /// Nothing.
    #[default]
    ByEvidence,
    /// They are decimal marks.
    Decimal,
    /// They stand between figures.
    Separating,
}

/// What the head wants behind it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Wanted {
    /// One figure.
    One,
    /// A run of figures, whatever its lines.
    Run,
    /// Rows of figures.
    Rows,
}

/// Whether the commas of `text` are decimal marks; the first cell that may be
/// read both ways, where the text does not tell.
pub(super) fn are_decimal(text: &str, wanted: Wanted) -> Result<bool, String> {
    let separates = text.contains(['.', '[', '{', '&', '|', '\\', '<', '%']);
    if separates || !text.contains(',') {
        return Ok(false);
    }
    let lines: Vec<&str> = text
        .lines()
        .filter(|line| !line.trim().is_empty())
        .collect();
    let cells = || {
        lines
            .iter()
            .flat_map(|line| line.split(is_between))
            .filter(|cell| !cell.is_empty())
    };
    if !cells().all(may_be_figure) {
        return Ok(false);
    }
    let blanks = |line: &&str| {
        line.split(';')
            .any(|part| part.split_whitespace().count() > 1)
    };
    if lines.iter().any(blanks) {
        return Ok(true);
    }
    let semicolons = lines
        .iter()
        .all(|line| line.trim_end_matches(';').contains(';'));
    let first = || {
        cells()
            .find(|cell| cell.contains(','))
            .unwrap_or(text)
            .to_owned()
    };
    match wanted {
        Wanted::One => Ok(true),
        Wanted::Run if semicolons => Ok(true),
        Wanted::Run => Err(first()),
        Wanted::Rows => Ok(semicolons && lines.len() > 1),
    }
}

fn is_between(letter: char) -> bool {
    letter == ';' || letter.is_whitespace()
}

/// At most one comma, and that between two digits: `1,381`, `-0,5e3`.
fn may_be_figure(cell: &str) -> bool {
    let mut around = cell.split(',');
    let (Some(whole), fraction, None) = (around.next(), around.next(), around.next()) else {
        return false;
    };
    fraction.is_none_or(|fraction| {
        whole.ends_with(|c: char| c.is_ascii_digit())
            && fraction.starts_with(|c: char| c.is_ascii_digit())
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::claim::{read, Kind};

    fn stated(claim: &str) -> Vec<String> {
        match read(claim).map(|claim| claim.kind) {
            Ok(Kind::Values(values)) => values
                .figures
                .iter()
                .map(|(figure, _)| format!("{} = {}", figure.text, figure.re.stated))
                .collect(),
            other => panic!("{claim}: {other:?}"),
        }
    }

    #[test]
    fn claims_are_read_with_the_marks_they_are_written_in() {
        let values = ["1,5 = 3/2", "2,25 = 9/4"];
        for claim in [
            "eigenvalues: 1,5; 2,25",
            "eigenvalues: 1,5 2,25",
            "eigenvalues, decimal commas: 1,5\n2,25",
        ] {
            assert_eq!(stated(claim), values, "{claim}");
        }
        assert_eq!(
            stated("eigenvalues, decimal points: 1,5"),
            ["1 = 1", "5 = 5"]
        );
        assert_eq!(stated("eigenvalue: 1,5 ± 0,1"), ["1,5 ± 0,1 = 3/2"]);
        let both = read("eigenvalues: 1,5")
            .expect_err("two readings")
            .to_string();
        assert!(both.contains("decimal commas"), "{both}");
    }

    #[test]
    fn a_blank_between_digits_is_no_part_of_a_number() {
        let error = read("trace: 1 2, 3")
            .expect_err("two numbers in a cell")
            .to_string();
        assert!(error.contains("not a number"), "{error}");
    }

    #[test]
    fn commas_are_decimal_where_nothing_else_is_possible() {
        for (text, wanted) in [
            (" 1,381", Wanted::One),
            (" 1,381 3,618", Wanted::Run),
            (" 1,381; 3,618", Wanted::Run),
            (" 1,381\t3,618", Wanted::Run),
            ("\n1,5;2,5\n2,5;1,5", Wanted::Rows),
            ("\n1,5 2,5\n2,5 1,5", Wanted::Rows),
        ] {
            assert_eq!(are_decimal(text, wanted), Ok(true), "{text:?}");
        }
    }

    #[test]
    fn commas_separate_where_they_stand_apart_from_digits_or_beside_points() {
        for (text, wanted) in [
            (" 1, 3, 4", Wanted::Run),
            (" 1,3,4", Wanted::Run),
            (" 1.381,3.618", Wanted::Run),
            (" [[1,3],[3,1]]", Wanted::Rows),
            (" 1,3; 3,1", Wanted::Rows),
            ("\n1,3\n3,1", Wanted::Rows),
            (" 1 3", Wanted::Run),
        ] {
            assert_eq!(are_decimal(text, wanted), Ok(false), "{text:?}");
        }
    }

    #[test]
    fn what_can_be_read_both_ways_is_not_guessed() {
        for text in [" 1,3", "\n1,381\n3,618"] {
            assert!(are_decimal(text, Wanted::Run).is_err(), "{text:?}");
        }
    }
}
