"""Iterations of SciPy's cg on Matrix Market files, b = ones, relative
tolerance 1e-6, without and with the diagonal as preconditioner: one line a
run, "file pairing iterations"."""
import os
import sys

import numpy as np
import scipy.io
import scipy.sparse.linalg as sla

for path in sys.argv[1:]:
    a = scipy.io.mmread(path).tocsr()
    n = a.shape[0]
    b = np.ones(n)
    d = a.diagonal()
    for pairing, m in (("cg+none", None), ("cg+jacobi", sla.LinearOperator((n, n), matvec=lambda r: r / d))):
        count = [0]

        def one(_):
            count[0] += 1

        sla.cg(a, b, tol=1e-6, atol=0, maxiter=10 * n, M=m, callback=one)
        print(os.path.basename(path), pairing, count[0])
