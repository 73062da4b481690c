// Rank modulo a prime by FLINT's dense elimination: flint PRIME < matrix. Prints rank and seconds of the elimination alone.
#include <flint/nmod_mat.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

int main(int argc, char** argv) {
  const ulong p = strtoul(argc > 1 ? argv[1] : "67108859", NULL, 10);
  long rows, columns, row, column, value;
  char kind;
  if (scanf("%ld %ld %c", &rows, &columns, &kind) != 3) return 2;
  nmod_mat_t matrix;
  nmod_mat_init(matrix, rows, columns, p);
  while (scanf("%ld %ld %ld", &row, &column, &value) == 3 && row > 0)
    nmod_mat_entry(matrix, row - 1, column - 1) = value < 0 ? p - (ulong)(-value) % p : (ulong)value % p;
  const clock_t begin = clock();
  const long rank = nmod_mat_rank(matrix);
  const double seconds = (double)(clock() - begin) / CLOCKS_PER_SEC;
  printf("{\"rank\": %ld, \"seconds\": %.6f}\n", rank, seconds);
  return 0;
}
