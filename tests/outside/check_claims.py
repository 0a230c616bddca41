"""LAPACK's answers, through NumPy and SciPy, held against the proof as claims.

What LAPACK finds of a random matrix is claimed and must be confirmed; the same
with one digit altered must be refuted. Cells have two decimals; their doubles,
which LAPACK takes, are off by less than 1e-15.

Tolerances. Figures are claimed to ten digits after the point, entries at most
four in size. LAPACK's backward error, n u ||A|| at most, is below 1e-12 here, so that
a value is stated with +- 1e-9, and a vector with +- 1e-7 where its gap is at
least 1e-3. The altered digit stands at 1e-4 of a value and 1e-3 of a component:
far outside all of that, and inside the size of the figure.
"""

import json
import os
import subprocess
import sys
from pathlib import Path

import numpy as np
import scipy.linalg

EXAMPLE = Path(os.environ["EIGENLEDGER_EXAMPLES"]) / "judge"
RANDOM = np.random.default_rng(5)


def figure(x, places=10):
    """A number in plain text; a complex one as `1.5+2.5i`."""
    if np.iscomplexobj(x):
        return f"{x.real:.{places}f}{x.imag:+.{places}f}i"
    return f"{x:.{places}f}"


def exactly(x):
    """A double in digits that give it back."""
    real = repr(float(x.real))
    return f"{real}{float(x.imag):+}i" if np.iscomplexobj(x) else real


def rows(matrix, shown):
    return "\n".join(" ".join(shown(x) for x in row) for row in matrix)


def hermitian(order, is_complex):
    a = RANDOM.uniform(-4, 4, (order, order))
    if is_complex:
        a = a + 1j * RANDOM.uniform(-4, 4, (order, order))
    a = np.round(np.tril(a, -1), 2)
    return a + a.conj().T + np.diag(np.round(RANDOM.uniform(-4, 4, order), 2))


def metric_of(order):
    half = np.round(RANDOM.uniform(-0.3, 0.3, (order, order)), 2)
    return np.round(half + half.T + np.diag(np.full(order, 2.0 * order)), 2)


def claims_of(matrix, metric):
    """Pairs of a right claim and the same with one digit altered."""
    values, vectors = (
        np.linalg.eigh(matrix) if metric is None else scipy.linalg.eigh(matrix, metric)
    )
    order = len(values)
    at = int(RANDOM.integers(order))
    row = int(np.argmax(np.abs(vectors[:, at])))
    slip = values.copy()
    slip[at] += 1e-4
    bent = vectors.copy()
    bent[row, at] += 1e-3
    line = lambda xs: " ".join(figure(x) for x in xs)
    yield f"eigenvalues, ± 1e-9: {line(values)}", f"eigenvalues, ± 1e-9: {line(slip)}"
    yield (
        f"eigenvalue {at + 1}, ± 1e-9: {figure(values[at])}",
        f"eigenvalue {at + 1}, ± 1e-9: {figure(slip[at])}",
    )
    if min(np.diff(values), default=1.0) > 1e-3:
        yield (
            f"vector {at + 1}, ± 1e-7: {line(vectors[:, at])}",
            f"vector {at + 1}, ± 1e-7: {line(bent[:, at])}" if order > 1 else None,
        )
    head = " ".join(exactly(x) for x in values)
    wrong = " ".join(exactly(x) for x in slip)
    yield (
        f"output: {head}\n{rows(vectors, exactly)}",
        f"output: {wrong}\n{rows(vectors, exactly)}",
    )
    yield None, f"output: {head}\n{rows(bent, exactly)}"
    positive = int(np.sum(values > 0))
    yield f"positive: {positive}", f"positive: {(positive + 1) % (order + 1)}"
    if metric is None:
        trace = np.trace(matrix).real
        yield f"trace, ± 1e-9: {figure(trace)}", f"trace, ± 1e-9: {figure(trace + 1e-4)}"
        radius = np.max(np.abs(values))
        yield f"radius, ± 1e-9: {figure(radius)}", f"radius, ± 1e-9: {figure(radius + 1e-4)}"
        if not np.iscomplexobj(matrix) and order <= 12:
            determinant = float(np.linalg.det(matrix))
            size = 1e-9 * max(1.0, abs(determinant))
            yield (
                f"determinant, ± {size:.3e}: {determinant!r}",
                f"determinant, ± {size:.3e}: {determinant * (1 + 1e-4) + 1e-4!r}",
            )
    elif not np.iscomplexobj(matrix):
        factor = np.linalg.cholesky(metric)
        bad = factor.copy()
        bad[order - 1, 0] += 1e-3
        yield (
            f"cholesky, ± 1e-9:\n{rows(factor, figure)}",
            f"cholesky, ± 1e-9:\n{rows(bad, figure)}",
        )


def problems():
    for order in (2, 3, 4, 5, 6, 8, 12, 20, 40):
        for is_complex in (False, True):
            for _ in range(3 if order < 10 else 1):
                yield hermitian(order, is_complex), None
        if order <= 12:
            yield hermitian(order, False), metric_of(order)


def document(matrix, metric, claims):
    fields = {
        "format": "eigenledger problem",
        "version": 1,
        "matrix": rows(matrix, lambda x: figure(x, 2)),
        "claims": claims,
    }
    if metric is not None:
        fields["metric"] = rows(metric, lambda x: figure(x, 2))
    return fields


def main():
    documents, expected = [], []
    for matrix, metric in problems():
        claims, words = [], []
        for right, wrong in claims_of(matrix, metric):
            for text, word in ((right, "confirmed"), (wrong, "refuted")):
                if text is not None:
                    claims.append(text)
                    words.append(word)
        documents.append(document(matrix, metric, claims))
        expected.append(words)
    result = subprocess.run(
        [EXAMPLE], input=json.dumps(documents), capture_output=True, text=True, check=True
    )
    passed = failed = 0
    for given, words, answer in zip(documents, expected, json.loads(result.stdout), strict=True):
        lines = answer.get("lines", [])
        if len(lines) != len(words):
            failed += len(words)
            print("FAILED:", answer.get("trouble"), given, file=sys.stderr)
            continue
        for text, word, line in zip(given["claims"], words, lines):
            verdict = line["verdict"] or {}
            if verdict.get("word") == word:
                passed += 1
            else:
                failed += 1
                told = line["error"] or verdict.get("sentence")
                print(f"FAILED: {text}\n  is {verdict.get('word')}: {told}\n  of {given['matrix']}", file=sys.stderr)
    print(f"{passed} passed, {failed} failed")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
