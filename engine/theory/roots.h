// Roots and minima of a function of one number, from a bracket.
#pragma once

#include <cmath>

namespace lw {

/// The root of f in [low, high], between whose ends f changes its sign, to `tolerance` (absolute, in x) or as
/// near as doubles come. False position with the Illinois correction (Dowell and Jarratt 1971), bisected when
/// that closes too slowly.
template <class Function>
double bracketed_root(Function&& f, double low, double high, double tolerance) {
  double at_low = f(low), at_high = f(high);
  if (at_low == 0.0) return low;
  if (at_high == 0.0) return high;
  double width_before = high - low;
  for (int i = 0; i < 200 && high - low > tolerance; ++i) {
    const bool slow = i % 4 == 3 && high - low > 0.25 * width_before;
    if (i % 4 == 3) width_before = high - low;
    double x = slow ? 0.5 * (low + high) : (low * at_high - high * at_low) / (at_high - at_low);
    if (!(x > low && x < high)) x = 0.5 * (low + high);
    if (!(x > low && x < high)) break;
    const double at_x = f(x);
    if (at_x == 0.0) return x;
    if ((at_x > 0.0) == (at_high > 0.0)) {
      high = x;
      at_high = at_x;
      at_low *= 0.5;
    } else {
      low = x;
      at_low = at_x;
      at_high *= 0.5;
    }
  }
  return 0.5 * (low + high);
}

/// The least value of f in [low, high] where it has one minimum, and its place to `tolerance` (absolute, in
/// x), by golden section (Kiefer 1953).
struct Minimum {
  double x, value;
};
template <class Function>
Minimum bracketed_minimum(Function&& f, double low, double high, double tolerance) {
  constexpr double golden = 0.6180339887498949;
  double a = high - golden * (high - low), b = low + golden * (high - low);
  double at_a = f(a), at_b = f(b);
  while (high - low > tolerance) {
    if (at_a < at_b) {
      high = b;
      b = a;
      at_b = at_a;
      a = high - golden * (high - low);
      at_a = f(a);
    } else {
      low = a;
      a = b;
      at_a = at_b;
      b = low + golden * (high - low);
      at_b = f(b);
    }
  }
  return at_a < at_b ? Minimum{a, at_a} : Minimum{b, at_b};
}

}  // namespace lw
