"""Bars and beams from the handbooks, solved as pairs (K, M).

Uniform members of unit length, stiffness and mass per length, cut into N equal
elements with consistent mass matrices, whose entries are rational: they go over
as fractions, and what comes back is proven about exactly those.

Sources:
- Beam, clamped and free, as a continuum: beta L = 1.8751, 4.6941, 7.8548, lambda
  = beta^4; R. D. Blevins, Formulas for Natural Frequency and Mode Shape, table
  of single-span beams (from memory). They are the roots of cos x cosh x = -1,
  which ball arithmetic encloses here.
- The same beam with one element, omega = 3.533, 34.81, and with two, omega =
  3.518, 22.22, 75.16, 218.1: M. Petyt, Introduction to Finite Element Vibration
  Analysis, chapter on beams (from memory).
- Element matrices of beam and bar: the same book (from memory).
- Bar, fixed and free, of linear elements: lambda_k = 6 N^2 (1 - cos t)/(2 + cos t)
  with t = (2k - 1) pi/(2N); follows from the difference equation of the inner
  nodes, and is enclosed here in ball arithmetic.

No tolerance but the printed digits: a closed form must meet its enclosure, and
a stated figure must be what the enclosure rounds to. Conforming elements bound
each eigenvalue of the continuum from above (Rayleigh, Ritz).
"""

import json
import os
import subprocess
import sys
from fractions import Fraction
from pathlib import Path

from flint import arb, ctx, fmpq

EXAMPLE = Path(os.environ["EIGENLEDGER_EXAMPLES"]) / "prove"
ctx.prec = 200


def assembled(elements, stiffness, mass, free):
    """Global matrices of a chain of equal elements, its first node fixed."""
    order = free * (elements + 1)
    matrices = []
    for local in (stiffness, mass):
        whole = [[Fraction(0)] * order for _ in range(order)]
        for element in range(elements):
            for i in range(2 * free):
                for j in range(2 * free):
                    whole[free * element + i][free * element + j] += local[i][j]
        matrices.append([row[free:] for row in whole[free:]])
    return matrices


def beam(elements):
    """Clamped and free; deflection and slope at each node."""
    h = Fraction(1, elements)
    stiffness = [
        [12, 6 * h, -12, 6 * h],
        [6 * h, 4 * h**2, -6 * h, 2 * h**2],
        [-12, -6 * h, 12, -6 * h],
        [6 * h, 2 * h**2, -6 * h, 4 * h**2],
    ]
    mass = [
        [156, 22 * h, 54, -13 * h],
        [22 * h, 4 * h**2, 13 * h, -3 * h**2],
        [54, 13 * h, 156, -22 * h],
        [-13 * h, -3 * h**2, -22 * h, 4 * h**2],
    ]
    return assembled(
        elements,
        [[x / h**3 for x in row] for row in stiffness],
        [[x * h / 420 for x in row] for row in mass],
        free=2,
    )


def bar(elements):
    """Fixed and free; displacement at each node."""
    h = Fraction(1, elements)
    return assembled(elements, [[1 / h, -1 / h], [-1 / h, 1 / h]], [[h / 3, h / 6], [h / 6, h / 3]], free=1)


def proven(stiffness, mass):
    """Proven bounds of each eigenvalue, ascending, as exact fractions."""
    text = lambda matrix: "\n".join(" ".join(str(x) for x in row) for row in matrix)
    document = {
        "format": "eigenledger problem",
        "version": 1,
        "matrix": text(stiffness),
        "metric": text(mass),
    }
    result = subprocess.run(
        [EXAMPLE], input=json.dumps(document), capture_output=True, text=True, check=True
    )
    return [
        (Fraction(value["lower"]), Fraction(value["upper"]))
        for value in json.loads(result.stdout)["eigenvalues"]
    ]


def ball(lower, upper):
    """A ball that holds the interval."""
    ends = [arb(fmpq(x.numerator, x.denominator)) for x in (lower, upper)]
    return ends[0].union(ends[1])


def rounds_to(value, stated):
    """Whether every point of the ball, rounded, has the stated digits."""
    places = len(stated.partition(".")[2])
    half = arb(fmpq(1, 2 * 10**places))
    centre = arb(fmpq(int(stated.replace(".", "")), 10**places))
    return bool(centre - half < value) and bool(value < centre + half)


def clamped_root(near):
    """The root of cos x cosh x = -1 near a point, by Newton's interval step."""
    f = lambda x: x.cos() * x.cosh() + 1
    slope = lambda x: x.cos() * x.sinh() - x.sin() * x.cosh()
    x = arb(near, "1e-3")
    for _ in range(8):
        middle = arb(x.mid())
        x = x.intersection(middle - f(middle) / slope(x))
    return x


def faults():
    """Each check's name with None, or what was found instead."""
    continuum = [("1.8751", 1.8751), ("4.6941", 4.6941), ("7.8548", 7.8548)]
    for elements, figures in ((1, ["3.533", "34.81"]), (2, ["3.518", "22.22", "75.16", "218.1"])):
        for stated, (lower, upper) in zip(figures, proven(*beam(elements)), strict=True):
            omega = ball(lower, upper).sqrt()
            yield f"beam of {elements}: omega {stated}", None if rounds_to(omega, stated) else omega
    # 24 elements: the third beta L is then high by 3e-5, below its last digit.
    bounds = proven(*beam(24))
    for (stated, near), (lower, upper) in zip(continuum, bounds):
        root = clamped_root(near)
        found = ball(lower, upper).root(4)
        yield f"continuum: {stated}", None if rounds_to(root, stated) else root
        yield f"beam of 24: beta L {stated}", None if rounds_to(found, stated) else found
        yield f"beam of 24: above the continuum's {stated}", None if found > root else found
    for elements in (1, 2, 5, 16):
        for k, (lower, upper) in enumerate(proven(*bar(elements)), 1):
            t = arb.pi() * (2 * k - 1) / (2 * elements)
            closed = 6 * elements**2 * (1 - t.cos()) / (2 + t.cos())
            met = closed.overlaps(ball(lower, upper))
            yield f"bar of {elements}: lambda {k}", None if met else (lower, upper)


def main():
    passed = failed = 0
    for name, found in faults():
        passed += found is None
        failed += found is not None
        if found is not None:
            print(f"FAILED: {name}, found {found}", file=sys.stderr)
    print(f"{passed} passed, {failed} failed")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
