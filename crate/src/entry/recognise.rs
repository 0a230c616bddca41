//! Which layouts a text may be in, by its content.

use super::clean;
use super::settings::{DecimalMark, Labels, Layout, Settings, SignedWords};
use super::{brackets, html, json, latex, markdown, matrix_market, plain};

/// The readings a text allows, most natural first; one unless the content is
/// ambiguous. Whether several of them matter is decided by what they give.
///
/// Questions arise only between plain layouts. A layout chosen for an earlier
/// text is therefore kept only while the text is a plain one.
pub(crate) fn candidates(source: &str, chosen: &Settings) -> Vec<Settings> {
    let found = by_content(source);
    let plain = found
        .iter()
        .all(|settings| settings.layout.is_some_and(is_plain));
    // A label may begin with a bracket, which alone does not make JSON.
    let labelled = chosen.labels.is_some_and(|labels| labels != Labels::None);
    let plain = plain || labelled && found == [of(Layout::Json)] && !json::is_json(source.trim());
    let found = match chosen.layout {
        Some(layout) if plain && is_plain(layout) => vec![of(layout)],
        _ => found,
    };
    let mut list: Vec<Settings> = Vec::new();
    for found in found {
        let settings = Settings {
            layout: found.layout,
            decimal: chosen.decimal.or(found.decimal),
            signed_words: chosen.signed_words.or(found.signed_words),
            ..*chosen
        };
        if !list.contains(&settings) {
            list.push(settings);
        }
    }
    list
}

fn is_plain(layout: Layout) -> bool {
    matches!(
        layout,
        Layout::Spaces
            | Layout::Tabs
            | Layout::Commas
            | Layout::CommasAndSpaces
            | Layout::Semicolons
            | Layout::RowsAtSemicolons
            | Layout::CommasRowsAtSemicolons
    )
}

fn by_content(source: &str) -> Vec<Settings> {
    let (start, end) = clean::trim(source);
    let body = &source[start..end];
    if matrix_market::looks_like(body) {
        vec![of(Layout::MatrixMarket)]
    } else if html::looks_like(body) {
        vec![of(Layout::Html)]
    } else if latex::looks_like(body) {
        vec![of(Layout::Latex)]
    } else if json::looks_like(body) {
        let bracketed = !json::is_json(body) && brackets::inside(source).is_some();
        vec![of(if bracketed {
            Layout::Brackets
        } else {
            Layout::Json
        })]
    } else if brackets::inside(source).is_some() {
        vec![of(Layout::Brackets)]
    } else if markdown::looks_like(source) {
        vec![of(Layout::Markdown)]
    } else {
        Marks::count(source).candidates()
    }
}

fn of(layout: Layout) -> Settings {
    Settings {
        layout: Some(layout),
        ..Settings::default()
    }
}

fn with_decimal(layout: Layout, decimal: DecimalMark) -> Settings {
    Settings {
        decimal: Some(decimal),
        ..of(layout)
    }
}

/// What separators a plain text holds.
#[derive(Default, Debug)]
struct Marks {
    lines: usize,
    /// Tabs between cells.
    tabs: usize,
    /// Semicolons with something after them in their line.
    semicolons: usize,
    /// Semicolons that end a line.
    closing_semicolons: usize,
    /// Commas between two digits, alone in their word.
    tight_commas: usize,
    /// Every other comma.
    loose_commas: usize,
    /// Points between or beside digits.
    points: usize,
    /// White space that parts two words which are not one cell.
    gaps: usize,
    /// Words a reader could join: a real one, then a signed imaginary one.
    signed_imaginary: usize,
}

impl Marks {
    fn count(source: &str) -> Self {
        let mut marks = Self::default();
        for (start, end) in plain::lines(source) {
            marks.count_line(&source[start..end]);
        }
        marks
    }

    fn count_line(&mut self, line: &str) {
        self.lines += 1;
        let (from, to) = clean::trim(line);
        self.tabs += line[from..to].matches('\t').count();
        // A leading tab parts a blank cell, as in an upper triangle.
        self.tabs += line[..from].matches('\t').count();
        let body = line[from..to].trim_end_matches(|c| c == ';' || clean::is_blank_char(c));
        self.closing_semicolons += line[from + body.len()..to].matches(';').count();
        for part in body.split(';') {
            self.count_part(part);
        }
        self.semicolons += body.matches(';').count();
    }

    fn count_part(&mut self, part: &str) {
        let mut previous: Option<&str> = None;
        for word in part
            .split(clean::is_blank_char)
            .filter(|word| !word.is_empty())
        {
            if let Some(previous) = previous {
                if !previous.ends_with(',')
                    && !word.starts_with(',')
                    && !plain::continues(previous, word)
                {
                    self.gaps += 1;
                    if plain::is_signed_imaginary(word) && !plain::is_imaginary(previous) {
                        self.signed_imaginary += 1;
                    }
                }
            }
            self.count_word(word);
            previous = Some(word);
        }
    }

    fn count_word(&mut self, word: &str) {
        let bytes = word.as_bytes();
        let digit = |at: Option<usize>| {
            at.and_then(|at| bytes.get(at))
                .is_some_and(u8::is_ascii_digit)
        };
        let commas = bytes.iter().filter(|&&byte| byte == b',').count();
        for (at, byte) in bytes.iter().enumerate() {
            match byte {
                b',' if between_digits(bytes, at)
                    && (commas == 1 || complex_commas(word, commas)) =>
                {
                    self.tight_commas += 1
                }
                b',' => self.loose_commas += 1,
                b'.' if digit(at.checked_sub(1)) || digit(Some(at + 1)) => self.points += 1,
                _ => {}
            }
        }
    }

