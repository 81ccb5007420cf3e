// What of a scenario the linear loop leaves out, or takes as a mean: one sentence each, for people.
#pragma once

#include <string>
#include <vector>

#include "engine/scenario/scenario.h"
#include "engine/theory/loop.h"
#include "engine/theory/sensor_slope.h"

namespace lw {

std::vector<std::string> notes_of(const Scenario& scenario, const SampledLoop& loop,
                                  const SensorPoint& point);

}  // namespace lw
