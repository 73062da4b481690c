// Rank modulo a prime by LinBox's sparse elimination: linbox PRIME < matrix. Prints rank and seconds of the elimination alone.
#include <givaro/modular.h>
#include <linbox/matrix/sparse-matrix.h>
#include <linbox/solutions/rank.h>
#include <chrono>
#include <cstdio>
#include <cstdlib>
#include <iostream>

int main(int argc, char** argv) {
  using Field = Givaro::Modular<int64_t>;
  Field field(argc > 1 ? std::atoll(argv[1]) : 67108859);
  LinBox::SparseMatrix<Field> matrix(field);
  matrix.read(std::cin);
  const auto begin = std::chrono::steady_clock::now();
  size_t rank = 0;
  LinBox::rankInPlace(rank, matrix);
  const double seconds = std::chrono::duration<double>(std::chrono::steady_clock::now() - begin).count();
  std::printf("{\"rank\": %zu, \"seconds\": %.6f}\n", rank, seconds);
}
