// SCENARIO on the command line: a file, a link, or - for stdin; then the values of --set.
#pragma once

#include <string>
#include <vector>

#include "engine/numeric/result.h"
#include "engine/scenario/scenario.h"

namespace lw::shell {

struct Input {
  std::string from;              // as typed
  std::vector<std::string> set;  // KEY=VALUE, in order
};

struct Loaded {
  std::string name;  // for messages: the file name, "link" or "stdin"
  bool was_link = false;
  Scenario scenario;
};

/// Reads, overrides and validates. What exists as a file is a file, whatever it looks like; a file or stdin
/// may hold a link instead of scenario text. Errors: unreadable or oversized input, those of read(),
/// decode_link() and set_key(), an unknown key, a KEY=VALUE without '='.
Result<Loaded> load(const Input& input);

}  // namespace lw::shell
