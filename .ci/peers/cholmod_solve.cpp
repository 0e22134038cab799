// Solves the 5-point plate of n x n unknowns with a right-hand side of ones by
// CHOLMOD's supernodal factorisation. Prints the seconds of analysis and
// factorisation, those of the solve, 0 iterations, the entries of both factors
// over those of the matrix, and the true relative residual.
//
//   cholmod_solve N default   the ordering that CHOLMOD chooses
//   cholmod_solve N nesdis    nested dissection of CHOLMOD's own, over METIS
//   cholmod_solve N metis     METIS
//   cholmod_solve N amd       approximate minimum degree

#include <suitesparse/cholmod.h>

#include <chrono>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <cstring>

using Clock = std::chrono::steady_clock;

static double since(Clock::time_point start) {
    return std::chrono::duration<double>(Clock::now() - start).count();
}

// lower returns the lower triangle of the plate, column by column.
static cholmod_sparse* lower(int n, cholmod_common* c) {
    const size_t order = size_t(n) * n;
    cholmod_sparse* a = cholmod_allocate_sparse(order, order, 3 * order, 1, 1, -1, CHOLMOD_REAL, c);
    if (!a) std::exit(1);
    int* start = static_cast<int*>(a->p);
    int* row = static_cast<int*>(a->i);
    double* value = static_cast<double*>(a->x);
    int k = 0;
    const auto put = [&](int i, double v) { row[k] = i, value[k++] = v; };
    for (int i = 0; i < n; i++)
        for (int j = 0; j < n; j++) {
            const int column = i * n + j;
            start[column] = k;
            put(column, 4);
            if (j + 1 < n) put(column + 1, -1);
            if (i + 1 < n) put(column + n, -1);
        }
    start[order] = k;
    return a;
}

static double norm(const cholmod_dense* v) {
    const double* x = static_cast<const double*>(v->x);
    double s = 0;
    for (size_t i = 0; i < v->nrow; i++) s += x[i] * x[i];
    return std::sqrt(s);
}

int main(int argc, char** argv) {
    const int n = argc == 3 ? std::atoi(argv[1]) : 0;
    if (n <= 0) return 2;
    cholmod_common common, *c = &common;
    cholmod_start(c);
    c->supernodal = CHOLMOD_SUPERNODAL;
    const struct { const char* name; int order; } orders[] = {
        {"nesdis", CHOLMOD_NESDIS}, {"metis", CHOLMOD_METIS}, {"amd", CHOLMOD_AMD}};
    bool known = !std::strcmp(argv[2], "default");
    for (const auto& o : orders)
        if (!std::strcmp(argv[2], o.name)) known = true, c->nmethods = 1, c->method[0].ordering = o.order;
    if (!known) return 2;

    cholmod_sparse* a = lower(n, c);
    cholmod_dense* b = cholmod_ones(a->nrow, 1, CHOLMOD_REAL, c);
    const auto start = Clock::now();
    cholmod_factor* l = cholmod_analyze(a, c);
    if (!l || !cholmod_factorize(a, l, c) || c->status != CHOLMOD_OK || !l->is_super) return 1;
    const double setup = since(start);
    const auto begun = Clock::now();
    cholmod_dense* x = cholmod_solve(CHOLMOD_A, l, b, c);
    if (!x) return 1;
    const double solve = since(begun);

    double minus[] = {-1, 0}, one[] = {1, 0};
    const double length = norm(b);
    cholmod_sdmult(a, 0, minus, one, x, b, c);
    const double rows = double(a->nrow), nonzeros = 5 * rows - 4 * n;
    std::printf("%.9f %.9f 0 %.6f %.6e\n", setup, solve, (2 * c->lnz - rows) / nonzeros, norm(b) / length);
}
