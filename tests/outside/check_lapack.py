"""Eigenpairs against LAPACK, through NumPy and SciPy.

Values: numpy.linalg.eigvalsh for the standard problem and scipy.linalg.eigh for
the pair (A, M). Vectors are not compared, since LAPACK's sign and phase are its
own; they are checked by their residuals and their orthogonality.

Tolerances. A backward stable method gives the eigenvalues of A + E with
||E|| <= p(n) u ||A||, and Weyl's inequality moves each by at most ||E||; p(n) is
10 n here, on each of the two sides. Through the Cholesky factor of the metric
the errors grow with its condition number at most (G. H. Golub, C. F. Van Loan,
Matrix Computations, section on the symmetric-definite problem, from memory).
"""

import json
import os
import subprocess
import sys
from pathlib import Path

import numpy as np
import scipy.linalg

U = 2.0**-53


def random_hermitian(rng, order, is_complex):
    a = rng.standard_normal((order, order))
    if is_complex:
        a = a + 1j * rng.standard_normal((order, order))
    # Not the mean: a + a^H is Hermitian to the last bit.
    return a + a.conj().T


def planted(rng, values, is_complex):
    """Q diag(values) Q^H, made Hermitian to the last bit by its lower triangle."""
    order = len(values)
    g = rng.standard_normal((order, order))
    if is_complex:
        g = g + 1j * rng.standard_normal((order, order))
    q, _ = np.linalg.qr(g)
    a = (q * values) @ q.conj().T
    lower = np.tril(a, -1)
    return lower + lower.conj().T + np.diag(a.diagonal().real)


def cases(rng):
    for is_complex in (False, True):
        kind = "complex" if is_complex else "real"
        for order in (1, 2, 3, 5, 10, 31, 64, 120):
            yield f"random {kind} of order {order}", random_hermitian(rng, order, is_complex), None
        for order in (4, 12, 40):
            graded = 10.0 ** -np.arange(order, dtype=float)
            yield f"graded {kind} of order {order}", planted(rng, graded, is_complex), None
            near = np.repeat(np.arange(1.0, order // 2 + 1), 2) + np.tile([0.0, 1e-13], order // 2)
            yield f"near-repeated {kind} of order {order}", planted(rng, near, is_complex), None
            same = np.ones(order)
            same[0] = -3.0
            yield f"repeated {kind} of order {order}", planted(rng, same, is_complex), None
        for order in (2, 5, 20, 60):
            metric = planted(rng, np.linspace(1.0, 50.0, order), is_complex)
            yield f"pair, {kind}, of order {order}", random_hermitian(rng, order, is_complex), metric
    # Families on which general libraries have been reported to go wrong.
    for order in (20, 33):
        adjacency = np.zeros((order, order))
        for k in range(0, order - 7, 7):
            adjacency[k, k + 7] = adjacency[k + 7, k] = 1.0
        yield f"0/1 adjacency with many zero rows, order {order}", adjacency, None
    yield "equal diagonal, tiny equal off-diagonals", np.full((6, 6), 0.01) + 0.99 * np.eye(6), None
    yield "zero", np.zeros((5, 5)), None


def planes(a):
    given = {"re": a.real.tolist()}
    if np.iscomplexobj(a):
        given["im"] = a.imag.tolist()
    return given


def matrix(given):
    a = np.array(given["re"])
    return a + 1j * np.array(given["im"]) if "im" in given else a


def ask(problems):
    program = Path(os.environ["EIGENLEDGER_EXAMPLES"]) / "solve"
    text = json.dumps([{"matrix": planes(a), "metric": None if m is None else planes(m)} for _, a, m in problems])
    done = subprocess.run([program], input=text, capture_output=True, text=True, check=True)
    return json.loads(done.stdout)


def faults(a, m, answer):
    """Every way in which an answer is wrong, as (what, size, allowed)."""
    if "error" in answer:
        yield answer["error"], np.inf, 0.0
        return
    order = len(a)
    metric = np.eye(order) if m is None else m
    values = np.ldexp(np.array(answer["values"]), answer["scale"])
    reference = np.linalg.eigvalsh(a) if m is None else scipy.linalg.eigh(a, m, eigvals_only=True)
    norm_a, norm_m = np.linalg.norm(a, 2), np.linalg.norm(metric, 2)
    smallest = np.linalg.eigvalsh(metric)[0]
    condition = norm_m / smallest
    per_unit = 10 * order * U * condition
    allowed = 2 * per_unit * norm_a / smallest
    yield "values", np.abs(values - reference).max(), allowed
    # The metric was scaled by a power of two before the vectors were made unit.
    x = matrix(answer["vectors"])
    lengths = np.sqrt((x.conj() * (metric @ x)).sum(axis=0).real)
    x = x / lengths
    residual = np.linalg.norm(a @ x - (metric @ x) * values, 2)
    largest = np.abs(reference).max()
    yield "residual", residual, per_unit * (norm_a + largest * norm_m) * np.linalg.norm(x, 2)
    yield "orthogonality", np.linalg.norm(x.conj().T @ metric @ x - np.eye(order), 2), per_unit


def main():
    problems = list(cases(np.random.default_rng(20261201)))
    answers = ask(problems)
    passed = failed = 0
    for (name, a, m), answer in zip(problems, answers, strict=True):
        wrong = [fault for fault in faults(a, m, answer) if not fault[1] <= fault[2]]
        passed += not wrong
        failed += bool(wrong)
        for what, size, allowed in wrong:
            print(f"{name}: {what} off by {size:.3g}, allowed {allowed:.3g}\n{planes(a)}")
    print(f"{passed} passed, {failed} failed")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
