//! How rows of cells make a matrix.

use super::settings::{Shape, Wanted};

/// The shapes that rows of these widths can have, most natural first. Empty
/// when they make no matrix of the kind wanted.
///
/// Rows of 1, 2, …, n cells are a lower triangle and rows of n, …, 1 an upper
/// one. Two rows of n and n−1 cells are a diagonal with the off-diagonal beside
/// it, in either order, and three rows of n−1, n, n−1 have it on both sides; at
/// n = 2 the first of these is an upper triangle as well, and both are given.
/// One run of cells may stand on the diagonal, or be a whole matrix or its
/// lower triangle written row by row.
pub(crate) fn possible(widths: &[usize], wanted: Wanted) -> Vec<Shape> {
    let rows = widths.len();
    if rows == 0 {
        return Vec::new();
    }
    let widest = widths.iter().copied().max().unwrap_or(0);
    let rectangle = widths.iter().all(|&width| width == widths[0]);
    match wanted {
        Wanted::List => {
            let run = rows == 1 || widest == 1;
            return if run { vec![Shape::Full] } else { Vec::new() };
        }
        Wanted::Any => {
            return if rectangle {
                vec![Shape::Full]
            } else {
                Vec::new()
            }
        }
        Wanted::Square | Wanted::Metric => {}
    }
    if rectangle && widths[0] == rows {
        return vec![Shape::Full];
    }
    if rows == 1 || widest == 1 {
        return runs(rows.max(widest), wanted);
    }
    let mut shapes = Vec::new();
    if widths
        .iter()
        .enumerate()
        .all(|(row, &width)| width == row + 1)
    {
        shapes.push(Shape::LowerTriangle);
    }
    if widths
        .iter()
        .enumerate()
        .all(|(row, &width)| width == rows - row)
    {
        shapes.push(Shape::UpperTriangle);
    }
    let tridiagonal = match *widths {
        [first, second] => first == second + 1 || (second == first + 1 && first > 1),
        [below, diagonal, above] => below == above && diagonal == below + 1,
        _ => false,
    };
    if tridiagonal {
        shapes.push(Shape::Tridiagonal);
    }
    shapes
}

/// The shapes that one run of cells can have.
fn runs(cells: usize, wanted: Wanted) -> Vec<Shape> {
    let mut shapes = vec![Shape::Diagonal];
    if wanted == Wanted::Metric {
        return shapes;
    }
    if square_root(cells).is_some() {
        shapes.push(Shape::PackedRows);
    }
    if triangle_side(cells).is_some() {
        shapes.push(Shape::PackedLower);
    }
    shapes
}

/// n with n² = `cells`.
pub(crate) fn square_root(cells: usize) -> Option<usize> {
    let root = cells.isqrt();
    (root * root == cells).then_some(root)
}

/// n with n(n+1)/2 = `cells`.
pub(crate) fn triangle_side(cells: usize) -> Option<usize> {
    let side = (8 * cells + 1).isqrt().saturating_sub(1) / 2;
    (side * (side + 1) / 2 == cells).then_some(side)
}

/// Rows and columns of the matrix that rows of these widths make in this shape.
pub(crate) fn size(shape: Shape, widths: &[usize]) -> (usize, usize) {
    let rows = widths.len();
    let widest = widths.iter().copied().max().unwrap_or(0);
    let cells: usize = widths.iter().sum();
    let order = match shape {
        Shape::Full => return (rows, widest),
        Shape::LowerTriangle | Shape::UpperTriangle => rows,
        Shape::Tridiagonal => widest,
        Shape::Diagonal => cells,
        Shape::PackedRows => square_root(cells).unwrap_or(0),
        Shape::PackedLower => triangle_side(cells).unwrap_or(0),
    };
    (order, order)
}

/// Where a cell of the matrix comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Source {
    /// The raw cell in this row and column.
    Given(usize, usize),
    /// The complex conjugate of that raw cell.
    Mirrored(usize, usize),
    /// Nothing: zero by the shape.
    Zero,
}

