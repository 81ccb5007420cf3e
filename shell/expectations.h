// Holding a drive to what its scenario expects.
#pragma once

#include <string>
#include <vector>

#include "shell/answer.h"
#include "shell/input.h"

namespace lw::shell {

/// One key of [expect] against the drive, values in the unit of the key.
struct Assertion {
  std::string key;  // "deviation_mm_max"
  Json expected;    // a word or a number
  Json actual;
  bool holds = false;
  std::string why;        // of a failure that the two values do not explain
  bool at_least = false;  // a lower limit; a number without it is an upper one
};

struct Checked {
  std::string name, title;
  std::string outcome, trace_hash, reason;
  std::vector<Assertion> assertions;  // in the order of the text
};

/// Drives a scenario and asserts every key that its [expect] has. time_s_max fails a drive that does not end
/// as it should (finished, unless another outcome is expected): a line lost early is not a quick drive.
/// Errors: those of the drive, and an expectation this version has no engine for, which must not pass in
/// silence.
Result<Checked> checked_of(const Loaded& loaded);

std::size_t failures(const Checked& checked);

/// "deviation_mm_max: 31.2, expected at most 25".
std::string sentence(const Assertion& assertion);

}  // namespace lw::shell
