// Counter-based random draws: Philox4x32-10 (Salmon, Moraes, Dror and Shaw 2011, Parallel random numbers: as
// easy as 1, 2, 3).
//
// A draw is a pure function of the scenario's seed, the number of the drive, the loop period and the purpose.
// So no draw depends on how many others were made, in which order, or in which lane: adding a tolerance or a
// drive moves no other.
//
//   key     = low and high word of the seed
//   counter = (step, purpose, low and high word of the drive)
#pragma once

#include <cstdint>

#include "engine/numeric/functions.h"

namespace lw {

/// What a draw is for; each value is a stream of its own. Streams 16.. are the sensors' noise, one a block of
/// four.
enum class Purpose : std::uint32_t { jitter = 0, tolerance = 1, texture = 2, noise = 16 };

/// Four 32-bit words a lane, each in the low half of a 64-bit integer.
template <class L>
struct Words {
  Bits<L> word[4];
};

/// One block of Philox4x32-10. Words of counter and key are 32-bit values in 64-bit lanes.
template <class L>
inline Words<L> philox(Words<L> counter, Bits<L> key0, Bits<L> key1) {
  const Bits<L> low = all_bits<L>(0xffffffffu);
  for (int round = 0; round < 10; ++round) {
    const Bits<L> product0 = (counter.word[0] & low) * all_bits<L>(0xd2511f53u);
    const Bits<L> product1 = (counter.word[2] & low) * all_bits<L>(0xcd9e8d57u);
    counter = {{(product1 >> 32) ^ counter.word[1] ^ key0, product1 & low,
                (product0 >> 32) ^ counter.word[3] ^ key1, product0 & low}};
    key0 = (key0 + all_bits<L>(0x9e3779b9u)) & low;
    key1 = (key1 + all_bits<L>(0xbb67ae85u)) & low;
  }
  return counter;
}

/// The words for one step and purpose of a drive.
template <class L>
inline Words<L> draw(std::uint64_t seed, Bits<L> drive, Bits<L> step, std::uint32_t purpose) {
  const Bits<L> low = all_bits<L>(0xffffffffu);
  return philox<L>({{step & low, all_bits<L>(purpose), drive & low, drive >> 32}},
                   all_bits<L>(seed & 0xffffffffu), all_bits<L>(seed >> 32));
}

/// A 32-bit word as a number strictly inside (0, 1): (word + 1/2) / 2^32.
template <class L>
inline L unit_from(Bits<L> word) {
  return (number_from<L>(word) + 0.5) * 0x1p-32;
}

/// Two independent standard normal numbers from two words (Box and Muller 1958). Largest magnitude 6.7.
template <class L>
struct NormalPair {
  L first, second;
};
template <class L>
inline NormalPair<L> normal_from(Bits<L> word_a, Bits<L> word_b) {
  const L radius = square_root(-2.0 * logarithm(unit_from<L>(word_a)));
  const SineCosine<L> angle = sine_cosine((2.0 * pi) * unit_from<L>(word_b));
  return {radius * angle.cosine, radius * angle.sine};
}

}  // namespace lw
