"""LAPACK's divide and conquer natively, one thread, for orientation.

Standard input: a list of {"order": n, "complex": bool}; standard output: a
list in the same order of {"milliseconds": t, "spread": s, "samples": k,
"least": value}. The matrices are those of `../src/problems.rs`, random family.
"""

import os

# Read by the library when it is loaded, so it is set before the import.
for name in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[name] = "1"

import json
import sys
import time

import numpy

SAMPLE_SECONDS = 0.02
BUDGET_SECONDS = 0.7
FEWEST_SAMPLES = 5
MOST_SAMPLES = 31
WORD = (1 << 64) - 1


def thousandths(order):
    """The stream of `problems.rs`: xorshift64*, in thousandths."""
    state = 20_261_201 + order
    while True:
        state ^= state >> 12
        state ^= (state << 25) & WORD
        state ^= state >> 27
        yield (((state * 0x2545_F491_4F6C_DD1D) & WORD) >> 11) % 2000 - 1000


def matrix(order, is_complex):
    """The matrix of `problems.rs`, entry by entry."""
    stream = thousandths(order)
    full = numpy.zeros((order, order), dtype=complex if is_complex else float)
    for col in range(order):
        for row in range(col, order):
            entry = next(stream) / 1000
            if is_complex and row > col:
                entry = complex(entry, next(stream) / 1000)
            full[row, col] = entry
            full[col, row] = entry.conjugate()
    return full


def timed(full, count):
    started = time.perf_counter()
    for _ in range(count):
        values, _ = numpy.linalg.eigh(full)
    return time.perf_counter() - started, values[0]


def measured(order, is_complex):
    full = matrix(order, is_complex)
    count = 1
    while (elapsed := timed(full, count)[0]) < SAMPLE_SECONDS:
        count = max(count + 1, int(count * min(10, 1.3 * SAMPLE_SECONDS / elapsed)))
    samples = []
    while len(samples) < FEWEST_SAMPLES or (sum(samples) * count < BUDGET_SECONDS and len(samples) < MOST_SAMPLES):
        elapsed, least = timed(full, count)
        samples.append(elapsed / count)
    low, middle, high = (float(numpy.quantile(samples, share)) for share in (0.25, 0.5, 0.75))
    return {"milliseconds": middle * 1e3, "spread": (high - low) / middle, "samples": len(samples), "least": float(least)}


json.dump([measured(asked["order"], asked["complex"]) for asked in json.load(sys.stdin)], sys.stdout)
