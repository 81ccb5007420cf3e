// How much of the readings' noise the loop turns into commands: what D costs.
//
// Two kinds of noise, each white from loop to loop, reach the error of a vehicle that holds the straight:
//   readings  the sensors' own noise, standard deviation noise_pct, before their low-pass;
//   rounding  of readings to a step q, as noise of variance q^2 / 12 behind the low-pass (Bennett 1948,
//   "Spectra
//             of quantized signals"; Widrow and Kollar 2008, "Quantization Noise"). That holds while a
//             reading moves by a step or more from loop to loop, by noise or by motion. A reading that rests
//             between two steps is no noise at all, and then this counts too much.
// One error is made of several readings, so its variance is the sum of theirs weighted by the squares of
// d error / d reading: 1 each for edge and pair, those of the centroid for a bar. A sensor of a bar that sees
// no line adds only the half of its noise that looks dark, (pi - 1) / (2 pi) of the variance.
//
// With refresh times readings stay for L periods, so that the noise has the mean spectrum
//   Phi = variance E |1 + z^-1 + ... + z^-(L - 1)|^2 / E L.
// With the law C, the sensors' low-pass H and the sensitivity S = 1 / (1 + L) the steer's variance is
// Parseval's
//   (1 / pi) integral over theta = omega T from 0 to pi of |C S|^2 (|H|^2 Phi_readings + Phi_rounding)
// (Astrom and Wittenmark, "Computer-Controlled Systems", chapter 10: spectra of sampled systems), and the
// guide point's with C replaced by C path / (slope H). Linear: a loop whose commands reach their limits has
// less.
#pragma once

#include <optional>

#include "engine/scenario/scenario.h"
#include "engine/theory/loop.h"

namespace lw {

/// Variances of the error of one loop (fraction of full scale squared, mm^2 for a bar), and how long a value
/// stays.
struct ErrorNoise {
  double readings = 0.0;  // before the sensors' low-pass
  double rounding = 0.0;  // behind it
  double stays = 1.0;     // periods that a reading stays, in the mean, >= 1
};
/// Of the sensors where the loop rests. `loop` is the scenario's linearise().
ErrorNoise error_noise(const Scenario& scenario, const SampledLoop& loop);

/// Standard deviations once everything has settled.
struct LoopNoise {
  double steer = 0.0;          // fraction of full command
  double from_readings = 0.0;  // the part of the sensors' own noise; squares add up
  double from_rounding = 0.0;
  double deviation = 0.0;  // m, of the guide point
};
/// Nothing for a loop that is not stable. Relative accuracy about 1e-6.
std::optional<LoopNoise> loop_noise(const SampledLoop& loop, const ErrorNoise& noise);

}  // namespace lw
