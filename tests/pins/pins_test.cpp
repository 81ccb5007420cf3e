// Same bits everywhere: this build drives every scenario exactly as pinned (tests/pins/pins.h).
#include <sys/stat.h>

#include <cstdio>
#include <optional>

#include "engine/drive/trace_text.h"
#include "engine/scenario/text.h"
#include "tests/catch.h"
#include "tests/pins/pins.h"

using namespace lw;
using namespace lw::test;

namespace {

const std::string pins_path = LINEWRIGHT_SOURCE_DIR "/tests/pins.txt";

struct Driven {
  Pin pin;
  Trace trace;
};

Result<Driven> driven(const std::string& name) {
  const auto scenario = read(file_text(scenario_path(name)), name);
  if (!scenario) return scenario.error();
  const auto plan = make_plan(*scenario);
  if (!plan) return plan.error();
  Driven driven;
  const Summary summary = drive(*plan, &driven.trace);
  driven.pin = pin_of(name, summary, driven.trace);
  return driven;
}

std::vector<Pin> pins() {
  const auto pins = read_pins(file_text(pins_path));
  if (!pins) FAIL(text_of(pins.error()));
  return *pins;
}

std::string reference_path(const Pin& pin) {
  return LINEWRIGHT_SOURCE_DIR "/build/traces/" + pin.name + '-' + pin.hash + ".bits";
}

/// The pinned trace, where a build that matched has left it.
std::optional<Trace> reference_of(const Pin& pin) {
  const auto trace = read_trace_bits(file_text(reference_path(pin)), pin.name);
  if (trace && pin.hash == pin_of(pin.name, Summary{}, *trace).hash) return *trace;
  return std::nullopt;
}

/// Leaves a trace that matches its pin for builds that do not; where there is no folder build, it stays away.
void leave_reference(const Driven& driven) {
  const std::string path = reference_path(driven.pin);
  if (!file_text(path).empty()) return;
  mkdir(LINEWRIGHT_SOURCE_DIR "/build/traces", 0777);
  std::FILE* file = std::fopen(path.c_str(), "wb");
  if (!file) return;
  const std::string text = trace_bits(driven.trace);
  std::fwrite(text.data(), 1, text.size(), file);
  std::fclose(file);
}

bool contains(const std::string& text, const char* part) { return text.find(part) != std::string::npos; }

}  // namespace

TEST_CASE("every scenario has a pin and every pin a scenario", "[pins]") {
  std::vector<std::string> pinned;
  for (const Pin& pin : pins()) pinned.push_back(pin.name);
  CHECK(pinned == scenario_names());
  CHECK(pinned.size() >= 14);
}

TEST_CASE("every scenario drives as pinned, bit for bit", "[pins]") {
  std::size_t compared = 0;
  for (const Pin& pin : pins()) {
    const auto found = driven(pin.name);
    if (!found) {
      FAIL_CHECK(text_of(found.error()));
      continue;
    }
    const auto reference = pin.hash == found->pin.hash ? std::nullopt : reference_of(pin);
    const std::string differs = difference(pin, found->pin, found->trace, reference ? &*reference : nullptr);
    if (!differs.empty()) FAIL_CHECK(differs);
    if (differs.empty()) leave_reference(*found);
    ++compared;
  }
  CHECK(compared >= 14);
}

TEST_CASE("a drive that differs from its pin is told by step and field", "[pins]") {
  const auto right = driven("straight");
  REQUIRE(right.ok());
  REQUIRE(right->trace.rows.size() > 200);

  const auto told = [&](void (*change)(Trace&), const Trace* reference) {
    Trace trace = right->trace;
    change(trace);
    Summary summary;
    summary.outcome = Outcome::finished;
    summary.steps = static_cast<std::int64_t>(trace.rows.size());
    return difference(right->pin, pin_of("straight", summary, trace), trace, reference);
  };
  const auto one_bit = [](Trace& trace) {
    double& heading = trace.rows[150].heading;
    heading = __builtin_bit_cast(double, bits_of(heading) ^ 1);
  };
  const auto one_reading = [](Trace& trace) { trace.readings[2 * 40 + 1] += 0.25; };
  const auto shorter = [](Trace& trace) {
    trace.rows.pop_back();
    trace.readings.resize(trace.readings.size() - 2);
  };
  const auto nothing = [](Trace&) {};

  CHECK(told(nothing, nullptr).empty());
  CHECK(contains(told(one_bit, &right->trace), "first differs at step 150 in heading_deg: pinned "));
  CHECK(contains(told(one_bit, nullptr), "first differs at one of the steps 128 to 159;"));
  CHECK(contains(told(one_reading, &right->trace), "first differs at step 40 in reading_1: pinned "));
  CHECK(contains(told(one_reading, nullptr), "first differs at one of the steps 32 to 63;"));
  CHECK(contains(told(shorter, &right->trace), " in rows: pinned "));
}

TEST_CASE("a minus zero is no difference", "[pins]") {
  const auto right = driven("straight");
  REQUIRE(right.ok());
  Trace trace = right->trace;
  REQUIRE(trace.rows[0].x == 0.0);
  trace.rows[0].x = -0.0;
  CHECK(pin_of("straight", Summary{}, trace).hash == right->pin.hash);
  CHECK(trace_bits_row(trace, 0) == trace_bits_row(right->trace, 0));
}

TEST_CASE("pins and traces read back as they were written", "[pins]") {
  const auto found = driven("straight");
  REQUIRE(found.ok());
  const auto pins = read_pins("# a comment\n" + pin_text(found->pin));
  REQUIRE(pins.ok());
  REQUIRE(pins->size() == 1);
  CHECK(pins->front().checkpoints == found->pin.checkpoints);
  CHECK(pin_text(pins->front()) == pin_text(found->pin));

  const auto trace = read_trace_bits(trace_bits(found->trace), "t");
  REQUIRE(trace.ok());
  CHECK(trace_hash(*trace) == trace_hash(found->trace));

  CHECK_FALSE(read_pins("straight finished 12 0123\n").ok());
  CHECK_FALSE(read_pins(" 01234567\n").ok());
  const auto cut = read_trace_bits(trace_header(found->trace) + "\n0,1\n", "t");
  REQUIRE_FALSE(cut.ok());
  CHECK(cut.error().where == "t:2");
}

// Hidden: tests/pins/update calls it by its tag.
TEST_CASE("write tests/pins.txt anew", "[.write-pins]") {
  std::string text =
      "# What every scenario drove like when it was last pinned; tests/pins/pins.h says how to read it.\n"
      "# Written by tests/pins/update alone.\n";
  for (const std::string& name : scenario_names()) {
    const auto found = driven(name);
    if (!found) FAIL(text_of(found.error()));
    text += pin_text(found->pin);
  }
  std::FILE* file = std::fopen(pins_path.c_str(), "wb");
  REQUIRE(file != nullptr);
  CHECK(std::fwrite(text.data(), 1, text.size(), file) == text.size());
  CHECK(std::fclose(file) == 0);
}
