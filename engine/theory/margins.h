// How near the loop is to swinging up: gain, phase and delay margin, sensitivity peak, critical gain.
//
// Multiply the open loop L by a factor g. A pair of closed-loop poles lies on the unit circle exactly where
// L(e^(j omega T)) = -1 / g, so the factors that matter are those of the frequencies at which L is real and
// negative, omega T = pi included (one real pole at z = -1). As g grows past such a factor the pair leaves
// the circle where the imaginary part of L rises with omega and enters it where it falls, and for small g the
// poles that start from z = 1 go as L's lowest frequencies say. Counted up, this is Nyquist's criterion for
// the sampled loop, and gives all ranges of g in which it is stable; margins are the ends of one of them.
//
// Frequencies are searched on a grid fine enough for every corner and delay, then refined to a relative
// 1e-12.
#pragma once

#include <complex>
#include <optional>
#include <string>
#include <vector>

#include "engine/theory/loop.h"

namespace lw {

/// Frequencies (rad/s, rising, the last is pi / T) and the responses there of which the open loop is made,
/// for use with many gains: L = (kp + ki integral + kd derivative) path.
struct Sweep {
  std::vector<double> omega;
  std::vector<std::complex<double>> path, integral, derivative;
};
/// A sweep for the loop's own law.
Sweep sweep(const SampledLoop& loop);
/// A sweep that serves every law between two.
Sweep sweep(const SampledLoop& loop, const LoopGains& one, const LoopGains& other);

/// A range of factors on the loop gain within which the loop is stable.
struct GainRange {
  double low = 0.0;        // 0 = down to any small gain
  double high = 0.0;       // infinite = up to any gain
  double low_omega = 0.0;  // rad/s of the oscillation at either end; 0 where there is no end
  double high_omega = 0.0;
};
/// All of them, rising; none when no factor makes it stable.
std::vector<GainRange> stable_ranges(const SampledLoop& loop, const Sweep& over);

struct Margins {
  bool stable = false;  // all poles of the closed loop inside the unit circle

  /// Ends of the stable range of factors that holds 1, or else the one nearest to it: by how much the loop
  /// gain may grow or fall. With a loop that is not stable they say by how much it has to change. Nothing
  /// where there is no such end. > 0.
  std::optional<double> gain_high, gain_low;
  double gain_high_omega = 0.0, gain_low_omega = 0.0;  // rad/s

  /// rad, in (-pi, pi]: the phase of L above -180 degrees where |L| = 1, the smallest in magnitude; nothing
  /// where |L| never is 1.
  std::optional<double> phase;
  double phase_omega = 0.0;  // rad/s

  /// s: the least, over all frequencies with |L| = 1, of the phase that may be lost over the frequency.
  /// Nothing for a loop that is not stable, or where |L| never is 1.
  std::optional<double> delay;

  /// Largest |1 / (1 + L)|: how much the loop makes a disturbance worse at its worst frequency. Nothing for a
  /// loop that is not stable.
  std::optional<double> sensitivity_peak;
  double sensitivity_omega = 0.0;  // rad/s
};
Margins margins(const SampledLoop& loop);
/// The same over a sweep made before; without the sensitivity peak when `peak` is false.
Margins margins(const SampledLoop& loop, const Sweep& over, bool peak = true);

/// A factor in dB, 20 log10.
double decibels(double factor);

/// P alone.
struct Critical {
  std::optional<double> gain;      // kp at which the loop just keeps oscillating
  std::optional<double> period;    // s, of that oscillation
  std::optional<double> low_gain;  // kp below which it swings up as well; mostly there is none
  std::string reason;              // in words, when there is no critical gain
};
Critical critical(const SampledLoop& loop);

/// Curves of the open loop for Bode and Nyquist views, one entry a frequency, all of the same length. The
/// frequencies of the margins and of the sensitivity peak are among them.
struct ResponseCurve {
  std::vector<double> omega;        // rad/s, rising to pi / T
  std::vector<double> real, imag;   // of L
  std::vector<double> gain_db;      // of |L|
  std::vector<double> phase;        // rad, unwrapped, near -90 degrees times the poles at z = 1 when low
  std::vector<double> sensitivity;  // |1 / (1 + L)|
};
ResponseCurve response_curve(const SampledLoop& loop);

}  // namespace lw
