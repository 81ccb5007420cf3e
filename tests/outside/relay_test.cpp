// The relay's reading against SciPy's exact oscillation (relay_check.py beside this file).
#include "tests/outside/python.h"

#ifndef __EMSCRIPTEN__

#include <cstdio>

#include "tests/engine/tuning/relays.h"

using namespace lw;
using namespace lw::test;

namespace {

/// Readings as TOML. `bend` spoils one figure, so that the check is seen to fail.
std::string readings_text(double bend) {
  std::string text;
  for (const double hysteresis : {0.0, 0.02, 0.06}) {
    const RelaySamples samples = relay_on_three_lags(1.0, hysteresis, 2e-4);
    const auto reading = relay_reading(samples.t, samples.error, samples.output, 1.0, hysteresis);
    REQUIRE(reading);
    char entry[300];
    std::snprintf(entry, sizeof entry,
                  "[[case]]\nhysteresis = %.17e\nperiod = %.17e\namplitude = %.17e\ngain = %.17e\n"
                  "first_harmonic_gain = %.17e\n",
                  hysteresis, reading->period, reading->amplitude * bend, reading->gain,
                  reading->first_harmonic_gain);
    text += entry;
  }
  return text;
}

}  // namespace

TEST_CASE("a relay's period, amplitude and gain are those of the exact oscillation that SciPy finds",
          "[outside]") {
  const std::string python = python_with("scipy.linalg, tomllib", "the relay experiment");
  if (python.empty()) return;
  CHECK(passes(python, "relay_check.py", "'" + saved("relay.toml", readings_text(1.0)) + "'"));
  CHECK_FALSE(
      passes(python, "relay_check.py",
             "'" + saved("relay_bent.toml", readings_text(1.005)) + "' 2>/dev/null"));  // the check can fail
}

#endif
