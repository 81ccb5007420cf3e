// exp, log, sine, cosine, arctangent and arccosine with the same bits on every compiler and target.
//
// Libraries of the platforms differ in the last place, so a drive cannot use them. Each function here is a
// range reduction with constants split so that the product with a small whole number is exact (Cody and Waite
// 1980), then the function's own power series, long enough that the rest is below 2^-54 of the result. Every
// step is + - * / or sqrt. Error bounds are stated at each function and tested in tests/engine/numeric
// against the platform's long double.
//
// L is a lane type of engine/numeric/lanes.h. Angles are in radians.
#pragma once

#include "engine/numeric/lanes.h"

namespace lw {

inline constexpr double pi = 0x1.921fb54442d18p+1;
inline constexpr double half_pi = 0x1.921fb54442d18p+0;

namespace detail {
constexpr double factorial(int n) { return n < 2 ? 1.0 : n * factorial(n - 1); }

/// A power series by Horner's rule, unrolled at compile time: Series::term(k) is the coefficient of x^k.
template <class Series, int K = 0, class L>
inline L horner(L x) {
  constexpr double coefficient = Series::term(K);
  if constexpr (K + 1 == Series::terms)
    return all_lanes<L>(coefficient);
  else
    return horner<Series, K + 1>(x) * x + coefficient;
}

/// 1/3! - x/5! + x^2/7! - ... : (1 - sin(t)/t)/t^2 at x = t^2
struct SineTail {
  static constexpr int terms = 7;
  static constexpr double term(int k) { return (k % 2 == 0 ? 1.0 : -1.0) / factorial(3 + 2 * k); }
};
/// 1/4! - x/6! + x^2/8! - ... : (cos(t) - 1 + t^2/2)/t^4 at x = t^2
struct CosineTail {
  static constexpr int terms = 7;
  static constexpr double term(int k) { return (k % 2 == 0 ? 1.0 : -1.0) / factorial(4 + 2 * k); }
};
/// 1/2! + x/3! + x^2/4! + ... : (e^x - 1 - x)/x^2
struct ExponentialTail {
  static constexpr int terms = 12;
  static constexpr double term(int k) { return 1.0 / factorial(2 + k); }
};
/// 1/3 + x/5 + x^2/7 + ... : (atanh(t)/t - 1)/t^2 at x = t^2, and (1 - atan(t)/t)/t^2 at x = -t^2
template <int Terms>
struct ArctangentTail {
  static constexpr int terms = Terms;
  static constexpr double term(int k) { return 1.0 / (2 * k + 3); }
};
}  // namespace detail

template <class L>
struct SineCosine {
  L sine, cosine;
};

/// Sine and cosine; absolute error at most 2^-52 for |angle| < 1e6, and below 1.3 ulp of the result for
/// |angle| < pi/4.
template <class L>
inline SineCosine<L> sine_cosine(L angle) {
  // pi/2 in three parts of 33, 33 and 53 bits: quarter * part is exact for |quarter| < 2^20
  const L quarter = nearest_whole(angle * 0x1.45f306dc9c883p-1);
  const L rest = ((angle - quarter * 0x1.921fb54400000p+0) - quarter * 0x1.0b4611a600000p-34) -
                 quarter * 0x1.3198a2e037073p-69;
  const L square = rest * rest;
  const L s = rest + rest * square * -detail::horner<detail::SineTail>(square);
  const L c = (1.0 - 0.5 * square) + square * square * detail::horner<detail::CosineTail>(square);
  // quarter mod 4 picks which of the two, and the signs
  const Bits<L> turn = bits_of(quarter + 0x1.8p52);
  const Mask<L> swap = (turn & all_bits<L>(1)) != all_bits<L>(0);
  const Bits<L> sine_sign = (turn & all_bits<L>(2)) << 62;
  const Bits<L> cosine_sign = ((turn + all_bits<L>(1)) & all_bits<L>(2)) << 62;
  return {number_of<L>(bits_of(select(swap, c, s)) ^ sine_sign),
          number_of<L>(bits_of(select(swap, s, c)) ^ cosine_sign)};
}
inline double sine(double angle) { return sine_cosine(angle).sine; }
inline double cosine(double angle) { return sine_cosine(angle).cosine; }

/// e^x; error below 1 ulp. x is held to [-708, 709], where the result is a normal number.
template <class L>
inline L exponential(L x) {
  x = held(x, all_lanes<L>(-708.0), all_lanes<L>(709.0));
  const L power = nearest_whole(x * 0x1.71547652b82fep+0);
  const L rest = (x - power * 0x1.62e42fee00000p-1) - power * 0x1.a39ef35793c76p-33;
  const L series = 1.0 + (rest + rest * rest * detail::horner<detail::ExponentialTail>(rest));
  const Bits<L> exponent = (bits_of(power + 0x1.8p52) + all_bits<L>(1023)) << 52;
  return series * number_of<L>(exponent);
}

/// Natural logarithm of a positive normal number; error below 2 ulp.
template <class L>
inline L logarithm(L x) {
  // x = m 2^e with m in [sqrt(1/2), sqrt(2)), then log m = 2 atanh((m - 1) / (m + 1))
  const Bits<L> bits = bits_of(x);
  const L half_to_one =
      number_of<L>((bits & all_bits<L>(0x000fffffffffffffu)) | all_bits<L>(0x3fe0000000000000u));
  const Mask<L> small = half_to_one < 0x1.6a09e667f3bcdp-1;
  const L m = select(small, half_to_one + half_to_one, half_to_one);
  const L e = number_from<L>(bits >> 52) - select(small, all_lanes<L>(1023.0), all_lanes<L>(1022.0));
  const L s = (m - 1.0) / (m + 1.0);
  const L square = s * s;
  const L tail = (s + s) * square * detail::horner<detail::ArctangentTail<10>>(square);
  return e * 0x1.62e42fee00000p-1 + ((s + s) + (tail + e * 0x1.a39ef35793c76p-33));
}

/// Arctangent, in [-pi/2, pi/2]; error below 5 ulp. Not for hot places.
template <class L>
inline L arctangent(L x) {
  const L size = magnitude(x);
  const Mask<L> steep = size > 1.0;
  // atan(x) = pi/2 - atan(1/x), then twice atan(t) = 2 atan(t / (1 + sqrt(1 + t^2)))
  L t = select(steep, 1.0 / size, size);
  for (int halving = 0; halving < 2; ++halving) t = t / (1.0 + square_root(1.0 + t * t));
  const L angle = 4.0 * (t - t * (t * t) * detail::horner<detail::ArctangentTail<11>>(-(t * t)));
  return with_sign(select(steep, (half_pi - angle) + 0x1.1a62633145c07p-54, angle), x);
}

/// The angle of the direction (x, y) in (-pi, pi]; 0 for the zero vector.
inline double direction_angle(double x, double y) {
  if (x == 0.0 && y == 0.0) return 0.0;
  if (x > 0.0) return arctangent(y / x);
  const double turned = x == 0.0 ? half_pi : arctangent(magnitude(y / x));
  return with_sign(x == 0.0 ? turned : pi - turned, y);
}

/// Arccosine of x in [-1, 1]; absolute error at most 5 * 2^-52.
template <class L>
inline L arccosine(L x) {
  x = held(x, all_lanes<L>(-1.0), all_lanes<L>(1.0));
  const L ratio = square_root((1.0 - x) / (1.0 + x));  // infinite at x = -1, where the arctangent is pi/2
  return 2.0 * arctangent(ratio);
}

}  // namespace lw
