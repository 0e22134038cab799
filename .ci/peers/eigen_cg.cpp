// Seconds per iteration of Eigen's conjugate gradients on the 5-point plate of
// n x n unknowns with a right-hand side of ones. The matrix is whole (Lower|
// Upper), its rows are shared by OpenMP, and there is no preconditioner: the
// same work as the pairing cg+none.
//
//   eigen_cg N ITERATIONS

#include <Eigen/IterativeLinearSolvers>
#include <Eigen/SparseCore>

#include <chrono>
#include <cstdio>
#include <cstdlib>
#include <vector>

using Matrix = Eigen::SparseMatrix<double, Eigen::RowMajor>;

static Matrix plate(int n) {
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

int main(int argc, char** argv) {
    const int n = argc > 1 ? std::atoi(argv[1]) : 1000;
    const int iterations = argc > 2 ? std::atoi(argv[2]) : 200;
    const Matrix a = plate(n);
    const Eigen::VectorXd b = Eigen::VectorXd::Ones(a.rows());

    Eigen::ConjugateGradient<Matrix, Eigen::Lower | Eigen::Upper, Eigen::IdentityPreconditioner> cg;
    cg.compute(a);
    cg.setTolerance(1e-14);
    cg.setMaxIterations(iterations);

    const auto start = std::chrono::steady_clock::now();
    const Eigen::VectorXd x = cg.solve(b);
    const std::chrono::duration<double> taken = std::chrono::steady_clock::now() - start;
    if (cg.iterations() != iterations) {
        std::fprintf(stderr, "eigen_cg: %ld iterations, not %d\n", long(cg.iterations()), iterations);
        return 1;
    }
    std::printf("%.9f %.6e\n", taken.count() / iterations, cg.error());
}
