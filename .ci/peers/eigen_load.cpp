// Seconds that Eigen takes to load a symmetric Matrix Market file: as it is
// stored, one triangle, and with the other triangle made from it. Printed with
// the entries of the whole matrix, the sum of their bits modulo 2^64, and the
// peak memory in bytes, that of the process and what it was before.
//
//   eigen_load FILE

#include <Eigen/SparseCore>
#include <unsupported/Eigen/SparseExtra>

#include <chrono>
#include <cstdint>
#include <cstdio>
#include <cstring>
#include <fstream>
#include <string>

using Matrix = Eigen::SparseMatrix<double, Eigen::RowMajor>;
using Clock = std::chrono::steady_clock;

static long peak() {
    std::ifstream status("/proc/self/status");
    for (std::string line; std::getline(status, line);)
        if (line.compare(0, 6, "VmHWM:") == 0) return 1024 * std::stol(line.substr(6));
    return 0;
}

int main(int argc, char** argv) {
    if (argc != 2) return 2;
    const long before = peak();
    const auto start = Clock::now();
    Matrix stored;
    if (!Eigen::loadMarket(stored, argv[1])) return 1;
    const std::chrono::duration<double> loaded = Clock::now() - start;
    const Matrix a = stored.selfadjointView<Eigen::Lower>();
    const std::chrono::duration<double> whole = Clock::now() - start;
    std::uint64_t sum = 0;
    for (Eigen::Index k = 0; k < a.nonZeros(); k++) {
        std::uint64_t bits;
        std::memcpy(&bits, a.valuePtr() + k, sizeof bits);
        sum += bits;
    }
    std::printf("%.6f %.6f %ld %llu %ld %ld\n", loaded.count(), whole.count(), long(a.nonZeros()),
                static_cast<unsigned long long>(sum), peak(), before);
}
