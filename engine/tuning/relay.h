// The relay experiment (Astrom and Hagglund 1984, "Automatic tuning of simple regulators with specifications
// on phase and amplitude margins", Automatica 20): an on-off steer of +-d in place of the law makes the loop
// oscillate by itself, near its critical frequency, and the oscillation's size is set by d.
//
// With hysteresis h in the switch and an error that oscillates with amplitude a, the relay's describing
// function N(a) = 4 d / (pi a) e^(-j asin(h / a)) meets the loop where path = -1 / N, whose real part is
//   -1 / Ku = -pi sqrt(a^2 - h^2) / (4 d).
// Three things keep this Ku from the critical gain, and each is told apart (relay_parts):
//   - the switch is late, by the hysteresis and by the wait for the next loop, so that the oscillation is
//   slower
//     than the critical one and the loop is met at another frequency;
//   - over the swing the sensors see another slope than at rest;
//   - the formula counts the square wave's first harmonic alone: the describing-function error. It is small
//   when
//     the path takes out the third (a third of the first, times the ratio of the path's gains there).
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "engine/tuning/straight.h"

namespace lw {

/// An on-off switch with hysteresis.
struct Relay {
  double size = 0.0;        // d, > 0
  double hysteresis = 0.0;  // h >= 0, in the unit of the error
  double output = 0.0;      // +-d; 0 before the first error
};
/// Output for an error: +d above h, -d below -h, else as it was.
double switched(Relay& relay, double error);

/// What an oscillation under a relay tells. Errors in their own unit.
struct RelayReading {
  double amplitude = 0.0;  // a, of the error: half of peak to peak, mean over the oscillation's periods
  double period = 0.0;     // s
  double gain = 0.0;       // Ku, by the formula
  double first_harmonic_gain = 0.0;  // first harmonic of the output over that of the error
  double late = 0.0;                 // rad, by which the output's first harmonic lags the error's
};

/// Reads samples that have settled; all three of the same length. Nothing when there are fewer than 4
/// periods, or the amplitude does not exceed the hysteresis.
std::optional<RelayReading> relay_reading(const std::vector<double>& t, const std::vector<double>& error,
                                          const std::vector<double>& output, double size, double hysteresis);

struct RelaySetting {
  double amplitude = 0.0;   // m, of the guide point's swing; 0 = small_amplitude(), more above much noise
  double hysteresis = 0.0;  // unit of the error; 0 = a tenth of the swing's error, more above much noise
  std::uint64_t draw = 0;
};

struct RelayFound {
  std::optional<RelayReading> reading;
  double size = 0.0, hysteresis = 0.0;  // fraction of full command; unit of the error
  double amplitude = 0.0;               // m, of the guide point
  double limited = 0.0;                 // share of loops, as SwingRow
  std::string reason;                   // in words, when there is no reading
};
RelayFound relay_experiment(const Straight& straight, const RelaySetting& setting);

/// Why a relay's Ku is not the critical gain: factors whose product is Ku / critical gain.
struct RelayParts {
  double frequency = 1.0;  // the loop is met at the relay's frequency
  double slope = 1.0;      // the sensors' slope over the swing
  double formula = 1.0;    // the describing-function error, with all that is left
};
/// `critical` is that of P alone by theory, > 0.
RelayParts relay_parts(const Straight& straight, const RelayFound& found, double critical);

}  // namespace lw
