// Pins: what every scenario of scenarios/ drove like when somebody last said that it should.
//
// tests/pins.txt holds them, and every build has to drive the same bits: g++ and clang++ at -O0 and -O2, wasm
// in node, the page. A line that begins with a letter is
//   NAME OUTCOME STEPS TRACE_HASH         (16 hex digits)
// and the indented lines below it are checkpoints: the low 32 bits, as 8 hex digits, of the running trace
// hash after each block of 32 steps. They tell the block in which a drive first differs, without any
// reference. To tell step, field and both values takes the pinned trace itself: builds that match leave it as
// text in build/traces (trace_bits() of engine/drive/trace_text.h), named by its hash so that it is never
// stale; and tests/pins/compare makes it from the commit that pinned it.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "engine/drive/drive.h"

namespace lw::test {

inline constexpr std::size_t steps_per_block = 32;

struct Pin {
  std::string name;  // of scenarios/NAME.toml
  std::string outcome;
  std::int64_t steps = 0;
  std::string hash;                        // of the trace, 16 hex digits
  std::vector<std::uint32_t> checkpoints;  // steps / steps_per_block of them
};

Pin pin_of(std::string name, const Summary& summary, const Trace& trace);

std::string pin_text(const Pin& pin);

/// Error: the line that is not of the form.
Result<std::vector<Pin>> read_pins(std::string_view text);

/// How a drive differs from its pin; empty when it does not. `reference` is the pinned trace, or null.
std::string difference(const Pin& pinned, const Pin& found, const Trace& trace, const Trace* reference);

/// The whole of a file; empty when there is none.
std::string file_text(const std::string& path);

/// Names of scenarios/*.toml in order, without folder and ending.
std::vector<std::string> scenario_names();
std::string scenario_path(const std::string& name);

}  // namespace lw::test
