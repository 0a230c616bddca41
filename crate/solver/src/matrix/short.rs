//! Copies of mostly short runs of doubles.
//!
//! In wasm a copy whose length is not known to the compiler leaves the module,
//! which takes as long as copying some twenty doubles; a small problem makes
//! dozens of copies of a few.

/// Runs longer than this are copied by the library.
const SHORT: usize = 24;

/// Copies `source` onto `target`; both have the same length.
#[inline(always)]
pub(crate) fn copy(target: &mut [f64], source: &[f64]) {
    if source.len() > SHORT || source.len() != target.len() {
        target.copy_from_slice(source);
        return;
    }
    let (targets, target_rest) = target.as_chunks_mut::<4>();
    let (sources, source_rest) = source.as_chunks::<4>();
    for (target, source) in targets.iter_mut().zip(sources) {
        *target = *source;
    }
    match (target_rest, source_rest) {
        ([x], [a]) => *x = *a,
        ([x, y], [a, b]) => (*x, *y) = (*a, *b),
        ([x, y, z], [a, b, c]) => (*x, *y, *z) = (*a, *b, *c),
        _ => {}
    }
}

/// Appends `source`.
#[inline(always)]
pub(crate) fn append(target: &mut Vec<f64>, source: &[f64]) {
    if source.len() > SHORT {
        target.extend_from_slice(source);
        return;
    }
    target.reserve(source.len());
    let (sources, rest) = source.as_chunks::<4>();
    for source in sources {
        target.extend_from_slice(source);
    }
    match *rest {
        [a] => target.push(a),
        [a, b] => target.extend_from_slice(&[a, b]),
        [a, b, c] => target.extend_from_slice(&[a, b, c]),
        _ => {}
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_length_is_copied_whole() {
        for length in 0..2 * SHORT {
            let source: Vec<f64> = (0..length).map(|k| k as f64 + 0.5).collect();
            let mut target = vec![0.0; length];
            copy(&mut target, &source);
            assert_eq!(target, source, "length {length}");
            let mut target = vec![-1.0];
            append(&mut target, &source);
            assert_eq!(
                (target[0], &target[1..]),
                (-1.0, &source[..]),
                "length {length}"
            );
        }
    }
}
