"""Counts of eigenvalues below a number, in ball arithmetic.

By Sylvester's law of inertia the number of eigenvalues of (A, M), M positive
definite, below s is the number of negative pivots of X*(A - sM)X for any
nonsingular X. The pivots are balls; one that contains zero decides nothing.
With all pivots away from zero the product is nonsingular, and so is X.
"""

from flint import acb, acb_mat, arb, ctx


def hermitian_pivots(rows):
    """Signs (-1, 0 undecided, 1) of the pivots of a Hermitian matrix of balls,
    eliminated largest diagonal entry first."""
    size = len(rows)
    rows = [list(row) for row in rows]
    left = list(range(size))
    signs = []
    while left:
        p = max(left, key=lambda i: float(abs(rows[i][i].real.mid())))
        pivot = rows[p][p].real
        left.remove(p)
        if pivot > 0:
            signs.append(1)
        elif pivot < 0:
            signs.append(-1)
        else:
            return signs + [0] * (len(left) + 1)
        factors = {i: rows[i][p] / pivot for i in left}
        for i in left:
            factor = factors[i]
            row = rows[i]
            for j in left:
                if j <= i:
                    row[j] -= factor * rows[p][j]
                    if j < i:
                        rows[j][i] = row[j].conjugate()
        # The pivot row of what is left is refreshed by symmetry above.
    return signs


class Pencil:
    """X*AX and X*MX in balls, for counts at any number."""

    def __init__(self, matrix, metric, vectors):
        adjoint = vectors.conjugate().transpose() if hasattr(vectors, "conjugate") else vectors.transpose()
        self.order = matrix.nrows()
        self.matrix = adjoint * matrix * vectors
        self.metric = adjoint * (metric * vectors if metric is not None else vectors)

    def metric_is_positive(self):
        """Whether X*MX, hence M, is proven positive definite."""
        return all(sign == 1 for sign in hermitian_pivots(_rows(self.metric)))

    def count_below(self, number):
        """The number of eigenvalues below `number`, or None if undecided."""
        signs = hermitian_pivots(_rows(self.matrix - self.metric * number))
        return None if 0 in signs else signs.count(-1)


def _rows(matrix):
    return [[acb(matrix[i, j]) for j in range(matrix.ncols())] for i in range(matrix.nrows())]


def build(cells):
    """A matrix of complex balls from rows of balls."""
    return acb_mat(cells)


def precision(bits):
    """Sets the working precision of all balls."""
    ctx.prec = bits


def shifted_out(lower, upper):
    """Two numbers just outside a closed interval given by balls, so that an
    eigenvalue at an end gives no zero pivot."""
    width = upper - lower
    nudge = width.mid() / 1024 + (abs(lower).mid() + abs(upper).mid()) * arb(2) ** (32 - ctx.prec)
    if not nudge > 0:
        nudge = arb(2) ** (-ctx.prec)
    return lower - nudge, upper + nudge
