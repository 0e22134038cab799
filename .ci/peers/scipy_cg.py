"""Seconds per iteration of SciPy's conjugate gradients on the 5-point plate of
n x n unknowns with a right-hand side of ones, without preconditioner: the same
work as the pairing cg+none.

    scipy_cg.py N ITERATIONS
"""

import sys
import time

import numpy as np
from scipy.sparse.linalg import cg

from scipy_plate import plate


def main():
    n = int(sys.argv[1]) if len(sys.argv) > 1 else 1000
    iterations = int(sys.argv[2]) if len(sys.argv) > 2 else 200
    a = plate(n)
    b = np.ones(a.shape[0])
    done = 0

    def count(_):
        nonlocal done
        done += 1

    start = time.monotonic()
    try:
        x, _ = cg(a, b, rtol=1e-14, maxiter=iterations, callback=count)
    except TypeError:  # the name of the tolerance before SciPy 1.12
        x, _ = cg(a, b, tol=1e-14, maxiter=iterations, callback=count)
    taken = time.monotonic() - start
    if done != iterations:
        sys.exit(f"scipy_cg: {done} iterations, not {iterations}")
    print(f"{taken / iterations:.9f} {np.linalg.norm(b - a @ x) / np.linalg.norm(b):.6e}")


main()