/// Where the matrix cell (`row`, `col`) stands among rows of these widths.
pub(crate) fn source(shape: Shape, widths: &[usize], row: usize, col: usize) -> Source {
    let packed = |index: usize| {
        if widths.len() == 1 {
            (0, index)
        } else {
            (index, 0)
        }
    };
    let given = |(row, col)| Source::Given(row, col);
    match shape {
        Shape::Full => Source::Given(row, col),
        Shape::LowerTriangle if row >= col => Source::Given(row, col),
        Shape::LowerTriangle => Source::Mirrored(col, row),
        Shape::UpperTriangle if row <= col => Source::Given(row, col - row),
        Shape::UpperTriangle => Source::Mirrored(col, row - col),
        Shape::Tridiagonal => tridiagonal(widths, row, col),
        Shape::Diagonal if row == col => given(packed(row)),
        Shape::Diagonal => Source::Zero,
        Shape::PackedRows => {
            let order = widths.iter().sum::<usize>().isqrt();
            given(packed(row * order + col))
        }
        Shape::PackedLower => {
            let (low, high) = (row.max(col), row.min(col));
            let (raw_row, raw_col) = packed(low * (low + 1) / 2 + high);
            if row >= col {
                Source::Given(raw_row, raw_col)
            } else {
                Source::Mirrored(raw_row, raw_col)
            }
        }
    }
}

/// With one list beside the diagonal it is the one below it, as the lower
/// triangle is what a Hermitian matrix is given by here.
fn tridiagonal(widths: &[usize], row: usize, col: usize) -> Source {
    let diagonal = match widths {
        [first, second] => usize::from(second > first),
        _ => 1,
    };
    let near = row.min(col);
    if row == col {
        Source::Given(diagonal, row)
    } else if row.abs_diff(col) > 1 {
        Source::Zero
    } else if widths.len() == 3 {
        Source::Given(if row > col { 0 } else { 2 }, near)
    } else if row > col {
        Source::Given(1 - diagonal, near)
    } else {
        Source::Mirrored(1 - diagonal, near)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn shapes_by_widths() {
        use Shape::*;
        for (widths, wanted) in [
            (vec![3, 3, 3], vec![Full]),
            (vec![1], vec![Full]),
            (vec![1, 2, 3], vec![LowerTriangle]),
            (vec![1, 2], vec![LowerTriangle]),
            (vec![3, 2, 1], vec![UpperTriangle]),
            (vec![2, 1], vec![UpperTriangle, Tridiagonal]),
            (vec![5, 4], vec![Tridiagonal]),
            (vec![4, 5], vec![Tridiagonal]),
            (vec![4, 5, 4], vec![Tridiagonal]),
            (vec![5], vec![Diagonal]),
            (vec![4], vec![Diagonal, PackedRows]),
            (vec![6], vec![Diagonal, PackedLower]),
            (vec![36], vec![Diagonal, PackedRows, PackedLower]),
            (vec![1, 1, 1, 1, 1], vec![Diagonal]),
            (vec![2, 2, 2], vec![]),
            (vec![1, 2, 2], vec![]),
        ] {
            assert_eq!(possible(&widths, Wanted::Square), wanted, "{widths:?}");
        }
    }

    #[test]
    fn every_given_cell_is_used_and_lies_in_its_row() {
        for widths in [
            vec![3, 3, 3],
            vec![1, 2, 3],
            vec![3, 2, 1],
            vec![2, 1],
            vec![4, 3],
            vec![3, 4],
            vec![3, 4, 3],
            vec![36],
            vec![1; 6],
        ] {
            for shape in possible(&widths, Wanted::Square) {
                let (rows, cols) = size(shape, &widths);
                let mut used: Vec<Vec<bool>> =
                    widths.iter().map(|&width| vec![false; width]).collect();
                for row in 0..rows {
                    for col in 0..cols {
                        match source(shape, &widths, row, col) {
                            Source::Given(r, c) | Source::Mirrored(r, c) => used[r][c] = true,
                            Source::Zero => {}
                        }
                    }
                }
                assert!(
                    used.concat().into_iter().all(|used| used),
                    "{shape:?} of {widths:?}: {used:?}"
                );
            }
        }
    }
}
