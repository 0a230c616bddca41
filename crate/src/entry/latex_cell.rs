//! One cell of LaTeX as plain mathematics: `\frac{1}{2}` is `((1)/(2))`.

use super::clean::is_line_break;
use super::latex::command_at;

/// Groups nested deeper than this are left as they are, and refused later.
const DEPTH: usize = 16;

/// The dots in a cell that stand for cells left out.
pub(crate) fn dots(text: &str) -> Option<&'static str> {
    ["\\dots", "\\cdots", "\\vdots", "\\ddots", "\\ldots"]
        .into_iter()
        .find(|dots| text.contains(dots))
}

/// The cell in plain mathematics; commands that are not known stay as written.
pub(crate) fn plain(text: &str) -> String {
    if !text.contains(['\\', '{', '}', '~', '$', '%']) || !is_balanced(text) {
        return text.to_owned();
    }
    let mut out = String::with_capacity(text.len());
    convert(text, 0, &mut out);
    out.trim().to_owned()
}

/// Whether every group is closed; looking for the end of a group then never
/// runs through the text in vain.
fn is_balanced(text: &str) -> bool {
    let mut depth = 0i64;
    let mut escaped = false;
    for byte in text.bytes() {
        match byte {
            b'{' if !escaped => depth += 1,
            b'}' if !escaped => depth -= 1,
            _ => {}
        }
        if depth < 0 {
            return false;
        }
        escaped = byte == b'\\' && !escaped;
    }
    depth == 0
}

fn convert(text: &str, depth: usize, out: &mut String) {
    if depth > DEPTH {
        out.push_str(text);
        return;
    }
    let mut rest = text;
    while let Some(c) = rest.chars().next() {
        match c {
            '\\' => {
                let name = command_at(rest, 0, rest.len());
                rest = command(name, &rest[name.len()..], depth, out);
            }
            // A comma in braces of its own is a decimal comma set without space.
            '{' if rest.starts_with("{,}") => {
                out.push('.');
                rest = &rest[3..];
            }
            '{' => match group(rest) {
                Some((inner, after)) => {
                    braced(inner, depth, out);
                    rest = after;
                }
                None => {
                    out.push('{');
                    rest = &rest[1..];
                }
            },
            '%' => {
                let end = rest.find(is_line_break).unwrap_or(rest.len());
                rest = &rest[end..];
            }
            '$' => rest = &rest[1..],
            '~' => {
                out.push(' ');
                rest = &rest[1..];
            }
            _ => {
                out.push(c);
                rest = &rest[c.len_utf8()..];
            }
        }
    }
}

/// A group: after `_` it belongs to a name, else it stands in parentheses.
fn braced(inner: &str, depth: usize, out: &mut String) {
    if out.ends_with('_') {
        convert(inner, depth + 1, out);
    } else if !inner.trim().is_empty() {
        out.push('(');
        convert(inner, depth + 1, out);
        out.push(')');
    }
}

/// Writes what a command prints; gives back the text after its arguments.
fn command<'a>(name: &str, after: &'a str, depth: usize, out: &mut String) -> &'a str {
    match name {
        "\\frac" | "\\dfrac" | "\\tfrac" | "\\nicefrac" | "\\sfrac" => {
            let Some((top, tail)) = argument(after) else {
                return keep(name, after, out);
            };
            let Some((bottom, tail)) = argument(tail) else {
                return keep(name, after, out);
            };
            out.push_str("((");
            convert(top, depth + 1, out);
            out.push_str(")/(");
            convert(bottom, depth + 1, out);
            out.push_str("))");
            tail
        }
        "\\sqrt" if !after.trim_start().starts_with('[') => {
            let Some((inner, tail)) = argument(after) else {
                return keep(name, after, out);
            };
            out.push_str("sqrt(");
            convert(inner, depth + 1, out);
            out.push(')');
            tail
        }
        "\\mathrm" | "\\mathbf" | "\\mathit" | "\\mathsf" | "\\textbf" | "\\textit"
        | "\\textrm" | "\\text" | "\\operatorname" | "\\mbox" | "\\boldsymbol" | "\\phantom"
        | "\\num" => {
            let Some((inner, tail)) = argument(after) else {
                return keep(name, after, out);
            };
            if name != "\\phantom" {
                convert(inner, depth + 1, out);
            }
            tail
        }
        "\\left" | "\\right" | "\\big" | "\\Big" | "\\bigl" | "\\bigr" => after,
        "\\cdot" | "\\times" | "\\ast" => sign("*", after, out),
        "\\div" => sign("/", after, out),
        "\\pm" => sign(" ± ", after, out),
        "\\lbrace" | "\\lbrack" | "\\{" => sign("(", after, out),
        "\\rbrace" | "\\rbrack" | "\\}" => sign(")", after, out),
        "\\imath" | "\\i" => sign("i", after, out),
        "\\jmath" | "\\j" => sign("j", after, out),
        "\\," | "\\;" | "\\:" | "\\!" | "\\ " | "\\>" | "\\quad" | "\\qquad" | "\\displaystyle"
        | "\\textstyle" | "\\limits" | "\\centering" => after,
        "\\-" => after,
        _ => match greek(name) {
            Some(letter) => letter_name(letter, after, out),
            None => keep(name, after, out),
        },
    }
}

