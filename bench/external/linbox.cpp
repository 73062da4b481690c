// Rank modulo a prime by LinBox's sparse elimination: linbox PRIME < matrix. Prints rank and seconds of the elimination alone.
#include <givaro/modular.h>
#include <linbox/matrix/sparse-matrix.h>
#include <linbox/solutions/rank.h>
#include <cstdio>
#include <cstdlib>
#include <ctime>
#include <iostream>

int main(int argc, char** argv) {
  using Field = Givaro::Modular<int64_t>;
  Field field(argc > 1 ? std::atoll(argv[1]) : 67108859);
  LinBox::SparseMatrix<Field> matrix(field);
  matrix.read(std::cin);
  const std::clock_t begin = std::clock();
  size_t rank = 0;
  LinBox::rankInPlace(rank, matrix);
  const double seconds = double(std::clock() - begin) / CLOCKS_PER_SEC;
  std::printf("{\"rank\": %zu, \"seconds\": %.6f}\n", rank, seconds);
}