    fn candidates(&self) -> Vec<Settings> {
        use DecimalMark::{Comma, Point};
        let commas = self.tight_commas + self.loose_commas;
        let decimal_commas = self.tight_commas > 0 && self.loose_commas == 0 && self.points == 0;
        if self.tabs > 0 {
            return vec![of(Layout::Tabs)];
        }
        if self.semicolons > 0 {
            return self.with_semicolons(decimal_commas);
        }
        let ended = self.closing_semicolons > 0;
        let (spaced, by_commas) = if ended {
            (Layout::RowsAtSemicolons, Layout::CommasRowsAtSemicolons)
        } else {
            (Layout::Spaces, Layout::Commas)
        };
        if commas == 0 {
            return self.with_spaces(spaced);
        }
        if !decimal_commas {
            let tight_only = self.loose_commas == 0;
            return vec![with_decimal(
                if self.gaps > 0 && tight_only {
                    Layout::CommasAndSpaces
                } else {
                    by_commas
                },
                Point,
            )];
        }
        if self.gaps > 0 {
            vec![
                with_decimal(spaced, Comma),
                with_decimal(Layout::CommasAndSpaces, Point),
            ]
        } else {
            vec![with_decimal(by_commas, Point), with_decimal(spaced, Comma)]
        }
    }

    fn with_spaces(&self, layout: Layout) -> Vec<Settings> {
        let mut list = vec![of(layout)];
        if self.signed_imaginary > 0 {
            list.push(Settings {
                signed_words: Some(SignedWords::Joined),
                ..of(layout)
            });
        }
        list
    }

    fn with_semicolons(&self, decimal_commas: bool) -> Vec<Settings> {
        use DecimalMark::{Comma, Point};
        let mut list = Vec::new();
        if self.lines > 1 {
            list.push(of(Layout::Semicolons));
        }
        if self.loose_commas > 0 {
            list.push(with_decimal(Layout::CommasRowsAtSemicolons, Point));
        } else if self.gaps > 0 {
            let found = self.with_spaces(Layout::RowsAtSemicolons);
            list.extend(found.into_iter().map(|settings| Settings {
                decimal: decimal_commas.then_some(Comma),
                ..settings
            }));
        } else if decimal_commas {
            list.push(with_decimal(Layout::CommasRowsAtSemicolons, Point));
            list.push(with_decimal(Layout::Semicolons, Comma));
        } else if self.tight_commas > 0 {
            list.push(with_decimal(Layout::CommasRowsAtSemicolons, Point));
        }
        if self.lines == 1 && (list.is_empty() || self.gaps == 0 && self.loose_commas == 0) {
            list.push(if decimal_commas {
                with_decimal(Layout::Semicolons, Comma)
            } else {
                of(Layout::Semicolons)
            });
        }
        list
    }
}

/// Whether the byte at `at` stands between two digits.
fn between_digits(bytes: &[u8], at: usize) -> bool {
    at > 0 && bytes[at - 1].is_ascii_digit() && bytes.get(at + 1).is_some_and(u8::is_ascii_digit)
}

/// Whether two commas in one word can be the decimal marks of a real and an
/// imaginary part (`1,5+2,5i`).
fn complex_commas(word: &str, commas: usize) -> bool {
    commas == 2
        && plain::is_imaginary(word)
        && word
            .split(plain::SIGNS)
            .filter(|part| part.contains(','))
            .count()
            == 2
}

#[cfg(test)]
mod tests {
    use super::*;
    use DecimalMark::{Comma, Point};

    #[test]
    fn plain_texts_by_their_separators() {
        for (text, wanted) in [
            ("1 2\n3 4", vec![(Layout::Spaces, None)]),
            ("1\t2\n3\t4", vec![(Layout::Tabs, None)]),
            ("1,2,3\n4,5,6", vec![(Layout::Commas, Some(Point))]),
            ("1, 2\n3, 4", vec![(Layout::Commas, Some(Point))]),
            (
                "1,2\n3,4",
                vec![(Layout::Commas, Some(Point)), (Layout::Spaces, Some(Comma))],
            ),
            ("1.5,2\n3,4", vec![(Layout::Commas, Some(Point))]),
            (
                "1,5 2,5",
                vec![
                    (Layout::Spaces, Some(Comma)),
                    (Layout::CommasAndSpaces, Some(Point)),
                ],
            ),
            ("1.5,2 3,4", vec![(Layout::CommasAndSpaces, Some(Point))]),
            ("1;2\n3;4", vec![(Layout::Semicolons, None)]),
            ("1 2; 3 4", vec![(Layout::RowsAtSemicolons, None)]),
            ("1 2;\n3 4;", vec![(Layout::RowsAtSemicolons, None)]),
            (
                "1, 2; 3, 4",
                vec![(Layout::CommasRowsAtSemicolons, Some(Point))],
            ),
            (
                "1,5; 2,5",
                vec![
                    (Layout::CommasRowsAtSemicolons, Some(Point)),
                    (Layout::Semicolons, Some(Comma)),
                ],
            ),
            ("1;2;3", vec![(Layout::Semicolons, None)]),
            ("1 + 2i 3", vec![(Layout::Spaces, None)]),
            (
                "1 +2i 3",
                vec![(Layout::Spaces, None), (Layout::Spaces, None)],
            ),
        ] {
            let found: Vec<_> = candidates(text, &Settings::default())
                .into_iter()
                .map(|settings| (settings.layout.expect("recognised"), settings.decimal))
                .collect();
            assert_eq!(found, wanted, "{text:?}");
        }
    }
}
