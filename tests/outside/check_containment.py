"""Containment of proven enclosures over random and hard matrices.

Each case is written as a problem document, proven by the program, and checked
by exact counts in ball arithmetic (python-flint, tests/certificate/check.py);
rational matrices are also held against the roots of their exact characteristic
polynomial. Families: random real and complex, pairs, graded, clustered (planted
gaps of 1e-14), exactly repeated, near overflow and underflow; Hilbert, Pascal,
Clement (also called Kac), Wilkinson W21+, Rosser.

    EIGENLEDGER_EXAMPLES=folder python check_containment.py [cases]
"""

import copy
import json
import os
import pathlib
import random
import subprocess
import sys
from fractions import Fraction
from math import comb

from flint import arb, fmpq, fmpq_mat

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent.parent / "certificate"))

from check import check, number  # noqa: E402
from inertia import precision  # noqa: E402

PROGRAM = pathlib.Path(os.environ["EIGENLEDGER_EXAMPLES"]) / "prove"

#: Cases besides the named matrices.
CASES = 240


def text(x):
    """A Fraction as a cell."""
    return str(x.numerator) if x.denominator == 1 else f"{x.numerator}/{x.denominator}"


def symmetric(order, entry):
    """Rows of cells from an entry function of (i, j), i >= j."""
    return [[entry(max(i, j), min(i, j)) for j in range(order)] for i in range(order)]


def decimal(source, exponent=0):
    return f"{source.randint(-999999, 999999)}e{exponent - 6}"


def random_real(source, order):
    cells = {}
    return symmetric(order, lambda i, j: cells.setdefault((i, j), decimal(source)))


def random_complex(source, order):
    re, im = random_real(source, order), random_real(source, order)

    def cell(i, j):
        if i == j:
            return re[i][j]
        sign = im[i][j] if i > j else (im[i][j][1:] if im[i][j].startswith("-") else "-" + im[i][j])
        return [re[i][j], sign]

    return [[cell(i, j) for j in range(order)] for i in range(order)]


def graded(source, order):
    cells = {}
    step = source.choice([1, 3, 7])
    return symmetric(order, lambda i, j: cells.setdefault((i, j), decimal(source, -step * (i + j))))


def scaled(source, order):
    cells = {}
    power = source.choice([-320, -305, -290, 250, 290, 300])
    return symmetric(order, lambda i, j: cells.setdefault((i, j), decimal(source, power)))


def householder_planted(source, order, values):
    """H D H for an exact rational reflector H: the eigenvalues are `values`."""
    v = [Fraction(source.randint(-5, 5) or 1) for _ in range(order)]
    norm = sum(x * x for x in v)

    def entry(i, j):
        # (I - 2vv'/norm) D (I - 2vv'/norm)
        total = values[i] if i == j else Fraction(0)
        total -= 2 * v[i] * v[j] * (values[i] + values[j]) / norm
        total += 4 * v[i] * v[j] * sum(d * x * x for d, x in zip(values, v)) / norm**2
        return text(total)

    return symmetric(order, entry), sorted(values)


def clustered(source, order):
    values = []
    while len(values) < order:
        base = Fraction(source.randint(-9, 9))
        values += [base + k * Fraction(1, 10**14) for k in range(source.randint(1, 3))]
    return householder_planted(source, order, values[:order])


def repeated(source, order):
    values = [Fraction(source.randint(-2, 2)) for _ in range(order)]
    return householder_planted(source, order, values)


def metric_for(source, order):
    """Diagonally dominant, graded at random."""
    grade = source.choice([0, 0, 2, 5])
    cells = {}

    def entry(i, j):
        value = 1000 * order if i == j else source.randint(-900, 900)
        return cells.setdefault((i, j), f"{value}e{-3 - grade * (i + j)}")

    return symmetric(order, entry)


def hilbert(order):
    return symmetric(order, lambda i, j: text(Fraction(1, i + j + 1)))


def pascal(order):
    return symmetric(order, lambda i, j: str(comb(i + j, i)))


def clement(order):
    return symmetric(order, lambda i, j: f"sqrt({i * (order - i)})" if i == j + 1 else "0")


def wilkinson(order):
    half = order // 2
    return symmetric(order, lambda i, j: str(abs(i - half)) if i == j else ("1" if i == j + 1 else "0"))


#: J. B. Rosser, C. Lanczos, M. R. Hestenes and W. Karush, J. Res. Natl. Bur.
#: Stand. 47 (1951).
ROSSER = [
    ["611", "196", "-192", "407", "-8", "-52", "-49", "29"],
    ["196", "899", "113", "-192", "-71", "-43", "-8", "-44"],
    ["-192", "113", "899", "196", "61", "49", "8", "52"],
    ["407", "-192", "196", "611", "8", "44", "59", "-23"],
    ["-8", "-71", "61", "8", "411", "-599", "208", "208"],
    ["-52", "-43", "49", "44", "-599", "411", "208", "208"],
    ["-49", "-8", "8", "59", "208", "208", "99", "-911"],
    ["29", "-44", "52", "-23", "208", "208", "-911", "99"],
]


