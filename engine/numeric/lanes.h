// Lanes: one number, or the same number of several drives side by side.
//
// Code in the path of a drive is written once over a lane type L: `double` for one drive, Pack<N> for N
// drives in one vector. Every operation here gives each lane exactly what `double` gives, so a drive has the
// same bits alone and in any company. That holds because only + - * / and sqrt are used, each rounded by IEEE
// 754, and because the build forbids contraction into fused multiply-adds.
//
// Masks: a comparison of two L gives a Mask<L> (bool, or a vector of all-ones and zeros). Combine masks with
// & and |, invert with inverse(mask), use them with select(mask, yes, no).
#pragma once

#include <cstdint>
#include <cstring>

namespace lw {

namespace detail {
template <int N>
struct PackTypes {
  typedef double Number __attribute__((vector_size(N * 8)));
  typedef std::int64_t Mask __attribute__((vector_size(N * 8)));
  typedef std::uint64_t Bits __attribute__((vector_size(N * 8)));
};

template <class L>
struct LaneTypes {  // any vector of double
  static constexpr int count = sizeof(L) / sizeof(double);
  using Mask = typename PackTypes<count>::Mask;
  using Bits = typename PackTypes<count>::Bits;
};
template <>
struct LaneTypes<double> {
  static constexpr int count = 1;
  using Mask = bool;
  using Bits = std::uint64_t;
};
}  // namespace detail

/// N doubles in one vector; N a power of two.
template <int N>
using Pack = typename detail::PackTypes<N>::Number;
/// What a comparison of two L gives.
template <class L>
using Mask = typename detail::LaneTypes<L>::Mask;
/// One unsigned 64-bit integer a lane.
template <class L>
using Bits = typename detail::LaneTypes<L>::Bits;
template <class L>
inline constexpr int lane_count = detail::LaneTypes<L>::count;

/// The same number in every lane.
template <class L>
inline L all_lanes(double value) {
  if constexpr (lane_count<L> == 1)
    return value;
  else
    return L{} + value;
}
template <class L>
inline Bits<L> all_bits(std::uint64_t value) {
  if constexpr (lane_count<L> == 1)
    return value;
  else
    return Bits<L>{} + value;
}

/// Reads and writes one lane.
template <class V>
inline auto lane(const V& value, int i) {
  if constexpr (sizeof(V) <= sizeof(double))
    return (void)i, value;
  else
    return value[i];
}
template <class V, class T>
inline void set_lane(V& value, int i, T one) {
  if constexpr (sizeof(V) <= sizeof(double))
    (void)i, value = one;
  else
    value[i] = one;
}

template <class L>
inline Bits<L> bits_of(L value) {
  Bits<L> bits;
  std::memcpy(&bits, &value, sizeof bits);
  return bits;
}
template <class L>
inline L number_of(Bits<L> bits) {
  L value;
  std::memcpy(&value, &bits, sizeof value);
  return value;
}

inline double select(bool mask, double yes, double no) { return mask ? yes : no; }
template <class L>
inline L select(Mask<L> mask, L yes, L no) {
  using M = Mask<L>;
  return (L)(((M)yes & mask) | ((M)no & ~mask));
}
template <class L>
inline L select(Mask<L> mask, L yes, double no) {
  return select(mask, yes, all_lanes<L>(no));
}
template <class L>
inline L select(Mask<L> mask, double yes, L no) {
  return select(mask, all_lanes<L>(yes), no);
}

inline bool inverse(bool mask) { return !mask; }
template <class M>
inline M inverse(M mask) {
  return ~mask;
}
inline bool any(bool mask) { return mask; }
template <class M>
inline bool any(M mask) {
  bool found = false;
  for (unsigned i = 0; i < sizeof(M) / 8; ++i) found |= mask[i] != 0;
  return found;
}

/// The smaller, the larger: the second where the two do not compare, so that no NaN passes a bound.
template <class L>
inline L lesser(L a, L b) {
  return select(a < b, a, b);
}
template <class L>
inline L greater(L a, L b) {
  return select(a > b, a, b);
}
/// Holds a value to [low, high].
template <class L>
inline L held(L value, L low, L high) {
  return lesser(greater(value, low), high);
}

template <class L>
inline L magnitude(L value) {
  return number_of<L>(bits_of(value) & all_bits<L>(0x7fffffffffffffffu));
}
/// The magnitude of the first with the sign bit of the second.
template <class L>
inline L with_sign(L value, L sign) {
  return number_of<L>((bits_of(value) & all_bits<L>(0x7fffffffffffffffu)) |
                      (bits_of(sign) & all_bits<L>(0x8000000000000000u)));
}

template <class L>
inline L square_root(L value) {
  if constexpr (lane_count<L> == 1) {
    return __builtin_sqrt(value);
  } else {
    L root;
    for (int i = 0; i < lane_count<L>; ++i) root[i] = __builtin_sqrt(value[i]);
    return root;
  }
}

/// The nearest whole number, ties to even; |value| below 2^51.
template <class L>
inline L nearest_whole(L value) {
  const L shift = all_lanes<L>(0x1.8p52);  // the last place of a number this large is 1
  return (value + shift) - shift;
}
/// The largest whole number not above value; |value| below 2^51.
template <class L>
inline L whole_below(L value) {
  const L near = nearest_whole(value);
  return near - select(near > value, all_lanes<L>(1.0), all_lanes<L>(0.0));
}
/// A whole number in [0, 2^52) as an integer a lane.
template <class L>
inline Bits<L> index_of(L whole) {
  return bits_of(whole + all_lanes<L>(0x1p52)) & all_bits<L>(0x000fffffffffffffu);
}
/// An integer below 2^52 as a number.
template <class L>
inline L number_from(Bits<L> integer) {
  return number_of<L>(integer | all_bits<L>(0x4330000000000000u)) - all_lanes<L>(0x1p52);
}

}  // namespace lw
