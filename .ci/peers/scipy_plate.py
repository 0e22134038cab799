"""The 5-point plate of n x n unknowns, the matrix of sample:plate:n."""

import numpy as np
import scipy.sparse as sp


def plate(n):
    line = sp.diags([-np.ones(n - 1), 2 * np.ones(n), -np.ones(n - 1)], [-1, 0, 1])
    one = sp.identity(n)
    return (sp.kron(line, one) + sp.kron(one, line)).tocsr()