def named():
    """Matrices by name, with known eigenvalues where they are rational."""
    for order in (3, 6, 12):
        yield f"Hilbert {order}", hilbert(order), None
        yield f"Pascal {order}", pascal(order), None
    for order in (4, 9, 20):
        yield f"Clement {order}", clement(order), [Fraction(2 * k - order + 1) for k in range(order)]
    yield "Wilkinson 21", wilkinson(21), None
    yield "Rosser", ROSSER, None


def cases(count):
    """Name, matrix, metric and known eigenvalues."""
    for name, matrix, known in named():
        yield name, matrix, None, known
    source = random.Random(1)
    families = [random_real, random_complex, graded, scaled, clustered, repeated]
    for case in range(count):
        family = families[case % len(families)]
        order = source.choice([1, 2, 3, 5, 8, 13])
        made = family(source, order)
        matrix, known = made if isinstance(made, tuple) else (made, None)
        pair = known is None and source.random() < 0.4
        metric = metric_for(source, order) if pair else None
        yield f"{family.__name__} {case}, order {order}{', pair' if pair else ''}", matrix, metric, known


def polynomial_counts(matrix, claims):
    """For rational cells: refuted claims by the exact characteristic polynomial."""
    try:
        exact = fmpq_mat([[_fraction(cell) for cell in row] for row in matrix])
    except (TypeError, ValueError):
        return []
    polynomial = exact.charpoly()
    roots = sorted((root.real for root, times in polynomial.complex_roots() for _ in range(times)),
                   key=lambda root: float(root.mid()))
    wrong = []
    for claim, root in zip(claims, roots):
        if root < number(claim["lower"]) or root > number(claim["upper"]):
            wrong.append(f"eigenvalue {claim['index']} of the characteristic polynomial: {root.str(40)}")
    return wrong


def _fraction(cell):
    value = Fraction(cell)
    return fmpq(value.numerator, value.denominator)


def run(document, options):
    """The program's certificate of a document."""
    finished = subprocess.run(
        [PROGRAM, "--certificate", *options], input=json.dumps(document), capture_output=True, text=True, check=False
    )
    if finished.returncode != 0:
        raise RuntimeError(f"exit code {finished.returncode}: {finished.stderr}")
    return json.loads(finished.stdout)


def document_of(matrix, metric=None):
    """A problem document."""
    document = {"format": "eigenledger problem", "version": 1, "matrix": matrix}
    if metric is not None:
        document["metric"] = metric
    return document


def wrong_in(certificate, matrix, metric, known):
    """What a certificate claims and is not so."""
    claims = certificate["eigenvalues"]
    if len(claims) != len(matrix):
        return [f"nothing is proven: {certificate['conditions']}"]
    refuted, undecided = check(certificate)
    # Ball arithmetic at this precision decides every end; one it cannot decide
    # would be a claim no one has checked.
    refuted += [f"undecided: {sentence}" for sentence in undecided]
    if metric is None:
        precision(400)
        refuted += polynomial_counts(matrix, claims)
    for claim, value in zip(claims, known or []):
        precision(600)
        exact = arb(fmpq(value.numerator, value.denominator))
        if exact < number(claim["lower"]) or exact > number(claim["upper"]):
            refuted.append(f"eigenvalue {claim['index']} is {value}")
    return refuted


def altered_claims_found_out():
    """The checker refutes a bound moved past the eigenvalue: sentences of what
    it let pass."""
    passed = []
    certificate = run(document_of(ROSSER), ["--level", "tight"])
    for at, claim in enumerate(certificate["eigenvalues"]):
        for end, other in (("lower", "upper"), ("upper", "lower")):
            altered = copy.deepcopy(certificate)
            step = Fraction(1, 10**9) * (1 if end == "lower" else -1)
            moved = Fraction(claim[other]) + step
            altered["eigenvalues"][at][end] = f"{moved.numerator}/{moved.denominator}"
            altered["eigenvalues"][at][other] = f"{(moved + step).numerator}/{(moved + step).denominator}"
            refuted, _ = check(altered)
            if not refuted:
                passed.append(f"eigenvalue {at + 1}: {end} past the eigenvalue was not noticed")
    return passed


def main():
    count = int(sys.argv[1]) if len(sys.argv) > 1 else CASES
    levels = (["--level", "quick"], ["--level", "tight"], ["--digits", "40"])
    failures, checked, failed = altered_claims_found_out(), 1, 0
    failed += bool(failures)
    named_count = sum(1 for _ in named())
    for at, (name, matrix, metric, known) in enumerate(cases(count)):
        document = document_of(matrix, metric)
        # Random cases at one level each, the named ones at all.
        for options in levels if at < named_count else [levels[at % 3]]:
            try:
                wrong = wrong_in(run(document, options), matrix, metric, known)
            except RuntimeError as error:
                wrong = [str(error)]
            checked += 1
            failed += bool(wrong)
            failures += [f"{name} {' '.join(options)}: {sentence}: {json.dumps(document)}" for sentence in wrong]
    for failure in failures:
        print("FAILED:", failure, file=sys.stderr)
    print(f"{checked - failed} passed, {failed} failed")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
