// A relay around 1 / (s + 1)^3, whose critical gain is 8 and critical period 2 pi / sqrt 3: at omega = sqrt 3
// each lag turns by 60 degrees and halves the gain.
#pragma once

#include <cmath>
#include <vector>

#include "engine/tuning/relay.h"

namespace lw::test {

inline constexpr double lags_critical_gain = 8.0;
inline const double lags_critical_period = 2.0 * M_PI / std::sqrt(3.0);

struct RelaySamples {
  std::vector<double> t, error, output;
};

/// Error and output from 60 s to 120 s, in steps of `step`; exact under the held output: the three equal lags
/// are a Jordan block.
inline RelaySamples relay_on_three_lags(double size, double hysteresis, double step) {
  const double keep = std::exp(-step);
  Relay relay{size, hysteresis, 0.0};
  double x1 = 0.3, x2 = 0.0, x3 = 0.0;  // behind one, two, three lags
  RelaySamples samples;
  for (int k = 0; k * step < 120.0; ++k) {
    const double error = -x3, output = switched(relay, error);
    if (k * step >= 60.0) {
      samples.t.push_back(k * step);
      samples.error.push_back(error);
      samples.output.push_back(output);
    }
    const double a = x1 - output, b = x2 - output, c = x3 - output;
    x3 = output + keep * (c + step * b + 0.5 * step * step * a);
    x2 = output + keep * (b + step * a);
    x1 = output + keep * a;
  }
  return samples;
}

}  // namespace lw::test
