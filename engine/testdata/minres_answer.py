"""Solves A x = ones with SciPy's minres and prints the SciPy version, the
iterations, the number the method stopped by and x, one a line."""
import contextlib
import io
import re
import sys

import numpy as np
import scipy
import scipy.io
import scipy.sparse.linalg as sl

path, tol = sys.argv[1], float(sys.argv[2])
a = scipy.io.mmread(path).tocsr()
b = np.ones(a.shape[0])
said = io.StringIO()
with contextlib.redirect_stdout(said):
    try:
        x, info = sl.minres(a, b, rtol=tol, show=True)
    except TypeError:  # the name of the option before SciPy 1.12
        x, info = sl.minres(a, b, tol=tol, show=True)


def number(name):
    return float(re.search(name + r"\s*=\s*([-+.0-9e]+)", said.getvalue()).group(1))


print("# SciPy", scipy.__version__)
print("# iterations", int(number("itn")))
print("# printed %.3e" % (number("rnorm") / (number("Anorm") * number("ynorm"))))
for v in x:
    print(repr(float(v)))
