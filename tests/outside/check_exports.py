"""The files we write, read by SciPy, NumPy and Python's own readers.

The three formats must give the same doubles; SciPy's reader of Matrix Market
files and NumPy's of text are the outside references. What they read must be
eigenpairs of the matrix, and the tridiagonal form must have its eigenvalues.

Tolerance: 30 n u ||A||, above the backward error of a stable method and the
rounding of the check itself (the threshold of LAPACK's own tests, LAPACK Working
Note 41, from memory).
"""

import csv
import json
import os
import subprocess
import sys
import tempfile
from fractions import Fraction
from pathlib import Path

import numpy as np
import scipy.io

EXAMPLE = Path(os.environ["EIGENLEDGER_EXAMPLES"]) / "export"
RANDOM = np.random.default_rng(31)
UNIT = 2.0**-53


def matrices():
    for order in (1, 2, 5, 17):
        for is_complex in (False, True):
            a = RANDOM.integers(-999, 1000, (order, order)) / 8.0
            if is_complex:
                a = a + 1j * RANDOM.integers(-999, 1000, (order, order)) / 8.0
            yield a + a.conj().T


def cell(x):
    return f"{x.real!r}{x.imag:+}i" if isinstance(x, complex) else repr(x)


def written(matrix, folder):
    text = "\n".join(" ".join(cell(x) for x in row) for row in matrix.tolist())
    document = {"format": "eigenledger problem", "version": 1, "matrix": text}
    subprocess.run(
        [EXAMPLE, folder], input=json.dumps(document), check=True, capture_output=True, text=True
    )


def read_csv(path):
    with open(path, newline="", encoding="utf-8") as file:
        return list(csv.DictReader(file))


def complex_columns(table):
    """The matrix of a table of vectors, its first column the row's name."""
    names = [name for name in table[0] if name != "row"]
    rows = np.array([[float(row[name]) for name in names] for row in table])
    if names[0].endswith("_re"):
        return rows[:, 0::2] + 1j * rows[:, 1::2]
    return rows


def faults(matrix, folder):
    """What does not hold of the files in the folder, as sentences."""
    order = len(matrix)
    values = scipy.io.mmread(folder / "eigenvalues.mtx").ravel()
    vectors = scipy.io.mmread(folder / "eigenvectors.mtx")
    form = scipy.io.mmread(folder / "tridiagonal.mtx", spmatrix=False).toarray()
    table = read_csv(folder / "eigenvalues.csv")
    whole = json.loads((folder / "eigenpairs.json").read_text(encoding="utf-8"))
    in_json = np.array(whole["eigenvectors"], dtype=float)
    if in_json.ndim == 3:
        in_json = in_json[..., 0] + 1j * in_json[..., 1]
    checks = {
        "values of CSV": [float(row["approximate"]) for row in table] == values.tolist(),
        "values of JSON": [float(v["approximate"]) for v in whole["eigenvalues"]] == values.tolist(),
        "vectors of CSV": np.array_equal(complex_columns(read_csv(folder / "eigenvectors.csv")), vectors),
        "vectors of JSON": np.array_equal(in_json.T, vectors),
    }
    bands = read_csv(folder / "tridiagonal.csv")
    diagonal = [float(row["diagonal"]) for row in bands]
    off = [float(row["off_diagonal"]) for row in bands if row["off_diagonal"]]
    checks["tridiagonal form of CSV"] = diagonal == np.diag(form).tolist() and off == np.diag(form, -1).tolist()
    size = np.linalg.norm(matrix)
    allowed = 30 * order * UNIT * size
    residual = np.linalg.norm(matrix @ vectors - vectors * values)
    checks[f"residual {residual:.3g} within {allowed:.3g}"] = residual <= allowed
    moved = np.max(np.abs(np.linalg.eigvalsh(form) - values))
    checks[f"tridiagonal form's values off by {moved:.3g}, allowed {allowed:.3g}"] = moved <= allowed
    proven = [(Fraction(row["lower"]), Fraction(row["upper"])) for row in table]
    checks["ends in order"] = all(lower <= upper for lower, upper in proven)
    return [name for name, holds in checks.items() if not holds], len(checks)


def main():
    passed = failed = 0
    for matrix in matrices():
        with tempfile.TemporaryDirectory() as folder:
            written(matrix, folder)
            wrong, count = faults(matrix, Path(folder))
        passed += count - len(wrong)
        failed += len(wrong)
        for name in wrong:
            print(f"FAILED: {name}, of {matrix.tolist()}", file=sys.stderr)
    print(f"{passed} passed, {failed} failed")
    return failed > 0


if __name__ == "__main__":
    sys.exit(main())
