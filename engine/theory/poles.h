// Poles of the closed sampled loop: the roots of 1 + L = 0.
//
// With A over B the open loop, these are the roots of B + A, a polynomial z^q a(s) + b(s) in z and s = z - 1.
// They are found all at once by Ehrlich and Aberth's iteration (Aberth 1973), evaluated in that form, which
// keeps the digits of poles that crowd near z = 1 when the period is short.
#pragma once

#include <complex>
#include <vector>

#include "engine/theory/loop.h"

namespace lw {

/// More poles than this are not worked out: each period that a command waits adds one.
inline constexpr int most_poles = 256;

/// All poles, the slowest to die out (largest |z|) first; pairs next to each other, positive imaginary part
/// first. Empty when there are more than most_poles.
std::vector<std::complex<double>> poles(const SampledLoop& loop);

/// What a pole does in time: e^(s t) with z = e^(s T).
struct PoleMotion {
  double frequency = 0.0;      // rad/s, |s|, natural; infinite for a pole at z = 0
  double damping = 1.0;        // -Re s / |s|; negative = swings up
  double time_constant = 0.0;  // s, -1 / Re s; negative = swings up
};
PoleMotion motion_of(std::complex<double> pole, double period);

}  // namespace lw
