#include "engine/numeric/random.h"

#include <cmath>

#include "tests/catch.h"

using namespace lw;

namespace {

struct Known {
  std::uint64_t counter[4], key[2], out[4];
};

// Known answers for philox4x32 with 10 rounds, from the file kat_vectors of the authors' Random123
// distribution (Salmon et al. 2011); written here from memory.
constexpr Known known[] = {
    {{0, 0, 0, 0}, {0, 0}, {0x6627e8d5, 0xe169c58d, 0xbc57ac4c, 0x9b00dbd8}},
    {{0xffffffff, 0xffffffff, 0xffffffff, 0xffffffff},
     {0xffffffff, 0xffffffff},
     {0x408f276d, 0x41c83b0e, 0xa20bc7c6, 0x6d5451fd}},
    {{0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344},
     {0xa4093822, 0x299f31d0},
     {0xd16cfe09, 0x94fdcceb, 0x5001e420, 0x24126ea1}},
};

}  // namespace

TEST_CASE("Philox gives the published known answers") {
  for (const Known& one : known) {
    const Words<double> out = philox<double>(
        {{one.counter[0], one.counter[1], one.counter[2], one.counter[3]}}, one.key[0], one.key[1]);
    for (int i = 0; i < 4; ++i) CHECK(out.word[i] == one.out[i]);
  }
}

TEST_CASE("a pack of four draws what each drive draws alone") {
  using L = Pack<4>;
  const Bits<L> drives{0, 1, 77, 5'000'000'000}, steps{0, 9, 123456, 1};
  const Words<L> together = draw<L>(20'26, drives, steps, 3);
  for (int i = 0; i < 4; ++i) {
    const Words<double> alone = draw<double>(20'26, drives[i], steps[i], 3);
    for (int word = 0; word < 4; ++word) CHECK(together.word[word][i] == alone.word[word]);
  }
}

TEST_CASE("seed, drive, step and purpose each move the draw") {
  const std::uint64_t base = draw<double>(1, 0, 0, 0).word[0];
  CHECK(draw<double>(2, 0, 0, 0).word[0] != base);
  CHECK(draw<double>(1 + (std::uint64_t{1} << 40), 0, 0, 0).word[0] != base);
  CHECK(draw<double>(1, 1, 0, 0).word[0] != base);
  CHECK(draw<double>(1, 0, 1, 0).word[0] != base);
  CHECK(draw<double>(1, 0, 0, 1).word[0] != base);
}

TEST_CASE("unit numbers stay strictly inside 0 and 1") {
  CHECK(unit_from<double>(0) > 0.0);
  CHECK(unit_from<double>(0xffffffffu) < 1.0);
}

// Moments of the standard normal distribution: 0, 1, 0, 3. The bounds are five standard errors of each
// estimate, sqrt(1/n), sqrt(2/n), sqrt(15/n) and sqrt(96/n).
TEST_CASE("normal draws have the moments of the standard normal distribution") {
  constexpr int n = 200'000;
  double sum = 0.0, squares = 0.0, cubes = 0.0, fourths = 0.0;
  for (int i = 0; i < n / 2; ++i) {
    const Words<double> words = draw<double>(7, 0, static_cast<std::uint64_t>(i), 16);
    const NormalPair<double> pair = normal_from<double>(words.word[0], words.word[1]);
    for (const double z : {pair.first, pair.second}) {
      sum += z;
      squares += z * z;
      cubes += z * z * z;
      fourths += z * z * z * z;
    }
  }
  CHECK(std::fabs(sum / n) < 5.0 * std::sqrt(1.0 / n));
  CHECK(std::fabs(squares / n - 1.0) < 5.0 * std::sqrt(2.0 / n));
  CHECK(std::fabs(cubes / n) < 5.0 * std::sqrt(15.0 / n));
  CHECK(std::fabs(fourths / n - 3.0) < 5.0 * std::sqrt(96.0 / n));
}
