//! Links: round trips, every truncation, every single change, bombs.

use super::*;

fn sample() -> ProblemDocument {
    ProblemDocument {
        title: "Skerrow Sound mast".into(),
        matrix: "2 -1 0\n-1 2 -1\n0 -1 2".into(),
        notes: "Höhe über NN: 12,5 m".into(),
        ..ProblemDocument::default()
    }
}

#[test]
fn a_link_carries_the_document() {
    let link = encode(&sample());
    assert_eq!(decode(&link), Ok(sample()));
    assert_eq!(decode(&format!("#{link}")), Ok(sample()));
    assert!(
        link.bytes()
            .all(|c| c.is_ascii_alphanumeric() || b"-_.".contains(&c)),
        "{link}"
    );
}

#[test]
fn a_link_of_a_hundred_kilobytes_opens() {
    // Digits that deflate cannot shorten much: a multiplicative sequence.
    let mut state = 1u64;
    let mut matrix = String::new();
    for _ in 0..12_000 {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        matrix.push_str(&(state >> 20).to_string());
        matrix.push(' ');
    }
    let document = ProblemDocument { matrix, ..sample() };
    let link = encode(&document);
    assert!(link.len() > 100_000, "{}", link.len());
    assert_eq!(decode(&link), Ok(document));
}

#[test]
fn a_link_cut_anywhere_is_refused() {
    let link = encode(&sample());
    for end in 0..link.len() {
        let found = decode(&link[..end]);
        match found {
            Err(LinkError::NotOurs) => assert_eq!(end, 0),
            Err(LinkError::Truncated { .. } | LinkError::Corrupt) => {}
            other => panic!("{end} characters of {link}: {other:?}"),
        }
    }
}

#[test]
fn every_single_change_is_refused() {
    let link = encode(&sample());
    let alphabet = "ABCXYZabcxyz0159-_.~%é";
    for (at, old) in link.char_indices() {
        for new in alphabet.chars().filter(|c| *c != old) {
            let changed = format!("{}{new}{}", &link[..at], &link[at + 1..]);
            assert!(decode(&changed).is_err(), "{changed}");
        }
        let without = format!("{}{}", &link[..at], &link[at + 1..]);
        assert!(decode(&without).is_err(), "{without}");
        let doubled = format!("{}{old}{}", &link[..at], &link[at..]);
        assert!(decode(&doubled).is_err(), "{doubled}");
    }
}

#[test]
fn links_of_other_kinds_have_their_own_sentences() {
    assert_eq!(decode(""), Err(LinkError::NotOurs));
    assert_eq!(decode("#section-2"), Err(LinkError::NotOurs));
    assert_eq!(
        decode("p2.5.abc.xyz"),
        Err(LinkError::UnknownVersion("2".into()))
    );
    assert!(decode("p1").is_err_and(|e| matches!(e, LinkError::Truncated { expected: None, .. })));
    for error in [
        LinkError::NotOurs,
        LinkError::UnknownVersion("7".into()),
        LinkError::Truncated {
            found: 3,
            expected: Some(9),
        },
        LinkError::Truncated {
            found: 0,
            expected: None,
        },
        LinkError::Corrupt,
        LinkError::TooLarge,
    ] {
        assert!(error.to_string().ends_with('.'), "{error}");
    }
}

fn sealed(packed: &[u8]) -> String {
    let data = URL_SAFE_NO_PAD.encode(packed);
    let length = data.len().to_string();
    let check = check(&length, &data);
    format!("{PREFIX}.{length}.{check}.{data}")
}

#[test]
fn a_bomb_is_not_unpacked() {
    let zeros = vec![b'0'; MAX_DOCUMENT + 1];
    let link = sealed(&compress_to_vec(&zeros, 1));
    assert!(link.len() < 1 << 21, "{}", link.len());
    assert_eq!(decode(&link), Err(LinkError::TooLarge));
}

#[test]
fn a_whole_link_with_foreign_content_is_refused() {
    assert!(matches!(
        decode(&sealed(b"not deflated")),
        Err(LinkError::Corrupt)
    ));
    let other = sealed(&compress_to_vec(b"{\"format\": \"other\"}", 6));
    assert!(matches!(decode(&other), Err(LinkError::Document(_))));
    let bytes = sealed(&compress_to_vec(&[0xff, 0xfe], 6));
    assert_eq!(decode(&bytes), Err(LinkError::Corrupt));
}
