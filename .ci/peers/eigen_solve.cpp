// Solves the 5-point plate of n x n unknowns with a right-hand side of ones in
// Eigen, to a residual of 1e-8 where the method iterates. Prints the seconds of
// the set-up, those of the solve, iterations, the entries of the factors over
// those of the matrix, and the true relative residual.
//
//   eigen_solve N ic               conjugate gradients, IncompleteCholesky
//   eigen_solve N ilut TAU F       BiCGSTAB, IncompleteLUT, the rows as they are
//   eigen_solve N ilut-amd TAU F   the same in Eigen's own order of the rows
//   eigen_solve N llt              SimplicialLLT

#include "plate.hpp"

#include <Eigen/IterativeLinearSolvers>
#include <Eigen/SparseCholesky>

#include <chrono>
#include <cstdio>
#include <cstdlib>
#include <cstring>

using Clock = std::chrono::steady_clock;
using Rows = Eigen::SparseMatrix<double, Eigen::RowMajor>; // shared by OpenMP in products
using Columns = Eigen::SparseMatrix<double>;
using Vector = Eigen::VectorXd;

static double since(Clock::time_point start) {
    return std::chrono::duration<double>(Clock::now() - start).count();
}

template <class Matrix>
static int print(const Matrix& a, const Vector& x, double setup, double solve, long iterations, double fill) {
    const Vector b = Vector::Ones(a.rows());
    const double residual = (b - a * x).norm() / b.norm();
    std::printf("%.9f %.9f %ld %.6f %.6e\n", setup, solve, iterations, fill, residual);
    return residual < 1e-6 ? 0 : 1;
}

// fill of two triangles that share the diagonal, from the entries of one.
static double twice(long entries, long n, long nonzeros) { return double(2 * entries - n) / double(nonzeros); }

// ILUT is Eigen's, in its own order of the rows or in the order they have.
struct ILUT : Eigen::IncompleteLUT<double> {
    long entries() const { return long(m_lu.nonZeros()); }
};

struct NaturalILUT : ILUT {
    template <class Matrix>
    NaturalILUT& compute(const Matrix& a) {
        m_P.setIdentity(a.rows());
        m_Pinv = m_P;
        m_analysisIsOk = m_isInitialized = true;
        factorize(a);
        return *this;
    }
    // Without the passes that would apply the identity.
    Vector solve(const Vector& b) const {
        Vector x = m_lu.triangularView<Eigen::UnitLower>().solve(b);
        m_lu.triangularView<Eigen::Upper>().solveInPlace(x);
        return x;
    }
};

static int ic(int n) {
    const Rows a = plate<Rows>(n);
    const Vector b = Vector::Ones(a.rows());
    Eigen::ConjugateGradient<Rows, Eigen::Lower | Eigen::Upper,
                             Eigen::IncompleteCholesky<double, Eigen::Lower, Eigen::NaturalOrdering<int>>> cg;
    cg.setTolerance(1e-8);
    const auto start = Clock::now();
    cg.compute(a);
    const double setup = since(start);
    const auto begun = Clock::now();
    const Vector x = cg.solve(b);
    const double solve = since(begun);
    const long entries = long(cg.preconditioner().matrixL().nonZeros());
    return print(a, x, setup, solve, long(cg.iterations()), twice(entries, long(a.rows()), long(a.nonZeros())));
}

template <class Preconditioner>
static int ilut(int n, double tau, int fill) {
    const Rows a = plate<Rows>(n);
    const Vector b = Vector::Ones(a.rows());
    Eigen::BiCGSTAB<Rows, Preconditioner> solver;
    solver.setTolerance(1e-8);
    solver.preconditioner().setDroptol(tau);
    solver.preconditioner().setFillfactor(fill);
    const auto start = Clock::now();
    solver.compute(a);
    const double setup = since(start);
    const auto begun = Clock::now();
    const Vector x = solver.solve(b);
    const double solve = since(begun);
    const double entries = double(solver.preconditioner().entries());
    return print(a, x, setup, solve, long(solver.iterations()), entries / double(a.nonZeros()));
}

static int llt(int n) {
    const Columns a = plate<Columns>(n);
    const Vector b = Vector::Ones(a.rows());
    Eigen::SimplicialLLT<Columns> factors;
    const auto start = Clock::now();
    factors.compute(a);
    const double setup = since(start);
    if (factors.info() != Eigen::Success) return 1;
    const auto begun = Clock::now();
    const Vector x = factors.solve(b);
    const double solve = since(begun);
    const long entries = long(factors.matrixL().nestedExpression().nonZeros());
    return print(a, x, setup, solve, 0, twice(entries, long(a.rows()), long(a.nonZeros())));
}

int main(int argc, char** argv) {
    const int n = argc > 2 ? std::atoi(argv[1]) : 0;
    const char* method = n > 0 ? argv[2] : "";
    if (!std::strcmp(method, "ic")) return ic(n);
    if (!std::strcmp(method, "llt")) return llt(n);
    if (argc == 5 && !std::strcmp(method, "ilut")) return ilut<NaturalILUT>(n, std::atof(argv[3]), std::atoi(argv[4]));
    if (argc == 5 && !std::strcmp(method, "ilut-amd")) return ilut<ILUT>(n, std::atof(argv[3]), std::atoi(argv[4]));
    return 2;
}
