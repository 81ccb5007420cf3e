// Reads an oscillation out of samples: its period, its amplitude, and whether it grows.
//
// The fundamental's amplitude over a stretch of whole periods is |sum w x e^(-j omega t)| / (sum w / 2) with
// Hann's window w, which keeps out what is constant, what drifts and most noise. Two neighbouring stretches
// give growth (the logarithm of the ratio of their amplitudes over the time between them), and the phase
// between them the frequency to far better than crossings of zero do.
#pragma once

#include <optional>
#include <vector>

namespace lw {

struct Oscillation {
  double period = 0.0;     // s
  double amplitude = 0.0;  // of the fundamental, geometric mean of the two stretches; unit of the samples
  double growth = 0.0;     // 1/s, of the amplitude's logarithm; negative = dies out
};

/// Times at which x, less its mean, rises through 0, by linear interpolation. A rise counts once x has been
/// below minus `hysteresis` since the one before. t in s, rising; both of the same length.
std::vector<double> rises(const std::vector<double>& t, const std::vector<double>& x, double hysteresis);

/// Mean time between rises; nothing with fewer than two.
std::optional<double> mean_period(const std::vector<double>& rises);

/// The oscillation over the last 2 `periods` periods of the samples. `guess` (s) is its period to within some
/// 1 / (3 periods) of itself. Nothing when the samples are too short or too few a period (under 3).
std::optional<Oscillation> oscillation_of(const std::vector<double>& t, const std::vector<double>& x,
                                          double guess, int periods);

}  // namespace lw
