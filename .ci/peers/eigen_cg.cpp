// Seconds per iteration of Eigen's conjugate gradients on the 5-point plate of
// n x n unknowns with a right-hand side of ones. The matrix is whole (Lower|
// Upper), its rows are shared by OpenMP, and there is no preconditioner: the
// same work as the pairing cg+none.
//
//   eigen_cg N ITERATIONS

#include "plate.hpp"

#include <Eigen/IterativeLinearSolvers>

#include <chrono>
#include <cstdio>
#include <cstdlib>

using Matrix = Eigen::SparseMatrix<double, Eigen::RowMajor>;

int main(int argc, char** argv) {
    const int n = argc > 1 ? std::atoi(argv[1]) : 1000;
    const int iterations = argc > 2 ? std::atoi(argv[2]) : 200;
    const Matrix a = plate<Matrix>(n);
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
