"""Checks a certificate independently of the program that wrote it.

    python check.py certificate.json

The typed problem is read as exact numbers; nothing is taken from the
certificate but the claims themselves and X, which only makes the elimination
well conditioned. For each eigenvalue k the number of eigenvalues below
`lower` must be less than k, and below `upper` at least k, both by inertia in
ball arithmetic (python-flint). The ends are moved outward by a thousandth of
the width, so that an eigenvalue at an end is decided too: what is confirmed is
that interval.

Prints one line; exit code 0 if all is confirmed, 1 if a claim is refuted, 2 if
something stays undecided.
"""

import json
import sys

from flint import acb, acb_mat, arb, fmpq

from exact import ball, cell, double, rational
from inertia import Pencil, precision, shifted_out

#: Beyond this order only some of the eigenvalues are counted: each costs n^3/3
#: ball operations.
FULL_ORDER = 40


def vectors_of(certificate, order):
    """X as balls, or the identity if it is no matrix of finite doubles."""
    columns = certificate["vectors"]
    try:
        entries = [
            [acb(double(x[0]), double(x[1])) if isinstance(x, list) else acb(double(x)) for x in column]
            for column in columns
        ]
        if len(entries) == order and all(len(column) == order for column in entries):
            return acb_mat(entries).transpose()
    except ValueError:
        pass
    return acb_mat([[acb(int(i == j)) for j in range(order)] for i in range(order)])


def number(text):
    """A decimal bound as a ball."""
    exact = rational(text)
    return arb(fmpq(exact.numerator, exact.denominator))


def check(certificate, bits=None):
    """The refuted and the undecided claims, as two lists of sentences."""
    order = len(certificate["matrix"])
    claims = certificate["eigenvalues"]
    longest = max([len(text) for claim in claims for text in (claim["lower"], claim["upper"])], default=20)
    precision(bits or 400 + 8 * longest)
    matrix = acb_mat([[cell(value) for value in row] for row in certificate["matrix"]])
    metric = certificate.get("metric")
    if metric is not None:
        metric = acb_mat([[cell(value) for value in row] for row in metric])
    pencil = Pencil(matrix, metric, vectors_of(certificate, order))
    refuted, undecided = [], []
    if metric is not None and claims and not pencil.metric_is_positive():
        undecided.append("the metric is not proven positive definite")
    step = 1 if order <= FULL_ORDER else order // 10
    for claim in claims[::step]:
        index = claim["index"]
        lower, upper = shifted_out(number(claim["lower"]), number(claim["upper"]))
        below, reached = pencil.count_below(lower), pencil.count_below(upper)
        for count, wrong, name in ((below, below is not None and below >= index, "lower"),
                                   (reached, reached is not None and reached < index, "upper")):
            if count is None:
                undecided.append(f"eigenvalue {index}: {name} {claim[name]}")
            elif wrong:
                refuted.append(f"eigenvalue {index}: {name} {claim[name]}, count {count}")
    return refuted, undecided


def main():
    with open(sys.argv[1], encoding="utf-8") as file:
        certificate = json.load(file)
    refuted, undecided = check(certificate)
    for sentence in refuted:
        print("refuted:", sentence)
    for sentence in undecided:
        print("undecided:", sentence)
    if not refuted and not undecided:
        print(f"confirmed: {len(certificate['eigenvalues'])} enclosures")
    return 1 if refuted else 2 if undecided else 0


if __name__ == "__main__":
    sys.exit(main())
