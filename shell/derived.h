// Figures that follow from a scenario before anything is driven: how fast, how tight, how far ahead.
#pragma once

#include <string>
#include <vector>

#include "engine/drive/plan.h"
#include "engine/scenario/scenario.h"

namespace lw::shell {

struct Gains {
  double kp, ki, kd;
};

/// One figure, in the unit its key names. Infinite where there is no such value (a radius of going straight).
struct Figure {
  std::string key;    // "base_speed_mm_s"
  std::string label;  // "base speed"
  double value;
  std::string unit;  // "mm/s"
};

/// Gains as the controller code in the vehicle wants them, kp being the same in both:
///   ki per second = ki per loop / period,   kd per second = kd per loop * period.
Gains gains_per_loop(const Scenario& scenario);
Gains gains_per_second(const Scenario& scenario);

/// Speeds and radii are steady ones: motors settled, no slip. The radius at the steer limit is that of a turn
/// with the base speed of the scenario and steer at its limit, commands held to full; the one without
/// saturation has the most steer at which no command is held.
std::vector<Figure> figures_of(const Scenario& scenario, const Plan& plan);

}  // namespace lw::shell
