// One single-threaded pass over all non-zeros of the equations of [H, Q] = 0: every candidate meets every placement of every
// term once, its outputs are made from the strings alone and added to a checksum. Nothing is stored and nothing solved; a search
// that looks at every non-zero once has to spend this. Column by column: row by row, most outputs longer than RANGE are visited
// in vain, at two to eight times the cost (measured: 0.67 s against 0.34 s, one spin a cell, six terms, range 11).
//   pass CELL RANGE WORD…        words over I X Y Z, first letter on spin 0 of their first cell
#include <bit>
#include <cstdint>
#include <cstdio>
#include <cstdlib>
#include <ctime>
#include <string>
#include <vector>
using Word = uint64_t;

struct Placement { int shift; Word term, mask; const int8_t* sign; };

int main(int argc, char** argv) {
  if (argc < 4) return 2;
  const int bits = 2 * std::atoi(argv[1]), k = std::atoi(argv[2]), terms = argc - 3;
  const Word cell = (Word(1) << bits) - 1;
  std::vector<Word> word(terms);
  std::vector<int> range(terms);
  std::vector<std::vector<int8_t>> sign(terms);  // of i·T·A for the letters A under the term; 0 where they commute
  int reach = 1;
  for (int t = 0; t < terms; t++) {
    const std::string text = argv[3 + t];
    for (size_t i = 0; i < text.size(); i++) word[t] |= Word(std::string("IXZY").find(text[i])) << (2 * i);
    while (range[t] < 12 && word[t] >> (bits * range[t]) != 0) range[t]++;
    if (range[t] > reach) reach = range[t];
    const Word x = 0x5555555555555555;
    auto ys = [&](Word w) { return std::popcount(w & (w >> 1) & x); };
    for (Word a = 0; a >> (bits * range[t]) == 0; a++) {
      const int phase = (ys(word[t]) + ys(a) - ys(word[t] ^ a) + 2 * std::popcount((word[t] >> 1) & a & x)) & 3;
      sign[t].push_back(phase % 2 == 0 ? 0 : phase == 1 ? -1 : 1);
    }
  }
  const int room = bits * (reach - 1);
  uint64_t checksum = 0, nonzeros = 0;
  const std::clock_t begin = std::clock();  // processor time: others may use the machine
  for (int m = 1; m <= k; m++) {
    std::vector<Placement> inner, ends;  // at an end the output may begin elsewhere, or be longer
    for (int t = 0; t < terms; t++)
      for (int at = 1 - range[t]; at < m; at++)
        (at <= 0 ? ends : inner)
            .push_back({room + bits * at, word[t] << (room + bits * at), (Word(1) << (bits * range[t])) - 1, sign[t].data()});
    for (Word candidate = 1; candidate >> (bits * m) == 0; candidate++) {
      if ((candidate & cell) == 0 || candidate >> (bits * (m - 1)) == 0) continue;
      const Word string = candidate << room;
      int64_t column = 0;
      for (const Placement& p : inner) {
        const int64_t s = p.sign[(string >> p.shift) & p.mask];
        column += s * int64_t((string ^ p.term) >> room);
        nonzeros += s & 1;
      }
      for (const Placement& p : ends) {
        const int64_t s = p.sign[(string >> p.shift) & p.mask];
        const Word output = string ^ p.term;
        column += s * int64_t(output >> (std::countr_zero(output | (Word(1) << 63)) / bits * bits));
        nonzeros += s & 1;
      }
      checksum = checksum * 31 + uint64_t(column);
    }
  }
  const double seconds = double(std::clock() - begin) / CLOCKS_PER_SEC;
  std::printf("{\"seconds\": %.6f, \"nonzeros\": %llu, \"checksum\": \"%llu\"}\n", seconds, (unsigned long long)nonzeros, (unsigned long long)checksum);
}
