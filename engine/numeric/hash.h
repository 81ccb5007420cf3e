// FNV-1a, 64 bits (Fowler, Noll and Vo; offset basis and prime as in the IETF draft "The FNV
// Non-Cryptographic Hash Algorithm").
#pragma once

#include <cstdint>
#include <string_view>

#include "engine/numeric/lanes.h"

namespace lw {

inline constexpr std::uint64_t fnv_start = 0xcbf29ce484222325u;

constexpr std::uint64_t fnv_byte(std::uint64_t hash, unsigned char byte) {
  return (hash ^ byte) * 0x100000001b3u;
}

/// Eight bytes, least significant first whatever the machine.
constexpr std::uint64_t fnv_word(std::uint64_t hash, std::uint64_t word) {
  for (int byte = 0; byte < 8; ++byte) hash = fnv_byte(hash, static_cast<unsigned char>(word >> (8 * byte)));
  return hash;
}

/// The bits of a number; -0 counts as 0.
inline std::uint64_t fnv_number(std::uint64_t hash, double value) {
  return fnv_word(hash, value == 0.0 ? 0 : bits_of(value));
}

constexpr std::uint64_t fnv_text(std::uint64_t hash, std::string_view text) {
  for (const char letter : text) hash = fnv_byte(hash, static_cast<unsigned char>(letter));
  return fnv_word(hash, text.size());
}

}  // namespace lw
