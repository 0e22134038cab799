// The 5-point plate of n x n unknowns, 4 on the diagonal and -1 beside it: the
// matrix of sample:plate:n, in rows or in columns as Matrix stores it.
#pragma once

#include <Eigen/SparseCore>

#include <vector>

template <class Matrix>
Matrix plate(int n) {
    std::vector<Eigen::Triplet<double>> t;
    t.reserve(5 * size_t(n) * n);
    for (int i = 0; i < n; i++)
        for (int j = 0; j < n; j++) {
            const int row = i * n + j;
            if (i > 0) t.emplace_back(row, row - n, -1.0);
            if (j > 0) t.emplace_back(row, row - 1, -1.0);
            t.emplace_back(row, row, 4.0);
            if (j + 1 < n) t.emplace_back(row, row + 1, -1.0);
            if (i + 1 < n) t.emplace_back(row, row + n, -1.0);
        }
    Matrix a(n * n, n * n);
    a.setFromTriplets(t.begin(), t.end());
    return a;
}
