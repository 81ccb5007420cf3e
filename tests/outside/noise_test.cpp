// Noise on steer and deviation against SciPy, run live (noise_check.py beside this file).
#include "tests/outside/python.h"

#ifndef __EMSCRIPTEN__

#include <cstdio>

#include "engine/scenario/text.h"
#include "engine/theory/margins.h"
#include "engine/tuning/derivative_noise.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

/// Stable loops with noise, and with rounding where there is no low-pass.
std::vector<Scenario> noisy_carts() {
  std::vector<Scenario> noisy;
  for (Scenario scenario : all_carts()) {
    scenario.sensors.noise_pct = 1.5;
    scenario.sensors.step_pct = scenario.sensors.lag_ms > 0.0 ? 0.0 : 2.0;
    if (margins(loop_of(scenario)).stable) noisy.push_back(scenario);
  }
  return noisy;
}

/// What was found, as TOML. `bend` spoils one figure, so that the check is seen to fail.
std::string found_text(const Scenario& scenario, double bend = 1.0) {
  const SampledLoop loop = loop_of(scenario);
  const auto noise = loop_noise(loop, error_noise(scenario, loop));
  REQUIRE(noise);
  char text[240];
  std::snprintf(text, sizeof text,
                "steer = %.12e\nfrom_readings = %.12e\nfrom_rounding = %.12e\ndeviation = %.12e\n",
                noise->steer, bend * noise->from_readings, noise->from_rounding, noise->deviation);
  return text;
}

}  // namespace

TEST_CASE("noise on steer and deviation is what SciPy's Lyapunov equation gives", "[outside]") {
  const std::string python = python_with("scipy.linalg, tomllib", "the noise on the steer");
  if (python.empty()) return;
  const std::vector<Scenario> carts = noisy_carts();
  REQUIRE(carts.size() >= 8);
  std::string arguments;
  for (std::size_t i = 0; i < carts.size(); ++i) {
    const std::string path = saved("noise_" + std::to_string(i) + ".toml", write(carts[i]));
    saved("noise_" + std::to_string(i) + ".toml.noise", found_text(carts[i]));
    arguments += "'" + path + "' ";
  }
  CHECK(passes(python, "noise_check.py", arguments));

  const std::string path = saved("noise_bent.toml", write(carts[0]));
  saved("noise_bent.toml.noise", found_text(carts[0], 1.001));
  CHECK_FALSE(passes(python, "noise_check.py", "'" + path + "' 2>/dev/null"));  // the check can fail
}

#endif
