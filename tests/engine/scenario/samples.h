// Scenarios for the tests of this room: a small valid one, and random ones from a seed that a failing test
// prints.
#pragma once

#include <cstdint>
#include <string>

#include "engine/scenario/fields.h"

namespace lw::samples {

/// SplitMix64 (Steele, Lea and Flood 2014): the same numbers on every machine.
struct Dice {
  std::uint64_t state;

  std::uint64_t bits() {
    std::uint64_t z = state += 0x9e3779b97f4a7c15u;
    z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9u;
    z = (z ^ (z >> 27)) * 0x94d049bb133111ebu;
    return z ^ (z >> 31);
  }
  std::size_t below(std::size_t count) { return static_cast<std::size_t>(bits() % count); }
  double unit() { return static_cast<double>(bits() >> 11) * 0x1p-53; }
  bool coin() { return bits() % 2 == 0; }
};

/// The least text that is a scenario, to put other lines in front of: an open straight of half a metre.
inline const std::string straight = "[course]\nclosed = false\npieces = [{ straight_mm = 500 }]\n";
inline const std::string format = "format = \"linewright 1\"\n";

/// A cart that carries seedlings: an open course with a bend.
Scenario seedling_cart();

/// A valid scenario in which every field has been drawn; no two seeds in use give the same.
Scenario random_scenario(std::uint64_t seed);

/// Words that are hard to write: quotes, line ends, control characters, several alphabets.
std::string random_words(Dice& dice, std::size_t most_characters);

}  // namespace lw::samples
