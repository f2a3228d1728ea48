"""numpy's eigenpairs of the matrices of eigen.rs, on one thread: seconds and size, one a line."""

import os

os.environ["OPENBLAS_NUM_THREADS"] = "1"

import time

import numpy

for size, rounds in [(300, 5), (1000, 2)]:
    i = numpy.arange(size, dtype=numpy.int64)
    products, sums = numpy.multiply.outer(i, i), numpy.add.outer(i, i)
    matrix = (104729 * products + 7919 * sums) % 65521 / 65521 - 0.5
    best = float("inf")
    for _ in range(rounds):
        start = time.perf_counter()
        numpy.linalg.eigh(matrix)
        best = min(best, time.perf_counter() - start)
    print(f"{best:e} {size}")
