// A scenario planned and driven once, with what the commands say of it.
#pragma once

#include <string>

#include "engine/drive/drive.h"
#include "shell/input.h"

namespace lw::shell {

struct Driven {
  Summary summary;
  Trace trace;
  std::string hash;    // of the trace, 16 hex digits
  std::string reason;  // engine/drive/drive.h
};

/// make_plan() with the scenario's name in its errors.
Result<Plan> plan_of(const Loaded& loaded);

/// Errors: those of make_plan(), with the scenario's name.
Result<Driven> driven_of(const Loaded& loaded);

}  // namespace lw::shell
