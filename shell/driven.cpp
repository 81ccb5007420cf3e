#include "shell/driven.h"

#include <cinttypes>
#include <cstdio>

namespace lw::shell {
namespace {

std::string hex_of(std::uint64_t hash) {
  char text[17];
  std::snprintf(text, sizeof text, "%016" PRIx64, hash);
  return text;
}

}  // namespace

Result<Plan> plan_of(const Loaded& loaded) {
  auto plan = make_plan(loaded.scenario);
  if (plan) return plan;
  Error error = plan.error();
  error.where = error.where.empty() ? loaded.name : loaded.name + ": " + error.where;
  return error;
}

Result<Driven> driven_of(const Loaded& loaded) {
  const auto plan = plan_of(loaded);
  if (!plan) return plan.error();
  Driven driven;
  driven.summary = drive(*plan, &driven.trace);
  driven.hash = hex_of(trace_hash(driven.trace));
  driven.reason = reason(*plan, driven.summary, driven.trace);
  return driven;
}

}  // namespace lw::shell