fn keep<'a>(name: &str, after: &'a str, out: &mut String) -> &'a str {
    sign(name, after, out)
}

fn sign<'a>(text: &str, after: &'a str, out: &mut String) -> &'a str {
    out.push_str(text);
    after
}

/// A Greek letter; the blank that only ends the command's name goes.
fn letter_name<'a>(letter: char, after: &'a str, out: &mut String) -> &'a str {
    out.push(letter);
    after.strip_prefix(' ').unwrap_or(after)
}

fn greek(name: &str) -> Option<char> {
    Some(match name {
        "\\alpha" => 'α',
        "\\beta" => 'β',
        "\\gamma" => 'γ',
        "\\delta" => 'δ',
        "\\epsilon" | "\\varepsilon" => 'ε',
        "\\zeta" => 'ζ',
        "\\eta" => 'η',
        "\\theta" | "\\vartheta" => 'θ',
        "\\kappa" => 'κ',
        "\\lambda" => 'λ',
        "\\mu" => 'μ',
        "\\nu" => 'ν',
        "\\xi" => 'ξ',
        "\\pi" => 'π',
        "\\rho" | "\\varrho" => 'ρ',
        "\\sigma" => 'σ',
        "\\tau" => 'τ',
        "\\phi" | "\\varphi" => 'φ',
        "\\chi" => 'χ',
        "\\psi" => 'ψ',
        "\\omega" => 'ω',
        "\\Gamma" => 'Γ',
        "\\Delta" => 'Δ',
        "\\Theta" => 'Θ',
        "\\Lambda" => 'Λ',
        "\\Phi" => 'Φ',
        "\\Psi" => 'Ψ',
        "\\Omega" => 'Ω',
        _ => return None,
    })
}

/// The argument of a command: a group, or one character or command.
fn argument(text: &str) -> Option<(&str, &str)> {
    let text = text.trim_start();
    match text.chars().next()? {
        '{' => group(text),
        '\\' => {
            let length = command_at(text, 0, text.len()).len();
            Some(text.split_at(length))
        }
        c => Some(text.split_at(c.len_utf8())),
    }
}

/// The inside of the group that begins here, and what follows it.
fn group(text: &str) -> Option<(&str, &str)> {
    let mut depth = 0usize;
    let mut escaped = false;
    for (at, byte) in text.bytes().enumerate() {
        match byte {
            b'{' if !escaped => depth += 1,
            b'}' if !escaped => {
                depth = depth.checked_sub(1)?;
                if depth == 0 {
                    return Some((&text[1..at], &text[at + 1..]));
                }
            }
            _ => {}
        }
        escaped = byte == b'\\' && !escaped;
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn commands_become_plain_mathematics() {
        for (text, wanted) in [
            (r"\frac{1}{2}", "((1)/(2))"),
            (r"-\tfrac12", "-((1)/(2))"),
            (r"\frac{\sqrt{3}}{2} i", "((sqrt(3))/(2)) i"),
            (r"2\pi", "2π"),
            (r"k_{12} \cdot x^{2}", "k_12 * x^(2)"),
            (r"1{,}5", "1.5"),
            (r"3 - 4\mathrm{i}", "3 - 4i"),
            (r"\left( a \right)", "( a )"),
            (r"\sqrt[3]{2}", r"\sqrt[3](2)"),
            (r"12.5 \pm 0.1", "12.5  ±  0.1"),
            (r"\unknown{1}", r"\unknown(1)"),
            (r"\frac{1", r"\frac{1"),
            (r"\omega_{0}", "ω_0"),
        ] {
            assert_eq!(plain(text), wanted, "{text}");
        }
    }

    #[test]
    fn deep_nesting_is_left_as_it_is() {
        let deep = "\\sqrt{".repeat(5000) + "2" + &"}".repeat(5000);
        assert!(plain(&deep).contains("\\sqrt{"));
    }
}
