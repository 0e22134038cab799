"""Solves the 5-point plate of n x n unknowns with a right-hand side of ones
directly in SciPy. Prints the seconds of the set-up, those of the solve, 0
iterations, the entries of the factors over those of the matrix (nan if
unknown), and the true relative residual.

    scipy_solve.py N spsolve   as it comes, the set-up counted in the solve
    scipy_solve.py N splu      as it comes: columns ordered by COLAMD
    scipy_solve.py N mmd       minimum degree of A + A^T, diagonal pivots
"""

import sys
import time

import numpy as np
from scipy.sparse.linalg import splu, spsolve

from scipy_plate import plate

OPTIONS = {
    "splu": {},
    "mmd": dict(permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options=dict(SymmetricMode=True)),
}


def main():
    n, how = int(sys.argv[1]), sys.argv[2]
    a = plate(n).tocsc()
    b = np.ones(a.shape[0])
    start = time.monotonic()
    if how == "spsolve":
        ready = start
        x, fill = spsolve(a, b, use_umfpack=False), float("nan")
    else:
        factors = splu(a, **OPTIONS[how])
        ready = time.monotonic()
        x, fill = factors.solve(b), factors.nnz / a.nnz
    end = time.monotonic()
    residual = np.linalg.norm(b - a @ x) / np.linalg.norm(b)
    print(f"{ready - start:.9f} {end - ready:.9f} 0 {fill:.6f} {residual:.6e}")


main()
