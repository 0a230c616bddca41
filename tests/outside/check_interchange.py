"""Files written by SciPy and NumPy in every variant, read by us and compared
exactly; and our plain text read back by NumPy.

SciPy's writer and reader of Matrix Market files and NumPy's of .npy and text
files are the outside references. Comparison is by exact fractions: a number in
a text file is the decimal that stands there, a number in a .npy file is the
binary number that stands there.
"""

import io
import itertools
import json
import os
import pathlib
import subprocess
import sys
import tempfile
from fractions import Fraction

import numpy
import scipy.io
import scipy.sparse

EXAMPLE = pathlib.Path(os.environ["EIGENLEDGER_EXAMPLES"]) / "read"
RANDOM = numpy.random.default_rng(20260)

passed = 0
failed = 0


def check(holds, message):
    global passed, failed
    if holds:
        passed += 1
    else:
        failed += 1
        print("FAILED:", message, file=sys.stderr)


def exact(number):
    """The exact value of a NumPy scalar."""
    if isinstance(number, (numpy.bool_, bool)):
        return Fraction(int(number))
    if isinstance(number, numpy.longdouble):
        mantissa, exponent = numpy.frexp(number)
        scaled = numpy.ldexp(mantissa, 64)
        return Fraction(int(scaled)) * Fraction(2) ** (int(exponent) - 64)
    if isinstance(number, numpy.floating):
        return Fraction(float(number))
    return Fraction(int(number))


def parts(number):
    if isinstance(number, numpy.complexfloating):
        return [exact(number.real), exact(number.imag)]
    return [exact(number), Fraction(0)]


def ours(paths):
    """What we read, by file."""
    result = subprocess.run(
        [str(EXAMPLE), *map(str, paths)], check=True, capture_output=True, text=True
    )
    return [json.loads(line) for line in result.stdout.splitlines()]


def compare(reading, wanted, rows, cols):
    """`wanted` is the list of [re, im] fractions, row by row."""
    name = pathlib.Path(reading["file"]).name
    check(reading["usable"], f"{name}: {reading['diagnostics']}")
    check((reading["rows"], reading["cols"]) == (rows, cols), f"{name}: size")
    found = [cell and [Fraction(part) for part in cell] for cell in reading["cells"]]
    wrong = [(k, a, b) for k, (a, b) in enumerate(zip(found, wanted)) if a != b]
    check(len(found) == len(wanted) and not wrong, f"{name}: {wrong[:3]}")


def matrices(dtype, shape):
    """Numbers of every size that the type holds."""
    kind = numpy.dtype(dtype).kind
    if kind == "b":
        return RANDOM.integers(0, 2, shape).astype(dtype)
    if kind in "iu":
        info = numpy.iinfo(dtype)
        return RANDOM.integers(info.min, info.max, shape, dtype=dtype, endpoint=True)
    span = 4 if numpy.dtype(dtype).itemsize in (2,) else 30
    values = RANDOM.standard_normal(shape) * 10.0 ** RANDOM.integers(-span, span, shape)
    if kind == "c":
        values = values + 1j * RANDOM.standard_normal(shape)
    return values.astype(dtype)


def check_npy(folder):
    cases = []
    types = ["?", "i1", "i2", "i4", "i8", "u1", "u2", "u4", "u8", "f2", "f4", "f8", "c8", "c16"]
    if numpy.finfo(numpy.longdouble).nmant == 63:
        types += ["f16", "c32"]
    shapes = [(3, 3), (1, 4), (4, 1), (5,), (2, 3), ()]
    for dtype, order, layout, shape in itertools.product(types, "<>", "CF", shapes):
        kind = numpy.dtype(dtype).newbyteorder(order) if dtype != "?" else numpy.dtype("?")
        values = numpy.asarray(matrices(dtype, shape)).astype(kind)
        values = numpy.asarray(values, order=layout)
        path = folder / f"{dtype.strip('?') or 'b'}-{'le' if order == '<' else 'be'}-{layout}-{'x'.join(map(str, shape)) or 'scalar'}.npy"
        numpy.save(path, values)
        cases.append((path, values))
    for version in [(1, 0), (2, 0), (3, 0)]:
        values = matrices("f8", (3, 3))
        path = folder / f"version-{version[0]}.npy"
        with open(path, "wb") as file:
            numpy.lib.format.write_array(file, values, version=version)
        cases.append((path, values))
    edge = numpy.array([[5e-324, 1.7976931348623157e308], [-0.0, 2.2250738585072014e-308]])
    path = folder / "edges.npy"
    numpy.save(path, edge)
    cases.append((path, edge))
    for reading, (_, values) in zip(ours([path for path, _ in cases]), cases):
        table = numpy.atleast_2d(values)
        wanted = [parts(number) for number in table.ravel()]
        compare(reading, wanted, *table.shape)


