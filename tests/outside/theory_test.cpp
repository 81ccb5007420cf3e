// The linear loop against SciPy and NumPy, run live (theory_check.py beside this file).
#include "tests/outside/python.h"

#ifndef __EMSCRIPTEN__

#include <cstdio>

#include "engine/scenario/text.h"
#include "engine/theory/margins.h"
#include "engine/theory/poles.h"
#include "tests/engine/theory/loops.h"

using namespace lw;
using namespace lw::test;

namespace {

std::string line_of(const char* key, double value) {
  char text[80];
  std::snprintf(text, sizeof text, "%s = %.17e\n", key, value);
  return text;
}

/// What was found, as TOML. `bend` spoils one figure, so that the check is seen to fail.
std::string found_text(const Scenario& scenario, double bend = 1.0) {
  const SampledLoop loop = loop_of(scenario);
  const Margins found = margins(loop);
  const Critical alone = critical(loop);
  std::string text = line_of("slope", loop.slope) + line_of("speed", loop.speed);
  const auto add = [&](const char* key, const std::optional<double>& value) {
    if (value) text += line_of(key, *value);
  };
  add("critical_gain", alone.gain);
  add("critical_period", alone.period);
  text += found.stable ? "stable = true\n" : "stable = false\n";
  if (found.stable) {
    add("gain_high", *found.gain_high * bend);
    add("gain_low", found.gain_low);
  }
  add("phase", found.phase);
  add("delay", found.delay);
  add("sensitivity_peak", found.sensitivity_peak);
  text += "poles = [";
  for (const auto& pole : poles(loop)) {
    char entry[80];
    std::snprintf(entry, sizeof entry, "[%.17e, %.17e],\n", pole.real(), pole.imag());
    text += entry;
  }
  return text + "]\n";
}

}  // namespace

TEST_CASE("critical gain, margins, sensitivity and poles are those that SciPy finds by another way",
          "[outside]") {
  const std::string python = python_with("scipy.signal, tomllib", "the linear loop");
  if (python.empty()) return;
  std::string arguments;
  int stable = 0;
  const std::vector<Scenario> carts = all_carts();
  for (std::size_t i = 0; i < carts.size(); ++i) {
    const std::string path = saved("theory_" + std::to_string(i) + ".toml", write(carts[i]));
    saved("theory_" + std::to_string(i) + ".toml.found", found_text(carts[i]));
    arguments += "'" + path + "' ";
    stable += margins(loop_of(carts[i])).stable ? 1 : 0;
  }
  CHECK(stable >= 8);  // figures that only a stable loop has are checked often
  CHECK(stable < static_cast<int>(carts.size()));
  CHECK(passes(python, "theory_check.py", arguments));

  const std::string path = saved("theory_bent.toml", write(carts[0]));
  saved("theory_bent.toml.found", found_text(carts[0], 1.0001));
  CHECK_FALSE(passes(python, "theory_check.py", "'" + path + "' 2>/dev/null"));  // the check can fail
}

#endif
