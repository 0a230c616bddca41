//! Character references of HTML, those that tables of numbers hold.

/// Appends the text with its references decoded; unknown ones stay as written.
pub(crate) fn decode_into(text: &str, out: &mut String) {
    let mut rest = text;
    while let Some(at) = rest.find('&') {
        out.push_str(&rest[..at]);
        rest = &rest[at..];
        // The longest name below has seven letters.
        let end = rest.bytes().take(12).position(|byte| byte == b';');
        match end.and_then(|end| decode(&rest[1..end]).map(|c| (end, c))) {
            Some((end, c)) => {
                out.push(c);
                rest = &rest[end + 1..];
            }
            None => {
                out.push('&');
                rest = &rest[1..];
            }
        }
    }
    out.push_str(rest);
}

fn decode(name: &str) -> Option<char> {
    if let Some(number) = name.strip_prefix('#') {
        let code = match number.strip_prefix(['x', 'X']) {
            Some(hex) => u32::from_str_radix(hex, 16),
            None => number.parse(),
        };
        return code.ok().and_then(char::from_u32);
    }
    Some(match name {
        "amp" => '&',
        "lt" => '<',
        "gt" => '>',
        "quot" => '"',
        "apos" => '\'',
        "nbsp" => '\u{A0}',
        "thinsp" => '\u{2009}',
        "minus" => '\u{2212}',
        "ndash" => '\u{2013}',
        "plusmn" => '±',
        "times" => '×',
        "divide" => '÷',
        "middot" => '·',
        "sdot" => '⋅',
        "radic" => '√',
        "pi" => 'π',
        "sup2" => '²',
        "sup3" => '³',
        "frasl" => '/',
        "shy" => '\u{AD}',
        "zwnj" => '\u{200C}',
        "zwj" => '\u{200D}',
        "lrm" => '\u{200E}',
        "rlm" => '\u{200F}',
        _ => return None,
    })
}

#[cfg(test)]
mod tests {
    #[test]
    fn known_references_are_decoded_and_others_kept() {
        for (text, wanted) in [
            ("1&plusmn;2", "1±2"),
            ("&#x2212;3&#59;", "\u{2212}3;"),
            ("&unknown; & &amp;lt;", "&unknown; & &lt;"),
            ("&#xFFFFFFFF;&#;&", "&#xFFFFFFFF;&#;&"),
            ("é&é;", "é&é;"),
        ] {
            let mut out = String::new();
            super::decode_into(text, &mut out);
            assert_eq!(out, wanted, "{text:?}");
        }
    }
}