def check_matrix_market(folder):
    dense = {
        "real": matrices("f8", (4, 4)),
        "integer": RANDOM.integers(-9, 9, (4, 4)),
        "complex": matrices("c16", (4, 4)),
    }
    cases = []
    for field, values in dense.items():
        symmetric = values + values.T
        hermitian = values + values.conj().T
        variants = [("general", values), ("symmetric", symmetric), ("hermitian", hermitian)]
        for symmetry, matrix in variants:
            if symmetry == "hermitian" and field != "complex":
                continue
            sparse = scipy.sparse.coo_array(numpy.where(RANDOM.random((4, 4)) < 0.5, matrix, 0))
            if symmetry == "symmetric":
                sparse = scipy.sparse.coo_array(sparse + sparse.T)
            if symmetry == "hermitian":
                sparse = scipy.sparse.coo_array(sparse + sparse.conj().T)
            for form, written in [("array", matrix), ("coordinate", sparse)]:
                path = folder / f"{form}-{field}-{symmetry}.mtx"
                scipy.io.mmwrite(path, written, comment="a remark\nof two lines", field=field, symmetry=symmetry)
                cases.append(path)
    pattern = scipy.sparse.coo_array(numpy.eye(4, k=1) + numpy.eye(4, k=-1))
    for symmetry in ["general", "symmetric"]:
        path = folder / f"coordinate-pattern-{symmetry}.mtx"
        scipy.io.mmwrite(path, pattern, field="pattern", symmetry=symmetry)
        cases.append(path)
    for reading, path in zip(ours(cases), cases):
        # SciPy writes enough digits to find each double again, so its own
        # reader gives the doubles and ours the decimals: equal once rounded.
        again = scipy.io.mmread(path, spmatrix=False)
        again = again if isinstance(again, numpy.ndarray) else again.toarray()
        name = path.name
        check(reading["usable"], f"{name}: {reading['diagnostics']}")
        found = [
            cell and complex(*(float(Fraction(part)) for part in cell))
            for cell in reading["cells"]
        ]
        check(found == [complex(x) for x in again.ravel()], f"{name}: {found} {again}")
    skew = numpy.array([[0.0, -1.0], [1.0, 0.0]])
    path = folder / "skew.mtx"
    scipy.io.mmwrite(path, skew, symmetry="skew-symmetric")
    (reading,) = ours([path])
    check(not reading["usable"], "skew-symmetric is refused")
    check("skew-symmetric" in reading["diagnostics"][0]["sentence"], "and the reason given")


def check_text(folder):
    """Text that NumPy writes, and ours that NumPy reads."""
    values = matrices("f8", (4, 4))
    cases = []
    for name, keywords in [
        ("spaces", {}),
        ("commas", {"delimiter": ","}),
        ("semicolons", {"delimiter": ";"}),
        ("tabs", {"delimiter": "\t"}),
        ("header", {"header": "a remark"}),
        ("windows", {"newline": "\r\n"}),
    ]:
        path = folder / f"{name}.txt"
        numpy.savetxt(path, values, fmt="%.17g", **keywords)
        cases.append(path)
    printed = folder / "printed.txt"
    with numpy.printoptions(floatmode="unique"):
        printed.write_text(repr(values))
    cases.append(printed)
    as_json = folder / "nested.json"
    as_json.write_text(json.dumps(values.tolist()))
    cases.append(as_json)
    for reading, path in zip(ours(cases), cases):
        check(reading["usable"], f"{path.name}: {reading['diagnostics']}")
        found = [float(Fraction(re)) for re, _ in reading["cells"]]
        check(found == values.ravel().tolist(), f"{path.name}: {found}")
    for path in cases:
        result = subprocess.run(
            [str(EXAMPLE), "--plain", str(path)], check=True, capture_output=True, text=True
        )
        delimiter = {"commas": ",", "semicolons": ";", "tabs": "\t"}.get(path.stem)
        text = result.stdout
        if path.suffix == ".json":
            back = numpy.array(json.loads(text))
        else:
            back = numpy.loadtxt(io.StringIO(text), delimiter=delimiter)
        check(numpy.array_equal(back, values), f"{path.name} written in full: {text}")


def main():
    with tempfile.TemporaryDirectory() as folder:
        folder = pathlib.Path(folder)
        check_npy(folder)
        check_matrix_market(folder)
        check_text(folder)
    print(f"{passed} passed, {failed} failed")
    sys.exit(1 if failed else 0)


if __name__ == "__main__":
    main()
