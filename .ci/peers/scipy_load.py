"""Seconds that SciPy takes to load a symmetric Matrix Market file into whole
compressed rows, printed twice, with the entries, the sum of their bits modulo
2^64, and the peak memory in bytes, that of the process and what it was before.

    scipy_load.py FILE
"""

import resource
import sys
import time

import numpy as np
from scipy.io import mmread


def peak():
    return 1024 * resource.getrusage(resource.RUSAGE_SELF).ru_maxrss


def main():
    before = peak()
    start = time.monotonic()
    a = mmread(sys.argv[1]).tocsr()
    taken = time.monotonic() - start
    bits = a.data.view(np.uint64).sum(dtype=np.uint64)
    print(f"{taken:.6f} {taken:.6f} {a.nnz} {bits} {peak()} {before}")


main()
