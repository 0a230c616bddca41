//! Greatest matchings between stated and true things.

/// The place matched to each of `left` things, as many as possible, where
/// `fits` tells which pairs may be matched. Augmenting paths, O(left² · right).
pub(super) fn matching(
    left: usize,
    right: usize,
    fits: impl Fn(usize, usize) -> bool,
) -> Vec<Option<usize>> {
    let edges: Vec<Vec<usize>> = (0..left)
        .map(|l| (0..right).filter(|&r| fits(l, r)).collect())
        .collect();
    let mut owner: Vec<Option<usize>> = vec![None; right];
    for start in 0..left {
        let mut seen = vec![false; right];
        augment(start, &edges, &mut owner, &mut seen);
    }
    let mut matched = vec![None; left];
    for (r, l) in owner.iter().enumerate() {
        if let Some(l) = l {
            matched[*l] = Some(r);
        }
    }
    matched
}

/// Finds an augmenting path from `start` without recursion, so that long
/// lists cannot exhaust the stack.
fn augment(
    start: usize,
    edges: &[Vec<usize>],
    owner: &mut [Option<usize>],
    seen: &mut [bool],
) -> bool {
    // Each step of the path: the left thing and how many of its edges are used.
    let mut path: Vec<(usize, usize)> = vec![(start, 0)];
    let mut taken: Vec<usize> = Vec::new();
    while let Some((l, next)) = path.last_mut() {
        let Some(&r) = edges[*l].get(*next) else {
            path.pop();
            taken.pop();
            continue;
        };
        *next += 1;
        if seen[r] {
            continue;
        }
        seen[r] = true;
        taken.push(r);
        match owner[r] {
            Some(other) => path.push((other, 0)),
            None => {
                for ((l, _), r) in path.iter().zip(&taken) {
                    owner[*r] = Some(*l);
                }
                return true;
            }
        }
    }
    false
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn displaces_an_earlier_match_when_needed() {
        // 0 and 1 both fit 0; only 0 fits 1.
        let edges = [[true, true], [true, false]];
        assert_eq!(matching(2, 2, |l, r| edges[l][r]), [Some(1), Some(0)]);
    }

    #[test]
    fn leaves_over_what_cannot_be_matched() {
        let matched = matching(3, 2, |_, _| true);
        assert_eq!(matched.iter().flatten().count(), 2);
        assert_eq!(matching(1, 0, |_, _| true), [None]);
    }
}
